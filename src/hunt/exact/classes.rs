//! Which columns are the same after moving runs that no chosen column tells apart.

use std::collections::BTreeMap;

use super::action::{Action, Column, Kind, bits};

/// The symmetries that keep every chosen column as it is: orbits in one class are exchanged, and
/// single orbits are translated by elements that all chosen columns ignore.
///
/// They commute with the group of the action and become fewer with every column that is chosen.
/// Two columns of a kind go over into each other, up to renaming of levels, exactly when their
/// *keys* are equal: the key counts, for each class, the aligned levels that its orbits have.
pub(super) struct Classes {
    /// The class of each orbit.
    pub(super) class: Vec<usize>,
    count: usize,
    /// For each orbit the element that brings the chosen columns to the form of the class.
    align: Vec<usize>,
    /// The elements that all chosen columns ignore.
    ignored: u128,
}

impl Classes {
    pub(super) fn new(action: &Action, chosen: &[Column]) -> Self {
        let mut numbers: BTreeMap<Vec<usize>, usize> = BTreeMap::new();
        let (mut class, mut align) = (Vec::new(), Vec::new());
        for o in 0..action.orbits {
            let at = |g: usize| -> Vec<usize> {
                chosen.iter().map(|c| (usize::from(c.base[o]) + c.values[g]) % c.levels).collect()
            };
            let (form, g) = (0..action.order).map(|g| (at(g), g)).min().expect("a group is not empty");
            let next = numbers.len();
            class.push(*numbers.entry(form).or_insert(next));
            align.push(g);
        }
        let all = u128::MAX >> (128 - action.order);
        let ignored = chosen.iter().fold(all, |k, c| k & c.kernel);
        Self { class, count: numbers.len(), align, ignored }
    }

    /// Whether there is any symmetry left.
    pub(super) fn any(&self) -> bool {
        self.count < self.class.len() || self.ignored != 1
    }

    /// What two columns of a kind have in common exactly when a symmetry takes one to the other.
    pub(super) fn key(&self, kind: &Kind, base: &[u8]) -> Vec<u8> {
        // Levels that differ by what an ignored element does are one: offsets modulo `turns`.
        let moved = bits(self.ignored).map(|g| kind.values[g] / kind.cosets).filter(|&x| x > 0);
        let turns = moved.fold(kind.image, num_integer::gcd);
        let width = self.count * turns;
        let mut counts = vec![0u8; kind.cosets * width];
        for (o, &b) in base.iter().enumerate() {
            let level = (usize::from(b) + kind.values[self.align[o]]) % kind.levels;
            let (coset, offset) = (level % kind.cosets, level / kind.cosets % turns);
            counts[coset * width + self.class[o] * turns + offset] += 1;
        }
        let mut rows: Vec<Vec<u8>> = counts.chunks_exact(width).map(|row| smallest(row, turns)).collect();
        rows.sort_unstable();
        rows.concat()
    }
}

/// The smallest row that turning all classes by the same offset makes.
fn smallest(row: &[u8], turns: usize) -> Vec<u8> {
    let turned = |by: usize| -> Vec<u8> {
        row.chunks_exact(turns).flat_map(|c| c[by..].iter().chain(&c[..by]).copied()).collect()
    };
    (0..turns).map(turned).min().expect("there is at least one offset")
}

#[cfg(test)]
mod tests {
    use super::super::generate::Generator;
    use super::super::meter::Meter;
    use super::*;
    use crate::hunt::Effort;
    use std::collections::BTreeSet;

    fn keys(runs: u32, chosen: &[&[u8]], group: &[u16], s: u16) -> usize {
        let action = Action::new(runs, group).unwrap();
        let columns: Vec<Column> = chosen
            .iter()
            .map(|c| {
                let levels = u16::from(*c.iter().max().unwrap()) + 1;
                action.column(&action.kinds(levels)[0], c.to_vec())
            })
            .collect();
        let classes = Classes::new(&action, &columns);
        let mut keys = BTreeSet::new();
        let given: Vec<Vec<u128>> = columns.iter().map(|c| c.masks.clone()).collect();
        for (i, kind) in action.kinds(s).iter().enumerate() {
            let mut generator = Generator::new(&action, kind, &given, None).unwrap();
            generator.run(&mut Meter::new(&mut Effort::unlimited(), u64::MAX), &mut |base| {
                keys.insert((i, classes.key(kind, base))) | true
            });
        }
        keys.len()
    }

    /// OA(12, 2^3) has one form beside two given columns, or its complement: 3 = λ of them have
    /// counts t and 3 − t on the eight cells, t = 0, 1.
    #[test]
    fn third_columns_beside_two() {
        let a = [0, 0, 0, 0, 0, 0, 1, 1, 1, 1, 1, 1];
        let b = [0, 0, 0, 1, 1, 1, 0, 0, 0, 1, 1, 1];
        assert_eq!(keys(12, &[&a], &[], 2), 1);
        assert_eq!(keys(12, &[&a, &b], &[], 2), 2);
        // 20 runs: three classes of OA(20, 2^3) (methods 3.5).
        let a: Vec<u8> = (0..20).map(|r| r / 10).collect();
        let b: Vec<u8> = (0..20).map(|r| r / 5 % 2).collect();
        assert_eq!(keys(20, &[&a, &b], &[], 2), 3);
    }
}
