//! What a placement costs: 1 is one millimetre of surplus leader.

use serde::Deserialize;

/// All weights.
#[derive(Clone, Debug, PartialEq, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Costs {
    /// From here on a cost is a conflict that no sheet may keep.
    pub hard: f64,
    /// What two annotations pay for each incident.
    pub pair: PairCosts,
    /// What an annotation pays against fixed geometry.
    pub unary: UnaryCosts,
    /// What makes a sheet look orderly.
    pub group: GroupCosts,
    /// Length cut off both ends of a line before it is asked whether it crosses another.
    pub trim: f64,
}

/// Weights of incidents between two annotations.
#[derive(Clone, Debug, PartialEq, Deserialize)]
#[serde(deny_unknown_fields, rename_all = "kebab-case")]
#[expect(missing_docs, reason = "each names the two kinds of ink that meet")]
pub struct PairCosts {
    pub text_text: f64,
    pub text_dim: f64,
    pub text_leader: f64,
    pub text_arrow: f64,
    pub text_ext: f64,
    pub dim_dim: f64,
    pub dim_ext: f64,
    pub dim_leader: f64,
    pub dim_arrow: f64,
    pub dim_near: f64,
    pub ext_ext: f64,
    pub ext_leader: f64,
    pub ext_arrow: f64,
    pub leader_leader: f64,
    pub leader_arrow: f64,
    pub arrow_arrow: f64,
}

/// Weights against fixed geometry.
#[derive(Clone, Debug, PartialEq, Deserialize)]
#[serde(deny_unknown_fields)]
#[expect(missing_docs, reason = "each names what is paid for; styles/iso.toml explains them")]
pub struct UnaryCosts {
    pub text_on_outline: f64,
    pub text_on_centre: f64,
    pub text_on_hatch: f64,
    pub text_inside_view: f64,
    pub dim_inside_view: f64,
    pub outside_frame: f64,
    pub on_block: f64,
    pub in_other_view: f64,
    pub dim_crosses_outline: f64,
    pub dim_on_outline: f64,
    pub arrow_crosses_outline: f64,
    pub ext_crosses_outline: f64,
    pub ext_crosses_other_view: f64,
    pub ext_inside_per_mm: f64,
    pub ext_per_mm: f64,
    pub tier_per_mm: f64,
    pub first_line_closer_per_mm: f64,
    pub other_side: f64,
    pub text_off_centre: f64,
    pub arrows_outside: f64,
    pub text_outside: f64,
    pub avoided_sector: f64,
    pub leader_free: f64,
    pub leader_per_mm: f64,
    pub leader_angle_steep: f64,
    pub leader_angle_off: f64,
    pub leader_crosses_outline: f64,
    pub leader_down: f64,
    pub leader_parallel: f64,
}

/// Weights between annotations that belong together.
#[derive(Clone, Debug, PartialEq, Deserialize)]
#[serde(deny_unknown_fields)]
#[expect(missing_docs, reason = "each names what is paid for; styles/iso.toml explains them")]
pub struct GroupCosts {
    pub callouts_misaligned: f64,
    pub leaders_near_parallel_per_mm: f64,
    pub texts_crowded: f64,
    pub text_and_line_crowded: f64,
    pub order_of_tiers: f64,
}
