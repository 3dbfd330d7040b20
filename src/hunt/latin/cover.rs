//! Exact cover of the orbits of differences by orbits of columns.

use super::random::Random;
use super::space::{Column, Short, Space};

/// The longest list of columns.
const MAX_LIST: usize = 1 << 24;

/// A set of orbits of differences, by number.
type Mask = [u128; 2];

fn add(mask: &mut Mask, orbit: usize) {
    mask[orbit / 128] |= 1 << (orbit % 128);
}

fn has(mask: &Mask, orbit: usize) -> bool {
    mask[orbit / 128] >> (orbit % 128) & 1 == 1
}

fn disjoint(a: &Mask, b: &Mask) -> bool {
    a[0] & b[0] == 0 && a[1] & b[1] == 0
}

/// A column that no symmetry fixes, one of each orbit.
pub(super) struct Candidate {
    covers: Mask,
    /// Entries of 8 bits, row 0 first.
    entries: Vec<u8>,
    /// Its place among the kinds of [`Space::row_orbits`]; their number for a full column.
    kind: usize,
}

/// All columns that cover no orbit of differences twice; `None` when there are too many.
pub(super) fn candidates(space: &Space<'_>) -> Option<Vec<Candidate>> {
    if space.members.len() > 256 {
        return None;
    }
    let mut list = Vec::new();
    let full = (space.row_orbits.len(), None);
    let empty = space.row_orbits.iter().enumerate().map(|(kind, &(row, _))| (kind, Some(row)));
    for (kind, empty) in std::iter::once(full).chain(empty.filter(|_| space.search.empty > 0)) {
        let first = usize::from(empty == Some(0));
        let mut column = vec![None; space.k];
        column[first] = Some(0);
        extend(space, &mut column, first + 1, (kind, empty), [0; 2], &mut list)?;
    }
    Some(list)
}

fn extend(
    space: &Space<'_>,
    column: &mut Column,
    row: usize,
    (kind, empty): (usize, Option<usize>),
    covers: Mask,
    list: &mut Vec<Candidate>,
) -> Option<()> {
    if row == space.k {
        let least = |image: Column| empty.is_some_and(|e| image[e].is_some()) || image >= *column;
        if space.symmetries[1..].iter().all(|s| least(space.image(s, column))) {
            // An empty place is never read: it is one for all columns of a kind.
            let entries = column.iter().map(|e| e.map_or(0, |e| e as u8)).collect();
            list.push(Candidate { covers, entries, kind });
        }
        return (list.len() <= MAX_LIST).then_some(());
    }
    if Some(row) == empty {
        return extend(space, column, row + 1, (kind, empty), covers, list);
    }
    for value in 0..space.n as u16 {
        if let Some(covers) = with(space, column, row, value, covers) {
            column[row] = Some(value);
            extend(space, column, row + 1, (kind, empty), covers, list)?;
            column[row] = None;
        }
    }
    Some(())
}

/// `covers` with the differences of `value` in `row` and the entries before it.
fn with(space: &Space<'_>, column: &Column, row: usize, value: u16, mut covers: Mask) -> Option<Mask> {
    for (i, entry) in column[..row].iter().enumerate() {
        let Some(entry) = *entry else { continue };
        let orbit = space.of(i, row, entry, value);
        if has(&covers, orbit) || space.members[orbit].len() < space.symmetries.len() {
            return None;
        }
        add(&mut covers, orbit);
    }
    Some(covers)
}

/// One attempt: fixed columns at random, then the others; one column of each orbit.
pub(super) fn cover(
    space: &Space<'_>,
    list: &[Candidate],
    random: &mut Random,
    nodes: u64,
) -> Option<Vec<Column>> {
    let (mut bases, covered, kinds) = (0..1000).find_map(|_| choose_shorts(space, random))?;
    let fits: Vec<u32> = (0..list.len() as u32)
        .filter(|&c| {
            let c = &list[c as usize];
            kinds[c.kind] > 0 && disjoint(&c.covers, &covered)
        })
        .collect();
    let mut attempt = Attempt { space, list, random, kinds, chosen: Vec::new(), left: nodes };
    if !attempt.next(covered, &fits) {
        return None;
    }
    for &c in &attempt.chosen {
        let c = &list[c as usize];
        let empty = space.row_orbits.get(c.kind).map(|o| o.0);
        let entry = |(r, &e): (usize, &u8)| (Some(r) != empty).then_some(u16::from(e));
        bases.push(c.entries.iter().enumerate().map(entry).collect());
    }
    Some(bases)
}

/// Chooses fixed columns at random that cover the short orbits and leave whole orbits of columns:
/// the columns, what they cover, how many columns of each kind are missing.
fn choose_shorts(space: &Space<'_>, random: &mut Random) -> Option<(Vec<Column>, Mask, Vec<usize>)> {
    let mut covered: Mask = [0; 2];
    let mut chosen: Vec<&Short> = Vec::new();
    loop {
        let short = |o: &usize| !has(&covered, *o) && space.members[*o].len() < space.symmetries.len();
        let missing = (0..space.members.len()).find(short);
        let kinds = if missing.is_none() { kinds_left(space, &chosen) } else { None };
        let fits: Vec<&Short> = space
            .shorts
            .iter()
            .filter(|s| missing.is_none_or(|o| s.covers.contains(&o)))
            .filter(|s| s.covers.iter().all(|&o| !has(&covered, o)))
            .collect();
        if let Some(kinds) = kinds
            && (fits.is_empty() || random.below(4) > 0)
        {
            return Some((chosen.into_iter().map(|s| s.column.clone()).collect(), covered, kinds));
        }
        if fits.is_empty() {
            return None;
        }
        let taken = fits[random.below(fits.len())];
        taken.covers.iter().for_each(|&o| add(&mut covered, o));
        chosen.push(taken);
    }
}

fn kinds_left(space: &Space<'_>, chosen: &[&Short]) -> Option<Vec<usize>> {
    let u = space.search.empty;
    let h = space.symmetries.len();
    let mut columns = space.n + 2 * u;
    for short in chosen {
        columns = columns.checked_sub(short.images)?;
    }
    let mut kinds = Vec::with_capacity(space.row_orbits.len() + 1);
    for &(row, length) in &space.row_orbits {
        let empty = |s: &Short| space.orbit(&s.column).iter().filter(|c| c[row].is_none()).count();
        let there: usize = chosen.iter().map(|s| empty(s)).sum();
        let missing = u.checked_sub(there)? * length;
        columns = columns.checked_sub(missing).filter(|_| missing.is_multiple_of(h))?;
        kinds.push(missing / h);
    }
    kinds.push(columns / h);
    columns.is_multiple_of(h).then_some(kinds)
}

struct Attempt<'a> {
    space: &'a Space<'a>,
    list: &'a [Candidate],
    random: &'a mut Random,
    kinds: Vec<usize>,
    chosen: Vec<u32>,
    left: u64,
}

impl Attempt<'_> {
    /// Covers the rest with columns from `fits`.
    fn next(&mut self, covered: Mask, fits: &[u32]) -> bool {
        let Some(orbit) = self.scarcest(&covered, fits) else {
            return self.kinds.iter().all(|&k| k == 0);
        };
        let mut branches: Vec<u32> =
            fits.iter().copied().filter(|&c| has(&self.list[c as usize].covers, orbit)).collect();
        self.random.shuffle(&mut branches);
        for c in branches {
            if self.left == 0 {
                return false;
            }
            self.left -= 1;
            let taken = &self.list[c as usize];
            self.kinds[taken.kind] -= 1;
            self.chosen.push(c);
            let now = [covered[0] | taken.covers[0], covered[1] | taken.covers[1]];
            let rest: Vec<u32> = fits
                .iter()
                .copied()
                .filter(|&c| {
                    let c = &self.list[c as usize];
                    disjoint(&c.covers, &taken.covers) && self.kinds[c.kind] > 0
                })
                .collect();
            if self.next(now, &rest) {
                return true;
            }
            self.chosen.pop();
            self.kinds[taken.kind] += 1;
        }
        false
    }

    /// The orbit that is not covered and that the fewest columns cover; on a long list, where they
    /// differ little, the fewest among its first columns.
    fn scarcest(&self, covered: &Mask, fits: &[u32]) -> Option<usize> {
        let mut counts = vec![0u32; self.space.members.len()];
        for &c in fits.iter().take(20_000) {
            for (half, &bits) in self.list[c as usize].covers.iter().enumerate() {
                let mut bits = bits;
                while bits != 0 {
                    counts[half * 128 + bits.trailing_zeros() as usize] += 1;
                    bits &= bits - 1;
                }
            }
        }
        (0..counts.len()).filter(|&o| !has(covered, o)).min_by_key(|&o| counts[o])
    }
}
