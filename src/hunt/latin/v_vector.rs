//! Depth-first search for V(m, t) vectors.

use crate::algebra::{AlgebraError, Field};

/// The lexicographically least vector V(m, t) that begins with 0, 1; `None` when there is none or
/// when `limit` places have been tried without reaching one.
///
/// A V(m, t) vector over GF(q), q = mt + 1, is (a_1 … a_{m+1}) such that for k = 1 … m the
/// differences a_{i+k} − a_i (indices modulo m + 2, those with the empty place m + 2 left out) lie
/// in all m cyclotomic classes of order m. Every vector is equivalent to one that begins with 0, 1
/// under the affine maps of the field.
///
/// # Errors
/// [`AlgebraError::NotAPrimePower`] when mt + 1 is no prime power below 65,536.
///
/// # Reference
/// *Handbook of Combinatorial Designs*, second edition 2007, section III.3.6.
///
/// ```
/// use trysquare::hunt::latin::least_v_vector;
/// assert_eq!(least_v_vector(2, 3, 1000)?, Some(vec![0, 1, 4]));
/// # Ok::<(), trysquare::algebra::AlgebraError>(())
/// ```
pub fn least_v_vector(m: u16, t: u16, limit: u64) -> Result<Option<Vec<u16>>, AlgebraError> {
    let field = Field::new(u32::from(m) * u32::from(t) + 1)?;
    let m = usize::from(m);
    if m < 2 || t == 0 {
        return Ok(None);
    }
    let mut state = State { field: &field, m, used: vec![false; (m + 2) * m], left: limit, vector: vec![0] };
    Ok((state.admit(1) && state.extend()).then_some(state.vector))
}

struct State<'f> {
    field: &'f Field,
    m: usize,
    /// Whether shift k has a difference in class c, at k·m + c.
    used: Vec<bool>,
    left: u64,
    vector: Vec<u16>,
}

impl State<'_> {
    /// The classes hit by `a` as the next entry: (shift, class) of both differences with each
    /// earlier entry; `None` where a difference vanishes.
    fn hits(&self, a: u16) -> Option<Vec<usize>> {
        let at = self.vector.len();
        let mut hits = Vec::with_capacity(2 * at);
        for (i, &b) in self.vector.iter().enumerate() {
            let k = at - i;
            let forward = self.field.log(self.field.sub(a, b))? as usize % self.m;
            let back = self.field.log(self.field.sub(b, a))? as usize % self.m;
            hits.extend([k * self.m + forward, (self.m + 2 - k) * self.m + back]);
        }
        Some(hits)
    }

    /// Appends `a` if no class is hit twice.
    fn admit(&mut self, a: u16) -> bool {
        let Some(hits) = self.hits(a) else { return false };
        for (n, &h) in hits.iter().enumerate() {
            if std::mem::replace(&mut self.used[h], true) {
                hits[..n].iter().for_each(|&h| self.used[h] = false);
                return false;
            }
        }
        self.vector.push(a);
        true
    }

    fn extend(&mut self) -> bool {
        if self.vector.len() == self.m + 1 {
            return true;
        }
        for a in self.field.elements() {
            if self.left == 0 {
                return false;
            }
            self.left -= 1;
            if self.admit(a) {
                if self.extend() {
                    return true;
                }
                self.vector.pop();
                for h in self.hits(a).expect("admitted before") {
                    self.used[h] = false;
                }
            }
        }
        false
    }
}
