//! The generated page of the shelf is up to date.

use trysquare::catalog::{Shelf, page};

#[test]
fn the_page_is_what_its_first_line_makes() {
    let made = page(&Shelf::new(), 100);
    let kept = include_str!("../catalog/SHELF.md");
    if let Some((n, (a, b))) = made.lines().zip(kept.lines()).enumerate().find(|(_, (a, b))| a != b) {
        panic!("line {}: run the command of the first line\n made: {a}\n kept: {b}", n + 1);
    }
    assert_eq!(made.len(), kept.len(), "run the command of the first line");
}
