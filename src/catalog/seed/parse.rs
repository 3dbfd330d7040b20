//! Reading the format of `catalog/FORMAT.md`.

use std::str::FromStr;

use num_integer::Integer;
use thiserror::Error;

use super::{Seed, SeedKind};
use crate::algebra::{AbelianGroup, factorise, is_prime, prime_power};
use crate::construct::OrbitColumn;
use crate::construct::field::Flat;

/// Why a text is not a [`Seed`], with the line.
#[derive(Clone, Debug, PartialEq, Eq, Error)]
#[error("line {line}: {reason}")]
pub struct SeedError {
    /// The line, from 1.
    pub line: usize,
    /// The rule that is broken there.
    pub reason: SeedReason,
}

/// The rules of the format.
#[derive(Clone, Debug, PartialEq, Eq, Error)]
#[non_exhaustive]
pub enum SeedReason {
    /// The text ends before the line `end`, or in the middle of a line.
    #[error("the text is cut short: it ends with the line `end`")]
    Incomplete,
    /// Another line stands where a key is due.
    #[error("write `{0}: ` and its value here")]
    Key(&'static str),
    /// A key without a value.
    #[error("the value of `{0}` is empty")]
    Empty(&'static str),
    /// A name with other characters.
    #[error("a name has lower-case letters, digits and hyphens")]
    Name,
    /// An unknown kind.
    #[error(
        "the kind is difference-scheme, four-circulants, turyn-type, v-vector, quasi-difference, subspaces, \
         flats or orbits, not {0:?}"
    )]
    Kind(String),
    /// Not a number in the range that the place admits.
    #[error("{0:?} is not a decimal number that fits here; numbers are separated by one blank")]
    Number(String),
    /// Orders of cyclic factors that make no group, or for a difference scheme are not squarefree.
    #[error("the group is a list of cyclic orders of at least 2, for a difference scheme squarefree")]
    Group,
    /// Multipliers that are not a group of units.
    #[error("the multipliers are an ascending list, closed under multiplication, of units with 1")]
    Multipliers,
    /// A row that is not constant on the orbits of the multipliers.
    #[error("the row is not constant on the orbits of the multipliers")]
    Orbits,
    /// m·t + 1 is not the order of a field.
    #[error("m t + 1 is a prime power of at most 65521")]
    Field,
    /// Not a permutation of the rows.
    #[error("the permutation names each of {0} rows once")]
    Permutation(u16),
    /// The order and the dimension make no space of at most 65,521 vectors.
    #[error("the order is a prime power, and order^dimension at most 65521")]
    Space,
    /// Levels that are no numbers of levels.
    #[error("a factor has at least 2 levels")]
    Levels,
    /// Not a digest.
    #[error("the digest has 64 lower-case hexadecimal digits")]
    Digest,
    /// Something else than the line `body:`.
    #[error("write `body:` here")]
    Body,
    /// A line with too few or too many entries.
    #[error("{expected} entries belong here, not {found}")]
    Entries {
        /// The number that the parameters demand.
        expected: usize,
        /// The number found.
        found: usize,
    },
    /// A character other than + and − among signs.
    #[error("{0:?} is no sign; write + or -")]
    Sign(char),
    /// Something else than `end` after the last line of the body.
    #[error("write `end` here: the body is complete")]
    End,
    /// Something after the line `end`.
    #[error("nothing comes after the line `end`")]
    Trailing,
}

/// The number of vectors of a space over a field that exists, when it fits.
fn space(order: u16, dimension: u16) -> Option<u16> {
    prime_power(u32::from(order))?;
    order.checked_pow(u32::from(dimension))
}

/// The parameters of each kind.
pub(super) enum Parameters {
    DifferenceScheme { rows: u16, columns: u16, group: Vec<u16> },
    FourCirculants { length: u16, multipliers: Vec<u16> },
    TurynType { length: u16 },
    VVector { m: u16, t: u16 },
    QuasiDifference { group: Vec<u16>, rows: u16, empty: u16, columns: u16, permutation: Vec<u16> },
    Subspaces { order: u16, dimension: u16, strength: u16, subspaces: u16 },
    Flats { prime: u16, levels: Vec<u16>, flats: u16, directions: u16, strength: u16 },
    Orbits { group: Vec<u16>, orbits: u16, levels: Vec<u16>, strength: u16 },
}

pub(super) struct Reader<'a> {
    rest: &'a str,
    line: usize,
}

impl FromStr for Seed {
    type Err = SeedError;

    fn from_str(text: &str) -> Result<Self, SeedError> {
        let mut reader = Reader::new(text);
        let (name, parameters) = reader.opening()?;
        let source = reader.value("source")?.to_owned();
        let digest = reader.value("digest")?;
        if digest.len() != 64 || !digest.bytes().all(|b| b.is_ascii_digit() || (b'a'..=b'f').contains(&b)) {
            return reader.fail(SeedReason::Digest);
        }
        if reader.next_line()? != "body:" {
            return reader.fail(SeedReason::Body);
        }
        let kind = reader.body(parameters)?;
        if reader.next_line()? != "end" {
            return reader.fail(SeedReason::End);
        }
        if !reader.rest.is_empty() {
            reader.line += 1;
            return reader.fail(SeedReason::Trailing);
        }
        Ok(Self { name: name.to_owned(), kind, source, digest: digest.to_owned() })
    }
}

impl<'a> Reader<'a> {
    pub(super) fn new(text: &'a str) -> Self {
        Self { rest: text, line: 0 }
    }

    fn fail<T>(&self, reason: SeedReason) -> Result<T, SeedError> {
        Err(SeedError { line: self.line, reason })
    }

    fn next_line(&mut self) -> Result<&'a str, SeedError> {
        self.line += 1;
        let Some((line, rest)) = self.rest.split_once('\n') else {
            return self.fail(SeedReason::Incomplete);
        };
        self.rest = rest;
        Ok(line)
    }

    fn value(&mut self, key: &'static str) -> Result<&'a str, SeedError> {
        let line = self.next_line()?;
        match line.strip_prefix(key).and_then(|l| l.strip_prefix(':')) {
            None => self.fail(SeedReason::Key(key)),
            Some(value) if value.trim().is_empty() => self.fail(SeedReason::Empty(key)),
            Some(value) => value.strip_prefix(' ').map_or_else(|| self.fail(SeedReason::Key(key)), Ok),
        }
    }

    /// The name and what the kind's parameters say, without the body.
    pub(super) fn opening(&mut self) -> Result<(&'a str, Parameters), SeedError> {
        let name = self.value("name")?;
        if !name.bytes().all(|b| b.is_ascii_lowercase() || b.is_ascii_digit() || b == b'-') {
            return self.fail(SeedReason::Name);
        }
        let parameters = match self.value("kind")? {
            "difference-scheme" => {
                let (rows, columns) = (self.positive("rows")?, self.positive("columns")?);
                let group = self.group()?;
                if group.iter().any(|&n| factorise(u64::from(n)).iter().any(|&(_, e)| e > 1)) {
                    return self.fail(SeedReason::Group);
                }
                Parameters::DifferenceScheme { rows, columns, group }
            }
            "four-circulants" => {
                let length = self.positive("length")?;
                Parameters::FourCirculants { length, multipliers: self.multipliers(length)? }
            }
            "turyn-type" => Parameters::TurynType { length: self.positive("length")? },
            "v-vector" => {
                let (m, t) = (self.positive("m")?, self.positive("t")?);
                match prime_power(u32::from(m) * u32::from(t) + 1) {
                    Some(_) if u32::from(m) * u32::from(t) < u32::from(u16::MAX) => {
                        Parameters::VVector { m, t }
                    }
                    _ => return self.fail(SeedReason::Field),
                }
            }
            "subspaces" => {
                let (order, dimension) = (self.positive("order")?, self.positive("dimension")?);
                if space(order, dimension).is_none() {
                    return self.fail(SeedReason::Space);
                }
                let (strength, subspaces) = (self.positive("strength")?, self.positive("subspaces")?);
                Parameters::Subspaces { order, dimension, strength, subspaces }
            }
            "flats" => {
                let prime = self.positive("prime")?;
                let levels = self.levels()?;
                let (flats, directions) = (self.positive("flats")?, self.positive("directions")?);
                if !is_prime(u32::from(prime)) || space(prime, directions).is_none() {
                    return self.fail(SeedReason::Space);
                }
                Parameters::Flats { prime, levels, flats, directions, strength: self.positive("strength")? }
            }
            "orbits" => {
                let group = match self.value("group")? {
                    "1" => Vec::new(),
                    text => self.group_of(text)?,
                };
                let (orbits, levels) = (self.positive("orbits")?, self.levels()?);
                Parameters::Orbits { group, orbits, levels, strength: self.positive("strength")? }
            }
            "quasi-difference" => {
                let group = self.group()?;
                let (rows, empty) = (self.positive("rows")?, self.positive("empty")?);
                let columns = self.positive("columns")?;
                Parameters::QuasiDifference {
                    group,
                    rows,
                    empty,
                    columns,
                    permutation: self.permutation(rows)?,
                }
            }
            other => return self.fail(SeedReason::Kind(other.to_owned())),
        };
        Ok((name, parameters))
    }

    fn body(&mut self, parameters: Parameters) -> Result<SeedKind, SeedError> {
        Ok(match parameters {
            Parameters::DifferenceScheme { rows, columns, group } => {
                let order: u16 = group.iter().product();
                let columns = (0..columns)
                    .map(|_| self.numbers_line(usize::from(rows), order))
                    .collect::<Result<_, _>>()?;
                SeedKind::DifferenceScheme { group, columns }
            }
            Parameters::FourCirculants { length, multipliers } => {
                let m = usize::from(length);
                let mut rows = [const { Vec::new() }; 4];
                for row in &mut rows {
                    *row = self.signs_line(m)?;
                    let moved = |h: u16| (0..m).any(|i| row[i * usize::from(h) % m] != row[i]);
                    if multipliers.iter().any(|&h| moved(h)) {
                        return self.fail(SeedReason::Orbits);
                    }
                }
                SeedKind::FourCirculants { multipliers, rows }
            }
            Parameters::TurynType { length } => {
                let n = usize::from(length);
                let mut sequences = [const { Vec::new() }; 4];
                for (sequence, len) in sequences.iter_mut().zip([n, n, n, n - 1]) {
                    *sequence = self.signs_line(len)?;
                }
                SeedKind::TurynType { sequences }
            }
            Parameters::VVector { m, t } => {
                SeedKind::VVector { m, t, vector: self.numbers_line(usize::from(m) + 1, m * t + 1)? }
            }
            Parameters::QuasiDifference { group, rows, empty, columns, permutation } => {
                let order: u16 = group.iter().product();
                let columns = (0..columns)
                    .map(|_| self.places_line(usize::from(rows), order))
                    .collect::<Result<_, _>>()?;
                SeedKind::QuasiDifference { group, empty, permutation, columns }
            }
            Parameters::Subspaces { order, dimension, strength, subspaces } => {
                let vectors = space(order, dimension).unwrap_or(0);
                let bases = (0..subspaces)
                    .map(|_| self.basis_line(usize::from(dimension), vectors))
                    .collect::<Result<_, _>>()?;
                SeedKind::Subspaces { order, dimension, strength, bases }
            }
            Parameters::Flats { prime, levels, flats, directions, strength } => {
                let flats = (0..flats)
                    .map(|_| {
                        let base = self.run_line(&levels)?;
                        let directions =
                            (0..directions).map(|_| self.run_line(&levels)).collect::<Result<_, _>>()?;
                        Ok(Flat { base, directions })
                    })
                    .collect::<Result<_, _>>()?;
                SeedKind::Flats { prime, levels, strength, flats }
            }
            Parameters::Orbits { group, orbits, levels, strength } => {
                let columns = levels
                    .into_iter()
                    .map(|levels| {
                        let mut shifts = self.numbers_line(group.len() + usize::from(orbits), levels)?;
                        let base = shifts.split_off(group.len());
                        Ok(OrbitColumn { levels, shifts, base })
                    })
                    .collect::<Result<_, _>>()?;
                SeedKind::Orbits { group, strength, columns }
            }
        })
    }

    fn positive(&mut self, key: &'static str) -> Result<u16, SeedError> {
        let text = self.value(key)?;
        match self.number(text)? {
            0 => self.fail(SeedReason::Number(text.to_owned())),
            n => Ok(n),
        }
    }

    fn number(&self, text: &str) -> Result<u16, SeedError> {
        // `parse` alone would take a leading plus.
        let plain = text.bytes().all(|b| b.is_ascii_digit());
        text.parse().ok().filter(|_| plain).map_or_else(|| self.fail(SeedReason::Number(text.to_owned())), Ok)
    }

    fn numbers(&self, text: &str) -> Result<Vec<u16>, SeedError> {
        text.split(' ').map(|word| self.number(word)).collect()
    }

    fn group(&mut self) -> Result<Vec<u16>, SeedError> {
        let text = self.value("group")?;
        self.group_of(text)
    }

    fn levels(&mut self) -> Result<Vec<u16>, SeedError> {
        let text = self.value("levels")?;
        let levels = self.numbers(text)?;
        if levels.iter().any(|&s| s < 2) { self.fail(SeedReason::Levels) } else { Ok(levels) }
    }

    fn group_of(&self, text: &str) -> Result<Vec<u16>, SeedError> {
        let factors = self.numbers(text)?;
        match AbelianGroup::new(&factors) {
            Ok(_) => Ok(factors),
            Err(_) => self.fail(SeedReason::Group),
        }
    }

    fn multipliers(&mut self, length: u16) -> Result<Vec<u16>, SeedError> {
        let text = self.value("multipliers")?;
        let list = self.numbers(text)?;
        let unit = |h: u16| h < length.max(2) && h.gcd(&length) == 1;
        let product = |a: u16, b: u16| (u32::from(a) * u32::from(b) % u32::from(length.max(2))) as u16;
        let closed = list.iter().all(|&a| list.iter().all(|&b| list.binary_search(&product(a, b)).is_ok()));
        let sorted = list.windows(2).all(|w| w[0] < w[1]);
        if list.first() != Some(&1) || !sorted || !list.iter().all(|&h| unit(h)) || !closed {
            return self.fail(SeedReason::Multipliers);
        }
        Ok(list)
    }

    fn permutation(&mut self, rows: u16) -> Result<Vec<u16>, SeedError> {
        let text = self.value("permutation")?;
        let permutation = self.numbers(text)?;
        let mut sorted = permutation.clone();
        sorted.sort_unstable();
        if !sorted.into_iter().eq(0..rows) {
            return self.fail(SeedReason::Permutation(rows));
        }
        Ok(permutation)
    }

    fn numbers_line(&mut self, expected: usize, order: u16) -> Result<Vec<u16>, SeedError> {
        let entries = self.places_line(expected, order)?;
        let full: Option<Vec<u16>> = entries.into_iter().collect();
        full.map_or_else(|| self.fail(SeedReason::Number("-".to_owned())), Ok)
    }

    /// Up to `dimension` numbers of vectors other than 0.
    fn basis_line(&mut self, dimension: usize, vectors: u16) -> Result<Vec<u16>, SeedError> {
        let line = self.next_line()?;
        let basis = self.numbers(line)?;
        if basis.len() > dimension {
            return self.fail(SeedReason::Entries { expected: dimension, found: basis.len() });
        }
        match basis.iter().find(|&&v| v == 0 || v >= vectors) {
            Some(v) => self.fail(SeedReason::Number(v.to_string())),
            None => Ok(basis),
        }
    }

    /// A level of each factor.
    fn run_line(&mut self, levels: &[u16]) -> Result<Vec<u16>, SeedError> {
        let run = self.numbers_line(levels.len(), u16::MAX)?;
        match run.iter().zip(levels).find(|(x, s)| x >= s) {
            Some((x, _)) => self.fail(SeedReason::Number(x.to_string())),
            None => Ok(run),
        }
    }

    fn places_line(&mut self, expected: usize, order: u16) -> Result<Vec<Option<u16>>, SeedError> {
        let line = self.next_line()?;
        let found = line.split(' ').count();
        if found != expected {
            return self.fail(SeedReason::Entries { expected, found });
        }
        line.split(' ')
            .map(|word| match word {
                "-" => Ok(None),
                _ => match self.number(word)? {
                    e if e < order => Ok(Some(e)),
                    _ => self.fail(SeedReason::Number(word.to_owned())),
                },
            })
            .collect()
    }

    fn signs_line(&mut self, expected: usize) -> Result<Vec<i8>, SeedError> {
        let line = self.next_line()?;
        let found = line.chars().count();
        if found != expected {
            return self.fail(SeedReason::Entries { expected, found });
        }
        line.chars()
            .map(|c| match c {
                '+' => Ok(1),
                '-' => Ok(-1),
                other => self.fail(SeedReason::Sign(other)),
            })
            .collect()
    }
}
