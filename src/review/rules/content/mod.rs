//! What the sheet says: what is missing, contradicts itself or is said in the wrong form.

pub(crate) mod allow_unknown_rule;
pub(crate) mod allow_unused;
pub(crate) mod dimension_double;
pub(crate) mod general_tolerance_missing;
pub(crate) mod material_missing;
pub(crate) mod number_format;
pub(crate) mod placeholder_text;
pub(crate) mod projection_sign_missing;
pub(crate) mod revision_order;
pub(crate) mod title_field_missing;
pub(crate) mod title_field_too_long;
pub(crate) mod view_size_differs;
