use super::*;
use crate::floor::Effort;

#[test]
#[ignore = "prints"]
fn nones() {
    for (mix, runs, t) in [
        ("3^1 2^5", 12, 2),
        ("6^1 2^3", 12, 2),
        ("3^8", 18, 2),
        ("5^1 2^9", 20, 2),
        ("10^1 2^3", 20, 2),
        ("14^1 2^3", 28, 2),
        ("3^1 2^5", 24, 3),
        ("3^5", 27, 3),
        ("5^1 2^7", 40, 3),
        ("4^1 6^1 2^3", 48, 3),
    ] {
        let start = std::time::Instant::now();
        let d = decide(&mix.parse().unwrap(), runs, t, None, &mut Effort::unlimited()).unwrap();
        let Decision::None(r) = d else { panic!("{mix} exists") };
        let Record::Columns(c) = &r else { panic!() };
        let n: Vec<u64> = c.stages.iter().map(|s| s.classes).collect();
        eprintln!("{runs} {t} {mix}: {n:?} {:?} {} bytes", start.elapsed(), r.to_json().len());
        r.replay(&mut Effort::unlimited()).unwrap();
        assert_eq!(Record::from_json(&r.to_json()).unwrap(), r);
        eprintln!("{:?}", start.elapsed());
    }
}
