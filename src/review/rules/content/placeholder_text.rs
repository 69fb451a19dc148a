//! `content/placeholder-text`.

use crate::review::findings::Findings;
use crate::review::naming::quoted;
use crate::review::page::Page;
use crate::review::rule::{Check, rule};
#[cfg(test)]
use crate::{
    review::testing::{Case, a3},
    scene::ItemKind,
};

rule! {
    /// ## What it checks
    /// A text holds what people write where they do not know yet: the words TBD, TBA, TBC, TODO,
    /// FIXME, XX, XXX…, or nothing but question marks.
    ///
    /// ## Why it matters
    /// The shop cannot make a TBD. It asks, and waits, or guesses.
    ///
    /// ## Bad
    /// `material = "TBD"`.
    ///
    /// ## Good
    /// The material; until then the drawing is not issued.
    ///
    /// ## Source
    /// Common practice.
    PLACEHOLDER_TEXT = "content/placeholder-text", Must, worse: More, "a placeholder was left over";
    check: Check::Page(check);
    examples: bad, good;
}

const PLACEHOLDERS: [&str; 5] = ["TBD", "TBA", "TBC", "TODO", "FIXME"];

fn check(page: &Page<'_>, found: &mut Findings) {
    for (text, placed) in page.ink.texts() {
        if holds_placeholder(&placed.run.text) {
            let item = page.item(text);
            let message = format!("{} holds the placeholder {}", item.id, quoted(placed));
            found.report(page, &[item], text.bounds, message);
        }
    }
}

fn holds_placeholder(text: &str) -> bool {
    let letters = text.split(|c: char| !c.is_alphanumeric());
    let named = letters.filter(|w| !w.is_empty()).any(|word| {
        PLACEHOLDERS.contains(&word) || word.len() >= 2 && word.chars().all(|c| c == 'X')
    });
    let mut words = text.split_whitespace();
    named || words.any(|w| w.chars().all(|c| c == '?'))
}

#[cfg(test)]
fn sheet(text: &str) -> Case {
    a3().item("n", ItemKind::Note, "").text(text, (100.0, 100.0)).case()
}

#[cfg(test)]
fn bad() -> Case {
    sheet("Material: TBD")
}

#[cfg(test)]
fn good() -> Case {
    sheet("Material: S235JR")
}

#[cfg(test)]
mod tests {
    use super::holds_placeholder;

    #[test]
    fn placeholders_are_whole_words() {
        assert!(["TBD", "see XXX", "⌀?? ??", "(TODO)"].into_iter().all(holds_placeholder));
        assert!(
            !["X", "METHOD", "MAXX1", "Is it round?", "AXXLE"].into_iter().any(holds_placeholder)
        );
    }
}
