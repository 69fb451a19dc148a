//! Witnessline turns a TOML spec of a part into engineering drawing sheets and reports what
//! clutters or contradicts.
//!
//! The pipeline runs one way; each stage is a plain function from one data type to the next:
//!
//! 1. [`spec`] reads what the user wrote into a [`Drawing`](spec::Drawing): every expression a
//!    number, every name an id, every fault with its place.
//! 2. [`view`] makes pictures of the part: edges by line class, and named anchors.
//! 3. [`annotate`] binds what must be said to anchors, writes its text, and draws it in every
//!    sensible way.
//! 4. [`layout`] arranges the views, settles scale and sheet size, and chooses among those ways by
//!    cost. [`sheet`] adds frame, title block, tables and notes.
//! 5. [`compose`] turns the result into a [`Scene`](scene::Scene): strokes, fills and text at fixed
//!    places of the sheet, lines interrupted where they give way.
//! 6. [`render`] writes the scene as SVG and PNG.
//! 7. [`review`] reads the scene, and nothing of how it came about, for what a checker would mark.
//!
//! Points are typed by their space ([`geom`]); files come through one trait ([`source::World`]).
//!
//! ```
//! use witnessline::source::{Diagnostics, SourceMap};
//!
//! let text = witnessline::spec::starter("WL-0001");
//! let (mut sources, mut diagnostics) = (SourceMap::default(), Diagnostics::default());
//! let drawing = witnessline::spec::read_text("demo.toml", &text, &mut sources, &mut diagnostics);
//! let sheet = drawing.and_then(|d| witnessline::draw(d, &mut diagnostics)).expect("it is sound");
//! let svg = witnessline::render::svg(&sheet.scenes[0]);
//! assert!(svg.contains("WL-0001"));
//! ```

pub mod annotate;
pub mod cli;
pub mod compose;
pub mod geom;
pub mod ident;
pub mod layout;
pub mod render;
pub mod review;
pub mod scene;
pub mod sheet;
pub mod source;
pub mod spec;
pub mod standards;
pub mod style;
pub mod text;
pub mod units;
pub mod view;

mod pipeline;

pub use pipeline::{Drawn, check, draw};
