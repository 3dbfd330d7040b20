//! Arrays with a prescribed group of symmetries, from one symbol per orbit.

use serde::{Deserialize, Serialize};

use super::ConstructError;
use crate::array::Array;

const NAME: &str = "orbit array";

/// One column of an array on which a group acts: its symbol in run (o, g) is
/// `base[o] + Σ g_i · shifts[i]` modulo `levels`.
#[derive(Clone, Debug, PartialEq, Eq, Hash, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct OrbitColumn {
    /// The number of levels.
    pub levels: u16,
    /// How far each generator of the group moves the level.
    #[serde(default, skip_serializing_if = "Vec::is_empty")]
    pub shifts: Vec<u16>,
    /// The symbol of the first run of each orbit.
    pub base: Vec<u16>,
}

/// The array whose runs are the pairs (o, g) of an orbit and an element of the abelian group
/// Z_{n_1} × … × Z_{n_r}, which acts freely on the runs and by translation on the levels.
///
/// # Parameters
/// `group`: n_1 … n_r, the trivial group when empty. `columns`: one for each factor. All of these
/// must hold:
/// * every n_i is at least 2, and there is at least one column;
/// * all columns have the same number of orbits, at least 1, and one shift per n_i;
/// * every shift is below the levels and `n_i · shift` is a multiple of them, every base symbol is
///   below the levels.
///
/// # Result
/// orbits · ∏ n_i runs; run (o, g) has the number `o · ∏ n_i` plus g read in mixed radix, first
/// generator fastest. The strength is whatever the columns were chosen for; nothing is checked.
///
/// # Errors
/// [`ConstructError::Condition`] when a condition fails, [`ConstructError::Array`] when the result
/// does not fit into memory.
///
/// # Cost
/// O(cells of the result).
///
/// # Reference
/// The usual way to store an object with a prescribed group of automorphisms; common practice in
/// combinatorial search, no source.
///
/// ```
/// use trysquare::construct::{OrbitColumn, orbit_array};
/// use trysquare::verify::{Demand, Verdict, certify};
/// let column = |base: [u16; 3], shift| OrbitColumn { levels: 3, shifts: vec![shift], base: base.into() };
/// let array = orbit_array(&[3], &[column([0, 1, 2], 0), column([0, 0, 0], 1), column([0, 1, 2], 1)])?;
/// assert_eq!(certify(&array, &Demand::strength(2))?.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn orbit_array(group: &[u16], columns: &[OrbitColumn]) -> Result<Array, ConstructError> {
    let fail = |needs: &str| Err(ConstructError::condition(NAME, needs));
    if group.iter().any(|&n| n < 2) {
        return fail("cyclic factors of at least 2");
    }
    let orbits = columns.first().map_or(0, |c| c.base.len());
    if orbits == 0 {
        return fail("at least one column with at least one orbit");
    }
    for c in columns {
        if c.base.len() != orbits || c.shifts.len() != group.len() {
            return fail("one base symbol per orbit and one shift per cyclic factor in every column");
        }
        let moves = |(&shift, &n): (&u16, &u16)| {
            shift < c.levels && (u32::from(shift) * u32::from(n)).is_multiple_of(u32::from(c.levels))
        };
        if c.levels < 2 || c.base.iter().any(|&b| b >= c.levels) || !c.shifts.iter().zip(group).all(moves) {
            return fail(
                "symbols and shifts below the levels, every shift of an order that divides its factor's",
            );
        }
    }
    let Some(order) = group.iter().try_fold(1usize, |n, &g| n.checked_mul(usize::from(g))) else {
        return fail("a group whose order fits a machine word");
    };
    let Some(runs) = order.checked_mul(orbits) else { return fail("fewer runs") };
    let levels = columns.iter().map(|c| c.levels).collect();
    Ok(Array::from_fn(runs, levels, |run, j| {
        let c = &columns[j];
        let (mut symbol, mut g) = (u64::from(c.base[run / order]), run % order);
        for (&n, &shift) in group.iter().zip(&c.shifts) {
            symbol += (g % usize::from(n)) as u64 * u64::from(shift);
            g /= usize::from(n);
        }
        (symbol % u64::from(c.levels)) as u16
    })?)
}

#[cfg(test)]
mod tests {
    use super::*;

    fn column(levels: u16, shifts: &[u16], base: &[u16]) -> OrbitColumn {
        OrbitColumn { levels, shifts: shifts.to_vec(), base: base.to_vec() }
    }

    #[test]
    fn the_group_acts_as_stated() {
        let array =
            orbit_array(&[2, 3], &[column(6, &[3, 2], &[0, 1]), column(2, &[0, 0], &[0, 1])]).unwrap();
        assert_eq!(array.runs(), 12);
        for run in 0..12 {
            let (o, g, h) = (run / 6, run % 2, run % 6 / 2);
            assert_eq!(usize::from(array.get(run, 0)), (o + 3 * g + 2 * h) % 6);
            assert_eq!(usize::from(array.get(run, 1)), o);
        }
        assert_eq!(orbit_array(&[], &[column(3, &[], &[0, 2, 1])]).unwrap().column(0), [0, 2, 1]);
    }

    #[test]
    fn every_condition_is_checked() {
        for (group, bad) in [
            (&[1u16][..], column(2, &[0], &[0])),
            (&[2], column(2, &[0], &[])),
            (&[2], column(2, &[], &[0])),
            (&[2], column(3, &[1], &[0])),
            (&[2], column(2, &[2], &[0])),
            (&[2], column(2, &[0], &[2])),
            (&[2], column(1, &[0], &[0])),
        ] {
            assert!(orbit_array(group, &[bad]).is_err());
        }
        assert!(orbit_array(&[2], &[]).is_err());
        assert!(orbit_array(&[2], &[column(2, &[0], &[0]), column(2, &[0], &[0, 1])]).is_err());
        assert!(orbit_array(&[60000; 5], &[column(2, &[0; 5], &[0])]).is_err());
    }
}
