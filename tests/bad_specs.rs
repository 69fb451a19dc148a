//! Specs that are wrong, one idea each, and what the program says about them.
//!
//! Every `tests/bad/<name>.toml` has a `<name>.expected` beside it: the rendered diagnostics
//! without colour, or the findings on the sheet that can still be made. To add a case write the spec and run `ACCEPT=1 cargo test --test bad_specs`,
//! which prints each text that it replaces and what replaces it; read that before committing.

#![expect(clippy::print_stdout, reason = "accepting shows what it replaces")]

use std::collections::BTreeSet;
use std::fs;
use std::path::{Path, PathBuf};

use similar::TextDiff;
use witnessline::source::{Diagnostics, SourceMap, render::render};
use witnessline::spec;

fn folder() -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/bad")
}

/// Names of the files with this extension, without it.
fn names(extension: &str) -> BTreeSet<String> {
    fs::read_dir(folder())
        .expect("the corpus is there")
        .map(|entry| entry.expect("the corpus can be listed").path())
        .filter(|path| path.extension().is_some_and(|e| e == extension))
        .filter_map(|path| Some(path.file_stem()?.to_str()?.to_owned()))
        .collect()
}

/// What the program says about a spec of the corpus.
fn said(name: &str) -> String {
    let text = fs::read_to_string(folder().join(format!("{name}.toml"))).expect("a text");
    let mut sources = SourceMap::default();
    let mut diagnostics = Diagnostics::default();
    let shown = format!("tests/bad/{name}.toml");
    let drawing = spec::read_text(&shown, &text, &mut sources, &mut diagnostics);
    assert_eq!(drawing.is_none(), diagnostics.has_errors(), "{name}: errors and a drawing");
    // What can be read may still be faulted where views are made, anchors bound, sheets laid out,
    // and at last by the checker.
    let Some(drawn) = drawing.and_then(|d| witnessline::draw(d, &mut diagnostics)) else {
        return render(&diagnostics.into_sorted(), &sources, false);
    };
    let mut said = render(&diagnostics.into_sorted(), &sources, false);
    for f in witnessline::check(&drawn).findings {
        said += &format!("{}: {}: {}\n", f.severity, f.rule.name, f.message);
    }
    said
}

#[test]
fn every_bad_spec_says_what_is_expected() {
    let accept = std::env::var_os("ACCEPT").is_some_and(|v| v == "1");
    let mut differences = String::new();
    for name in names("toml") {
        let path = folder().join(format!("{name}.expected"));
        let expected = fs::read_to_string(&path).unwrap_or_default();
        let said = said(&name);
        assert!(!said.is_empty(), "{name} is not bad at all");
        if said == expected {
            continue;
        }
        let diff = TextDiff::from_lines(&expected, &said);
        differences += &diff.unified_diff().header("expected", &name).to_string();
        if accept {
            fs::write(&path, &said).expect("the corpus can be written");
        }
    }
    if accept {
        println!("{differences}");
    } else {
        assert!(differences.is_empty(), "{differences}\nACCEPT=1 takes these over");
    }
}

#[test]
fn every_expectation_has_its_spec() {
    let orphans: Vec<String> = names("expected").difference(&names("toml")).cloned().collect();
    assert!(orphans.is_empty(), "no spec for {orphans:?}");
}

#[test]
fn every_spec_has_its_expectation() {
    let accept = std::env::var_os("ACCEPT").is_some_and(|v| v == "1");
    let orphans: Vec<String> = names("toml").difference(&names("expected")).cloned().collect();
    assert!(accept || orphans.is_empty(), "no expectation for {orphans:?}");
}

#[test]
fn the_corpus_is_as_large_as_it_ought_to_be() {
    assert!(names("toml").len() >= 30);
}
