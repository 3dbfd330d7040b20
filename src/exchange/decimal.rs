//! Decimal numbers compared exactly, as they stand in a cell.

use std::cmp::Ordering;

/// A number as it is written: no rounding, so `0.1` and `0.1000000000000000000001` differ.
///
/// The value is ±0.d₁d₂… · 10^point, d₁ and the last digit not zero; zero has no digits.
#[derive(Clone, Debug, PartialEq, Eq, Hash)]
pub(super) struct Decimal {
    negative: bool,
    digits: Box<[u8]>,
    point: i64,
}

impl Decimal {
    /// Reads `[sign] digits [. or , digits] [e exponent]`; `None` when the text is anything else.
    pub(super) fn parse(text: &str) -> Option<Self> {
        let (negative, rest) = match text.chars().next()? {
            '-' | '\u{2212}' => (true, &text[text.chars().next()?.len_utf8()..]),
            '+' => (false, &text[1..]),
            _ => (false, text),
        };
        let (mantissa, exponent) = match rest.split_once(['e', 'E']) {
            Some((m, e)) => (m, exponent(e)?),
            None => (rest, 0),
        };
        let (whole, part) = mantissa.split_once(['.', ',']).unwrap_or((mantissa, ""));
        let is_digits = |t: &str| t.bytes().all(|b| b.is_ascii_digit());
        if !(is_digits(whole) && is_digits(part)) || whole.len() + part.len() == 0 {
            return None;
        }
        let digits: Vec<u8> = whole.bytes().chain(part.bytes()).collect();
        let Some(first) = digits.iter().position(|&d| d != b'0') else {
            return Some(Self { negative: false, digits: Box::default(), point: 0 });
        };
        let last = digits.iter().rposition(|&d| d != b'0')?;
        let point = i64::try_from(whole.len()).ok()?.checked_sub(i64::try_from(first).ok()?)?;
        Some(Self { negative, digits: digits[first..=last].into(), point: point.checked_add(exponent)? })
    }

    /// The number as an `i32`, if it is one.
    pub(super) fn to_i32(&self) -> Option<i32> {
        let point = usize::try_from(self.point).ok().filter(|&p| p <= 10 && p >= self.digits.len())?;
        let size =
            (0..point).fold(0i64, |n, i| 10 * n + i64::from(self.digits.get(i).map_or(0, |d| d - b'0')));
        i32::try_from(if self.negative { -size } else { size }).ok()
    }
}

fn exponent(text: &str) -> Option<i64> {
    let digits = text.strip_prefix(['+', '-']).unwrap_or(text);
    (!digits.is_empty() && digits.bytes().all(|b| b.is_ascii_digit())).then(|| text.parse().ok())?
}

impl Ord for Decimal {
    fn cmp(&self, other: &Self) -> Ordering {
        let sign = |d: &Self| match (d.digits.is_empty(), d.negative) {
            (true, _) => 0,
            (false, true) => -1,
            (false, false) => 1,
        };
        let size = |a: &Self, b: &Self| a.point.cmp(&b.point).then_with(|| a.digits.cmp(&b.digits));
        sign(self).cmp(&sign(other)).then_with(|| match sign(self) {
            1 => size(self, other),
            -1 => size(other, self),
            _ => Ordering::Equal,
        })
    }
}

impl PartialOrd for Decimal {
    fn partial_cmp(&self, other: &Self) -> Option<Ordering> {
        Some(self.cmp(other))
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    fn decimal(text: &str) -> Decimal {
        Decimal::parse(text).unwrap_or_else(|| panic!("{text}"))
    }

    #[test]
    fn equal_numbers_are_equal() {
        for (a, b) in [
            ("1", "1.0"),
            ("+1", "01"),
            ("-0", "0.00"),
            ("1e3", "1000"),
            ("12,5", "12.50"),
            ("\u{2212}1", "-1"),
            (".5", "5E-1"),
            ("5.", "5"),
        ] {
            assert_eq!(decimal(a), decimal(b), "{a} {b}");
        }
        assert_ne!(decimal("0.1"), decimal("0.1000000000000000000001"));
    }

    #[test]
    fn everything_else_is_text() {
        for text in [
            "",
            "-",
            "+",
            ".",
            "1.2.3",
            "1,000.5",
            "e3",
            "1e",
            "1e+",
            "1 2",
            "0x1",
            "inf",
            "NaN",
            "1e99999999999999999999",
            "1e9223372036854775807",
            "--1",
            "5%",
            "1e1e1",
        ] {
            assert_eq!(Decimal::parse(text), None, "{text}");
        }
    }

    #[test]
    fn integers() {
        for (text, value) in [
            ("-3", Some(-3)),
            ("1e3", Some(1000)),
            ("0", Some(0)),
            ("2147483648", None),
            ("-2147483648", Some(i32::MIN)),
            ("0.5", None),
            ("1e40", None),
        ] {
            assert_eq!(decimal(text).to_i32(), value, "{text}");
        }
    }

    proptest! {
        #[test]
        fn orders_as_integers_do(a in any::<i32>(), b in any::<i32>(), shift in 0usize..8) {
            let write = |n: i32| format!("{n}e-{shift}");
            prop_assert_eq!(decimal(&write(a)).cmp(&decimal(&write(b))), a.cmp(&b));
            prop_assert_eq!(decimal(&a.to_string()).to_i32(), Some(a));
        }

        #[test]
        fn no_text_panics(text in "\\PC{0,12}|[-+0-9eE.,]{0,12}") {
            let _ = Decimal::parse(&text).map(|d| d.to_i32());
        }
    }
}
