use super::*;
use crate::construct::orbit_array;
use crate::mix::Mix;
use crate::verify::{Demand, Verdict, certify};

fn hunt(runs: u32, mix: &str, group: &[u16], strength: u32) -> ExactHunt {
    let levels = mix.parse::<Mix>().unwrap().levels().to_vec();
    ExactHunt { runs, levels, strength, group: group.to_vec(), most_candidates: 1 << 20 }
}

/// Whether the array exists; what is found is judged.
fn exists(runs: u32, mix: &str, group: &[u16], strength: u32) -> bool {
    let request = hunt(runs, mix, group, strength);
    match decide(&request, &mut Effort::unlimited()).unwrap() {
        Outcome::Found(columns) => {
            let array = orbit_array(group, &columns).unwrap();
            assert_eq!(array.runs(), runs as usize);
            assert_eq!(array.mix().counts(), mix.parse::<Mix>().unwrap().counts());
            let judgement = certify(&array, &Demand::strength(strength as usize)).unwrap();
            assert_eq!(judgement.verdict, Verdict::Orthogonal, "{runs}: {mix}");
            true
        }
        Outcome::Impossible => false,
        Outcome::GaveUp => panic!("{runs}: {mix} has an answer"),
    }
}

#[test]
#[ignore = "timing"]
fn timing() {
    for (runs, mix, group, t) in [
        (12, "3 2^4", &[][..], 2),
        (12, "3 2^5", &[], 2),
        (12, "6 2^2", &[], 2),
        (12, "6 2^3", &[], 2),
        (12, "2^11", &[], 2),
        (18, "3^7", &[], 2),
        (18, "3^7", &[3], 2),
        (18, "3^8", &[], 2),
        (18, "3^8", &[3], 2),
        (18, "2 3^7", &[], 2),
        (18, "2 3^7", &[3], 2),
        (20, "5 2^8", &[], 2),
        (20, "5 2^9", &[], 2),
        (24, "3 2^4", &[], 3),
        (24, "3 2^5", &[], 3),
        (24, "4 2^11 6", &[2], 2),
        (16, "2^9", &[], 3),
        (20, "2^19", &[], 2),
    ] {
        let start = std::time::Instant::now();
        let yes = exists(runs, mix, group, t);
        println!("{runs}: {mix} {group:?} strength {t}: {yes} in {:?}", start.elapsed());
    }
}
