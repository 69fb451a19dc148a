//! The command line as a user calls it: files, exit codes, words.

use std::fs;
use std::path::Path;

use assert_cmd::Command;
use serde_json::Value;

fn witnessline(args: &[&str]) -> std::process::Output {
    Command::cargo_bin("witnessline").expect("it was built").args(args).output().expect("it ran")
}

fn code(out: &std::process::Output) -> Option<i32> {
    out.status.code()
}

fn text(bytes: &[u8]) -> String {
    String::from_utf8_lossy(bytes).into_owned()
}

fn shown(path: &Path) -> &str {
    path.to_str().expect("temporary paths are text")
}

/// A folder with a starter spec of that number.
fn with_starter(number: &str) -> (tempfile::TempDir, String) {
    let dir = tempfile::tempdir().expect("a temporary folder");
    let path = dir.path().join("part.toml");
    fs::write(&path, witnessline::spec::starter(number)).expect("it can be written");
    let path = shown(&path).to_owned();
    (dir, path)
}

#[test]
fn issue_writes_svg_and_png_named_after_the_number() {
    let (dir, spec) = with_starter("AB-1");
    let to = dir.path().join("sheets");
    let out = witnessline(&["issue", &spec, "--to", shown(&to), "--dpi", "100"]);
    assert_eq!(code(&out), Some(0), "{}", text(&out.stderr));
    assert!(text(&out.stdout).starts_with("AB-1: A3 1:1, "));
    assert!(to.join("AB-1.svg").is_file());
    let png = fs::read(to.join("AB-1.png")).expect("it was written");
    // 100 dpi is 3937 pixels per metre (PNG, third edition, 11.3.4.3).
    let at = png.windows(4).position(|w| w == b"pHYs").expect("resolution is recorded");
    assert_eq!(&png[at + 4..at + 8], &3937u32.to_be_bytes());
}

#[test]
fn an_unchanged_sheet_is_not_written_again_and_has_the_same_bytes_on_any_threads() {
    let (dir, spec) = with_starter("AB-2");
    let to = shown(dir.path()).to_owned();
    let file = dir.path().join("AB-2.svg");
    witnessline(&["issue", &spec, "--to", &to, "--as", "svg"]);
    let (bytes, time) = (fs::read(&file).expect("written"), fs::metadata(&file).expect("there"));
    let again = Command::cargo_bin("witnessline")
        .expect("it was built")
        .env("RAYON_NUM_THREADS", "1")
        .args(["issue", &spec, "--to", &to, "--as", "svg"])
        .output()
        .expect("it ran");
    assert!(text(&again.stdout).contains("(unchanged)"));
    assert_eq!(fs::read(&file).expect("still there"), bytes);
    let later = fs::metadata(&file).expect("there");
    assert_eq!(time.modified().ok(), later.modified().ok());
}

#[test]
fn two_specs_with_one_number_are_both_refused() {
    let (a, first) = with_starter("SAME-1");
    let (_b, second) = with_starter("same-1");
    let to = a.path().join("sheets");
    let out = witnessline(&["issue", &first, &second, "--to", shown(&to)]);
    assert_eq!(code(&out), Some(2));
    assert!(text(&out.stderr).contains("two drawings cannot share their files"));
    assert!(!to.join("SAME-1.svg").exists());
}

#[test]
fn a_wrong_spec_leaves_the_earlier_sheet_whole() {
    let (dir, spec) = with_starter("AB-3");
    let to = shown(dir.path()).to_owned();
    witnessline(&["issue", &spec, "--to", &to, "--as", "svg"]);
    let before = fs::read(dir.path().join("AB-3.svg")).expect("written");
    let broken =
        fs::read_to_string(&spec).expect("there").replace("[drawing]", "[drawing]\ncolour = 1");
    fs::write(&spec, broken).expect("it can be written");
    let out = witnessline(&["issue", &spec, "--to", &to, "--as", "svg"]);
    assert_eq!(code(&out), Some(2));
    assert!(text(&out.stderr).contains("colour"));
    assert_eq!(fs::read(dir.path().join("AB-3.svg")).expect("still there"), before);
}

#[test]
fn what_cannot_be_read_or_written_is_exit_code_3() {
    let out = witnessline(&["issue", "no-such-file.toml"]);
    assert_eq!(code(&out), Some(3));
    assert!(text(&out.stderr).contains("witnessline new"), "it says what to do");
    // A file where the folder should be: refused even to the superuser.
    let (dir, spec) = with_starter("AB-4");
    let blocked = dir.path().join("blocked");
    fs::write(&blocked, "").expect("it can be written");
    let out = witnessline(&["issue", &spec, "--to", shown(&blocked)]);
    assert_eq!(code(&out), Some(3), "{}", text(&out.stderr));
    assert!(text(&out.stderr).contains("cannot be written"));
}

#[test]
fn of_several_outcomes_the_highest_is_the_exit_code() {
    let (dir, spec) = with_starter("AB-5");
    let out =
        witnessline(&["issue", &spec, "missing.toml", "--to", shown(dir.path()), "--as", "svg"]);
    assert_eq!(code(&out), Some(3));
    assert!(dir.path().join("AB-5.svg").is_file(), "the good one is issued all the same");
}

#[test]
fn the_report_in_json_keeps_the_contract() {
    let out = witnessline(&["check", "specs/crowded.toml", "--as", "json"]);
    assert_eq!(code(&out), Some(1));
    let report: Value = serde_json::from_slice(&out.stdout).expect("it is JSON");
    assert_eq!(report["drawing"], "CR-0001");
    let findings = report["findings"].as_array().expect("a list");
    for f in findings {
        for key in [
            "rule", "severity", "sheet", "view", "items", "box", "amount", "unit", "message",
            "file", "line", "column",
        ] {
            assert!(f.get(key).is_some(), "{key} is missing in {f}");
        }
        assert_eq!(f["box"].as_array().map(Vec::len), Some(4));
    }
    let must = findings.iter().filter(|f| f["severity"] == "must").count();
    assert_eq!(report["summary"]["must"], must);
    let lines = findings.iter().filter(|f| f["file"] == "specs/crowded.toml").count();
    assert!(lines > findings.len() / 2, "most findings are traced to the spec");
}

#[test]
fn an_issued_sheet_is_checked_like_its_spec() {
    let dir = tempfile::tempdir().expect("a temporary folder");
    let to = shown(dir.path());
    for spec in ["crowded", "stepped-shaft"] {
        let spec = format!("specs/{spec}.toml");
        witnessline(&["issue", &spec, "--to", to, "--as", "svg"]);
        let of = |file: &str| -> Vec<String> {
            let out = witnessline(&["check", file, "--as", "json"]);
            let report: Value = serde_json::from_slice(&out.stdout).expect("it is JSON");
            let findings = report["findings"].as_array().expect("a list").iter();
            let clutter =
                findings.filter(|f| f["rule"].as_str().is_some_and(|r| r.starts_with("clutter/")));
            let mut said: Vec<String> =
                clutter.map(|f| format!("{} {}", f["rule"], f["items"])).collect();
            said.sort();
            said
        };
        let number = if spec.contains("crowded") { "CR-0001" } else { "SH-3107" };
        let svg = dir.path().join(format!("{number}.svg"));
        assert_eq!(of(&spec), of(shown(&svg)), "{spec}");
    }
}

#[test]
fn a_text_moved_by_hand_onto_a_line_is_found() {
    let (dir, spec) = with_starter("AB-6");
    witnessline(&["issue", &spec, "--to", shown(dir.path()), "--as", "svg"]);
    let file = dir.path().join("AB-6.svg");
    let svg = fs::read_to_string(&file).expect("written");
    assert_eq!(code(&witnessline(&["check", shown(&file)])), Some(0));
    // The first run of a dimension, pushed down by the text's lift: onto its own dimension line.
    let dimension = svg.find("data-kind=\"dimension\"").expect("it has dimensions");
    let run = dimension + svg[dimension..].find("<g data-bbox=").expect("with text");
    let moved = format!("{}<g transform=\"translate(0 3)\" {}", &svg[..run], &svg[run + 3..]);
    fs::write(&file, moved).expect("it can be written");
    let out = witnessline(&["check", shown(&file)]);
    assert_eq!(code(&out), Some(1), "{}", text(&out.stdout));
    assert!(text(&out.stdout).contains("clutter/text-on-line"));
}

#[test]
fn what_was_not_issued_is_refused_with_a_reason() {
    let dir = tempfile::tempdir().expect("a temporary folder");
    let file = dir.path().join("other.svg");
    fs::write(&file, "<svg xmlns=\"http://www.w3.org/2000/svg\"/>").expect("it can be written");
    let out = witnessline(&["check", shown(&file)]);
    assert_eq!(code(&out), Some(2));
    assert!(text(&out.stderr).contains("help:"));
}

#[test]
fn severity_decides_the_exit_code() {
    let asked =
        |level| code(&witnessline(&["check", "specs/fixture-plate.toml", "--fail-on", level]));
    assert_eq!(asked("must"), Some(0));
    assert_eq!(asked("should"), Some(0));
    assert_eq!(asked("consider"), Some(1));
}

#[test]
fn the_examples_are_clean_and_out_holds_what_the_code_issues() {
    let dir = tempfile::tempdir().expect("a temporary folder");
    for (spec, number, least) in [
        ("bearing-housing", "BH-2041", 30),
        ("stepped-shaft", "SH-3107", 30),
        ("fixture-plate", "FP-0875", 25),
        ("crowded", "CR-0001", 0),
    ] {
        let path = format!("specs/{spec}.toml");
        let mut args = vec!["issue", &path, "--to", shown(dir.path()), "--as", "svg"];
        if spec != "crowded" {
            args.extend(["--fail-on", "should"]);
        }
        let out = witnessline(&args);
        assert_eq!(code(&out), Some(i32::from(spec == "crowded")), "{}", text(&out.stderr));
        let fresh = fs::read(dir.path().join(format!("{number}.svg"))).expect("written");
        let kept = fs::read(format!("out/{number}.svg")).expect("it is committed");
        assert!(fresh == kept, "out/{number}.svg is not what the code issues now");
        let facts = witnessline(&["inspect", &path, "--as", "json"]);
        let facts: Value = serde_json::from_slice(&facts.stdout).expect("it is JSON");
        let count = facts["annotations"].as_array().map_or(0, Vec::len);
        assert!(count >= least, "{spec} has {count} annotations");
        let source = fs::read_to_string(&path).expect("there");
        assert!(spec == "crowded" || !source.contains("[[allow]]"), "{spec} excuses itself");
    }
}

#[test]
fn inspect_tells_values_and_absolute_limits() {
    let out = witnessline(&["inspect", "specs/bearing-housing.toml", "--as", "json"]);
    let facts: Value = serde_json::from_slice(&out.stdout).expect("it is JSON");
    let annotations = facts["annotations"].as_array().expect("a list");
    let seat = annotations.iter().find(|a| a["id"] == "seat").expect("it is there");
    assert_eq!(
        (&seat["value"], &seat["lower"], &seat["upper"]),
        (&62.0.into(), &62.0.into(), &62.03.into())
    );
    assert_eq!(seat["unit"], "mm");
    let front = &facts["views"][0];
    assert_eq!(front["direction"], serde_json::json!([0.0, -1.0, 0.0]));
    assert!(front["edges"].as_array().is_some_and(|e| e.iter().any(|e| e["class"] == "hidden")));
}

#[test]
fn marked_sheets_are_written_beside_nothing_else() {
    let dir = tempfile::tempdir().expect("a temporary folder");
    witnessline(&["check", "specs/crowded.toml", "--marked", shown(dir.path()), "--dpi", "60"]);
    assert!(dir.path().join("CR-0001-marked.svg").is_file());
    assert!(dir.path().join("CR-0001-marked.png").is_file());
    assert_eq!(fs::read_dir(dir.path()).expect("readable").count(), 2);
}

#[test]
fn explain_knows_its_rules_and_suggests_the_nearest() {
    let known = witnessline(&["explain", "clutter/text-on-line"]);
    assert_eq!(code(&known), Some(0));
    assert!(text(&known.stdout).contains("Why it matters"));
    let unknown = witnessline(&["explain", "clutter/text-on-lime"]);
    assert_eq!(code(&unknown), Some(2));
    assert!(text(&unknown.stderr).contains("clutter/text-on-line"));
}

#[test]
fn new_writes_a_spec_and_never_over_one() {
    let dir = tempfile::tempdir().expect("a temporary folder");
    let file = dir.path().join("NX-7.toml");
    assert_eq!(code(&witnessline(&["new", shown(&file)])), Some(0));
    let out = witnessline(&["check", shown(&file), "--fail-on", "should"]);
    assert_eq!(code(&out), Some(0), "{}", text(&out.stdout));
    assert_eq!(code(&witnessline(&["new", shown(&file)])), Some(2));
    let unfit = dir.path().join("x.toml");
    assert_eq!(code(&witnessline(&["new", shown(&unfit), "--number", "a/b"])), Some(2));
}

#[test]
fn the_style_can_be_printed() {
    let out = witnessline(&["style", "iso"]);
    assert_eq!(text(&out.stdout), fs::read_to_string("styles/iso.toml").expect("there"));
    assert_eq!(code(&witnessline(&["style", "izo"])), Some(2));
}

#[test]
fn every_command_shows_an_example() {
    for command in ["issue", "check", "inspect", "explain", "new", "style"] {
        let out = witnessline(&[command, "--help"]);
        assert_eq!(code(&out), Some(0));
        assert!(text(&out.stdout).contains("Example"), "{command}");
    }
    assert_eq!(code(&witnessline(&["isue"])), Some(2));
    let absurd = witnessline(&["issue", "specs/stepped-shaft.toml", "--dpi", "0"]);
    assert_eq!(code(&absurd), Some(2));
}
