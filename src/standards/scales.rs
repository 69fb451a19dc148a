//! Preferred scales: ISO 5455:1979 clause 5 (from memory).

use crate::units::Scale;

/// The steps of each decade.
const STEPS: [f64; 3] = [1.0, 2.0, 5.0];

/// Largest enlargement and largest reduction that the standard lists.
const ENLARGED: f64 = 50.0;
const REDUCED: f64 = 10_000.0;

/// Whether the standard recommends the scale: 50:1 to 1:10 000 in steps of 1, 2 and 5.
#[must_use]
pub fn is_preferred(scale: Scale) -> bool {
    let factor = scale.factor();
    let ratio = factor.max(1.0 / factor);
    let largest = if factor > 1.0 { ENLARGED } else { REDUCED };
    let decades = (0..=4).map(|n| 10f64.powi(n));
    // Rounding of the two divisions is far below the distance of neighbouring steps.
    let is_step = |r: f64| (ratio / r - 1.0).abs() < 1e-9;
    ratio <= largest * (1.0 + 1e-9) && decades.flat_map(|d| STEPS.map(|s| s * d)).any(is_step)
}

#[cfg(test)]
mod tests {
    use super::*;

    fn scale(text: &str) -> Scale {
        text.parse().expect("a scale")
    }

    #[test]
    fn only_listed_scales_are_preferred() {
        for listed in ["1:1", "2:1", "50:1", "1:2", "1:5", "1:1000", "1:10000", "10:20"] {
            assert!(is_preferred(scale(listed)), "{listed}");
        }
        for other in ["1:3", "1:4", "1:2.5", "100:1", "1:20000", "3:2"] {
            assert!(!is_preferred(scale(other)), "{other}");
        }
    }
}
