//! Whether the first row of a table is a header.
//!
//! The first row is a header when its cells cannot be levels of their columns, and a run when they
//! can. Everything between is refused with the option that decides, because a header taken for a
//! run (or the reverse) changes the verdict.

use super::columns::is_run_name;
use super::table::{Counter, Sequence, Table, Values};
use super::{HeaderOption, ReadError};

/// The first row of one column against the rows below it.
struct Look {
    number: bool,
    /// The first cell occurs again below.
    recurs: bool,
    /// A text above numbers only, or a number above texts only.
    mismatch: bool,
    /// Some cell below occurs twice.
    repeats: bool,
    /// The cells below occur equally often, without and with the first.
    balanced_below: bool,
    balanced: bool,
    below: Sequence,
}

impl Look {
    /// The first cell cannot be a level: it is of another kind, or it alone occurs only once.
    fn alien(&self) -> bool {
        !self.recurs && (self.mismatch || self.repeats)
    }
}

enum Guess {
    Header,
    Run,
    Unclear,
}

/// Whether the first row is a header.
pub(super) fn has_header(
    table: &Table<'_>,
    values: &Values,
    option: HeaderOption,
) -> Result<bool, ReadError> {
    if table.is_json() {
        return Ok(false);
    }
    let empty = (0..table.width).find(|&j| table.text(0, j).is_empty());
    let header = match option {
        HeaderOption::Yes => true,
        HeaderOption::No => false,
        HeaderOption::Auto if table.rows == 1 => {
            if (0..table.width).any(|j| !values.is_number(table.column(j)[0])) {
                return Err(ReadError::NoRuns { line: line(table) });
            }
            false
        }
        HeaderOption::Auto => {
            let mut counter = Counter::new(values);
            let looks: Vec<Look> =
                (0..table.width).map(|j| look(table.column(j), values, &mut counter)).collect();
            match guess(table, values, &looks) {
                Guess::Header => true,
                Guess::Run => false,
                Guess::Unclear if empty.is_some() => false,
                Guess::Unclear => return Err(unclear(table, &looks)),
            }
        }
    };
    if header && table.rows == 1 {
        return Err(ReadError::NoRuns { line: line(table) });
    }
    // The first column may do without a name: it then holds the run numbers.
    match empty.filter(|&j| !(header && j == 0)).or((header && table.width == 1).then_some(empty).flatten()) {
        Some(j) => Err(ReadError::EmptyCell { place: table.place(0, j) }),
        None => Ok(header),
    }
}

fn line(table: &Table<'_>) -> usize {
    match table.place(0, 0) {
        super::Place::Line { line, .. } => line,
        super::Place::Run { run, .. } => run,
    }
}

fn look(column: &[u32], values: &Values, counter: &mut Counter<'_>) -> Look {
    let first = values.same[column[0] as usize];
    let below = counter.count(&column[1..]);
    let all = |number: bool| below.iter().all(|&(v, _)| values.is_number(v) == number);
    let number = values.is_number(first);
    let repeats = below.iter().any(|&(_, n)| n > 1);
    let level = |counts: &[u32]| counts.windows(2).all(|w| w[0] == w[1]);
    let mut counts: Vec<u32> = below.iter().map(|&(_, n)| n).collect();
    let balanced_below = level(&counts);
    let again = below.iter().position(|&(v, _)| v == first);
    match again {
        Some(at) => counts[at] = counts[at].saturating_add(1),
        None => counts.push(1),
    }
    Look {
        number,
        recurs: again.is_some(),
        mismatch: all(!number),
        repeats,
        balanced_below,
        balanced: level(&counts),
        below: if repeats { Sequence::Repeating } else { counter.sequence(&column[1..]) },
    }
}

fn guess(table: &Table<'_>, values: &Values, looks: &[Look]) -> Guess {
    let numbers_runs = |j: usize, look: &Look| {
        let named = is_run_name(table.text(0, j)) || (j == 0 && table.text(0, 0).is_empty());
        let counts = matches!(look.below, Sequence::InOrder | Sequence::Permutation);
        named && counts && table.rows > 2
    };
    if looks.iter().enumerate().any(|(j, look)| numbers_runs(j, look)) {
        return Guess::Header;
    }
    let all_numbers = looks.iter().all(|l| l.number);
    let all_texts = looks.iter().all(|l| !l.number);
    let aliens = looks.iter().filter(|l| l.alien()).count();
    let recurring = looks.iter().filter(|l| l.recurs).count();
    let first: Vec<u32> = (0..table.width).map(|j| values.same[table.column(j)[0] as usize]).collect();
    // Names differ from one another; numbers that are names count the columns.
    let could_name = if all_numbers { counts_columns(&first, values) } else { all_different(&first) };
    if aliens == 0 {
        let better_without = looks.iter().all(|l| l.balanced_below) && !looks.iter().all(|l| l.balanced);
        return if could_name && (recurring == 0 || better_without) { Guess::Unclear } else { Guess::Run };
    }
    if recurring == 0 && all_texts {
        let above_numbers = looks.iter().filter(|l| l.mismatch).count();
        if above_numbers == looks.len() || (could_name && (above_numbers > 0 || aliens > 1)) {
            return Guess::Header;
        }
    }
    if all_numbers && looks.iter().all(|l| !l.mismatch) {
        return if could_name { Guess::Unclear } else { Guess::Run };
    }
    if all_numbers && could_name && looks.iter().all(|l| l.mismatch) {
        return Guess::Header;
    }
    Guess::Unclear
}

fn all_different(cells: &[u32]) -> bool {
    let mut sorted = cells.to_vec();
    sorted.sort_unstable();
    sorted.windows(2).all(|w| w[0] != w[1])
}

/// 0, 1, 2, … or 1, 2, 3, …, at least two of them.
fn counts_columns(cells: &[u32], values: &Values) -> bool {
    let integers: Option<Vec<i32>> = cells.iter().map(|&c| values.integers[c as usize]).collect();
    integers.is_some_and(|v| v.len() > 1 && v[0] >= 0 && v[0] <= 1 && v.windows(2).all(|w| w[1] - w[0] == 1))
}

fn unclear(table: &Table<'_>, looks: &[Look]) -> ReadError {
    let shown = |j: usize| format!("{:?} in column {}", table.text(0, j), j + 1);
    let new = looks.iter().position(|l| !l.recurs);
    let old = looks.iter().position(|l| l.recurs);
    let reason = match (new, old) {
        (Some(n), Some(o)) => format!("{} occurs nowhere below, {} does", shown(n), shown(o)),
        (Some(n), None) => format!("{} occurs nowhere below, but it may be a level", shown(n)),
        _ => "its cells occur below, but without it every column is balanced".to_owned(),
    };
    ReadError::Ambiguous {
        place: table.place(0, new.unwrap_or(0)),
        what: format!("the first row may be a header or a run: {reason}"),
        advice: "say which with --header yes or --header no".into(),
    }
}
