//! From a placement to a recipe.

use std::collections::{HashMap, VecDeque};
use std::sync::Arc;

use super::fit::{Host, Placement};
use crate::recipe::{Recipe, Split};

/// The recipe that carries a placement out on the columns of `of`.
///
/// With an `order` the columns come in that order of levels (it must hold exactly the levels that
/// the placement yields); without, in the order of the columns of `of`. A placement that changes
/// nothing returns `of` itself.
///
/// # Panics
/// When the placement names columns that `of` does not have.
#[must_use]
pub fn arrange(of: &Arc<Recipe>, placement: &Placement, order: Option<&[u16]>) -> Arc<Recipe> {
    let mut waiting: HashMap<u16, VecDeque<&Host>> = HashMap::new();
    for (s, host) in placement {
        waiting.entry(*s).or_default().push_back(host);
    }
    let levels = of.levels().expect("recipes on the shelf are well formed");
    let (mut split, mut yielded, mut position) = (Vec::new(), Vec::new(), 0u32);
    for (column, &s) in levels.iter().enumerate() {
        match waiting.get_mut(&s).and_then(VecDeque::pop_front) {
            None => position += 1,
            Some(Host::As(r)) => {
                yielded.push(Yield { position, levels: *r, merged: *r != s });
                position += 1;
            }
            Some(Host::Split { by, hosts }) => {
                let by = arrange(&by.recipe, hosts, None);
                for &r in &by.levels().expect("recipes on the shelf are well formed") {
                    yielded.push(Yield { position, levels: r, merged: false });
                    position += 1;
                }
                split.push(Split { column: column as u32, by });
            }
        }
    }
    assert!(waiting.values().all(VecDeque::is_empty), "the placement names columns that are not there");
    let chosen = match order {
        None => yielded,
        Some(order) => in_order(yielded, order),
    };
    let merge: Vec<(u32, u16)> =
        (0u32..).zip(&chosen).filter(|(_, y)| y.merged).map(|(i, y)| (i, y.levels)).collect();
    let take: Vec<u32> = chosen.iter().map(|y| y.position).collect();
    let all = take.len() as u32 == position && take.iter().copied().eq(0..position);
    if all && split.is_empty() && merge.is_empty() {
        return Arc::clone(of);
    }
    Arc::new(Recipe::Arrange { of: Arc::clone(of), split, take: (!all).then_some(take), merge })
}

struct Yield {
    position: u32,
    levels: u16,
    merged: bool,
}

fn in_order(yielded: Vec<Yield>, order: &[u16]) -> Vec<Yield> {
    let mut by_levels: HashMap<u16, VecDeque<Yield>> = HashMap::new();
    for y in yielded {
        by_levels.entry(y.levels).or_default().push_back(y);
    }
    order
        .iter()
        .map(|s| {
            by_levels
                .get_mut(s)
                .and_then(VecDeque::pop_front)
                .expect("the order holds the levels that the placement yields")
        })
        .collect()
}
