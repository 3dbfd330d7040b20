//! The generated page of mixes beyond the published ones known here is up to date.

use trysquare::catalog::{Shelf, beyond_page};

/// The page is made again, which builds and judges every array on it.
#[test]
fn the_page_is_what_its_first_line_makes() {
    let made = beyond_page(&Shelf::new()).unwrap();
    let kept = include_str!("../catalog/BEYOND.md");
    if let Some((n, (a, b))) = made.lines().zip(kept.lines()).enumerate().find(|(_, (a, b))| a != b) {
        panic!("line {}: run the command of the first line\n made: {a}\n kept: {b}", n + 1);
    }
    assert_eq!(made.len(), kept.len(), "run the command of the first line");
}
