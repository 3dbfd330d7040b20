//! Where to start from, other than chance: exact arrays of about the right size.

use super::plain::repair;
use crate::array::Array;
use crate::catalog::Shelf;
use crate::hunt::Random;
use crate::mix::Mix;
use crate::seek::{Outcome, Request, seek_on};

/// An exact array to start from: for some of the factors of the plan.
pub(super) struct Start {
    /// The factors that it has columns for, in its order.
    factors: Vec<usize>,
    array: Array,
}

/// An exact array for all factors, with more runs than wanted.
pub(super) fn to_shorten(array: &Array) -> Start {
    Start { factors: (0..array.factors()).collect(), array: array.clone() }
}

/// Exact arrays within `runs` runs for as many factors as fit, leaving out those with many levels
/// first, or those with few levels first.
pub(super) fn to_widen(shelf: &Shelf, mix: &Mix, runs: usize) -> Vec<Start> {
    let mut up: Vec<usize> = (0..mix.factors()).collect();
    up.sort_by_key(|&j| mix.levels()[j]);
    let mut down = up.clone();
    down.sort_by_key(|&j| (std::cmp::Reverse(mix.levels()[j]), j));
    let mut starts: Vec<Start> = Vec::new();
    for order in [up, down] {
        let start = longest(shelf, mix, runs, &order);
        starts.extend(start.filter(|start| starts.iter().all(|known| known.factors != start.factors)));
    }
    starts
}

/// An exact array for the longest beginning of `order`, at least two factors.
fn longest(shelf: &Shelf, mix: &Mix, runs: usize, order: &[usize]) -> Option<Start> {
    let exact = |many: usize| {
        let mut factors = order[..many].to_vec();
        factors.sort_unstable();
        let levels = factors.iter().map(|&j| mix.levels()[j]).collect();
        let request = Request::new(Mix::new(levels).ok()?).max_runs(runs as u64);
        match seek_on(shelf, &request) {
            Ok(Outcome::Found(answer)) => Some(Start { factors, array: answer.array }),
            _ => None,
        }
    };
    let (mut low, mut high, mut best) = (1, order.len(), None);
    while high - low > 1 {
        let middle = low + (high - low) / 2;
        match exact(middle) {
            Some(start) => (low, best) = (middle, Some(start)),
            None => high = middle,
        }
    }
    best
}

impl Start {
    /// The columns of this start in a plan of `runs` runs that begins with `kept`; `None` for factors
    /// that it does not have. Surplus runs are dropped, those that agree least with one another;
    /// runs that are wanting are added at random; then the level counts are made even.
    pub(super) fn columns(
        &self,
        runs: usize,
        levels: &[u16],
        kept: Option<&Array>,
        random: &mut Random,
    ) -> Vec<Option<Vec<u16>>> {
        let fixed = kept.map_or(0, Array::runs);
        let order = self.chosen(runs, random);
        let mut columns = vec![None; levels.len()];
        for (at, &j) in self.factors.iter().enumerate() {
            let s = levels[j];
            let from = self.array.column(at);
            let first = kept.map_or(&[][..], |kept| kept.column(j));
            // Renaming the levels makes the first run the first kept one.
            let rename = |symbol: u16| match first.first() {
                Some(&f) => {
                    let shift = u32::from(s) - u32::from(from[order[0]]) + u32::from(f);
                    ((u32::from(symbol) + shift) % u32::from(s)) as u16
                }
                None => symbol,
            };
            let mut column: Vec<u16> = order.iter().map(|&i| rename(from[i])).collect();
            while column.len() < runs {
                column.push(random.below(usize::from(s)) as u16);
            }
            column[..fixed].copy_from_slice(first);
            repair(&mut column, s, fixed, random);
            columns[j] = Some(column);
        }
        columns
    }

    /// The runs of the array that stay, in random order.
    fn chosen(&self, runs: usize, random: &mut Random) -> Vec<usize> {
        let all = self.array.runs();
        let mut stay: Vec<usize> = (0..all).collect();
        random.shuffle(&mut stay);
        let mut agreement = vec![0u64; all];
        while stay.len() > runs {
            let least = (0..stay.len()).min_by_key(|&at| agreement[stay[at]]).unwrap_or(0);
            let gone = stay.swap_remove(least);
            let row = self.array.row(gone);
            let mut agree = vec![0u64; all];
            for (column, symbol) in self.array.columns().zip(&row) {
                agree.iter_mut().zip(column).for_each(|(d, other)| *d += u64::from(other == symbol));
            }
            agreement.iter_mut().zip(agree).for_each(|(sum, d)| *sum += d * d);
        }
        random.shuffle(&mut stay);
        stay
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::verify::nearness;

    #[test]
    fn the_largest_exact_part_is_found() {
        let mix: Mix = "3 2^5".parse().unwrap();
        let starts = to_widen(&Shelf::new(), &mix, 12);
        assert_eq!(starts[0].factors, [1, 2, 3, 4, 5]);
        assert_eq!(starts[1].factors, [0, 1, 2, 3, 4]);
        let columns = starts[1].columns(13, mix.levels(), None, &mut Random::new(1));
        assert!(columns[5].is_none() && columns[0].as_ref().is_some_and(|c| c.len() == 13));
    }

    #[test]
    fn one_run_less_deviates_as_little_as_can_be() {
        let mix: Mix = "2^11".parse().unwrap();
        let Ok(Outcome::Found(answer)) = seek_on(&Shelf::new(), &Request::new(mix.clone())) else { panic!() };
        let columns = to_shorten(&answer.array).columns(11, mix.levels(), None, &mut Random::new(1));
        let columns = columns.into_iter().map(|c| (2, c.unwrap())).collect();
        assert!(nearness(&Array::from_columns(columns).unwrap()).attains_the_bound());
    }
}
