//! Dumps the shelf.
fn main() {
    let shelf = trysquare::catalog::Shelf::new();
    let args: Vec<u64> = std::env::args().skip(1).map(|a| a.parse().unwrap()).collect();
    let t = args[0] as u32;
    let all = std::time::Instant::now();
    for n in args[1]..=args[2] {
        let start = std::time::Instant::now();
        let parents = shelf.parents(n, t);
        let took = start.elapsed();
        if parents.is_empty() {
            continue;
        }
        println!("{n}: {} parents, {:?}, variants {}", parents.len(), took, shelf.variants(n, t).len());
        for p in parents.iter() {
            println!("   {}   <- {}", p.bag, p.recipe);
        }
    }
    println!("total {:?}", all.elapsed());
}
