//! What the user wrote, read and resolved.
//!
//! Takes the text of a spec; gives a [`Drawing`] in which every expression is a number, every
//! string that means a choice is an enum, every name is an id, and every part that can be faulted
//! later remembers its [`Span`](crate::source::Span). It does not know geometry: whether an anchor
//! exists is decided where views are made.
//!
//! The way through: [`read()`] parses TOML into spanned tables; the private `reader` module holds
//! the vocabulary (a number, a point, a choice…) in which `sheet`, `views`, `shapes`,
//! `annotations` and `form` lower one kind of table each; `expression` and `parameters` compute,
//! and `lettered` keeps texts to what a sheet can show.

mod annotations;
mod drawing;
mod expression;
mod form;
mod lettered;
mod parameters;
mod read;
mod reader;
mod shapes;
mod sheet;
mod starter;
#[cfg(test)]
mod tests;
mod text;
mod views;

pub use drawing::*;
pub use read::{FORMAT, read, read_text};
pub use sheet::check_number;
pub use starter::starter;
