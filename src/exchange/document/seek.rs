use serde::ser::{SerializeSeq, Serializer};
use serde::{Deserialize, Serialize};

use crate::array::Array;
use crate::exchange::Symbols;
use crate::floor::{Below, Proof};
use crate::recipe::Recipe;
use crate::seek::{Answer, Outcome, Request, Verdict};
use crate::verify::Certificate;

/// What became of one request: an array, nothing, or an error.
///
/// ```
/// use trysquare::exchange::{Symbols, document::SeekDocument};
/// use trysquare::seek::{Request, seek};
/// let request = Request::new("2^1 3^7".parse()?);
/// let outcome = seek(&request)?;
/// let json = serde_json::to_string(&SeekDocument::new(&request, &outcome, Symbols::Zero))?;
/// assert!(json.starts_with(r#"{"request":"2^1 3^7","strength":2,"runs":18,"verdict":"proved-smallest","#));
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
#[derive(Debug, Serialize)]
#[serde(untagged)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub enum SeekDocument<'a> {
    /// An array.
    Found(Box<FoundDocument<'a>>),
    /// No array of at most so many runs.
    Nothing(NothingDocument<'a>),
    /// A line of a batch that makes no sense.
    Error(ErrorDocument<'a>),
}

/// An array for a request, judged.
#[derive(Debug, Serialize)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct FoundDocument<'a> {
    /// The mix asked for, canonical.
    pub request: String,
    /// The strength asked for.
    pub strength: u32,
    /// The number of runs.
    pub runs: usize,
    /// How far the number of runs is from the best possible.
    pub verdict: Verdict,
    /// The proved lower bound on the number of runs.
    pub floor: FloorPart<'a>,
    /// The numbers of runs below the answer that divisibility allows, ascending; of very many only
    /// the last ones.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    pub below: Vec<BelowPart>,
    /// The number of levels of each factor, in the order of the request.
    pub levels: &'a [u16],
    /// One array of level symbols per run, in the order of the request.
    pub array: Rows<'a>,
    /// How the array is built.
    pub recipe: &'a Recipe,
    /// What the judges found.
    pub certificate: &'a Certificate,
}

/// A request for which there is no array of at most so many runs.
#[derive(Debug, Serialize)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct NothingDocument<'a> {
    /// The mix asked for, canonical.
    pub request: String,
    /// The strength asked for.
    pub strength: u32,
    /// Why there is none.
    pub verdict: NothingVerdict,
    /// The proved lower bound on the number of runs.
    pub floor: FloorPart<'a>,
    /// The largest number of runs that was allowed.
    pub max_runs: u64,
}

/// Why there is no array.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub enum NothingVerdict {
    /// The floor is above the largest number of runs allowed.
    ProvedImpossible,
    /// None was found within the limits; one may exist.
    LimitReached,
}

/// A line of a batch that makes no sense.
#[derive(Debug, Serialize)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct ErrorDocument<'a> {
    /// The line, from 1.
    pub line: u64,
    /// The line as it was given.
    pub request: &'a str,
    /// What is wrong with it and what to write instead.
    pub error: String,
}

/// A proved lower bound.
#[derive(Debug, Serialize)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct FloorPart<'a> {
    /// No array has fewer runs.
    pub runs: u64,
    /// The name of what it rests on: of a bound, or of the last reason against a number of runs.
    pub by: &'static str,
    /// The proof.
    pub proof: &'a Proof,
}

impl<'a> FloorPart<'a> {
    /// The part that states a proof.
    #[must_use]
    pub fn new(proof: &'a Proof) -> Self {
        Self { runs: proof.runs, by: proof.name(), proof }
    }
}

/// A number of runs below an answer.
#[derive(Clone, Debug, Serialize)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct BelowPart {
    /// The number of runs.
    pub runs: u64,
    /// The name of what excludes it; null when nothing known here does.
    pub excluded: Option<&'static str>,
}

impl BelowPart {
    /// The part that states what is known.
    #[must_use]
    pub fn new(below: &Below) -> Self {
        Self { runs: below.runs, excluded: below.excluded }
    }
}

/// The runs of an array, written as arrays of numbers.
#[derive(Clone, Copy, Debug)]
pub struct Rows<'a> {
    /// The array.
    pub array: &'a Array,
    /// How its levels are written.
    pub symbols: Symbols,
}

impl Serialize for Rows<'_> {
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        let mut rows = serializer.serialize_seq(Some(self.array.runs()))?;
        let levels = self.array.levels();
        for row in self.array.rows() {
            let values: Vec<i32> =
                row.iter().zip(levels).map(|(&symbol, &s)| self.symbols.value(symbol, s)).collect();
            rows.serialize_element(&values)?;
        }
        rows.end()
    }
}

#[cfg(feature = "schema")]
impl schemars::JsonSchema for Rows<'_> {
    fn inline_schema() -> bool {
        true
    }

    fn schema_name() -> std::borrow::Cow<'static, str> {
        "Rows".into()
    }

    fn json_schema(generator: &mut schemars::SchemaGenerator) -> schemars::Schema {
        Vec::<Vec<i32>>::json_schema(generator)
    }
}

impl<'a> SeekDocument<'a> {
    /// The document of an outcome.
    #[must_use]
    pub fn new(request: &Request, outcome: &'a Outcome, symbols: Symbols) -> Self {
        let nothing = |floor, verdict| {
            Self::Nothing(NothingDocument {
                request: request.mix.to_string(),
                strength: request.strength,
                verdict,
                floor: FloorPart::new(floor),
                max_runs: request.max_runs,
            })
        };
        match outcome {
            Outcome::Found(answer) => Self::Found(Box::new(FoundDocument::new(answer, symbols))),
            Outcome::ProvedImpossible { floor } => nothing(floor, NothingVerdict::ProvedImpossible),
            Outcome::LimitReached { floor, .. } => nothing(floor, NothingVerdict::LimitReached),
        }
    }
}

impl<'a> FoundDocument<'a> {
    /// The document of an answer.
    #[must_use]
    pub fn new(answer: &'a Answer, symbols: Symbols) -> Self {
        Self {
            request: answer.request.mix.to_string(),
            strength: answer.request.strength,
            runs: answer.array.runs(),
            verdict: answer.verdict,
            floor: FloorPart::new(&answer.floor),
            below: answer.below.iter().map(BelowPart::new).collect(),
            levels: answer.array.levels(),
            array: Rows { array: &answer.array, symbols },
            recipe: &answer.recipe,
            certificate: &answer.certificate,
        }
    }
}
