//! What the user wrote, read and resolved.
//!
//! Takes the text of a spec; gives a [`Drawing`] in which every expression is a number, every
//! string that means a choice is an enum, every name is an id, and every part that can be faulted
//! later remembers its [`Span`](crate::source::Span). It does not know geometry: whether an anchor
//! exists is decided where views are made.

mod drawing;

pub use drawing::*;
