//! The field tables against the PyPI library `galois`, by committed fixtures whose first line
//! names the command that made them.

use sha2::{Digest, Sha256};
use trysquare::algebra::Field;

const DIGESTS: &str = include_str!("fixtures/field_digests.txt");
const TABLES: &str = include_str!("fixtures/field_tables.txt");

fn digest(entries: impl Iterator<Item = u16>) -> String {
    let mut hash = Sha256::new();
    let mut bytes = Vec::new();
    for e in entries {
        bytes.extend_from_slice(&e.to_le_bytes());
        if bytes.len() >= 1 << 16 {
            hash.update(&bytes);
            bytes.clear();
        }
    }
    hash.update(&bytes);
    hash.finalize().iter().map(|b| format!("{b:02x}")).collect()
}

fn numbers<T: std::str::FromStr>(text: &str, separator: char) -> Vec<T> {
    text.split(separator).map(|n| n.parse().ok().expect("a number")).collect()
}

#[test]
fn moduli_generators_and_whole_tables_agree_with_galois() {
    assert!(DIGESTS.starts_with("# made by: python3 tests/fixtures/make_fields.py"));
    let mut orders = Vec::new();
    for line in DIGESTS.lines().filter(|l| !l.starts_with('#')) {
        let [q, p, m, modulus, generator, add, mul, inv] = line.split(' ').collect::<Vec<_>>()[..] else {
            panic!("eight entries in {line:?}")
        };
        let f = Field::new(q.parse().unwrap()).unwrap();
        orders.push(f.order());
        assert_eq!((f.characteristic(), f.degree()), (p.parse().unwrap(), m.parse().unwrap()));
        assert_eq!(f.modulus(), numbers::<u32>(modulus, ','), "GF({q})");
        assert_eq!(f.generator(), generator.parse::<u16>().unwrap(), "GF({q})");
        let all = || f.elements();
        if add == "-" {
            assert!(f.order() > 4096, "only large fields go without tables");
        } else {
            assert_eq!(digest(all().flat_map(|a| all().map(move |b| (a, b))).map(|(a, b)| f.add(a, b))), add);
            assert_eq!(digest(all().flat_map(|a| all().map(move |b| (a, b))).map(|(a, b)| f.mul(a, b))), mul);
        }
        assert_eq!(digest(all().skip(1).filter_map(|a| f.inv(a))), inv, "GF({q})");
    }
    assert!(trysquare::algebra::prime_powers(2, 64).iter().all(|q| orders.contains(q)));
    assert!(orders.contains(&4096) && orders.contains(&65521));
}

#[test]
fn small_tables_agree_entry_by_entry() {
    assert!(TABLES.starts_with("# made by: python3 tests/fixtures/make_fields.py"));
    let mut lines = TABLES.lines().skip(1);
    let mut orders = Vec::new();
    while let Some(head) = lines.next() {
        let f = Field::new(head.strip_prefix("q ").unwrap().parse().unwrap()).unwrap();
        orders.push(f.order());
        let mut row = |name: &str| numbers::<u16>(lines.next().unwrap().strip_prefix(name).unwrap(), ' ');
        for a in f.elements() {
            assert_eq!(row("add "), f.elements().map(|b| f.add(a, b)).collect::<Vec<_>>());
        }
        for a in f.elements() {
            assert_eq!(row("mul "), f.elements().map(|b| f.mul(a, b)).collect::<Vec<_>>());
        }
        assert_eq!(row("inv "), f.elements().filter_map(|a| f.inv(a)).collect::<Vec<_>>());
    }
    assert_eq!(orders, [2, 3, 4, 5, 7, 8, 9]);
}
