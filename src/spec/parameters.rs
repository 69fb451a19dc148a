//! `[parameters]`: names for values, in any order, each a number or an expression over the others.
//!
//! Takes the table; gives the value of every name that has one. Names that use each other in a
//! circle are reported with the whole ring. The walk over the names keeps its own stack, so a
//! chain of ten thousand parameters is no deeper for the machine than one of two.

use std::collections::BTreeMap;

use toml::de::DeValue;

use super::expression::{Expression, Kind, Lookup, Quantity, is_name, is_taken};
use super::reader::{Field, Reader, excerpt};
use crate::source::Diagnostic;

/// Most parameters of one spec.
const MOST: usize = 10_000;
/// Members of a ring that are written out; a longer one is shortened in its middle.
const RING_SHOWN: usize = 12;

/// The values of all parameters.
#[derive(Clone, Debug, Default)]
pub(super) struct Parameters {
    /// `None` for one whose fault has been reported, or that is not computed yet.
    values: BTreeMap<String, Option<Quantity>>,
}

impl Parameters {
    /// What stands behind a name.
    pub(super) fn lookup(&self, name: &str) -> Lookup {
        match self.values.get(name) {
            Some(Some(quantity)) => Lookup::Known(*quantity),
            Some(None) => Lookup::Faulty,
            None => Lookup::Unknown,
        }
    }

    /// All names.
    pub(super) fn names(&self) -> impl Iterator<Item = &str> {
        self.values.keys().map(String::as_str)
    }
}

/// A parameter that is computed from others.
struct Computed<'t> {
    field: Field<'t>,
    expression: Expression,
    /// The computed parameters that it uses, by their index.
    uses: Vec<usize>,
}

/// Reads the table and computes all values into the reader's parameters.
pub(super) fn read_parameters(reader: &mut Reader<'_>, f: Field<'_>) {
    let Some(table) = reader.free_table(f, "[parameters]") else { return };
    let fields = table.fields();
    if fields.len() > MOST {
        let message = format!("there are {} parameters; the limit is {MOST}", fields.len());
        reader.report(Diagnostic::error(f.key, message));
        return;
    }
    let mut computed: Vec<Computed<'_>> = Vec::new();
    for f in fields {
        check_name(reader, f);
        let value = match f.value {
            DeValue::String(text) => match Expression::parse(text) {
                Ok(expression) => {
                    computed.push(Computed { field: f, expression, uses: Vec::new() });
                    None
                }
                Err(failure) => reader.expression_failed(f, failure, 0),
            },
            DeValue::Integer(_) | DeValue::Float(_) => {
                reader.number(f).map(|value| Quantity { value, kind: Kind::Plain })
            }
            _ => reader.expected(f, "a number or an expression"),
        };
        reader.parameters.values.insert(f.name.to_owned(), value);
    }
    link(&mut computed);
    compute(reader, &computed);
}

fn check_name(reader: &mut Reader<'_>, f: Field<'_>) {
    let (message, help) = if !is_name(f.name) {
        (
            format!("expressions cannot read `{}` as a name", excerpt(f.name)),
            "begin with a letter and go on with letters, digits and _",
        )
    } else if is_taken(f.name) {
        (
            format!("`{}` means something else in expressions", f.name),
            "functions, units and pi keep their names; choose another one",
        )
    } else {
        return;
    };
    reader.report(Diagnostic::error(f.key, message).help(help));
}

/// Finds which computed parameters each one uses.
fn link(computed: &mut [Computed<'_>]) {
    let index: BTreeMap<&str, usize> =
        computed.iter().enumerate().map(|(i, c)| (c.field.name, i)).collect();
    for c in computed {
        c.uses = c.expression.names().iter().filter_map(|(n, _)| index.get(n)).copied().collect();
    }
}

#[derive(Clone, Copy, PartialEq, Eq)]
enum Visit {
    New,
    Open,
    Done,
}

/// Computes each parameter after those that it uses.
fn compute(reader: &mut Reader<'_>, computed: &[Computed<'_>]) {
    let mut visits = vec![Visit::New; computed.len()];
    for first in 0..computed.len() {
        if visits[first] != Visit::New {
            continue;
        }
        visits[first] = Visit::Open;
        // Each entry: a parameter, and how many of those that it uses have been followed.
        let mut path = vec![(first, 0)];
        while let Some((current, followed)) = path.last_mut() {
            let current = *current;
            let next = computed[current].uses.get(*followed).copied();
            *followed += 1;
            match next.map(|n| (n, visits[n])) {
                Some((n, Visit::New)) => {
                    visits[n] = Visit::Open;
                    path.push((n, 0));
                }
                Some((n, Visit::Open)) => {
                    let from = path.iter().position(|(p, _)| *p == n).unwrap_or(0);
                    let ring: Vec<usize> = path[from..].iter().map(|(p, _)| *p).collect();
                    report_ring(reader, computed, &ring);
                }
                Some((_, Visit::Done)) => {}
                None => {
                    visits[current] = Visit::Done;
                    path.pop();
                    evaluate(reader, &computed[current]);
                }
            }
        }
    }
}

fn evaluate(reader: &mut Reader<'_>, c: &Computed<'_>) {
    let value = c.expression.value(reader.units, &|name| reader.parameters.lookup(name));
    let value = match value {
        Ok(quantity) => Some(quantity),
        Err(failure) => reader.expression_failed(c.field, failure, 0),
    };
    reader.parameters.values.insert(c.field.name.to_owned(), value);
}

/// One diagnostic for a ring, at its member that stands first in the file.
fn report_ring(reader: &mut Reader<'_>, computed: &[Computed<'_>], ring: &[usize]) {
    let start = (0..ring.len()).min_by_key(|i| computed[ring[*i]].field.key).unwrap_or(0);
    let members: Vec<&Computed<'_>> =
        ring[start..].iter().chain(&ring[..start]).map(|i| &computed[*i]).collect();
    let mut names: Vec<&str> = members.iter().map(|c| c.field.name).collect();
    names.push(names[0]);
    if names.len() > RING_SHOWN {
        names.splice(RING_SHOWN / 2..names.len() - RING_SHOWN / 2, ["…"]);
    }
    let message = format!("parameters go round in a circle: {}", names.join(" → "));
    let mut d = Diagnostic::error(members[0].field.span, message)
        .help("give one of them a value that does not depend on the others");
    for (member, user) in members.iter().skip(1).zip(&members).take(RING_SHOWN) {
        d = d.related(member.field.span, format!("used by `{}`", user.field.name));
    }
    reader.report(d);
}
