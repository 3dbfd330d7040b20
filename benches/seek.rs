//! How long an answer takes: from nothing, and on a shelf that has been used before.

use std::hint::black_box;
use std::time::Duration;

use criterion::{BenchmarkId, Criterion, criterion_group, criterion_main};
use trysquare::catalog::Shelf;
use trysquare::seek::{Request, seek, seek_on};

fn seeking(criterion: &mut Criterion) {
    let mut group = criterion.benchmark_group("seek");
    group.sample_size(10).warm_up_time(Duration::from_millis(300)).measurement_time(Duration::from_secs(1));
    let shelf = Shelf::new();
    for (mix, strength) in [
        ("2^1 3^7", 2),
        ("2^11 3^12", 2),
        ("6^6 12", 2),
        ("2^99", 2),
        ("2^3 3^4 4^2", 2),
        ("10^11", 2),
        ("2^1000", 2),
        ("4 6 2^2", 3),
        ("4^17", 3),
        ("5^3 6^3", 3),
    ] {
        let request = Request::new(mix.parse().expect("a mix")).strength(strength);
        let name = format!("{mix} strength {strength}");
        group.bench_with_input(BenchmarkId::new("cold", &name), &request, |b, r| {
            b.iter(|| seek(black_box(r)));
        });
        group.bench_with_input(BenchmarkId::new("warm", &name), &request, |b, r| {
            b.iter(|| seek_on(&shelf, black_box(r)));
        });
    }
    group.finish();
}

fn shelves(criterion: &mut Criterion) {
    let mut group = criterion.benchmark_group("shelf");
    group.sample_size(10).warm_up_time(Duration::from_millis(300)).measurement_time(Duration::from_secs(1));
    for strength in [2, 3] {
        group.bench_function(BenchmarkId::new("every parent up to 100 runs", strength), |b| {
            b.iter(|| {
                let shelf = Shelf::new();
                (2..=100).map(|n| shelf.parents(n, strength).len()).sum::<usize>()
            });
        });
    }
    group.finish();
}

criterion_group!(benches, seeking, shelves);
criterion_main!(benches);
