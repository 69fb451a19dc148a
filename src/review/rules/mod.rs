//! One file per rule, by area.

pub(crate) mod clutter;
pub(crate) mod content;

use super::Rule;

/// Every rule, clutter first, in the order of the reference.
pub(crate) static ALL: &[&Rule] = &[
    &clutter::text_on_line::TEXT_ON_LINE,
    &clutter::text_on_text::TEXT_ON_TEXT,
    &clutter::arrow_on_text::ARROW_ON_TEXT,
    &clutter::too_close::TOO_CLOSE,
    &clutter::outside_frame::OUTSIDE_FRAME,
    &clutter::text_in_other_view::TEXT_IN_OTHER_VIEW,
    &clutter::annotation_in_other_view::ANNOTATION_IN_OTHER_VIEW,
    &clutter::view_too_close::VIEW_TOO_CLOSE,
    &clutter::dimension_lines_cross::DIMENSION_LINES_CROSS,
    &clutter::leaders_cross::LEADERS_CROSS,
    &clutter::leader_crosses_dimension::LEADER_CROSSES_DIMENSION,
    &clutter::extension_crosses_dimension::EXTENSION_CROSSES_DIMENSION,
    &clutter::order_of_tiers::ORDER_OF_TIERS,
    &clutter::tier_spacing::TIER_SPACING,
    &clutter::first_tier_close::FIRST_TIER_CLOSE,
    &clutter::arrow_crowded::ARROW_CROWDED,
    &clutter::dimension_on_hatch::DIMENSION_ON_HATCH,
    &clutter::leader_angle::LEADER_ANGLE,
    &clutter::leader_long::LEADER_LONG,
    &clutter::text_small::TEXT_SMALL,
    &clutter::text_heights::TEXT_HEIGHTS,
    &clutter::text_upside_down::TEXT_UPSIDE_DOWN,
    &clutter::lines_merge::LINES_MERGE,
    &clutter::line_widths::LINE_WIDTHS,
    &clutter::centre_line_long::CENTRE_LINE_LONG,
    &clutter::crowded::CROWDED,
    &clutter::unbalanced_sheet::UNBALANCED_SHEET,
    &content::projection_sign_missing::PROJECTION_SIGN_MISSING,
    &content::title_field_missing::TITLE_FIELD_MISSING,
    &content::title_field_too_long::TITLE_FIELD_TOO_LONG,
    &content::material_missing::MATERIAL_MISSING,
    &content::general_tolerance_missing::GENERAL_TOLERANCE_MISSING,
    &content::revision_order::REVISION_ORDER,
    &content::placeholder_text::PLACEHOLDER_TEXT,
    &content::number_format::NUMBER_FORMAT,
    &content::dimension_double::DIMENSION_DOUBLE,
    &content::view_size_differs::VIEW_SIZE_DIFFERS,
    &content::allow_unused::ALLOW_UNUSED,
    &content::allow_unknown_rule::ALLOW_UNKNOWN_RULE,
];
