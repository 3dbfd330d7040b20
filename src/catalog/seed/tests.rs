use std::collections::{BTreeMap, BTreeSet};
use std::fmt::Write;

use proptest::prelude::*;
use sha2::{Digest, Sha256};

use super::*;
use crate::algebra::{AbelianGroup, Field, prime_powers};
use crate::construct::compose::testing::has_strength;
use crate::construct::hadamard::{kronecker, miyamoto, paley_one, paley_two, sylvester};
use crate::verify::{Demand, certify};

type Places = Vec<Vec<Option<u16>>>;

fn all() -> Vec<Seed> {
    names().map(|n| find(n).unwrap()).collect()
}

fn sha256(text: &str) -> String {
    Sha256::digest(text).iter().fold(String::new(), |mut out, byte| {
        write!(out, "{byte:02x}").unwrap();
        out
    })
}

fn lines<T: ToString>(rows: usize, columns: usize, blank: &str, cell: impl Fn(usize, usize) -> T) -> String {
    (0..rows)
        .map(|i| (0..columns).map(|j| cell(i, j).to_string()).collect::<Vec<_>>().join(blank) + "\n")
        .collect()
}

/// The columns of the quasi-difference matrix, as FORMAT.md expands them, with its group and u.
fn quasi_difference_matrix(kind: &SeedKind) -> Option<(AbelianGroup, usize, Places)> {
    match kind {
        SeedKind::VVector { m, t, vector } => {
            let (rows, field) = (usize::from(*m) + 2, Field::new(u32::from(m * t + 1)).unwrap());
            let entry = |at: usize, factor| vector.get(at).map(|&a| field.mul(factor, a));
            let mut columns = Places::new();
            for j in 0..u32::from(*t) {
                let factor = field.pow(field.generator(), u32::from(*m) * j);
                columns.extend((0..rows).map(|i| (0..rows).map(|r| entry((r + i) % rows, factor)).collect()));
            }
            columns.push(vec![Some(0); rows]);
            let p = field.characteristic() as u16;
            Some((AbelianGroup::elementary(p, field.degree()).unwrap(), usize::from(*t), columns))
        }
        SeedKind::QuasiDifference { group, empty, permutation, columns: base } => {
            let step = |of: &[u16]| -> Vec<u16> { of.iter().map(|&i| permutation[i as usize]).collect() };
            let identity: Vec<u16> = (0..permutation.len() as u16).collect();
            let mut columns = Places::new();
            for column in base {
                let mut power = identity.clone();
                loop {
                    columns.push(power.iter().map(|&i| column[i as usize]).collect());
                    power = step(&power);
                    if power == identity {
                        break;
                    }
                }
            }
            Some((AbelianGroup::new(group).unwrap(), usize::from(*empty), columns))
        }
        _ => None,
    }
}

fn check_quasi_difference(name: &str, group: &AbelianGroup, empty: usize, columns: &Places) {
    let rows = columns[0].len();
    let n = group.order() as usize;
    assert_eq!(columns.len(), n + 2 * empty, "{name}: λ(n − 1 + 2u) + μ columns");
    for column in columns {
        assert!(column.iter().filter(|e| e.is_none()).count() <= 1, "{name}");
    }
    for i in 0..rows {
        assert_eq!(columns.iter().filter(|c| c[i].is_none()).count(), empty, "{name}");
        for k in 0..i {
            let mut differences: Vec<u16> =
                columns.iter().filter_map(|c| Some(group.sub(c[i]?, c[k]?))).collect();
            differences.sort_unstable();
            assert!(differences.into_iter().eq(0..n as u16), "{name}: rows {k} and {i}");
        }
    }
}

/// Builds every seed, checks it by its definition and compares the digest.
#[test]
fn every_seed_is_what_it_says() {
    for seed in all() {
        let name = &seed.name;
        let text = if let Some(scheme) = seed.scheme() {
            let d = scheme.unwrap();
            assert!(d.is_difference_scheme());
            lines(d.rows(), d.columns(), " ", |i, j| d.entry(i, j))
        } else if let Some(matrix) = seed.hadamard() {
            let h = matrix.unwrap();
            assert!(h.is_hadamard(), "{name}");
            lines(h.order(), h.order(), "", |i, j| if h.entry(i, j) > 0 { '+' } else { '-' })
        } else if let Some(recipe) = seed.kind.recipe() {
            let array = recipe.build().unwrap();
            let strength = recipe.strength() as usize;
            if array.runs() <= 256 {
                assert!(has_strength(&array, strength), "{name}");
            }
            assert!(certify(&array, &Demand::strength(strength)).unwrap().certificate.strength >= strength);
            lines(array.runs(), array.factors(), " ", |i, j| array.get(i, j))
        } else {
            let (group, empty, columns) = quasi_difference_matrix(&seed.kind).unwrap();
            check_quasi_difference(name, &group, empty, &columns);
            let built = seed.quasi_difference().unwrap().unwrap();
            assert_eq!((built.group(), built.columns()), (&group, &columns[..]), "{name}");
            lines(columns[0].len(), columns.len(), " ", |i, j| {
                columns[j][i].map_or_else(|| "-".to_owned(), |e| e.to_string())
            })
        };
        assert_eq!(sha256(&text), seed.digest, "{name}");
        let from = &seed.source;
        assert!(
            from.starts_with("computed for this project: ") || from.bytes().any(|b| b.is_ascii_digit()),
            "{name}: the source names its year or how it was computed"
        );
    }
}

/// The definition of V(m, t) itself: for k = 1..m the differences a_{i+k} − a_i, indices modulo
/// m + 2, lie in all m cyclotomic classes of order m.
#[test]
fn v_vectors_by_their_definition() {
    for seed in all() {
        let SeedKind::VVector { m, t, vector } = &seed.kind else { continue };
        let (m, field) = (usize::from(*m), Field::new(u32::from(m * t + 1)).unwrap());
        for k in 1..=m {
            let classes: Vec<usize> = (0..m + 2)
                .filter_map(|i| Some(field.sub(*vector.get((i + k) % (m + 2))?, *vector.get(i)?)))
                .map(|d| field.log(d).unwrap() as usize % m)
                .collect();
            assert_eq!(classes.len(), m);
            assert_eq!(classes.into_iter().collect::<BTreeSet<_>>().len(), m, "{} k = {k}", seed.name);
        }
    }
}

#[test]
fn the_list_equals_the_folder() {
    let folder = std::path::Path::new(env!("CARGO_MANIFEST_DIR")).join("catalog");
    let mut found: Vec<String> = std::fs::read_dir(folder)
        .unwrap()
        .map(|entry| entry.unwrap().file_name().into_string().unwrap())
        .filter(|file| ![".md", ".txt", ".json"].iter().any(|end| file.ends_with(end)))
        .collect();
    found.sort();
    let listed: Vec<String> = names().map(|n| format!("{n}.seed")).collect();
    assert_eq!(listed, found);
    assert!(listed.windows(2).all(|w| w[0] < w[1]), "`find` needs the names ascending");
    for seed in all() {
        assert_eq!(find(&seed.name).as_ref(), Some(&seed), "the name in the file is the file's");
    }
    assert_eq!(find("no-such-seed"), None);
}

#[test]
fn lookups_agree_with_the_seeds() {
    let mut count = (0, 0);
    for entry in schemes() {
        let d = find(entry.name).unwrap().scheme().unwrap().unwrap();
        assert_eq!((d.rows(), d.columns(), d.order()), (entry.rows, entry.columns, entry.order));
        count.0 += 1;
    }
    for entry in hadamard_orders() {
        assert_eq!(find(entry.name).unwrap().hadamard().unwrap().unwrap().order(), entry.order);
        count.1 += 1;
    }
    assert_eq!(count.0, all().iter().filter(|s| s.scheme().is_some()).count());
    assert_eq!(count.1, all().iter().filter(|s| s.hadamard().is_some()).count());
    assert_eq!(count, (21, 44));
    for entry in quasi_differences() {
        let d = find(entry.name).unwrap().quasi_difference().unwrap().unwrap();
        assert_eq!((d.group().order() as usize, d.rows(), d.empty()), (entry.order, entry.rows, entry.empty));
    }
}

#[test]
fn a_seed_cut_at_any_byte_is_refused() {
    for name in [
        "scheme-06-06-03",
        "circulants-007",
        "turyn-016",
        "v-vector-02-03",
        "quasi-difference-19-06-01",
        "subspaces-0064-2-8x6-4x7",
        "flats-0054-3-3x5-2x1",
        "orbits-0012-2-3x1-2x4",
    ] {
        let text = files::FILES.iter().find(|f| f.0 == name).unwrap().1;
        for cut in 0..text.len() {
            assert_eq!(
                text[..cut].parse::<Seed>().unwrap_err().reason,
                SeedReason::Incomplete,
                "{name} {cut}"
            );
        }
    }
}

/// The seed `name` with one line replaced (lines from 1).
fn changed(name: &str, line: usize, with: &str) -> SeedError {
    let text = files::FILES.iter().find(|f| f.0 == name).unwrap().1;
    let new: Vec<&str> =
        text.lines().enumerate().map(|(i, l)| if i + 1 == line { with } else { l }).collect();
    (new.join("\n") + "\n").parse::<Seed>().unwrap_err()
}

#[test]
fn every_rule_of_the_format_refuses() {
    use SeedReason::*;
    let (scheme, circulants, turyn) = ("scheme-06-06-03", "circulants-007", "turyn-016");
    let (vector, quasi) = ("v-vector-02-03", "quasi-difference-19-06-01");
    let (subspaces, flats) = ("subspaces-0064-2-8x6-4x7", "flats-0054-3-3x5-2x1");
    let (orbits, turned) = ("orbits-0012-2-3x1-2x4", "orbits-0024-2-6x1-2x14");
    let number = |text: &str| Number(text.to_owned());
    let cases = [
        (scheme, 1, "title: x", Key("name")),
        (scheme, 1, "name:x", Key("name")),
        (scheme, 1, "", Key("name")),
        (scheme, 1, "name: ", Empty("name")),
        (scheme, 1, "name:", Empty("name")),
        (scheme, 1, "name: Scheme", Name),
        (scheme, 1, "name: a b", Name),
        (scheme, 2, "kind: scheme", Kind("scheme".to_owned())),
        (scheme, 2, "kind: turyn-type", Key("length")),
        (scheme, 3, "columns: 6", Key("rows")),
        (scheme, 3, "rows: 0", number("0")),
        (scheme, 3, "rows: +6", number("+6")),
        (scheme, 3, "rows: 65536", number("65536")),
        (scheme, 3, "rows: 6 ", number("6 ")),
        (scheme, 3, "rows: 5", Entries { expected: 5, found: 6 }),
        (scheme, 4, "columns: 5", End),
        (scheme, 4, "columns: 7", Entries { expected: 6, found: 1 }),
        (scheme, 5, "group: 1", Group),
        (scheme, 5, "group: 4", Group),
        (scheme, 5, "group: 300 300", Group),
        (scheme, 5, "group: 3  3", number("")),
        (scheme, 5, "group: 2", number("2")),
        (scheme, 6, "origin: x", Key("source")),
        (scheme, 6, "source:  ", Empty("source")),
        (scheme, 7, "digest: 00", Digest),
        (scheme, 7, "digest: ABCDEFABCDEFABCDEFABCDEFABCDEFABCDEFABCDEFABCDEFABCDEFABCDEFABCD", Digest),
        (scheme, 8, "data:", Body),
        (scheme, 9, "0 0 0 0 0", Entries { expected: 6, found: 5 }),
        (scheme, 9, "0 0 0 0 0 3", number("3")),
        (scheme, 9, "0 0 0 0 0 -", number("-")),
        (scheme, 9, "0 0 0 0 0 x", number("x")),
        (scheme, 15, "0 0 0 0 0 0", End),
        (scheme, 15, "end\nend", Trailing),
        (scheme, 15, "end\n", Trailing),
        (circulants, 4, "multipliers: 6", Multipliers),
        (circulants, 4, "multipliers: 6 1", Multipliers),
        (circulants, 4, "multipliers: 1 1 6", Multipliers),
        (circulants, 4, "multipliers: 1 2", Multipliers),
        (circulants, 4, "multipliers: 1 7", Multipliers),
        (circulants, 4, "multipliers: 1 2 4", Orbits),
        (circulants, 8, "+++--+-", Orbits),
        (circulants, 8, "+++--+", Entries { expected: 7, found: 6 }),
        (circulants, 8, "+++0-++", Sign('0')),
        (turyn, 10, "+", Entries { expected: 15, found: 1 }),
        (vector, 4, "t: 7", Field),
        (vector, 4, "t: 65535", Field),
        (vector, 8, "0 1 7", number("7")),
        (vector, 8, "0 1 4 2", Entries { expected: 3, found: 4 }),
        (quasi, 7, "permutation: 2 0 1 4 5", Permutation(6)),
        (quasi, 7, "permutation: 2 0 1 4 5 5", Permutation(6)),
        (quasi, 7, "permutation: 2 0 1 4 5 6", Permutation(6)),
        (quasi, 11, "- 0 0 7 1 19", number("19")),
        (subspaces, 3, "order: 6", Space),
        (subspaces, 4, "dimension: 16", Space),
        (subspaces, 4, "dimension: 2", Entries { expected: 2, found: 3 }),
        (subspaces, 5, "strength: 0", number("0")),
        (subspaces, 6, "subspaces: 12", End),
        (subspaces, 10, "1 2 64", number("64")),
        (subspaces, 10, "1 0", number("0")),
        (subspaces, 10, "1 2 4 8 16 32 1", Entries { expected: 6, found: 7 }),
        (flats, 3, "prime: 4", Space),
        (flats, 4, "levels: 2 3 3 3 3 1", Levels),
        (flats, 4, "levels: 2 3 3 3 3", Entries { expected: 5, found: 6 }),
        (flats, 6, "directions: 17", Space),
        (flats, 7, "strength: x", number("x")),
        (flats, 11, "2 0 0 0 0 0", number("2")),
        (flats, 12, "0 1 0 1 2 3", number("3")),
        (orbits, 3, "group: 0", Group),
        (orbits, 4, "orbits: 0", number("0")),
        (orbits, 5, "levels: 3 2 2 2 1", Levels),
        (orbits, 5, "levels: 3 2 2 2", End),
        (orbits, 6, "strength: x", number("x")),
        (orbits, 10, "2 1 0 0 0 2 0 1 2 1 1 3", number("3")),
        (orbits, 10, "2 1 0 0 0 2 0 1 2 1 1", Entries { expected: 12, found: 11 }),
        (turned, 10, "0 1 2 3 4 5 0 1 2 3 4 5", Entries { expected: 13, found: 12 }),
    ];
    for (name, line, with, reason) in cases {
        assert_eq!(changed(name, line, with).reason, reason, "{name} line {line}: {with:?}");
    }
    let e = changed(scheme, 9, "0 0 0 0 0 3");
    assert_eq!(
        e.to_string(),
        "line 9: \"3\" is not a decimal number that fits here; numbers are separated by one blank"
    );
}

/// With the constructions that need only an order, the seeds reach every Hadamard order up to 400:
/// each is built and judged.
#[test]
fn every_hadamard_order_up_to_400() {
    let mut known: BTreeMap<usize, Hadamard> = BTreeMap::new();
    for k in 0..=8 {
        known.insert(1 << k, sylvester(k).unwrap());
    }
    for q in prime_powers(3, 399) {
        let made = match q % 4 {
            3 => paley_one(q),
            1 if q < 200 => paley_two(q),
            _ => continue,
        };
        let h = made.unwrap();
        known.entry(h.order()).or_insert(h);
    }
    for entry in hadamard_orders().filter(|e| e.order <= 400) {
        known.entry(entry.order).or_insert_with(|| find(entry.name).unwrap().hadamard().unwrap().unwrap());
    }
    for order in (4..=400).step_by(4) {
        if !known.contains_key(&order) {
            let split = known
                .keys()
                .copied()
                .find(|&a| a > 1 && a < order && order.is_multiple_of(a) && known.contains_key(&(order / a)));
            let product = match split {
                Some(a) => kronecker(&known[&a], &known[&(order / a)]),
                None => miyamoto(order as u32 / 4, known.get(&(order / 4 - 1)).expect("a known order")),
            };
            known.insert(order, product.unwrap_or_else(|e| panic!("order {order}: {e}")));
        }
        let h = &known[&order];
        assert!(h.order() == order && h.is_hadamard(), "order {order}");
    }
}

proptest! {
    /// A seed with one character replaced or one line dropped is read or refused, and what is read is
    /// built or refused: no panic.
    #[test]
    fn no_damaged_seed_panics(which in 0..files::FILES.len(), at in any::<prop::sample::Index>(), c in "[0-9 +:a-z\\n-]", drop: bool) {
        let text = files::FILES[which].1;
        let damaged: String = if drop {
            let lines: Vec<&str> = text.split_inclusive('\n').collect();
            let gone = at.index(lines.len());
            lines.iter().enumerate().filter(|&(i, _)| i != gone).map(|(_, l)| *l).collect()
        } else {
            // By characters: a source may name people with other letters than ASCII has.
            let mut pieces: Vec<String> = text.chars().map(String::from).collect();
            let place = at.index(pieces.len());
            pieces[place] = c;
            pieces.concat()
        };
        match damaged.parse::<Seed>() {
            Ok(seed) => {
                let _ = (seed.scheme(), seed.hadamard(), seed.quasi_difference());
                if let Some(recipe) = seed.kind.recipe() {
                    // Sizes are limited here only so that the test stays fast.
                    let _ = recipe.levels();
                    if recipe.runs().is_ok_and(|n| n <= 1 << 12) {
                        let _ = recipe.build();
                    }
                }
            }
            Err(e) => prop_assert!(!e.to_string().is_empty()),
        }
    }

    #[test]
    fn no_text_panics_as_a_seed(text in "(name: [a-z ]{0,4}\n)?(kind: (v-vector|turyn-type)\n)?([a-z]{1,9}: [0-9 ]{0,6}\n){0,6}.*") {
        prop_assert!(text.parse::<Seed>().is_err());
    }
}
