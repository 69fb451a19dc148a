//! `content/number-format`.

use crate::review::findings::Findings;
use crate::review::naming::quoted;
use crate::review::page::Page;
use crate::review::rule::{Check, rule};
#[cfg(test)]
use crate::review::testing::{Case, a3};
use crate::scene::ItemKind;

rule! {
    /// ## What it checks
    /// A dimension or callout writes a number against the style: the other decimal sign, a missing or
    /// an unwanted zero before it.
    ///
    /// ## Why it matters
    /// Where both signs occur, 1,250 may be a length of a metre and a quarter or of an inch and a
    /// quarter.
    ///
    /// ## Bad
    /// `12.5` on a sheet whose style writes a comma.
    ///
    /// ## Good
    /// `12,5`.
    ///
    /// ## Source
    /// ISO 129-1 and ISO 80000-1 (comma, leading zero); the style's `number` section.
    NUMBER_FORMAT = "content/number-format", Should, worse: More,
        "a number is written against the style";
    check: Check::Page(check);
    examples: bad, good;
}

fn check(page: &Page<'_>, found: &mut Findings) {
    let lettered = |k| matches!(k, ItemKind::Dimension | ItemKind::Callout);
    for (text, placed) in page.ink.texts().filter(|(t, _)| lettered(t.kind)) {
        let number = &page.style.number;
        let Some(fault) = fault(&placed.run.text, number.decimal, number.leading_zero) else {
            continue;
        };
        let item = page.item(text);
        let message = format!("the text {} of {} {fault}", quoted(placed), item.id);
        found.report(page, &[item], text.bounds, message);
    }
}

fn fault(text: &str, decimal: char, leading_zero: bool) -> Option<String> {
    let chars: Vec<char> = text.chars().collect();
    let digit = |i: Option<usize>| i.and_then(|i| chars.get(i)).is_some_and(char::is_ascii_digit);
    for (i, c) in chars.iter().enumerate() {
        let (before, two_before) = (i.checked_sub(1), i.checked_sub(2));
        if !matches!(c, '.' | ',') || !digit(Some(i + 1)) {
            continue;
        }
        if *c != decimal {
            return Some(format!("has “{c}” for the decimal sign; the style writes “{decimal}”"));
        }
        let lone_zero = before.is_some_and(|b| chars[b] == '0') && !digit(two_before);
        if leading_zero && !digit(before) {
            return Some("lacks the zero before the decimal sign".to_owned());
        }
        if !leading_zero && lone_zero {
            return Some("has a zero before the decimal sign".to_owned());
        }
    }
    None
}

#[cfg(test)]
fn sheet(text: &str) -> Case {
    a3().item("d1", ItemKind::Dimension, "front").text(text, (100.0, 100.0)).case()
}

#[cfg(test)]
fn bad() -> Case {
    sheet("12.5")
}

#[cfg(test)]
fn good() -> Case {
    sheet("12,5")
}

#[cfg(test)]
mod tests {
    use super::fault;

    #[test]
    fn zeros_and_signs_follow_the_style() {
        assert!(fault("⌀0,5 H7", ',', true).is_none());
        assert!(fault(",5", ',', true).is_some());
        assert!(fault(".5", '.', false).is_none());
        assert!(fault("0.5", '.', false).is_some());
        assert!(fault("10.5", '.', false).is_none());
        assert!(fault("80 h6", ',', true).is_none());
    }
}
