//! Where things come from: source files, places in them, the outside world, and diagnostics.
//!
//! Files and today's date reach the program through the [`World`] trait alone, so the pipeline can
//! be tested without a disk or a clock. Diagnostics are collected in a [`Diagnostics`] sink, which
//! only takes; [`render`](render::render) turns them into text and nothing else does.

mod diagnostic;
mod nearest;
pub mod render;
mod world;

pub use diagnostic::{Diagnostic, Diagnostics, Level};
pub use nearest::nearest;
pub use world::{Disk, FileId, Source, SourceMap, Span, World, WorldError};
