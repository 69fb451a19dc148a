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
    use crate::style::builtin;

    #[test]
    fn every_height_of_the_iso_style_is_nominal() {
        let style = builtin("iso").expect("compiled in");
        let block = &style.title_block;
        let mut heights = vec![block.name_text, block.own_text, style.revision_table.text];
        heights.extend(block.cell.iter().map(|c| c.text));
        heights.extend(&block.heights);
        heights.push(style.frame.zone.text);
        for g in &style.group {
            heights.extend([g.text, g.label]);
            heights.extend([style.notes.text_h * g.text, style.notes.heading_h * g.text]);
        }
        for h in heights {
            assert!(is_nominal(h), "{h}");
        }
    }

    #[test]
    fn other_heights_are_not_nominal() {
        assert!(!is_nominal(3.0) && !is_nominal(0.0));
    }
}
