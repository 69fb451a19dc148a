//! What the README shows must work: its example is read, drawn and checked.

use witnessline::review::Severity;
use witnessline::source::{Diagnostics, SourceMap};

fn example() -> String {
    let readme = std::fs::read_to_string("README.md").expect("the README is readable");
    let (_, after) = readme.split_once("<!-- example -->").expect("it has an example");
    let (_, block) = after.split_once("```toml\n").expect("in a block");
    block.split("```").next().unwrap_or_default().to_owned()
}

#[test]
fn the_example_of_the_readme_issues_cleanly() {
    let (mut sources, mut diagnostics) = (SourceMap::default(), Diagnostics::default());
    let drawing =
        witnessline::spec::read_text("README.md", &example(), &mut sources, &mut diagnostics);
    let drawn = drawing.and_then(|d| witnessline::draw(d, &mut diagnostics));
    let said = witnessline::source::render::render(&diagnostics.into_sorted(), &sources, false);
    assert_eq!(said, "");
    let review = witnessline::check(&drawn.expect("nothing was said against it"));
    let grave: Vec<_> = review
        .findings
        .iter()
        .filter(|f| f.severity >= Severity::Should)
        .map(|f| f.message.clone())
        .collect();
    assert_eq!(grave, Vec::<String>::new());
}

#[test]
fn the_starter_issues_cleanly() {
    let text = witnessline::spec::starter("ST-1");
    let (mut sources, mut diagnostics) = (SourceMap::default(), Diagnostics::default());
    let drawing = witnessline::spec::read_text("new.toml", &text, &mut sources, &mut diagnostics);
    let drawn = drawing.and_then(|d| witnessline::draw(d, &mut diagnostics)).expect("it is sound");
    let review = witnessline::check(&drawn);
    assert!(review.worst().is_none_or(|w| w < Severity::Should), "{:?}", review.findings);
}
