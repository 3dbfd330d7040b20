//! How long the judges take.

use std::hint::black_box;

use criterion::{BenchmarkId, Criterion, criterion_group, criterion_main};
use trysquare::array::Array;
use trysquare::verify::counting::find_violation;
use trysquare::verify::distance::dual_distribution;
use trysquare::verify::{Demand, certify};

/// The runs of GF(2)^n under the first `k` functionals whose sets of `strength` columns are
/// independent: all for strength 2, those of odd weight in the first coordinate for strength 3.
fn two_level(n: u32, k: usize, strength: usize) -> Array {
    let functionals: Vec<usize> = (1..1 << n).filter(|f| strength == 2 || f & 1 == 1).take(k).collect();
    let symbol = |i: usize, j: usize| ((i & functionals[j]).count_ones() % 2) as u16;
    Array::from_fn(1 << n, vec![2; functionals.len()], symbol).expect("a small array")
}

/// p² runs of p + 1 factors with p levels, p prime.
fn prime_levels(p: u16) -> Array {
    let s = usize::from(p);
    let symbol = |i: usize, j: usize| {
        let (x, y) = (i / s, i % s);
        (if j == s { y } else { (x + j * y) % s }) as u16
    };
    Array::from_fn(s * s, vec![p; s + 1], symbol).expect("a small array")
}

fn judges(criterion: &mut Criterion) {
    let arrays = [
        ("49: 7^8", prime_levels(7), 2),
        ("961: 31^32", prime_levels(31), 2),
        ("64: 2^63", two_level(6, 63, 2), 2),
        ("256: 2^128 strength 3", two_level(8, 128, 3), 3),
        ("1024: 2^1000", two_level(10, 1000, 2), 2),
    ];
    let mut group = criterion.benchmark_group("judge");
    group.sample_size(10);
    for (name, array, strength) in &arrays {
        group.bench_with_input(BenchmarkId::new("counting", name), array, |b, a| {
            b.iter(|| find_violation(black_box(a), *strength));
        });
        group.bench_with_input(BenchmarkId::new("distance", name), array, |b, a| {
            b.iter(|| dual_distribution(black_box(a), *strength));
        });
        group.bench_with_input(BenchmarkId::new("certify", name), array, |b, a| {
            b.iter(|| certify(black_box(a), &Demand::strength(*strength)));
        });
    }
    // What counting would need 178 million column sets for.
    let large = two_level(11, 1024, 3);
    group.bench_function("certify/2048: 2^1024 strength 3", |b| {
        b.iter(|| certify(black_box(&large), &Demand::strength(3)));
    });
    group.finish();
}

criterion_group!(benches, judges);
criterion_main!(benches);
