//! Attributes of elements, and errors that say where they stand.

use roxmltree::Node;

use super::error::{FilePlace, ReadError};

/// Longest piece of a value that an error quotes.
const QUOTED: usize = 40;

pub(super) const SVG: &str = "http://www.w3.org/2000/svg";
pub(super) const XLINK: &str = "http://www.w3.org/1999/xlink";

/// A number that stands alone and is finite.
pub(super) fn number(text: &str) -> Option<f64> {
    text.trim().parse::<svgtypes::Number>().ok().map(|n| n.0).filter(|v| v.is_finite())
}

/// The number of an attribute; `None` where it is absent.
pub(super) fn number_of(node: Node<'_, '_>, name: &'static str) -> Result<Option<f64>, ReadError> {
    let Some(text) = node.attribute(name) else { return Ok(None) };
    let found = number(text.trim_end_matches("px"));
    found.map(Some).ok_or_else(|| attribute_error(node, name, text, "a number"))
}

/// The `N` numbers of an attribute; `None` where it is absent.
pub(super) fn numbers_of<const N: usize>(
    node: Node<'_, '_>,
    name: &'static str,
    expected: &'static str,
) -> Result<Option<[f64; N]>, ReadError> {
    let Some(text) = node.attribute(name) else { return Ok(None) };
    let all: Option<Vec<f64>> =
        svgtypes::NumberListParser::from(text).map(|n| n.ok().filter(|v| v.is_finite())).collect();
    let found = all.and_then(|v| <[f64; N]>::try_from(v).ok());
    found.map(Some).ok_or_else(|| attribute_error(node, name, text, expected))
}

pub(super) fn attribute_error(
    node: Node<'_, '_>,
    attribute: &'static str,
    value: &str,
    expected: &'static str,
) -> ReadError {
    let mut quoted: String = value.chars().take(QUOTED).collect();
    if quoted.len() < value.len() {
        quoted.push('…');
    }
    ReadError::Attribute {
        element: node.tag_name().name().to_owned(),
        attribute,
        value: quoted,
        expected,
        place: place(node),
    }
}

pub(super) fn place(node: Node<'_, '_>) -> FilePlace {
    let at = node.document().text_pos_at(node.range().start);
    FilePlace { line: at.row, column: at.col }
}
