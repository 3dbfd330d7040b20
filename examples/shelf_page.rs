//! Prints the page `catalog/SHELF.md`: `cargo run --release --example shelf_page > catalog/SHELF.md`.

use trysquare::catalog::{Shelf, page};

fn main() {
    print!("{}", page(&Shelf::new(), 100));
}
