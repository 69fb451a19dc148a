//! The spec that a beginner starts from.

/// The text of the starter; `"NUMBER"` stands where the drawing number goes.
const TEMPLATE: &str = include_str!("starter.toml");

/// A small drawing, with comments, under this number: a plate with a bore and two mounting holes
/// in two views. It reads without diagnostics if the number is fit for a drawing.
#[must_use]
pub fn starter(number: &str) -> String {
    let quoted = toml::Value::String(number.to_owned()).to_string();
    TEMPLATE.replacen("\"NUMBER\"", &quoted, 1)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::source::{Diagnostics, SourceMap};
    use crate::spec::{Says, read_text};

    #[test]
    fn it_reads_without_a_word() {
        let mut diagnostics = Diagnostics::default();
        let mut sources = SourceMap::default();
        let drawing =
            read_text("new.toml", &starter("P-1"), &mut sources, &mut diagnostics).expect("sound");
        assert_eq!(diagnostics.into_sorted(), []);
        assert_eq!(drawing.sheet.number.value, "P-1");
        assert_eq!((drawing.views.len(), drawing.revisions.len()), (2, 1));
        let callouts = drawing.annotations.iter().filter(|a| matches!(a.says, Says::Hole(..)));
        assert_eq!((drawing.annotations.len(), callouts.count()), (9, 1));
    }

    #[test]
    fn a_number_with_quotes_stays_one_string() {
        let text = starter("a\"b\\");
        let mut sources = SourceMap::default();
        let mut diagnostics = Diagnostics::default();
        assert!(read_text("new.toml", &text, &mut sources, &mut diagnostics).is_none());
        let all = diagnostics.into_sorted();
        assert!(all.len() == 1 && all[0].message.contains("cannot name a file"), "{all:?}");
    }
}
