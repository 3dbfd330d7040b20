//! Prints the page `catalog/NEAR.md`: `cargo run --release --example near_page > catalog/NEAR.md`.

fn main() -> Result<(), Box<dyn std::error::Error>> {
    print!("{}", trysquare::hunt::near::page()?);
    Ok(())
}
