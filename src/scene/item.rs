//! Scenes, their items, and the marks that items are made of.

use std::fmt;
use std::str::FromStr;
use std::sync::Arc;

use crate::geom::{Line, Path, Point, Quad, Rect, Sheet};
use crate::ident::{ItemId, ViewId};
use crate::text::Run;

/// One sheet of a drawing, ready for a renderer.
#[derive(Clone, Debug, PartialEq)]
pub struct Scene {
    /// What the sheet is.
    pub sheet: SheetFacts,
    /// What stands on it, in drawing order.
    pub items: Vec<Item>,
}

/// What a sheet says about itself; goes into the metadata of its files.
#[derive(Clone, Debug, PartialEq)]
pub struct SheetFacts {
    /// Width of the trimmed sheet, mm.
    pub width: f64,
    /// Height of the trimmed sheet, mm.
    pub height: f64,
    /// Drawing number.
    pub number: String,
    /// Title of the drawing.
    pub title: String,
    /// Newest revision index; empty before the first.
    pub revision: String,
    /// Name of the style that the sheet follows.
    pub style: String,
    /// Name of the sheet size, such as `A3`.
    pub format: String,
    /// This sheet's place among the drawing's sheets, from 1.
    pub index: u32,
    /// How many sheets the drawing has.
    pub count: u32,
}

/// Everything that belongs to one annotation, one edge or one table.
#[derive(Clone, Debug, PartialEq)]
pub struct Item {
    /// Unique in its drawing.
    pub id: ItemId,
    /// What it is.
    pub kind: ItemKind,
    /// The view that it belongs to.
    pub view: Option<ViewId>,
    /// The shapes or features that it stands for, space-separated.
    pub feature: Option<String>,
    /// What a dimension says.
    pub value: Option<Value>,
    /// Its strokes, fills and texts, in drawing order.
    pub marks: Vec<Mark>,
}

/// What a dimension says, in absolute numbers.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Value {
    /// Nominal size, mm or degrees.
    pub nominal: f64,
    /// Absolute limits `(lower, upper)` where the dimension itself is toleranced; a side that is
    /// left open (MIN, MAX) is absent.
    pub limits: (Option<f64>, Option<f64>),
    /// What the numbers count.
    pub unit: ValueUnit,
}

/// What a value counts.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum ValueUnit {
    /// Millimetres.
    Millimetre,
    /// Degrees of angle.
    Degree,
}

/// A piece of ink.
#[derive(Clone, Debug, PartialEq)]
pub enum Mark {
    /// A line of some width.
    Stroke(Stroke),
    /// A filled area.
    Fill(Fill),
    /// A run of text.
    Text(PlacedText),
}

/// Paths drawn with one width; dashes are separate paths.
#[derive(Clone, Debug, PartialEq)]
pub struct Stroke {
    /// The lines' middles.
    pub paths: Vec<Path<Sheet>>,
    /// Width in mm.
    pub width: f64,
    /// What the stroke does in its annotation.
    pub role: Option<Role>,
    /// Which ink.
    pub ink: Ink,
}

/// An area filled by the even-odd rule.
#[derive(Clone, Debug, PartialEq)]
pub struct Fill {
    /// Its closed outlines.
    pub paths: Vec<Path<Sheet>>,
    /// What the fill does in its annotation.
    pub role: Option<Role>,
    /// Which ink.
    pub ink: Ink,
}

/// A measured run of text at its place.
#[derive(Clone, Debug, PartialEq)]
pub struct PlacedText {
    /// The measured text; shared, because candidates and scenes hold the same one.
    pub run: Arc<Run>,
    /// Where its base line begins.
    pub origin: Point<Sheet>,
    /// How far the base line is turned, degrees counter-clockwise as the reader sees it.
    pub angle: f64,
    /// What it says, where it is one value among several of its item: the links of a chain.
    pub value: Option<Value>,
    /// Which ink.
    pub ink: Ink,
}

/// What colour something is drawn with.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum Ink {
    /// The drawing's own ink, black.
    #[default]
    Drawing,
    /// A checker's marks on a marked-up sheet.
    Finding,
}

macro_rules! named {
    ($(#[$doc:meta])* $name:ident { $($(#[$vdoc:meta])* $variant:ident => $text:literal),+ $(,)? }) => {
        $(#[$doc])*
        #[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
        pub enum $name { $($(#[$vdoc])* $variant),+ }

        impl $name {
            /// Every one, in the order of the SVG contract.
            pub const ALL: &[Self] = &[$(Self::$variant),+];

            /// Its name in an issued SVG.
            #[must_use]
            pub fn name(self) -> &'static str {
                match self { $(Self::$variant => $text),+ }
            }
        }

        impl fmt::Display for $name {
            fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
                f.write_str(self.name())
            }
        }

        impl FromStr for $name {
            type Err = ();
            fn from_str(text: &str) -> Result<Self, ()> {
                Self::ALL.iter().copied().find(|k| k.name() == text).ok_or(())
            }
        }
    };
}

named! {
    /// What an item is (`data-kind` of its group).
    ItemKind {
        /// Visible edges.
        Outline => "outline",
        /// Hidden edges.
        Hidden => "hidden",
        /// Seen tangent edges.
        Smooth => "smooth",
        /// Centre lines, centre marks, pitch circles.
        Centre => "centre",
        /// Hatching of cut faces.
        Hatch => "hatch",
        /// Section lines with arrows and letters.
        CuttingLine => "cutting-line",
        /// Break lines.
        Break => "break",
        /// Adjacent parts and end positions.
        Adjacent => "adjacent",
        /// Construction lines.
        Construction => "construction",
        /// Dimensions.
        Dimension => "dimension",
        /// Notes on a leader.
        Leader => "leader",
        /// Hole callouts.
        Callout => "callout",
        /// Symbols standing alone, such as the projection sign.
        Symbol => "symbol",
        /// Item numbers in circles.
        Balloon => "balloon",
        /// Names of views, sections and details.
        ViewLabel => "view-label",
        /// Revision table, parts list, hole table.
        Table => "table",
        /// The title block.
        TitleBlock => "title-block",
        /// Frame, zones and centring marks.
        Frame => "frame",
        /// General notes.
        Note => "note",
        /// A checker's mark on a marked-up sheet; never on an issued one.
        Finding => "finding",
    }
}

named! {
    /// What a stroke or fill does inside an annotation (`data-role`).
    Role {
        /// Dimension line.
        Dim => "dim",
        /// Extension line.
        Ext => "ext",
        /// Leader and its landing.
        Leader => "leader",
        /// Arrowhead or another termination.
        Arrow => "arrow",
        /// Frame around a text.
        TextFrame => "text-frame",
    }
}

impl ItemKind {
    /// Whether items of this kind say something about the views, and are placed by the program.
    #[must_use]
    pub fn is_annotation(self) -> bool {
        matches!(
            self,
            Self::Dimension
                | Self::Leader
                | Self::Callout
                | Self::Symbol
                | Self::Balloon
                | Self::ViewLabel
        )
    }
}

impl Stroke {
    /// A black stroke of these paths.
    #[must_use]
    pub fn new(paths: Vec<Path<Sheet>>, width: f64, role: Option<Role>) -> Self {
        Self { paths, width, role, ink: Ink::Drawing }
    }
}

impl PlacedText {
    /// Black text whose base line begins at `origin`.
    #[must_use]
    pub fn new(run: Arc<Run>, origin: Point<Sheet>, angle: f64) -> Self {
        Self { run, origin, angle, value: None, ink: Ink::Drawing }
    }

    /// The box of its ink, turned with the text.
    #[must_use]
    pub fn quad(&self) -> Quad<Sheet> {
        self.run.quad(self.origin, self.angle)
    }
}

impl Mark {
    /// The smallest axis-aligned box around its ink; `None` if it draws nothing.
    #[must_use]
    pub fn bounds(&self) -> Option<Rect<Sheet>> {
        match self {
            Self::Stroke(s) => {
                let half = s.width / 2.0;
                Rect::union_of(s.paths.iter().filter_map(Path::bounds)).map(|b| b.grown(half))
            }
            Self::Fill(f) => Rect::union_of(f.paths.iter().filter_map(Path::bounds)),
            Self::Text(t) => (!t.run.is_blank()).then(|| t.quad().bounds()),
        }
    }
}

impl Item {
    /// An item without view, feature and value.
    #[must_use]
    pub fn new(id: ItemId, kind: ItemKind, marks: Vec<Mark>) -> Self {
        Self { id, kind, view: None, feature: None, value: None, marks }
    }

    /// The smallest axis-aligned box around its ink; `None` if it draws nothing.
    #[must_use]
    pub fn bounds(&self) -> Option<Rect<Sheet>> {
        Rect::union_of(self.marks.iter().filter_map(Mark::bounds))
    }

    /// Its texts, in drawing order.
    pub fn texts(&self) -> impl Iterator<Item = &PlacedText> {
        self.marks.iter().filter_map(|m| match m {
            Mark::Text(t) => Some(t),
            Mark::Stroke(_) | Mark::Fill(_) => None,
        })
    }
}

impl SheetFacts {
    /// The trimmed sheet as a box.
    #[must_use]
    pub fn area(&self) -> Rect<Sheet> {
        Rect::from_sides(0.0, 0.0, self.width, self.height)
    }
}

/// A black filled outline in sheet space, as of an arrowhead: straight lines through `corners`.
#[must_use]
pub fn filled(corners: &[Point<Sheet>], role: Role) -> Mark {
    Mark::Fill(Fill {
        paths: vec![Path::polyline(corners, true)],
        role: Some(role),
        ink: Ink::Drawing,
    })
}

/// A straight black stroke.
#[must_use]
pub fn straight(line: Line<Sheet>, width: f64, role: Option<Role>) -> Mark {
    let path = Path::polyline(&[line.from, line.to], false);
    Mark::Stroke(Stroke::new(vec![path], width, role))
}
