//! [`Bag`]: a mix as a multiset, the currency of the shelf.

use std::fmt;

use crate::mix::counts_of;

/// A multiset of level counts: (levels, number of factors) pairs, levels strictly ascending,
/// numbers at least 1. May be empty.
#[derive(Clone, Debug, Default, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub struct Bag {
    entries: Vec<(u16, u32)>,
}

impl Bag {
    /// The multiset of the given levels.
    #[must_use]
    pub fn of_levels(levels: &[u16]) -> Self {
        Self {
            entries: counts_of(levels)
                .into_iter()
                .map(|(s, k)| (s, u32::try_from(k).expect("a mix has fewer than 2^32 factors")))
                .collect(),
        }
    }

    /// The multiset of the given pairs; equal levels are added up, empty pairs left out.
    #[must_use]
    pub fn from_pairs(pairs: impl IntoIterator<Item = (u16, u32)>) -> Self {
        let mut bag = Self::default();
        for (s, k) in pairs {
            bag.add(s, k);
        }
        bag
    }

    /// The pairs, levels ascending.
    #[must_use]
    pub fn entries(&self) -> &[(u16, u32)] {
        &self.entries
    }

    /// Whether there is no factor.
    #[must_use]
    pub fn is_empty(&self) -> bool {
        self.entries.is_empty()
    }

    /// The number of factors of `s` levels.
    #[must_use]
    pub fn count(&self, s: u16) -> u32 {
        self.entries.binary_search_by_key(&s, |e| e.0).map_or(0, |i| self.entries[i].1)
    }

    /// The number of factors.
    #[must_use]
    pub fn factors(&self) -> u64 {
        self.entries.iter().map(|&(_, k)| u64::from(k)).sum()
    }

    /// Σ (s − 1), the degrees of freedom the factors use.
    #[must_use]
    pub fn degrees(&self) -> u64 {
        self.entries.iter().map(|&(s, k)| u64::from(s - 1) * u64::from(k)).sum()
    }

    /// Puts `k` factors of `s` levels in.
    pub fn add(&mut self, s: u16, k: u32) {
        if k == 0 {
            return;
        }
        match self.entries.binary_search_by_key(&s, |e| e.0) {
            Ok(i) => self.entries[i].1 += k,
            Err(i) => self.entries.insert(i, (s, k)),
        }
    }

    /// Takes up to `k` factors of `s` levels out; returns how many.
    pub fn take(&mut self, s: u16, k: u32) -> u32 {
        let Ok(i) = self.entries.binary_search_by_key(&s, |e| e.0) else { return 0 };
        let taken = k.min(self.entries[i].1);
        self.entries[i].1 -= taken;
        if self.entries[i].1 == 0 {
            self.entries.remove(i);
        }
        taken
    }

    /// This bag with every factor of `other` added.
    #[must_use]
    pub fn union(&self, other: &Self) -> Self {
        Self::from_pairs(self.entries.iter().chain(&other.entries).copied())
    }

    /// The largest bag inside both.
    #[must_use]
    pub fn meet(&self, other: &Self) -> Self {
        Self::from_pairs(self.entries.iter().map(|&(s, k)| (s, k.min(other.count(s)))))
    }

    /// This bag without the factors of `other`, `None` unless they are all in it.
    #[must_use]
    pub fn without(&self, other: &Self) -> Option<Self> {
        let mut rest = self.clone();
        other.entries.iter().all(|&(s, k)| rest.take(s, k) == k).then_some(rest)
    }

    /// Whether every factor of `other` is in this bag.
    #[must_use]
    pub fn contains(&self, other: &Self) -> bool {
        other.entries.iter().all(|&(s, k)| self.count(s) >= k)
    }
}

impl fmt::Display for Bag {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        for (i, (s, k)) in self.entries.iter().enumerate() {
            write!(f, "{}{s}^{k}", if i > 0 { " " } else { "" })?;
        }
        Ok(())
    }
}
