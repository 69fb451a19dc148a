//! One thing that a checker would raise.

use std::cmp::Ordering;
use std::fmt;

use super::place;
use super::rule::Rule;
use crate::geom::{Rect, Sheet};
use crate::ident::{ItemId, ViewId};
use crate::source::Span;

/// How much a finding weighs; the greatest is the worst.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Severity {
    /// Judgement: a careful drafter would look at it.
    Consider,
    /// Practice is broken and a reader stumbles.
    Should,
    /// The part can be made wrong, or the sheet cannot be used.
    Must,
}

/// What the amount of a finding counts.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum Unit {
    /// The finding has no amount.
    #[default]
    None,
    /// Millimetres of paper.
    Millimetre,
    /// Degrees of angle.
    Degree,
    /// Things.
    Count,
    /// Per cent.
    Percent,
    /// One number over another.
    Ratio,
}

/// One thing that a checker would raise.
#[derive(Clone, Debug)]
pub struct Finding {
    /// The rule that it breaks.
    pub rule: &'static Rule,
    /// How much it weighs.
    pub severity: Severity,
    /// The sheet's place among the drawing's sheets, from 1.
    pub sheet: u32,
    /// The view that it is about.
    pub view: Option<ViewId>,
    /// The items that it is about; none where it is about the sheet.
    pub items: Vec<ItemId>,
    /// Where it stands on the sheet.
    pub area: Rect<Sheet>,
    /// How much of it there is, in `unit`.
    pub amount: Option<f64>,
    /// What the amount counts.
    pub unit: Unit,
    /// What is wrong, in words.
    pub message: String,
    /// The part of the spec that it comes from.
    pub span: Option<Span>,
}

impl Severity {
    /// All of them, worst first.
    pub const ALL: [Self; 3] = [Self::Must, Self::Should, Self::Consider];

    /// Its name in reports.
    #[must_use]
    pub fn name(self) -> &'static str {
        match self {
            Self::Must => "must",
            Self::Should => "should",
            Self::Consider => "consider",
        }
    }
}

impl fmt::Display for Severity {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.pad(self.name())
    }
}

impl std::str::FromStr for Severity {
    type Err = ();
    fn from_str(text: &str) -> Result<Self, ()> {
        Self::ALL.into_iter().find(|s| s.name() == text).ok_or(())
    }
}

impl Unit {
    /// Its name in reports; `None` where there is no amount.
    #[must_use]
    pub fn name(self) -> Option<&'static str> {
        match self {
            Self::None => None,
            Self::Millimetre => Some("mm"),
            Self::Degree => Some("deg"),
            Self::Count => Some("count"),
            Self::Percent => Some("%"),
            Self::Ratio => Some("ratio"),
        }
    }
}

impl Finding {
    /// The same with an amount.
    pub(crate) fn measured(&mut self, amount: f64, unit: Unit) -> &mut Self {
        self.amount = Some(amount);
        self.unit = unit;
        self
    }

    /// The same with another weight than its rule's usual one.
    pub(crate) fn weighing(&mut self, severity: Severity) -> &mut Self {
        self.severity = severity;
        self
    }

    /// The same with its place in the spec.
    pub(crate) fn written_at(&mut self, span: impl Into<Option<Span>>) -> &mut Self {
        self.span = span.into();
        self
    }

    /// Whether the two tell the same: one rule, one sheet, the same items (or, without items, the
    /// same words).
    pub(super) fn same_thing(&self, other: &Self) -> bool {
        self.key() == other.key()
    }

    pub(super) fn key(&self) -> (&'static str, u32, &[ItemId], &str) {
        let words = if self.items.is_empty() { self.message.as_str() } else { "" };
        (self.rule.name, self.sheet, &self.items, words)
    }

    /// Order in a report: worst first, then by sheet, from the top and from the left.
    pub(super) fn report_order(&self, other: &Self) -> Ordering {
        other
            .severity
            .cmp(&self.severity)
            .then(self.sheet.cmp(&other.sheet))
            .then_with(|| place::order(&self.area, &other.area))
            .then_with(|| self.rule.name.cmp(other.rule.name))
            .then_with(|| self.items.cmp(&other.items))
            .then_with(|| self.message.cmp(&other.message))
    }

    /// Order among findings that tell the same: the worst first.
    pub(super) fn worst_first(&self, other: &Self) -> Ordering {
        let badness = |f: &Self| self.rule.badness(f.amount.unwrap_or(0.0));
        other
            .severity
            .cmp(&self.severity)
            .then_with(|| badness(other).total_cmp(&badness(self)))
            .then_with(|| self.report_order(other))
    }
}
