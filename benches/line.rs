//! What each stage of the line takes, on a real part and on sheets made to grow.
//!
//! `cargo bench --bench line`. After the table the raster is set against plainly rasterising the
//! same SVG, the two in turns in the same run, so that a busy machine troubles both alike.
#![allow(clippy::print_stdout, reason = "the ratio is for the reader of the run")]

use std::hint::black_box;
use std::sync::Arc;
use std::time::{Duration, Instant};

use divan::Bencher;
use resvg::{tiny_skia, usvg};
use witnessline::Drawn;
use witnessline::geom::{Line, Point, Sheet};
use witnessline::ident::ItemId;
use witnessline::review::{ReviewInput, review};
use witnessline::scene::{
    Item, ItemKind, Mark, PlacedText, Role, Scene, SheetFacts, filled, straight,
};
use witnessline::source::{Diagnostics, SourceMap};
use witnessline::spec::Drawing;
use witnessline::style::{self, Style};
use witnessline::text::Run;
use witnessline::view::{View, drawn_view};

const HOUSING: &str =
    include_str!(concat!(env!("CARGO_MANIFEST_DIR"), "/specs/bearing-housing.toml"));
const DPI: f64 = 300.0;

fn main() {
    divan::main();
    // Cargo says `--bench`; anything else was asked for and wants the table alone.
    if std::env::args().skip(1).all(|a| a == "--bench") {
        raster_ratio();
    }
}

#[divan::bench]
fn style_iso() -> Style {
    iso()
}

#[divan::bench]
fn read() -> Drawing {
    housing()
}

#[divan::bench]
fn views(bencher: Bencher) {
    let drawing = housing();
    bencher.bench(|| views_of(&drawing));
}

#[divan::bench]
fn resolve_and_lay_out(bencher: Bencher) {
    let (drawing, style) = (housing(), iso());
    let views = views_of(&drawing);
    bencher.bench(|| witnessline::layout::lay_out(&drawing, &views, &style));
}

#[divan::bench]
fn compose(bencher: Bencher) {
    let d = drawn();
    bencher.bench(|| witnessline::compose::compose(&d.drawing, &d.layout, &d.style));
}

#[divan::bench]
fn svg(bencher: Bencher) {
    let d = drawn();
    bencher.bench(|| witnessline::render::svg(&d.scenes[0]));
}

#[divan::bench]
fn check_housing(bencher: Bencher) {
    let d = drawn();
    bencher.bench(|| witnessline::check(&d));
}

#[divan::bench(args = [200, 2_000])]
fn check_annotations(bencher: Bencher, count: usize) {
    let (scenes, style) = ([field_of_dimensions(count)], iso());
    let input =
        ReviewInput { scenes: &scenes, style: &style, drawing: None, misfits: &[], conflicts: &[] };
    bencher.bench(|| review(&input));
}

#[divan::bench(sample_count = 10)]
fn png_300_dpi(bencher: Bencher) {
    let svg = witnessline::render::svg(&drawn().scenes[0]);
    bencher.bench(|| ours(&svg));
}

fn iso() -> Style {
    style::builtin("iso").expect("it is compiled in")
}

fn housing() -> Drawing {
    let (mut sources, mut diagnostics) = (SourceMap::default(), Diagnostics::default());
    witnessline::spec::read_text("housing.toml", HOUSING, &mut sources, &mut diagnostics)
        .expect("the example is sound")
}

fn views_of(drawing: &Drawing) -> Vec<View> {
    let mut diagnostics = Diagnostics::default();
    drawing.views.iter().filter_map(|v| drawn_view(v, &mut diagnostics)).collect()
}

fn drawn() -> Drawn {
    witnessline::draw(housing(), &mut Diagnostics::default()).expect("the example is sound")
}

/// A sheet of `count` dimensions in rows of forty; it grows with them, so that each has as many
/// neighbours as on a small one. Every third is dragged into the dimension below it.
fn field_of_dimensions(count: usize) -> Scene {
    const ROW: usize = 40;
    let run = Arc::new(Run::new("24", 3.5));
    let items = (0..count)
        .map(|i| {
            let (column, row) = ((i % ROW) as f64, (i / ROW) as f64);
            let drop = if i % 3 == 0 { 11.0 } else { 0.0 };
            dimension(i, Point::new(20.0 + 30.0 * column, 20.0 + 15.0 * row + drop), &run)
        })
        .collect();
    let sheet = SheetFacts {
        width: 40.0 + 30.0 * ROW as f64,
        height: 60.0 + 15.0 * (count / ROW) as f64,
        number: "FIELD".to_owned(),
        title: String::new(),
        revision: String::new(),
        style: "iso".to_owned(),
        format: "A0".to_owned(),
        index: 1,
        count: 1,
    };
    Scene { sheet, items }
}

/// A horizontal dimension of 24 mm with extension lines, arrowheads and its number.
fn dimension(index: usize, at: Point<Sheet>, run: &Arc<Run>) -> Item {
    let p = |x: f64, y: f64| Point::new(at.x + x, at.y + y);
    let line = |a, b, role| straight(Line::new(a, b), 0.25, Some(role));
    let marks = vec![
        line(p(0.0, -1.0), p(0.0, 8.0), Role::Ext),
        line(p(24.0, -1.0), p(24.0, 8.0), Role::Ext),
        line(p(0.0, 0.0), p(24.0, 0.0), Role::Dim),
        filled(&[p(0.0, 0.0), p(3.0, 0.5), p(3.0, -0.5)], Role::Arrow),
        filled(&[p(24.0, 0.0), p(21.0, 0.5), p(21.0, -0.5)], Role::Arrow),
        Mark::Text(PlacedText::new(run.clone(), p(9.0, -1.0), 0.0)),
    ];
    Item::new(ItemId::new(format!("d{index}")), ItemKind::Dimension, marks)
}

fn ours(svg: &str) -> Vec<u8> {
    let mut file = Vec::new();
    witnessline::render::png(svg, DPI, &mut file).expect("a sheet can be drawn");
    file
}

/// The whole sheet in one image, as the library's documentation shows it.
fn plain(svg: &str) -> tiny_skia::Pixmap {
    let tree = usvg::Tree::from_str(svg, &usvg::Options::default()).expect("we wrote it");
    let scale = (DPI / 96.0) as f32;
    let size = tree.size().to_int_size().scale_by(scale).expect("a sheet has pixels");
    let mut image = tiny_skia::Pixmap::new(size.width(), size.height()).expect("it has memory");
    image.fill(tiny_skia::Color::WHITE);
    resvg::render(&tree, tiny_skia::Transform::from_scale(scale, scale), &mut image.as_mut());
    image
}

/// The image as a PNG of grey, compressed as ours is.
fn encoded(image: &tiny_skia::Pixmap) -> Vec<u8> {
    let grey: Vec<u8> = image.data().chunks_exact(4).map(|p| p[0]).collect();
    let mut file = Vec::new();
    let mut encoder = png::Encoder::new(&mut file, image.width(), image.height());
    encoder.set_color(png::ColorType::Grayscale);
    encoder.set_filter(png::Filter::NoFilter);
    encoder.set_deflate_compression(png::DeflateCompression::Level(6));
    let mut writer = encoder.write_header().expect("memory takes bytes");
    writer.write_image_data(&grey).expect("memory takes bytes");
    drop(writer);
    file
}

fn raster_ratio() {
    const TURNS: usize = 11;
    let svg = witnessline::render::svg(&drawn().scenes[0]);
    let (mut a, mut b, mut c) = (Vec::new(), Vec::new(), Vec::new());
    for _ in 0..TURNS {
        a.push(timed(|| ours(&svg)));
        b.push(timed(|| plain(&svg)));
        c.push(timed(|| encoded(&plain(&svg))));
    }
    let [ours, plain, to_png] = [a, b, c].map(median);
    let ratio = |other: Duration| ours.as_secs_f64() / other.as_secs_f64();
    println!("\nraster of bearing-housing at {DPI} dpi, medians of {TURNS} turns");
    println!("  ours, SVG text to PNG file    {ours:9.2?}");
    println!("  resvg, SVG text to pixels     {plain:9.2?}   ratio {:.2}", ratio(plain));
    println!("  resvg, SVG text to grey PNG   {to_png:9.2?}   ratio {:.2}", ratio(to_png));
}

fn timed<T>(work: impl FnOnce() -> T) -> Duration {
    let start = Instant::now();
    black_box(work());
    start.elapsed()
}

fn median(mut times: Vec<Duration>) -> Duration {
    times.sort();
    times[times.len() / 2]
}
