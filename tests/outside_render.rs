//! Sheets as programs that are not ours see them: an independent XML parser, another rasteriser,
//! and the pixels that a text alone puts on paper.
//!
//! Every check runs over a sheet of its own (all letters, all symbols, texts turned every way) and
//! over all issued sheets in `out/`. What ran and what was skipped is said on stderr, so that a
//! script can count it.

use std::collections::BTreeSet;
use std::fs;
use std::io::{self, Write};
use std::path::{Path as FilePath, PathBuf};
use std::process::{Command, Stdio};
use std::sync::Arc;
use std::time::{Duration, Instant};

use quick_xml::NsReader;
use quick_xml::events::{BytesStart, Event};
use quick_xml::name::ResolveResult;
use resvg::{tiny_skia, usvg};
use witnessline::geom::{self, Cubic, Curve, EllipticArc, Line, Path, Point, Sheet, Vector};
use witnessline::ident::ItemId;
use witnessline::render::{TextMode, png, svg, svg_with};
use witnessline::scene::{
    Item, ItemKind, Mark, PlacedText, Role, Scene, SheetFacts, Stroke, Value, ValueUnit, filled,
    straight,
};
use witnessline::text::{Lettering, Run, Symbol};

/// A sheet to be checked: its name for messages, and the text of its SVG.
struct Issued {
    name: String,
    svg: String,
}

/// The sheets that every check looks at.
fn sheets() -> Vec<Issued> {
    let mut sheets = vec![Issued { name: "specimen".into(), svg: svg(&specimen()) }];
    let out = FilePath::new(env!("CARGO_MANIFEST_DIR")).join("out");
    let mut files: Vec<PathBuf> = fs::read_dir(out)
        .map(|dir| dir.filter_map(|e| e.ok().map(|e| e.path())).collect())
        .unwrap_or_default();
    files.retain(|f| f.extension().is_some_and(|e| e == "svg"));
    files.sort();
    sheets.extend(files.into_iter().map(|f| Issued {
        name: f.display().to_string(),
        svg: fs::read_to_string(&f).expect("an issued sheet is readable text"),
    }));
    sheets
}

/// Past the test harness, which keeps the output of passing tests to itself.
fn report(check: &str, outcome: &str) {
    // One write, so that lines of tests running beside this one do not cut it in two.
    let line = format!("\noutside check: {check}: {outcome}\n");
    let _ = io::stderr().write_all(line.as_bytes());
}

fn p(x: f64, y: f64) -> Point<Sheet> {
    Point::new(x, y)
}

fn text(content: &str, height: f64, at: Point<Sheet>, angle: f64) -> Mark {
    Mark::Text(PlacedText::new(Arc::new(Run::new(content, height)), at, angle))
}

/// A sheet with every letter and symbol, texts at many angles, and every kind of curve.
fn specimen() -> Scene {
    let mut items = vec![frame(), letters(), turned(), curves()];
    items.extend((0..4).map(dimension));
    let sheet = SheetFacts {
        width: 420.0,
        height: 297.0,
        number: "SPECIMEN".into(),
        title: "Letters, symbols & <curves>".into(),
        revision: "A".into(),
        style: "iso".into(),
        format: "A3".into(),
        index: 1,
        count: 1,
    };
    Scene { sheet, items }
}

fn frame() -> Item {
    let corners = [p(20.0, 10.0), p(410.0, 10.0), p(410.0, 287.0), p(20.0, 287.0)];
    let lines = Stroke::new(vec![Path::polyline(&corners, true)], 0.7, None);
    Item::new(ItemId::new("frame"), ItemKind::Frame, vec![Mark::Stroke(lines)])
}

/// All letters of the font in lines of forty, in several heights.
fn letters() -> Item {
    let font = Lettering::bundled();
    let has = |c: &char| font.glyph(*c).is_some() && !c.is_control();
    let mut all: Vec<char> = ('\u{20}'..='\u{2fff}').filter(has).collect();
    all.extend(Symbol::ALL.map(Symbol::to_char));
    let lines = all.chunks(40).enumerate();
    let marks = lines
        .map(|(i, line)| {
            let line: String = line.iter().collect();
            text(&line, [2.5, 3.5, 5.0][i % 3], p(30.0, 20.0 + 8.0 * i as f64), 0.0)
        })
        .collect();
    Item::new(ItemId::new("letters"), ItemKind::Note, marks)
}

fn turned() -> Item {
    let marks = (0..24).map(|i| {
        let angle = f64::from(i) * 15.0;
        text("4×⌀9,5 H7 ↧12", 3.5, p(300.0, 100.0) + Vector::at_angle(angle) * 20.0, angle)
    });
    Item::new(ItemId::new("turned"), ItemKind::Callout, marks.collect())
}

fn curves() -> Item {
    let arc = |x, start, sweep| Curve::Arc(geom::Arc::new(p(x, 250.0), 9.0, start, sweep));
    let ellipse = EllipticArc {
        centre: p(180.0, 250.0),
        radii: (20.0, 6.0),
        turn: 30.0,
        start: 10.0,
        sweep: 300.0,
    };
    let paths = vec![
        Path::of(arc(40.0, 0.0, 360.0)),
        Path::of(arc(65.0, 30.0, 300.0)),
        Path::of(arc(90.0, 30.0, -300.0)),
        Path::of(arc(115.0, 0.0, 180.0)),
        Path::of(Curve::Ellipse(ellipse)),
        Path::of(Curve::Cubic(Cubic([
            p(210.0, 260.0),
            p(220.0, 220.0),
            p(240.0, 280.0),
            p(250.0, 240.0),
        ]))),
        Path::polyline(&[p(260.0, 240.0), p(280.0, 260.0), p(280.0, 240.0)], true),
    ];
    let stroke = Stroke::new(paths, 0.5, None);
    Item::new(ItemId::new("curves"), ItemKind::Outline, vec![Mark::Stroke(stroke)])
}

fn dimension(i: u32) -> Item {
    let (x, y) = (300.0 + 25.0 * f64::from(i), 200.0);
    let (from, to) = (p(x, y), p(x + 20.0, y));
    let marks = vec![
        straight(Line::new(from, to), 0.25, Some(Role::Dim)),
        filled(&[from, p(x + 3.0, y - 0.5), p(x + 3.0, y + 0.5)], Role::Arrow),
        filled(&[to, p(x + 17.0, y - 0.5), p(x + 17.0, y + 0.5)], Role::Arrow),
        text("20", 3.5, p(x + 8.0, y - 0.7), 0.0),
    ];
    let value = Value { nominal: 20.0, limits: (None, None), unit: ValueUnit::Millimetre };
    let item = Item::new(ItemId::new(format!("dimension.{i}")), ItemKind::Dimension, marks);
    Item { value: Some(value), ..item }
}

#[test]
fn an_independent_parser_finds_well_formed_xml_with_unique_ids() {
    let lettered = Issued {
        name: "specimen with its font".into(),
        svg: svg_with(&specimen(), TextMode::Font),
    };
    for sheet in sheets().iter().chain([&lettered]) {
        check_xml(sheet);
    }
    report("well-formed XML by quick-xml", "ran");
}

fn check_xml(sheet: &Issued) {
    let name = &sheet.name;
    let legal = |c: char| matches!(c, '\t' | '\n' | '\r' | ' '..='\u{D7FF}' | '\u{E000}'..='\u{FFFD}' | '\u{10000}'..);
    assert!(sheet.svg.chars().all(legal), "{name}: a character that XML forbids");
    let mut reader = NsReader::from_str(&sheet.svg);
    let mut ids = BTreeSet::new();
    let (mut depth, mut roots) = (0_u32, 0_u32);
    loop {
        let event = reader.read_event().unwrap_or_else(|e| panic!("{name}: {e}"));
        match event {
            Event::Start(e) => {
                roots += u32::from(depth == 0);
                depth += 1;
                check_element(&reader, &e, &mut ids, name);
            }
            Event::Empty(e) => check_element(&reader, &e, &mut ids, name),
            Event::End(_) => depth -= 1,
            Event::Text(t) => {
                let text = t.decode().unwrap_or_else(|e| panic!("{name}: {e}"));
                assert!(depth > 0 || text.trim().is_empty(), "{name}: text outside the root");
            }
            Event::Eof => break,
            Event::Decl(_) | Event::GeneralRef(_) => {}
            other => panic!("{name}: {other:?} has no place in a sheet"),
        }
    }
    assert_eq!((depth, roots), (0, 1), "{name}: one root, closed");
}

fn check_element(
    reader: &NsReader<&[u8]>,
    element: &BytesStart<'_>,
    ids: &mut BTreeSet<String>,
    name: &str,
) {
    let (namespace, local) = reader.resolver().resolve_element(element.name());
    assert!(matches!(namespace, ResolveResult::Bound(_)), "{name}: {local:?} has no namespace");
    for attribute in element.attributes().with_checks(true) {
        let attribute = attribute.unwrap_or_else(|e| panic!("{name}: {e}"));
        let value = attribute.unescape_value().unwrap_or_else(|e| panic!("{name}: {e}"));
        let (prefix, _) = reader.resolver().resolve_attribute(attribute.key);
        assert!(!matches!(prefix, ResolveResult::Unknown(_)), "{name}: {:?}", attribute.key);
        if attribute.key.as_ref() == b"id" {
            assert!(ids.insert(value.to_string()), "{name}: id {value:?} twice");
        }
    }
}

/// Grey levels of an image.
struct Grey {
    width: usize,
    height: usize,
    pixels: Vec<u8>,
}

impl Grey {
    fn of_png(file: &[u8]) -> Self {
        let mut decoder = ::png::Decoder::new(io::Cursor::new(file));
        decoder.set_transformations(::png::Transformations::normalize_to_color8());
        let mut reader = decoder.read_info().expect("it is a PNG");
        let mut bytes = vec![0; reader.output_buffer_size().expect("its size is known")];
        let info = reader.next_frame(&mut bytes).expect("it has its pixels");
        let channels = info.color_type.samples();
        let grey = |px: &[u8]| match px {
            [r, g, b, ..] => ((u32::from(*r) + u32::from(*g) + u32::from(*b)) / 3) as u8,
            [g, ..] => *g,
            [] => 0,
        };
        let pixels = bytes.chunks_exact(channels).map(grey).collect();
        Self { width: info.width as usize, height: info.height as usize, pixels }
    }

    fn at(&self, x: usize, y: usize) -> u8 {
        self.pixels[y * self.width + x]
    }

    /// Darkest and lightest of the nine pixels around a place.
    fn around(&self, x: usize, y: usize) -> (u8, u8) {
        let columns = x.saturating_sub(1)..=(x + 1).min(self.width - 1);
        let rows = y.saturating_sub(1)..=(y + 1).min(self.height - 1);
        let near = rows.flat_map(|y| columns.clone().map(move |x| self.at(x, y)));
        near.fold((255, 0), |(lo, hi), v| (lo.min(v), hi.max(v)))
    }
}

/// How far two rasters of one sheet may differ. Anti-aliasing differs between programs by up to
/// half a pixel's coverage along every edge; anything drawn wrongly differs by whole pixels.
const MEAN_DIFFERENCE: f64 = 1.5;
/// Grey levels beyond what stands within one pixel in the other raster. Strokes of small letters,
/// under two pixels wide at this density, differ by up to a quarter of the scale.
const STRAY: u8 = 72;
const SHARE_OF_STRAYS: f64 = 2e-5;

#[test]
fn another_rasteriser_draws_the_same_picture() {
    let check = "raster against a browser";
    let Some(browser) = browser() else {
        report(check, "skipped (no chromium on PATH)");
        return;
    };
    for sheet in sheets() {
        let (ours, theirs) = match (our_raster(&sheet), browser_raster(&browser, &sheet)) {
            (ours, Ok(theirs)) => (ours, theirs),
            (_, Err(reason)) => {
                report(check, &format!("skipped ({reason})"));
                return;
            }
        };
        compare(&ours, &theirs, &sheet.name);
    }
    report(check, "ran");
}

fn browser() -> Option<PathBuf> {
    let path = std::env::var_os("PATH")?;
    std::env::split_paths(&path).map(|dir| dir.join("chromium")).find(|f| f.is_file())
}

/// Device pixels per CSS pixel.
const DENSITY: f64 = 2.0;

fn our_raster(sheet: &Issued) -> Grey {
    let mut file = Vec::new();
    png(&sheet.svg, 96.0 * DENSITY, &mut file).unwrap_or_else(|e| panic!("{}: {e}", sheet.name));
    Grey::of_png(&file)
}

fn browser_raster(browser: &FilePath, sheet: &Issued) -> Result<Grey, String> {
    let dir = tempfile::tempdir().map_err(|e| e.to_string())?;
    let (page, shot) = (dir.path().join("sheet.svg"), dir.path().join("shot.png"));
    fs::write(&page, &sheet.svg).map_err(|e| e.to_string())?;
    let doc = roxmltree::Document::parse(&sheet.svg).map_err(|e| e.to_string())?;
    let css = |name| {
        let mm: Option<f64> = doc
            .root_element()
            .attribute(name)
            .and_then(|v| v.strip_suffix("mm"))
            .and_then(|v| v.parse().ok());
        mm.map(|mm| (mm / 25.4 * 96.0).ceil()).ok_or_else(|| format!("no {name} in mm"))
    };
    let window = format!("--window-size={},{}", css("width")?, css("height")?);
    let mut running = Command::new(browser)
        .args(["--headless", "--no-sandbox", "--disable-gpu", "--disable-quic"])
        .args(["--no-first-run", "--disable-background-networking", "--disable-component-update"])
        .args(["--disable-sync", "--hide-scrollbars"])
        .arg(format!("--force-device-scale-factor={DENSITY}"))
        .arg(window)
        .arg(format!("--screenshot={}", shot.display()))
        .arg(format!("--user-data-dir={}", dir.path().join("profile").display()))
        .arg(format!("file://{}", page.display()))
        .stdin(Stdio::null())
        .stdout(Stdio::null())
        .stderr(Stdio::null())
        .spawn()
        .map_err(|e| e.to_string())?;
    let deadline = Instant::now() + Duration::from_secs(90);
    while running.try_wait().map_err(|e| e.to_string())?.is_none() {
        if Instant::now() > deadline {
            let _ = running.kill();
            let _ = running.wait();
            return Err("chromium took longer than 90 s".into());
        }
        std::thread::sleep(Duration::from_millis(50));
    }
    let file = fs::read(&shot).map_err(|e| format!("chromium wrote no picture: {e}"))?;
    Ok(Grey::of_png(&file))
}

fn compare(ours: &Grey, theirs: &Grey, name: &str) {
    // The browser's window is rounded up to whole CSS pixels.
    let (w, h) = (ours.width.min(theirs.width), ours.height.min(theirs.height));
    assert!(ours.width - w <= 1 && ours.height - h <= 1, "{name}: sizes differ");
    let (mut sum, mut strays) = (0_u64, 0_u64);
    for y in 0..h {
        for x in 0..w {
            let (a, b) = (ours.at(x, y), theirs.at(x, y));
            sum += u64::from(a.abs_diff(b));
            if a.abs_diff(b) > STRAY {
                let beyond = |v: u8, (lo, hi): (u8, u8)| {
                    v < lo.saturating_sub(STRAY) || v > hi.saturating_add(STRAY)
                };
                strays += u64::from(beyond(a, theirs.around(x, y)) || beyond(b, ours.around(x, y)));
            }
        }
    }
    let pixels = (w * h) as f64;
    let (mean, share) = (sum as f64 / pixels, strays as f64 / pixels);
    let _ = writeln!(io::stderr(), "{name}: mean difference {mean:.3}, strays {share:.1e}");
    assert!(mean <= MEAN_DIFFERENCE, "{name}: grey differs by {mean:.2} in the mean");
    assert!(share <= SHARE_OF_STRAYS, "{name}: {strays} of {pixels} pixels stray");
}

/// Pixels per mm when a text is drawn alone: 0.02 mm each.
const PER_MM: f64 = 50.0;
/// A stated box may be larger than the ink by this, mm.
const LOOSE: f64 = 0.1;

#[test]
fn stated_boxes_of_text_hold_their_ink_closely() {
    for sheet in sheets() {
        check_boxes(&sheet);
    }
    report("text boxes against pixels", "ran");
}

fn check_boxes(sheet: &Issued) {
    let doc = roxmltree::Document::parse(&sheet.svg).expect("another test looks at that");
    let boxed =
        |n: &roxmltree::Node<'_, '_>| n.has_attribute("data-bbox") || n.has_attribute("data-quad");
    for text in doc.descendants().filter(|n| n.tag_name().name() == "text") {
        let run = text.ancestors().find(boxed);
        let run = run.unwrap_or_else(|| panic!("{}: {:?} has no box", sheet.name, text.text()));
        check_box(sheet, &doc, run);
    }
}

/// Draws one run alone, turned so that its box stands square, and compares the two.
fn check_box(sheet: &Issued, doc: &roxmltree::Document<'_>, run: roxmltree::Node<'_, '_>) {
    let words = run.descendants().find(|n| n.tag_name().name() == "text").and_then(|n| n.text());
    let name = format!("{}: {:?}", sheet.name, words.unwrap_or_default());
    let (corner, angle, width, height) = stated_box(run);
    let margin = 1.0;
    let (w, h) = (width + 2.0 * margin, height + 2.0 * margin);
    let source = |n: roxmltree::Node<'_, '_>| &sheet.svg[n.range()];
    let defs = doc.descendants().find(|n| n.has_tag_name(("http://www.w3.org/2000/svg", "defs")));
    let inherited = ["fill", "fill-rule", "stroke", "stroke-linejoin", "stroke-linecap"]
        .map(|a| attribute_text(doc.root_element(), a))
        .concat();
    let alone = format!(
        "<svg xmlns=\"http://www.w3.org/2000/svg\" width=\"{}\" height=\"{}\" \
         viewBox=\"{} {} {w} {h}\"{inherited}>{}\
         <g transform=\"rotate({} {} {})\">{}</g></svg>",
        w * PER_MM,
        h * PER_MM,
        corner.0 - margin,
        corner.1 - margin,
        defs.map_or("", source),
        -angle,
        corner.0,
        corner.1,
        source(run)
    );
    let ink = ink_box(&alone).unwrap_or_else(|| panic!("{name}: no ink"));
    let pixel = 1.0 / PER_MM;
    let stated = [margin, margin, margin + width, margin + height];
    // Positive: the box reaches beyond the ink on that side.
    let beyond = [ink[0] - stated[0], ink[1] - stated[1], stated[2] - ink[2], stated[3] - ink[3]];
    for (side, beyond) in ["left", "top", "right", "bottom"].into_iter().zip(beyond) {
        assert!(beyond > -pixel, "{name}: ink stands {:.3} mm out at the {side}", -beyond);
        assert!(beyond < LOOSE + pixel, "{name}: box stands {beyond:.3} mm off at the {side}");
    }
}

/// First corner, turn as SVG counts it in degrees, width and height of the stated box.
fn stated_box(run: roxmltree::Node<'_, '_>) -> ((f64, f64), f64, f64, f64) {
    let numbers = |text: &str| -> Vec<f64> {
        text.split(' ').map(|n| n.parse().expect("a stated box holds numbers")).collect()
    };
    if let Some(text) = run.attribute("data-bbox") {
        let n = numbers(text);
        assert_eq!(n.len(), 4, "{text}");
        return ((n[0], n[1]), 0.0, n[2] - n[0], n[3] - n[1]);
    }
    let n = numbers(run.attribute("data-quad").expect("one of the two was found"));
    assert_eq!(n.len(), 8);
    let (along, down) = ((n[2] - n[0], n[3] - n[1]), (n[6] - n[0], n[7] - n[1]));
    let turn = along.1.atan2(along.0).to_degrees();
    ((n[0], n[1]), turn, along.0.hypot(along.1), down.0.hypot(down.1))
}

fn attribute_text(node: roxmltree::Node<'_, '_>, name: &str) -> String {
    node.attribute(name).map_or_else(String::new, |v| format!(" {name}=\"{v}\""))
}

/// Left, top, right and bottom of the ink of a drawing in mm from its upper left corner.
fn ink_box(svg: &str) -> Option<[f64; 4]> {
    let tree = usvg::Tree::from_str(svg, &usvg::Options::default()).expect("it is an SVG");
    let size = tree.size().to_int_size();
    let mut pixmap = tiny_skia::Pixmap::new(size.width(), size.height()).expect("a small picture");
    resvg::render(&tree, tiny_skia::Transform::identity(), &mut pixmap.as_mut());
    let mut found: Option<[u32; 4]> = None;
    for (i, pixel) in pixmap.pixels().iter().enumerate() {
        // A twentieth of a pixel covered.
        if pixel.alpha() >= 13 {
            let (x, y) = (i as u32 % size.width(), i as u32 / size.width());
            let b = found.get_or_insert([x, y, x + 1, y + 1]);
            *b = [b[0].min(x), b[1].min(y), b[2].max(x + 1), b[3].max(y + 1)];
        }
    }
    found.map(|b| b.map(|v| f64::from(v) / PER_MM))
}
