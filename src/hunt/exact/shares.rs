//! How the wanted columns are shared out among the kinds.

use super::action::{Action, Kind};

/// The most ways that are listed.
const MOST: usize = 4096;

/// The kinds with how many columns of each, most levels first.
pub(super) type Share = Vec<(Kind, usize)>;

/// Every way to give each wanted column a kind that the dimensions allow; `None` when there are
/// too many. `wanted`: levels with the number of columns, most levels first.
///
/// Mutually orthogonal columns span independent spaces of functions on the runs, and the group
/// acts on them; so for each character the multiplicities add up to at most those of all
/// functions.
pub(super) fn shares(action: &Action, wanted: &[(u16, usize)]) -> Option<Vec<Share>> {
    let mut kinds = Vec::new();
    for &(s, count) in wanted {
        let of = action.kinds(s);
        let last = of.len();
        if last == 0 {
            return Some(Vec::new());
        }
        for (i, kind) in of.into_iter().enumerate() {
            let takes = action.takes(&kind);
            kinds.push(Entry { kind, takes, first: i == 0, last: i + 1 == last, count });
        }
    }
    let mut found = Vec::new();
    let mut room = action.room();
    place(&kinds, 0, &mut Vec::new(), &mut room, &mut found).then_some(())?;
    Some(found)
}

struct Entry {
    kind: Kind,
    takes: Vec<usize>,
    /// Whether it is the first, the last one of its levels.
    first: bool,
    last: bool,
    /// How many columns of these levels are wanted.
    count: usize,
}

/// False when there are too many.
fn place(
    kinds: &[Entry],
    left: usize,
    counts: &mut Vec<usize>,
    room: &mut Vec<usize>,
    found: &mut Vec<Share>,
) -> bool {
    let Some(entry) = kinds.get(counts.len()) else {
        let share = kinds.iter().zip(counts.iter()).filter(|(_, c)| **c > 0);
        found.push(share.map(|(e, &c)| (e.kind.clone(), c)).collect());
        return found.len() <= MOST;
    };
    let left = if entry.first { entry.count } else { left };
    let most = entry.takes.iter().zip(room.iter()).filter(|(t, _)| **t > 0).map(|(t, r)| r / t).min();
    let most = most.unwrap_or(0).min(left);
    for count in if entry.last { left } else { 0 }..=most {
        let after: Vec<usize> = room.iter().zip(&entry.takes).map(|(r, t)| r - t * count).collect();
        let before = std::mem::replace(room, after);
        counts.push(count);
        let goes_on = place(kinds, left - count, counts, room, found);
        counts.pop();
        *room = before;
        if !goes_on {
            return false;
        }
    }
    true
}

#[cfg(test)]
mod tests {
    use super::*;

    fn counts(runs: u32, group: &[u16], wanted: &[(u16, usize)]) -> Vec<Vec<usize>> {
        let action = Action::new(runs, group).unwrap();
        let shares = shares(&action, wanted).unwrap();
        shares.into_iter().map(|s| s.into_iter().map(|(_, c)| c).collect()).collect()
    }

    #[test]
    fn dimensions_bound_the_shares() {
        assert_eq!(counts(12, &[], &[(2, 11)]), [[11]]);
        assert!(counts(12, &[], &[(2, 12)]).is_empty());
        assert!(counts(12, &[], &[(6, 1), (2, 7)]).is_empty());
        // 18 runs, six orbits of Z3: five dimensions of trivial character and six of each other.
        assert_eq!(counts(18, &[3], &[(3, 8)]), [[2, 6]]);
        assert_eq!(counts(18, &[3], &[(3, 7), (2, 1)]), [[1, 6, 1], [2, 5, 1]]);
        assert_eq!(counts(18, &[3], &[(3, 1)]), [[1], [1]]);
    }
}
