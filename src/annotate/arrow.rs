//! Arrowheads as a style wants them.

use super::Practice;
use super::sketch::Head;
use crate::geom::{Point, Vector};

impl Practice<'_> {
    /// The style's arrowhead with its tip at `tip`, pointing along the unit vector `towards`.
    #[must_use]
    pub fn head<S>(&self, tip: Point<S>, towards: Vector<S>) -> Head<S> {
        let length = self.arrow();
        Head::Arrow { tip, towards, length, width: length * self.style.arrow.width_share }
    }

    /// The dot between two short dimensions of a chain.
    #[must_use]
    pub fn chain_dot<S>(&self, at: Point<S>) -> Head<S> {
        Head::Dot { at, diameter: self.style.arrow.chain_dot }
    }
}
