//! What must be said: dimensions, callouts and notes, from anchors to candidate drawings.
//!
//! Takes the resolved annotations of a spec and the finished views. [`resolve()`] binds anchors,
//! measures values and writes them as the style wants ([`Annotation`], still free of scale);
//! [`candidates()`] then draws each annotation in every sensible way around its view on paper. An
//! annotation does not know the others: which [`Candidate`] is taken is decided in
//! [`layout`](crate::layout).

mod angular;
mod annotation;
mod arrow;
mod candidate;
mod diameter;
mod fixed;
mod hole_note;
mod label;
mod leader;
mod linear;
mod measure;
mod member;
mod resolve;
mod set;
mod sketch;
mod value_text;

pub use annotation::{Annotation, Content, Hold, LinearSize, Target};
pub use candidate::{Candidate, Seat, candidates};
pub use fixed::Fixed;
pub use label::{Label, PlacedLabel};
pub use resolve::resolve;
pub use sketch::{Head, Sketch, Trace};

use crate::style::{Group, Style};

/// The style, and the group of it that goes with the sheet's size.
#[derive(Clone, Copy, Debug)]
pub struct Practice<'a> {
    /// The style.
    pub style: &'a Style,
    /// Its numbers for the sheet's size.
    pub group: &'a Group,
}

impl Practice<'_> {
    /// Length of a dimension's arrowhead, mm.
    #[must_use]
    pub fn arrow(&self) -> f64 {
        self.style.arrow.length_h * self.group.text
    }
}
