//! Finite fields GF(q) by discrete-logarithm tables.

use super::AlgebraError;
use super::number::{is_prime, prime_power};

/// The finite field GF(q), q = p^m at most 65,521 (the largest prime power below 2^16).
///
/// Elements are the integers `0..q`; element `e` stands for the polynomial whose coefficients are
/// the base-`p` digits of `e`, least significant digit = constant term. The modulus is the
/// *smallest* primitive monic polynomial of degree m when read as an integer in base `p` in the
/// same way, so `x` (the integer `p`) generates the multiplicative group when m > 1; for prime
/// fields the generator is the least primitive root. Both choices are stated because other
/// software may choose otherwise.
#[derive(Clone, Debug)]
pub struct Field {
    p: u32,
    degree: u32,
    order: u32,
    modulus: Vec<u32>,
    generator: u32,
    exp: Vec<u16>,
    log: Vec<u16>,
}

impl Field {
    /// The field with `q` elements. Cost: O(q) memory, about O(q · tries) time, tries being the
    /// number of polynomials looked at before a primitive one is met (a few dozen at most).
    ///
    /// # Errors
    /// [`AlgebraError::NotAPrimePower`] when no such field exists or `q` is above 65,535.
    pub fn new(q: u32) -> Result<Self, AlgebraError> {
        let (p, degree) =
            prime_power(q).filter(|_| q <= u32::from(u16::MAX)).ok_or(AlgebraError::NotAPrimePower { q })?;
        if degree == 1 {
            let modulus = vec![0, 1];
            let (generator, exp) = (1..p)
                .find_map(|g| {
                    powers(p, |a| (u64::from(a) * u64::from(g) % u64::from(p)) as u32).map(|e| (g, e))
                })
                .expect("every prime has a primitive root");
            return Ok(Self::with_tables(p, 1, q, modulus, generator, exp));
        }
        for low in 1..q {
            let mut modulus = digits(low, p, degree);
            if modulus[0] == 0 {
                continue;
            }
            modulus.push(1);
            if let Some(exp) = powers(q, |a| times_x(a, p, q, &modulus)) {
                return Ok(Self::with_tables(p, degree, q, modulus, p, exp));
            }
        }
        unreachable!("primitive polynomials of every degree exist over every prime field")
    }

    fn with_tables(
        p: u32,
        degree: u32,
        order: u32,
        modulus: Vec<u32>,
        generator: u32,
        exp: Vec<u16>,
    ) -> Self {
        let mut log = vec![0u16; order as usize];
        for (i, &e) in exp.iter().enumerate() {
            log[e as usize] = i as u16;
        }
        Self { p, degree, order, modulus, generator, exp, log }
    }

    /// q, the number of elements.
    #[must_use]
    pub fn order(&self) -> u32 {
        self.order
    }

    /// p, the characteristic.
    #[must_use]
    pub fn characteristic(&self) -> u32 {
        self.p
    }

    /// m, where q = p^m.
    #[must_use]
    pub fn degree(&self) -> u32 {
        self.degree
    }

    /// The coefficients of the modulus, constant term first, leading 1 last (`x` for m = 1).
    #[must_use]
    pub fn modulus(&self) -> &[u32] {
        &self.modulus
    }

    /// The generator of the multiplicative group whose powers the tables list.
    #[must_use]
    pub fn generator(&self) -> u16 {
        self.generator as u16
    }

    /// All elements, `0..q`.
    pub fn elements(&self) -> impl DoubleEndedIterator<Item = u16> + Clone + use<> {
        0..self.order as u16
    }

    /// `a + b`.
    ///
    /// # Panics
    /// This and every other operation panics when an argument is not below [`Field::order`].
    #[must_use]
    pub fn add(&self, a: u16, b: u16) -> u16 {
        self.check(a);
        self.check(b);
        if self.p == 2 {
            return a ^ b;
        }
        self.digitwise(a, b, |x, y, p| (x + y) % p)
    }

    /// `a - b`.
    #[must_use]
    pub fn sub(&self, a: u16, b: u16) -> u16 {
        self.check(a);
        self.check(b);
        if self.p == 2 {
            return a ^ b;
        }
        self.digitwise(a, b, |x, y, p| (x + p - y) % p)
    }

    /// `-a`.
    #[must_use]
    pub fn neg(&self, a: u16) -> u16 {
        self.sub(0, a)
    }

    /// `a · b`.
    #[must_use]
    pub fn mul(&self, a: u16, b: u16) -> u16 {
        self.check(a);
        self.check(b);
        if a == 0 || b == 0 {
            return 0;
        }
        let n = self.order - 1;
        let i = u32::from(self.log[a as usize]) + u32::from(self.log[b as usize]);
        self.exp[(i % n) as usize]
    }

    /// `1 / a`, `None` for zero.
    #[must_use]
    pub fn inv(&self, a: u16) -> Option<u16> {
        self.check(a);
        let n = self.order - 1;
        (a != 0).then(|| self.exp[((n - u32::from(self.log[a as usize])) % n) as usize])
    }

    /// `a^e`, with `0^0 = 1`.
    #[must_use]
    pub fn pow(&self, a: u16, e: u32) -> u16 {
        self.check(a);
        if a == 0 {
            return u16::from(e == 0);
        }
        let n = u64::from(self.order - 1);
        let i = u64::from(self.log[a as usize]) * u64::from(e) % n;
        self.exp[i as usize]
    }

    /// The discrete logarithm to the base [`Field::generator`], `None` for zero.
    #[must_use]
    pub fn log(&self, a: u16) -> Option<u32> {
        self.check(a);
        (a != 0).then(|| u32::from(self.log[a as usize]))
    }

    /// Whether `a` is the square of a non-zero element (zero itself is not counted).
    #[must_use]
    pub fn is_nonzero_square(&self, a: u16) -> bool {
        self.check(a);
        a != 0 && (self.p == 2 || self.log[a as usize].is_multiple_of(2))
    }

    /// The m coefficients of `a` over GF(p), constant term first.
    #[must_use]
    pub fn digits(&self, a: u16) -> Vec<u16> {
        self.check(a);
        digits(u32::from(a), self.p, self.degree).into_iter().map(|d| d as u16).collect()
    }

    fn check(&self, a: u16) {
        assert!(u32::from(a) < self.order, "{a} is not an element of GF({})", self.order);
    }

    fn digitwise(&self, a: u16, b: u16, f: impl Fn(u32, u32, u32) -> u32) -> u16 {
        let (mut a, mut b, mut weight, mut sum) = (u32::from(a), u32::from(b), 1u32, 0u32);
        for _ in 0..self.degree {
            sum += weight * f(a % self.p, b % self.p, self.p);
            (a, b, weight) = (a / self.p, b / self.p, weight * self.p);
        }
        sum as u16
    }
}

fn digits(mut a: u32, p: u32, len: u32) -> Vec<u32> {
    (0..len)
        .map(|_| {
            let d = a % p;
            a /= p;
            d
        })
        .collect()
}

/// `a · x` modulo the monic `modulus`, in base-`p` encoding.
fn times_x(a: u32, p: u32, q: u32, modulus: &[u32]) -> u32 {
    let top = a / (q / p);
    let shifted = (a % (q / p)) * p;
    let (mut rest, mut weight, mut out) = (shifted, 1, 0);
    for &m in &modulus[..modulus.len() - 1] {
        out += weight * ((rest % p + (p - m) * top) % p);
        (rest, weight) = (rest / p, weight * p);
    }
    out
}

/// The powers of the element `g` whose multiplication is `step`, if they are all q - 1 non-zero
/// elements.
fn powers(q: u32, step: impl Fn(u32) -> u32) -> Option<Vec<u16>> {
    let mut exp = Vec::with_capacity(q as usize - 1);
    let mut a = 1u32;
    loop {
        exp.push(a as u16);
        a = step(a);
        if a == 1 {
            break;
        }
        if a == 0 || exp.len() as u32 >= q - 1 {
            return None;
        }
    }
    (exp.len() as u32 == q - 1).then_some(exp)
}

/// All prime powers `q` with `low <= q <= high`, ascending.
#[must_use]
pub fn prime_powers(low: u32, high: u32) -> Vec<u32> {
    (low.max(2)..=high).filter(|&q| is_prime(q) || prime_power(q).is_some()).collect()
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    /// The axioms at one triple of elements.
    fn axioms(f: &Field, a: u16, b: u16, c: u16) {
        let (add, mul) = (|x, y| f.add(x, y), |x, y| f.mul(x, y));
        let q = f.order();
        assert!(u32::from(add(a, b)) < q && u32::from(mul(a, b)) < q);
        assert_eq!(add(add(a, b), c), add(a, add(b, c)), "GF({q}): {a} {b} {c}");
        assert_eq!(mul(mul(a, b), c), mul(a, mul(b, c)), "GF({q}): {a} {b} {c}");
        assert_eq!(mul(a, add(b, c)), add(mul(a, b), mul(a, c)), "GF({q}): {a} {b} {c}");
    }

    /// What must hold for every pair of elements.
    fn pair(f: &Field, a: u16, b: u16) {
        assert_eq!(f.add(a, b), f.add(b, a));
        assert_eq!(f.mul(a, b), f.mul(b, a));
        assert_eq!(f.sub(f.add(a, b), b), a);
        assert_eq!(f.sub(a, b), f.add(a, f.neg(b)));
        assert_eq!(f.mul(a, b) == 0, a == 0 || b == 0, "no zero divisors");
    }

    /// What must hold for every element.
    fn single(f: &Field, a: u16) {
        assert_eq!((f.add(a, 0), f.mul(a, 1), f.mul(a, 0)), (a, a, 0));
        assert_eq!(f.add(a, f.neg(a)), 0);
        assert_eq!(f.inv(a).map(|i| f.mul(a, i)), (a != 0).then_some(1));
        assert_eq!(f.log(a).map(|e| f.pow(f.generator(), e)), (a != 0).then_some(a));
        assert_eq!(f.pow(a, 3), f.mul(a, f.mul(a, a)));
        assert_eq!(f.pow(a, f.order()), a, "x^q = x");
        assert_eq!((f.pow(a, 0), f.pow(a, 1)), (1, a));
        let multiple = (0..f.characteristic()).fold(0, |sum, _| f.add(sum, a));
        assert_eq!(multiple, 0, "p times anything is zero");
        let digits = f.digits(a);
        assert_eq!(digits.len() as u32, f.degree());
        assert_eq!(digits.iter().rev().fold(0, |n, &d| n * f.characteristic() + u32::from(d)), u32::from(a));
    }

    #[test]
    fn axioms_of_every_field_up_to_64() {
        for q in prime_powers(2, 64) {
            let f = Field::new(q).unwrap();
            assert_eq!(f.order(), f.characteristic().pow(f.degree()));
            for a in f.elements() {
                single(&f, a);
                for b in f.elements() {
                    pair(&f, a, b);
                    for c in f.elements() {
                        axioms(&f, a, b, c);
                    }
                }
            }
            let squares: Vec<bool> =
                f.elements().map(|a| a != 0 && f.elements().any(|b| f.mul(b, b) == a)).collect();
            assert!(f.elements().all(|a| f.is_nonzero_square(a) == squares[a as usize]), "GF({q})");
        }
    }

    #[test]
    fn axioms_sampled_in_larger_fields() {
        let large = [
            81, 121, 125, 128, 169, 243, 251, 256, 343, 512, 625, 729, 961, 1024, 1331, 2048, 2187, 2401,
            3125, 3721, 4093, 4096, 32749, 32768, 59049, 65521,
        ];
        for q in large {
            let f = Field::new(q).unwrap();
            let step = (q / 29).max(1) as usize;
            let sample: Vec<u16> =
                f.elements().step_by(step).chain(f.elements().rev().take(3)).chain([1, 2]).collect();
            for &a in &sample {
                single(&f, a);
                for &b in &sample {
                    pair(&f, a, b);
                    for &c in &sample {
                        axioms(&f, a, b, c);
                    }
                }
            }
        }
    }

    #[test]
    fn the_generator_generates() {
        for q in prime_powers(2, 4096) {
            let f = Field::new(q).unwrap();
            let mut seen = vec![false; q as usize];
            let mut a = 1;
            for _ in 1..q {
                assert!(!std::mem::replace(&mut seen[a as usize], true), "GF({q})");
                a = f.mul(a, f.generator());
            }
            assert_eq!(a, 1);
            assert!(!seen[0]);
            if f.degree() > 1 {
                assert_eq!(u32::from(f.generator()), f.characteristic());
                let value = f
                    .modulus()
                    .iter()
                    .enumerate()
                    .fold(0, |sum, (i, &c)| f.add(sum, f.mul(c as u16, f.pow(f.generator(), i as u32))));
                assert_eq!(value, 0, "GF({q}): x is a root of the modulus");
            }
        }
    }

    #[test]
    fn there_is_no_other_field() {
        let orders = prime_powers(0, 100);
        for q in 0..=100 {
            assert_eq!(Field::new(q).is_ok(), orders.contains(&q), "{q}");
        }
        for q in [6, 12, 1000, 4095, 65535, 65536, 65537, 1 << 17, u32::MAX] {
            assert_eq!(Field::new(q).unwrap_err(), AlgebraError::NotAPrimePower { q });
        }
        assert_eq!(prime_powers(65000, 65535).last(), Some(&65521));
        assert!(prime_powers(10, 2).is_empty());
    }

    #[test]
    #[should_panic(expected = "4 is not an element of GF(4)")]
    fn elements_are_checked() {
        let _ = Field::new(4).unwrap().add(4, 0);
    }

    proptest! {
        #[test]
        fn axioms_at_random(q in prop::sample::select(prime_powers(64, 4096)), a: u16, b: u16, c: u16) {
            let f = Field::new(q).unwrap();
            let element = |x: u16| (u32::from(x) % q) as u16;
            axioms(&f, element(a), element(b), element(c));
            pair(&f, element(a), element(b));
        }
    }
}
