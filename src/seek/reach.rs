use crate::catalog::{Bag, Packer, Shelf};

/// The largest number of factors of `levels` levels that stand beside the factors `rest` in exactly
/// `runs` runs at strength 2 or more on the shelf; `None` when not even the others do.
///
/// Cost: some packings into each parent of that many runs.
#[must_use]
pub fn reach(shelf: &Shelf, rest: &[u16], levels: u16, runs: u64, strength: u32) -> Option<u64> {
    let packer = Packer::new(shelf, strength);
    let parents = shelf.parents(runs, strength);
    let fits = |factors: u64| {
        let mut wanted = Bag::of_levels(rest);
        wanted.add(levels, u32::try_from(factors).ok()?);
        let alone =
            wanted.factors() <= 1 && wanted.entries().iter().all(|e| runs.is_multiple_of(u64::from(e.0)));
        (alone || parents.iter().any(|p| packer.fit(&wanted, &p.bag).is_some())).then_some(())
    };
    fits(0)?;
    let (mut low, mut high) = (0u64, 1u64);
    while fits(high).is_some() {
        low = high;
        high *= 2;
    }
    while high - low > 1 {
        let middle = low + (high - low) / 2;
        if fits(middle).is_some() { low = middle } else { high = middle }
    }
    Some(low)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn of_small_arrays() {
        let shelf = Shelf::new();
        assert_eq!(reach(&shelf, &[3], 2, 12, 2), Some(4));
        assert_eq!(reach(&shelf, &[], 2, 12, 2), Some(11));
        assert_eq!(reach(&shelf, &[3, 3], 2, 12, 2), None);
        assert_eq!(reach(&shelf, &[], 3, 27, 3), Some(4));
    }
}
