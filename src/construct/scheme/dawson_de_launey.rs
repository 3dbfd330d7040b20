//! Schemes with four times as many rows as group elements.

use super::quadratic_forms::{cancel, vertex};
use super::{Scheme, field_table, quadratic_forms};
use crate::algebra::Field;
use crate::construct::ConstructError;

const NAME: &str = "Dawson-de Launey";

/// The largest odd q whose forms are searched for: the search looks at about 0.7·q⁴ block columns.
const LARGEST: u32 = 31;

type Form = [u16; 3];
type BlockColumn = [Form; 4];

/// The difference scheme D(4q, 4q, q) over the additive group of GF(q).
///
/// For q = 2^m it is [`field_table`]`(2, m + 2, m)`. For odd q it comes from 4 × 4 quadratic forms
/// through [`quadratic_forms`]; the coefficients are found by a search without randomness: block
/// column 0 holds xy + e_u·y² with e_u the elements 0, 1, 2, 3, and the first three block columns
/// that fit it and one another, in lexicographic order, complete it.
///
/// All of these must hold:
/// * q is a power of 2, or an odd prime power from 5 to 31 (for q = 3 a starter is needed: four
///   distinct leading coefficients do not exist in GF(3)).
///
/// Guarantee: D(4q, 4q, q), first row and first column zero.
///
/// # Errors
/// [`ConstructError::Algebra`] when there is no such field, [`ConstructError::Condition`] when q is
/// out of range. The search succeeds for every q admitted (a test runs them all).
///
/// Cost: O(q⁴) for the search, 16q² entries. References: Dawson 1985, A construction for generalized
/// Hadamard matrices GH(4q, EA(q)), Journal of Statistical Planning and Inference 11, 103–110; de
/// Launey 1986 for the existence (titles and pages from memory). The forms are ours.
///
/// ```
/// use trysquare::construct::scheme::dawson_de_launey;
/// use trysquare::verify::{Demand, Verdict, certify};
/// let d = dawson_de_launey(5)?;
/// assert_eq!((d.rows(), d.columns(), d.order()), (20, 20, 5));
/// assert!(d.is_difference_scheme());
/// let judged = certify(&trysquare::construct::scheme::developed(&d)?, &Demand::strength(2))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn dawson_de_launey(q: u32) -> Result<Scheme, ConstructError> {
    let field = Field::new(q)?;
    if field.characteristic() == 2 {
        return field_table(2, field.degree() + 2, field.degree());
    }
    if !(5..=LARGEST).contains(&q) {
        let needs = format!("q is even or an odd prime power from 5 to {LARGEST}, not {q}");
        return Err(ConstructError::condition(NAME, needs));
    }
    let first: BlockColumn = [[0, 1, 0], [0, 1, 1], [0, 1, 2], [0, 1, 3]];
    let Some(rest) = clique(&field, &fitting(&field, &first)) else {
        return Err(ConstructError::condition(NAME, format!("forms were not found for q = {q}")));
    };
    let forms: Vec<Vec<Form>> =
        (0..4).map(|u| std::iter::once(first[u]).chain(rest.iter().map(|c| c[u])).collect()).collect();
    quadratic_forms(q, &forms)
}

/// The block columns that fit `first`, ascending.
///
/// In block row 0 they have γ = 1 and β = 0: y can be scaled, and a multiple of y² added, in every
/// block column by itself.
fn fitting(field: &Field, first: &BlockColumn) -> Vec<BlockColumn> {
    let q = field.order() as u16;
    // Per block row, by vertex: the forms and whether A is a square.
    let tables: Vec<Vec<Vec<(Form, bool)>>> = (0..4)
        .map(|u| {
            let mut table = vec![Vec::new(); usize::from(q).pow(3)];
            let (gammas, betas) = if u == 0 { (1..2, 0..1) } else { (1..q, 0..q) };
            for alpha in 1..q {
                for gamma in gammas.clone() {
                    for beta in betas.clone() {
                        let form = [alpha, gamma, beta];
                        let (place, square) = vertex(field, first[u], form).expect("alpha is not 0");
                        let at = place.iter().fold(0, |at, &e| at * usize::from(q) + usize::from(e));
                        table[at].push((form, square));
                    }
                }
            }
            table
        })
        .collect();
    let pairs = |u: usize, w: usize| -> Vec<(Form, Form)> {
        tables[u]
            .iter()
            .zip(&tables[w])
            .flat_map(|(a, b)| a.iter().flat_map(move |x| b.iter().map(move |y| (x, y))))
            .filter(|(x, y)| x.1 != y.1)
            .map(|(x, y)| (x.0, y.0))
            .collect()
    };
    let mut columns = Vec::new();
    for w in 1..4 {
        let others: Vec<usize> = (1..4).filter(|&u| u != w).collect();
        let of_others = pairs(others[0], others[1]);
        for (a, b) in pairs(0, w) {
            for &(c, d) in &of_others {
                let mut column = [a; 4];
                (column[w], column[others[0]], column[others[1]]) = (b, c, d);
                columns.push(column);
            }
        }
    }
    columns.sort_unstable();
    columns.dedup();
    columns
}

/// The first three of `columns` that fit one another.
fn clique(field: &Field, columns: &[BlockColumn]) -> Option<[BlockColumn; 3]> {
    let fit = |a: &BlockColumn, b: &BlockColumn| cancel(field, a.iter().copied().zip(b.iter().copied()));
    columns.iter().enumerate().find_map(|(i, a)| {
        let near: Vec<&BlockColumn> = columns[i + 1..].iter().filter(|&b| fit(a, b)).collect();
        near.iter().enumerate().find_map(|(j, b)| {
            let c = near[j + 1..].iter().find(|&c| fit(b, c))?;
            Some([*a, **b, **c])
        })
    })
}
