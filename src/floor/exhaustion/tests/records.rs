//! One rejection for every rule about records.

use super::super::latin::ByLatinSquares;
use super::super::text::digest;
use super::super::{ByColumns, Decision, ExhaustionError, Record, RecordError, decide, stored};
use crate::floor::Effort;

fn columns() -> ByColumns {
    match decide(&"3^1 2^5".parse().unwrap(), 12, 2, None, None, &mut Effort::unlimited()) {
        Ok(Decision::None(Record::Columns(by))) => by,
        other => panic!("{other:?}"),
    }
}

/// What the light check says after a change, the digest of the whole made to fit.
fn after(change: impl Fn(&mut ByColumns)) -> RecordError {
    let mut by = columns();
    change(&mut by);
    by.digest = by.own_digest();
    Record::Columns(by).check_light().unwrap_err()
}

/// After a change of the representatives of stage 4 (there are three), its digest made to fit too.
fn after_in_stage_four(change: impl Fn(&mut Vec<String>)) -> RecordError {
    after(|by| {
        let stage = &mut by.stages[3];
        change(&mut stage.representatives);
        stage.digest = digest(stage.representatives.iter().map(String::as_str));
    })
}

#[test]
fn every_rule_of_the_light_check_rejects() {
    assert_eq!(after(|by| by.version = 2), RecordError::Version(2));
    assert_eq!(after(|by| by.runs = 1000), ExhaustionError::TooLarge.into());
    assert_eq!(after(|by| by.strength = 0), ExhaustionError::Strength { strength: 0, columns: 6 }.into());
    assert_eq!(after(|by| by.order.swap(0, 1)), RecordError::Order);
    assert_eq!(after(|by| by.stages.clear()), RecordError::Stages { stages: 0, columns: 6 });
    let seven = |by: &mut ByColumns| by.stages.insert(0, by.stages[0].clone());
    assert_eq!(after(seven), RecordError::Stages { stages: 7, columns: 6 });
    assert_eq!(after(|by| by.stages[2].classes = 0), RecordError::Classes(3));
    assert_eq!(after(|by| by.stages[5].classes = 1), RecordError::Classes(6));
    assert_eq!(after(|by| drop(by.stages.pop())), RecordError::Classes(5));
    assert_eq!(after(|by| by.stages[3].closed = 1), RecordError::Closed(4));
    assert_eq!(after(|by| by.stages[3].classes = 4), RecordError::Representatives(4));
    assert_eq!(after(|by| by.stages[3].digest = "0".repeat(64)), RecordError::Representatives(4));
    assert_eq!(after(|by| by.stages[5].digest = "0".repeat(64)), RecordError::Representatives(6));
    let mut by = columns();
    by.digest.replace_range(0..1, if by.digest.starts_with('0') { "1" } else { "0" });
    assert_eq!(Record::Columns(by).check_light(), Err(RecordError::Digest));
}

#[test]
fn every_rule_about_representatives_rejects() {
    let wrong = |number, reason| RecordError::Representative { stage: 4, number, reason };
    let no_array = wrong(1, "is no array of that shape");
    assert_eq!(after_in_stage_four(|r| r[0] = "é".into()), no_array);
    assert_eq!(after_in_stage_four(|r| r[0].push('0')), no_array);
    assert_eq!(after_in_stage_four(|r| r[0] = r[0].replacen('2', "3", 1)), no_array);
    assert_eq!(after_in_stage_four(|r| r[0] = r[0].replacen('2', "1", 1)), wrong(1, "lacks the strength"));
    let renamed = |r: &mut Vec<String>| {
        let (first, rest) = r[0].split_once('.').unwrap();
        let first = first.replace('2', "x").replace('1', "2").replace('x', "1");
        r[0] = format!("{first}.{rest}");
    };
    assert_eq!(after_in_stage_four(renamed), wrong(1, "is not canonical"));
    let order = "does not stand in ascending order";
    assert_eq!(after_in_stage_four(|r| r.swap(0, 1)), wrong(2, order));
    assert_eq!(after_in_stage_four(|r| r[2] = r[1].clone()), wrong(3, order));
}

#[test]
fn representatives_may_be_left_out_but_numbers_must_be_true() {
    let mut by = columns();
    by.stages[3].representatives.clear();
    Record::Columns(by.clone()).replay(&mut Effort::unlimited()).unwrap();
    by.stages[3].classes = 4;
    by.digest = by.own_digest();
    let record = Record::Columns(by);
    record.check_light().unwrap();
    let differs = RecordError::Differs { stage: Some(4) };
    assert_eq!(record.replay(&mut Effort::unlimited()), Err(differs));
    assert_eq!(record.replay(&mut Effort::new(100, &|| false)), Err(RecordError::Unfinished));
}

#[test]
fn closed_classes_are_checked_too() {
    let closing = |close_from| match decide(
        &"5^1 2^9".parse().unwrap(),
        20,
        2,
        close_from,
        None,
        &mut Effort::unlimited(),
    ) {
        Ok(Decision::None(Record::Columns(by))) => by,
        other => panic!("{other:?}"),
    };
    let good = closing(Some(4));
    let closed: Vec<u64> = good.stages.iter().map(|stage| stage.closed).collect();
    assert!(closed[..3] == [0, 0, 0] && closed[3] > 0 && good.stages.len() < closing(None).stages.len());
    Record::Columns(good.clone()).replay(&mut Effort::unlimited()).unwrap();
    let after = |change: &dyn Fn(&mut ByColumns)| {
        let mut by = good.clone();
        change(&mut by);
        by.digest = by.own_digest();
        Record::Columns(by).replay(&mut Effort::unlimited()).unwrap_err()
    };
    assert_eq!(after(&|by| by.stages[2].closed = 1), RecordError::Closed(3));
    assert_eq!(after(&|by| by.stages[3].closed = by.stages[3].classes + 1), RecordError::Closed(4));
    assert_eq!(after(&|by| by.close_from = None), RecordError::Closed(4));
    assert_eq!(after(&|by| by.close_from = Some(5)), RecordError::Closed(4));
    assert_eq!(after(&|by| by.stages[3].closed -= 1), RecordError::Differs { stage: Some(4) });
    assert_eq!(after(&|by| by.close_from = Some(3)), RecordError::Differs { stage: Some(3) });
}

/// A record that passes the light check and claims what is false is found out by the replay.
#[test]
fn a_false_claim_does_not_replay() {
    let mut by = columns();
    by.order.pop();
    by.stages.remove(4);
    by.digest = by.own_digest();
    let record = Record::Columns(by);
    record.check_light().unwrap();
    assert_eq!(record.replay(&mut Effort::unlimited()), Err(RecordError::Differs { stage: Some(5) }));
}

#[test]
fn every_rule_about_latin_squares_rejects() {
    let (_, text) = stored().iter().find(|(name, _)| name.contains("6x4")).unwrap();
    let Record::LatinSquares(good) = Record::from_json(text).unwrap() else { panic!("made of squares") };
    let after = |change: &dyn Fn(&mut ByLatinSquares)| {
        let mut by = good.clone();
        change(&mut by);
        by.digest = by.own_digest();
        Record::LatinSquares(by).check_light().unwrap_err()
    };
    assert_eq!(after(&|by| by.version = 9), RecordError::Version(9));
    assert_eq!(after(&|by| by.order = 7), ExhaustionError::TooLarge.into());
    assert_eq!(after(&|by| by.squares = 0), RecordError::Squares);
    assert_eq!(after(&|by| by.with_mates = 1), RecordError::Squares);
    let mut by = good.clone();
    by.transversals += 1;
    assert_eq!(Record::LatinSquares(by).check_light(), Err(RecordError::Digest));
}

#[test]
fn texts_that_are_no_records_are_refused() {
    let good = Record::Columns(columns()).to_json();
    assert!(Record::from_json(&good).is_ok());
    for (from, to) in [
        ("\"columns\"", "\"rows\""),
        ("\"runs\"", "\"run\""),
        ("\"runs\": 12", "\"runs\": -12"),
        ("\"runs\": 12", "\"runs\": 12, \"extra\": 1"),
        ("\"runs\": 12", "\"runs\": 12, \"runs\": 12"),
        ("\"classes\": 1", "\"classes\": 1, \"extra\": 1"),
    ] {
        assert!(good.contains(from));
        let text = good.replacen(from, to, 1);
        assert!(matches!(Record::from_json(&text), Err(RecordError::Text(_))), "{from} -> {to}");
    }
}

#[test]
fn a_record_cut_at_any_byte_is_not_accepted() {
    for (name, text) in stored() {
        let text = text.trim_end();
        assert!(text.is_ascii(), "{name}");
        for end in 0..text.len() {
            assert!(Record::from_json(&text[..end]).is_err(), "{name} cut at {end}");
        }
    }
}

/// Every digit and letter changed to its neighbour: refused, unless the record is still the same.
#[test]
fn a_record_changed_in_any_character_is_not_accepted() {
    for (name, text) in stored().iter().filter(|(_, text)| text.len() < 2_000) {
        let good = Record::from_json(text).unwrap();
        for (at, &byte) in text.as_bytes().iter().enumerate().filter(|(_, b)| b.is_ascii_alphanumeric()) {
            let mut changed = text.as_bytes().to_vec();
            changed[at] = if matches!(byte, b'9' | b'z') { byte - 1 } else { byte + 1 };
            let Ok(record) = Record::from_json(std::str::from_utf8(&changed).unwrap()) else { continue };
            assert!(record == good || record.check_light().is_err(), "{name} at {at}");
        }
    }
}
