//! Where the members of a repeated shape stand.

use super::figure::{Fault, Motion};
use crate::geom::Vector;
use crate::spec::Repeat;

/// Most members of one repeat; a perforated plate has some thousands.
pub(super) const MOST_MEMBERS: u64 = 20_000;

/// How the shape as written moves to each member, the first (where it stays) included. A grid runs
/// along its rows: right first, then up.
///
/// # Errors
/// [`Fault`] for no members at all, and for more than [`MOST_MEMBERS`].
pub(super) fn motions(repeat: &Repeat) -> Result<Vec<Motion>, Fault> {
    let count = match repeat {
        Repeat::Polar { count, .. } => u64::from(*count),
        Repeat::Grid { count: (columns, rows), .. } => u64::from(*columns) * u64::from(*rows),
        Repeat::At { offsets } => offsets.len() as u64 + 1,
        Repeat::Mirror { .. } => 2,
    };
    if count == 0 || count > MOST_MEMBERS {
        return Err(Fault::new(format!("the shape is repeated {count} times"))
            .help(format!("a repeat has 1 to {MOST_MEMBERS} members")));
    }
    Ok(match repeat {
        Repeat::Polar { count, about, step } => {
            (0..*count).map(|i| Motion::turn(*about, *step * f64::from(i))).collect()
        }
        Repeat::Grid { count: (columns, rows), pitch } => (0..*rows)
            .flat_map(|row| (0..*columns).map(move |column| (column, row)))
            .map(|(column, row)| {
                let (right, up) = (f64::from(column), f64::from(row));
                Motion::shift(Vector::new(pitch.x * right, pitch.y * up))
            })
            .collect(),
        Repeat::At { offsets } => {
            let first = std::iter::once(Vector::new(0.0, 0.0));
            first.chain(offsets.iter().copied()).map(Motion::shift).collect()
        }
        Repeat::Mirror { axis, at } => {
            vec![Motion::shift(Vector::new(0.0, 0.0)), Motion::mirror(*axis, *at)]
        }
    })
}
