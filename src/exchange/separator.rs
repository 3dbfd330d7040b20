//! [`Separator`]: what stands between two cells.

use std::fmt;
use std::str::FromStr;

use thiserror::Error;

/// What stands between two cells of a line.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, Hash)]
pub enum Separator {
    /// A comma.
    #[default]
    Comma,
    /// A semicolon.
    Semicolon,
    /// A tab.
    Tab,
    /// One blank or several, also at the ends of a line.
    Blank,
}

impl Separator {
    /// Every separator, in no order of preference.
    pub const ALL: [Self; 4] = [Self::Comma, Self::Semicolon, Self::Tab, Self::Blank];

    /// The separator's byte.
    #[must_use]
    pub fn byte(self) -> u8 {
        match self {
            Self::Comma => b',',
            Self::Semicolon => b';',
            Self::Tab => b'\t',
            Self::Blank => b' ',
        }
    }
}

impl fmt::Display for Separator {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.pad(match self {
            Self::Comma => "comma",
            Self::Semicolon => "semicolon",
            Self::Tab => "tab",
            Self::Blank => "blank",
        })
    }
}

/// A text that names no [`Separator`].
#[derive(Clone, Debug, PartialEq, Eq, Error)]
#[error("{0:?} names no separator; write comma, semicolon, tab or blank")]
pub struct SeparatorError(pub String);

impl FromStr for Separator {
    type Err = SeparatorError;

    fn from_str(text: &str) -> Result<Self, SeparatorError> {
        match text {
            "," => return Ok(Self::Comma),
            ";" => return Ok(Self::Semicolon),
            "\t" => return Ok(Self::Tab),
            " " => return Ok(Self::Blank),
            _ => {}
        }
        Self::ALL
            .into_iter()
            .find(|s| s.to_string() == text.trim().to_ascii_lowercase())
            .ok_or_else(|| SeparatorError(text.to_owned()))
    }
}
