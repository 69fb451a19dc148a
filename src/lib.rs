//! Witnessline turns a TOML spec of a part into engineering drawing sheets.

pub mod geom;
pub mod ident;
pub mod review;
pub mod scene;
pub mod source;
pub mod spec;
pub mod style;
pub mod text;
pub mod units;
