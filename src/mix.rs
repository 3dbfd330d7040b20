//! [`Mix`]: the numbers of levels of the factors somebody asks for.

use std::collections::BTreeMap;
use std::fmt;
use std::str::FromStr;

use serde::{Deserialize, Deserializer, Serialize, Serializer};
use thiserror::Error;

/// The largest number of factors a [`Mix`] holds.
pub const MAX_FACTORS: usize = 1 << 24;

/// The multiset of level counts of a list of factors, in the order in which they were asked for.
///
/// * Every factor has 2 to 65,535 levels; a mix has 1 to [`MAX_FACTORS`] factors.
/// * [`Mix::levels`] keeps the asked order; [`Display`](fmt::Display) and the serialised form are
///   canonical: ascending bases, every exponent written (`2^1 3^7`).
/// * Two mixes are equal when they have the same levels *in the same order*;
///   [`Mix::counts`] compares them as multisets.
///
/// The text form accepted by [`FromStr`] is a list of terms `levels` or `levels^factors`,
/// separated by blanks, commas, semicolons, `x`, `×` or `*`, in any order, bases repeated at will.
///
/// ```
/// use trysquare::mix::Mix;
/// let mix: Mix = "3^2 x 2, 3".parse()?;
/// assert_eq!(mix.levels(), [3, 3, 2, 3]);
/// assert_eq!(mix.to_string(), "2^1 3^3");
/// # Ok::<(), trysquare::mix::MixError>(())
/// ```
#[derive(Clone, Debug, PartialEq, Eq, Hash)]
pub struct Mix {
    levels: Vec<u16>,
}

impl Mix {
    /// A mix from the levels of each factor, in the asked order.
    ///
    /// # Errors
    /// A [`MixError`] when there is no factor, too many, or one with fewer than 2 levels.
    pub fn new(levels: Vec<u16>) -> Result<Self, MixError> {
        let place = |reason, at| Err(MixError { text: format!("{levels:?}"), at, reason });
        if levels.is_empty() {
            return place(MixReason::Empty, 0);
        }
        if levels.len() > MAX_FACTORS {
            return Err(MixError { text: String::new(), at: 0, reason: MixReason::TooManyFactors });
        }
        if let Some(&few) = levels.iter().find(|&&s| s < 2) {
            return place(MixReason::FewLevels(few), 0);
        }
        Ok(Self { levels })
    }

    /// A mix from (levels, number of factors) pairs, in that order.
    ///
    /// # Errors
    /// As [`Mix::new`].
    pub fn from_counts(counts: impl IntoIterator<Item = (u16, usize)>) -> Result<Self, MixError> {
        let mut levels = Vec::new();
        for (s, k) in counts {
            if k > MAX_FACTORS - levels.len() {
                return Err(MixError { text: format!("{s}^{k}"), at: 0, reason: MixReason::TooManyFactors });
            }
            levels.extend(std::iter::repeat_n(s, k));
        }
        Self::new(levels)
    }

    /// The number of levels of each factor, in the asked order.
    #[must_use]
    pub fn levels(&self) -> &[u16] {
        &self.levels
    }

    /// The number of factors.
    #[must_use]
    pub fn factors(&self) -> usize {
        self.levels.len()
    }

    /// How many factors there are of each number of levels.
    #[must_use]
    pub fn counts(&self) -> BTreeMap<u16, usize> {
        counts_of(&self.levels)
    }

    /// The number of runs of the full factorial, `None` above `u128::MAX`.
    #[must_use]
    pub fn full_factorial(&self) -> Option<u128> {
        self.levels.iter().try_fold(1u128, |n, &s| n.checked_mul(u128::from(s)))
    }
}

/// How many entries of `levels` there are of each value.
#[must_use]
pub fn counts_of(levels: &[u16]) -> BTreeMap<u16, usize> {
    let mut counts = BTreeMap::new();
    for &s in levels {
        *counts.entry(s).or_insert(0) += 1;
    }
    counts
}

impl fmt::Display for Mix {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        for (i, (s, k)) in self.counts().into_iter().enumerate() {
            if i > 0 {
                f.write_str(" ")?;
            }
            write!(f, "{s}^{k}")?;
        }
        Ok(())
    }
}

impl Serialize for Mix {
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        serializer.collect_str(self)
    }
}

impl<'de> Deserialize<'de> for Mix {
    fn deserialize<D: Deserializer<'de>>(deserializer: D) -> Result<Self, D::Error> {
        String::deserialize(deserializer)?.parse().map_err(serde::de::Error::custom)
    }
}

/// Why a text is not a [`Mix`], with the place.
#[derive(Clone, Debug, PartialEq, Eq, Error)]
#[error("{}", self.render())]
pub struct MixError {
    /// The text as it was given.
    pub text: String,
    /// The place in `text`, in characters from 0.
    pub at: usize,
    /// What is wrong there.
    pub reason: MixReason,
}

/// The reasons a text is not a [`Mix`].
#[derive(Clone, Copy, Debug, PartialEq, Eq, Error)]
#[non_exhaustive]
pub enum MixReason {
    /// Nothing but separators.
    #[error("no factor is named; write levels^factors, for example 2^1 3^7")]
    Empty,
    /// A factor with zero or one level.
    #[error("a factor needs at least 2 levels, not {0}; leave out factors that never change")]
    FewLevels(u16),
    /// A number of levels above 65,535.
    #[error("a factor has at most 65535 levels")]
    ManyLevels,
    /// An exponent of zero.
    #[error("the number of factors after ^ is at least 1; leave the term out instead")]
    NoFactors,
    /// `^` without a number after it.
    #[error("write the number of factors after ^, for example 3^7")]
    MissingFactors,
    /// `^` without a number of levels before it.
    #[error("write the number of levels before ^, for example 3^7")]
    MissingLevels,
    /// More factors than a mix holds.
    #[error("more than 16777216 factors")]
    TooManyFactors,
    /// A character that has no place in a mix.
    #[error("{0:?} has no meaning here; write levels^factors, separated by blanks, for example 2^1 3^7")]
    Stray(char),
}

impl MixError {
    fn render(&self) -> String {
        const WINDOW: usize = 60;
        let from = self.at.saturating_sub(WINDOW / 2);
        let shown: String =
            self.text.chars().skip(from).take(WINDOW).map(|c| if c.is_control() { ' ' } else { c }).collect();
        if shown.trim().is_empty() {
            return self.reason.to_string();
        }
        format!("{}\n  {shown}\n  {}^", self.reason, " ".repeat(self.at - from))
    }
}

impl FromStr for Mix {
    type Err = MixError;

    fn from_str(text: &str) -> Result<Self, MixError> {
        let mut levels: Vec<u16> = Vec::new();
        let mut reader = Reader { chars: text.chars().collect(), at: 0 };
        let fail = |at, reason| MixError { text: text.to_owned(), at, reason };
        loop {
            reader.skip(|c| c.is_whitespace() || matches!(c, ',' | ';' | 'x' | 'X' | '×' | '*'));
            let start = reader.at;
            let Some(c) = reader.peek() else { break };
            if c == '^' {
                return Err(fail(start, MixReason::MissingLevels));
            }
            let base = reader.number().ok_or_else(|| fail(start, MixReason::Stray(c)))?;
            let base =
                base.and_then(|b| u16::try_from(b).ok()).ok_or_else(|| fail(start, MixReason::ManyLevels))?;
            if base < 2 {
                return Err(fail(start, MixReason::FewLevels(base)));
            }
            let after_base = reader.at;
            reader.skip(char::is_whitespace);
            let mut count = 1;
            if reader.peek() == Some('^') {
                reader.at += 1;
                reader.skip(char::is_whitespace);
                let place = reader.at;
                let number = reader.number().ok_or_else(|| fail(place, MixReason::MissingFactors))?;
                count = number
                    .and_then(|n| usize::try_from(n).ok())
                    .filter(|&n| n <= MAX_FACTORS - levels.len())
                    .ok_or_else(|| fail(place, MixReason::TooManyFactors))?;
                if count == 0 {
                    return Err(fail(place, MixReason::NoFactors));
                }
            } else {
                reader.at = after_base;
                if levels.len() == MAX_FACTORS {
                    return Err(fail(start, MixReason::TooManyFactors));
                }
            }
            levels.extend(std::iter::repeat_n(base, count));
            if let Some(c) = reader.peek().filter(|&c| c == '^') {
                return Err(fail(reader.at, MixReason::Stray(c)));
            }
        }
        if levels.is_empty() {
            return Err(fail(0, MixReason::Empty));
        }
        Ok(Self { levels })
    }
}

struct Reader {
    chars: Vec<char>,
    at: usize,
}

impl Reader {
    fn peek(&self) -> Option<char> {
        self.chars.get(self.at).copied()
    }

    fn skip(&mut self, what: impl Fn(char) -> bool) {
        while self.peek().is_some_and(&what) {
            self.at += 1;
        }
    }

    /// The decimal number here: `None` when there is no digit, `Some(None)` when it is too large.
    fn number(&mut self) -> Option<Option<u64>> {
        let start = self.at;
        self.skip(|c| c.is_ascii_digit());
        (self.at > start).then(|| {
            self.chars[start..self.at]
                .iter()
                .try_fold(0u64, |n, c| n.checked_mul(10)?.checked_add(u64::from(c.to_digit(10)?)))
        })
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    fn levels(text: &str) -> Vec<u16> {
        text.parse::<Mix>().unwrap().levels().to_vec()
    }

    #[test]
    fn reads_every_way_of_writing() {
        for text in ["2^1 3^2", "2 3 3", "2x3x3", "2 × 3^2", "2*3*3", "2,3,3", " 2^1;3 ^ 2 ", "2^1x3^2"] {
            assert_eq!(levels(text), [2, 3, 3], "{text}");
        }
        assert_eq!(levels("3^1 2^1 3^1"), [3, 2, 3]);
        assert_eq!("3 2 3 65535".parse::<Mix>().unwrap().to_string(), "2^1 3^2 65535^1");
    }

    #[test]
    fn says_what_is_wrong_and_where() {
        let cases = [
            ("", 0, MixReason::Empty),
            (" , ", 0, MixReason::Empty),
            ("2^1 1^3", 4, MixReason::FewLevels(1)),
            ("0", 0, MixReason::FewLevels(0)),
            ("3 65536^2", 2, MixReason::ManyLevels),
            ("99999999999999999999999", 0, MixReason::ManyLevels),
            ("2^0", 2, MixReason::NoFactors),
            ("2^ ", 3, MixReason::MissingFactors),
            ("2^x", 2, MixReason::MissingFactors),
            ("^3", 0, MixReason::MissingLevels),
            ("2^3^4", 3, MixReason::Stray('^')),
            ("2^99999999", 2, MixReason::TooManyFactors),
            ("2^16777216 3", 11, MixReason::TooManyFactors),
            ("two", 0, MixReason::Stray('t')),
            ("2^1 3^7!", 7, MixReason::Stray('!')),
            ("-2", 0, MixReason::Stray('-')),
        ];
        for (text, at, reason) in cases {
            let e = text.parse::<Mix>().unwrap_err();
            assert_eq!((e.at, e.reason), (at, reason), "{text:?}");
        }
    }

    #[test]
    fn the_message_marks_the_place() {
        let e = "2^1 1^3".parse::<Mix>().unwrap_err();
        assert_eq!(
            e.to_string(),
            "a factor needs at least 2 levels, not 1; leave out factors that never change\n  2^1 1^3\n      ^"
        );
    }

    proptest! {
        #[test]
        fn no_text_panics(text in ".*") {
            if let Err(e) = text.parse::<Mix>() {
                let _ = e.to_string();
            }
        }

        #[test]
        fn no_mix_like_text_panics(text in "[0-9^x*, ;×]{0,24}") {
            if let Err(e) = text.parse::<Mix>() {
                let _ = e.to_string();
            }
        }

        #[test]
        fn canonical_text_round_trips(levels in prop::collection::vec(2u16.., 1..20)) {
            let mix = Mix::new(levels).unwrap();
            let again: Mix = mix.to_string().parse().unwrap();
            prop_assert_eq!(again.counts(), mix.counts());
            prop_assert_eq!(again.to_string(), mix.to_string());
            let json = serde_json::to_string(&mix).unwrap();
            prop_assert_eq!(serde_json::from_str::<Mix>(&json).unwrap(), again);
        }
    }
}
