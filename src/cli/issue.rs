//! `issue`: specs in, sheets out.

use std::collections::BTreeMap;
use std::path::{Path, PathBuf};

use clap::ValueEnum;
use rayon::prelude::*;

use super::files::{WriteError, folder, write_whole};
use super::job::Job;
use super::{FailOn, Outcome, print};
use crate::render::{self, TextMode};
use crate::review::{Finding, Review, Severity};
use crate::scene::Scene;

/// Options of `issue`.
#[derive(Debug, clap::Args)]
#[command(after_help = "Example: witnessline issue specs/bearing-housing.toml --to out")]
pub(super) struct Options {
    /// The specs.
    #[arg(required = true)]
    specs: Vec<PathBuf>,
    /// Folder that the sheets go to; it is made if need be.
    #[arg(long, value_name = "DIR", default_value = "out")]
    to: PathBuf,
    /// What to write.
    #[arg(long = "as", value_name = "FORMATS", value_delimiter = ',', default_value = "svg,png")]
    formats: Vec<FileFormat>,
    /// Pixels per inch of the PNG.
    #[arg(long, default_value_t = 300.0, value_parser = super::resolution)]
    dpi: f64,
    /// How text is written in the SVG; a PNG always has its outlines.
    #[arg(long, value_enum, default_value_t = TextAs::Outlines)]
    text: TextAs,
    /// Findings from this severity on end with exit code 1.
    #[arg(long, value_enum, default_value_t = FailOn::Must)]
    fail_on: FailOn,
}

#[derive(Clone, Copy, Debug, PartialEq, Eq, ValueEnum)]
enum FileFormat {
    Svg,
    Png,
}

#[derive(Clone, Copy, Debug, PartialEq, Eq, ValueEnum)]
enum TextAs {
    /// Glyph outlines, the same in every viewer, under transparent text that can be searched.
    Outlines,
    /// Text in the embedded font: smaller, for viewers that honour it.
    Font,
}

pub(super) fn run(options: &Options) -> Outcome {
    let jobs: Vec<Job> = options.specs.par_iter().map(|p| Job::load(p)).collect();
    let clashes = clashes(&jobs);
    let results: Vec<(Outcome, String, String)> = jobs
        .par_iter()
        .zip(&clashes)
        .map(|(job, clash)| one(job, clash.as_deref(), options))
        .collect();
    let mut worst = Outcome::Done;
    for (outcome, out, err) in results {
        print::err(&err);
        print::out(&out);
        worst = worst.max(outcome);
    }
    worst
}

/// For each job the reason why its number is taken, if it is.
fn clashes(jobs: &[Job]) -> Vec<Option<String>> {
    // Some file systems do not tell case apart, so neither does this.
    let mut owners: BTreeMap<String, Vec<usize>> = BTreeMap::new();
    for (i, job) in jobs.iter().enumerate() {
        if let Some(drawn) = &job.drawn {
            owners.entry(drawn.drawing.sheet.number.value.to_lowercase()).or_default().push(i);
        }
    }
    let mut clashes = vec![None; jobs.len()];
    for group in owners.values().filter(|g| g.len() > 1) {
        for i in group {
            let others: Vec<String> = group
                .iter()
                .filter(|j| *j != i)
                .map(|j| jobs[*j].path.display().to_string())
                .collect();
            clashes[*i] = Some(format!(
                "its number is also that of {}; two drawings cannot share their files, so neither is issued",
                others.join(", ")
            ));
        }
    }
    clashes
}

/// Issues one drawing; gives the outcome, its summary line and what is to be said on stderr.
fn one(job: &Job, clash: Option<&str>, options: &Options) -> (Outcome, String, String) {
    let mut err = job.rendered();
    let name = job.path.display();
    let Some(drawn) = &job.drawn else {
        return (job.outcome, format!("{name}: not issued\n"), err);
    };
    let number = &drawn.drawing.sheet.number.value;
    if let Some(why) = clash {
        err.push_str(&format!("error: {name}: {why}\n"));
        return (Outcome::Wrong, format!("{name}: {number} not issued\n"), err);
    }
    let review = crate::check(drawn);
    let mut written = Vec::new();
    for scene in &drawn.scenes {
        match write_sheet(scene, number, options) {
            Ok(files) => written.extend(files),
            Err(e) => {
                err.push_str(&format!("error: {e}\n"));
                return (Outcome::Files, format!("{name}: {number} not issued\n"), err);
            }
        }
    }
    let severe: Vec<&Finding> =
        review.findings.iter().filter(|f| f.severity >= options.fail_on.severity()).collect();
    for finding in &severe {
        err.push_str(&format!(
            "{}: {number}: {}: {}\n",
            finding.severity, finding.rule.name, finding.message
        ));
    }
    let outcome = if severe.is_empty() { Outcome::Done } else { Outcome::Findings };
    let summary = summary(&review);
    let layout = &drawn.layout;
    let line = format!(
        "{number}: {} {}, {}, {}\n",
        layout.format.name,
        layout.scale,
        written.join(" "),
        summary
    );
    (outcome, line, err)
}

fn summary(review: &Review) -> String {
    let count = |s| review.count(s);
    format!(
        "{} must, {} should, {} consider",
        count(Severity::Must),
        count(Severity::Should),
        count(Severity::Consider)
    )
}

fn write_sheet(scene: &Scene, number: &str, options: &Options) -> Result<Vec<String>, WriteError> {
    folder(&options.to)?;
    let stem = match scene.sheet.index {
        0 | 1 => number.to_owned(),
        n => format!("{number}-{n}"),
    };
    let outlines = render::svg(scene);
    let mut written = Vec::new();
    for format in [FileFormat::Svg, FileFormat::Png] {
        if !options.formats.contains(&format) {
            continue;
        }
        let path = target(&options.to, &stem, format);
        let fresh = match format {
            FileFormat::Svg => {
                let text = match options.text {
                    TextAs::Outlines => outlines.clone(),
                    TextAs::Font => render::svg_with(scene, TextMode::Font),
                };
                write_whole(&path, |out| out.write_all(text.as_bytes()))?
            }
            FileFormat::Png => {
                write_whole(&path, |out| render::png(&outlines, options.dpi, out).map(|_| ()))?
            }
        };
        let note = if fresh { "" } else { " (unchanged)" };
        written.push(format!("{}{note}", path.display()));
    }
    Ok(written)
}

fn target(dir: &Path, stem: &str, format: FileFormat) -> PathBuf {
    let extension = match format {
        FileFormat::Svg => "svg",
        FileFormat::Png => "png",
    };
    dir.join(format!("{stem}.{extension}"))
}
