//! The folder tree shows the pipeline, and imports follow the data. This scans every `crate::` path
//! of the sources against the table of allowed directions.

use std::collections::BTreeMap;
use std::path::{Path, PathBuf};

/// Module, and the modules that it may use. The order is that of the pipeline.
const ALLOWED: &[(&str, &[&str])] = &[
    ("units", &[]),
    ("ident", &[]),
    ("geom", &["units"]),
    ("source", &[]),
    ("standards", &["units"]),
    ("text", &["geom"]),
    ("style", &["units", "standards"]),
    ("spec", &["units", "ident", "geom", "source", "text", "style"]),
    ("view", &["units", "ident", "geom", "source", "style", "spec"]),
    ("scene", &["units", "ident", "geom", "text"]),
    ("sheet", &["units", "ident", "geom", "source", "standards", "text", "style", "spec", "scene"]),
    ("annotate", &["units", "ident", "geom", "source", "text", "style", "spec", "view", "scene"]),
    (
        "layout",
        &[
            "units", "ident", "geom", "source", "text", "style", "spec", "view", "scene", "sheet",
            "annotate",
        ],
    ),
    (
        "compose",
        &["units", "ident", "geom", "text", "style", "spec", "view", "scene", "annotate", "layout"],
    ),
    ("render", &["units", "ident", "geom", "text", "scene"]),
    (
        "review",
        &[
            "units",
            "ident",
            "geom",
            "source",
            "standards",
            "text",
            "style",
            "spec",
            "view",
            "annotate",
            "layout",
            "sheet",
            "scene",
        ],
    ),
];

/// Files at the top that tie the stages together, and the command line, may use everything.
const TOP: &[&str] = &["lib", "main", "pipeline", "cli"];

#[test]
fn imports_follow_the_data() {
    let allowed: BTreeMap<&str, &[&str]> = ALLOWED.iter().copied().collect();
    let mut wrong = Vec::new();
    for file in rust_files(Path::new("src")) {
        let module = module_of(&file);
        if TOP.contains(&module.as_str()) {
            continue;
        }
        let Some(may_use) = allowed.get(module.as_str()) else {
            wrong.push(format!("{}: module `{module}` is not in the table", file.display()));
            continue;
        };
        let text = std::fs::read_to_string(&file).expect("a source file is readable");
        for used in used_modules(&text) {
            if used != module && !may_use.contains(&used.as_str()) {
                wrong.push(format!("{}: `{module}` may not use `{used}`", file.display()));
            }
        }
    }
    assert!(wrong.is_empty(), "{}", wrong.join("\n"));
}

#[test]
fn only_the_command_line_prints() {
    let printing = ["println!", "eprintln!", "print!(", "eprint!(", "std::process::exit"];
    for file in rust_files(Path::new("src")) {
        if module_of(&file) == "cli" {
            continue;
        }
        let text = std::fs::read_to_string(&file).expect("a source file is readable");
        let code = text.split("#[cfg(test)]").next().unwrap_or("");
        for word in printing {
            assert!(!code.contains(word), "{} uses {word}", file.display());
        }
    }
}

fn rust_files(dir: &Path) -> Vec<PathBuf> {
    let mut files = Vec::new();
    for entry in std::fs::read_dir(dir).expect("the source folder is readable") {
        let path = entry.expect("its entries too").path();
        if path.is_dir() {
            files.extend(rust_files(&path));
        } else if path.extension().is_some_and(|e| e == "rs") {
            files.push(path);
        }
    }
    files.sort();
    files
}

/// The first folder below `src`, or the file's own name at the top.
fn module_of(file: &Path) -> String {
    let inside = file.strip_prefix("src").expect("it was found below src");
    let first = inside.components().next().expect("a file has a name").as_os_str();
    first.to_string_lossy().trim_end_matches(".rs").to_owned()
}

/// The modules named in `crate::…` paths of code (comments and doc links left out), also in
/// grouped imports.
fn used_modules(text: &str) -> Vec<String> {
    let mut found = Vec::new();
    for line in text.lines().filter(|l| !l.trim_start().starts_with("//")) {
        for after in line.split("crate::").skip(1) {
            let names = after.strip_prefix('{').map_or(after, |group| group);
            let name: String =
                names.chars().take_while(|c| c.is_alphanumeric() || *c == '_').collect();
            if name.chars().next().is_some_and(char::is_lowercase) {
                found.push(name);
            }
        }
    }
    found.sort();
    found.dedup();
    found
}
