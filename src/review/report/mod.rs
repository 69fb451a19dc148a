//! What a review found, told to people, to programs, and on the sheet itself.

mod json;
mod marked;
mod text;

pub use json::json;
pub use marked::marked;
pub use text::{Places, text};

/// What every report says at its end, in whatever form: what a check is, and what it is not.
pub const CAUTION: &str = "This check looks at drafting practice and at whether the drawing agrees \
with the geometry described. It does not judge strength, safety, function or fitness for any \
purpose. That nothing was found is no approval: a drawing is valid once a competent, authorised \
person has approved it under the rules of the place where it is used.";
