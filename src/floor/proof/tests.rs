use super::*;
use crate::floor::{bounds, floor};

fn proof(mix: &str, t: u32) -> Proof {
    floor(&mix.parse().unwrap(), t).unwrap()
}

#[test]
fn every_bound_of_many_mixes_is_accepted() {
    for mix in ["2^1 3^7", "3^8", "4^10", "2^11", "6^4", "5^7", "2^3 4^2 7^1", "3^5", "2^20 3^20 4^20"] {
        for t in 1..=4 {
            for p in bounds(&mix.parse().unwrap(), t).unwrap() {
                p.check().unwrap();
                let json = serde_json::to_string(&p).unwrap();
                let mut again: Proof = serde_json::from_str(&json).unwrap();
                again.mix = p.mix.clone();
                assert_eq!(again, p);
            }
        }
    }
}

#[test]
fn refinements_of_bose_bush_and_bush() {
    // Bose & Bush 1952: at most 7 three-level factors in 18 runs, 4 in 9, 13 in 27.
    assert_eq!(proof("3^7", 2).runs, 18);
    assert_eq!(proof("3^8", 2).runs, 27);
    assert_eq!(proof("3^13", 2).runs, 27);
    // Bush 1952: OA(s^3, k, s, 3) with s odd has k ≤ s + 1.
    assert_eq!(proof("5^6", 3).runs, 125);
    assert_eq!(proof("5^7", 3).runs, 250);
    assert_eq!(proof("4^6", 3).runs, 64);
}

#[test]
fn the_limit_of_bose_bush_against_floating_point() {
    for s in 3u16..20 {
        for index in 1u64..60 {
            let (sf, b) = (f64::from(s), ((index - 1) % u64::from(s - 1)) as f64);
            let mut limit = (index * u64::from(s) * u64::from(s) - 1) / u64::from(s - 1);
            if b > 0.0 {
                let theta = ((1.0 + 4.0 * sf * (sf - 1.0 - b)).sqrt() - (2.0 * sf - 2.0 * b - 1.0)) / 2.0;
                if theta >= 0.0 {
                    limit = limit - theta.floor() as u64 - 1;
                }
            }
            assert!(bose_bush_allows(s, limit, 2, index), "s {s} index {index}");
            assert!(!bose_bush_allows(s, limit + 1, 2, index), "s {s} index {index}");
        }
    }
}

#[test]
fn each_rule_rejects() {
    let good = proof("3^8 2^1", 2);
    good.check().unwrap();
    let broken = |change: &dyn Fn(&mut Proof)| {
        let mut p = good.clone();
        change(&mut p);
        p.check().unwrap_err()
    };
    assert_eq!(broken(&|p| p.version = 0), ProofError::Version(0));
    assert_eq!(broken(&|p| p.version = 3), ProofError::Version(3));
    let mut first = good.clone();
    first.version = 1;
    first.check().unwrap();
    assert_eq!(broken(&|p| p.strength = 0), ProofError::Strength(0));
    assert_eq!(broken(&|p| p.strength = 10), ProofError::Strength(10));
    assert_eq!(broken(&|p| p.divisibility.sets.push(vec![2, 2])), ProofError::Set(vec![2, 2]));
    assert_eq!(broken(&|p| p.divisibility.sets.push(vec![3])), ProofError::Set(vec![3]));
    assert_eq!(broken(&|p| p.divisibility.divisor = 36), ProofError::Divisor(36));
    assert_eq!(broken(&|p| p.divisibility.sets.clear()), ProofError::Divisor(good.divisibility.divisor));
    assert_eq!(broken(&|p| p.runs += 1), ProofError::Runs { claimed: good.runs + 1, given: good.runs });
    let claims = |bound: Bound| broken(&move |p| p.bound = bound.clone());
    assert_eq!(
        claims(Bound::BoseBush { levels: 3, factors: 8, least: 28 }),
        ProofError::Least { claimed: 28, given: 27 }
    );
    assert!(matches!(claims(Bound::BoseBush { levels: 3, factors: 9, least: 27 }), ProofError::Subject(_)));
    assert!(matches!(claims(Bound::Bush { levels: 5, factors: 8, least: 50 }), ProofError::Subject(_)));
    assert_eq!(
        claims(Bound::Bush { levels: 3, factors: 4, least: 18 }),
        ProofError::Least { claimed: 18, given: 9 }
    );
    assert_eq!(
        claims(Bound::Rao { strength: 2, aside: None, least: 19 }),
        ProofError::Least { claimed: 19, given: 18 }
    );
    assert!(matches!(claims(Bound::Rao { strength: 3, aside: Some(2), least: 20 }), ProofError::Subject(_)));
    assert!(matches!(claims(Bound::Rao { strength: 1, aside: None, least: 2 }), ProofError::Subject(_)));
    assert!(matches!(claims(Bound::Rao { strength: 1, aside: Some(5), least: 5 }), ProofError::Subject(_)));
}

#[test]
fn a_cut_proof_is_incomplete() {
    let json = serde_json::to_string(&proof("3^8 2^1", 2)).unwrap();
    for end in 0..json.len() {
        assert!(serde_json::from_str::<Proof>(&json[..end]).is_err());
    }
}
