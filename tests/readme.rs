//! What the README shows must work: its examples are read, drawn and checked.

use witnessline::review::{Review, Severity};
use witnessline::source::{Diagnostics, SourceMap};

/// The TOML blocks of the README that stand below this comment.
fn blocks(comment: &str) -> Vec<String> {
    let readme = std::fs::read_to_string("README.md").expect("the README is readable");
    let after = readme.split(comment).skip(1);
    let block = |text: &str| {
        let (_, block) = text.split_once("```toml\n").expect("the comment stands above a block");
        block.split("```").next().unwrap_or_default().to_owned()
    };
    after.map(block).collect()
}

/// Draws and checks a spec that nothing may be said against.
fn review(name: &str, text: &str) -> Review {
    let (mut sources, mut diagnostics) = (SourceMap::default(), Diagnostics::default());
    let drawing = witnessline::spec::read_text(name, text, &mut sources, &mut diagnostics);
    let drawn = drawing.and_then(|d| witnessline::draw(d, &mut diagnostics));
    let said = witnessline::source::render::render(&diagnostics.into_sorted(), &sources, false);
    assert_eq!(said, "");
    witnessline::check(&drawn.expect("nothing was said against it"))
}

#[test]
fn the_examples_of_the_readme_issue_cleanly() {
    let examples = blocks("<!-- example -->");
    assert_eq!(examples.len(), 2);
    for example in examples {
        let findings = review("README.md", &example).findings;
        let said: Vec<_> = findings.iter().map(|f| &f.message).collect();
        assert!(said.is_empty(), "{said:?}\n{example}");
    }
}

#[test]
fn what_the_readme_adds_is_of_the_language() {
    let examples = blocks("<!-- example -->");
    for addition in blocks("<!-- addition -->") {
        let findings = review("README.md", &format!("{}\n{addition}", examples[0])).findings;
        // Nothing stands in the way on that sheet, so there is nothing to accept.
        let rules: Vec<_> = findings.iter().map(|f| f.rule.name).collect();
        assert_eq!(rules, ["content/allow-unused"]);
    }
}

#[test]
fn the_starter_issues_cleanly() {
    let text = witnessline::spec::starter("ST-1");
    let review = review("new.toml", &text);
    assert!(review.worst().is_none_or(|w| w < Severity::Should), "{:?}", review.findings);
}
