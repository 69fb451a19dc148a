//! Limits that only checking needs.

use serde::Deserialize;

/// Limits of the clutter rules that placement does not know; the others stand in the sections
/// that placement reads too.
#[derive(Clone, Debug, PartialEq, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct ReviewSpec {
    /// Ink that meets no deeper than this, mm, only touches.
    pub overlap_depth: f64,
    /// Text lower than this, mm, cannot be read.
    pub text_must: f64,
    /// Text lower than this, mm, is hard to read.
    pub text_should: f64,
    /// Wide line over narrow line.
    pub width_ratio: f64,
    /// Share by which line widths may differ and still count as equal.
    pub width_spread: f64,
    /// Share by which pitches of tiers may differ.
    pub tier_spread: f64,
    /// Most bends of a leader besides the one into its landing.
    pub leader_bends: u32,
    /// Farthest that a centre line runs past its feature, mm, unless a dimension hangs on it.
    pub centre_longest: f64,
    /// Ends nearer than this, mm, hold on to one place.
    pub same_place: f64,
    /// Farthest that the ink's centroid lies off the field's centre, as a share of its sides.
    pub balance: f64,
    /// Least share of the field that views take.
    pub filled_least: f64,
    /// Greatest share of the field that views take.
    pub filled_most: f64,
    /// Side of the square in which annotations are counted, in text heights.
    pub crowd_window_h: f64,
    /// So many annotations in the square are worth a look.
    pub crowd_consider: u32,
    /// So many are too many.
    pub crowd_should: u32,
}
