//! What the factors and their levels are called on the page.

use std::borrow::Cow;

use super::escape::width;
use crate::array::Array;
use crate::exchange::{Received, Symbols, default_name};

/// Settings up to this width stand in the cells themselves, others get a letter.
const NARROW: usize = 6;
/// Factors with more levels than this are shown by number.
const MOST_WORDS: u16 = 64;
/// The number of tones in the style sheet.
const TONES: usize = 8;

/// Where the names of factors and levels come from.
///
/// Whatever is missing gets a default: `F3` for a factor, `level 2` for a level.
#[derive(Clone, Copy, Debug)]
pub enum Labels<'a> {
    /// From a file.
    Received(&'a Received),
    /// `F1`, `F2`, … and the levels as these symbols.
    Symbols(Symbols),
    /// Names of the factors, and for each factor its settings by level.
    Given {
        /// One name per factor.
        names: &'a [String],
        /// `settings[j][symbol]`.
        settings: &'a [Vec<String>],
    },
}

impl Labels<'_> {
    /// The name of a factor, counted from 0.
    #[must_use]
    pub fn name(&self, factor: usize) -> Cow<'_, str> {
        let named = match self {
            Self::Received(received) => received.names.as_ref().and_then(|n| n.get(factor)),
            Self::Symbols(_) => None,
            Self::Given { names, .. } => names.get(factor),
        };
        let default = || Cow::Owned(default_name(factor.saturating_add(1)));
        named.filter(|n| !n.trim().is_empty()).map_or_else(default, |n| Cow::Borrowed(n.as_str()))
    }

    /// What a level of a factor with `levels` levels is called.
    #[must_use]
    pub fn setting(&self, factor: usize, symbol: u16, levels: u16) -> Cow<'_, str> {
        let word = match self {
            Self::Received(received) => received.level_name(factor, symbol),
            Self::Symbols(symbols) => return Cow::Owned(symbols.value(symbol, levels).to_string()),
            Self::Given { settings, .. } => {
                settings.get(factor).and_then(|s| s.get(usize::from(symbol))).map(String::as_str)
            }
        };
        word.map_or_else(|| Cow::Owned(format!("level {}", u32::from(symbol) + 1)), Cow::Borrowed)
    }
}

/// What stands in the cells of one factor, by symbol; `None` where the symbol's number does.
pub(super) struct Cells {
    texts: Option<Vec<String>>,
    levels: u16,
}

impl Cells {
    pub(super) fn new(labels: &Labels<'_>, factor: usize, levels: u16) -> Self {
        let words = || -> Vec<String> {
            (0..levels).map(|symbol| labels.setting(factor, symbol, levels).into_owned()).collect()
        };
        let fit = |w: &Vec<String>| w.iter().all(|t| width(t) <= NARROW && !t.trim().is_empty());
        let words = (levels <= MOST_WORDS).then(words).filter(fit);
        let letters = || (0..levels).map(|symbol| letter(symbol).to_string()).collect();
        Self { texts: words.or_else(|| (levels <= 26).then(letters)), levels }
    }

    pub(super) fn text(&self, symbol: u16) -> Cow<'_, str> {
        let text = self.texts.as_ref().and_then(|t| t.get(usize::from(symbol)));
        text.map_or_else(|| Cow::Owned((u32::from(symbol) + 1).to_string()), |t| Cow::Borrowed(t.as_str()))
    }

    pub(super) fn tone(&self, symbol: u16) -> usize {
        tone(symbol, self.levels)
    }

    pub(super) fn width(&self) -> usize {
        let of = |t: &Vec<String>| t.iter().map(|t| width(t)).max().unwrap_or(1);
        self.texts.as_ref().map_or_else(|| self.levels.to_string().len(), of)
    }
}

fn letter(symbol: u16) -> char {
    char::from(b'A' + (symbol % 26) as u8)
}

/// Tones from light to dark in the order of the levels.
fn tone(symbol: u16, levels: u16) -> usize {
    let darkest = if levels <= 3 { TONES - 2 } else { TONES - 1 };
    usize::from(symbol) * darkest / usize::from(levels.max(2) - 1)
}

/// What stands above the column of each factor: the names where all are short, else the numbers.
pub(super) fn heads(labels: &Labels<'_>, array: &Array, shown: usize) -> Vec<String> {
    let names: Vec<Cow<'_, str>> = (0..shown.min(array.factors())).map(|j| labels.name(j)).collect();
    if names.iter().all(|n| width(n) <= NARROW) {
        return names.into_iter().map(Cow::into_owned).collect();
    }
    (1..=names.len()).map(|n| n.to_string()).collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn short_words_stand_in_the_cells_and_long_ones_get_letters() {
        let settings = [vec!["low".to_owned(), "high".into()], vec!["quite cold".into(), "hot".into()]];
        let labels = Labels::Given { names: &[], settings: &settings };
        let cells = |j| Cells::new(&labels, j, 2);
        assert_eq!((cells(0).text(1).as_ref(), cells(1).text(1).as_ref()), ("high", "B"));
        assert_eq!(labels.name(6), "F7");
        assert_eq!(labels.setting(3, 1, 2), "level 2");
        let many = Cells::new(&Labels::Symbols(Symbols::Zero), 0, 65_535);
        assert_eq!((many.text(65_534).as_ref(), many.tone(65_534), many.width()), ("65535", 7, 5));
    }
}
