//! Diagnostics as text for people: file, line, column, the text underlined, and a way out.
//!
//! Takes diagnostics and the files they point into; gives text and prints nothing. Only the lines
//! around a place are handed to the drawing of the excerpt, and a stretch of several lines is
//! underlined on its first one, so a message about a long table stays a few lines long.

use std::ops::Range;

use annotate_snippets::{
    Annotation, AnnotationKind, Group, Level as Title, Renderer, Snippet, normalize_untrusted_str,
};

use super::{Diagnostic, FileId, Level, SourceMap, Span};

/// As many are shown of one run; nobody reads more before mending some of them.
const MOST: usize = 100;

/// All diagnostics, with file, line, column and the text underlined; after the first hundred only
/// how many there are. Plain text unless `colour` is asked for.
#[must_use]
pub fn render(diagnostics: &[Diagnostic], sources: &SourceMap, colour: bool) -> String {
    let renderer = if colour { Renderer::styled() } else { Renderer::plain() };
    let mut text = String::new();
    for d in diagnostics.iter().take(MOST) {
        text.push_str(&renderer.render(&[report(d, sources)]));
        text.push_str("\n\n");
    }
    if let Some(more) = diagnostics.len().checked_sub(MOST).filter(|n| *n > 0) {
        text.push_str(&format!("and {more} more\n\n"));
    }
    text.truncate(text.trim_end_matches('\n').len());
    if !text.is_empty() {
        text.push('\n');
    }
    text
}

/// The title, the excerpt of each file that the diagnostic points into, and the help.
fn report<'a>(d: &'a Diagnostic, sources: &'a SourceMap) -> Group<'a> {
    let level = match d.level {
        Level::Error => Title::ERROR,
        Level::Warning => Title::WARNING,
    };
    let mut group = Group::with_title(level.primary_title(d.message.as_str()));
    for file in files(d) {
        if let Some(snippet) = snippet(d, file, sources) {
            group = group.element(snippet);
        }
    }
    if let Some(help) = &d.help {
        group = group.element(Title::HELP.message(normalize_untrusted_str(help)));
    }
    group
}

/// The files it points into, that of its own place first.
fn files(d: &Diagnostic) -> Vec<FileId> {
    let mut files: Vec<FileId> = Vec::new();
    for file in d.span.iter().chain(d.related.iter().map(|(s, _)| s)).map(|s| s.file) {
        if !files.contains(&file) {
            files.push(file);
        }
    }
    files
}

/// The lines of `file` that the diagnostic points at, underlined.
fn snippet<'a>(
    d: &'a Diagnostic,
    file: FileId,
    sources: &'a SourceMap,
) -> Option<Snippet<'a, Annotation<'a>>> {
    let source = sources.get(file)?;
    let text = &*source.text;
    let mut marks: Vec<(Range<usize>, AnnotationKind, &str)> = Vec::new();
    if let Some(span) = d.span.filter(|s| s.file == file) {
        marks.push((on_one_line(text, span), AnnotationKind::Primary, &d.label));
    }
    for (span, words) in d.related.iter().filter(|(s, _)| s.file == file) {
        marks.push((on_one_line(text, *span), AnnotationKind::Context, words));
    }
    let first = marks.iter().map(|(r, _, _)| r.start).min()?;
    let last = marks.iter().map(|(r, _, _)| r.end).max()?;
    let begin = text[..first].rfind('\n').map_or(0, |i| i + 1);
    let end = text[last..].find(['\r', '\n']).map_or(text.len(), |i| last + i);
    let annotations = marks.into_iter().map(|(range, kind, words)| {
        let label = (!words.is_empty()).then(|| normalize_untrusted_str(words));
        kind.span(range.start - begin..range.end - begin).label(label)
    });
    Some(
        Snippet::source(&text[begin..end])
            .path(normalize_untrusted_str(&source.name))
            .line_start(text[..begin].matches('\n').count() + 1)
            .annotations(annotations),
    )
}

/// The part of a span that stands on its first line, within the text and between characters.
fn on_one_line(text: &str, span: Span) -> Range<usize> {
    let start = floor(text, span.start);
    let end = floor(text, span.end).max(start);
    let line = text[start..end].find(['\r', '\n']).map_or(end, |i| start + i);
    start..line
}

/// The last place at or before `at` that is between two characters.
fn floor(text: &str, at: usize) -> usize {
    let mut at = at.min(text.len());
    while !text.is_char_boundary(at) {
        at -= 1;
    }
    at
}

#[cfg(test)]
mod tests {
    use proptest::prelude::*;

    use super::*;

    fn map(text: &str) -> (SourceMap, FileId) {
        let mut sources = SourceMap::default();
        let file = sources.add("plate.toml", text.into());
        (sources, file)
    }

    #[test]
    fn place_label_related_and_help_are_all_shown() {
        let (sources, file) = map("a = 1\nb = 2\n\n\n\n\nc = 3\n");
        let span = |start, end| Span { file, start, end };
        let d = Diagnostic::error(span(6, 7), "`b` is wrong")
            .label("here")
            .related(span(16, 17), "because of this")
            .help("leave it out");
        let text = render(&[d], &sources, false);
        for part in ["error: `b` is wrong", "plate.toml:2:1", "^ here", "- because", "help: leave"]
        {
            assert!(text.contains(part), "{part} is not in\n{text}");
        }
        assert!(!text.contains('\u{1b}'));
    }

    #[test]
    fn colour_is_only_there_when_asked_for() {
        let (sources, _) = map("");
        let d = [Diagnostic::warning(None, "no place")];
        assert_eq!(render(&d, &sources, false), "warning: no place\n");
        assert!(render(&d, &sources, true).contains('\u{1b}'));
    }

    #[test]
    fn control_characters_of_a_spec_do_not_reach_the_terminal() {
        let (sources, file) = map("a = '\u{1b}[2J'");
        let d = Diagnostic::error(Span { file, start: 4, end: 8 }, "\u{1b}[2J")
            .label("\u{1b}[2J")
            .help("\u{1b}[2J");
        assert!(!render(&[d], &sources, false).contains('\u{1b}'));
    }

    #[test]
    fn line_ends_of_any_system_look_alike() {
        let (sources, file) = map("a = 1\r\nb = 2\r\n");
        let d = Diagnostic::error(Span { file, start: 0, end: 1 }, "x")
            .related(Span { file, start: 7, end: 8 }, "y");
        let text = render(&[d], &sources, false);
        assert!(text.contains("1 | a = 1\n") && text.contains("2 | b = 2\n"), "{text}");
    }

    #[test]
    fn many_are_counted_not_shown() {
        let (sources, _) = map("");
        let d = vec![Diagnostic::error(None, "x"); MOST + 3];
        assert!(render(&d, &sources, false).ends_with("and 3 more\n"));
    }

    proptest! {
        #[test]
        fn no_span_into_any_text_panics(text in "\\PC{0,20}(\r?\n\\PC{0,20}){0,4}", a in 0usize..99, b in 0usize..99, c in 0usize..99) {
            let (sources, file) = map(&text);
            let d = Diagnostic::error(Span { file, start: a, end: b }, "m")
                .related(Span { file, start: c, end: a }, "r");
            prop_assert!(render(&[d], &sources, false).starts_with("error: m"));
        }
    }
}
