//! The tables of the trade, each once, with number, edition and clause of its standard.
//!
//! Data and the smallest questions about it; nothing here knows a spec, a style or a sheet. Styles
//! hold the values that are drawn with and are tested against these tables, so that a style of
//! one's own can depart from a standard, and a rule can say that it does.

pub mod lettering;
pub mod lines;
pub mod scales;
pub mod sheets;
pub mod title_block;
