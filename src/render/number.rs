//! Every number that is written into a file.
//!
//! Decimals are fixed per purpose and trailing zeros dropped, so the same drawing gives the same
//! bytes and a diff of two issues shows what moved.

/// Decimals of lengths: a micrometre of paper.
const LENGTH: usize = 3;
/// Decimals where a shape is derived from its ends, such as the centre of an arc.
const FINE: usize = 4;
/// Decimals of factors, angles and the values of dimensions.
const FACTOR: usize = 6;

/// A length on the sheet in mm.
pub(super) fn length(v: f64) -> String {
    written(v, LENGTH)
}

/// A length from which another one is derived, in mm.
pub(super) fn fine(v: f64) -> String {
    written(v, FINE)
}

/// A factor, an angle in degrees, a value in mm.
pub(super) fn factor(v: f64) -> String {
    written(v, FACTOR)
}

/// A length rounded to what [`length`] writes.
pub(super) fn rounded(v: f64) -> f64 {
    (v * 1e3).round() / 1e3
}

/// The greatest written length that is not above `v`.
pub(super) fn below(v: f64) -> String {
    length((v * 1e3).floor() / 1e3)
}

/// The least written length that is not below `v`.
pub(super) fn above(v: f64) -> String {
    length((v * 1e3).ceil() / 1e3)
}

/// `v` with at most `places` decimals, no trailing zeros, no exponent and no negative zero. A scene
/// holds finite numbers only; anything else would make the file unreadable and becomes 0.
pub(super) fn written(v: f64, places: usize) -> String {
    let v = if v.is_finite() { v } else { 0.0 };
    let mut text = format!("{v:.places$}");
    if text.contains('.') {
        text.truncate(text.trim_end_matches('0').trim_end_matches('.').len());
    }
    if text == "-0" { "0".to_owned() } else { text }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn trailing_zeros_and_negative_zeros_are_dropped() {
        let cases = [(0.0, "0"), (-0.0, "0"), (-0.0004, "0"), (3.5, "3.5"), (10.0, "10")];
        for (v, text) in cases {
            assert_eq!(length(v), text);
        }
        assert_eq!(length(-12.34567), "-12.346");
        assert_eq!(factor(1e-7), "0");
    }

    #[test]
    fn no_exponent_and_no_nan_is_written() {
        assert_eq!(length(1e21), "1000000000000000000000");
        assert_eq!(length(f64::NAN), "0");
        assert_eq!(length(f64::NEG_INFINITY), "0");
    }

    #[test]
    fn outward_rounding_never_comes_back_inside() {
        for v in [0.0001, -0.0001, 12.3456, -7.0009, 5.0] {
            let (lo, hi): (f64, f64) =
                (below(v).parse().expect("a number"), above(v).parse().expect("a number"));
            assert!(lo <= v && v <= hi && hi - lo <= 0.0011, "{v}: {lo} {hi}");
        }
    }
}
