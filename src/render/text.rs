//! Runs of text in an SVG: shared glyph outlines, and over them text that can be searched and
//! selected.
//!
//! ```xml
//! <g data-bbox="…">                                 the ink of the run in sheet mm
//!   <g transform="translate(…) scale(3.5)"><use …/></g>  what is seen
//!   <text … fill-opacity="0" textLength="…">…</text>     what is found and copied
//! </g>
//! ```
//!
//! Outlines look the same in every viewer, whatever fonts it has and believes in. The box belongs
//! to the outer group, which has no transform of its own: whoever moves that group moves the box
//! with it.

use std::collections::BTreeSet;

use svg::node::Blob;
use svg::node::element::Element;

use super::number;
use super::path_data::outline_data;
use super::svg::{BLACK, TextMode, append, colour, element, set, text_element};
use crate::geom::{Point, Quad, Sheet};
use crate::scene::{PlacedText, Scene};
use crate::text::{GlyphId, Lettering, PieceKind, Run, Symbol};

/// Glyph outlines are written in thousandths of the letter height, so that they need few digits.
const OUTLINE_UNITS: f64 = 1000.0;
/// How far the ink of a run may stray from its measure because its parts are placed by rounded
/// numbers, mm; the written box is that much larger.
const ROUNDING: f64 = 1e-3;

/// The glyphs and symbols that a sheet uses, and their ids in the file.
pub(super) struct GlyphDefs {
    glyphs: BTreeSet<GlyphId>,
    symbols: BTreeSet<Symbol>,
    prefix: String,
}

impl GlyphDefs {
    /// Those of a scene. Ids are made so that they clash with no item's.
    pub(super) fn of(scene: &Scene) -> Self {
        let (mut glyphs, mut symbols) = (BTreeSet::new(), BTreeSet::new());
        for piece in scene.items.iter().flat_map(|i| i.texts()).flat_map(|t| &t.run.pieces) {
            match piece.kind {
                PieceKind::Glyph(g) => _ = glyphs.insert(g),
                PieceKind::Symbol(s) => _ = symbols.insert(s),
            }
        }
        let mut prefix = "g".to_owned();
        while scene.items.iter().any(|i| i.id.as_str().starts_with(&prefix)) {
            prefix.insert(0, '_');
        }
        Self { glyphs, symbols, prefix }
    }

    fn id(&self, kind: PieceKind) -> String {
        match kind {
            PieceKind::Glyph(g) => format!("{}{}", self.prefix, g.0),
            PieceKind::Symbol(s) => format!("{}u{:x}", self.prefix, u32::from(s.to_char())),
        }
    }

    /// The `<defs>` of the file; glyphs only where they are used as outlines.
    pub(super) fn element(&self, mode: TextMode) -> Element {
        let mut defs = element("defs", &[]);
        if mode == TextMode::Outlines {
            for g in &self.glyphs {
                append(&mut defs, self.glyph(*g));
            }
        }
        for s in &self.symbols {
            append(&mut defs, self.symbol(*s));
        }
        defs
    }

    fn glyph(&self, glyph: GlyphId) -> Element {
        let outline = Lettering::bundled().outline(glyph);
        element(
            "path",
            &[
                ("id", &self.id(PieceKind::Glyph(glyph))),
                ("transform", &format!("scale({})", number::factor(1.0 / OUTLINE_UNITS))),
                ("fill-rule", "nonzero"),
                ("stroke", "none"),
                ("d", &outline_data(&outline, OUTLINE_UNITS, 1)),
            ],
        )
    }

    fn symbol(&self, symbol: Symbol) -> Element {
        let ink = symbol.ink();
        let mut group = element("g", &[("id", &self.id(PieceKind::Symbol(symbol)))]);
        if !ink.strokes.elements().is_empty() {
            let strokes = [
                ("d", &*outline_data(&ink.strokes, 1.0, 4)),
                ("fill", "none"),
                ("stroke-width", &number::factor(Symbol::STROKE)),
                ("stroke-linecap", "round"),
                ("stroke-linejoin", "round"),
            ];
            append(&mut group, element("path", &strokes));
        }
        if !ink.fills.elements().is_empty() {
            let fills = [("d", &*outline_data(&ink.fills, 1.0, 4)), ("stroke", "none")];
            append(&mut group, element("path", &fills));
        }
        group
    }
}

/// The group of one run of text.
pub(super) fn text_group(text: &PlacedText, defs: &GlyphDefs, mode: TextMode) -> Element {
    let (name, value) = ink_attribute(text);
    let mut group = element("g", &[(name, &value)]);
    if let Some(value) = &text.value {
        super::svg::set_value(&mut group, value);
    }
    if let Some(drawn) = drawn_pieces(text, defs, mode) {
        append(&mut group, drawn);
    }
    match mode {
        TextMode::Outlines => append(&mut group, laid_over(text)),
        TextMode::Font => append(&mut group, lettered(text)),
    }
    group
}

/// Where the ink is: `data-bbox` where the text stands square to the sheet, else `data-quad`.
fn ink_attribute(text: &PlacedText) -> (&'static str, String) {
    let run = Run { ink: text.run.ink.grown(ROUNDING), ..Run::clone(&text.run) };
    let origin = Point::new(number::rounded(text.origin.x), number::rounded(text.origin.y));
    let quad: Quad<Sheet> = run.quad(origin, text.angle);
    let quarter_turns = text.angle / 90.0;
    if (quarter_turns - quarter_turns.round()).abs() < 1e-9 {
        let b = quad.bounds();
        let sides = [
            number::below(b.min.x),
            number::below(b.min.y),
            number::above(b.max.x),
            number::above(b.max.y),
        ];
        ("data-bbox", sides.join(" "))
    } else {
        let corners = quad.0.map(|p| format!("{} {}", number::length(p.x), number::length(p.y)));
        ("data-quad", corners.join(" "))
    }
}

fn drawn_pieces(text: &PlacedText, defs: &GlyphDefs, mode: TextMode) -> Option<Element> {
    let h = text.run.height;
    let mut uses = String::new();
    for piece in &text.run.pieces {
        if matches!(piece.kind, PieceKind::Glyph(_)) && mode == TextMode::Font {
            continue;
        }
        if !uses.is_empty() {
            uses.push('\n');
        }
        let x = number::written(piece.x / h, 5);
        uses.push_str(&format!("<use href=\"#{}\" x=\"{x}\"/>", defs.id(piece.kind)));
    }
    if uses.is_empty() {
        return None;
    }
    let mut transform =
        format!("translate({} {})", number::length(text.origin.x), number::length(text.origin.y));
    let turn = turn(text);
    if turn != "0" {
        transform.push_str(&format!(" rotate({turn})"));
    }
    transform.push_str(&format!(" scale({})", number::factor(h)));
    let mut group =
        element("g", &[("transform", &transform), ("fill", colour(text.ink).unwrap_or(BLACK))]);
    if let Some(c) = colour(text.ink) {
        set(&mut group, "stroke", c);
    }
    append(&mut group, Blob::new(uses));
    Some(group)
}

/// The transparent text over the outlines, stretched to their width.
fn laid_over(text: &PlacedText) -> Element {
    let mut over = placed(text_element("text", &text.run.text), text);
    let own = [
        ("textLength", &*number::length(text.run.advance)),
        ("lengthAdjust", "spacingAndGlyphs"),
        ("fill", BLACK),
        ("fill-opacity", "0"),
    ];
    for (name, value) in own {
        set(&mut over, name, value);
    }
    over
}

/// The text set in the embedded font; characters that are drawn as symbols are there to be found
/// only.
fn lettered(text: &PlacedText) -> Blob {
    let mut over = placed(element("text", &[]), text);
    set(&mut over, "fill", colour(text.ink).unwrap_or(BLACK));
    let mut spans = String::new();
    let mut from = 0.0;
    for (symbols, part) in same_kind(&text.run.text) {
        let x = number::length(number::rounded(text.origin.x) + from);
        let mut span = text_element("tspan", part);
        set(&mut span, "x", &x);
        if symbols {
            set(&mut span, "fill-opacity", "0");
        }
        spans.push_str(&span.to_string());
        from += Run::new(part, text.run.height).advance;
    }
    // Put together by hand: line ends between the spans would show as blanks.
    let empty = over.to_string();
    let open = empty.strip_suffix("/>").unwrap_or(&empty);
    Blob::new(format!("{open}>{spans}</text>"))
}

/// `text` cut where letters and symbols alternate; `true` for symbols.
fn same_kind(text: &str) -> Vec<(bool, &str)> {
    let mut parts = Vec::new();
    let mut start = 0;
    let is_symbol = |c: char| Symbol::of_char(c).is_some();
    for (at, c) in text.char_indices() {
        let next = at + c.len_utf8();
        let after = text[next..].chars().next();
        if after.is_none_or(|a| is_symbol(a) != is_symbol(c)) {
            parts.push((is_symbol(c), &text[start..next]));
            start = next;
        }
    }
    parts
}

fn placed(mut over: Element, text: &PlacedText) -> Element {
    let (x, y) = (number::length(text.origin.x), number::length(text.origin.y));
    let turn = turn(text);
    if turn != "0" {
        set(&mut over, "transform", &format!("rotate({turn} {x} {y})"));
    }
    let size = number::factor(Lettering::bundled().font_size(text.run.height));
    let own = [
        ("font-size", &*size),
        ("x", &x),
        ("y", &y),
        ("stroke", "none"),
        ("xml:space", "preserve"),
    ];
    for (name, value) in own {
        set(&mut over, name, value);
    }
    over
}

/// The run's angle as SVG turns, clockwise.
fn turn(text: &PlacedText) -> String {
    let angle = (-text.angle).rem_euclid(360.0);
    number::factor(if angle > 180.0 { angle - 360.0 } else { angle })
}
