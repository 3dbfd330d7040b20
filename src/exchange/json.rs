//! Arrays as JSON.

use std::collections::HashMap;
use std::fmt;
use std::io::{self, Write};

use serde::de::{DeserializeSeed, Deserializer, Error, IgnoredAny, MapAccess, SeqAccess, Visitor};

use super::csv::{hand_on, push_number};
use super::encoding::decode;
use super::error::count;
use super::interpret::interpret;
use super::table::{Origin, Table, Texts};
use super::{ReadError, ReadOptions, Received, Symbols};
use crate::array::Array;

/// Writes an array as a JSON array with one array of numbers per run.
///
/// # Errors
/// What `out` reports.
///
/// ```
/// use trysquare::array::Array;
/// use trysquare::exchange::{json, Symbols};
/// let array = Array::from_rows(vec![2, 3], &[[0, 0], [1, 2]])?;
/// let mut out = Vec::new();
/// json::write(&array, Symbols::One, &mut out)?;
/// assert_eq!(out, b"[[1,1],\n[2,3]]\n");
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn write(array: &Array, symbols: Symbols, mut out: impl Write) -> io::Result<()> {
    let mut buffer = Vec::new();
    let columns: Vec<(&[u16], (i32, i32))> =
        array.columns().zip(array.levels()).map(|(c, &s)| (c, symbols.line(s))).collect();
    for i in 0..array.runs() {
        buffer.extend_from_slice(if i == 0 { b"[[" } else { b",\n[" });
        for (j, &(column, (step, start))) in columns.iter().enumerate() {
            if j > 0 {
                buffer.push(b',');
            }
            push_number(&mut buffer, step * i32::from(column[i]) + start);
            hand_on(&mut buffer, &mut out)?;
        }
        buffer.push(b']');
    }
    buffer.extend_from_slice(b"]\n");
    out.write_all(&buffer)?;
    out.flush()
}

/// Reads an array from JSON: an array of runs, or an object with the runs under `array` and
/// possibly the numbers of levels under `levels` (other keys are ignored).
///
/// A run is an array of levels or an object from factor name to level, all runs alike; a level is a
/// number, a text or a truth value. An array of bare runs has no header and no run column.
///
/// # Errors
/// A [`ReadError`] with line and column of the text, or with run and column of the table.
pub fn read(bytes: &[u8], options: &ReadOptions) -> Result<Received, ReadError> {
    let text = decode(bytes)?;
    let mut reader = serde_json::Deserializer::from_str(text);
    let mut sheet = Sheet::new();
    let done = Document(&mut sheet).deserialize(&mut reader).and_then(|()| reader.end());
    done.map_err(|e| {
        let what = e.to_string();
        let what = what.rsplit_once(" at line ").map_or(what.as_str(), |(what, _)| what).to_owned();
        let what = if e.is_data() { what } else { format!("not JSON: {what}") };
        ReadError::Json { line: e.line().max(1), column: e.column().max(1), what }
    })?;
    let mut table = Table::new(sheet.texts, &sheet.cells, sheet.width, Origin::Json);
    table.names = sheet.keys.map(|keys| {
        let mut names: Vec<(usize, String)> = keys.into_iter().map(|(name, j)| (j, name)).collect();
        names.sort_unstable();
        names.into_iter().map(|(_, name)| name).collect()
    });
    table.levels = sheet.levels;
    interpret(table, options)
}

/// Whether a text is meant as JSON rather than as separated cells.
pub(super) fn looks_like_json(text: &str) -> bool {
    let mut signs = text.chars().filter(|c| !c.is_whitespace());
    match signs.next() {
        Some('{') => matches!(signs.next(), Some('"' | '}') | None),
        Some('[') => matches!(signs.next(), Some('[' | '{' | ']') | None),
        _ => false,
    }
}

/// The cells gathered so far.
struct Sheet {
    texts: Texts,
    cells: Vec<u32>,
    width: usize,
    runs: usize,
    keys: Option<HashMap<String, usize>>,
    levels: Option<Vec<u16>>,
}

impl Sheet {
    fn new() -> Self {
        Self { texts: Texts::new(), cells: Vec::new(), width: 0, runs: 0, keys: None, levels: None }
    }

    fn end_run<E: Error>(&mut self, found: usize) -> Result<(), E> {
        let run = self.runs + 1;
        if found == 0 {
            return Err(E::custom(format!("run {run} has no cells")));
        }
        if self.runs == 0 {
            self.width = found;
        } else if found != self.width {
            return Err(E::custom(format!(
                "run {run} has {}, run 1 has {}; every run needs the same",
                count(found, "cell"),
                self.width
            )));
        }
        self.runs = run;
        Ok(())
    }
}

/// The whole text: runs, or an object that has them.
struct Document<'s>(&'s mut Sheet);

impl<'de> DeserializeSeed<'de> for Document<'_> {
    type Value = ();

    fn deserialize<D: Deserializer<'de>>(self, deserializer: D) -> Result<(), D::Error> {
        deserializer.deserialize_any(self)
    }
}

impl<'de> Visitor<'de> for Document<'_> {
    type Value = ();

    fn expecting(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str("an array of runs, or an object with the key \"array\"")
    }

    fn visit_seq<A: SeqAccess<'de>>(self, seq: A) -> Result<(), A::Error> {
        Runs(self.0).visit_seq(seq)
    }

    fn visit_map<A: MapAccess<'de>>(self, mut map: A) -> Result<(), A::Error> {
        let mut found = false;
        while let Some(key) = map.next_key::<String>()? {
            match key.as_str() {
                "array" if found => return Err(A::Error::custom("the key \"array\" stands here twice")),
                "array" => {
                    map.next_value_seed(Runs(self.0))?;
                    found = true;
                }
                "levels" => self.0.levels = Some(map.next_value()?),
                _ => {
                    map.next_value::<IgnoredAny>()?;
                }
            }
        }
        if !found {
            return Err(A::Error::custom("the object has no key \"array\"; give the runs under this key"));
        }
        match &self.0.levels {
            Some(levels) if levels.len() != self.0.width => Err(A::Error::custom(format!(
                "\"levels\" has {} entries, the runs have {}; give one number of levels per factor",
                levels.len(),
                count(self.0.width, "cell")
            ))),
            _ => Ok(()),
        }
    }
}

struct Runs<'s>(&'s mut Sheet);

impl<'de> DeserializeSeed<'de> for Runs<'_> {
    type Value = ();

    fn deserialize<D: Deserializer<'de>>(self, deserializer: D) -> Result<(), D::Error> {
        deserializer.deserialize_seq(self)
    }
}

impl<'de> Visitor<'de> for Runs<'_> {
    type Value = ();

    fn expecting(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str("an array of runs")
    }

    fn visit_seq<A: SeqAccess<'de>>(self, mut seq: A) -> Result<(), A::Error> {
        while seq.next_element_seed(Run(self.0))?.is_some() {}
        if self.0.runs == 0 {
            return Err(A::Error::custom("the array has no runs"));
        }
        Ok(())
    }
}

struct Run<'s>(&'s mut Sheet);

impl<'de> DeserializeSeed<'de> for Run<'_> {
    type Value = ();

    fn deserialize<D: Deserializer<'de>>(self, deserializer: D) -> Result<(), D::Error> {
        deserializer.deserialize_any(self)
    }
}

impl<'de> Visitor<'de> for Run<'_> {
    type Value = ();

    fn expecting(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str("a run, that is an array of levels or an object from factor to level")
    }

    fn visit_seq<A: SeqAccess<'de>>(self, mut seq: A) -> Result<(), A::Error> {
        if self.0.keys.is_some() {
            return Err(A::Error::custom("a run without names after runs with names"));
        }
        let mut found = 0;
        while let Some(cell) = seq.next_element_seed(Cell(&mut self.0.texts))? {
            self.0.cells.push(cell);
            found += 1;
        }
        self.0.end_run(found)
    }

    fn visit_map<A: MapAccess<'de>>(self, mut map: A) -> Result<(), A::Error> {
        let sheet = self.0;
        if sheet.runs == 0 {
            let mut keys = HashMap::new();
            while let Some(key) = map.next_key::<String>()? {
                let cell = map.next_value_seed(Cell(&mut sheet.texts))?;
                let j = keys.len();
                if let Some(_twice) = keys.insert(key.clone(), j) {
                    return Err(A::Error::custom(format!("run 1 names {key:?} twice")));
                }
                sheet.cells.push(cell);
            }
            let found = keys.len();
            sheet.keys = Some(keys);
            return sheet.end_run(found);
        }
        let run = sheet.runs + 1;
        let Some(keys) = &sheet.keys else {
            return Err(A::Error::custom("a run with names after runs without names"));
        };
        let start = sheet.cells.len();
        sheet.cells.resize(start + sheet.width, u32::MAX);
        let mut found = 0;
        while let Some(key) = map.next_key::<String>()? {
            let Some(&j) = keys.get(&key) else {
                return Err(A::Error::custom(format!("run {run} names {key:?}, which run 1 does not")));
            };
            if sheet.cells[start + j] != u32::MAX {
                return Err(A::Error::custom(format!("run {run} names {key:?} twice")));
            }
            sheet.cells[start + j] = map.next_value_seed(Cell(&mut sheet.texts))?;
            found += 1;
        }
        sheet.end_run(found)
    }
}

/// One level, numbered as a text.
struct Cell<'s>(&'s mut Texts);

impl Cell<'_> {
    fn take<E: Error>(self, text: &str) -> Result<u32, E> {
        match text.trim() {
            "" => Err(E::custom("the cell is empty; every run needs a level of every factor")),
            text => Ok(self.0.number(text)),
        }
    }
}

impl<'de> DeserializeSeed<'de> for Cell<'_> {
    type Value = u32;

    fn deserialize<D: Deserializer<'de>>(self, deserializer: D) -> Result<u32, D::Error> {
        deserializer.deserialize_any(self)
    }
}

impl Visitor<'_> for Cell<'_> {
    type Value = u32;

    fn expecting(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str("a level, that is a number or a text")
    }

    fn visit_u64<E: Error>(self, value: u64) -> Result<u32, E> {
        self.take(&value.to_string())
    }

    fn visit_i64<E: Error>(self, value: i64) -> Result<u32, E> {
        self.take(&value.to_string())
    }

    fn visit_f64<E: Error>(self, value: f64) -> Result<u32, E> {
        self.take(&value.to_string())
    }

    fn visit_bool<E: Error>(self, value: bool) -> Result<u32, E> {
        self.take(if value { "true" } else { "false" })
    }

    fn visit_str<E: Error>(self, value: &str) -> Result<u32, E> {
        self.take(value)
    }

    fn visit_unit<E: Error>(self) -> Result<u32, E> {
        self.take("")
    }
}
