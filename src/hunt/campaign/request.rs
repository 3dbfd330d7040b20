//! What a hunt is asked for.

use std::fmt;
use std::str::FromStr;

use serde::{Deserialize, Serialize};
use thiserror::Error;

use crate::mix::Mix;

/// The largest number of runs that is searched.
pub const MAX_RUNS: u32 = 128;

/// The symmetry an array is to have.
#[derive(Clone, Debug, Default, PartialEq, Eq, Hash, Serialize, Deserialize)]
#[serde(try_from = "String", into = "String")]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema), schemars(with = "String"))]
pub enum Symmetry {
    /// Several groups in turn, the trivial one among them.
    #[default]
    Auto,
    /// The product of cyclic groups of these orders, acting freely on the runs; none for no symmetry.
    Group(Vec<u16>),
}

impl fmt::Display for Symmetry {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::Auto => f.write_str("auto"),
            Self::Group(orders) => f.write_str(&group_name(orders)),
        }
    }
}

/// `Z3xZ3`, `none` for the trivial group.
pub(super) fn group_name(orders: &[u16]) -> String {
    if orders.is_empty() {
        return "none".to_owned();
    }
    orders.iter().map(|n| format!("Z{n}")).collect::<Vec<_>>().join("x")
}

impl From<Symmetry> for String {
    fn from(symmetry: Symmetry) -> Self {
        symmetry.to_string()
    }
}

impl TryFrom<String> for Symmetry {
    type Error = HuntError;

    fn try_from(text: String) -> Result<Self, HuntError> {
        text.parse()
    }
}

impl FromStr for Symmetry {
    type Err = HuntError;

    fn from_str(text: &str) -> Result<Self, HuntError> {
        match text {
            "auto" => return Ok(Self::Auto),
            "none" => return Ok(Self::Group(Vec::new())),
            _ => {}
        }
        let order = |word: &str| {
            let digits = word.strip_prefix(['Z', 'z'])?;
            digits.parse::<u16>().ok().filter(|n| (2..=MAX_RUNS).contains(&u32::from(*n)))
        };
        let orders: Option<Vec<u16>> = text.split(['x', '×']).map(order).collect();
        orders.map(Self::Group).ok_or_else(|| HuntError::Symmetry { text: text.to_owned() })
    }
}

/// Part `part` of `of` of the work list, from 1.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(try_from = "String", into = "String")]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema), schemars(with = "String"))]
pub struct Shard {
    part: u32,
    of: u32,
}

impl Shard {
    /// The whole work list.
    pub const WHOLE: Self = Self { part: 1, of: 1 };

    /// `None` unless 1 ≤ part ≤ of.
    #[must_use]
    pub fn new(part: u32, of: u32) -> Option<Self> {
        (part >= 1 && part <= of).then_some(Self { part, of })
    }

    /// The tasks of this shard are those whose number leaves this remainder …
    #[must_use]
    pub fn remainder(self) -> u64 {
        u64::from(self.part - 1)
    }

    /// … when it is divided by this.
    #[must_use]
    pub fn modulus(self) -> u64 {
        u64::from(self.of)
    }
}

impl Default for Shard {
    fn default() -> Self {
        Self::WHOLE
    }
}

impl fmt::Display for Shard {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{}/{}", self.part, self.of)
    }
}

impl FromStr for Shard {
    type Err = HuntError;

    fn from_str(text: &str) -> Result<Self, HuntError> {
        let parts = text.split_once('/').and_then(|(i, n)| Self::new(i.parse().ok()?, n.parse().ok()?));
        parts.ok_or_else(|| HuntError::Shard { text: text.to_owned() })
    }
}

impl From<Shard> for String {
    fn from(shard: Shard) -> Self {
        shard.to_string()
    }
}

impl TryFrom<String> for Shard {
    type Error = HuntError;

    fn try_from(text: String) -> Result<Self, HuntError> {
        text.parse()
    }
}

/// What a hunt is asked for.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct HuntRequest {
    /// The levels of the factors, in the order the answer keeps.
    #[serde(with = "mix_text")]
    pub mix: Mix,
    /// The number of runs, at most [`MAX_RUNS`].
    pub runs: u32,
    /// The strength, 2 or 3.
    pub strength: u32,
    /// The seed of the random numbers.
    pub seed: u64,
    /// The symmetry of the array.
    pub symmetry: Symmetry,
    /// The part of the work list that is done.
    pub shard: Shard,
    /// The work list ends after so many tasks, counted over all shards.
    pub tasks: Option<u64>,
}

impl HuntRequest {
    /// A request at strength 2 with seed 1, any symmetry, the whole work list without an end.
    #[must_use]
    pub fn new(mix: Mix, runs: u32) -> Self {
        Self { mix, runs, strength: 2, seed: 1, symmetry: Symmetry::Auto, shard: Shard::WHOLE, tasks: None }
    }

    /// Whether the request makes sense.
    ///
    /// # Errors
    /// A [`HuntError`] that says what to ask instead.
    pub fn check(&self) -> Result<(), HuntError> {
        if self.runs == 0 || self.runs > MAX_RUNS {
            return Err(HuntError::Runs { runs: self.runs });
        }
        if !(2..=3).contains(&self.strength) || self.strength as usize > self.mix.factors() {
            return Err(HuntError::Strength { strength: self.strength, factors: self.mix.factors() });
        }
        if let Symmetry::Group(orders) = &self.symmetry {
            let order = orders.iter().try_fold(1u32, |n, &g| n.checked_mul(u32::from(g)));
            if order.is_none_or(|n| !self.runs.is_multiple_of(n)) {
                return Err(HuntError::Order { symmetry: self.symmetry.to_string(), runs: self.runs });
            }
        }
        Ok(())
    }
}

mod mix_text {
    use serde::{Deserialize, Deserializer, Serializer, de::Error};

    use crate::mix::Mix;

    pub(super) fn serialize<S: Serializer>(mix: &Mix, to: S) -> Result<S::Ok, S::Error> {
        let words: Vec<String> = mix.levels().iter().map(u16::to_string).collect();
        to.serialize_str(&words.join(" "))
    }

    pub(super) fn deserialize<'de, D: Deserializer<'de>>(from: D) -> Result<Mix, D::Error> {
        String::deserialize(from)?.parse().map_err(D::Error::custom)
    }
}

/// Why a hunt cannot be started.
#[derive(Debug, Error, PartialEq, Eq)]
#[non_exhaustive]
pub enum HuntError {
    /// Too many runs, or none.
    #[error("a hunt looks at 1 to {MAX_RUNS} runs, not {runs}")]
    Runs {
        /// What was asked for.
        runs: u32,
    },
    /// Another strength, or fewer factors than the strength.
    #[error(
        "a hunt looks for strength 2 or 3 among at least so many factors; strength {strength} was asked for {factors} of them"
    )]
    Strength {
        /// What was asked for.
        strength: u32,
        /// How many factors there are.
        factors: usize,
    },
    /// The group cannot act freely on the runs.
    #[error(
        "{symmetry} cannot act freely on {runs} runs: its order must divide them; write another --symmetry, or auto"
    )]
    Order {
        /// The group.
        symmetry: String,
        /// The runs.
        runs: u32,
    },
    /// Not the name of a group.
    #[error("{text:?} is no symmetry; write auto, none, or a product of cyclic groups such as Z3 or Z3xZ3")]
    Symmetry {
        /// What was written.
        text: String,
    },
    /// Not a part of a work list.
    #[error("{text:?} is no shard; write i/n with 1 <= i <= n, such as 2/8")]
    Shard {
        /// What was written.
        text: String,
    },
    /// A state that does not belong to this version or is damaged.
    #[error("the state cannot be used: {reason}")]
    State {
        /// What is wrong with it.
        reason: String,
    },
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn symmetries_and_shards_are_read_as_they_are_written() {
        for text in ["auto", "none", "Z3", "Z3xZ3", "Z2xZ4"] {
            assert_eq!(text.parse::<Symmetry>().unwrap().to_string(), text);
        }
        for bad in ["", "Z", "Z1", "3", "Z3x", "Z3 x Z3", "Z999"] {
            assert!(bad.parse::<Symmetry>().is_err(), "{bad}");
        }
        assert_eq!("2/8".parse::<Shard>().unwrap(), Shard::new(2, 8).unwrap());
        for bad in ["0/3", "4/3", "1", "1/", "/", "-1/2"] {
            assert!(bad.parse::<Shard>().is_err(), "{bad}");
        }
    }

    #[test]
    fn requests_that_make_no_sense_are_refused() {
        let good = HuntRequest::new("2^4 3".parse().unwrap(), 12);
        assert_eq!(good.check(), Ok(()));
        assert!(matches!(HuntRequest { runs: 129, ..good.clone() }.check(), Err(HuntError::Runs { .. })));
        assert!(HuntRequest { strength: 4, ..good.clone() }.check().is_err());
        assert!(HuntRequest { strength: 3, mix: "2 2".parse().unwrap(), ..good.clone() }.check().is_err());
        let z5 = HuntRequest { symmetry: "Z5".parse().unwrap(), ..good.clone() };
        assert!(matches!(z5.check(), Err(HuntError::Order { .. })));
        let json = serde_json::to_string(&good).unwrap();
        assert_eq!(serde_json::from_str::<HuntRequest>(&json).unwrap(), good);
    }
}
