use serde::Serialize;

use crate::floor::Proof;

/// Every lower bound for a mix.
#[derive(Debug, Serialize)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct FloorDocument<'a> {
    /// The mix, canonical.
    pub mix: String,
    /// The strength.
    pub strength: u32,
    /// The best bound: no array has fewer runs.
    pub runs: u64,
    /// Its name.
    pub by: &'static str,
    /// Its proof.
    pub proof: &'a Proof,
    /// All bounds, the best one first.
    pub bounds: Vec<BoundDocument>,
}

/// One lower bound.
#[derive(Debug, Serialize)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct BoundDocument {
    /// The name of the bound.
    pub by: &'static str,
    /// Its value before it is rounded up to a multiple of the divisor.
    pub least: u64,
    /// Its value.
    pub runs: u64,
}

impl<'a> FloorDocument<'a> {
    /// The document of the bounds, the best one first; `None` when there is none.
    #[must_use]
    pub fn new(bounds: &'a [Proof]) -> Option<Self> {
        let best = bounds.first()?;
        let part = |p: &Proof| BoundDocument { by: p.bound.name(), least: p.bound.least(), runs: p.runs };
        Some(Self {
            mix: best.mix.to_string(),
            strength: best.strength,
            runs: best.runs,
            by: best.bound.name(),
            proof: best,
            bounds: bounds.iter().map(part).collect(),
        })
    }
}
