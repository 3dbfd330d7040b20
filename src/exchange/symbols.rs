//! [`Symbols`]: how the levels `0..s` are written.

use std::fmt;
use std::str::FromStr;

use thiserror::Error;

/// How the levels `0..s` of a factor are written in a file.
///
/// ```
/// use trysquare::exchange::Symbols;
/// let values = |s| (0..s).map(|c| Symbols::Coded.value(c, s)).collect::<Vec<_>>();
/// assert_eq!(values(2), [-1, 1]);
/// assert_eq!(values(3), [-1, 0, 1]);
/// assert_eq!(values(4), [-3, -1, 1, 3]);
/// ```
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, Hash)]
pub enum Symbols {
    /// `0, 1, …, s−1`.
    #[default]
    Zero,
    /// `1, 2, …, s`.
    One,
    /// Centred: `−(s−1)/2, …, (s−1)/2` for odd s, the odd integers `−(s−1), …, s−1` for even s.
    Coded,
}

impl Symbols {
    /// Every way of writing, in the order in which a reader tries them.
    pub const ALL: [Self; 3] = [Self::Zero, Self::One, Self::Coded];

    /// What stands for level `level` of a factor with `levels` levels.
    #[must_use]
    pub fn value(self, level: u16, levels: u16) -> i32 {
        let (step, start) = self.line(levels);
        step * i32::from(level) + start
    }

    /// The level of a factor with `levels` levels for which `value` stands.
    #[must_use]
    pub fn level(self, value: i32, levels: u16) -> Option<u16> {
        let (step, start) = self.line(levels);
        let ahead = value.checked_sub(start)?;
        let level = u16::try_from(ahead / step).ok()?;
        (ahead % step == 0 && level < levels).then_some(level)
    }

    /// `(step, start)` with value = step · level + start.
    pub(super) fn line(self, levels: u16) -> (i32, i32) {
        let last = i32::from(levels) - 1;
        match self {
            Self::Zero => (1, 0),
            Self::One => (1, 1),
            Self::Coded if levels % 2 == 1 => (1, -last / 2),
            Self::Coded => (2, -last),
        }
    }
}

impl fmt::Display for Symbols {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.pad(match self {
            Self::Zero => "zero",
            Self::One => "one",
            Self::Coded => "coded",
        })
    }
}

/// A text that names no [`Symbols`].
#[derive(Clone, Debug, PartialEq, Eq, Error)]
#[error("{0:?} names no symbols; write zero (0, 1, …), one (1, 2, …) or coded (−1, 1 / −1, 0, 1 / …)")]
pub struct SymbolsError(pub String);

impl FromStr for Symbols {
    type Err = SymbolsError;

    fn from_str(text: &str) -> Result<Self, SymbolsError> {
        Self::ALL
            .into_iter()
            .find(|s| s.to_string() == text.trim().to_ascii_lowercase())
            .ok_or_else(|| SymbolsError(text.to_owned()))
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn coded_levels_are_centred() {
        for s in 2u16..200 {
            let values: Vec<i32> = (0..s).map(|c| Symbols::Coded.value(c, s)).collect();
            assert_eq!(values.iter().sum::<i32>(), 0);
            let step = if s % 2 == 0 { 2 } else { 1 };
            assert!(values.windows(2).all(|w| w[1] - w[0] == step));
        }
        assert_eq!(Symbols::Coded.value(65_534, 65_535), 32_767);
        assert_eq!(Symbols::Coded.value(65_533, 65_534), 65_533);
    }

    #[test]
    fn level_undoes_value_and_nothing_else() {
        for symbols in Symbols::ALL {
            for s in [2u16, 3, 4, 5, 8, 65_534, 65_535] {
                let values: Vec<i32> = (0..s).map(|c| symbols.value(c, s)).collect();
                assert!((0..s).all(|c| symbols.level(values[usize::from(c)], s) == Some(c)));
                let set: std::collections::HashSet<i32> = values.into_iter().collect();
                for v in (-70_000..70_000).chain([i32::MIN, i32::MAX]) {
                    assert_eq!(symbols.level(v, s).is_some(), set.contains(&v), "{symbols} {s} {v}");
                }
            }
        }
    }

    #[test]
    fn names_round_trip() {
        for symbols in Symbols::ALL {
            assert_eq!(symbols.to_string().parse(), Ok(symbols));
        }
        assert_eq!(
            "two".parse::<Symbols>().unwrap_err().to_string(),
            "\"two\" names no symbols; write zero (0, 1, …), one (1, 2, …) or coded (−1, 1 / −1, 0, 1 / …)"
        );
    }
}
