//! Certificates: what they state, and that a recheck believes none of it.

use std::collections::BTreeMap;

use proptest::prelude::*;
use trysquare::array::Array;
use trysquare::verify::{
    CERTIFICATE_VERSION, Certificate, CertificateError, Demand, Engine, Field, StrengthClaim, Verdict,
    certify, digest, recheck,
};

use super::samples::*;

fn certificate(array: &Array, strength: usize) -> Certificate {
    certify(array, &Demand::strength(strength)).unwrap().certificate
}

/// The fields that a recheck objects to.
fn objections(certificate: &Certificate, array: &Array) -> Vec<Field> {
    let report = recheck(certificate, array).unwrap();
    assert_eq!(report.holds(), report.mismatches.is_empty());
    report.mismatches.into_iter().map(|m| m.field).collect()
}

#[test]
fn a_certificate_states_what_is_true() {
    let array = eighteen();
    let judgement = certify(&array, &Demand::strength(2)).unwrap();
    assert_eq!((judgement.verdict, judgement.demanded, judgement.witness), (Verdict::Orthogonal, 2, None));
    let c = judgement.certificate;
    assert_eq!((c.version, c.runs, c.levels.as_slice()), (CERTIFICATE_VERSION, 18, array.levels()));
    assert_eq!((c.strength, c.strength_claim), (2, StrengthClaim::Exact));
    assert_eq!(c.index, BTreeMap::from([(6, 3), (9, 2)]));
    assert_eq!((c.repeated_runs, c.sha256), (0, digest::sha256(&array)));
    assert_eq!(c.word_length_pattern.unwrap()[..2], ["0", "0"]);
    assert_eq!((c.engines, c.recipe), (vec![Engine::Distance], None));
    assert!(c.engine_version.starts_with("trysquare "));
}

#[test]
fn every_sample_is_certified_and_rechecked() {
    for (name, array, strength) in sample() {
        for demand in [Demand::strength(strength), Demand::strength(strength).thorough(), Demand::strength(1)]
        {
            let judgement = certify(&array, &demand).unwrap();
            assert_eq!(judgement.verdict, Verdict::Orthogonal, "{name}");
            let report = recheck(&judgement.certificate, &array).unwrap();
            assert!(report.holds(), "{name}: {report:?}");
            assert_eq!(report.not_checked, [Field::Engines, Field::EngineVersion, Field::Recipe]);
            assert_eq!(report.engines, [Engine::Counting, Engine::Distance], "{name}");
        }
        if strength < array.factors() {
            let no = certify(&array, &Demand::strength(strength + 1)).unwrap();
            assert_eq!(no.verdict, Verdict::NotOrthogonal, "{name}");
            assert!(no.witness.unwrap().holds_for(&array), "{name}");
            assert_eq!(no.certificate.engines, [Engine::Counting, Engine::Distance]);
            assert!(recheck(&no.certificate, &array).unwrap().holds(), "{name}");
        }
    }
}

/// The 1,000 factors are points of PG(9, 2): strength 2, and three on a line are dependent.
#[test]
fn a_wide_array_is_judged_by_both_engines() {
    let array = linear(2, 10, &points(2, 10)[..1000]);
    let judgement = certify(&array, &Demand::strength(2).thorough()).unwrap();
    let c = judgement.certificate;
    assert_eq!(
        (judgement.verdict, c.strength, c.strength_claim),
        (Verdict::Orthogonal, 2, StrengthClaim::Exact)
    );
    assert_eq!(c.engines, [Engine::Counting, Engine::Distance]);
    let no = certify(&array, &Demand::strength(3)).unwrap();
    assert_eq!((no.verdict, no.witness.unwrap().columns), (Verdict::NotOrthogonal, vec![0, 1, 2]));
}

#[test]
fn unbalanced_arrays_have_certificates_too() {
    let array = Array::from_rows(vec![2, 3], &[[0, 0], [0, 0], [1, 2]]).unwrap();
    let judgement = certify(&array, &Demand::strength(1)).unwrap();
    assert_eq!(judgement.verdict, Verdict::NotOrthogonal);
    let c = judgement.certificate;
    assert_eq!((c.strength, c.repeated_runs, c.index.clone()), (0, 1, BTreeMap::from([(1, 3)])));
    assert_eq!(judgement.witness.unwrap().expected.to_string(), "3/2");
    assert!(recheck(&c, &array).unwrap().holds());
}

#[test]
fn an_array_too_large_for_distances_is_counted() {
    let many_levels = full_factorial(&[16, 16, 16, 8]);
    let few_levels = full_factorial(&[2; 15]);
    for (array, claim) in [(many_levels, StrengthClaim::Exact), (few_levels, StrengthClaim::AtLeast)] {
        let judgement = certify(&array, &Demand::strength(2)).unwrap();
        let c = judgement.certificate;
        assert_eq!((judgement.verdict, c.strength, c.strength_claim), (Verdict::Orthogonal, 4, claim));
        assert_eq!((&c.word_length_pattern, c.engines.as_slice()), (&None, [Engine::Counting].as_slice()));
        let report = recheck(&c, &array).unwrap();
        assert!(report.holds(), "{report:?}");
        assert_eq!(report.not_checked[0], Field::WordLengthPattern);
        let changed = with_cell(&array, 5, 1, 1);
        let no = certify(&changed, &Demand::strength(2)).unwrap();
        assert_eq!(no.witness.unwrap().columns, [1]);
        assert_eq!(no.certificate.engines, [Engine::Counting]);
        let named = [Field::Strength, Field::Index, Field::RepeatedRuns, Field::Sha256];
        assert_eq!(objections(&c, &changed), named);
    }
}

#[cfg(feature = "schema")]
#[test]
fn the_schema_names_every_key() {
    use trysquare::verify::Judgement;
    let schema = serde_json::to_value(schemars::schema_for!(Judgement)).unwrap();
    let judgement = certify(&rao_hamming(3, 2), &Demand::strength(3)).unwrap();
    let json = serde_json::to_value(&judgement).unwrap();
    let keys = |value: &serde_json::Value| {
        let mut keys: Vec<String> = value.as_object().unwrap().keys().cloned().collect();
        keys.sort();
        keys
    };
    assert_eq!(keys(&json), keys(&schema["properties"]));
    let definitions = &schema["$defs"];
    for (name, value) in [("Certificate", &json["certificate"]), ("Witness", &json["witness"])] {
        assert_eq!(keys(value), keys(&definitions[name]["properties"]), "{name}");
        let mut required: Vec<String> =
            serde_json::from_value(definitions[name]["required"].clone()).unwrap();
        required.sort();
        assert_eq!(keys(value), required, "{name}");
    }
    assert_eq!(definitions["Ratio"]["anyOf"].as_array().map(Vec::len), Some(2));
    let pattern = &definitions["Certificate"]["properties"]["word_length_pattern"]["type"];
    assert_eq!(pattern, &serde_json::json!(["array", "null"]));
}

/// A change to a certificate and the fields that a recheck has to name.
type Corruption = (&'static str, fn(&mut Certificate), &'static [Field]);

#[test]
fn every_false_field_is_named() {
    let corruptions: [Corruption; 23] = [
        ("version", |c| c.version = 2, &[Field::Version]),
        ("runs", |c| c.runs = 36, &[Field::Runs]),
        ("no runs", |c| c.runs = 0, &[Field::Runs]),
        ("levels swapped", |c| c.levels.swap(6, 7), &[Field::Levels]),
        ("no levels", |c| c.levels.clear(), &[Field::Levels]),
        ("less strength", |c| c.strength = 1, &[Field::Strength]),
        ("no strength", |c| c.strength = 0, &[Field::Strength]),
        ("more strength", |c| c.strength = 3, &[Field::Strength]),
        ("all strength", |c| c.strength = 8, &[Field::Strength]),
        ("absurd strength", |c| c.strength = usize::MAX, &[Field::Strength]),
        (
            "at least more",
            |c| (c.strength, c.strength_claim) = (3, StrengthClaim::AtLeast),
            &[Field::Strength],
        ),
        ("λ", |c| *c.index.get_mut(&9).unwrap() = 3, &[Field::Index]),
        ("λ missing", |c| c.index.remove(&6).map_or((), drop), &[Field::Index]),
        ("λ too many", |c| c.index.insert(4, 4).map_or((), drop), &[Field::Index]),
        ("repeated runs", |c| c.repeated_runs = 1, &[Field::RepeatedRuns]),
        (
            "pattern",
            |c| c.word_length_pattern.as_mut().unwrap()[2] = "1/9".into(),
            &[Field::WordLengthPattern],
        ),
        (
            "pattern not in lowest terms",
            |c| c.word_length_pattern.as_mut().unwrap()[0] = "0/1".into(),
            &[Field::WordLengthPattern],
        ),
        ("pattern cut", |c| c.word_length_pattern.as_mut().unwrap().truncate(5), &[Field::WordLengthPattern]),
        ("pattern empty", |c| c.word_length_pattern = Some(vec![]), &[Field::WordLengthPattern]),
        ("digest", |c| c.sha256.replace_range(0..1, "g"), &[Field::Sha256]),
        ("no engine", |c| c.engines.clear(), &[Field::Engines]),
        ("engine twice", |c| c.engines = vec![Engine::Distance; 2], &[Field::Engines]),
        ("engine that yields no pattern", |c| c.engines = vec![Engine::Counting], &[Field::Engines]),
    ];
    let array = split(&from_scheme(3, D_6_6_3), 6, &[(3, &|x| x / 2), (2, &|x| x % 2)]);
    let good = certificate(&array, 2);
    assert_eq!(objections(&good, &array), []);
    for (what, corrupt, fields) in corruptions {
        let mut bad = good.clone();
        corrupt(&mut bad);
        assert_ne!(bad, good, "{what}");
        assert_eq!(objections(&bad, &array), fields, "{what}");
    }
}

#[test]
fn an_exact_claim_is_checked() {
    let array = full_factorial(&[2; 6]);
    let weak = Certificate { strength_claim: StrengthClaim::Exact, ..certificate(&array, 1) };
    assert_eq!(weak.strength, 4);
    let report = recheck(&weak, &array).unwrap();
    let found: Vec<_> = report.mismatches.iter().filter(|m| m.field == Field::Strength).collect();
    assert_eq!((found[0].stated.as_str(), found[0].found.as_str()), ("exactly 4", "exactly 6"));
}

#[test]
fn the_certificate_of_another_array_does_not_hold() {
    for (name, array, strength) in sample() {
        let good = certificate(&array, strength);
        let changed = with_cell(&array, 1, 0, (array.get(1, 0) + 1) % array.levels()[0]);
        let named = objections(&good, &changed);
        assert!(named.contains(&Field::Sha256) && named.contains(&Field::Strength), "{name}: {named:?}");
        let more = array.runs() + 1;
        let longer =
            Array::from_fn(more, array.levels().to_vec(), |i, j| array.get(i % array.runs(), j)).unwrap();
        let named = objections(&good, &longer);
        assert!(named.contains(&Field::Runs) && named.contains(&Field::RepeatedRuns), "{name}: {named:?}");
    }
}

#[test]
fn json_round_trips_and_keeps_the_recipe() {
    let c = certificate(&eighteen(), 2).with_recipe(serde_json::json!({"anything": [1, null]}));
    let text = c.to_json();
    assert_eq!(Certificate::from_json(&text).unwrap(), c);
    assert_eq!(Certificate::from_json(&text).unwrap().to_json(), text);
}

#[test]
fn json_cut_anywhere_is_refused() {
    let c = certificate(&eighteen(), 2).with_recipe(serde_json::json!({"a": "é"}));
    let text = c.to_json();
    let whole = text.trim_end();
    for cut in (0..whole.len()).filter(|&i| whole.is_char_boundary(i)) {
        assert!(Certificate::from_json(&whole[..cut]).is_err(), "{cut}");
    }
    assert!(Certificate::from_json(&format!("{whole} {whole}")).is_err());
}

#[test]
fn keys_are_neither_added_nor_missing() {
    let value = serde_json::to_value(certificate(&eighteen(), 2)).unwrap();
    let keys: Vec<String> = value.as_object().unwrap().keys().cloned().collect();
    assert_eq!(keys.len(), 12);
    for key in keys {
        let mut less = value.clone();
        less.as_object_mut().unwrap().remove(&key);
        assert!(Certificate::from_json(&less.to_string()).is_err(), "{key}");
    }
    let mut more = value.clone();
    more["strenght"] = 3.into();
    assert!(matches!(Certificate::from_json(&more.to_string()), Err(CertificateError::Malformed(_))));
    let mut next = value;
    next["version"] = 2.into();
    let error = Certificate::from_json(&next.to_string()).unwrap_err();
    assert_eq!(error.to_string(), "a certificate of version 2; this program reads version 1");
}

#[test]
fn judgements_have_the_keys_the_design_names() {
    let array = Array::from_rows(vec![2, 2], &[[0, 0], [0, 0], [1, 0], [1, 1]]).unwrap();
    let json = serde_json::to_value(certify(&array, &Demand::strength(2)).unwrap()).unwrap();
    assert_eq!(json["verdict"], "not-orthogonal");
    assert_eq!(
        json["witness"],
        serde_json::json!({"columns": [1], "combination": [0], "count": 3, "expected": 2})
    );
    assert_eq!(json["certificate"]["engines"], serde_json::json!(["counting", "distance"]));
    assert_eq!(json["certificate"]["strength_claim"], "exact");
}

#[test]
fn the_number_of_threads_changes_nothing() {
    let mut arrays: Vec<Array> = sample().into_iter().map(|(_, a, _)| a).collect();
    arrays.extend(sample().iter().map(|(_, a, _)| with_cell(a, 3, 1, (a.get(3, 1) + 1) % a.levels()[1])));
    let judge = |threads: usize, array: &Array, demand: &Demand| {
        let pool = rayon::ThreadPoolBuilder::new().num_threads(threads).build().unwrap();
        serde_json::to_string(&pool.install(|| certify(array, demand)).unwrap()).unwrap()
    };
    for array in &arrays {
        for demand in [Demand::strength(2), Demand::strength(array.factors().min(3)).thorough()] {
            assert_eq!(judge(1, array, &demand), judge(2, array, &demand));
        }
    }
}

/// The canonical form as its documentation has it, written out by other means.
#[test]
fn the_digest_is_of_the_stated_text() {
    use sha2::{Digest, Sha256};
    let array = eighteen();
    let mut text = array.levels().iter().map(u16::to_string).collect::<Vec<_>>().join(",") + "\n";
    for row in array.rows() {
        text += &(row.iter().map(u16::to_string).collect::<Vec<_>>().join(",") + "\n");
    }
    let bytes = Sha256::digest(text.as_bytes());
    let hex: String = bytes.iter().map(|b| format!("{b:02x}")).collect();
    assert_eq!(digest::sha256(&array), hex);
}

proptest! {
    #[test]
    fn no_text_panics(text in ".{0,200}") {
        let _ = Certificate::from_json(&text);
    }

    #[test]
    fn one_changed_byte_never_passes_unseen(at in any::<prop::sample::Index>(), byte in 32u8..127) {
        let array = rao_hamming(3, 2);
        let good = certificate(&array, 2);
        let mut bytes = good.to_json().into_bytes();
        let at = at.index(bytes.len());
        bytes[at] = byte;
        if let Ok(read) = Certificate::from_json(&String::from_utf8(bytes).unwrap()) {
            let unseen = Certificate { engine_version: good.engine_version.clone(), ..read.clone() };
            prop_assert!(unseen == good || !recheck(&read, &array).unwrap().holds());
        }
    }
}
