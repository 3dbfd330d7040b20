//! A group on the runs, and the kinds of columns that it can have.

use crate::construct::OrbitColumn;

/// A finite abelian group that acts freely on the runs: run (o, g) has the number `o·order + g`.
pub(in crate::hunt) struct Action {
    pub(super) runs: usize,
    pub(super) order: usize,
    pub(super) orbits: usize,
    group: Vec<u16>,
    elements: Vec<Vec<u16>>,
}

/// Columns of one number of levels on which the group acts through one character.
///
/// The level of run (o, g) is `base[o] + values[g]` modulo `levels`. The image is the multiples of
/// `cosets`; level l lies in coset `l mod cosets` at offset `l / cosets`.
#[derive(Clone)]
pub(in crate::hunt) struct Kind {
    pub(super) levels: usize,
    pub(super) cosets: usize,
    pub(super) image: usize,
    pub(super) shifts: Vec<u16>,
    pub(super) values: Vec<usize>,
    /// The elements of the group that fix every level.
    pub(super) kernel: u128,
}

/// One column, with the runs of each level as a bit set.
#[derive(Clone)]
pub(in crate::hunt) struct Column {
    pub(in crate::hunt) levels: usize,
    pub(in crate::hunt) base: Vec<u8>,
    pub(in crate::hunt) masks: Vec<u128>,
    pub(super) values: Vec<usize>,
    pub(super) kernel: u128,
    shifts: Vec<u16>,
}

impl Column {
    pub(super) fn stored(&self) -> OrbitColumn {
        OrbitColumn {
            levels: self.levels as u16,
            shifts: self.shifts.clone(),
            base: self.base.iter().map(|&b| u16::from(b)).collect(),
        }
    }
}

impl Action {
    /// `None` when the group has more elements than there are runs, or does not divide them.
    pub(in crate::hunt) fn new(runs: u32, group: &[u16]) -> Option<Self> {
        let order = group.iter().try_fold(1u32, |n, &g| n.checked_mul(u32::from(g)))?;
        if runs == 0 || runs > super::MAX_RUNS || group.iter().any(|&n| n < 2) || !runs.is_multiple_of(order)
        {
            return None;
        }
        let elements = (0..order)
            .map(|mut g| {
                group
                    .iter()
                    .map(|&n| {
                        let digit = g % u32::from(n);
                        g /= u32::from(n);
                        digit as u16
                    })
                    .collect()
            })
            .collect();
        let (runs, order) = (runs as usize, order as usize);
        Some(Self { runs, order, orbits: runs / order, group: group.to_vec(), elements })
    }

    pub(in crate::hunt) fn runs(&self) -> usize {
        self.runs
    }

    /// The kinds of columns of `levels` levels that can be balanced: one character per kernel,
    /// because two with the same kernel differ by a renaming of the levels.
    pub(in crate::hunt) fn kinds(&self, levels: u16) -> Vec<Kind> {
        let s = u32::from(levels);
        let mut all: Vec<Vec<u16>> = vec![Vec::new()];
        for &n in &self.group {
            let steps: Vec<u16> =
                (0..levels).filter(|&x| (u32::from(x) * u32::from(n)).is_multiple_of(s)).collect();
            all = all
                .iter()
                .flat_map(|c| steps.iter().map(|&x| c.iter().copied().chain([x]).collect()))
                .collect();
        }
        let mut kinds: Vec<Kind> = Vec::new();
        for shifts in all {
            let kind = self.kind(levels, shifts);
            let known = kinds.iter().any(|k| k.kernel == kind.kernel);
            if !known && self.orbits.is_multiple_of(kind.cosets) {
                kinds.push(kind);
            }
        }
        kinds
    }

    fn kind(&self, levels: u16, shifts: Vec<u16>) -> Kind {
        let s = usize::from(levels);
        let values: Vec<usize> = self
            .elements
            .iter()
            .map(|e| e.iter().zip(&shifts).map(|(&d, &x)| usize::from(d) * usize::from(x)).sum::<usize>() % s)
            .collect();
        let kernel = mask((0..self.order).filter(|&g| values[g] == 0));
        let image = self.order / kernel.count_ones() as usize;
        Kind { levels: s, cosets: s / image, image, shifts, values, kernel }
    }

    /// How many dimensions of each isotypic part of the functions on the runs a column takes.
    ///
    /// The functions of zero sum on the levels of a column are permuted by the group; they hold
    /// each character that is trivial on the kernel once per coset, the trivial one once less.
    pub(super) fn takes(&self, kind: &Kind) -> Vec<usize> {
        let common = self.group.iter().fold(1u64, |n, &g| num_integer::lcm(n, u64::from(g)));
        let trivial_on_kernel = |dual: &Vec<u16>| {
            bits(kind.kernel).all(|g| {
                let turn: u64 = dual
                    .iter()
                    .zip(&self.elements[g])
                    .zip(&self.group)
                    .map(|((&d, &e), &n)| u64::from(d) * u64::from(e) * (common / u64::from(n)))
                    .sum();
                turn.is_multiple_of(common)
            })
        };
        let mut takes: Vec<usize> =
            self.elements.iter().map(|d| if trivial_on_kernel(d) { kind.cosets } else { 0 }).collect();
        takes[0] -= 1;
        takes
    }

    /// How many dimensions there are of each: as many as orbits, the constants aside.
    pub(super) fn room(&self) -> Vec<usize> {
        let mut room = vec![self.orbits; self.order];
        room[0] -= 1;
        room
    }

    pub(in crate::hunt) fn column(&self, kind: &Kind, base: Vec<u8>) -> Column {
        let mut masks = vec![0u128; kind.levels];
        self.fill(kind, &base, &mut masks);
        let (values, shifts) = (kind.values.clone(), kind.shifts.clone());
        Column { levels: kind.levels, base, masks, values, kernel: kind.kernel, shifts }
    }

    /// The runs of each level of the column with these base symbols.
    pub(super) fn fill(&self, kind: &Kind, base: &[u8], masks: &mut [u128]) {
        masks.fill(0);
        for (o, &b) in base.iter().enumerate() {
            for (g, &v) in kind.values.iter().enumerate() {
                masks[(usize::from(b) + v) % kind.levels] |= 1 << (o * self.order + g);
            }
        }
    }
}

impl Kind {
    /// The base symbol that is numbered `code`: cosets first, offsets within them next.
    pub(super) fn symbol(&self, code: usize) -> usize {
        code / self.image + self.cosets * (code % self.image)
    }

    /// The first column of this kind: every other one is it after a permutation of the orbits,
    /// translations of single orbits and a renaming of the levels.
    pub(super) fn first(&self, orbits: usize) -> Vec<u8> {
        (0..orbits).map(|o| (o / (orbits / self.cosets)) as u8).collect()
    }
}

/// The bit set of the given numbers.
pub(super) fn mask(of: impl Iterator<Item = usize>) -> u128 {
    of.fold(0, |m, i| m | 1 << i)
}

/// The numbers in a bit set.
pub(super) fn bits(mut set: u128) -> impl Iterator<Item = usize> {
    std::iter::from_fn(move || {
        let i = (set != 0).then(|| set.trailing_zeros() as usize)?;
        set &= set - 1;
        Some(i)
    })
}

/// Whether a balanced column meets every part of an even partition of the runs equally often on
/// each level. The last part and the last level follow from the others.
pub(in crate::hunt) fn fits(parts: &[u128], masks: &[u128], runs: usize) -> bool {
    let cells = parts.len() * masks.len();
    if !runs.is_multiple_of(cells) {
        return false;
    }
    let even = (runs / cells) as u32;
    parts[1..].iter().all(|p| masks[1..].iter().all(|m| (p & m).count_ones() == even))
}

/// The partition of the runs by two columns.
pub(in crate::hunt) fn product(a: &[u128], b: &[u128]) -> Vec<u128> {
    a.iter().flat_map(|x| b.iter().map(move |y| x & y)).collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn kinds_are_the_kernels_with_a_cyclic_quotient() {
        let count = |runs, group: &[u16], s| Action::new(runs, group).unwrap().kinds(s).len();
        assert_eq!(count(18, &[], 3), 1);
        assert_eq!(count(18, &[3], 3), 2);
        // Of Z3×Z3: itself and four subgroups of order 3; 6 orbits.
        assert_eq!(count(54, &[3, 3], 3), 5);
        // Of Z4 to Z4: three; two orbits cannot be spread over four cosets.
        assert_eq!(count(8, &[4], 4), 2);
        assert_eq!(count(16, &[4], 4), 3);
        assert!(Action::new(12, &[5]).is_none() && Action::new(0, &[]).is_none());
        assert!(Action::new(12, &[1]).is_none() && Action::new(200, &[]).is_none());
    }

    #[test]
    fn a_column_takes_one_dimension_less_than_it_has_levels() {
        for (runs, group, s) in [(24, &[2u16][..], 6u16), (36, &[3], 6), (36, &[6], 6), (64, &[4, 2], 4)] {
            let action = Action::new(runs, group).unwrap();
            assert_eq!(action.room().iter().sum::<usize>(), runs as usize - 1);
            for kind in action.kinds(s) {
                assert_eq!(action.takes(&kind).iter().sum::<usize>(), usize::from(s) - 1);
                let column = action.column(&kind, kind.first(action.orbits));
                assert!(column.masks.iter().all(|m| m.count_ones() == runs / u32::from(s)));
            }
        }
    }
}
