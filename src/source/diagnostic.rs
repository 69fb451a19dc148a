//! One thing to tell the person who wrote a spec, and the sink that collects them.

use super::Span;

/// How bad it is.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Level {
    /// The work goes on; the person should know.
    Warning,
    /// No sheet can be made.
    Error,
}

/// A message with its place and a way out.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Diagnostic {
    /// How bad it is.
    pub level: Level,
    /// What is wrong, naming the offending value and what was expected.
    pub message: String,
    /// The text that it is about, underlined in the rendering.
    pub span: Option<Span>,
    /// Short words beside the underline; empty for none.
    pub label: String,
    /// Other places that explain it, each with its words.
    pub related: Vec<(Span, String)>,
    /// What to do about it.
    pub help: Option<String>,
}

impl Diagnostic {
    /// An error about the text at `span`.
    pub fn error(span: impl Into<Option<Span>>, message: impl Into<String>) -> Self {
        Self {
            level: Level::Error,
            message: message.into(),
            span: span.into(),
            label: String::new(),
            related: Vec::new(),
            help: None,
        }
    }

    /// A warning about the text at `span`.
    pub fn warning(span: impl Into<Option<Span>>, message: impl Into<String>) -> Self {
        Self { level: Level::Warning, ..Self::error(span, message) }
    }

    /// The same with words beside the underline.
    #[must_use]
    pub fn label(mut self, label: impl Into<String>) -> Self {
        self.label = label.into();
        self
    }

    /// The same with a way out.
    #[must_use]
    pub fn help(mut self, help: impl Into<String>) -> Self {
        self.help = Some(help.into());
        self
    }

    /// The same with another place that explains it.
    #[must_use]
    pub fn related(mut self, span: Span, words: impl Into<String>) -> Self {
        self.related.push((span, words.into()));
        self
    }
}

/// Everything found so far; only takes, never gives up.
#[derive(Clone, Debug, Default)]
pub struct Diagnostics {
    all: Vec<Diagnostic>,
}

impl Diagnostics {
    /// Takes one.
    pub fn push(&mut self, d: Diagnostic) {
        self.all.push(d);
    }

    /// Whether any of them forbids making a sheet.
    #[must_use]
    pub fn has_errors(&self) -> bool {
        self.all.iter().any(|d| d.level == Level::Error)
    }

    /// All of them in the order of their places, without repeats.
    #[must_use]
    pub fn into_sorted(mut self) -> Vec<Diagnostic> {
        self.all.sort_by(|a, b| {
            let place = |d: &Diagnostic| d.span.map(|s| (s.file, s.start, s.end));
            place(a).cmp(&place(b)).then(b.level.cmp(&a.level))
        });
        self.all.dedup();
        self.all
    }
}
