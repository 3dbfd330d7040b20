//! Mixes offered at one number of runs, and the maximal ones among them.

use std::collections::HashSet;
use std::sync::Arc;

use super::bag::Bag;
use super::fit::Packer;
use super::shelf::Parent;
use crate::recipe::Recipe;

/// Mixes with the way to their recipes, in the order in which they are offered. Of equal mixes the
/// first stays, so simple constructions are offered first.
#[derive(Default)]
pub(super) struct Candidates<'a> {
    seen: HashSet<Bag>,
    offers: Vec<Offer<'a>>,
}

struct Offer<'a> {
    bag: Bag,
    source: String,
    make: Box<dyn FnOnce() -> Arc<Recipe> + 'a>,
}

impl<'a> Candidates<'a> {
    /// Offers a mix; `make` is called only if it turns out to be maximal.
    pub(super) fn offer(&mut self, bag: Bag, source: &str, make: impl FnOnce() -> Arc<Recipe> + 'a) {
        if self.seen.insert(bag.clone()) {
            self.offers.push(Offer { bag, source: source.to_owned(), make: Box::new(make) });
        }
    }

    /// The mixes that are not part of another one, most degrees of freedom first.
    #[must_use]
    pub(super) fn not_contained(mut self) -> Vec<Arc<Parent>> {
        self.sort();
        let mut kept: Vec<Arc<Parent>> = Vec::new();
        for Offer { bag, source, make } in self.offers {
            if !kept.iter().any(|k| k.bag.contains(&bag)) {
                kept.push(Arc::new(Parent { bag, recipe: make(), source }));
            }
        }
        kept
    }

    /// Splitting keeps or lowers the degrees of freedom and raises the number of factors, so in
    /// this order a mix can only be obtained from an earlier one.
    fn sort(&mut self) {
        self.offers.sort_by(|a, b| {
            let key = |o: &Offer<'_>| (std::cmp::Reverse(o.bag.degrees()), o.bag.factors());
            key(a).cmp(&key(b)).then_with(|| a.bag.cmp(&b.bag))
        });
    }

    /// The mixes that cannot be obtained from another one by splitting, merging and dropping;
    /// most degrees of freedom first.
    #[must_use]
    pub(super) fn maximal(mut self, packer: &Packer<'_>) -> Vec<Arc<Parent>> {
        self.sort();
        let mut kept: Vec<Arc<Parent>> = Vec::new();
        for Offer { bag, source, make } in self.offers {
            if !kept.iter().any(|k| packer.fit(&bag, &k.bag).is_some()) {
                kept.push(Arc::new(Parent { bag, recipe: make(), source }));
            }
        }
        kept
    }
}
