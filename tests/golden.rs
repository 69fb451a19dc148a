//! Whole sheets as text that people can read in a diff.
//!
//! Every `tests/specs/<name>.toml` is drawn and its scene listed; `tests/golden/<name>.txt` is what
//! it was when somebody last looked. `ACCEPT=1 cargo test --test golden` takes new listings over
//! and prints before and after: look at the sheet too before committing.

#![expect(clippy::print_stdout, reason = "accepting shows what it replaces")]

use std::collections::BTreeSet;
use std::fs;
use std::path::Path;

use similar::TextDiff;
use witnessline::scene::listing;
use witnessline::source::{Diagnostics, SourceMap, render::render};

fn names(folder: &str, extension: &str) -> BTreeSet<String> {
    fs::read_dir(folder)
        .expect("the folder is there")
        .map(|entry| entry.expect("it can be listed").path())
        .filter(|path| path.extension().is_some_and(|e| e == extension))
        .filter_map(|path| Some(path.file_stem()?.to_str()?.to_owned()))
        .collect()
}

fn listed(name: &str) -> String {
    let path = format!("tests/specs/{name}.toml");
    let text = fs::read_to_string(&path).expect("a text");
    let (mut sources, mut diagnostics) = (SourceMap::default(), Diagnostics::default());
    let drawing = witnessline::spec::read_text(&path, &text, &mut sources, &mut diagnostics);
    let drawn = drawing.and_then(|d| witnessline::draw(d, &mut diagnostics));
    let said = render(&diagnostics.into_sorted(), &sources, false);
    let drawn = drawn.unwrap_or_else(|| panic!("{said}"));
    drawn.scenes.iter().map(listing).collect()
}

#[test]
fn sheets_are_what_they_were() {
    let accept = std::env::var_os("ACCEPT").is_some_and(|v| v == "1");
    let mut differences = String::new();
    for name in names("tests/specs", "toml") {
        let path = Path::new("tests/golden").join(format!("{name}.txt"));
        let expected = fs::read_to_string(&path).unwrap_or_default();
        let now = listed(&name);
        if now != expected {
            let diff = TextDiff::from_lines(&expected, &now);
            differences += &diff.unified_diff().header("before", &name).to_string();
            if accept {
                fs::write(&path, &now).expect("goldens can be written");
            }
        }
    }
    if accept {
        println!("{differences}");
    } else {
        assert!(differences.is_empty(), "{differences}\nACCEPT=1 takes these over");
    }
}

#[test]
fn no_golden_is_an_orphan() {
    let specs = names("tests/specs", "toml");
    let orphans: Vec<String> = names("tests/golden", "txt").difference(&specs).cloned().collect();
    assert!(orphans.is_empty(), "no spec for {orphans:?}");
}
