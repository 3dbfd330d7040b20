//! The exact packing of a mix into a parent by splitting, merging and dropping columns.

use std::cell::RefCell;
use std::collections::{HashMap, HashSet};
use std::sync::Arc;

use super::bag::Bag;
use super::shelf::{Parent, Shelf};
use crate::algebra::is_prime;

/// What one column of a parent becomes.
#[derive(Clone, Debug, PartialEq)]
pub enum Host {
    /// One factor of that many levels, equal to or dividing the column's.
    As(u16),
    /// The columns of an array with as many runs as the column has levels; unused ones drop out.
    Split {
        /// The array.
        by: Arc<Parent>,
        /// What its columns become: (levels of the column, host).
        hosts: Placement,
    },
}

/// What the used columns of a parent become: (levels of the column, host).
pub type Placement = Vec<(u16, Host)>;

/// Packs mixes into parents of one strength.
///
/// Exact: if the mix can be had from the parent by splitting columns (into arrays that are on the
/// shelf), merging levels and dropping columns, a placement is found. Deterministic.
pub struct Packer<'a> {
    shelf: &'a Shelf,
    strength: u32,
    contents: RefCell<HashMap<(u16, Bag), Contents>>,
}

type Contents = Arc<Vec<(Bag, Host)>>;

/// The composite columns of a parent in the order in which they are filled.
type Groups = Vec<(u16, u32)>;

impl<'a> Packer<'a> {
    /// A packer that splits columns by the arrays of `shelf` at `strength`.
    #[must_use]
    pub fn new(shelf: &'a Shelf, strength: u32) -> Self {
        Self { shelf, strength, contents: RefCell::default() }
    }

    /// A placement of `request` in the columns of `parent`, `None` when there is none.
    #[must_use]
    pub fn fit(&self, request: &Bag, parent: &Bag) -> Option<Placement> {
        if request.degrees() > parent.degrees() || !self.has_room(request, parent) {
            return None;
        }
        let (mut placement, rest, groups) = prime_columns(request, parent);
        let mut search = Filling { packer: self, groups: &groups, failed: HashSet::new() };
        let more = search.fill(0, groups.first().map_or(0, |g| g.1), rest)?;
        placement.extend(more);
        Some(placement)
    }

    /// Whether for every r the columns of `parent` can host as many factors with a multiple of r
    /// levels as `request` has. Necessary only, but it spares most searches that would fail.
    fn has_room(&self, request: &Bag, parent: &Bag) -> bool {
        request.entries().iter().all(|&(r, _)| {
            let multiples = request.entries().iter().filter(|e| e.0.is_multiple_of(r));
            let wanted: u64 = multiples.map(|e| u64::from(e.1)).sum();
            let most = |&(s, count): &(u16, u32)| u64::from(count) * most_hosted(s, r, self.strength);
            wanted <= parent.entries().iter().map(most).sum()
        })
    }

    /// Everything of `rest` hosted by one column of `s` levels.
    fn host_all(&self, s: u16, rest: &Bag) -> Option<Host> {
        if let [(r, 1)] = rest.entries() {
            return s.is_multiple_of(*r).then_some(Host::As(*r));
        }
        if rest.degrees() > u64::from(s) - 1 {
            return None;
        }
        self.shelf.parents(u64::from(s), self.strength).iter().find_map(|by| {
            let hosts = self.fit(rest, &by.bag)?;
            Some(Host::Split { by: Arc::clone(by), hosts })
        })
    }

    /// The maximal parts of `rest` that one column of `s` levels can host.
    fn contents(&self, s: u16, rest: &Bag) -> Contents {
        let relevant = Bag::from_pairs(rest.entries().iter().copied().filter(|e| s.is_multiple_of(e.0)));
        let key = (s, relevant);
        if let Some(known) = self.contents.borrow().get(&key) {
            return Arc::clone(known);
        }
        let relevant = &key.1;
        let mut found: Vec<(Bag, Host)> =
            relevant.entries().iter().map(|&(r, _)| (Bag::from_pairs([(r, 1)]), Host::As(r))).collect();
        if relevant.factors() > 1 && !is_prime(u32::from(s)) {
            for by in self.shelf.parents(u64::from(s), self.strength).iter() {
                for (bag, hosts) in self.packings(relevant, &by.bag) {
                    found.push((bag, Host::Split { by: Arc::clone(by), hosts }));
                }
            }
        }
        let found = Arc::new(maximal(found));
        self.contents.borrow_mut().insert(key, Arc::clone(&found));
        found
    }

    /// The maximal parts of `rest` that the columns of `parent` can host, each with a placement.
    fn packings(&self, rest: &Bag, parent: &Bag) -> Vec<(Bag, Placement)> {
        let (placement, left, groups) = prime_columns(rest, parent);
        let taken = rest.without(&left).expect("what is left was taken from rest");
        let mut states = vec![(taken, left, placement)];
        for (s, count) in groups {
            for _ in 0..count {
                let mut next = Vec::new();
                for (taken, left, placement) in states {
                    let contents = self.contents(s, &left);
                    if contents.is_empty() {
                        next.push((taken, left, placement));
                        continue;
                    }
                    for (bag, host) in contents.iter() {
                        let mut placement = placement.clone();
                        placement.push((s, host.clone()));
                        let left = left.without(bag).expect("contents are part of what is left");
                        next.push((taken.union(bag), left, placement));
                    }
                }
                let mut seen = HashSet::new();
                next.retain(|state| seen.insert(state.0.clone()));
                states = next;
            }
        }
        maximal(states.into_iter().map(|(taken, _, placement)| (taken, placement)).collect())
    }
}

/// Factors on columns with a prime number of levels: such a column hosts nothing else, so it is
/// used first. Returns the placement, what is left, and the composite columns: several of a kind
/// before single ones, small before large, since the last single column is tested as a whole.
fn prime_columns(request: &Bag, parent: &Bag) -> (Placement, Bag, Groups) {
    let (mut placement, mut rest, mut groups) = (Vec::new(), request.clone(), Vec::new());
    for &(s, count) in parent.entries() {
        if is_prime(u32::from(s)) {
            let taken = rest.take(s, count);
            placement.extend(std::iter::repeat_n((s, Host::As(s)), taken as usize));
        } else {
            groups.push((s, count));
        }
    }
    groups.sort_by_key(|&(s, count)| (count == 1, s));
    (placement, rest, groups)
}

/// A bound on the number of factors with a multiple of `r` levels in one column of `s` levels: k of
/// them merge to k r-level factors in s runs, so r^min(k, t) divides s, and Rao's bound holds.
fn most_hosted(s: u16, r: u16, strength: u32) -> u64 {
    let (s, r) = (u64::from(s), u64::from(r));
    if !s.is_multiple_of(r) {
        0
    } else if strength < 2 {
        u64::MAX >> 32
    } else if !s.is_multiple_of(r * r) {
        1
    } else if strength == 2 {
        (s - 1) / (r - 1)
    } else if !s.is_multiple_of(r * r * r) {
        2
    } else {
        1 + (s / r - 1) / (r - 1)
    }
}

struct Filling<'p, 'a> {
    packer: &'p Packer<'a>,
    groups: &'p [(u16, u32)],
    failed: HashSet<(usize, u32, Bag)>,
}

impl Filling<'_, '_> {
    /// Hosts `rest` in `left` columns of group `at` and the groups behind it.
    fn fill(&mut self, at: usize, left: u32, rest: Bag) -> Option<Placement> {
        if rest.is_empty() {
            return Some(Vec::new());
        }
        let &(s, _) = self.groups.get(at)?;
        let behind = self.groups.get(at + 1).map_or(0, |g| g.1);
        if left == 0 {
            return self.fill(at + 1, behind, rest);
        }
        let room = u64::from(left) * u64::from(s - 1)
            + self.groups[at + 1..].iter().map(|&(s, c)| u64::from(c) * u64::from(s - 1)).sum::<u64>();
        if rest.degrees() > room {
            return None;
        }
        if at + 1 == self.groups.len() && left == 1 {
            return self.packer.host_all(s, &rest).map(|host| vec![(s, host)]);
        }
        let key = (at, left, rest);
        if self.failed.contains(&key) {
            return None;
        }
        let rest = &key.2;
        let contents = self.packer.contents(s, rest);
        if contents.is_empty()
            && let Some(placement) = self.fill(at + 1, behind, rest.clone())
        {
            return Some(placement);
        }
        for (bag, host) in contents.iter() {
            let less = rest.without(bag).expect("contents are part of what is left");
            if let Some(mut placement) = self.fill(at, left - 1, less) {
                placement.push((s, host.clone()));
                return Some(placement);
            }
        }
        self.failed.insert(key);
        None
    }
}

/// Those entries whose bag is in no other one's, largest first; of equal bags the first.
fn maximal<T>(mut found: Vec<(Bag, T)>) -> Vec<(Bag, T)> {
    found.sort_by_key(|(bag, _)| std::cmp::Reverse((bag.degrees(), bag.factors())));
    let mut kept: Vec<(Bag, T)> = Vec::new();
    for (bag, payload) in found {
        if !bag.is_empty() && !kept.iter().any(|(k, _)| k.contains(&bag)) {
            kept.push((bag, payload));
        }
    }
    kept
}
