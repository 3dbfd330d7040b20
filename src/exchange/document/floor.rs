use serde::Serialize;

use crate::floor::{Exclusion, Most, Proof};

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
    /// Its value, or one more than the last number of runs excluded, before it is rounded up to a multiple of the divisor.
    pub least: u64,
    /// Its value.
    pub runs: u64,
}

impl<'a> FloorDocument<'a> {
    /// The document of the bounds, the best one first; `None` when there is none.
    #[must_use]
    pub fn new(bounds: &'a [Proof]) -> Option<Self> {
        let best = bounds.first()?;
        let part = |p: &Proof| BoundDocument { by: p.name(), least: p.least(), runs: p.runs };
        Some(Self {
            mix: best.mix.to_string(),
            strength: best.strength,
            runs: best.runs,
            by: best.name(),
            proof: best,
            bounds: bounds.iter().map(part).collect(),
        })
    }
}

/// How many factors of one kind can stand beside others.
#[derive(Debug, Serialize)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct MostDocument<'a> {
    /// The other factors, canonical; null when there are none.
    pub beside: Option<String>,
    /// The number of levels of the factors in question.
    pub levels: u16,
    /// The number of runs.
    pub runs: u64,
    /// The strength.
    pub strength: u32,
    /// No more factors can stand there; null when not even the others have an array.
    pub most: Option<u64>,
    /// So many do on the shelf; null when not even the others are there.
    pub reached: Option<u64>,
    /// The mix with one factor more than `most`.
    pub impossible: String,
    /// The name of the reason.
    pub by: &'static str,
    /// Why `impossible` has no array of so many runs.
    pub exclusion: &'a Exclusion,
}

impl<'a> MostDocument<'a> {
    /// The document of a limit.
    #[must_use]
    pub fn new(
        beside: Option<String>,
        levels: u16,
        strength: u32,
        most: &'a Most,
        reached: Option<u64>,
    ) -> Self {
        Self {
            beside,
            levels,
            runs: most.exclusion.runs,
            strength,
            most: most.factors,
            reached,
            impossible: most.mix.to_string(),
            by: most.exclusion.reason.name(),
            exclusion: &most.exclusion,
        }
    }
}
