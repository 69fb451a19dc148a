//! Lettering: ISO 3098-1:2015 (from memory).

/// Nominal heights of capitals, mm.
pub const HEIGHTS: [f64; 8] = [1.8, 2.5, 3.5, 5.0, 7.0, 10.0, 14.0, 20.0];

/// Whether a text height is a nominal one.
#[must_use]
pub fn is_nominal(height: f64) -> bool {
    HEIGHTS.iter().any(|h| (h - height).abs() < 1e-9)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn other_heights_are_not_nominal() {
        assert!(!is_nominal(3.0) && !is_nominal(0.0));
    }
}
