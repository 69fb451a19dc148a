//! Witnessline turns a TOML spec of a part into engineering drawing sheets.

pub mod geom;
pub mod ident;
pub mod scene;
pub mod sheet;
pub mod source;
pub mod spec;
pub mod standards;
pub mod style;
pub mod text;
pub mod units;
