//! Line widths: ISO 128-2:2020, clause on line width (from memory).

/// The series of widths, mm; each about √2 of the one before.
pub const WIDTHS: [f64; 9] = [0.13, 0.18, 0.25, 0.35, 0.5, 0.7, 1.0, 1.4, 2.0];

/// Widths that go together on mechanical drawings.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct LineGroup {
    /// Wide lines, after which the group is called, mm.
    pub wide: f64,
    /// Narrow lines, mm.
    pub narrow: f64,
    /// Lettering and graphical symbols, mm.
    pub lettering: f64,
}

/// The group called after this width: narrow lines are two steps of the series below, lettering
/// one. `None` for widths that name no group.
#[must_use]
pub fn group(wide: f64) -> Option<LineGroup> {
    let step = WIDTHS.iter().position(|w| (w - wide).abs() < 1e-9)?;
    let narrow = *WIDTHS.get(step.checked_sub(2)?)?;
    let lettering = *WIDTHS.get(step.checked_sub(1)?)?;
    Some(LineGroup { wide, narrow, lettering })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn widths_outside_the_series_name_no_group() {
        assert_eq!(group(0.6), None);
        assert_eq!(group(0.18), None);
    }
}
