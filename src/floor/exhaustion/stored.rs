/// Lists files of `catalog/` with their texts.
macro_rules! files {
    ($($name:literal),* $(,)?) => {
        &[$(($name, include_str!(concat!("../../../catalog/", $name)))),*]
    };
}

/// The stored records: the name of each file in `catalog/`, and its text for
/// [`Record::from_json`](super::Record::from_json).
#[must_use]
pub fn stored() -> &'static [(&'static str, &'static str)] {
    STORED
}

const STORED: &[(&str, &str)] = files![
    "none-0012-2-3x1-2x5.json",
    "none-0012-2-6x1-2x3.json",
    "none-0018-2-3x8.json",
    "none-0020-2-5x1-2x9.json",
    "none-0020-2-10x1-2x3.json",
    "none-0024-2-4x1-3x1-2x14.json",
    "none-0024-2-6x1-2x15.json",
    "none-0024-2-6x1-4x1-2x12.json",
    "none-0024-3-3x1-2x5.json",
    "none-0027-3-3x5.json",
    "none-0028-2-7x1-2x13.json",
    "none-0028-2-14x1-2x3.json",
    "none-0036-2-6x4.json",
    "none-0036-2-18x1-2x3.json",
    "none-0040-3-5x1-2x7.json",
    "none-0048-3-4x1-3x1-2x5.json",
    "none-0048-3-6x1-4x1-2x3.json",
    "none-0054-3-3x5-2x2.json",
    "none-0054-3-3x6.json",
    "none-0054-3-6x1-3x4.json",
    "none-0056-3-7x1-2x7.json",
];

#[cfg(test)]
mod tests {
    use super::*;
    use crate::floor::Effort;
    use crate::floor::exhaustion::latin::{Mates, search};
    use crate::floor::exhaustion::{Decision, Record, decide};
    use crate::mix::Mix;

    /// What makes the stored records again: runs, strength, mix, from how many columns on arrays are
    /// closed, and whether it takes seconds.
    const MADE: &[(u32, u32, &str, Option<u32>, bool)] = &[
        (12, 2, "3^1 2^5", None, false),
        (12, 2, "6^1 2^3", None, false),
        (18, 2, "3^8", None, false),
        (20, 2, "5^1 2^9", None, false),
        (20, 2, "10^1 2^3", None, false),
        (24, 2, "4^1 3^1 2^14", Some(5), true),
        (24, 2, "6^1 2^15", Some(5), true),
        (24, 2, "6^1 4^1 2^12", Some(4), false),
        (24, 3, "3^1 2^5", None, false),
        (27, 3, "3^5", None, false),
        (28, 2, "7^1 2^13", Some(5), true),
        (28, 2, "14^1 2^3", None, false),
        (36, 2, "6^4", None, false),
        (36, 2, "18^1 2^3", None, true),
        (40, 3, "5^1 2^7", None, false),
        (48, 3, "4^1 3^1 2^5", None, true),
        (48, 3, "6^1 4^1 2^3", None, false),
        (54, 3, "3^5 2^2", None, true),
        (54, 3, "3^6", None, true),
        (54, 3, "6^1 3^4", None, false),
        (56, 3, "7^1 2^7", None, true),
    ];

    fn made(runs: u32, strength: u32, mix: &str, close_from: Option<u32>) -> Record {
        let mut effort = Effort::unlimited();
        if mix == "6^4" {
            let Ok(Mates::None(record)) = search(6, &mut effort) else { panic!("order 6 has no mates") };
            return record;
        }
        let mix: Mix = mix.parse().unwrap();
        match decide(&mix, runs, strength, close_from, None, &mut effort) {
            Ok(Decision::None(record)) => record,
            other => panic!("{runs} {strength} {mix}: {other:?}"),
        }
    }

    /// Compares, or writes the files when `TRYSQUARE_REWRITE` is set.
    fn compare(slow: bool) {
        for (i, &(runs, strength, mix, close_from, _)) in MADE.iter().enumerate().filter(|(_, m)| m.4 == slow)
        {
            let start = std::time::Instant::now();
            let record = made(runs, strength, mix, close_from);
            let (name, text) = (record.claim().unwrap().file_name(), record.to_json() + "\n");
            eprintln!("{name}: {:?}", start.elapsed());
            if std::env::var_os("TRYSQUARE_REWRITE").is_some() {
                let folder = std::path::Path::new(env!("CARGO_MANIFEST_DIR")).join("catalog");
                std::fs::write(folder.join(&name), &text).unwrap();
            } else {
                assert_eq!(stored()[i], (name.as_str(), text.as_str()));
                // The slow ones have just been made again: that is what a replay does.
                let effort = &mut Effort::unlimited();
                assert!(slow || Record::from_json(&text).unwrap().replay(effort).is_ok(), "{name}");
            }
        }
    }

    #[test]
    fn the_quick_ones_are_what_the_search_gives_and_replay() {
        compare(false);
    }

    #[test]
    #[ignore = "up to half a minute each"]
    fn the_slow_ones_are_what_the_search_gives() {
        compare(true);
    }

    #[test]
    fn all_are_small_and_pass_the_light_check() {
        assert_eq!(stored().len(), MADE.len());
        for (name, text) in stored() {
            assert!(text.len() < 10_000, "{name}");
            let record = Record::from_json(text).unwrap();
            assert_eq!(record.claim().unwrap().file_name(), *name);
            record.check_light().unwrap();
        }
    }
}
