//! Texts that will stand on a sheet.
//!
//! Takes a string; gives it with the expressions in its braces computed (`{bore}`; `{{` and `}}`
//! are braces), or reports what a sheet cannot show: control characters, line ends, right-to-left
//! letters (a sheet is lettered from left to right and would show them in the wrong order),
//! invisible direction marks, and characters that the lettering lacks. Markup is not understood
//! and stays text.

use std::collections::BTreeMap;
use std::ops::Range;

use super::drawing::{Spanned, Text, TextPiece};
use super::reader::{Field, Reader};
use crate::source::Diagnostic;
use crate::text::{Lettering, Symbol};

/// Longest text in bytes: several times what a sheet has room for.
const LONGEST: usize = 2000;

/// As many faulty characters of one kind are named in a message.
const MOST_NAMED: usize = 8;

/// Characters from which a text would run right to left: the default ranges of the classes R and
/// AL of the Unicode Character Database, `DerivedBidiClass.txt` (from memory), which contain the
/// Arabic digits (AN) too.
const RIGHT_TO_LEFT: [(char, char); 5] = [
    ('\u{0590}', '\u{08FF}'),
    ('\u{FB1D}', '\u{FDFF}'),
    ('\u{FE70}', '\u{FEFE}'),
    ('\u{10800}', '\u{10FFF}'),
    ('\u{1E800}', '\u{1EFFF}'),
];

/// Marks that turn the direction of what follows: Unicode Standard Annex #9, section 2.
const DIRECTION_MARKS: [(char, char); 4] = [
    ('\u{061C}', '\u{061C}'),
    ('\u{200E}', '\u{200F}'),
    ('\u{202A}', '\u{202E}'),
    ('\u{2066}', '\u{2069}'),
];

/// Why a character cannot stand on a sheet.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
enum Misfit {
    LineEnd,
    Control,
    DirectionMark,
    RightToLeft,
    NoGlyph,
}

impl Misfit {
    fn of(c: char) -> Option<Self> {
        let among = |ranges: &[(char, char)]| ranges.iter().any(|(a, b)| (*a..=*b).contains(&c));
        if c == '\n' || c == '\r' {
            Some(Self::LineEnd)
        } else if c.is_control() {
            Some(Self::Control)
        } else if among(&DIRECTION_MARKS) {
            Some(Self::DirectionMark)
        } else if among(&RIGHT_TO_LEFT) {
            Some(Self::RightToLeft)
        } else if Symbol::of_char(c).is_none() && Lettering::bundled().glyph(c).is_none() {
            Some(Self::NoGlyph)
        } else {
            None
        }
    }

    /// What is wrong with some characters, and what to do.
    fn words(self, characters: &[char]) -> (String, &'static str) {
        let named = characters.iter().take(MOST_NAMED).map(|c| name_of(*c));
        let mut names = named.collect::<Vec<_>>().join(", ");
        if characters.len() > MOST_NAMED {
            names.push_str(", …");
        }
        match self {
            Self::LineEnd => (
                format!("a line end ({names}) cannot stand in a text"),
                "a text is one line; where several are allowed, write a list of texts",
            ),
            Self::Control => (
                format!("the control character {names} cannot stand in a text"),
                "take it out; nothing would be drawn for it",
            ),
            Self::DirectionMark => (
                format!("the direction mark {names} cannot stand in a text"),
                "take it out; it is invisible and turns the order of what follows",
            ),
            Self::RightToLeft => (
                format!("{names} runs from right to left, which no text on a sheet does"),
                "write the text in letters that run from left to right",
            ),
            Self::NoGlyph => (
                format!("the lettering has no {names}"),
                "write it another way, for example in words",
            ),
        }
    }
}

/// A character for people: itself if it can be seen, and its code.
fn name_of(c: char) -> String {
    let code = format!("U+{:04X}", u32::from(c));
    // What Rust escapes is what cannot be seen by itself.
    if c.escape_debug().count() == 1 { format!("`{c}` ({code})") } else { code }
}

impl Reader<'_> {
    /// A text with computed braces that is not blank.
    pub(super) fn text(&mut self, f: Field<'_>) -> Option<Text> {
        let string = self.string(f)?;
        self.check_letters(f, string);
        self.pieces(f, string)
    }

    /// The same with its place.
    pub(super) fn spanned_text(&mut self, f: Field<'_>) -> Option<Spanned<Text>> {
        Some(Spanned { value: self.text(f)?, span: f.span })
    }

    /// A text that is taken as it stands, braces included.
    pub(super) fn plain_text<'t>(&mut self, f: Field<'t>) -> Option<&'t str> {
        let string = self.string(f)?;
        self.check_letters(f, string);
        Some(string)
    }

    /// One text, or a list of at most `most`.
    pub(super) fn lines(&mut self, f: Field<'_>, most: usize) -> Option<Vec<Text>> {
        match f.value {
            toml::de::DeValue::String(_) => Some(vec![self.text(f)?]),
            toml::de::DeValue::Array(_) => {
                let lines = self.list(f, most, Self::text)?;
                if lines.is_empty() {
                    let message = format!("`{}` is an empty list", f.name);
                    return self.fail(Diagnostic::error(f.span, message));
                }
                Some(lines)
            }
            _ => self.expected(f, "a text or a list of texts"),
        }
    }

    /// Reports blank texts, too long ones, and each kind of character that no sheet can show.
    fn check_letters(&mut self, f: Field<'_>, text: &str) {
        if text.trim().is_empty() {
            let help = "write the text, or leave the key out where it may be absent";
            let message = format!("`{}` is empty", f.name);
            self.report(Diagnostic::error(f.span, message).help(help));
        }
        if text.len() > LONGEST {
            let message = format!("`{}` has {} bytes; the limit is {LONGEST}", f.name, text.len());
            self.report(Diagnostic::error(f.span, message));
            return;
        }
        let mut misfits: BTreeMap<Misfit, (Vec<char>, Range<usize>)> = BTreeMap::new();
        for (at, c) in text.char_indices() {
            let Some(misfit) = Misfit::of(c) else { continue };
            let first = at..at + c.len_utf8();
            let (characters, _) = misfits.entry(misfit).or_insert((Vec::new(), first));
            if !characters.contains(&c) {
                characters.push(c);
            }
        }
        for (misfit, (characters, first)) in misfits {
            let (message, help) = misfit.words(&characters);
            let span = self.inside(f, first);
            self.report(Diagnostic::error(span, message).help(help));
        }
    }

    /// Splits a text at its braces and computes what is in them.
    fn pieces(&mut self, f: Field<'_>, text: &str) -> Option<Text> {
        let mut pieces: Vec<TextPiece> = Vec::new();
        let mut sound = true;
        for part in split(text) {
            match part {
                Part::Literal(letters) => match pieces.last_mut() {
                    Some(TextPiece::Literal(before)) => before.push_str(letters),
                    Some(TextPiece::Number(_)) | None => {
                        pieces.push(TextPiece::Literal(letters.to_owned()));
                    }
                },
                Part::Braces(range) => match self.evaluate(f, &text[range.clone()], range.start) {
                    Some(quantity) => pieces.push(TextPiece::Number(quantity.value)),
                    None => sound = false,
                },
                Part::Lone(at) => {
                    let span = self.inside(f, at..at + 1);
                    let brace = &text[at..=at];
                    let message = format!("`{brace}` has no partner");
                    let help = format!(
                        "braces enclose an expression; write `{brace}{brace}` for the character"
                    );
                    self.report(Diagnostic::error(span, message).help(help));
                    sound = false;
                }
            }
        }
        sound.then_some(Text { pieces })
    }
}

/// A part of a text with braces.
#[derive(Debug, PartialEq)]
enum Part<'t> {
    /// Letters as they stand.
    Literal(&'t str),
    /// What stands between braces.
    Braces(Range<usize>),
    /// A brace without its partner.
    Lone(usize),
}

fn split(text: &str) -> Vec<Part<'_>> {
    let mut parts = Vec::new();
    let mut at = 0;
    while at < text.len() {
        let rest = &text[at..];
        let letters = rest.find(['{', '}']).unwrap_or(rest.len());
        if letters > 0 {
            parts.push(Part::Literal(&rest[..letters]));
            at += letters;
            continue;
        }
        let brace = &rest[..1];
        if rest[1..].starts_with(brace) {
            parts.push(Part::Literal(brace));
            at += 2;
        } else if let Some(end) = rest.find('}').filter(|_| brace == "{") {
            parts.push(Part::Braces(at + 1..at + end));
            at += end + 1;
        } else {
            parts.push(Part::Lone(at));
            at += 1;
        }
    }
    parts
}

/// Replaces the braces of SVG path data by the numbers that they compute, for [`super::shapes`].
pub(super) fn fill_braces(reader: &mut Reader<'_>, f: Field<'_>, text: &str) -> Option<String> {
    let mut filled = String::new();
    for piece in reader.pieces(f, text)?.pieces {
        match piece {
            TextPiece::Literal(letters) => filled.push_str(&letters),
            TextPiece::Number(value) => filled.push_str(&value.to_string()),
        }
    }
    Some(filled)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn braces_split_a_text() {
        let l = Part::Literal;
        for (text, parts) in [
            ("plain", vec![l("plain")]),
            ("Bore {bore} free", vec![l("Bore "), Part::Braces(6..10), l(" free")]),
            ("{{a}}", vec![l("{"), l("a"), l("}")]),
            ("{", vec![Part::Lone(0)]),
            ("a}b", vec![l("a"), Part::Lone(1), l("b")]),
            ("{}", vec![Part::Braces(1..1)]),
            ("", vec![]),
        ] {
            assert_eq!(split(text), parts, "{text}");
        }
    }

    #[test]
    fn characters_are_told_apart() {
        for (c, misfit) in [
            ('A', None),
            ('<', None),
            ('⌀', None),
            ('±', None),
            ('\n', Some(Misfit::LineEnd)),
            ('\u{1b}', Some(Misfit::Control)),
            ('\u{202E}', Some(Misfit::DirectionMark)),
            ('א', Some(Misfit::RightToLeft)),
            ('٣', Some(Misfit::RightToLeft)),
            ('漢', Some(Misfit::NoGlyph)),
            ('\u{200B}', Some(Misfit::NoGlyph)),
        ] {
            assert_eq!(Misfit::of(c), misfit, "{c:?}");
        }
    }
}
