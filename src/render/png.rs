//! The PNG of a sheet, rasterised from the text of its SVG.
//!
//! Takes the SVG that is issued, so that both show the same; gives a PNG on a white ground, grey
//! unless the sheet has colour, with its resolution written inside. It works in bands of rows:
//! an A0 sheet at 300 dpi never stands in memory as a whole. Text elements are not drawn (letters
//! are outlines; a sheet whose letters are none is refused), nothing is read from disk or network, and images are ignored.

use std::io::{self, Write};
use std::sync::mpsc;

use resvg::{tiny_skia, usvg};
use tiny_skia::{Color, Pixmap, Transform};

/// Rows per band. A constant, because anti-aliasing differs in a few pixels along the seams: the
/// same sheet shall give the same bytes on every machine. 512 rows of A0 at 300 dpi are 29 MB.
const BAND: u32 = 512;
/// How far anti-aliasing may reach beyond a box, pixels.
const SMEAR: f32 = 2.0;
/// CSS pixels per inch, the unit that usvg measures sheets in.
const CSS_DPI: f64 = 96.0;
const MM_PER_INCH: f64 = 25.4;
/// Longest side of a sheet in mm; the longest elongated sheet of ISO 5457 is 2523 mm.
const LONGEST_SIDE: f64 = 5000.0;
/// Resolutions that a raster may have.
const DPI: std::ops::RangeInclusive<f64> = 10.0..=2400.0;
/// Most XML nodes of an SVG.
const MOST_NODES: u32 = 2_000_000;
/// Most pixels of an image: A0 at 1200 dpi has 2.2 thousand million.
const MOST_PIXELS: u64 = 4_000_000_000;

/// Deflate level. Line drawings compress best unfiltered; on two A3 sheets at 300 dpi level 6 was
/// smaller than level 4 by a tenth and cost 3 % more time.
const LEVEL: u8 = 6;
/// Bytes per IDAT chunk.
const CHUNK: usize = 1 << 16;

/// What was written.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct PngFacts {
    /// Width in pixels.
    pub width: u32,
    /// Height in pixels.
    pub height: u32,
    /// What its pixels hold.
    pub colour: Colour,
}

/// What the pixels of an image hold.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Colour {
    /// One byte of grey.
    Grey,
    /// Red, green and blue.
    Rgb,
}

/// Why there is no raster of a sheet.
#[derive(Debug, thiserror::Error)]
pub enum RasterError {
    /// The text is no SVG.
    #[error("this is no SVG that can be drawn: {0}")]
    Svg(String),
    /// Its letters are text in a font, not outlines, and would be missing.
    #[error("its text is set in a font: rasterise the SVG with letters as outlines")]
    Font,
    /// The resolution is out of range.
    #[error("a resolution of {0} dpi is out of range: give {lo} to {hi} dpi", lo = DPI.start(), hi = DPI.end())]
    Dpi(f64),
    /// The sheet is too large.
    #[error(
        "a sheet of {width:.0} × {height:.0} mm is too large to be drawn: no side may be longer than {LONGEST_SIDE} mm"
    )]
    Sheet {
        /// Width in mm.
        width: f64,
        /// Height in mm.
        height: f64,
    },
    /// The image would have too many pixels, or none.
    #[error(
        "an image of {width} × {height} pixels cannot be written: choose another resolution than {dpi} dpi"
    )]
    Pixels {
        /// Width in pixels.
        width: u64,
        /// Height in pixels.
        height: u64,
        /// The resolution asked for.
        dpi: f64,
    },
    /// The image could not be written.
    #[error("the image could not be written: {0}")]
    Write(#[from] io::Error),
}

/// Rasterises the text of an SVG at `dpi` dots per inch (10 to 2400) into a PNG.
///
/// # Errors
/// [`RasterError`] if the text is no SVG, the sheet or the resolution is beyond the limits, or
/// `out` refuses the bytes.
pub fn png(svg: &str, dpi: f64, out: impl Write) -> Result<PngFacts, RasterError> {
    if !DPI.contains(&dpi) {
        return Err(RasterError::Dpi(dpi));
    }
    let tree = tree(svg)?;
    let facts = facts(&tree, dpi)?;
    let mut encoder = ::png::Encoder::new(out, facts.width, facts.height);
    encoder.set_color(match facts.colour {
        Colour::Grey => ::png::ColorType::Grayscale,
        Colour::Rgb => ::png::ColorType::Rgb,
    });
    encoder.set_depth(::png::BitDepth::Eight);
    encoder.set_filter(::png::Filter::NoFilter);
    encoder.set_deflate_compression(::png::DeflateCompression::Level(LEVEL));
    encoder.set_pixel_dims(Some(pixel_dims(dpi)));
    let mut writer = encoder.write_header().map_err(write_error)?;
    let mut stream = writer.stream_writer_with_size(CHUNK).map_err(write_error)?;
    write_bands(&tree, (dpi / CSS_DPI) as f32, &facts, &mut stream)?;
    stream.finish().map_err(write_error)?;
    writer.finish().map_err(write_error)?;
    Ok(facts)
}

fn tree(svg: &str) -> Result<usvg::Tree, RasterError> {
    let parsing = roxmltree::ParsingOptions { nodes_limit: MOST_NODES, ..Default::default() };
    let doc = roxmltree::Document::parse_with_options(svg, parsing)
        .map_err(|e| RasterError::Svg(e.to_string()))?;
    let seen = |n: &roxmltree::Node<'_, '_>| {
        n.tag_name().name() == "text" && n.attribute("fill-opacity") != Some("0")
    };
    if doc.descendants().any(|n| seen(&n)) {
        return Err(RasterError::Font);
    }
    let options = usvg::Options {
        image_href_resolver: usvg::ImageHrefResolver {
            resolve_data: Box::new(|_, _, _| None),
            resolve_string: Box::new(|_, _| None),
        },
        ..usvg::Options::default()
    };
    usvg::Tree::from_xmltree(&doc, &options).map_err(|e| RasterError::Svg(e.to_string()))
}

fn facts(tree: &usvg::Tree, dpi: f64) -> Result<PngFacts, RasterError> {
    let mm = |css: f32| f64::from(css) / CSS_DPI * MM_PER_INCH;
    let (width, height) = (mm(tree.size().width()), mm(tree.size().height()));
    if !(width <= LONGEST_SIDE && height <= LONGEST_SIDE) {
        return Err(RasterError::Sheet { width, height });
    }
    let pixels = |mm: f64| (mm / MM_PER_INCH * dpi).round() as u64;
    let (w, h) = (pixels(width), pixels(height));
    match (u32::try_from(w), u32::try_from(h)) {
        (Ok(width), Ok(height)) if w > 0 && h > 0 && w * h <= MOST_PIXELS => {
            let colour = if has_colour(tree.root()) { Colour::Rgb } else { Colour::Grey };
            Ok(PngFacts { width, height, colour })
        }
        _ => Err(RasterError::Pixels { width: w, height: h, dpi }),
    }
}

fn has_colour(group: &usvg::Group) -> bool {
    let coloured = |paint: &usvg::Paint| match paint {
        usvg::Paint::Color(c) => c.red != c.green || c.green != c.blue,
        usvg::Paint::LinearGradient(_)
        | usvg::Paint::RadialGradient(_)
        | usvg::Paint::Pattern(_) => true,
    };
    group.children().iter().any(|node| match node {
        usvg::Node::Group(g) => has_colour(g),
        usvg::Node::Path(p) => {
            p.fill().is_some_and(|f| coloured(f.paint()))
                || p.stroke().is_some_and(|s| coloured(s.paint()))
        }
        usvg::Node::Image(_) | usvg::Node::Text(_) => false,
    })
}

fn pixel_dims(dpi: f64) -> ::png::PixelDimensions {
    let per_metre = (dpi / MM_PER_INCH * 1000.0).round() as u32;
    ::png::PixelDimensions { xppu: per_metre, yppu: per_metre, unit: ::png::Unit::Meter }
}

/// Draws one band while the one before is compressed: the two take about as long as each other.
fn write_bands(
    tree: &usvg::Tree,
    scale: f32,
    facts: &PngFacts,
    out: &mut impl Write,
) -> Result<(), RasterError> {
    std::thread::scope(|scope| {
        // Without a buffer: no more than two bands stand in memory.
        let (done, bands) = mpsc::sync_channel(0);
        std::thread::Builder::new().spawn_scoped(scope, move || {
            for top in (0..facts.height).step_by(BAND as usize) {
                let band = draw_band(tree, scale, facts, top);
                // Whoever no longer listens has met an error of its own.
                if done.send(band).is_err() {
                    break;
                }
            }
        })?;
        for band in bands {
            write_rows(&band?, facts.colour, out)?;
        }
        Ok(())
    })
}

fn write_rows(band: &Pixmap, colour: Colour, out: &mut impl Write) -> Result<(), RasterError> {
    let mut row = Vec::with_capacity(band.width() as usize * 3);
    for pixels in band.data().chunks_exact(band.width() as usize * 4) {
        row.clear();
        match colour {
            Colour::Grey => row.extend(pixels.chunks_exact(4).map(|p| p[0])),
            Colour::Rgb => row.extend(pixels.chunks_exact(4).flat_map(|p| &p[..3])),
        }
        out.write_all(&row)?;
    }
    Ok(())
}

/// Draws the rows from `top` on; items that do not reach into them are passed over, because
/// outlining their strokes again for every band would cost more than all the rest.
fn draw_band(
    tree: &usvg::Tree,
    scale: f32,
    facts: &PngFacts,
    top: u32,
) -> Result<Pixmap, RasterError> {
    let rows = BAND.min(facts.height - top);
    let mut band = Pixmap::new(facts.width, rows)
        .ok_or_else(|| io::Error::new(io::ErrorKind::OutOfMemory, "a band of rows is too wide"))?;
    band.fill(Color::WHITE);
    let (first, last) = (top as f32, (top + rows) as f32);
    let transform = Transform::from_scale(scale, scale).post_translate(0.0, -first);
    for node in tree.root().children() {
        let Some(ink) = node.abs_layer_bounding_box() else { continue };
        if ink.bottom() * scale + SMEAR < first || ink.top() * scale - SMEAR > last {
            continue;
        }
        // `render_node` puts the node's upper left corner at the origin; this puts it back.
        resvg::render_node(node, transform.pre_translate(ink.x(), ink.y()), &mut band.as_mut());
    }
    Ok(band)
}

fn write_error(e: ::png::EncodingError) -> RasterError {
    match e {
        ::png::EncodingError::IoError(e) => RasterError::Write(e),
        other => RasterError::Write(io::Error::other(other)),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn sheet(width: f64, height: f64, body: &str) -> String {
        format!(
            "<svg xmlns=\"http://www.w3.org/2000/svg\" width=\"{width}mm\" height=\"{height}mm\" \
             viewBox=\"0 0 {width} {height}\">{body}</svg>"
        )
    }

    fn drawn(svg: &str, dpi: f64) -> (::png::OutputInfo, Vec<u8>, Option<::png::PixelDimensions>) {
        let mut file = Vec::new();
        png(svg, dpi, &mut file).expect("a small sheet can be drawn");
        let mut reader =
            ::png::Decoder::new(io::Cursor::new(file)).read_info().expect("a PNG was written");
        let dims = reader.info().pixel_dims;
        let mut pixels = vec![0; reader.output_buffer_size().expect("its size is known")];
        let info = reader.next_frame(&mut pixels).expect("it has its pixels");
        (info, pixels, dims)
    }

    #[test]
    fn an_a3_sheet_at_300_dpi_has_the_pixels_of_its_size() {
        let (info, _, dims) = drawn(&sheet(420.0, 297.0, ""), 300.0);
        // 420/25.4·300 = 4960.6, 297/25.4·300 = 3507.9; 300/0.0254 = 11811.02 per metre.
        assert_eq!((info.width, info.height), (4961, 3508));
        let dims = dims.expect("the resolution is inside");
        assert_eq!((dims.xppu, dims.yppu, dims.unit), (11811, 11811, ::png::Unit::Meter));
    }

    #[test]
    fn ink_covers_the_area_of_its_geometry_across_bands() {
        // A ring of radius 20 and width 0.5 over a seam: area 2π·20·0.5 = 62.83 mm².
        let (dpi, per_mm) = (508.0, 20.0);
        let rows = f64::from(BAND) / per_mm;
        let body = format!(
            "<circle cx=\"30\" cy=\"{rows}\" r=\"20\" fill=\"none\" stroke=\"#000\" \
             stroke-width=\"0.5\"/>"
        );
        let (_, pixels, _) = drawn(&sheet(60.0, 60.0, &body), dpi);
        let ink: f64 = pixels.iter().map(|g| f64::from(255 - g) / 255.0).sum();
        let area = ink / per_mm / per_mm;
        let exact = 2.0 * std::f64::consts::PI * 20.0 * 0.5;
        assert!((area - exact).abs() / exact < 0.01, "{area} mm², {exact} mm² by geometry");
    }

    #[test]
    fn items_beside_a_band_are_passed_over_and_no_others() {
        // One square per millimetre of height, each fully black at 10 pixels per mm.
        let squares: String =
            (0..150).map(|y| format!("<g id=\"s{y}\"><path d=\"M0 {y}h1v1h-1z\"/></g>")).collect();
        let (info, pixels, _) = drawn(&sheet(2.0, 150.0, &squares), 254.0);
        for row in pixels.chunks_exact(info.line_size) {
            assert!(row[..10].iter().all(|g| *g == 0) && row[10..].iter().all(|g| *g == 255));
        }
    }

    #[test]
    fn colour_is_kept_where_there_is_some() {
        let body = "<rect width=\"5\" height=\"5\" fill=\"#d00000\"/>";
        let (info, pixels, _) = drawn(&sheet(10.0, 10.0, body), 254.0);
        assert_eq!(info.color_type, ::png::ColorType::Rgb);
        assert_eq!(pixels[..3], [0xd0, 0, 0]);
        let (info, ..) = drawn(&sheet(10.0, 10.0, "<rect width=\"5\" height=\"5\"/>"), 254.0);
        assert_eq!(info.color_type, ::png::ColorType::Grayscale);
    }

    #[test]
    fn no_file_is_read_and_no_image_is_drawn() {
        let image = std::env::current_dir().expect("there is one").join("Cargo.toml");
        let body = format!("<image href=\"{}\" width=\"9\" height=\"9\"/>", image.display());
        let (_, pixels, _) = drawn(&sheet(10.0, 10.0, &body), 254.0);
        assert!(pixels.iter().all(|g| *g == 255));
    }

    #[test]
    fn what_cannot_be_drawn_is_refused_with_its_reason() {
        let refused = |svg: &str, dpi| png(svg, dpi, Vec::new()).expect_err("it is beyond a limit");
        let small = sheet(10.0, 10.0, "");
        assert!(matches!(refused("<svg", 300.0), RasterError::Svg(_)));
        assert!(matches!(refused(&small, 1e9), RasterError::Dpi(_)));
        assert!(matches!(refused(&small, f64::NAN), RasterError::Dpi(_)));
        assert!(matches!(refused(&sheet(1e30, 10.0, ""), 300.0), RasterError::Sheet { .. }));
        assert!(matches!(refused(&sheet(4e3, 4e3, ""), 2400.0), RasterError::Pixels { .. }));
        assert!(matches!(refused(&sheet(0.01, 9.0, ""), 10.0), RasterError::Pixels { .. }));
        let lettered = sheet(10.0, 10.0, "<text>42</text>");
        assert!(matches!(refused(&lettered, 300.0), RasterError::Font));
    }

    #[test]
    fn a_full_disk_ends_the_work_with_its_error() {
        struct Full(usize);
        impl Write for Full {
            fn write(&mut self, bytes: &[u8]) -> io::Result<usize> {
                self.0 = self.0.checked_sub(bytes.len()).ok_or(io::ErrorKind::StorageFull)?;
                Ok(bytes.len())
            }
            fn flush(&mut self) -> io::Result<()> {
                Ok(())
            }
        }
        let e = png(&sheet(420.0, 297.0, ""), 300.0, Full(2000)).expect_err("the disk is full");
        assert!(matches!(e, RasterError::Write(_)), "{e}");
        assert!(e.to_string().contains(&io::ErrorKind::StorageFull.to_string()), "{e}");
    }
}
