//! The work list: which method with which group, in which order, with how much effort.
//!
//! Task number n is strategy n mod m in round n div m; every round has twice the effort of the one
//! before, up to a limit, so that no strategy waits long for another. A task depends on its number
//! and the request alone.

use super::request::{HuntRequest, Symmetry, group_name};
use super::state::Placed;
use crate::construct::{OrbitColumn, block_types, field::flats};
use crate::floor::Effort;
use crate::hunt::beside::{Base, BesideHunt, attempts_beside};
use crate::hunt::blocks::{BlockSearch, blocks};
use crate::hunt::exact::{self, ExactHunt, decide};
use crate::hunt::random::Random;
use crate::hunt::slices;
use crate::hunt::symmetric::{Motion, STEPS, SymmetricHunt, attempts};
use crate::mix::{Mix, counts_of};

/// Raised whenever a task with the same number does something else, so that no state of an older
/// work list is gone on with.
pub(super) const VERSION: u32 = 1;

/// The effort of the first round, in steps.
const FIRST: u64 = 1 << 22;
/// How often it doubles.
const DOUBLINGS: u64 = 9;

/// A method with its parameters.
#[derive(Clone, Debug)]
pub(super) enum Strategy {
    /// Solve for column after column under a group.
    Solve { group: Vec<u16>, motion: Motion, elementary: bool },
    /// Columns of two and three levels beside a base, the group permuting columns.
    Beside { request: BesideHunt, symmetry: String },
    /// Vectors of block types beside one p-level column.
    Blocks { p: u16, multiplier: u16, order: u16 },
    /// Slices of 16 runs from Hadamard matrices, strength 3.
    Slices { slices: u16, factors: usize },
    /// Go through all arrays under a group.
    Decide { group: Vec<u16> },
}

/// What a task came to.
#[derive(Clone, Debug)]
pub(super) enum Work {
    /// The best that was met; all columns, or some.
    Met(Option<Placed>),
    /// There is no array under the symmetry of the strategy.
    Exhausted,
    /// Stopped before its end.
    Halted,
}

impl Strategy {
    /// The name of the method.
    pub(super) fn method(&self) -> &'static str {
        match self {
            Self::Solve { .. } => "solving for columns",
            Self::Beside { .. } => "orbits of columns beside a base",
            Self::Blocks { .. } => "block types",
            Self::Slices { .. } => "slices of Hadamard matrices",
            Self::Decide { .. } => "going through all arrays",
        }
    }

    /// The name of the group.
    pub(super) fn symmetry(&self) -> String {
        match self {
            Self::Solve { group, .. } | Self::Decide { group } => group_name(group),
            Self::Beside { symmetry, .. } => symmetry.clone(),
            Self::Blocks { order: 1, .. } | Self::Slices { .. } => "none".to_owned(),
            Self::Blocks { order, .. } => format!("Z{order} on blocks"),
        }
    }

    fn run(&self, request: &HuntRequest, seed: u64, round: u64, effort: &mut Effort<'_>) -> Work {
        let (group, columns) = match self {
            Self::Solve { group, motion, elementary } => {
                let hunt = SymmetricHunt {
                    runs: request.runs,
                    levels: request.mix.levels().to_vec(),
                    strength: request.strength,
                    group: group.clone(),
                    fixed: Vec::new(),
                    motion: *motion,
                    elementary: *elementary,
                    seed,
                    attempts: u64::MAX,
                    pool: [40, 100, 200, 300, 500, 800, 1200, 1600][round.min(7) as usize],
                    steps: (250 << round.min(5)).min(STEPS),
                    // Every second round the cliques are worked on.
                    exchanges: if round % 2 == 1 { 400 } else { 0 },
                };
                let stored = if *elementary { Vec::new() } else { group.clone() };
                (stored, attempts(&hunt, effort).map(|f| f.columns))
            }
            Self::Beside { request: beside, .. } => {
                // Some of the columns first, then all others anew: every second round.
                let start = if round % 2 == 1 { (beside.wanted[0] + beside.wanted[1]) / 3 } else { 0 };
                let hunt = BesideHunt { seed, start, ..beside.clone() };
                (Vec::new(), attempts_beside(&hunt, effort).map(|f| f.columns))
            }
            Self::Blocks { p, multiplier, .. } => {
                let wanted = request.mix.factors() - 1;
                (Vec::new(), block_columns(*p, *multiplier, wanted, seed, effort))
            }
            Self::Slices { slices, factors } => (Vec::new(), slice_columns(*slices, *factors, seed, effort)),
            Self::Decide { group } => {
                let hunt = ExactHunt {
                    runs: request.runs,
                    levels: request.mix.levels().to_vec(),
                    strength: request.strength,
                    group: group.clone(),
                    most_candidates: (1 << 12) << round.min(9),
                };
                match decide(&hunt, effort) {
                    Some(exact::Outcome::Found(columns)) => (group.clone(), Some(columns)),
                    Some(exact::Outcome::Impossible) if !effort.halted() => return Work::Exhausted,
                    _ => (group.clone(), None),
                }
            }
        };
        if effort.halted() {
            return Work::Halted;
        }
        Work::Met(columns.map(|columns| Placed {
            task: 0,
            method: self.method().to_owned(),
            symmetry: self.symmetry(),
            group,
            columns,
        }))
    }
}

fn block_columns(
    p: u16,
    multiplier: u16,
    wanted: usize,
    seed: u64,
    effort: &mut Effort<'_>,
) -> Option<Vec<OrbitColumn>> {
    let mut random = Random::new(seed);
    let mut best: Vec<Vec<i8>> = Vec::new();
    // A look at a pair costs p products; a try looks at the pool a dozen times for each vector.
    let pool = 2000;
    let cost = (pool * usize::from(p)) as u64 * 12;
    while best.len() < wanted && effort.spend(cost) {
        let search = BlockSearch { p, multiplier, wanted, seed: random.bits(), pool, tries: 1 };
        let vectors = blocks(&search);
        if vectors.len() > best.len() {
            best = vectors;
        }
    }
    let array = block_types(&best).ok()?;
    Some(columns_of(&array))
}

fn slice_columns(
    slices: u16,
    factors: usize,
    seed: u64,
    effort: &mut Effort<'_>,
) -> Option<Vec<OrbitColumn>> {
    let mut random = Random::new(seed);
    while effort.spend(1 << 21) {
        let wanted = slices::Wanted { slices: slices.into(), factors, tries: 1, seed: random.bits() };
        if let Some(found) = slices::find(&wanted) {
            let levels: Vec<u16> = std::iter::once(slices).chain(std::iter::repeat_n(2, factors)).collect();
            return Some(columns_of(&flats(2, &levels, &found).ok()?));
        }
    }
    None
}

fn columns_of(array: &crate::array::Array) -> Vec<OrbitColumn> {
    let column = |j: usize| OrbitColumn {
        levels: array.levels()[j],
        shifts: Vec::new(),
        base: array.column(j).to_vec(),
    };
    (0..array.factors()).map(column).collect()
}

/// The strategies of a request, cheapest first.
pub(super) fn strategies(request: &HuntRequest) -> Vec<Strategy> {
    let mut list = Vec::new();
    let groups = match &request.symmetry {
        Symmetry::Group(group) => vec![group.clone()],
        Symmetry::Auto => groups(request.runs),
    };
    for group in groups {
        let solve = |motion, elementary| Strategy::Solve { group: group.clone(), motion, elementary };
        list.push(solve(Motion::Any, false));
        list.push(Strategy::Decide { group: group.clone() });
        // Vectors of levels differ from numbers where a group acts on prime powers.
        let powers = |s: u16| group.iter().any(|&n| s > n && is_power(s, n));
        if group.len() > 1 {
            list.push(solve(Motion::Varied, request.mix.levels().iter().any(|&s| powers(s))));
        } else if !group.is_empty() && request.symmetry != Symmetry::Auto {
            list.push(solve(Motion::Varied, false));
        }
    }
    let free = |s: &Strategy| match &request.symmetry {
        Symmetry::Auto => true,
        Symmetry::Group(group) => s.symmetry() == group_name(group),
    };
    if request.strength == 2 {
        list.extend(block_strategies(request).into_iter().filter(free));
        list.extend(beside_strategies(&request.mix, request.runs).into_iter().filter(free));
    } else {
        list.extend(slice_strategy(request).into_iter().filter(free));
    }
    list
}

/// Whether s = n^e.
fn is_power(mut s: u16, n: u16) -> bool {
    while n > 1 && s > 1 && s.is_multiple_of(n) {
        s /= n;
    }
    s == 1
}

/// The groups that are tried: those that act freely on the runs, the trivial one first.
fn groups(runs: u32) -> Vec<Vec<u16>> {
    const TRIED: [&[u16]; 12] =
        [&[], &[3], &[2], &[3, 3], &[5], &[7], &[2, 2], &[4], &[6], &[11], &[13], &[5, 5]];
    let acts = |g: &&&[u16]| {
        let order: u32 = g.iter().map(|&n| u32::from(n)).product();
        runs.is_multiple_of(order) && runs > 2 * order
    };
    TRIED.iter().filter(acts).take(6).map(|g| g.to_vec()).collect()
}

fn block_strategies(request: &HuntRequest) -> Vec<Strategy> {
    let levels = request.mix.levels();
    let p = levels.iter().copied().max().unwrap_or(0);
    let twos = levels.iter().filter(|&&s| s == 2).count();
    if p < 3 || request.runs != 4 * u32::from(p) || twos + 1 != levels.len() {
        return Vec::new();
    }
    let symmetric = |&order: &u16| {
        let multiplier = (2..p).find(|&m| order_of(m, p) == Some(order))?;
        Some(Strategy::Blocks { p, multiplier, order })
    };
    let mut list = vec![Strategy::Blocks { p, multiplier: 1, order: 1 }];
    list.extend([3, 5, 2].iter().filter_map(symmetric));
    list
}

/// The multiplicative order of m modulo n; `None` when m is no unit.
fn order_of(m: u16, n: u16) -> Option<u16> {
    let (mut power, mut order) = (u32::from(m % n), 1);
    while power != 1 {
        power = power * u32::from(m) % u32::from(n);
        order += 1;
        if power == 0 || order > n {
            return None;
        }
    }
    Some(order)
}

fn slice_strategy(request: &HuntRequest) -> Option<Strategy> {
    let levels = request.mix.levels();
    let most = levels.iter().copied().max()?;
    let twos = levels.iter().filter(|&&s| s == 2).count();
    let fits = (3..=15).contains(&twos)
        && request.runs == 16 * u32::from(most)
        && (twos + 1 == levels.len() || twos == levels.len());
    fits.then_some(Strategy::Slices { slices: most, factors: levels.len() - 1 })
}

/// A frame with a base and the columns wanted beside it.
struct Plan {
    frame: Vec<u16>,
    base: Base,
    wanted: [usize; 2],
    moves: Vec<(u16, Vec<Vec<u16>>)>,
}

fn beside_strategies(mix: &Mix, runs: u32) -> Vec<Strategy> {
    let counts = counts_of(mix.levels());
    let count = |s: u16| counts.get(&s).copied().unwrap_or(0);
    let big: Vec<u16> = mix.levels().iter().copied().filter(|&s| s > 3).collect();
    let Ok(n) = u16::try_from(runs) else { return Vec::new() };
    if count(2) + count(3) < 3 {
        return Vec::new();
    }
    let mut plans = form_plans(n, &big, [count(2), count(3)]);
    plans.extend(random_plans(n, &big, [count(2), count(3)]));
    let mut list = Vec::new();
    for plan in plans {
        for (order, images) in &plan.moves {
            let symmetry = if *order == 1 { vec![] } else { vec![images.clone()] };
            let name = if *order == 1 { "none".to_owned() } else { format!("Z{order} on columns") };
            let request = BesideHunt {
                frame: plan.frame.clone(),
                base: plan.base.clone(),
                symmetry,
                wanted: plan.wanted,
                seed: 0,
                attempts: u64::MAX,
                looks: 400_000,
                start: 0,
                steps: 200,
            };
            list.push(Strategy::Beside { request, symmetry: name });
        }
    }
    list
}

/// Bases that are coordinates of a box: two columns whose levels multiply to the runs, or one.
fn form_plans(n: u16, big: &[u16], wanted: [usize; 2]) -> Vec<Plan> {
    let mut big = big.to_vec();
    big.sort_unstable_by_key(|&s| std::cmp::Reverse(s));
    let plan = |frame: Vec<u16>, forms: Vec<(u16, Vec<u16>)>, wanted| {
        let moves = moves(&frame);
        Plan { frame, base: Base::Forms(forms), wanted, moves }
    };
    let third = |k: usize| [wanted[0], wanted[1].saturating_sub(k)];
    match big[..] {
        [a, b] if u32::from(a) * u32::from(b) == u32::from(n) => {
            let mut forms = vec![(a, vec![1, 0]), (b, vec![0, 1])];
            let mut list = vec![plan(vec![a, b], forms.clone(), wanted)];
            if wanted[1] > 0 && a % 3 == 0 && b % 3 == 0 {
                forms.push((3, vec![1, 1]));
                list.push(plan(vec![a, b], forms, third(1)));
            }
            list
        }
        [a] if n.is_multiple_of(a) => {
            let rest = n / a;
            let mut list = vec![plan(vec![rest, a], vec![(a, vec![0, 1])], wanted)];
            if wanted[1] > 0 && rest.is_multiple_of(3) {
                let mut forms = vec![(a, vec![0, 1]), (3, vec![1, 0])];
                list.push(plan(vec![rest, a], forms.clone(), third(1)));
                if wanted[1] > 1 && a.is_multiple_of(3) {
                    forms.push((3, vec![1, 1]));
                    list.push(plan(vec![rest, a], forms, third(2)));
                }
            }
            list
        }
        [] if wanted[1] > 1 && n.is_multiple_of(9) => {
            let side =
                (3..n).step_by(3).find(|s| n.is_multiple_of(*s) && s * s >= n && (n / s).is_multiple_of(3));
            let side = side.unwrap_or(n / 3);
            vec![plan(vec![n / side, side], vec![(3, vec![1, 0]), (3, vec![0, 1])], third(2))]
        }
        [] if wanted[1] > 0 && n.is_multiple_of(3) => {
            vec![plan(vec![3, n / 3], vec![(3, vec![1, 0])], third(1))]
        }
        _ => Vec::new(),
    }
}

/// Bases that are drawn at random under a cyclic group.
fn random_plans(n: u16, big: &[u16], wanted: [usize; 2]) -> Vec<Plan> {
    if big.is_empty() && wanted[1] == 0 || wanted[0] < 3 {
        return Vec::new();
    }
    let mut levels = big.to_vec();
    levels.extend(std::iter::repeat_n(3, wanted[1]));
    let all = |moving| Base::Random { levels: levels.clone(), coordinates: 1, moving };
    let still = |frame: &[u16]| vec![(1, frame.iter().map(|&r| (0..r).collect()).collect())];
    [3u16, 2, 5, 7]
        .into_iter()
        .filter(|&c| n.is_multiple_of(c) && n > c)
        .map(|c| {
            let frame = vec![c, n / c];
            let moves = still(&frame);
            Plan { base: all(c != 2), frame, wanted: [wanted[0], 0], moves }
        })
        .take(2)
        .collect()
}

/// Permutations of a box of two coordinates: for each order a few, the identity last.
fn moves(frame: &[u16]) -> Vec<(u16, Vec<Vec<u16>>)> {
    let still = |r: u16| (0..r).collect::<Vec<u16>>();
    let mut list = Vec::new();
    for order in [3u16, 5, 2] {
        let turns = |r: u16| -> Vec<Vec<u16>> {
            let mut all = Vec::new();
            if r.is_multiple_of(order) {
                all.push((0..r).map(|x| (x + r / order) % r).collect());
            }
            if let Some(m) = (2..r).find(|&m| order_of(m, r) == Some(order)) {
                all.push((0..r).map(|x| (u32::from(x) * u32::from(m) % u32::from(r)) as u16).collect());
            }
            all
        };
        let (first, second) = (turns(frame[0]), turns(frame[1]));
        if let (Some(a), Some(b)) = (first.first(), second.first()) {
            list.push((order, vec![a.clone(), b.clone()]));
        }
        for b in &second {
            list.push((order, vec![still(frame[0]), b.clone()]));
        }
        if order == 3 && second.is_empty() {
            list.extend(first.iter().map(|a| (order, vec![a.clone(), still(frame[1])])));
        }
    }
    list.truncate(4);
    list.push((1, frame.iter().map(|&r| still(r)).collect()));
    list
}

/// The work list of a request.
pub(super) struct WorkList {
    request: HuntRequest,
    pub(super) strategies: Vec<Strategy>,
}

impl WorkList {
    pub(super) fn new(request: &HuntRequest) -> Self {
        Self { request: request.clone(), strategies: strategies(request) }
    }

    pub(super) fn strategy(&self, task: u64) -> &Strategy {
        let m = self.strategies.len() as u64;
        &self.strategies[(task % m) as usize]
    }

    /// Whether there is nothing left to look for when all arrays under this symmetry were gone
    /// through: under no symmetry, or under the one asked for unless it is tried on levels as
    /// vectors, too.
    pub(super) fn settles(&self, symmetry: &Symmetry) -> bool {
        let vectors = |s: &Strategy| matches!(s, Strategy::Solve { elementary: true, .. });
        match symmetry {
            Symmetry::Auto => false,
            Symmetry::Group(group) => group.is_empty() || !self.strategies.iter().any(vectors),
        }
    }

    /// Does a task.
    pub(super) fn run(&self, task: u64, halt: &(dyn Fn() -> bool + Sync)) -> Work {
        let round = task / self.strategies.len() as u64;
        let steps = FIRST << round.min(DOUBLINGS);
        let seed = Random::new(self.request.seed ^ task.wrapping_mul(0xA24B_AED4_963E_E407)).bits();
        let mut effort = Effort::new(steps, halt);
        match self.strategy(task).run(&self.request, seed, round, &mut effort) {
            Work::Met(Some(mut placed)) => {
                placed.task = task;
                Work::Met(Some(placed))
            }
            other => other,
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn orders_and_moves() {
        assert_eq!(order_of(2, 7), Some(3));
        assert_eq!(order_of(3, 11), Some(5));
        assert_eq!(order_of(2, 6), None);
        for (order, images) in moves(&[6, 6]) {
            for map in &images {
                let mut at: Vec<u16> = (0..6).collect();
                for _ in 0..order {
                    at = at.iter().map(|&x| map[usize::from(x)]).collect();
                }
                assert_eq!(at, (0..6).collect::<Vec<u16>>());
            }
        }
    }

    #[test]
    fn every_strategy_does_some_work() {
        let mixes =
            [("2^4 3", 12, 2), ("2^8 6^3", 36, 2), ("2^20 3^2", 36, 2), ("2^16 11", 44, 2), ("3 2^9", 48, 3)];
        for (mix, runs, strength) in mixes {
            let request = HuntRequest { strength, ..HuntRequest::new(mix.parse().unwrap(), runs) };
            let list = WorkList::new(&request);
            let m = list.strategies.len() as u64;
            for strategy in 0..m {
                // These two meet something only when they find everything.
                if matches!(list.strategy(strategy), Strategy::Decide { .. } | Strategy::Slices { .. }) {
                    continue;
                }
                let meets = |round| match list.run(strategy + m * round, &|| false) {
                    Work::Met(placed) => placed.is_some_and(|p| !p.columns.is_empty()),
                    work => panic!("{mix} {:?}: {work:?}", list.strategy(strategy)),
                };
                assert!((0..6).any(meets), "{mix} {:?}", list.strategy(strategy));
            }
        }
    }
}
