use super::*;
use crate::floor::Effort;

#[test]
fn numbers() {
    for (order, runs, t) in [
        (vec![2; 11], 12, 2),
        (vec![3; 8], 18, 2),
        (vec![2; 15], 16, 2),
        (vec![2; 6], 20, 2),
        (vec![3; 3], 27, 2),
        (vec![3; 5], 27, 3),
        (vec![2; 12], 24, 3),
        (vec![3; 5], 54, 3),
    ] {
        let start = std::time::Instant::now();
        let c = classes(&order, runs, t, &mut Effort::unlimited()).unwrap();
        eprintln!("{runs} {t} {order:?}: {:?} {:?}", c.numbers(), start.elapsed());
    }
}
