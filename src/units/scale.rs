//! The ratio of paper to part.

use std::fmt;
use std::str::FromStr;

/// How many mm of paper one mm of the part takes, kept as the ratio that the sheet states.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Scale {
    paper: f64,
    part: f64,
}

/// Why a text is no scale.
#[derive(Clone, Debug, PartialEq, Eq, thiserror::Error)]
#[error("a scale is two positive numbers with a colon between them, such as 1:2")]
pub struct ScaleError;

impl Scale {
    /// Full size.
    pub const FULL: Self = Self { paper: 1.0, part: 1.0 };

    /// The ratio `paper : part`; both positive and finite.
    ///
    /// # Errors
    /// [`ScaleError`] for anything else, or for a ratio outside 1:1 000 000 … 1 000 000:1.
    pub fn new(paper: f64, part: f64) -> Result<Self, ScaleError> {
        let factor = paper / part;
        let sound = paper > 0.0 && part > 0.0 && (1e-6..=1e6).contains(&factor);
        if sound { Ok(Self { paper, part }) } else { Err(ScaleError) }
    }

    /// Paper length over part length.
    #[must_use]
    pub fn factor(self) -> f64 {
        self.paper / self.part
    }
}

impl fmt::Display for Scale {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{}:{}", self.paper, self.part)
    }
}

impl FromStr for Scale {
    type Err = ScaleError;
    fn from_str(text: &str) -> Result<Self, ScaleError> {
        let (paper, part) = text.split_once(':').ok_or(ScaleError)?;
        let number = |s: &str| s.trim().parse::<f64>().map_err(|_| ScaleError);
        Self::new(number(paper)?, number(part)?)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_scale_reads_and_writes_the_same_ratio() {
        for text in ["1:2", "5:1", "1:1", "1:2.5"] {
            assert_eq!(text.parse::<Scale>().map(|s| s.to_string()).as_deref(), Ok(text));
        }
    }

    #[test]
    fn nonsense_is_no_scale() {
        for text in ["", "1", "0:1", "1:0", "-1:2", "inf:1", "nan:1", "1:1e9"] {
            assert!(text.parse::<Scale>().is_err(), "{text}");
        }
    }
}
