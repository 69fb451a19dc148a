//! The bundled font: glyph numbers, advances, outlines and ink boxes in shares of the capital
//! height.

use std::sync::{LazyLock, OnceLock};

use kurbo::{BezPath, Shape};
use skrifa::instance::{LocationRef, Size};
use skrifa::outline::{DrawSettings, OutlinePen};
use skrifa::{FontRef, MetadataProvider};

/// The font file that every sheet is lettered with.
pub const FONT_TTF: &[u8] = include_bytes!("font/witnessline-lettering.ttf");
/// The same font, compressed for embedding in an SVG.
pub const FONT_WOFF2: &[u8] = include_bytes!("font/witnessline-lettering.woff2");
/// Family name of the font.
pub const FAMILY: &str = "Witnessline Lettering";

/// Number of a glyph in the bundled font.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub struct GlyphId(pub u16);

/// The bundled font, opened. All lengths are shares of the capital height h, y up from the base
/// line: multiply by the letter height in mm.
pub struct Lettering {
    font: FontRef<'static>,
    units_per_h: f64,
    units_per_em: f64,
    /// Advance and ink of each glyph, looked up once: a layout measures hundreds of texts.
    measures: Vec<OnceLock<Measure>>,
}

/// Advance and ink box of a glyph in h.
#[derive(Clone, Copy)]
struct Measure {
    advance: f64,
    ink: Option<kurbo::Rect>,
}

static BUNDLED: LazyLock<Lettering> = LazyLock::new(|| {
    let font = FontRef::new(FONT_TTF).expect("the bundled font is a sound TrueType file");
    let metrics = font.metrics(Size::unscaled(), LocationRef::default());
    let cap = metrics.cap_height.map_or(735.0, f64::from);
    Lettering {
        font,
        units_per_h: cap,
        units_per_em: f64::from(metrics.units_per_em),
        measures: (0..metrics.glyph_count).map(|_| OnceLock::new()).collect(),
    }
});

impl Lettering {
    /// The bundled font.
    #[must_use]
    pub fn bundled() -> &'static Self {
        &BUNDLED
    }

    /// The glyph of a character; `None` if the font lacks it.
    #[must_use]
    pub fn glyph(&self, c: char) -> Option<GlyphId> {
        let id = self.font.charmap().map(c)?;
        u16::try_from(id.to_u32()).ok().map(GlyphId)
    }

    /// The glyph drawn for characters that the font lacks.
    #[must_use]
    pub fn missing(&self) -> GlyphId {
        GlyphId(0)
    }

    /// Advance width of a glyph in h.
    #[must_use]
    pub fn advance(&self, glyph: GlyphId) -> f64 {
        self.measure(glyph).advance
    }

    fn measure(&self, glyph: GlyphId) -> Measure {
        let read = || {
            let metrics = self.font.glyph_metrics(Size::unscaled(), LocationRef::default());
            let units = metrics.advance_width(skrifa::GlyphId::new(u32::from(glyph.0)));
            let outline = self.outline(glyph);
            Measure {
                advance: f64::from(units.unwrap_or(0.0)) / self.units_per_h,
                ink: (!outline.elements().is_empty()).then(|| outline.bounding_box()),
            }
        };
        // Numbers beyond the font's glyphs measure as nothing.
        self.measures.get(usize::from(glyph.0)).map_or_else(read, |m| *m.get_or_init(read))
    }

    /// Outline of a glyph in h, y up, origin on the base line; empty for a blank.
    #[must_use]
    pub fn outline(&self, glyph: GlyphId) -> BezPath {
        let mut pen = Pen { path: BezPath::new(), per_h: self.units_per_h };
        if let Some(outline) =
            self.font.outline_glyphs().get(skrifa::GlyphId::new(u32::from(glyph.0)))
        {
            // Drawing an unhinted outline of a sound font cannot fail; a failure leaves a blank.
            let _ = outline
                .draw(DrawSettings::unhinted(Size::unscaled(), LocationRef::default()), &mut pen);
        }
        pen.path
    }

    /// Ink box of a glyph in h, y up; `None` for a blank.
    #[must_use]
    pub fn ink(&self, glyph: GlyphId) -> Option<kurbo::Rect> {
        self.measure(glyph).ink
    }

    /// Font size (em) for letters of capital height `h`, in the unit of `h`.
    #[must_use]
    pub fn font_size(&self, h: f64) -> f64 {
        h * self.units_per_em / self.units_per_h
    }
}

struct Pen {
    path: BezPath,
    per_h: f64,
}

impl Pen {
    fn at(&self, x: f32, y: f32) -> kurbo::Point {
        kurbo::Point::new(f64::from(x) / self.per_h, f64::from(y) / self.per_h)
    }
}

impl OutlinePen for Pen {
    fn move_to(&mut self, x: f32, y: f32) {
        self.path.move_to(self.at(x, y));
    }
    fn line_to(&mut self, x: f32, y: f32) {
        self.path.line_to(self.at(x, y));
    }
    fn quad_to(&mut self, cx: f32, cy: f32, x: f32, y: f32) {
        self.path.quad_to(self.at(cx, cy), self.at(x, y));
    }
    fn curve_to(&mut self, ax: f32, ay: f32, bx: f32, by: f32, x: f32, y: f32) {
        self.path.curve_to(self.at(ax, ay), self.at(bx, by), self.at(x, y));
    }
    fn close(&mut self) {
        self.path.close_path();
    }
}
