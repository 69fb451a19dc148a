//! How messages call pieces of ink.

use super::ink::{Class, Piece};
use crate::scene::{Item, ItemKind, PlacedText, Role};

/// Longest text that a message quotes whole, characters.
const QUOTED: usize = 24;

/// What a stroke or fill is, with its article.
pub(crate) fn ink_words(piece: &Piece) -> &'static str {
    match piece.role {
        Some(Role::Dim) => return "a dimension line",
        Some(Role::Ext) => return "an extension line",
        Some(Role::Leader) => return "a leader",
        Some(Role::Arrow) => return "an arrowhead",
        Some(Role::TextFrame) => return "a text frame",
        None => {}
    }
    match piece.class {
        Class::Text => "a text",
        Class::Termination => "an arrowhead",
        Class::Filled => "a filled area",
        Class::Line => kind_words(piece.kind),
    }
}

/// What an item is, with its article where it takes one.
pub(crate) fn kind_words(kind: ItemKind) -> &'static str {
    match kind {
        ItemKind::Outline => "an outline",
        ItemKind::Hidden => "a hidden edge",
        ItemKind::Smooth => "a smooth edge",
        ItemKind::Centre => "a centre line",
        ItemKind::Hatch => "hatching",
        ItemKind::CuttingLine => "a section line",
        ItemKind::Break => "a break line",
        ItemKind::Adjacent => "an adjacent part",
        ItemKind::Construction => "a construction line",
        ItemKind::Dimension => "a dimension",
        ItemKind::Leader => "a note on a leader",
        ItemKind::Callout => "a hole callout",
        ItemKind::Symbol => "a symbol",
        ItemKind::Balloon => "a balloon",
        ItemKind::ViewLabel => "a view label",
        ItemKind::Table => "a table",
        ItemKind::TitleBlock => "the title block",
        ItemKind::Frame => "the frame",
        ItemKind::Note => "the notes",
        ItemKind::Finding => "a checker's mark",
    }
}

/// A text in quotes, cut short where it is long.
pub(crate) fn quoted(text: &PlacedText) -> String {
    let whole = &text.run.text;
    if whole.chars().count() <= QUOTED {
        return format!("“{whole}”");
    }
    let begin: String = whole.chars().take(QUOTED - 1).collect();
    format!("“{begin}…”")
}

/// The first text of an item in quotes; its id where it has none.
pub(crate) fn item_words(item: &Item) -> String {
    item.texts().find(|t| !t.run.is_blank()).map_or_else(|| item.id.to_string(), quoted)
}
