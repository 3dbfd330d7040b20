//! Columns of two and three levels beside given columns, under a group that permutes them.
//!
//! The columns with many levels are given, or drawn at random, and the group permutes the runs so
//! that the levels of each of them go to levels of the same. All balanced columns of two or three
//! levels that are orthogonal to them are listed (meet in the middle), or as many as wanted drawn;
//! those whose images under the group are orthogonal among themselves are grouped into orbits, and
//! a clique of orbits is looked for: greedy, then by exchanges with a tabu list.

use std::collections::HashSet;

use rayon::prelude::*;

use super::clique::Clique;
use super::frame;
use super::halves::Halves;
use super::random::Random;
use super::splits::{Move, Orbit, Split, orbit};
use super::symmetric::{Motion, STEPS, SymmetricHunt, attempts};
use crate::construct::{OrbitColumn, orbit_array};
use crate::floor::Effort;

/// The columns that come first.
#[derive(Clone, Debug)]
pub enum Base {
    /// Levels and coefficients: the level in a run is the sum of coefficient · coordinate, modulo
    /// the levels; coefficient · radix is a multiple of the levels.
    Forms(Vec<(u16, Vec<u16>)>),
    /// Levels and the level in each run, as they are.
    Given(Vec<(u16, Vec<u8>)>),
    /// Columns of these levels, for each attempt anew, symmetric under the cyclic groups of the
    /// first `coordinates` coordinates.
    Random {
        /// The levels of the columns.
        levels: Vec<u16>,
        /// How many coordinates of the frame are the group.
        coordinates: usize,
        /// Whether the generators must move the levels, see [`Motion::Every`].
        moving: bool,
    },
}

/// What is looked for.
#[derive(Clone, Debug)]
pub struct BesideHunt {
    /// The runs are the points of a box with these radices, first coordinate fastest; at most 128.
    pub frame: Vec<u16>,
    /// The columns that come first, at least one.
    pub base: Base,
    /// Generators of the group: for each coordinate the image of every value.
    pub symmetry: Vec<Vec<Vec<u16>>>,
    /// How many columns of two levels and of three levels are wanted beside the base.
    pub wanted: [usize; 2],
    /// The seed of the random numbers.
    pub seed: u64,
    /// How many attempts are made at the most.
    pub attempts: u64,
    /// When there are more candidates than this, this many are drawn instead of listing all.
    pub looks: u64,
    /// About how many columns are chosen greedily before the candidates are listed again, now
    /// orthogonal to those too; 0 for never.
    pub start: usize,
    /// How many exchanges are made in an attempt.
    pub steps: u64,
}

/// What a hunt came to.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Beside {
    /// The base and the columns beside it; the group of these columns is trivial.
    pub columns: Vec<OrbitColumn>,
    /// How many columns there are beside the base.
    pub beside: usize,
    /// Whether they are as many as wanted.
    pub complete: bool,
    /// The attempt that gave them, from 0.
    pub attempt: u64,
}

/// Attempts between comparisons; fixed, so that the result does not depend on the threads.
const ROUND: u64 = 4;
/// The most orbits that are kept.
const POOL: usize = 400_000;

struct Setting<'a> {
    request: &'a BesideHunt,
    runs: usize,
    all: u128,
    elements: Vec<Vec<u8>>,
    moves: Vec<Move>,
}

/// A base with the orbits that go with it.
struct Start {
    base: Vec<(u16, Vec<u8>)>,
    pool: Vec<Orbit>,
}

/// Runs the hunt until as many columns as wanted are found or the attempts are used up; the best
/// that was met. `None` when the request makes no sense: a frame of more than 128 runs, symmetries
/// that are no permutations or do not keep the base, forms that do not fit.
///
/// The same hunt gives the same columns for any number of threads.
///
/// ```
/// use trysquare::hunt::beside::{Base, BesideHunt, hunt_beside};
/// // 12 runs in three blocks of four: 2^4 · 3.
/// let request = BesideHunt {
///     frame: vec![4, 3], base: Base::Forms(vec![(3, vec![0, 1])]), symmetry: vec![],
///     wanted: [4, 0], seed: 1, attempts: 4, looks: 1000, start: 0, steps: 1000,
/// };
/// let found = hunt_beside(&request).expect("the request makes sense");
/// assert!(found.complete && found.columns.len() == 5);
/// ```
#[must_use]
pub fn hunt_beside(request: &BesideHunt) -> Option<Beside> {
    let setting = Setting::new(request)?;
    let fixed = setting.fixed(&mut Effort::unlimited())?;
    let mut best: Option<Beside> = None;
    let mut first = 0;
    while first < request.attempts {
        let round: Vec<Option<Beside>> = (first..(first + ROUND).min(request.attempts))
            .into_par_iter()
            .map(|attempt| setting.attempt(fixed.as_ref(), attempt, &mut Effort::unlimited()))
            .collect();
        for found in round.into_iter().flatten() {
            if found.complete {
                return Some(found);
            }
            if best.as_ref().is_none_or(|b| b.beside < found.beside) {
                best = Some(found);
            }
        }
        first += ROUND;
    }
    best
}

/// The attempts of a hunt one after the other, on one thread, until one finds all columns or the
/// effort is used up; the best that was met, `None` as for [`hunt_beside`].
///
/// A step of the effort is a look at a candidate.
#[must_use]
pub fn attempts_beside(request: &BesideHunt, effort: &mut Effort<'_>) -> Option<Beside> {
    let setting = Setting::new(request)?;
    let fixed = setting.fixed(effort)?;
    let mut best: Option<Beside> = None;
    for attempt in 0..request.attempts {
        if !effort.spend(1) {
            break;
        }
        let Some(found) = setting.attempt(fixed.as_ref(), attempt, effort) else { continue };
        if best.as_ref().is_none_or(|b| b.beside < found.beside || found.complete) {
            best = Some(found);
        }
        if best.as_ref().is_some_and(|b| b.complete) {
            break;
        }
    }
    best
}

impl<'a> Setting<'a> {
    fn new(request: &'a BesideHunt) -> Option<Self> {
        let elements = frame::group(&request.frame, &request.symmetry)?;
        let runs = request.frame.iter().map(|&r| usize::from(r)).product();
        let all = u128::MAX >> (128 - runs);
        Some(Self { request, runs, all, moves: frame::moves(&elements), elements })
    }

    /// The start that all attempts share, if the base is given; `None` when it does not fit.
    fn fixed(&self, effort: &mut Effort<'_>) -> Option<Option<Start>> {
        match &self.request.base {
            Base::Forms(forms) => {
                let mut random = Random::new(self.request.seed);
                Some(Some(self.start(self.forms(forms)?, &mut random, effort)?))
            }
            Base::Given(columns) => {
                let mut random = Random::new(self.request.seed);
                Some(Some(self.start(self.fitting(columns.clone())?, &mut random, effort)?))
            }
            Base::Random { .. } => Some(None),
        }
    }

    fn forms(&self, forms: &[(u16, Vec<u16>)]) -> Option<Vec<(u16, Vec<u8>)>> {
        let column = |(levels, shifts): &(u16, Vec<u16>)| OrbitColumn {
            levels: *levels,
            shifts: shifts.clone(),
            base: vec![0],
        };
        let columns: Vec<OrbitColumn> = forms.iter().map(column).collect();
        self.expand(&self.request.frame, &columns)
    }

    fn expand(&self, group: &[u16], columns: &[OrbitColumn]) -> Option<Vec<(u16, Vec<u8>)>> {
        let array = orbit_array(group, columns).ok()?;
        let symbols =
            |j: usize| -> Option<Vec<u8>> { array.column(j).iter().map(|&x| u8::try_from(x).ok()).collect() };
        let base =
            (0..columns.len()).map(|j| Some((columns[j].levels, symbols(j)?))).collect::<Option<_>>()?;
        self.fitting(base)
    }

    /// Columns of all runs whose levels the group permutes, those with small blocks first.
    fn fitting(&self, mut base: Vec<(u16, Vec<u8>)>) -> Option<Vec<(u16, Vec<u8>)>> {
        base.sort_by_key(|(levels, _)| std::cmp::Reverse(*levels));
        let fits = |(levels, symbols): &(u16, Vec<u8>)| {
            symbols.len() == self.runs
                && symbols.iter().all(|&x| u16::from(x) < *levels)
                && frame::keeps(&self.elements, symbols)
        };
        base.iter().all(fits).then_some(base)
    }

    /// A random base; `None` when none was met.
    fn draw(
        &self,
        levels: &[u16],
        coordinates: usize,
        moving: bool,
        attempt: u64,
        effort: &mut Effort<'_>,
    ) -> Option<Vec<(u16, Vec<u8>)>> {
        let group = self.request.frame.get(..coordinates)?;
        let base = SymmetricHunt {
            runs: self.runs as u32,
            levels: levels.to_vec(),
            strength: 2,
            group: group.to_vec(),
            fixed: vec![],
            motion: if moving { Motion::Every } else { Motion::Any },
            elementary: false,
            seed: self.request.seed ^ attempt.wrapping_mul(0x9FB2_1C65_1E98_DF25),
            attempts: 8,
            pool: 60,
            steps: STEPS,
            exchanges: 0,
        };
        let found = attempts(&base, effort).filter(|f| f.complete)?;
        self.expand(group, &found.columns)
    }

    fn start(
        &self,
        base: Vec<(u16, Vec<u8>)>,
        random: &mut Random,
        effort: &mut Effort<'_>,
    ) -> Option<Start> {
        let pool = self.pool(&base, random, effort)?;
        Some(Start { base, pool })
    }

    /// The orbits orthogonal to given columns.
    fn pool(
        &self,
        given: &[(u16, Vec<u8>)],
        random: &mut Random,
        effort: &mut Effort<'_>,
    ) -> Option<Vec<Orbit>> {
        let mut pool = Vec::new();
        for (levels, wanted) in [(2, self.request.wanted[0]), (3, self.request.wanted[1])] {
            if wanted == 0 {
                continue;
            }
            let halves = Halves::new(given, levels, random)?;
            // The lists of halves are sorted once.
            effort.spend(20 * halves.size());
            let mut seen: HashSet<Split> = HashSet::new();
            halves.visit(self.request.looks, random, |split| {
                if let Some(orbit) = orbit(split, &self.moves, self.runs as u32, self.all)
                    && orbit.iter().min().is_some_and(|&least| seen.insert(least))
                {
                    pool.push(orbit);
                }
                !effort.spend(8) || pool.len() >= POOL
            });
        }
        Some(pool)
    }

    fn attempt(&self, fixed: Option<&Start>, attempt: u64, effort: &mut Effort<'_>) -> Option<Beside> {
        let request = self.request;
        let mut random = Random::new(request.seed ^ attempt.wrapping_mul(0xD1B5_4A32_D192_ED03));
        let drawn = match (&request.base, fixed) {
            (Base::Random { levels, coordinates, moving }, None) => {
                let base = self.draw(levels, *coordinates, *moving, attempt, effort)?;
                Some(self.start(base, &mut random, effort)?)
            }
            _ => None,
        };
        let Start { base, pool } = drawn.as_ref().or(fixed)?;
        let clique = |pool, wanted| Clique { runs: self.runs as u32, pool, wanted };
        let mut chosen: Vec<Split> = Vec::new();
        let mut wanted = request.wanted;
        if request.start > 0 {
            let first = clique(pool, wanted).greedy(request.start, &mut random, effort);
            chosen.extend(first.iter().flat_map(|&v| pool[v].iter().copied()));
            for split in &chosen {
                let kind = usize::from(split.levels) - 2;
                wanted[kind] = wanted[kind].saturating_sub(1);
            }
            let more = chosen
                .iter()
                .map(|c| (u16::from(c.levels), c.symbols(self.runs).iter().map(|&x| x as u8).collect()));
            let given: Vec<(u16, Vec<u8>)> = base.iter().cloned().chain(more).collect();
            let pool = self.pool(&given, &mut random, effort)?;
            let rest = clique(&pool, wanted).search(request.steps, &mut random, effort);
            chosen.extend(rest.iter().flat_map(|&v| pool[v].iter().copied()));
        } else {
            let rest = clique(pool, wanted).search(request.steps, &mut random, effort);
            chosen.extend(rest.iter().flat_map(|&v| pool[v].iter().copied()));
        }
        Some(self.result(base, &chosen, attempt))
    }

    fn result(&self, base: &[(u16, Vec<u8>)], chosen: &[Split], attempt: u64) -> Beside {
        let column = |levels, base| OrbitColumn { levels, shifts: vec![], base };
        let mut columns: Vec<OrbitColumn> =
            base.iter().map(|(s, x)| column(*s, x.iter().map(|&x| u16::from(x)).collect())).collect();
        // An orbit may bring more columns than were missing.
        let mut left = self.request.wanted;
        let mut beside = 0;
        for split in chosen {
            let kind = usize::from(split.levels) - 2;
            if left[kind] > 0 {
                left[kind] -= 1;
                beside += 1;
                columns.push(column(u16::from(split.levels), split.symbols(self.runs)));
            }
        }
        Beside { columns, beside, complete: left == [0, 0], attempt }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::verify::{Demand, Verdict, certify};

    fn turn(n: u16, by: u16) -> Vec<u16> {
        (0..n).map(|x| (x + by) % n).collect()
    }

    fn two_of_six(wanted: usize) -> BesideHunt {
        BesideHunt {
            frame: vec![6, 6],
            base: Base::Forms(vec![(6, vec![1, 0]), (6, vec![0, 1])]),
            symmetry: vec![vec![turn(6, 2), turn(6, 2)]],
            wanted: [wanted, 0],
            seed: 1,
            attempts: 20,
            looks: 400_000,
            start: 0,
            steps: 400,
        }
    }

    fn judged(found: &Beside) -> bool {
        let array = orbit_array(&[], &found.columns).unwrap();
        certify(&array, &Demand::strength(2)).unwrap().verdict == Verdict::Orthogonal
    }

    #[test]
    fn the_group_permutes_the_columns() {
        let found = hunt_beside(&two_of_six(14)).unwrap();
        assert!(found.complete && found.columns.len() == 16 && judged(&found));
    }

    #[test]
    fn a_random_base_whose_levels_move() {
        let request = BesideHunt {
            frame: vec![3, 12],
            base: Base::Random { levels: vec![3, 3, 3, 3, 6, 6], coordinates: 1, moving: true },
            symmetry: vec![],
            wanted: [9, 0],
            ..two_of_six(0)
        };
        let found = hunt_beside(&request).unwrap();
        assert!(found.complete && judged(&found));
    }

    /// Columns that are given as such do what the same columns do as forms.
    #[test]
    fn a_given_base() {
        let forms = two_of_six(6);
        let column = |f: fn(u8) -> u8| (0..36).map(f).collect::<Vec<u8>>();
        let given =
            |rows| BesideHunt { base: Base::Given(vec![(6, rows), (6, column(|r| r / 6))]), ..forms.clone() };
        let found = hunt_beside(&given(column(|r| r % 6))).unwrap();
        assert!(judged(&found));
        assert_eq!(Some(found), hunt_beside(&forms));
        assert!(hunt_beside(&given(column(|r| r % 7))).is_none(), "a seventh level");
        assert!(hunt_beside(&given(column(|r| r % 6)[1..].to_vec())).is_none(), "35 runs");
    }

    #[test]
    fn the_same_for_any_number_of_threads() {
        // 19 are more than the degrees of freedom leave: every attempt is made.
        let request = BesideHunt {
            frame: vec![4, 5],
            base: Base::Forms(vec![(5, vec![0, 1])]),
            symmetry: vec![],
            wanted: [19, 0],
            attempts: 6,
            looks: 3000,
            start: 3,
            steps: 100,
            ..two_of_six(0)
        };
        let on = |threads| {
            let pool = rayon::ThreadPoolBuilder::new().num_threads(threads).build().unwrap();
            pool.install(|| hunt_beside(&request)).unwrap()
        };
        let found = on(1);
        assert!(!found.complete && found.beside >= 6 && judged(&found));
        assert_eq!(on(3), found);
    }

    #[test]
    fn requests_that_make_no_sense() {
        let good = two_of_six(1);
        for bad in [
            BesideHunt { frame: vec![6, 7], ..good.clone() },
            BesideHunt { frame: vec![30, 30], symmetry: vec![], ..good.clone() },
            BesideHunt { symmetry: vec![vec![turn(6, 2), vec![1, 0, 2, 4, 3, 4]]], ..good.clone() },
            BesideHunt { base: Base::Forms(vec![]), ..good.clone() },
            BesideHunt { base: Base::Forms(vec![(5, vec![1, 0])]), ..good.clone() },
            // x + y is not kept when x alone moves unevenly.
            BesideHunt {
                base: Base::Forms(vec![(6, vec![1, 1])]),
                symmetry: vec![vec![vec![1, 0, 2, 3, 4, 5], turn(6, 0)]],
                ..good.clone()
            },
            BesideHunt { frame: vec![3, 3], base: Base::Forms(vec![(3, vec![1, 0])]), ..good.clone() },
            BesideHunt {
                base: Base::Random { levels: vec![6, 6], coordinates: 5, moving: false },
                ..good.clone()
            },
        ] {
            assert!(hunt_beside(&bad).is_none(), "{bad:?}");
        }
    }
}
