//! Wilson's inflation of a transversal design with one or two truncated groups.

use super::is_square;
use crate::array::Array;
use crate::construct::ConstructError;
use crate::construct::compose::{Levels, as_levels};

const NAME: &str = "Wilson 1974";

/// The array of n = mt + u_1 + … + u_r levels that Wilson's construction gives, r = 1 or 2.
///
/// # Parameters
/// `k`: the number of factors of the result. `master`: a transversal design on t points.
/// `truncated`: u_1 … u_r. `parts`: arrays on m, m + 1, …, m + r levels. `fills`: arrays on u_1 …
/// u_r levels. All of these must hold:
/// * k ≥ 2, r is 1 or 2, 1 ≤ u_i ≤ t, m ≥ 2, n ≤ 65,535;
/// * `master` has t² runs and begins with k + r factors of t levels;
/// * `parts` has r + 1 entries; entry j has (m + j)² runs and begins with k factors of m + j levels;
/// * for r = 2 the last part has two runs that differ in each of the first k factors (it has when
///   k ≤ m + 2);
/// * `fills` has r entries; for u_i ≥ 2 entry i has u_i² runs and begins with k factors of u_i levels;
/// * the factors named have strength 2 (not checked).
///
/// So N(mt + u) ≥ min{N(m), N(m + 1), N(t) − 1, N(u)} and
/// N(mt + u + v) ≥ min{N(m), N(m + 1), N(m + 2), N(t) − 2, N(u), N(v)}.
///
/// # Result
/// OA(n², n^k, 2), index 1. A run (x_1 … x_k; z) of the master lies in the j groups that are
/// truncated and keep its level z_i < u_i. It is replaced by the part on m + j levels, less j runs
/// that differ everywhere; their levels become the kept points, the others m copies of x_1 … x_k.
/// Copy s of level x is the level mx + s, the kept points follow. The fills come last.
///
/// # Errors
/// [`ConstructError::Condition`] when a checked condition fails, [`ConstructError::Array`] when the
/// result does not fit into memory.
///
/// # Cost
/// O(cells of the result).
///
/// # Reference
/// R. M. Wilson, *Concerning the number of mutually orthogonal Latin squares*, Discrete Mathematics
/// 9 (1974) 181–198.
///
/// ```
/// use trysquare::construct::field::bush;
/// use trysquare::construct::latin::wilson;
/// // 14 = 3·4 + 2 would need two squares of order 2; 13 = 3·4 + 1 needs none for its fill.
/// let (master, three, four) = (bush(4, 2)?, bush(3, 2)?, bush(4, 2)?);
/// let array = wilson(4, &master, &[1], &[&three, &four], &[None])?;
/// assert_eq!(array.mix().to_string(), "13^4");
/// # Ok::<(), trysquare::construct::ConstructError>(())
/// ```
pub fn wilson(
    k: usize,
    master: &Array,
    truncated: &[u16],
    parts: &[&Array],
    fills: &[Option<&Array>],
) -> Result<Array, ConstructError> {
    let t = master.levels().first().map_or(0, |&t| usize::from(t));
    let m = parts.first().and_then(|p| p.levels().first()).map_or(0, |&m| usize::from(m));
    let levels = wilson_levels(k, t, m, truncated)?;
    let r = truncated.len();
    is_square(NAME, "the master", master, k + r, t)?;
    if parts.len() != r + 1 || fills.len() != r {
        return Err(ConstructError::condition(NAME, format!("{} parts and {r} fills", r + 1)));
    }
    for (j, part) in parts.iter().enumerate() {
        is_square(NAME, "a part", part, k, m + j)?;
    }
    let parts: Vec<Vec<Vec<u16>>> =
        parts.iter().enumerate().map(|(j, part)| less(part, k, j)).collect::<Result<_, _>>()?;
    let mut columns = vec![Vec::new(); k];
    for run in 0..master.runs() {
        let mut first = m * t;
        let mut kept = Vec::with_capacity(r);
        for (i, &u) in truncated.iter().enumerate() {
            let z = master.get(run, k + i);
            if z < u {
                kept.push((first + usize::from(z)) as u16);
            }
            first += usize::from(u);
        }
        for (c, column) in columns.iter_mut().enumerate() {
            let x = usize::from(master.get(run, c));
            column.extend(parts[kept.len()][c].iter().map(|&s| {
                let s = usize::from(s);
                if s < m { (m * x + s) as u16 } else { kept[s - m] }
            }));
        }
    }
    let mut first = m * t;
    for (&u, fill) in truncated.iter().zip(fills) {
        append_fill(&mut columns, *fill, first as u16, u)?;
        first += usize::from(u);
    }
    Ok(Array::from_columns(levels.into_iter().zip(columns).collect())?)
}

/// The first k columns of a part without j runs that differ everywhere, whose levels are renamed to
/// the last j.
fn less(part: &Array, k: usize, j: usize) -> Result<Vec<Vec<u16>>, ConstructError> {
    let differ = |a: usize, b: usize| (0..k).all(|c| part.get(a, c) != part.get(b, c));
    let mut holes: Vec<usize> = Vec::with_capacity(j);
    for run in 0..part.runs() {
        if holes.len() < j && holes.iter().all(|&h| differ(h, run)) {
            holes.push(run);
        }
    }
    if holes.len() < j {
        return Err(ConstructError::condition(NAME, "two runs of the last part that differ everywhere"));
    }
    let columns = (0..k).map(|c| {
        let s = part.levels()[c];
        let last: Vec<u16> = holes.iter().map(|&h| part.get(h, c)).collect();
        let order: Vec<u16> = (0..s).filter(|l| !last.contains(l)).chain(last.iter().copied()).collect();
        let mut name = vec![0; usize::from(s)];
        for (new, &old) in (0..).zip(&order) {
            name[usize::from(old)] = new;
        }
        let kept = (0..part.runs()).filter(|run| !holes.contains(run));
        kept.map(|run| name[usize::from(part.get(run, c))]).collect()
    });
    Ok(columns.collect())
}

fn append_fill(
    columns: &mut [Vec<u16>],
    fill: Option<&Array>,
    first: u16,
    u: u16,
) -> Result<(), ConstructError> {
    if u == 1 {
        columns.iter_mut().for_each(|c| c.push(first));
        return Ok(());
    }
    let Some(fill) = fill else {
        return Err(ConstructError::condition(NAME, format!("a fill on {u} levels")));
    };
    is_square(NAME, "the fill", fill, columns.len(), usize::from(u))?;
    for (c, column) in columns.iter_mut().enumerate() {
        column.extend(fill.column(c).iter().map(|&s| first + s));
    }
    Ok(())
}

/// The levels of [`wilson`], from k, t, m and the sizes of the truncated groups.
///
/// # Errors
/// [`ConstructError::Condition`] when a number is out of range.
pub fn wilson_levels(k: usize, t: usize, m: usize, truncated: &[u16]) -> Result<Vec<u16>, ConstructError> {
    let fits = |&u: &u16| (1..=t).contains(&usize::from(u));
    if k < 2 || m < 2 || !(1..=2).contains(&truncated.len()) || !truncated.iter().all(fits) {
        let needs =
            format!("k and m at least 2, one or two sizes from 1 to {t}, not {k}, {m}, {truncated:?}");
        return Err(ConstructError::condition(NAME, needs));
    }
    let kept: usize = truncated.iter().map(|&u| usize::from(u)).sum();
    let levels = as_levels(NAME, m.checked_mul(t).and_then(|n| n.checked_add(kept)))?;
    Ok(Levels::new(NAME).repeat(levels, Some(k))?.done())
}
