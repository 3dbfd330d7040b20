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
                    powers(p, p, |a| (u64::from(a) * u64::from(g) % u64::from(p)) as u32).map(|e| (g, e))
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
            if let Some(exp) = powers(q, p, |a| times_x(a, p, q, &modulus)) {
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
fn powers(q: u32, _p: u32, step: impl Fn(u32) -> u32) -> Option<Vec<u16>> {
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
