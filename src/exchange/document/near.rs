use serde::Serialize;

use super::{FloorPart, Rows};
use crate::exchange::Symbols;
use crate::floor::Proof;
use crate::hunt::near::NearPlan;
use crate::seek::Verdict;
use crate::verify::{Certificate, Correlation, Efficiency, Nearness, WorstPair};

/// A plan for a budget that no exact array fits.
///
/// ```
/// use trysquare::exchange::{Symbols, document::NearDocument};
/// use trysquare::hunt::near::{NearOutcome, NearRequest, near};
/// let NearOutcome::Near(plan) = near(&NearRequest::new("2^3".parse()?, 3))? else { panic!() };
/// let json = serde_json::to_string(&NearDocument::new(&plan, Symbols::Zero))?;
/// assert!(json.starts_with(r#"{"request":"2^3","strength":2,"runs":3,"verdict":"near","#));
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
#[derive(Debug, Serialize)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct NearDocument<'a> {
    /// The mix asked for, canonical.
    pub request: String,
    /// The strength asked for; the criteria are about pairs of factors, whatever it is.
    pub strength: u32,
    /// The number of runs, which is the budget.
    pub runs: usize,
    /// `near`, unless the search came upon an orthogonal array.
    pub verdict: NearVerdict,
    /// The number of runs that can be paid for.
    pub budget: u64,
    /// The number of levels of each factor, in the order of the request.
    pub levels: &'a [u16],
    /// One array of level symbols per run, in the order of the request; kept runs first.
    pub array: Rows<'a>,
    /// How near to orthogonal the plan is.
    pub criteria: CriteriaDocument<'a>,
    /// The smallest exact array known here; null when there is none within the limit.
    pub next_exact: Option<NextDocument>,
    /// Where chance began.
    pub seed: u64,
    /// How many runs had to be kept; they come first.
    pub kept: usize,
    /// The proved lower bound on the runs of an orthogonal array; only with a verdict other than
    /// `near`.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub floor: Option<FloorPart<'a>>,
    /// What the judges found; only with a verdict other than `near`.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub certificate: Option<&'a Certificate>,
}

/// What a plan for a budget is.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize)]
#[serde(rename_all = "kebab-case")]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub enum NearVerdict {
    /// Not orthogonal at the strength asked for.
    Near,
    /// Orthogonal, and its number of runs equals the proved floor.
    ProvedSmallest,
    /// Orthogonal; the floor leaves a gap.
    SmallestKnown,
}

/// The criteria of a near plan; columns are counted from 1.
#[derive(Debug, Serialize)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct CriteriaDocument<'a> {
    /// For each column, how often its most frequent level occurs less how often its rarest does.
    pub level_differences: &'a [u64],
    /// The sum of squared pair counts over all pairs of columns.
    pub squares: u64,
    /// What `squares` is at least, proved, for every plan of so many runs with these levels.
    pub least_squares: u64,
    /// The sum of squared deviations of the pair counts from N/(rs), exact: `7` or `7/2`.
    pub deviation: &'a str,
    /// What `deviation` is at least, proved.
    pub least_deviation: &'a str,
    /// The number of pairs of columns.
    pub pairs: u64,
    /// How many pairs do not show all combinations equally often; null when not worked out.
    pub uneven_pairs: Option<u64>,
    /// The pair that deviates most; null for one factor, or when not worked out.
    pub worst_pair: Option<PairDocument<'a>>,
    /// The largest absolute correlation between main effects of different factors; null when
    /// there is none, or when not worked out.
    pub correlation: Option<CorrelationDocument<'a>>,
    /// The D-efficiency of the main-effects model; null when not worked out.
    pub d_efficiency: Option<EfficiencyDocument<'a>>,
}

/// A pair of columns and its counts.
#[derive(Debug, Serialize)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct PairDocument<'a> {
    /// The columns, from 1.
    pub columns: [usize; 2],
    /// Its sum of squared deviations, exact.
    pub deviation: &'a str,
    /// How often its rarest combination occurs.
    pub smallest: u64,
    /// How often its most frequent combination occurs.
    pub largest: u64,
}

/// The largest absolute correlation.
#[derive(Debug, Serialize)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct CorrelationDocument<'a> {
    /// Its absolute value.
    pub value: f64,
    /// Its square, exact: `1` or `1/9`.
    pub squared: &'a str,
    /// The columns, from 1.
    pub columns: [usize; 2],
    /// The degrees of the polynomial contrasts: 1 linear, 2 quadratic, …
    pub degrees: [u32; 2],
}

/// The D-efficiency of the main-effects model.
#[derive(Debug, Serialize)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct EfficiencyDocument<'a> {
    /// 1 for an orthogonal array, 0 when the model cannot be estimated.
    pub value: f64,
    /// The number of parameters: the mean and s − 1 for each factor of s levels.
    pub parameters: usize,
    /// The determinant of the moment matrix of the mean and the marks of the levels above the lowest.
    pub determinant: &'a str,
}

/// What an exact array costs.
#[derive(Clone, Copy, Debug, Serialize)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct NextDocument {
    /// Its number of runs.
    pub runs: u64,
    /// How far this is from the best possible.
    pub verdict: Verdict,
}

impl<'a> NearDocument<'a> {
    /// The document of a near plan.
    #[must_use]
    pub fn new(plan: &'a NearPlan, symbols: Symbols) -> Self {
        Self {
            request: plan.request.mix.to_string(),
            strength: plan.request.strength,
            runs: plan.array.runs(),
            verdict: NearVerdict::Near,
            budget: plan.request.budget,
            levels: plan.array.levels(),
            array: Rows { array: &plan.array, symbols },
            criteria: CriteriaDocument::new(&plan.nearness),
            next_exact: plan.next_exact.map(|e| NextDocument { runs: e.runs, verdict: e.verdict }),
            seed: plan.request.seed,
            kept: plan.request.kept.as_ref().map_or(0, crate::array::Array::runs),
            floor: None,
            certificate: None,
        }
    }

    /// The document of a plan that turned out orthogonal.
    #[must_use]
    pub fn orthogonal(self, certificate: &'a Certificate, floor: &'a Proof, verdict: Verdict) -> Self {
        let verdict = match verdict {
            Verdict::ProvedSmallest => NearVerdict::ProvedSmallest,
            Verdict::SmallestKnown => NearVerdict::SmallestKnown,
        };
        Self { verdict, floor: Some(FloorPart::new(floor)), certificate: Some(certificate), ..self }
    }
}

impl<'a> CriteriaDocument<'a> {
    /// The part that states the criteria.
    #[must_use]
    pub fn new(nearness: &'a Nearness) -> Self {
        let by_pairs = nearness.by_pairs.as_ref();
        let from_1 = |columns: [usize; 2]| columns.map(|c| c + 1);
        let pair = |w: &'a WorstPair| PairDocument {
            columns: from_1(w.columns),
            deviation: &w.deviation,
            smallest: w.smallest,
            largest: w.largest,
        };
        let correlation = |c: &'a Correlation| CorrelationDocument {
            value: c.value,
            squared: &c.squared,
            columns: from_1(c.columns),
            degrees: c.degrees,
        };
        let efficiency = |e: &'a Efficiency| EfficiencyDocument {
            value: e.value,
            parameters: e.parameters,
            determinant: &e.determinant,
        };
        Self {
            level_differences: &nearness.level_differences,
            squares: nearness.squares,
            least_squares: nearness.least_squares,
            deviation: &nearness.deviation,
            least_deviation: &nearness.least_deviation,
            pairs: nearness.pairs,
            uneven_pairs: by_pairs.map(|p| p.uneven),
            worst_pair: by_pairs.and_then(|p| p.worst.as_ref()).map(pair),
            correlation: by_pairs.and_then(|p| p.correlation.as_ref()).map(correlation),
            d_efficiency: nearness.efficiency.as_ref().map(efficiency),
        }
    }
}
