//! The page `catalog/NEAR.md`: near plans beside what was published.

use std::fmt::Write as _;

use super::{NearError, NearOutcome, NearPlan, NearRequest, near};

/// The effort for each row.
const EFFORT: u64 = 1 << 27;

/// Near-orthogonal arrays with mixed levels, as (runs, mix). That Wang & Wu 1992, Nguyen 1996 or Xu
/// 2002 treat arrays of these sizes \[memory\].
const MIXED: [(u64, &str); 13] = [
    (6, "3 2^3"),
    (10, "5 2^5"),
    (12, "4 3^4"),
    (12, "3 2^9"),
    (12, "2 3^5"),
    (12, "6 2^5"),
    (15, "5 3^5"),
    (18, "3^8"),
    (18, "2 3^8"),
    (18, "9 2^8"),
    (20, "5 2^15"),
    (24, "3 2^21"),
    (24, "2 3^11"),
];

/// Supersaturated two-level plans, as (runs, factors, published mean s² \[memory\]): half of a
/// Hadamard matrix of twice the order, Lin 1993, which attains the bound of Nguyen 1996 and Tang & Wu
/// 1997.
const TWO_LEVELS: [(u64, usize, &str); 4] =
    [(6, 10, "4.00"), (10, 18, "5.88"), (12, 22, "6.86"), (18, 34, "9.82")];

const HEAD: &str = "\
<!-- Made by: cargo run --release --example near_page > catalog/NEAR.md -->

# Near plans beside published ones

Plans for budgets that no orthogonal array fits, made by `hunt::near` with seed 0. Criteria: see
`verify::Nearness`. Values marked [memory] were written down from memory and are not looked up.

## Mixed levels

Sizes of the kind treated by Wang & Wu (*Technometrics* 34, 1992, 409–422), Nguyen (*Technometrics*
38, 1996, 279–283) and Xu (*Technometrics* 44, 2002, 356–368) [memory]. Their tables of D-efficiencies
and correlations are not remembered well enough to stand here. What stands beside ours is the
published lower bound of Xu for the sum of squared deviations of pair counts, or ours where that is larger.

| runs | mix | uneven pairs | squared deviations | at least | largest correlation | D-efficiency |
| ---: | --- | ---: | ---: | ---: | ---: | ---: |
";

const MIDDLE: &str = "
## More factors of two levels than runs

With levels −1 and 1, s is the product of two columns; a pair's squared deviations sum to s²/4. The mean
of s² over all pairs is at least N²(k − N + 1)/((N − 1)(k − 1)) (Nguyen, *Technometrics* 38, 1996,
69–73; Tang & Wu, *Canadian Journal of Statistics* 25, 1997, 191–201); the published plans are halves of
Hadamard matrices (Lin, *Technometrics* 35, 1993, 28–31).

| runs | factors | mean s², ours | published [memory] | largest correlation, ours |
| ---: | ---: | ---: | ---: | ---: |
";

/// The page as text.
///
/// # Errors
/// As [`near`].
pub fn page() -> Result<String, NearError> {
    let mut text = HEAD.to_owned();
    for (runs, mix) in MIXED {
        let Some(plan) = plan(runs, mix)? else { continue };
        let n = &plan.nearness;
        let uneven = n.by_pairs.as_ref().map_or(0, |p| p.uneven);
        let _ = writeln!(
            text,
            "| {runs} | {} | {uneven} of {} | {} | {} | {:.4} | {:.4} |",
            plan.request.mix,
            n.pairs,
            n.deviation,
            n.least_deviation,
            correlation(&plan),
            n.efficiency.as_ref().map_or(0.0, |e| e.value)
        );
    }
    text.push_str(MIDDLE);
    for (runs, factors, published) in TWO_LEVELS {
        let Some(plan) = plan(runs, &format!("2^{factors}"))? else { continue };
        let n = &plan.nearness;
        // Σ n_ab² = Σ (N² + s²)/4.
        let mean = (4 * n.squares - n.pairs * runs * runs) as f64 / n.pairs as f64;
        let largest = correlation(&plan);
        let _ = writeln!(text, "| {runs} | {factors} | {mean:.2} | {published} | {largest:.4} |");
    }
    Ok(text)
}

fn plan(runs: u64, mix: &str) -> Result<Option<NearPlan>, NearError> {
    let Ok(mix) = mix.parse() else { return Ok(None) };
    match near(&NearRequest::new(mix, runs).effort(EFFORT))? {
        NearOutcome::Near(plan) => Ok(Some(*plan)),
        _ => Ok(None),
    }
}

fn correlation(plan: &NearPlan) -> f64 {
    let by_pairs = plan.nearness.by_pairs.as_ref();
    by_pairs.and_then(|p| p.correlation.as_ref()).map_or(0.0, |c| c.value)
}
