//! How long the constructions take, unjudged.

use std::hint::black_box;
use std::time::Duration;

use criterion::{Criterion, criterion_group, criterion_main};
use trysquare::algebra::Field;
use trysquare::catalog::Shelf;
use trysquare::construct::{field, hadamard, scheme, strength3};

fn families(criterion: &mut Criterion) {
    let mut group = criterion.benchmark_group("build");
    group.sample_size(10).warm_up_time(Duration::from_millis(300)).measurement_time(Duration::from_secs(1));
    group.bench_function("field of order 4096", |b| b.iter(|| Field::new(black_box(4096))));
    group.bench_function("Rao–Hamming 1024: 2^1023", |b| b.iter(|| field::rao_hamming(2, black_box(10))));
    group.bench_function("Rao–Hamming 729: 3^364", |b| b.iter(|| field::rao_hamming(3, black_box(6))));
    group.bench_function("Bush 4096: 16^18", |b| b.iter(|| field::bush(16, black_box(3))));
    group.bench_function("Addelman–Kempthorne 1458: 3^727", |b| {
        b.iter(|| field::addelman_kempthorne(3, black_box(6)));
    });
    group.bench_function("Paley I of order 1020", |b| b.iter(|| hadamard::paley_one(black_box(1019))));
    group.bench_function("scheme D(64, 64, 8), developed", |b| {
        b.iter(|| scheme::field_table(2, black_box(6), 3).and_then(|d| scheme::developed_with_rows(&d)));
    });
    group.bench_function("eight runs per level 4088: 511·2^6", |b| {
        b.iter(|| strength3::eight_runs_per_level(black_box(511)));
    });
    group.finish();
}

fn recipes(criterion: &mut Criterion) {
    let shelf = Shelf::new();
    let recipes: Vec<_> =
        (2..=100).flat_map(|n| shelf.parents(n, 2).to_vec()).map(|p| p.recipe.clone()).collect();
    let mut group = criterion.benchmark_group("recipes");
    group.sample_size(10).warm_up_time(Duration::from_millis(300)).measurement_time(Duration::from_secs(1));
    group.bench_function("every parent of strength 2 up to 100 runs", |b| {
        b.iter(|| recipes.iter().map(|r| r.build().map_or(0, |a| a.runs())).sum::<usize>());
    });
    group.finish();
}

criterion_group!(benches, families, recipes);
criterion_main!(benches);
