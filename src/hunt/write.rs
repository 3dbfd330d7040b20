//! What was found, as the text of a seed.

use std::fmt::Write;

use sha2::{Digest, Sha256};

use crate::construct::hadamard::goethals_seidel;
use crate::construct::scheme::from_starter;
use crate::construct::{ConstructError, OrbitColumn, orbit_array};
use crate::mix::counts_of;
use crate::verify::{Demand, Verdict, certify};

/// The text of the seed `circulants-LENGTH` in the format of `catalog/FORMAT.md`.
///
/// # Errors
/// Those of [`goethals_seidel`]: the rows are checked.
pub fn circulants_seed(
    multipliers: &[u16],
    rows: &[Vec<i8>; 4],
    source: &str,
) -> Result<String, ConstructError> {
    let h = goethals_seidel(rows.each_ref().map(Vec::as_slice))?;
    let n = h.order();
    let expanded: Vec<Vec<i8>> = (0..n).map(|i| (0..n).map(|j| h.entry(i, j)).collect()).collect();
    let length = rows[0].len();
    Ok(format!(
        "name: circulants-{length:03}\nkind: four-circulants\nlength: {length}\nmultipliers: {}\n\
         source: {source}\ndigest: {}\nbody:\n{}end\n",
        numbers(multipliers),
        digest(&signs(&expanded)),
        signs(rows)
    ))
}

/// The text of the seed `scheme-R-C-S` in the format of `catalog/FORMAT.md`.
///
/// # Errors
/// Those of [`from_starter`]: the columns are checked.
pub fn scheme_seed(group: &[u16], columns: &[Vec<u16>], source: &str) -> Result<String, ConstructError> {
    let d = from_starter(group, columns)?;
    let (r, c, s) = (d.rows(), d.columns(), d.order());
    let expanded: String =
        (0..r).map(|i| numbers(&(0..c).map(|j| d.entry(i, j)).collect::<Vec<_>>()) + "\n").collect();
    let body: String = columns.iter().map(|column| numbers(column) + "\n").collect();
    Ok(format!(
        "name: scheme-{r:02}-{c:02}-{s:02}\nkind: difference-scheme\nrows: {r}\ncolumns: {c}\ngroup: {}\n\
         source: {source}\ndigest: {}\nbody:\n{body}end\n",
        numbers(group),
        digest(&expanded)
    ))
}

/// The text of the seed `orbits-RUNS-STRENGTH-MIX` in the format of `catalog/FORMAT.md`; factors
/// with many levels come first.
///
/// # Errors
/// Those of [`orbit_array`], and a broken condition when the judges do not find the strength (for
/// fewer factors than that, the strength of a full factorial): nothing is written down unjudged.
pub fn orbits_seed(
    group: &[u16],
    columns: &[OrbitColumn],
    strength: u32,
    source: &str,
) -> Result<String, ConstructError> {
    let mut columns = columns.to_vec();
    columns.sort_by_key(|c| std::cmp::Reverse(c.levels));
    let array = orbit_array(group, &columns)?;
    let demand = Demand::strength((strength as usize).min(array.factors()));
    if !certify(&array, &demand).is_ok_and(|j| j.verdict == Verdict::Orthogonal) {
        return Err(ConstructError::condition("seed of an orbit array", format!("strength {strength}")));
    }
    let expanded: String = array.rows().map(|run| numbers(&run) + "\n").collect();
    let body: String =
        columns.iter().map(|c| numbers(&[&c.shifts[..], &c.base[..]].concat()) + "\n").collect();
    let mix: Vec<String> =
        counts_of(array.levels()).into_iter().rev().map(|(s, k)| format!("{s}x{k}")).collect();
    Ok(format!(
        "name: orbits-{:04}-{strength}-{}\nkind: orbits\ngroup: {}\norbits: {}\nlevels: {}\nstrength: {strength}\n\
         source: {source}\ndigest: {}\nbody:\n{body}end\n",
        array.runs(),
        mix.join("-"),
        if group.is_empty() { "1".to_owned() } else { numbers(group) },
        columns[0].base.len(),
        numbers(array.levels()),
        digest(&expanded)
    ))
}

fn numbers(of: &[u16]) -> String {
    of.iter().map(u16::to_string).collect::<Vec<_>>().join(" ")
}

fn signs(rows: &[Vec<i8>]) -> String {
    let line =
        |row: &Vec<i8>| row.iter().map(|&e| if e > 0 { '+' } else { '-' }).chain(['\n']).collect::<String>();
    rows.iter().map(line).collect()
}

fn digest(text: &str) -> String {
    Sha256::digest(text).iter().fold(String::new(), |mut out, byte| {
        let _ = write!(out, "{byte:02x}");
        out
    })
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::catalog::seed::{Seed, SeedKind, find};

    #[test]
    fn an_array_without_the_strength_is_not_written_down() {
        let column = |base: [u16; 4]| OrbitColumn { levels: 2, shifts: vec![], base: base.to_vec() };
        let (a, b) = (column([0, 0, 1, 1]), column([0, 1, 0, 1]));
        assert!(orbits_seed(&[], &[a.clone(), b], 2, "a test").is_ok());
        assert!(orbits_seed(&[], &[a.clone(), a], 2, "a test").is_err());
    }

    /// Written again, a seed of the catalogue keeps its digest and its data.
    #[test]
    fn writing_is_the_inverse_of_reading() {
        for name in ["circulants-007", "scheme-06-06-03", "scheme-20-09-04", "scheme-12-06-12"] {
            let seed = find(name).unwrap();
            let text = match &seed.kind {
                SeedKind::FourCirculants { multipliers, rows } => {
                    circulants_seed(multipliers, rows, &seed.source)
                }
                SeedKind::DifferenceScheme { group, columns } => scheme_seed(group, columns, &seed.source),
                other => panic!("{other:?}"),
            };
            assert_eq!(text.unwrap().parse::<Seed>().unwrap(), seed);
        }
        assert!(scheme_seed(&[3], &[vec![0, 0, 0], vec![0, 1, 1]], "x").is_err());
        assert!(circulants_seed(&[1], &[const { Vec::new() }; 4], "x").is_err());
    }
}
