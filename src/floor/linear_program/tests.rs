use super::*;
use crate::floor::proof::Proof;
use crate::floor::{Effort, divisibility};

fn runs(mix: &str, t: u32) -> u64 {
    let mix: Mix = mix.parse().unwrap();
    let divisor = divisibility(&mix, t).unwrap();
    let bound = linear_program(&mix, t, divisor.divisor, &mut Effort::unlimited()).unwrap();
    let proof = Proof::new(mix, t, divisor, bound).unwrap();
    proof.check().unwrap();
    println!("{}", serde_json::to_string(&proof).unwrap());
    proof.runs
}

#[test]
fn floors_of_the_linear_program() {
    // Sloane & Stufken 1996 and Hedayat, Sloane & Stufken 1999, ch. 4 and 9 [memory].
    assert_eq!(runs("3^8", 2), 27);
    assert_eq!(runs("4^10", 2), 48);
    assert_eq!(runs("3^4 6^5", 2), 72);
    assert_eq!(runs("3^5", 3), 54);
}

#[test]
fn a_large_one() {
    let start = std::time::Instant::now();
    assert_eq!(runs("2^20 3^20 4^20", 2), 144);
    println!("{:?}", start.elapsed());
}
