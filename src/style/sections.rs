//! The sections of a style file.

use std::collections::BTreeMap;

use serde::Deserialize;

use super::{
    Costs, FormatSpec, FrameSpec, LinePitch, ReviewSpec, RevisionTableSpec, SheetSide,
    TitleBlockSpec,
};

/// A drafting practice.
#[derive(Clone, Debug, PartialEq, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Style {
    /// What to call it.
    pub name: String,
    /// Line widths, lettering and distances by sheet size.
    pub group: Vec<Group>,
    /// Dash patterns.
    pub dash: DashSet,
    /// Arrowheads.
    pub arrow: ArrowSpec,
    /// Dimensions, but for what depends on the sheet's group.
    pub dimension: DimensionSpec,
    /// Tolerances.
    pub tolerance: ToleranceLook,
    /// Leaders.
    pub leader: LeaderSpec,
    /// Centre lines.
    pub centre: CentreSpec,
    /// Hatching.
    pub hatch: HatchSpec,
    /// Least distances, for placement and for the clutter rules alike.
    pub clearance: ClearanceSpec,
    /// Numbers.
    pub number: NumberSpec,
    /// Distances between views and around them.
    pub views: ViewSpacing,
    /// First or third angle.
    pub projection: Projection,
    /// Preferred scales, largest first, as `paper:part`.
    pub scales: Vec<String>,
    /// Sheet sizes.
    pub format: Vec<FormatSpec>,
    /// Frame, margins, zones.
    pub frame: FrameSpec,
    /// The title block.
    pub title_block: TitleBlockSpec,
    /// The revision table.
    pub revision_table: RevisionTableSpec,
    /// General notes.
    pub notes: SheetLook,
    /// Fixed words.
    pub words: WordSpec,
    /// Limits that only checking needs.
    pub review: ReviewSpec,
    /// What a placement costs.
    pub cost: Costs,
}

/// Line widths, lettering and distances that go with some sheet sizes.
#[derive(Clone, Debug, PartialEq, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Group {
    /// Names of the sheet sizes.
    pub sheets: Vec<String>,
    /// Wide lines.
    pub wide: f64,
    /// Narrow lines.
    pub narrow: f64,
    /// Lettering and symbols.
    pub lettering: f64,
    /// Height of dimensions and notes.
    pub text: f64,
    /// Height of stacked deviations and limits.
    pub deviation: f64,
    /// Height of section, view and detail letters.
    pub label: f64,
    /// Outline to first dimension line.
    pub first_line: f64,
    /// Dimension line to the next parallel one.
    pub pitch: f64,
    /// Least distance between parallel dimension lines.
    pub least_pitch: f64,
}

/// Dash patterns; all elements in widths of the line.
#[derive(Clone, Debug, PartialEq, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct DashSet {
    /// Hidden edges.
    pub hidden: DashSpec,
    /// Centre lines.
    pub centre: DashSpec,
    /// Adjacent parts.
    pub adjacent: DashSpec,
}

/// One dash pattern.
#[derive(Clone, Debug, PartialEq, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct DashSpec {
    /// Leading dash, stretched so that the line begins and ends with one.
    pub dash: f64,
    /// Shortest leading dash of a line with two of them; `dash` itself where the style has none. A
    /// line too short for it is drawn without the pattern.
    #[serde(default)]
    pub least: Option<f64>,
    /// What follows it in each period: gap, mark, gap, … beginning and ending with a gap.
    pub rest: Vec<f64>,
}

/// Arrowheads.
#[derive(Clone, Debug, PartialEq, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct ArrowSpec {
    /// Length.
    pub length_h: f64,
    /// Width as a share of the length.
    pub width_share: f64,
    /// Length of section and view arrows in lengths of dimension arrows.
    pub section_factor: f64,
    /// Diameter of the dot that ends a leader inside an outline.
    pub dot: f64,
    /// Diameter of the dot between short neighbours of a chain.
    pub chain_dot: f64,
}

/// Dimension and extension lines.
#[derive(Clone, Debug, PartialEq, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct DimensionSpec {
    /// Gap between outline and extension line.
    pub extension_gap: f64,
    /// Extension line beyond the dimension line.
    pub overshoot: f64,
    /// Base of the text above the dimension line, clear distance.
    pub text_lift: f64,
    /// Spare room beside text and arrows for both to stand between the extension lines.
    pub inside_spare: f64,
    /// Arrows stand inside only if the span is at least this many arrow lengths …
    pub inside_arrows: f64,
    /// … and at least this long.
    pub inside_least: f64,
    /// How far the line goes on past an outside arrow.
    pub outside_tail: f64,
    /// Gap left on each side of an arrowhead where an extension or centre line would cross it.
    pub arrow_gap: f64,
    /// Gap left round a text where a line would run through it.
    pub text_gap: f64,
    /// Sides of a view that dimensions stand on if they may choose.
    pub preferred_sides: Vec<SheetSide>,
    /// Most tiers on one side.
    pub tiers: u8,
    /// Circles of at least this many arrow lengths may be crossed by a line with two arrowheads.
    pub across_arrows: f64,
    /// Frame round a basic value beyond its text.
    pub frame_margin_h: f64,
}

/// Tolerances as they look.
#[derive(Clone, Debug, PartialEq, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct ToleranceLook {
    /// Base line to base line of a stack, in its text height.
    pub stack_pitch: f64,
    /// Blank between size and tolerance.
    pub blank_h: f64,
    /// Most decimal places of a deviation.
    pub places: u8,
}

/// Leaders and their texts.
#[derive(Clone, Debug, PartialEq, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct LeaderSpec {
    /// Angles to level that are offered, degrees; the first is preferred.
    pub angles: Vec<f64>,
    /// Lengths that are offered.
    pub lengths: Vec<f64>,
    /// Distances past the view's outline that are offered.
    pub beyond: Vec<f64>,
    /// Base line to base line of the text's lines, in text heights.
    pub line_pitch: f64,
    /// Text above its landing, clear distance.
    pub text_lift: f64,
    /// Landing past the end of the text.
    pub landing_spare: f64,
    /// Least angle to level or upright, degrees; less is a finding.
    pub least_angle: f64,
    /// Least angle to neighbouring lines and hatching, degrees.
    pub least_to_lines: f64,
    /// Longest that goes without a finding.
    pub longest: f64,
}

/// Centre lines and centre marks.
#[derive(Clone, Debug, PartialEq, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct CentreSpec {
    /// Beyond the outline of the feature.
    pub overshoot: f64,
    /// Circles smaller than this on paper get a continuous cross.
    pub small_circle: f64,
}

/// Hatching.
#[derive(Clone, Debug, PartialEq, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct HatchSpec {
    /// Angle, degrees.
    pub angle: f64,
    /// Spacing by area: `[[area up to in mm², spacing], …]`; the last area is open.
    pub spacing: Vec<(f64, f64)>,
    /// Clear margin round text.
    pub text_margin: f64,
}

/// Least distances on paper.
#[derive(Clone, Debug, PartialEq, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct ClearanceSpec {
    /// Text to text.
    pub text_text: f64,
    /// Text to an outline.
    pub text_outline: f64,
    /// Text to any other line.
    pub text_line: f64,
    /// Text to an arrowhead.
    pub text_arrow: f64,
    /// Text to the text and lines of other annotations, where there is room.
    pub roomy: f64,
    /// Ink to the frame.
    pub frame: f64,
    /// Ink of one view to that of another.
    pub view_view: f64,
    /// Leaders, and extension lines, that run beside each other.
    pub apart: f64,
    /// Parallel lines, unless twice the wide line is more.
    pub lines: f64,
    /// Lines meeting at no more than this angle run along each other, degrees.
    pub parallel_angle: f64,
}

/// How numbers are written.
#[derive(Clone, Debug, PartialEq, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct NumberSpec {
    /// Decimal sign.
    pub decimal: char,
    /// Zero before the decimal sign.
    pub leading_zero: bool,
    /// Most decimal places of a length that asks for none.
    pub places: u8,
    /// Most decimal places of an angle that asks for none.
    pub angle_places: u8,
    /// Between count and what is counted, such as `×`.
    pub times: String,
    /// Between leg and angle of a chamfer.
    pub by: String,
}

/// Distances between views and around them.
#[derive(Clone, Debug, PartialEq, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct ViewSpacing {
    /// Ink to ink of two views.
    pub ink_gap: f64,
    /// Outline to outline at least.
    pub outline_gap: f64,
    /// Ink to frame.
    pub frame_gap: f64,
    /// Ink to frame at least, where the sheet is too small for more.
    pub frame_gap_least: f64,
    /// Ink of views to title block, tables and notes.
    pub block_gap: f64,
    /// What is added to the distances between views, widest first; the first that fits is taken.
    pub extra: Vec<f64>,
    /// View label above the view's ink.
    pub label_gap: f64,
    /// Smallest feature on paper that an automatic scale accepts, as long as any sheet allows it.
    pub smallest_feature: f64,
    /// Longest side of the largest view on paper that an automatic scale accepts in the end.
    pub smallest_view: f64,
}

/// First or third angle.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum Projection {
    /// The view from above stands below the front view.
    FirstAngle,
    /// The view from above stands above the front view.
    ThirdAngle,
}

/// General notes: a heading and a numbered list.
#[derive(Clone, Debug, PartialEq, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct SheetLook {
    /// Height of the heading.
    pub heading_h: f64,
    /// Height of the notes.
    pub text_h: f64,
    /// Base line to base line.
    pub line_pitch: LinePitch,
    /// Blank between a note's number and its text.
    pub indent_h: f64,
    /// Widest column.
    pub width: f64,
    /// Distance to frame, title block and revision table.
    pub gap: f64,
}

/// Fixed words, by key.
#[derive(Clone, Debug, PartialEq, Deserialize)]
#[serde(transparent)]
pub struct WordSpec(pub BTreeMap<String, String>);

impl WordSpec {
    /// The word for `key`, or the key itself where the style has none.
    #[must_use]
    pub fn get<'a>(&'a self, key: &'a str) -> &'a str {
        self.0.get(key).map_or(key, String::as_str)
    }
}

impl Style {
    /// The group that goes with a sheet size; the first for sizes that no group names.
    #[must_use]
    pub fn group_of(&self, format: &str) -> &Group {
        self.group
            .iter()
            .find(|g| g.sheets.iter().any(|s| s == format))
            .or(self.group.first())
            .expect("a style has at least one group: checked when it is read")
    }
}
