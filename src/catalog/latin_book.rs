//! How many mutually orthogonal Latin squares can be had, and by which recipe.

use std::collections::HashMap;
use std::sync::{Arc, Mutex};

use super::books::SchemeBook;
use super::seed::{self, QuasiDifferenceEntry, SeedKind};
use crate::algebra::{factorise, prime_power};
use crate::recipe::Recipe;

/// Up to this order all constructions are tried; above it prime powers and products.
const MAX_TABLE: usize = 512;

/// Two groups are truncated up to this order only.
const MAX_TWO_GROUPS: usize = 200;

/// Mutually orthogonal Latin squares: for every n the OA(n², n^k, 2) with the largest k known here.
#[derive(Debug)]
pub struct LatinBook {
    seeds: HashMap<usize, Vec<QuasiDifferenceEntry>>,
    /// The entries for orders 0, 1, 2, …, as far as they were asked for.
    table: Mutex<Vec<Entry>>,
}

/// The number of factors and where they come from.
#[derive(Clone, Copy, Debug)]
struct Entry {
    factors: usize,
    method: Method,
}

#[derive(Clone, Copy, Debug)]
enum Method {
    /// There is no array on fewer than two levels.
    None,
    /// The full factorial.
    Two,
    PrimePower,
    Scheme,
    Product(usize, usize),
    QuasiDifference(QuasiDifferenceEntry),
    /// m, t, and the sizes of the truncated groups, the second 0 when there is one group only.
    Wilson {
        m: usize,
        t: usize,
        u: usize,
        v: usize,
    },
}

impl Default for LatinBook {
    fn default() -> Self {
        Self::new()
    }
}

impl LatinBook {
    /// The book of all constructions and all stored matrices.
    #[must_use]
    pub fn new() -> Self {
        let mut seeds: HashMap<usize, Vec<QuasiDifferenceEntry>> = HashMap::new();
        for entry in seed::quasi_differences() {
            seeds.entry(entry.order + entry.empty).or_default().push(entry);
        }
        Self { seeds, table: Mutex::default() }
    }

    /// The number of factors of [`LatinBook::recipe`]: two more than the number of squares known
    /// here; 0 for n below 2.
    ///
    /// Cost: up to n = 512 all smaller orders are worked out first, once: about n² steps, for n up to
    /// 200 about n³ steps.
    #[must_use]
    pub fn factors(&self, n: u16, schemes: &SchemeBook) -> u32 {
        self.entry(usize::from(n), schemes).factors as u32
    }

    /// OA(n², n^k, 2) with the largest k known here, with a word where it comes from; `None` for n
    /// below 2. Of equal ones the first of: prime powers, difference schemes, stored
    /// quasi-difference matrices, products, Wilson.
    #[must_use]
    pub fn recipe(&self, n: u16, schemes: &SchemeBook) -> Option<(Arc<Recipe>, String)> {
        let entry = self.entry(usize::from(n), schemes);
        let recipe = self.make(usize::from(n), entry, schemes)?;
        Some((recipe, source(entry.method)))
    }

    fn entry(&self, n: usize, schemes: &SchemeBook) -> Entry {
        let mut table = self.table.lock().unwrap_or_else(std::sync::PoisonError::into_inner);
        while table.len() <= n.min(MAX_TABLE) {
            let next = self.best(table.len(), &table, schemes);
            table.push(next);
        }
        table.get(n).copied().unwrap_or_else(|| self.best(n, &table, schemes))
    }

    /// The best for `n` when `table` has all smaller orders, or those up to [`MAX_TABLE`].
    fn best(&self, n: usize, table: &[Entry], schemes: &SchemeBook) -> Entry {
        if n < 2 {
            return Entry { factors: 0, method: Method::None };
        }
        let mut best = Entry { factors: 2, method: Method::Two };
        let order = n as u32;
        if prime_power(order).is_some() {
            return Entry { factors: n + 1, method: Method::PrimePower };
        }
        let mut offer = |factors: usize, method: Method| {
            if factors > best.factors {
                best = Entry { factors, method };
            }
        };
        if n <= MAX_TABLE
            && let Some(scheme) = schemes.best(order, order)
        {
            offer(scheme.columns as usize + 1, Method::Scheme);
        }
        for &entry in self.seeds.get(&n).into_iter().flatten() {
            offer(entry.rows.min(known(table, entry.empty)), Method::QuasiDifference(entry));
        }
        for a in (2..n).take_while(|a| a * a <= n).filter(|a| n.is_multiple_of(*a)) {
            let size = |x: usize| if x < table.len() { known(table, x) } else { product_of_primes(x) };
            offer(size(a).min(size(n / a)), Method::Product(a, n / a));
        }
        if n <= MAX_TABLE {
            one_group(n, table, &mut offer);
        }
        if n <= MAX_TWO_GROUPS {
            two_groups(n, table, &mut offer);
        }
        best
    }

    fn make(&self, n: usize, entry: Entry, schemes: &SchemeBook) -> Option<Arc<Recipe>> {
        let k = entry.factors;
        // The first k factors of the best array on n levels.
        let first = |n: usize, k: usize| -> Option<Arc<Recipe>> {
            let of = self.make(n, self.entry(n, schemes), schemes)?;
            let all = self.entry(n, schemes).factors;
            Some(if all == k {
                of
            } else {
                let take = Some((0..k as u32).collect());
                Arc::new(Recipe::Arrange { of, split: Vec::new(), take, merge: Vec::new() })
            })
        };
        let hole = |u: usize| -> Option<Option<Arc<Recipe>>> {
            if u < 2 { Some(None) } else { first(u, k).map(Some) }
        };
        let level = |n: usize| u16::try_from(n).ok();
        Some(Arc::new(match entry.method {
            Method::None => return None,
            Method::Two => Recipe::FullFactorial { levels: vec![level(n)?; 2] },
            Method::PrimePower => Recipe::Bush { q: n as u32, t: 2 },
            Method::Scheme => Recipe::Developed { scheme: schemes.best(n as u32, n as u32)?.recipe },
            Method::Product(a, b) => Recipe::LevelProduct {
                left: first(a, k)?,
                right: first(b, k)?,
                pairs: (0..k as u32).map(|c| (c, c)).collect(),
            },
            Method::QuasiDifference(of) => {
                let fill = hole(of.empty)?;
                let whole = match seed::find(of.name)?.kind {
                    SeedKind::VVector { m, t, vector } => Recipe::VVector { m, t, vector, fill },
                    SeedKind::QuasiDifference { group, permutation, columns, .. } => {
                        Recipe::QuasiDifference { group, permutation, columns, fill }
                    }
                    _ => return None,
                };
                debug_assert_eq!(of.rows, k, "the table holds matrices whose fill suffices");
                whole
            }
            Method::Wilson { m, t, u, v } => {
                let sizes: Vec<usize> = if v > 0 { vec![u, v] } else { vec![u] };
                Recipe::Wilson {
                    factors: k as u32,
                    master: first(t, k + sizes.len())?,
                    truncated: sizes.iter().map(|&u| level(u)).collect::<Option<_>>()?,
                    parts: (0..=sizes.len()).map(|j| first(m + j, k)).collect::<Option<_>>()?,
                    fills: sizes.iter().map(|&u| hole(u)).collect::<Option<_>>()?,
                }
            }
        }))
    }
}

/// The number of factors known for `n`; of fewer than two levels there are as many as wanted.
fn known(table: &[Entry], n: usize) -> usize {
    if n < 2 { usize::MAX } else { table.get(n).map_or(0, |e| e.factors) }
}

/// MacNeish's number of factors.
fn product_of_primes(n: usize) -> usize {
    factorise(n as u64).into_iter().map(|(p, e)| p.pow(e) as usize + 1).min().unwrap_or(0)
}

fn one_group(n: usize, table: &[Entry], offer: &mut impl FnMut(usize, Method)) {
    for t in 2..=n / 2 {
        for m in 2..=n / t {
            let u = n - m * t;
            if u == 0 || u > t {
                continue;
            }
            let factors = known(table, m)
                .min(known(table, m + 1))
                .min(known(table, t).saturating_sub(1))
                .min(known(table, u));
            offer(factors, Method::Wilson { m, t, u, v: 0 });
        }
    }
}

fn two_groups(n: usize, table: &[Entry], offer: &mut impl FnMut(usize, Method)) {
    for t in 2..=n / 2 {
        for m in 2..=n / t {
            let both = n - m * t;
            let parts = known(table, m).min(known(table, m + 1)).min(known(table, m + 2));
            // With no more than m + 2 factors the last part has two disjoint runs.
            let most = parts.min(m + 2).min(known(table, t).saturating_sub(2));
            for v in 1..=both / 2 {
                let u = both - v;
                if u <= t {
                    let factors = most.min(known(table, u)).min(known(table, v));
                    offer(factors, Method::Wilson { m, t, u, v });
                }
            }
        }
    }
}

fn source(method: Method) -> String {
    match method {
        Method::None | Method::Two => "full factorial".to_owned(),
        Method::PrimePower => "Bush 1952".to_owned(),
        Method::Scheme => "difference scheme of index 1 (Bose & Bush 1952)".to_owned(),
        Method::Product(..) => "product (MacNeish 1922)".to_owned(),
        Method::Wilson { .. } => "Wilson 1974".to_owned(),
        Method::QuasiDifference(entry) => {
            let from = seed::find(entry.name).map(|s| s.source).unwrap_or_default();
            let from = if from.starts_with("computed") { "found by search" } else { &from };
            format!("quasi-difference matrix ({from})")
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::catalog::HadamardBook;
    use crate::verify::{Demand, Verdict, certify};

    fn books() -> (LatinBook, SchemeBook) {
        (LatinBook::new(), SchemeBook::new(Arc::new(HadamardBook::new())))
    }

    fn build_and_judge(n: u16, book: &LatinBook, schemes: &SchemeBook) {
        let (recipe, _) = book.recipe(n, schemes).expect("at least a full factorial");
        let k = book.factors(n, schemes) as usize;
        assert_eq!(recipe.levels().unwrap(), vec![n; k], "{n}: {recipe}");
        assert_eq!((recipe.runs().unwrap(), recipe.strength()), (usize::from(n).pow(2), 2), "{n}");
        let array = recipe.build().unwrap_or_else(|e| panic!("{n}: {e}"));
        assert_eq!((array.runs(), array.levels()), (usize::from(n).pow(2), &vec![n; k][..]), "{n}");
        let judgement = certify(&array, &Demand::strength(2).thorough()).unwrap();
        assert_eq!(judgement.verdict, Verdict::Orthogonal, "{n}: {recipe}");
    }

    #[test]
    fn every_order_up_to_30_is_built_and_judged() {
        let (book, schemes) = books();
        assert!(book.recipe(0, &schemes).is_none() && book.recipe(1, &schemes).is_none());
        (2..=30).for_each(|n| build_and_judge(n, &book, &schemes));
    }

    #[test]
    #[ignore = "70 arrays of up to 10000 runs and 98 factors, both judges"]
    fn every_order_up_to_100_is_built_and_judged() {
        let (book, schemes) = books();
        (31..=100).for_each(|n| build_and_judge(n, &book, &schemes));
    }

    /// Lower bounds of N(n), n = 0 … 100, in the Handbook of Combinatorial Designs, second edition
    /// 2007, table III.3.87; from memory, with 4 for 14 and 5 for 18 of later papers. N(0) and N(1)
    /// stand as 0.
    const HANDBOOK: [u16; 101] = [
        0, 0, 1, 2, 3, 4, 1, 6, 7, 8, 2, 10, 5, 12, 4, 4, 15, 16, 5, 18, 4, 5, 3, 22, 7, 24, 4, 26, 5, 28, 4,
        30, 31, 5, 4, 5, 8, 36, 4, 5, 7, 40, 5, 42, 5, 6, 4, 46, 8, 48, 6, 5, 5, 52, 5, 6, 7, 7, 5, 58, 5,
        60, 5, 6, 63, 7, 5, 66, 5, 6, 6, 70, 7, 72, 5, 7, 6, 6, 6, 78, 9, 80, 8, 82, 6, 6, 6, 6, 7, 88, 6, 7,
        6, 6, 6, 6, 7, 96, 6, 8, 8,
    ];

    #[test]
    fn beside_the_handbook() {
        let (book, schemes) = books();
        let mut below = Vec::new();
        println!(" n  squares  handbook");
        for (n, &theirs) in HANDBOOK.iter().enumerate().skip(2) {
            let entry = book.entry(n, &schemes);
            let ours = entry.factors as u16 - 2;
            let mark = if ours < theirs { "  below" } else { "" };
            println!("{n:3}  {ours:7}  {theirs:8}{mark}   {}", source(entry.method));
            assert!(ours <= theirs, "{n}: {ours} squares would be news");
            if ours < theirs {
                below.push(n);
            }
        }
        println!("below: {below:?}");
        // Below the tables, but at least this.
        for (n, squares) in [(14, 3), (18, 3), (21, 3), (24, 6)] {
            assert!(book.entry(n, &schemes).factors >= squares + 2, "{n}");
        }
        for n in [10, 12, 15, 20, 22, 26, 28, 30, 46, 50, 78, 82, 92, 100] {
            assert!(!below.contains(&n), "{n}");
        }
        // MacNeish 1922 at least, everywhere.
        for n in 2..=1000 {
            assert!(book.entry(n, &schemes).factors >= product_of_primes(n), "{n}");
        }
    }

    /// The table does not depend on the order of the questions.
    #[test]
    fn large_orders_first_or_last() {
        let (first, schemes) = books();
        let (last, _) = books();
        let orders = [100u16, 1000, 14, 60_000, 65_535, 512, 513];
        let forward: Vec<u32> = orders.iter().map(|&n| first.factors(n, &schemes)).collect();
        let mut backward: Vec<u32> = orders.iter().rev().map(|&n| last.factors(n, &schemes)).collect();
        backward.reverse();
        assert_eq!(forward, backward);
    }
}
