//! Which columns of a matrix of whole numbers can be estimated, exactly.

use num_bigint::BigInt;
use num_integer::Integer;

/// The rank of a matrix and, for each column, whether its coefficient is determined.
pub(super) struct Determined {
    pub(super) rank: usize,
    /// Column j is not in the span of the other columns.
    pub(super) columns: Vec<bool>,
}

/// Gauss–Jordan elimination without fractions: `columns` holds the matrix column by column.
///
/// In reduced form every null vector is a combination of one vector per column without pivot; a
/// coefficient is determined when all of those vanish there: its column has a pivot, and the row of
/// this pivot is zero in all columns without. All of these must hold: columns of equal length.
///
/// Reference: E. H. Bareiss, *Mathematics of Computation* 22 (1968), 565–578. Cost: N·p·rank products.
pub(super) fn determined(columns: &[Vec<BigInt>]) -> Determined {
    let runs = columns.first().map_or(0, Vec::len);
    let mut rows: Vec<Vec<BigInt>> =
        (0..runs).map(|i| columns.iter().map(|c| c[i].clone()).collect()).collect();
    rows.sort_unstable();
    rows.dedup();
    let mut pivots = Vec::new();
    for column in 0..columns.len() {
        let top = pivots.len();
        let Some(found) = (top..rows.len()).find(|&r| rows[r][column] != BigInt::ZERO) else { continue };
        rows.swap(top, found);
        let pivot = rows[top].clone();
        for (_, row) in rows.iter_mut().enumerate().filter(|&(r, _)| r != top) {
            if row[column] != BigInt::ZERO {
                eliminate(row, &pivot, column);
            }
        }
        pivots.push(column);
    }
    let mut determined = vec![false; columns.len()];
    for (row, &pivot) in rows.iter().zip(&pivots) {
        determined[pivot] = row.iter().enumerate().all(|(j, v)| j == pivot || *v == BigInt::ZERO);
    }
    Determined { rank: pivots.len(), columns: determined }
}

/// A multiple of `row` less one of `pivot`, zero in `column`, without a common factor.
fn eliminate(row: &mut [BigInt], pivot: &[BigInt], column: usize) {
    let common = row[column].gcd(&pivot[column]);
    let (own, other) = (&pivot[column] / &common, &row[column] / &common);
    let mut divisor = BigInt::ZERO;
    for (value, p) in row.iter_mut().zip(pivot) {
        *value = &*value * &own - p * &other;
        divisor = divisor.gcd(value);
    }
    if divisor > BigInt::from(1) {
        row.iter_mut().for_each(|value| *value /= &divisor);
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn of(columns: &[&[i64]]) -> (usize, Vec<bool>) {
        let columns: Vec<Vec<BigInt>> =
            columns.iter().map(|c| c.iter().map(|&v| BigInt::from(v)).collect()).collect();
        let found = determined(&columns);
        (found.rank, found.columns)
    }

    #[test]
    fn cases_by_hand() {
        assert_eq!(of(&[&[1, 1, 1], &[0, 1, 2], &[0, 1, 4]]), (3, vec![true; 3]));
        assert_eq!(of(&[&[1, 1, 1], &[0, 1, 2], &[0, 2, 4]]), (2, vec![true, false, false]));
        assert_eq!(of(&[&[0, 0], &[1, 1]]), (1, vec![false, true]));
        assert_eq!(of(&[&[1, 1], &[1, -1], &[3, 1]]), (2, vec![false; 3]));
        assert_eq!(of(&[]), (0, vec![]));
    }

    /// A column is determined when leaving it out lowers the rank: the definition, against the rule.
    #[test]
    fn leaving_out_a_determined_column_lowers_the_rank() {
        let mut state = 7u64;
        let mut seen = [0; 2];
        for _ in 0..200 {
            let columns: Vec<Vec<BigInt>> = (0..6)
                .map(|_| {
                    let mut entry = || {
                        state = state.wrapping_mul(6_364_136_223_846_793_005).wrapping_add(1_442_695);
                        BigInt::from((state >> 40) % 2)
                    };
                    (0..5).map(|_| entry()).collect()
                })
                .collect();
            let found = determined(&columns);
            for j in 0..columns.len() {
                let mut others = columns.clone();
                others.remove(j);
                let lower = determined(&others).rank < found.rank;
                assert_eq!(lower, found.columns[j]);
                seen[usize::from(lower)] += 1;
            }
        }
        assert!(seen.iter().all(|&n| n > 100), "{seen:?}");
    }
}
