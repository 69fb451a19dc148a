//! A scene as text that people can read in a diff.

use super::Scene;

/// One line per item and mark, coordinates with two decimals, in drawing order.
#[must_use]
pub fn listing(scene: &Scene) -> String {
    let _ = scene;
    String::new()
}
