//! From received cells to an array.

use std::sync::Arc;

use super::columns::{Body, Roles};
use super::detect::has_header;
use super::error::one_line;
use super::table::{Counter, Table, Values};
use super::{ReadError, ReadOptions, Received, Symbols};
use crate::array::Array;

/// Says what the cells of a table mean.
pub(super) fn interpret(mut table: Table<'_>, options: &ReadOptions) -> Result<Received, ReadError> {
    let values = Values::of(&table.texts);
    let header = has_header(&table, &values, options.header)?;
    let mut remarks = std::mem::take(&mut table.remarks);
    let names: Option<Vec<String>> = if header {
        Some((0..table.width).map(|j| table.text(0, j).to_owned()).collect())
    } else {
        table.names.take()
    };
    let body = Body { table: &table, values: &values, names: names.as_deref(), skip: usize::from(header) };
    let roles = body.roles(options, &mut remarks)?;
    let declared = declared(&body, &roles, options)?;
    let found = levels(&body, &roles.factors, declared.as_deref(), &mut remarks)?;
    let symbols = symbols(&body, &found, declared.as_deref());
    let runs = table.rows - body.skip;
    let mut rank = vec![0u16; table.texts.len()];
    let mut cells = Vec::with_capacity(runs.saturating_mul(roles.factors.len()));
    let mut level_names = Vec::with_capacity(found.len());
    for ((&j, meanings), symbols) in roles.factors.iter().zip(&found).zip(&symbols) {
        for (&meaning, &symbol) in meanings.iter().zip(symbols) {
            rank[meaning as usize] = symbol;
        }
        cells.extend(body.column(j).iter().map(|&c| rank[values.same[c as usize] as usize]));
        let name = |&meaning: &u32| Arc::clone(&table.texts[meaning as usize]);
        level_names.push(symbols.iter().copied().zip(meanings.iter().map(name)).collect());
    }
    let levels = declared.unwrap_or_else(|| found.iter().map(|f| f.len() as u16).collect());
    remark_on_names(&body, &roles, &mut remarks);
    let titles = |columns: &[usize]| columns.iter().map(|&j| body.title(j)).collect();
    Ok(Received {
        array: Array::new(runs, levels, cells)?,
        names: names.as_ref().map(|_| titles(&roles.factors)),
        level_names,
        run_columns: titles(&roles.run_columns),
        left_out: titles(&roles.left_out),
        header,
        separator: table.separator(),
        json: table.is_json(),
        remarks,
    })
}

/// The declared levels of the factors, by option or in the file.
fn declared(
    body: &Body<'_, '_>,
    roles: &Roles,
    options: &ReadOptions,
) -> Result<Option<Vec<u16>>, ReadError> {
    let factors = roles.factors.len();
    match (&options.levels, &body.table.levels) {
        (Some(mix), _) if mix.factors() != factors => {
            Err(ReadError::DeclaredFactors { declared: mix.factors(), factors })
        }
        (Some(mix), _) => Ok(Some(mix.levels().to_vec())),
        (None, Some(levels)) => Ok(Some(roles.factors.iter().map(|&j| levels[j]).collect())),
        (None, None) => Ok(None),
    }
}

/// The different meanings in each factor: numbers in ascending order, then texts.
fn levels(
    body: &Body<'_, '_>,
    factors: &[usize],
    declared: Option<&[u16]>,
    remarks: &mut Vec<String>,
) -> Result<Vec<Vec<u32>>, ReadError> {
    let (values, table) = (body.values, body.table);
    let mut counter = Counter::new(values);
    let mut all = Vec::with_capacity(factors.len());
    for (at, &j) in factors.iter().enumerate() {
        if values.any_same {
            merged(body, j, remarks)?;
        }
        let mut meanings: Vec<u32> = counter.count(body.column(j)).into_iter().map(|(m, _)| m).collect();
        let place = || table.place(body.skip, j);
        let (found, name, column) = (meanings.len(), body.name(j), j + 1);
        if found > usize::from(u16::MAX) {
            return Err(ReadError::TooManyLevels { place: place(), column, name, found });
        }
        match declared {
            Some(d) if found > usize::from(d[at]) => {
                return Err(ReadError::Declared { place: place(), name, found, declared: d[at] });
            }
            None if found == 1 => {
                let value = table.text(body.skip, j).to_owned();
                return Err(ReadError::OneLevel { place: place(), column, name, value });
            }
            _ => {}
        }
        let runs = table.rows - body.skip;
        if declared.is_none() && runs > 8 && 2 * found > runs {
            let title = one_line(&body.title(j));
            remarks.push(format!(
                "{title} has {found} levels in {runs} runs; if it is no factor, leave it out with --leave-out"
            ));
        }
        let key = |m: u32| (values.numbers[m as usize].as_ref(), &table.texts[m as usize]);
        meanings.sort_unstable_by(|&a, &b| {
            let ((number_a, text_a), (number_b, text_b)) = (key(a), key(b));
            // Numbers before texts: `None` is the greater here.
            (number_a.is_none(), number_a, text_a).cmp(&(number_b.is_none(), number_b, text_b))
        });
        all.push(meanings);
    }
    Ok(all)
}

/// Says which differently written numbers were taken as one level; with a decimal comma, which may
/// as well separate thousands, asks.
fn merged(body: &Body<'_, '_>, j: usize, remarks: &mut Vec<String>) -> Result<(), ReadError> {
    let (table, same) = (body.table, &body.values.same);
    let column = body.column(j);
    let mut written: Vec<(u32, u32)> = column.iter().map(|&c| (same[c as usize], c)).collect();
    written.sort_unstable();
    written.dedup();
    for pair in written.windows(2).filter(|p| p[0].0 == p[1].0) {
        let [a, b] = [pair[0].1, pair[1].1].map(|c| &*table.texts[c as usize]);
        let title = one_line(&body.title(j));
        if a.contains(',') || b.contains(',') {
            let row = column.iter().position(|&c| c == pair[1].1).unwrap_or(0);
            return Err(ReadError::Ambiguous {
                place: table.place(body.skip + row, j),
                what: format!("{a:?} and {b:?} may be one level or two"),
                advice: "write equal levels alike, and numbers without thousands separators".into(),
            });
        }
        remarks.push(format!("{title}: {a} and {b} are the same number and were taken as one level"));
    }
    Ok(())
}

/// The symbols of the meanings of each factor.
///
/// With declared levels, integers that fit one way of writing symbols in every factor keep their
/// place, so that a level which does not occur leaves its gap; else the symbols count up.
fn symbols(body: &Body<'_, '_>, found: &[Vec<u32>], declared: Option<&[u16]>) -> Vec<Vec<u16>> {
    let styles = if declared.is_some() { &Symbols::ALL[..] } else { &[] };
    let fitting = styles.iter().find_map(|style| {
        let level = |m: u32, s| style.level(body.values.integers[m as usize]?, s);
        found
            .iter()
            .zip(declared?)
            .map(|(meanings, &s)| meanings.iter().map(|&m| level(m, s)).collect::<Option<Vec<u16>>>())
            .collect()
    });
    fitting.unwrap_or_else(|| found.iter().map(|m| (0u16..).take(m.len()).collect()).collect())
}

fn remark_on_names(body: &Body<'_, '_>, roles: &Roles, remarks: &mut Vec<String>) {
    let Some(names) = body.names else { return };
    let mut titles: Vec<&String> = roles.factors.iter().map(|&j| &names[j]).collect();
    titles.sort_unstable();
    if let Some(pair) = titles.windows(2).find(|w| w[0] == w[1]) {
        remarks.push(format!("two factors are named {:?}", pair[0]));
    }
}
