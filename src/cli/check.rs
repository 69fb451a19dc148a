//! `check`: what a checker would mark, on a spec's sheet or on an issued SVG.

use std::path::{Path, PathBuf};

use clap::ValueEnum;
use rayon::prelude::*;

use super::files::{WriteError, folder, write_whole};
use super::job::Job;
use super::{FailOn, Outcome, print};
use crate::geom::{Point, Sheet};
use crate::render;
use crate::review::report::{self, Places};
use crate::review::{Review, ReviewInput, review};
use crate::scene::{Scene, read_svg};
use crate::source::{Disk, SourceMap, World};
use crate::style::{self, Style};

/// Options of `check`.
#[derive(Debug, clap::Args)]
#[command(after_help = "Examples:\n  witnessline check specs/crowded.toml --marked out\n  \
    witnessline check out/BH-2041.svg --as json")]
pub(super) struct Options {
    /// Specs, or issued SVG files.
    #[arg(required = true)]
    files: Vec<PathBuf>,
    /// How to report; `json` prints an object for one file, a list for several.
    #[arg(long = "as", value_enum, default_value_t = ReportAs::Text)]
    report: ReportAs,
    /// Folder for the sheets with numbered findings, as SVG and PNG.
    #[arg(long, value_name = "DIR")]
    marked: Option<PathBuf>,
    /// Pixels per inch of the marked-up PNG.
    #[arg(long, default_value_t = 150.0, value_parser = super::resolution)]
    dpi: f64,
    /// Findings from this severity on end with exit code 1.
    #[arg(long, value_enum, default_value_t = FailOn::Must)]
    fail_on: FailOn,
}

#[derive(Clone, Copy, Debug, PartialEq, Eq, ValueEnum)]
enum ReportAs {
    Text,
    Json,
}

/// What was looked at, and what was found.
struct Checked {
    scenes: Vec<Scene>,
    review: Review,
    sources: Option<SourceMap>,
    style: Style,
}

/// The outcome of one file, with what is to be printed.
struct Report {
    outcome: Outcome,
    out: Option<String>,
    err: String,
}

pub(super) fn run(options: &Options) -> Outcome {
    let reports: Vec<Report> = options.files.par_iter().map(|f| one(f, options)).collect();
    let mut worst = Outcome::Done;
    for r in &reports {
        print::err(&r.err);
        worst = worst.max(r.outcome);
    }
    let texts: Vec<&str> = reports.iter().filter_map(|r| r.out.as_deref()).collect();
    match (options.report, options.files.as_slice()) {
        (ReportAs::Text, _) | (ReportAs::Json, [_]) => texts.iter().for_each(|t| print::out(t)),
        (ReportAs::Json, _) => {
            let list = texts.iter().map(|t| t.trim_end()).collect::<Vec<_>>().join(",\n");
            print::out(&format!("[{list}]\n"));
        }
    }
    worst
}

fn one(path: &Path, options: &Options) -> Report {
    let is_svg = path.extension().is_some_and(|e| e.eq_ignore_ascii_case("svg"));
    let (checked, mut err) = match if is_svg { issued(path) } else { spec(path) } {
        Ok(found) => found,
        Err((outcome, err)) => return Report { outcome, out: None, err },
    };
    let mut outcome = Outcome::Done;
    if checked.review.findings.iter().any(|f| f.severity >= options.fail_on.severity()) {
        outcome = Outcome::Findings;
    }
    if let Some(dir) = &options.marked
        && let Err(e) = write_marked(&checked, dir, options.dpi)
    {
        err.push_str(&format!("error: {e}\n"));
        outcome = Outcome::Files;
    }
    Report { outcome, out: Some(written(path, &checked, options.report)), err }
}

type Found = Result<(Checked, String), (Outcome, String)>;

fn spec(path: &Path) -> Found {
    let job = Job::load(path);
    let err = job.rendered();
    match job.drawn {
        None => Err((job.outcome, err)),
        Some(drawn) => {
            let review = crate::check(&drawn);
            let checked = Checked {
                scenes: drawn.scenes,
                review,
                sources: Some(job.sources),
                style: drawn.style,
            };
            Ok((checked, err))
        }
    }
}

fn issued(path: &Path) -> Found {
    let text = Disk.read(path).map_err(|e| (Outcome::Files, format!("error: {e}\n")))?;
    let shown = path.display();
    let scene = read_svg(&text).map_err(|e| {
        let place = e.place().map_or_else(String::new, |p| format!(":{}:{}", p.line, p.column));
        (Outcome::Wrong, format!("error: {shown}{place}: {e}\nhelp: {}\n", e.help()))
    })?;
    let Some(style) = style::builtin(&scene.sheet.style) else {
        let names = style::builtin_names().join(", ");
        let message = format!(
            "error: {shown} was issued in the style `{}`, which is not at hand; there are {names}\n",
            scene.sheet.style
        );
        return Err((Outcome::Wrong, message));
    };
    let scenes = vec![scene];
    let input =
        ReviewInput { scenes: &scenes, style: &style, drawing: None, misfits: &[], conflicts: &[] };
    let review = review(&input);
    Ok((Checked { scenes, review, sources: None, style }, String::new()))
}

fn written(path: &Path, checked: &Checked, how: ReportAs) -> String {
    match how {
        ReportAs::Json => {
            let sheet = checked.scenes.first().map(|s| &s.sheet);
            let mut text = report::json(&checked.review, sheet, checked.sources.as_ref());
            if !text.ends_with('\n') {
                text.push('\n');
            }
            text
        }
        ReportAs::Text => {
            let zone = |sheet: u32, at: Point<Sheet>| {
                let scene = checked.scenes.iter().find(|s| s.sheet.index == sheet)?;
                let format = checked.style.format.iter().find(|f| f.name == scene.sheet.format)?;
                Some(crate::sheet::zone(format, &checked.style, at))
            };
            let places = Places { sources: checked.sources.as_ref(), zone: Some(&zone) };
            format!("{}\n\n{}", path.display(), report::text(&checked.review, &places))
        }
    }
}

fn write_marked(checked: &Checked, dir: &Path, dpi: f64) -> Result<(), WriteError> {
    folder(dir)?;
    for scene in &checked.scenes {
        let marked = report::marked(scene, &checked.review.findings);
        let stem = match scene.sheet.index {
            0 | 1 => format!("{}-marked", scene.sheet.number),
            n => format!("{}-{n}-marked", scene.sheet.number),
        };
        let svg = render::svg(&marked);
        write_whole(&dir.join(format!("{stem}.svg")), |out| out.write_all(svg.as_bytes()))?;
        write_whole(&dir.join(format!("{stem}.png")), |out| {
            render::png(&svg, dpi, out).map(|_| ())
        })?;
    }
    Ok(())
}
