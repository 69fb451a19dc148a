//! Texts of a spec with their computed numbers as the style writes them.

use super::{Text, TextPiece};
use crate::style::NumberSpec;

impl Text {
    /// The text as the reader sees it. Numbers are already in the drawing's unit; the style gives
    /// them decimal sign and places.
    #[must_use]
    pub fn format(&self, numbers: &NumberSpec) -> String {
        self.pieces
            .iter()
            .map(|piece| match piece {
                TextPiece::Literal(letters) => letters.clone(),
                TextPiece::Number(value) => numbers.length(*value, None),
            })
            .collect()
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::style::builtin;

    #[test]
    fn numbers_in_a_text_follow_the_style() {
        let numbers = builtin("iso").expect("compiled in").number;
        let text = Text {
            pieces: vec![
                TextPiece::Literal("Bore 40 → ".into()),
                TextPiece::Number(42.5),
                TextPiece::Literal(" H7".into()),
            ],
        };
        assert_eq!(text.format(&numbers), "Bore 40 → 42,5 H7");
        assert_eq!(Text::default().format(&numbers), "");
    }
}
