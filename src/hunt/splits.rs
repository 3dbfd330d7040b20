//! Columns of two or three levels as bit sets of runs, and what permutations of the runs do to them.

/// A column of two or three levels in which every level occurs equally often.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub(super) struct Split {
    /// The runs of level 0 and, with three levels, of level 1.
    pub(super) masks: [u128; 2],
    pub(super) levels: u8,
}

impl Split {
    /// The same split with its levels named in the order in which they first occur.
    pub(super) fn canonical(self, all: u128) -> Self {
        let [a, b] = self.masks;
        if self.levels == 2 {
            return Self { masks: [if a & 1 == 1 { a } else { all & !a }, 0], ..self };
        }
        let mut parts = [a, b, all & !a & !b];
        parts.sort_unstable_by_key(|p| p.trailing_zeros());
        Self { masks: [parts[0], parts[1]], ..self }
    }

    /// Whether two balanced columns of `runs` runs are orthogonal.
    pub(super) fn orthogonal(&self, other: &Self, runs: u32) -> bool {
        let even = runs / (u32::from(self.levels) * u32::from(other.levels));
        let meet = |i: usize, j: usize| (self.masks[i] & other.masks[j]).count_ones() == even;
        meet(0, 0)
            && (self.levels == 2 || meet(1, 0))
            && (other.levels == 2 || meet(0, 1) && (self.levels == 2 || meet(1, 1)))
    }

    pub(super) fn symbols(&self, runs: usize) -> Vec<u16> {
        (0..runs)
            .map(|run| match (self.masks[0] >> run & 1, self.masks[1] >> run & 1) {
                (1, _) => 0,
                (_, 1) => 1,
                _ => u16::from(self.levels) - 1,
            })
            .collect()
    }
}

/// A permutation of the runs with tables that move a bit set byte by byte.
pub(super) struct Move {
    tables: Vec<[u128; 256]>,
}

impl Move {
    pub(super) fn new(images: &[u8]) -> Self {
        let tables = images
            .chunks(8)
            .map(|chunk| {
                let mut table = [0u128; 256];
                for (byte, entry) in table.iter_mut().enumerate() {
                    for (bit, &image) in chunk.iter().enumerate() {
                        *entry |= u128::from(byte >> bit & 1 == 1) << image;
                    }
                }
                table
            })
            .collect();
        Self { tables }
    }

    fn mask(&self, mask: u128) -> u128 {
        self.tables.iter().enumerate().fold(0, |all, (i, t)| all | t[(mask >> (8 * i) & 255) as usize])
    }

    pub(super) fn split(&self, split: &Split) -> Split {
        let second = if split.levels == 2 { 0 } else { self.mask(split.masks[1]) };
        Split { masks: [self.mask(split.masks[0]), second], levels: split.levels }
    }
}

/// A column with its images under a group; the column first.
pub(super) type Orbit = Vec<Split>;

/// The orbit of a column under the moves, all elements of a group but the identity; `None` when its
/// columns are not orthogonal among themselves.
pub(super) fn orbit(split: Split, moves: &[Move], runs: u32, all: u128) -> Option<Orbit> {
    let mut orbit = vec![split.canonical(all)];
    for m in moves {
        let image = m.split(&split).canonical(all);
        if orbit.contains(&image) {
            continue;
        }
        if !orbit[0].orthogonal(&image, runs) {
            return None;
        }
        orbit.push(image);
    }
    Some(orbit)
}

/// Whether all columns of two orbits under one group are orthogonal: by symmetry one column of the
/// longer and all of the shorter decide.
pub(super) fn joined(a: &Orbit, b: &Orbit, runs: u32) -> bool {
    let (short, long) = if a.len() <= b.len() { (a, b) } else { (b, a) };
    short.iter().all(|w| long[0].orthogonal(w, runs))
}

#[cfg(test)]
mod tests {
    use super::*;

    fn split(symbols: &[u8], levels: u8) -> Split {
        let mask = |s| symbols.iter().enumerate().fold(0, |m, (i, &x)| m | u128::from(x == s) << i);
        Split { masks: [mask(0), if levels == 3 { mask(1) } else { 0 }], levels }
    }

    #[test]
    fn splits_know_their_names_and_their_angles() {
        let a = split(&[2, 2, 0, 0, 1, 1], 3);
        assert_eq!(a.canonical(63).symbols(6), [0, 0, 1, 1, 2, 2]);
        let b = split(&[1, 0, 1, 0, 0, 1], 2);
        assert_eq!(b.canonical(63).symbols(6), [0, 1, 0, 1, 1, 0]);
        assert!(a.orthogonal(&b, 6) && b.orthogonal(&a, 6));
        assert!(!a.orthogonal(&split(&[0, 0, 0, 1, 1, 1], 2), 6));
        let nine = [split(&[0, 0, 0, 1, 1, 1, 2, 2, 2], 3), split(&[0, 1, 2, 0, 1, 2, 0, 1, 2], 3)];
        assert!(nine[0].orthogonal(&nine[1], 9) && !nine[0].orthogonal(&nine[0], 9));
    }

    #[test]
    fn orbits_are_orthogonal_inside() {
        // A turn of four runs and two places: 0011 turned once is orthogonal to it, 0101 is fixed.
        let turn = |k: u8| Move::new(&[0, 1, 2, 3].map(|i| (i + k) % 4));
        let moves = [turn(1), turn(2), turn(3)];
        let o = orbit(split(&[0, 0, 1, 1], 2), &moves, 4, 15).unwrap();
        let fixed = orbit(split(&[0, 1, 0, 1], 2), &moves, 4, 15).unwrap();
        assert_eq!((o.len(), fixed.len()), (2, 1));
        assert!(joined(&o, &fixed, 4) && !joined(&o, &o, 4));
    }
}
