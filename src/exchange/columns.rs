//! Which columns of a table are factors.

use super::error::one_line;
use super::options::is_default_name;
use super::table::{Counter, Sequence, Table, Values};
use super::{ReadError, ReadOptions, RunColumn};

/// The columns of a table by what they are.
pub(super) struct Roles {
    pub(super) factors: Vec<usize>,
    pub(super) run_columns: Vec<usize>,
    pub(super) left_out: Vec<usize>,
}

/// Whether a column of this name is expected to number the runs.
pub(super) fn is_run_name(name: &str) -> bool {
    let name: String =
        name.chars().filter(|c| c.is_alphanumeric() || *c == '#').flat_map(char::to_lowercase).collect();
    matches!(
        name.as_str(),
        "#" | "run"
            | "runs"
            | "run#"
            | "runno"
            | "runnr"
            | "runnumber"
            | "runorder"
            | "runid"
            | "no"
            | "nr"
            | "num"
            | "number"
            | "order"
            | "std"
            | "stdorder"
            | "standardorder"
            | "trial"
            | "trialno"
            | "trialnumber"
            | "test"
            | "testno"
            | "testnumber"
            | "experiment"
            | "experimentno"
            | "exp"
            | "expno"
            | "id"
            | "index"
            | "row"
    )
}

/// A table without its header.
pub(super) struct Body<'t, 'a> {
    pub(super) table: &'t Table<'a>,
    pub(super) values: &'t Values,
    pub(super) names: Option<&'t [String]>,
    /// The number of rows above the first run: 0 or 1.
    pub(super) skip: usize,
}

impl Body<'_, '_> {
    pub(super) fn column(&self, j: usize) -> &[u32] {
        &self.table.column(j)[self.skip..]
    }

    pub(super) fn name(&self, j: usize) -> Option<String> {
        self.names.map(|n| n[j].clone()).filter(|n| !n.is_empty())
    }

    /// The name of a column, or its number.
    pub(super) fn title(&self, j: usize) -> String {
        self.name(j).unwrap_or_else(|| format!("column {}", j + 1))
    }

    /// The column of a name or number.
    fn find(&self, wanted: &str) -> Result<usize, ReadError> {
        let wanted = wanted.trim();
        let names = self.names.unwrap_or_default();
        let loosely = |n: &&String| n.to_lowercase() == wanted.to_lowercase();
        for exact in [true, false] {
            let fits = |n: &String| if exact { n == wanted } else { loosely(&n) };
            let mut found = (0..names.len()).filter(|&j| fits(&names[j]));
            match (found.next(), found.next()) {
                (Some(j), None) => return Ok(j),
                (Some(first), Some(second)) => {
                    let wanted = wanted.to_owned();
                    return Err(ReadError::TwoColumns { wanted, first: first + 1, second: second + 1 });
                }
                _ => {}
            }
        }
        let number = wanted.parse().ok().filter(|n| (1..=self.table.width).contains(n));
        number.map(|n: usize| n - 1).ok_or_else(|| ReadError::NoColumn {
            wanted: wanted.to_owned(),
            have: if names.is_empty() {
                format!("the columns have the numbers 1 to {}", self.table.width)
            } else {
                let shown: Vec<&str> = names.iter().take(12).map(String::as_str).collect();
                let more = if names.len() > shown.len() { ", …" } else { "" };
                format!("the columns are {}{more}", one_line(&shown.join(", ")))
            },
        })
    }

    /// Sorts the columns into factors and others.
    pub(super) fn roles(&self, options: &ReadOptions, remarks: &mut Vec<String>) -> Result<Roles, ReadError> {
        let find_all = |wanted: &[String]| wanted.iter().map(|w| self.find(w)).collect::<Result<Vec<_>, _>>();
        let mut left_out = find_all(&options.leave_out)?;
        left_out.sort_unstable();
        left_out.dedup();
        let only = options.only.as_deref().map(find_all).transpose()?;
        let mut factors = only.clone().unwrap_or_else(|| (0..self.table.width).collect());
        factors.retain(|j| left_out.binary_search(j).is_err());
        let run_columns = match &options.run_column {
            RunColumn::No => Vec::new(),
            RunColumn::First => vec![0],
            RunColumn::Column(wanted) => vec![self.find(wanted)?],
            RunColumn::Auto if only.is_some() || self.declared_all(options, &factors) => Vec::new(),
            RunColumn::Auto => self.guess_run_columns(&factors, remarks)?,
        };
        factors.retain(|j| !run_columns.contains(j));
        if factors.is_empty() {
            return Err(ReadError::NoFactors);
        }
        if only.is_some() {
            let kept = |j: &usize| factors.contains(j) || run_columns.contains(j);
            left_out = (0..self.table.width).filter(|j| !kept(j)).collect();
        }
        Ok(Roles { factors, run_columns, left_out })
    }

    /// Whether the declared levels leave no column over for run numbers.
    fn declared_all(&self, options: &ReadOptions, factors: &[usize]) -> bool {
        let declared = options.levels.as_ref().map(crate::mix::Mix::factors);
        declared == Some(factors.len()) || self.table.levels.is_some()
    }

    fn guess_run_columns(
        &self,
        columns: &[usize],
        remarks: &mut Vec<String>,
    ) -> Result<Vec<usize>, ReadError> {
        let mut counter = Counter::new(self.values);
        let mut found: Vec<usize> = Vec::new();
        for &j in columns {
            if !self.names.is_some_and(|n| is_run_name(&n[j])) {
                continue;
            }
            if counter.sequence(self.column(j)) != Sequence::Repeating {
                found.push(j);
            } else if j == 0 {
                let what = format!(
                    "{} may number the runs or be a factor: it repeats values",
                    one_line(&self.title(j))
                );
                return Err(self.unclear(j, what));
            }
        }
        // An array of bare numbers from a program has no run numbers.
        let bare = self.table.is_json() && self.names.is_none();
        if columns.first() == Some(&0) && !found.contains(&0) && !bare {
            self.guess_first(columns, &mut counter, &mut found, remarks)?;
        }
        if found.len() == columns.len() {
            found.clear();
        }
        found.sort_unstable();
        Ok(found)
    }

    /// The first column, when its name does not tell.
    ///
    /// A column whose cells all differ has N levels. Beside another factor no array of strength 2
    /// can have one, so it numbers the runs or the array is not orthogonal.
    fn guess_first(
        &self,
        columns: &[usize],
        counter: &mut Counter<'_>,
        found: &mut Vec<usize>,
        remarks: &mut Vec<String>,
    ) -> Result<(), ReadError> {
        let first = counter.sequence(self.column(0));
        let name = self.name(0);
        if first == Sequence::Repeating || columns.len() < 2 || name.as_deref().is_some_and(is_default_name) {
            return Ok(());
        }
        if self.names.is_some() && name.is_none() {
            found.push(0);
            return Ok(());
        }
        let others: Vec<Sequence> = columns[1..]
            .iter()
            .filter(|j| !found.contains(j))
            .map(|&j| counter.sequence(self.column(j)))
            .collect();
        if others.iter().any(|s| matches!(s, Sequence::InOrder | Sequence::Permutation)) {
            if name.is_none() {
                remarks.push("column 1 counts the runs but was taken as a factor, like others".into());
            }
        } else if name.is_none() && first == Sequence::InOrder {
            remarks.push("column 1 counts the runs and has no name: it was taken as the run number".into());
            found.push(0);
        } else if others.contains(&Sequence::Repeating) {
            let title = one_line(&self.title(0));
            let what = format!("{title} may number the runs or be a factor: all its values differ");
            return Err(self.unclear(0, what));
        }
        Ok(())
    }

    fn unclear(&self, j: usize, what: String) -> ReadError {
        ReadError::Ambiguous {
            place: self.table.place(self.skip, j),
            what,
            advice: format!("say which with --run-column {} or --run-column no", j + 1),
        }
    }
}
