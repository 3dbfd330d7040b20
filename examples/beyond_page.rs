//! Prints the page `catalog/BEYOND.md`: `cargo run --release --example beyond_page > catalog/BEYOND.md`.

use trysquare::catalog::{Shelf, beyond_page};

fn main() -> Result<(), String> {
    print!("{}", beyond_page(&Shelf::new())?);
    Ok(())
}
