//! The sink that rules push into.

use super::page::Page;
use super::rule::Rule;
use super::{Finding, Unit};
use crate::geom::{Rect, Sheet};
use crate::ident::ViewId;
use crate::scene::Item;

/// Takes the findings of one rule after another.
#[derive(Debug)]
pub(crate) struct Findings {
    rule: &'static Rule,
    all: Vec<Finding>,
}

impl Findings {
    /// Nothing found yet by `rule`.
    pub(crate) fn of(rule: &'static Rule) -> Self {
        Self { rule, all: Vec::new() }
    }

    /// Takes a finding about items of a sheet.
    pub(crate) fn report(
        &mut self,
        page: &Page<'_>,
        items: &[&Item],
        area: Rect<Sheet>,
        message: String,
    ) -> &mut Finding {
        let view = items.iter().find_map(|i| i.view.clone());
        let mut ids: Vec<_> = Vec::with_capacity(items.len());
        for item in items {
            if !ids.contains(&item.id) {
                ids.push(item.id.clone());
            }
        }
        let found = self.report_on_sheet(page.number(), area, message);
        found.items = ids;
        found.view = view;
        found
    }

    /// Takes a finding about a sheet as a whole.
    pub(crate) fn report_on_sheet(
        &mut self,
        sheet: u32,
        area: Rect<Sheet>,
        message: String,
    ) -> &mut Finding {
        self.all.push(Finding {
            rule: self.rule,
            severity: self.rule.severity,
            sheet,
            view: None::<ViewId>,
            items: Vec::new(),
            area,
            amount: None,
            unit: Unit::None,
            message,
            span: None,
        });
        let last = self.all.len() - 1;
        &mut self.all[last]
    }

    /// What was found, findings that tell the same merged into the worst of them.
    pub(crate) fn into_merged(mut self) -> Vec<Finding> {
        self.all.sort_by(|a, b| a.key().cmp(&b.key()).then_with(|| a.worst_first(b)));
        self.all.dedup_by(|later, first| later.same_thing(first));
        self.all
    }
}
