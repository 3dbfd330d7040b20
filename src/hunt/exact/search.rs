//! Columns out of lists of candidates: branching over orbits while there is symmetry left.

use std::collections::BTreeMap;

use super::action::{Action, Column, Kind, fits, product};
use super::classes::Classes;
use super::matrix::Matrix;
use super::meter::Meter;

/// The candidates of one kind.
pub(in crate::hunt) struct Store {
    pub(super) kind: Kind,
    masks: Vec<u128>,
    base: Vec<u8>,
    orbits: usize,
}

impl Store {
    pub(in crate::hunt) fn new(action: &Action, kind: Kind) -> Self {
        Self { kind, masks: Vec::new(), base: Vec::new(), orbits: action.orbits }
    }

    pub(in crate::hunt) fn push(&mut self, action: &Action, base: &[u8]) {
        let from = self.masks.len();
        self.masks.resize(from + self.kind.levels, 0);
        action.fill(&self.kind, base, &mut self.masks[from..]);
        self.base.extend_from_slice(base);
    }

    pub(in crate::hunt) fn len(&self) -> usize {
        self.masks.len() / self.kind.levels
    }

    pub(in crate::hunt) fn masks(&self, i: u32) -> &[u128] {
        &self.masks[i as usize * self.kind.levels..][..self.kind.levels]
    }

    pub(super) fn base(&self, i: u32) -> &[u8] {
        &self.base[i as usize * self.orbits..][..self.orbits]
    }

    pub(in crate::hunt) fn column(&self, action: &Action, i: u32) -> Column {
        action.column(&self.kind, self.base(i).to_vec())
    }
}

/// What a search in lists came to.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub(in crate::hunt) enum Answer {
    /// The chosen columns are what was wanted.
    Found,
    /// There is no such choice.
    None,
    /// The effort was used up before an answer.
    UsedUp,
}

/// Lists up to this length are made a matrix while there is symmetry left.
const SMALL: usize = 2048;
/// Lists up to this length are made a matrix when there is none: 128 MB.
const LARGE: usize = 1 << 15;

/// Everything that stays the same during a search.
pub(in crate::hunt) struct Search<'a> {
    pub(in crate::hunt) action: &'a Action,
    pub(in crate::hunt) strength: usize,
    pub(in crate::hunt) stores: &'a [Store],
}

impl Search<'_> {
    /// Decides whether `missing[k]` columns out of each list k go with the chosen ones and with
    /// one another.
    ///
    /// The lists hold only what goes with the chosen columns, and are closed under the symmetries
    /// that keep these ([`Classes`]). So of each orbit of columns only one is tried, and what was
    /// tried in vain leaves the list with its whole orbit: a choice with another column of that
    /// orbit would be turned by a symmetry into one with the column that was tried. What is left
    /// is closed under the symmetries that keep one column more.
    pub(in crate::hunt) fn node(
        &self,
        chosen: &mut Vec<Column>,
        lists: &[Vec<u32>],
        missing: &mut [usize],
        meter: &mut Meter,
    ) -> Answer {
        let Some(k) = missing.iter().position(|&m| m > 0) else { return Answer::Found };
        if lists.iter().zip(missing.iter()).any(|(l, &m)| l.len() < m) {
            return Answer::None;
        }
        let size: usize =
            lists.iter().zip(missing.iter()).filter(|(_, m)| **m > 0).map(|(l, _)| l.len()).sum();
        let classes = Classes::new(self.action, chosen);
        if self.strength == 2 && (size <= SMALL || (size <= LARGE && !classes.any())) {
            return Matrix::new(self, lists, missing).decide(chosen, missing, meter);
        }
        let mut lists = lists.to_vec();
        for orbit in self.orbits(&classes, k, &lists[k]) {
            if lists[k].len() < missing[k] {
                return Answer::None;
            }
            let column = self.stores[k].column(self.action, orbit[0]);
            let parts = joint(self.strength, chosen, &column);
            let mut child = Vec::new();
            missing[k] -= 1;
            for (j, list) in lists.iter().enumerate() {
                if !meter.spend(list.len() as u64) {
                    return Answer::UsedUp;
                }
                let keep = |&i: &u32| {
                    missing[j] > 0 && parts.iter().all(|p| fits(p, self.stores[j].masks(i), self.action.runs))
                };
                child.push(list.iter().copied().filter(keep).collect());
            }
            chosen.push(column);
            match self.node(chosen, &child, missing, meter) {
                Answer::None => {}
                answer => return answer,
            }
            chosen.pop();
            missing[k] += 1;
            lists[k].retain(|i| orbit.binary_search(i).is_err());
        }
        Answer::None
    }

    /// The list in orbits of the symmetries, each ascending.
    pub(super) fn orbits(&self, classes: &Classes, k: usize, list: &[u32]) -> Vec<Vec<u32>> {
        if !classes.any() {
            return list.iter().map(|&i| vec![i]).collect();
        }
        let store = &self.stores[k];
        let mut orbits: BTreeMap<Vec<u8>, Vec<u32>> = BTreeMap::new();
        for &i in list {
            orbits.entry(classes.key(&store.kind, store.base(i))).or_default().push(i);
        }
        orbits.into_values().collect()
    }
}

/// The partitions that later columns must fit when `column` joins the chosen ones, beside those
/// that they fit already.
pub(in crate::hunt) fn joint(strength: usize, chosen: &[Column], column: &Column) -> Vec<Vec<u128>> {
    if strength == 2 || chosen.is_empty() {
        return vec![column.masks.clone()];
    }
    chosen.iter().map(|c| product(&c.masks, &column.masks)).collect()
}
