//! Names that annotations, reports and revisions speak of.

use std::borrow::Borrow;
use std::fmt;

macro_rules! id {
    ($(#[$doc:meta])* $name:ident) => {
        $(#[$doc])*
        #[derive(Clone, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
        pub struct $name(String);

        impl $name {
            /// The id with this text.
            #[must_use]
            pub fn new(text: impl Into<String>) -> Self {
                Self(text.into())
            }

            /// Its text.
            #[must_use]
            pub fn as_str(&self) -> &str {
                &self.0
            }
        }

        impl fmt::Display for $name {
            fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
                f.write_str(&self.0)
            }
        }

        impl Borrow<str> for $name {
            fn borrow(&self) -> &str {
                &self.0
            }
        }
    };
}

id! {
    /// A view of the drawing, as the spec names it.
    ViewId
}
id! {
    /// A part of the drawing.
    PartId
}
id! {
    /// A shape of a drawn view or a feature of a part; members of a repeat are `group.1`, `group.2`…
    ShapeId
}
id! {
    /// Anything on a sheet: an annotation, an edge, a table. Unique in its drawing.
    ItemId
}
