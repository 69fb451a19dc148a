//! The resolved spec: plain data for the stages after it.
//!
//! Lengths are mm of the part in view space (x right, y up) unless a field says paper; inches were
//! converted when the spec was read. Angles are degrees, counter-clockwise.

use crate::geom::{Point, Vector, View as ViewSpace};
use crate::ident::{ItemId, PartId, ShapeId, ViewId};
use crate::source::Span;
use crate::units::{LengthUnit, Scale};

/// A value and where it was written.
#[derive(Clone, Debug, PartialEq)]
pub struct Spanned<T> {
    /// The value.
    pub value: T,
    /// Where it was written.
    pub span: Span,
}

/// Everything that one spec describes.
#[derive(Clone, Debug, PartialEq)]
pub struct Drawing {
    /// Standing data of the sheet: `[drawing]`.
    pub sheet: SheetSpec,
    /// The parts, in order of appearance; one with the id `part` if the spec names none.
    pub parts: Vec<PartSpec>,
    /// The views, in order of appearance.
    pub views: Vec<ViewSpec>,
    /// Dimensions and callouts of all views, in order of appearance.
    pub annotations: Vec<AnnotationSpec>,
    /// Rows of the revision table, oldest first.
    pub revisions: Vec<Revision>,
    /// Findings accepted on purpose.
    pub allow: Vec<Allow>,
}

/// `[drawing]`: what the sheet says besides the views.
#[derive(Clone, Debug, PartialEq)]
pub struct SheetSpec {
    /// Drawing number; fit for a file name.
    pub number: Spanned<String>,
    /// Title.
    pub title: Option<Spanned<String>>,
    /// Supplementary title.
    pub subtitle: Option<String>,
    /// Draft or released.
    pub status: Status,
    /// Name of a built-in style or path of one's own.
    pub style: Spanned<String>,
    /// Unit of plain numbers, already applied.
    pub units: LengthUnit,
    /// Size of the sheet.
    pub format: FormatChoice,
    /// Main scale.
    pub scale: ScaleChoice,
    /// Decimal places of dimensions that say nothing else; `None`: as many as the value has, at
    /// most three.
    pub places: Option<u8>,
    /// Standing fields of the title block by their key; absent ones are not in the map.
    pub fields: Vec<(FieldKey, Spanned<Text>)>,
    /// A company's own fields, in order.
    pub own_fields: Vec<(String, Text)>,
    /// General notes, in order.
    pub notes: Vec<Spanned<Text>>,
    /// Where `[drawing]` stands.
    pub span: Span,
}

/// Standing fields of the title block that a spec fills in.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum FieldKey {
    /// `owner`: legal owner.
    Owner,
    /// `department`: responsible department.
    Department,
    /// `reference`: technical reference, a person.
    Reference,
    /// `creator`: who made the drawing.
    Creator,
    /// `approver`: who approved it.
    Approver,
    /// `date`: date of issue, ISO 8601.
    Date,
    /// `document_type`, such as "Part drawing".
    DocumentType,
    /// `language`: language code.
    Language,
    /// `material`.
    Material,
    /// `finish`: general surface statement.
    Finish,
    /// `edges`: general statement on edges.
    Edges,
    /// `mass`, as text, until it is computed from a solid.
    Mass,
    /// `general_tolerance`.
    GeneralTolerance,
    /// `tolerancing`: tolerancing principle, such as `ISO 8015`.
    Tolerancing,
    /// `classification`: keywords.
    Classification,
}

/// Text with computed numbers in it, formatted by the style when it is drawn.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Text {
    /// Its pieces in order.
    pub pieces: Vec<TextPiece>,
}

/// A piece of a [`Text`].
#[derive(Clone, Debug, PartialEq)]
pub enum TextPiece {
    /// Letters as written.
    Literal(String),
    /// The value of an expression in braces as the reader sees it: a length in the **drawing's
    /// unit** (not converted to mm), an angle in degrees, otherwise a plain number. The style
    /// formats it.
    Number(f64),
}

/// Draft or released.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum Status {
    /// Not for manufacture.
    #[default]
    Draft,
    /// Valid; rules about approval bind.
    Released,
}

/// Which sheet size to take.
#[derive(Clone, Debug, PartialEq)]
pub enum FormatChoice {
    /// The smallest on which all fits.
    Auto,
    /// This one, by its name in the style, such as `A3`.
    Named(Spanned<String>),
}

/// Which main scale to take.
#[derive(Clone, Debug, PartialEq)]
pub enum ScaleChoice {
    /// The largest preferred one at which all fits.
    Auto,
    /// This one.
    Given(Spanned<Scale>),
}

/// A part of the drawing.
#[derive(Clone, Debug, PartialEq)]
pub struct PartSpec {
    /// Its id.
    pub id: PartId,
}

/// A row of the revision table.
#[derive(Clone, Debug, PartialEq)]
pub struct Revision {
    /// Index, such as `B`.
    pub mark: Spanned<String>,
    /// Date, ISO 8601.
    pub date: Spanned<String>,
    /// What changed.
    pub change: Text,
    /// Who did it.
    pub by: String,
}

/// One view.
#[derive(Clone, Debug, PartialEq)]
pub struct ViewSpec {
    /// Its id.
    pub id: ViewId,
    /// Where its table stands.
    pub span: Span,
    /// The part that it shows.
    pub part: PartId,
    /// From where the part is seen.
    pub from: Direction,
    /// Its own scale where it differs from the main one.
    pub scale: Option<Scale>,
    /// Text of its label, such as `A–A`; `None` for no label.
    pub label: Option<Text>,
    /// Whether the shapes show a cut (for rules and for centre lines), not an outside view.
    pub is_section: bool,
    /// Where its geometry comes from.
    pub geometry: Geometry,
}

/// From where a part is seen, by the axes of the part: x to the right, y away from the viewer of the
/// front view, z up. In view space x is what that viewer sees to the right and y what is up.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Direction {
    /// Against +y.
    Front,
    /// Against −z.
    Top,
    /// Against −x.
    Right,
    /// Against +x.
    Left,
    /// Against −y.
    Rear,
    /// Against +z.
    Bottom,
    /// Isometric from front, right and above.
    Iso,
}

/// Where a view's geometry comes from.
#[derive(Clone, Debug, PartialEq)]
pub enum Geometry {
    /// Shapes drawn in the spec.
    Drawn(Vec<Shape>),
}

/// A shape drawn in view space.
#[derive(Clone, Debug, PartialEq)]
pub struct Shape {
    /// Its id; unique in its view.
    pub id: ShapeId,
    /// Where its table stands.
    pub span: Span,
    /// How its outline is drawn; `Cut` for a hatched shape that says nothing else.
    pub class: LineClass,
    /// Its outline.
    pub outline: Outline,
    /// Whether the area inside is a cut face to be hatched.
    pub hatch: bool,
    /// Whether centre lines are put on it.
    pub centre: CentreLines,
    /// How it is repeated.
    pub repeat: Option<Repeat>,
}

/// The class of an edge.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum LineClass {
    /// Visible edge or outline.
    #[default]
    Visible,
    /// Hidden edge.
    Hidden,
    /// Tangent edge, drawn narrow.
    Smooth,
    /// Edge of a cut face, drawn as a visible one.
    Cut,
    /// Centre or symmetry line.
    Centre,
    /// Outline of an adjacent part or of an end position.
    Adjacent,
    /// Narrow continuous line: thread root, construction, bend.
    Construction,
    /// Limit of a partial view, as drawn.
    Break,
}

/// Outline of a shape.
#[derive(Clone, Debug, PartialEq)]
pub enum Outline {
    /// A straight line.
    Line {
        /// Beginning.
        from: Point<ViewSpace>,
        /// End.
        to: Point<ViewSpace>,
    },
    /// Part of a circle.
    Arc {
        /// Centre.
        centre: Point<ViewSpace>,
        /// Radius.
        radius: f64,
        /// Direction of the beginning, degrees.
        start: f64,
        /// Degrees passed through, counter-clockwise if positive.
        sweep: f64,
    },
    /// A whole circle.
    Circle {
        /// Centre.
        centre: Point<ViewSpace>,
        /// Diameter.
        diameter: f64,
    },
    /// A slot with round ends.
    Slot {
        /// Centre of one end.
        from: Point<ViewSpace>,
        /// Centre of the other end.
        to: Point<ViewSpace>,
        /// Width.
        width: f64,
    },
    /// An upright rectangle, possibly with rounded or cut corners.
    Rectangle {
        /// Lower left corner.
        corner: Point<ViewSpace>,
        /// Width and height.
        size: Vector<ViewSpace>,
        /// Corner radius, 0 for sharp.
        corner_radius: f64,
        /// The direction of the axis if the rectangle is a turned body seen from the side.
        turned: Option<Axis>,
    },
    /// Straight lines through points.
    Polygon {
        /// The corners in walking order.
        points: Vec<Point<ViewSpace>>,
        /// Whether the last is joined to the first.
        closed: bool,
    },
    /// SVG path data with y **up**; arcs stay arcs.
    Path {
        /// The data with its braces computed and, in an inch drawing, its lengths converted to mm;
        /// the span is that of the whole text, in which places of `value` cannot be counted.
        data: Spanned<String>,
    },
}

/// A direction of view space.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Axis {
    /// Along x.
    X,
    /// Along y.
    Y,
}

/// Whether centre lines are put on a shape.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum CentreLines {
    /// On whole circles, slots and turned rectangles; not on arcs, hatched regions and centre-class
    /// shapes. A circle concentric with a larger one shares that one's.
    #[default]
    Auto,
    /// Put them on.
    Yes,
    /// Leave them out.
    No,
}

/// How a shape is repeated. The shape as written is the first member.
#[derive(Clone, Debug, PartialEq)]
pub enum Repeat {
    /// On a circle, equally spaced, counter-clockwise.
    Polar {
        /// How many members.
        count: u32,
        /// Centre of the circle.
        about: Point<ViewSpace>,
        /// Degrees between neighbours.
        step: f64,
    },
    /// In rows and columns.
    Grid {
        /// Columns and rows.
        count: (u32, u32),
        /// Distance between columns and between rows.
        pitch: Vector<ViewSpace>,
    },
    /// At given displacements from the first.
    At {
        /// Displacement of each further member.
        offsets: Vec<Vector<ViewSpace>>,
    },
    /// Mirrored about a line parallel to an axis; two members.
    Mirror {
        /// Direction of the line.
        axis: Axis,
        /// Where the line crosses the other axis.
        at: f64,
    },
}

/// A dimension, a set of dimensions, a callout or a note on a leader.
#[derive(Clone, Debug, PartialEq)]
pub struct AnnotationSpec {
    /// As given, or made from kind, anchors and view.
    pub id: ItemId,
    /// Where its table stands.
    pub span: Span,
    /// The view that it is drawn in, where the spec says so.
    pub view: Option<Spanned<ViewId>>,
    /// What it says.
    pub says: Says,
    /// Where it shall be.
    pub pin: Pin,
}

/// What an annotation says.
#[derive(Clone, Debug, PartialEq)]
pub enum Says {
    /// One dimension.
    Dimension(Measure, Form),
    /// Dimensions end to end on one line; one form for each, so one less than anchors.
    Chain(Vec<AnchorRef>, LineDirection, Vec<Form>),
    /// Dimensions from the first anchor to each of the others, stacked; one form for each, so one
    /// less than anchors.
    Baseline(Vec<AnchorRef>, LineDirection, Vec<Form>),
    /// A hole callout at a circle or a group of circles.
    Hole(AnchorRef, Box<HoleNote>),
    /// Lines of text on a leader.
    Note(AnchorRef, Vec<Text>),
}

/// What a dimension measures.
#[derive(Clone, Debug, PartialEq)]
pub enum Measure {
    /// Distance of two anchors.
    Between(AnchorRef, AnchorRef, LineDirection),
    /// A size that a shape names: `rim.diameter`, `slot.width`, `edge.length`, `corner.radius`.
    Of(AnchorRef),
    /// Angle between two straight edges.
    Angle(AnchorRef, AnchorRef),
    /// A chamfer: leg × angle of a straight edge.
    Chamfer(AnchorRef),
}

/// In which direction a linear dimension is measured.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum LineDirection {
    /// Square to an edge among the anchors, else along the axis that both points share.
    #[default]
    Auto,
    /// Level.
    Horizontal,
    /// Upright.
    Vertical,
    /// Along the line from anchor to anchor.
    Aligned,
}

/// A named place of a view, as written: shape, then size or place.
#[derive(Clone, Debug, PartialEq)]
pub struct AnchorRef {
    /// As written, such as `bolt.1.centre`; split where views are made.
    pub name: String,
    /// Where it was written.
    pub span: Span,
}

/// How a value is written.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Form {
    /// Sign before the value where the measure does not imply one.
    pub sign: Option<SizeSign>,
    /// Tolerance.
    pub tolerance: Tolerance,
    /// Fit class, such as `H7`, written after the value.
    pub fit: Option<String>,
    /// Plain, reference or basic.
    pub standing: Standing,
    /// Decimal places; `None`: the drawing's.
    pub places: Option<u8>,
    /// How tolerance and fit are shown.
    pub show: Show,
}

/// Sign before a value that is measured as a distance.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum SizeSign {
    /// ⌀: a diameter across a side view.
    Diameter,
    /// □: the side of a square.
    Square,
}

/// Tolerance of a size, in mm (degrees for angles).
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub enum Tolerance {
    /// None of its own.
    #[default]
    None,
    /// The same both ways: ±.
    Symmetric(f64),
    /// Upper and lower deviation, signed.
    Deviations {
        /// Upper deviation.
        upper: f64,
        /// Lower deviation.
        lower: f64,
    },
    /// Absolute limits.
    Limits {
        /// Greatest size.
        upper: f64,
        /// Least size.
        lower: f64,
    },
    /// The value is the least size.
    Min,
    /// The value is the greatest size.
    Max,
}

/// What standing a value has.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum Standing {
    /// A size to be made and inspected.
    #[default]
    Plain,
    /// Information only, in brackets.
    Reference,
    /// Theoretically exact, in a frame.
    Basic,
}

/// How tolerance and fit are shown.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum Show {
    /// As given.
    #[default]
    AsGiven,
    /// As limits, whatever way the tolerance was given.
    Limits,
    /// As deviations.
    Deviations,
    /// Only the fit class.
    Class,
}

/// What a hole callout says besides the diameter of its circle.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct HoleNote {
    /// How the hole's own diameter is written.
    pub form: Form,
    /// Thread designation that replaces the diameter, such as `M8`.
    pub thread: Option<Text>,
    /// Depth of the thread where it is less than that of the hole, mm.
    pub thread_depth: Option<f64>,
    /// How deep the hole goes.
    pub depth: HoleDepth,
    /// Counterbore.
    pub counterbore: Option<Enlargement>,
    /// Spotface.
    pub spotface: Option<Enlargement>,
    /// Countersink.
    pub countersink: Option<Countersink>,
    /// Further lines below.
    pub notes: Vec<Text>,
}

/// How deep a hole goes.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub enum HoleDepth {
    /// Through, and a view shows it: nothing is written.
    #[default]
    Shown,
    /// Through, and no view shows it: THRU is written.
    Through,
    /// This deep, mm.
    Blind(f64),
}

/// Diameter and depth of a counterbore or spotface.
#[derive(Clone, Debug, PartialEq)]
pub struct Enlargement {
    /// Diameter.
    pub diameter: RimSize,
    /// Depth, mm; a spotface may have none.
    pub depth: Option<f64>,
}

/// Diameter and angle of a countersink.
#[derive(Clone, Debug, PartialEq)]
pub struct Countersink {
    /// Diameter at the surface.
    pub diameter: RimSize,
    /// Included angle, degrees.
    pub angle: f64,
}

/// Where the diameter of an enlargement comes from.
#[derive(Clone, Debug, PartialEq)]
pub enum RimSize {
    /// A circle of the view.
    Shape(AnchorRef),
    /// No view draws it: given, mm.
    Given(f64),
}

/// Where an annotation shall be; whatever is absent is left to the program.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct Pin {
    /// Side of the view.
    pub side: Option<Side>,
    /// Tier on that side, 1 is the innermost.
    pub tier: Option<u8>,
    /// Place of the text along the dimension line: 0 beginning … 1 end.
    pub along: Option<f64>,
    /// Direction of a leader or of a diameter line, degrees.
    pub angle: Option<f64>,
    /// Where the pin was written.
    pub span: Option<Span>,
}

/// Side of a view.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Side {
    /// Towards the sheet's upper edge.
    Above,
    /// Towards the sheet's lower edge.
    Below,
    /// Towards the sheet's left edge.
    Left,
    /// Towards the sheet's right edge.
    Right,
    /// Within the view's outline.
    Inside,
}

/// A finding accepted on purpose.
#[derive(Clone, Debug, PartialEq)]
pub struct Allow {
    /// The rule.
    pub rule: Spanned<String>,
    /// The items that it may name; empty for any.
    pub items: Vec<Spanned<String>>,
    /// Why it is accepted.
    pub reason: String,
    /// Where its table stands.
    pub span: Span,
}
