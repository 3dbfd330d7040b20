//! Corrupted proofs: none is accepted unless what it claims is true.

use serde_json::Value;
use trysquare::floor::{Effort, Proof, QUICK, divisibility, floor, linear_program, raise};
use trysquare::hunt::Random;
use trysquare::mix::Mix;

/// A proof of every kind.
fn proofs() -> Vec<Proof> {
    let quick = || Effort::new(QUICK, &|| false);
    let mut all = Vec::new();
    for (text, strength) in [
        ("3 2^5", 2),
        ("6 2^3", 2),
        ("5 2^9", 2),
        ("3 2^5", 3),
        ("4 6 2^3", 3),
        ("3^8", 2),
        ("2^11 3", 2),
        ("14 2^3", 2),
        ("3^5", 3),
        ("2^12", 4),
    ] {
        let mix: Mix = text.parse().unwrap();
        all.push(raise(floor(&mix, strength).unwrap(), 200, &mut quick()).unwrap());
        let divisor = divisibility(&mix, strength).unwrap();
        let bound = linear_program(&mix, strength, 1, &mut quick()).unwrap();
        all.push(Proof::new(mix, strength, divisor, bound).unwrap());
    }
    all
}

/// Every number and every text in a value.
fn leaves<'a>(value: &'a mut Value, out: &mut Vec<&'a mut Value>) {
    match value {
        Value::Array(items) => items.iter_mut().for_each(|v| leaves(v, out)),
        Value::Object(fields) => fields.values_mut().for_each(|v| leaves(v, out)),
        leaf => out.push(leaf),
    }
}

fn corrupt(text: &str, random: &mut Random) -> String {
    if random.below(4) == 0 {
        // A byte of the text becomes another one, or the text ends early.
        let at = random.below(text.len());
        let mut bytes = text.as_bytes().to_vec();
        match random.below(2) {
            0 => bytes.truncate(at),
            _ => bytes[at] = b"0123456789-,[]{}\"ab"[random.below(19)],
        }
        return String::from_utf8_lossy(&bytes).into_owned();
    }
    let mut value: Value = serde_json::from_str(text).unwrap();
    for _ in 0..=random.below(2) {
        let mut all = Vec::new();
        leaves(&mut value, &mut all);
        let (a, b) = (random.below(all.len()), random.below(all.len()));
        if random.below(3) == 0 {
            let (x, y) = (all[a].clone(), all[b].clone());
            *all[a] = y;
            *all[b] = x;
        } else if let Some(n) = all[a].as_i64() {
            let highest = if random.below(4) == 0 { 63 } else { 5 };
            let bit = 1i64 << random.below(highest);
            *all[a] = Value::from(if random.below(2) == 0 { n ^ bit } else { n.wrapping_add(1) });
        } else {
            *all[a] = all[b].clone();
        }
    }
    value.to_string()
}

#[test]
fn no_corrupted_proof_is_accepted_unless_it_is_true() {
    let texts: Vec<String> = proofs().iter().map(|p| serde_json::to_string(p).unwrap()).collect();
    for text in &texts {
        serde_json::from_str::<Proof>(text).unwrap().check().unwrap();
        for end in 0..text.len() {
            assert!(serde_json::from_str::<Proof>(&text[..end]).is_err());
        }
    }
    let mut random = Random::new(5);
    let (mut changed, mut unreadable, mut accepted) = (0, 0, 0);
    while changed < 10_000 {
        let text = &texts[random.below(texts.len())];
        let other = corrupt(text, &mut random);
        if other == *text {
            continue;
        }
        changed += 1;
        let Ok(proof) = serde_json::from_str::<Proof>(&other) else {
            unreadable += 1;
            continue;
        };
        if proof.check().is_ok() {
            accepted += 1;
            let mut effort = Effort::new(QUICK, &|| false);
            let again = raise(floor(&proof.mix, proof.strength).unwrap(), proof.runs, &mut effort).unwrap();
            assert!(proof.runs <= again.runs, "{other}");
        }
    }
    println!("{changed} corrupted proofs: {unreadable} unreadable, {accepted} still true");
    assert!(accepted < changed / 5);
}
