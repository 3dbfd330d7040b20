//! Difference schemes D(r, c, s): r × c arrays over an abelian group of order s in which the
//! difference of any two columns takes every group value r/s times.
//!
//! A scheme becomes an array by [`developed`] (OA(rs, s^c, 2)) or [`developed_with_rows`]
//! (OA(rs, s^c · r, 2)), and with other arrays by the generalised Kronecker sum. When to prefer
//! which for a wanted (r, s):
//!
//! | r | c | use |
//! | --- | --- | --- |
//! | p^a, s = p^b, a ≥ b | r | [`field_table`]: linear, so the developed array is linear as well |
//! | 2s, s a prime power | r | [`masuyama`] (s even: the field table) |
//! | 4s, s even or an odd prime power from 5 to 31 | r | [`dawson_de_launey`] |
//! | ks, s an odd prime power | r | [`quadratic_forms`] with k × k forms that somebody found |
//! | a Hadamard order, s = 2 | r | [`from_hadamard`] |
//! | r1·r2, both over the group | c1·c2 | [`kronecker_sum`], also with [`zero_column`] (c2 = 1) for every multiple of r1 |
//! | a scheme over a group of which s is a quotient | c | [`image`] |
//! | r1·r2, s = s1·s2 | min(c1, c2) | [`direct_sum`], the only one here for an s that is no prime power |
//! | anything else | c | [`from_starter`] with columns that somebody found |
//!
//! No column number exceeds r (Jungnickel 1979), so the first five cannot be beaten; among the
//! rest take the one with the most columns. The data for the last are arguments; those known to
//! the project lie in the folder `catalog/`.
//!
//! **Columns not reached** (after the stroke the best known of the literature, from memory; each tried
//! with `hunt::SchemeHunt` under 3 to 20 symmetries, at most 30 s each): s = 3: r = 30 has 15/30;
//! s = 4: r = 24 has 12/20; index 1: r = s = 21 has 3/6, 24 has 7/8. Above what we had read of:
//! D(21, 21, 3), D(28, 14, 4), D(35, 9, 5). Seberry's D(q(q − 1), q(q − 1), q) is not here as a
//! construction; 6·3, 12·4 and 20·5 come otherwise, 56·8 and 72·9 do not.
//!
//! [`bose_bush`] is the array OA(λs², s^{λs+1}, 2) that a square scheme over a field gives at once.

mod bose_bush;
mod dawson_de_launey;
mod developed;
mod difference;
mod direct_sum;
mod field_table;
mod from_hadamard;
mod from_starter;
mod group;
mod image;
mod kronecker_sum;
mod masuyama;
mod quadratic_forms;
mod zero_column;

pub use bose_bush::bose_bush;
pub use dawson_de_launey::dawson_de_launey;
pub use developed::{developed, developed_with_rows};
pub use difference::Scheme;
pub use direct_sum::direct_sum;
pub use field_table::field_table;
pub use from_hadamard::from_hadamard;
pub use from_starter::from_starter;
pub use group::canonical_group;
pub use image::image;
pub use kronecker_sum::kronecker_sum;
pub use masuyama::masuyama;
pub use quadratic_forms::quadratic_forms;
pub use zero_column::zero_column;

#[cfg(test)]
pub(crate) mod by_definition;
#[cfg(test)]
mod tests;
