//! `trysquare hunt`: what it says, and that stopping, going on, sharing and threads change nothing.

use std::thread::sleep;
use std::time::{Duration, Instant};

use insta::assert_snapshot;
use serde_json::Value;

use crate::bench::{Bench, code, stderr, stdout};

/// Found by a late task of the work list, so that there is something to interrupt.
const LATE: [&str; 6] = ["hunt", "2^12 7", "--runs", "28", "--seed", "1"];

/// The account without what the clock says.
fn without_time(text: &str) -> String {
    let cut = |line: &str| match line.split_once("; ") {
        Some((before, after)) if after.ends_with(" s") => format!("{before}; (time)"),
        _ => line.to_owned(),
    };
    text.lines().map(|l| cut(l) + "\n").collect()
}

fn json(bench: &Bench, arguments: &[&str]) -> Value {
    let all: Vec<&str> = arguments.iter().copied().chain(["--json", "--quiet"]).collect();
    serde_json::from_str(stdout(&bench.run(&all))).unwrap()
}

#[test]
fn accounts() {
    let bench = Bench::new();
    assert_snapshot!("found", without_time(&bench.show(&["hunt", "2^4 3", "--runs", "12"])));
    let few = ["hunt", "2^12 7", "--runs", "28", "--tasks", "3"];
    assert_snapshot!("limit", without_time(&bench.show(&few)));
    assert_snapshot!("floor", bench.show(&["hunt", "2^12", "--runs", "12"]));
    assert_snapshot!("divisibility", bench.show(&["hunt", "2^4 3", "--runs", "16"]));
    let all: String = [
        &["hunt"][..],
        &["hunt", "2^4"],
        &["hunt", "2^4 3", "--runs", "12", "--symmetry", "Q8"],
        &["hunt", "2^4 3", "--runs", "12", "--symmetry", "Z5"],
        &["hunt", "2^4 3", "--runs", "12", "--shard", "3/2"],
        &["hunt", "2^4 3", "--runs", "12", "--strength", "4"],
        &["hunt", "2^4 3", "--runs", "144"],
        &["hunt", "--resume", "nowhere.json"],
        &["hunt", "2^4 3", "--runs", "12", "--resume", "-"],
        &["hunt", "2^4 3", "--runs", "12", "--json", "--format", "csv"],
    ]
    .iter()
    .map(|arguments| bench.show(arguments) + "\n")
    .collect();
    assert_snapshot!("usage", all);
}

#[test]
fn a_find_is_judged_again_and_is_a_seed() {
    let bench = Bench::new();
    let output = bench.run(&[
        "hunt",
        "2^8 5",
        "--runs",
        "20",
        "--out",
        "plan.csv",
        "--certificate",
        "c.json",
        "--starter",
        "s.seed",
    ]);
    assert_eq!(code(&output), 0, "{}", stderr(&output));
    assert_eq!(code(&bench.run(&["recheck", "c.json", "plan.csv"])), 0);
    let seed: trysquare::catalog::seed::Seed = bench.get("s.seed").parse().unwrap();
    assert_eq!(seed.source, "computed: trysquare hunt \"2^8 5^1\" --runs 20 --seed 1");
    assert_eq!(code(&bench.run(&["hunt", "2^12 7", "--runs", "28", "--tasks", "1", "--starter", "t"])), 4);
    assert_eq!(
        bench.files(),
        ["c.json", "plan.csv", "s.seed"],
        "nothing is left of a hunt that found nothing"
    );
}

#[test]
fn strength_three() {
    let bench = Bench::new();
    let found = json(&bench, &["hunt", "3 2^4", "--runs", "24", "--strength", "3", "--tasks", "60"]);
    assert_eq!((&found["verdict"], &found["certificate"]["strength"]), (&"found".into(), &3.into()));
}

#[test]
fn threads_change_nothing() {
    let bench = Bench::new();
    let on = |threads| json(&bench, &[&LATE[..], &["--threads", threads]].concat());
    let one = on("1");
    assert_eq!(one["verdict"], "found");
    assert!(one["task"].as_u64().unwrap() > 5, "late enough to be of use here");
    assert_eq!(on("3"), one);
}

#[test]
fn four_shards_find_what_one_run_finds() {
    let bench = Bench::new();
    let whole = json(&bench, &LATE);
    let last = (whole["task"].as_u64().unwrap() + 1).to_string();
    let shards: Vec<Value> = ["1/4", "2/4", "3/4", "4/4"]
        .iter()
        .map(|shard| json(&bench, &[&LATE[..], &["--shard", shard, "--tasks", &last]].concat()))
        .collect();
    let finds = shards.iter().filter(|s| s["verdict"] == "found");
    let first = finds.min_by_key(|s| s["task"].as_u64()).expect("one of the shards finds it");
    for key in ["task", "array", "recipe", "certificate"] {
        assert_eq!(first[key], whole[key], "{key}");
    }
    assert_eq!(shards.iter().filter(|s| s["verdict"] == "limit-reached").count(), 3);
}

#[test]
fn killed_and_gone_on_with() {
    let bench = Bench::new();
    let undisturbed = json(&bench, &LATE);
    let arguments = [&LATE[..], &["--resume", "state.json", "--json", "--quiet"]].concat();
    let mut kills = 0;
    let output = loop {
        let mut child = bench.command(&arguments).spawn().unwrap();
        let begin = Instant::now();
        while begin.elapsed() < Duration::from_millis(400) && child.try_wait().unwrap().is_none() {
            sleep(Duration::from_millis(20));
        }
        if kills < 4 && child.try_wait().unwrap().is_none() {
            child.kill().unwrap();
            child.wait().unwrap();
            kills += 1;
            let state: Value = serde_json::from_str(&bench.get("state.json")).expect("a whole state");
            assert_eq!(state["format"], "trysquare hunt state");
            continue;
        }
        break child.wait_with_output().unwrap();
    };
    assert_eq!(serde_json::from_str::<Value>(stdout(&output)).unwrap(), undisturbed);
    // From the state alone the answer comes at once; another hunt is not mixed up with it.
    assert_eq!(json(&bench, &["hunt", "--resume", "state.json"]), undisturbed);
    let other = bench.run(&["hunt", "2^11 7", "--runs", "28", "--resume", "state.json"]);
    assert_eq!(code(&other), 2);
    assert!(stderr(&other).contains("is the state of another hunt"), "{}", stderr(&other));
    for damaged in ["", "{}", "nonsense", &bench.get("state.json")[..60]] {
        bench.put("damaged.json", damaged);
        assert_eq!(code(&bench.run(&["hunt", "--resume", "damaged.json"])), 3);
    }
}

#[cfg(unix)]
#[test]
fn an_interrupt_keeps_the_state() {
    let bench = Bench::new();
    let mut child = bench.command(&["hunt", "2^13 7", "--runs", "28", "--json"]).spawn().unwrap();
    sleep(Duration::from_millis(1500));
    let pid = child.id().to_string();
    assert!(std::process::Command::new("kill").args(["-INT", &pid]).status().unwrap().success());
    let begin = Instant::now();
    while child.try_wait().unwrap().is_none() {
        assert!(begin.elapsed() < Duration::from_secs(30), "it ends soon");
        sleep(Duration::from_millis(20));
    }
    let output = child.wait_with_output().unwrap();
    assert_eq!(code(&output), 4, "{}", stderr(&output));
    let document: Value = serde_json::from_str(stdout(&output)).unwrap();
    assert_eq!(document["verdict"], "interrupted");
    let kept: Vec<String> = bench.files();
    assert_eq!(kept.len(), 1);
    assert!(stderr(&output).contains(&format!("trysquare hunt --resume {}", kept[0])), "{}", stderr(&output));
    let done = |state: &str| {
        let state: Value = serde_json::from_str(state).unwrap();
        state["done"].as_u64().unwrap() + state["beyond"].as_array().unwrap().len() as u64
    };
    let before = done(&bench.get(&kept[0]));
    assert!(before > 0);
    bench.run(&["hunt", "--resume", &kept[0], "--seconds", "2", "--quiet"]);
    assert!(done(&bench.get(&kept[0])) > before, "it goes on where it was");
}

#[test]
fn riding_along() {
    let bench = Bench::new();
    let make = |mix: &str, file: &str| {
        assert_eq!(code(&bench.run(&["seek", mix, "--quiet", "--out", file])), 0);
    };
    make("2^4 3", "twelve.csv");
    make("2^5", "eight.csv");
    bench.put(
        "square.csv",
        "oven,shelf,alloy\nA,p,x\nA,q,y\nA,r,z\nB,p,y\nB,q,z\nB,r,x\nC,p,z\nC,q,x\nC,r,y\n",
    );
    assert_snapshot!("extend_none", bench.show(&["hunt", "--from", "twelve.csv"]));
    assert_snapshot!("extend_some", bench.show(&["hunt", "--from", "eight.csv"]));
    assert_snapshot!("extend_asked", bench.show(&["hunt", "--from", "square.csv", "3"]));
    assert_snapshot!("extend_too_many", bench.show(&["hunt", "--from", "eight.csv", "2^3"]));
    let output =
        bench.run(&["hunt", "--from", "square.csv", "--json", "--certificate", "c.json", "--out", "o.json"]);
    assert_eq!(code(&output), 0);
    assert_eq!(code(&bench.run(&["recheck", "c.json", "o.json"])), 0);
    let document: Value = serde_json::from_str(&bench.get("o.json")).unwrap();
    assert_eq!((&document["verdict"], &document["given"]), (&"extended".into(), &3.into()));
    let wrong = Bench::with("wrong.csv", "a,b\n0,0\n0,1\n1,0\n1,0\n");
    assert_snapshot!("extend_wrong", wrong.show(&["hunt", "--from", "wrong.csv"]));
    assert_eq!(code(&wrong.run(&["hunt", "--from", "wrong.csv", "--runs", "4"])), 2);
}

#[test]
fn proved_impossible() {
    let bench = Bench::new();
    assert_snapshot!("impossible", bench.show(&["hunt", "2^5 3", "--runs", "12"]));
    assert_snapshot!("impossible_under", bench.show(&["hunt", "2^2 6", "--runs", "12", "--symmetry", "Z12"]));
}

/// The records of searches that found nothing are made again.
#[test]
fn recorded_searches() {
    let record = include_str!("../../catalog/none-0012-2-3x1-2x5.json");
    let bench = Bench::with("none.json", record);
    assert_snapshot!("record", bench.show(&["recheck", "--deep", "none.json"]));
    bench.put("other.json", record.replace("\"classes\": 2,", "\"classes\": 1,"));
    let output = bench.run(&["recheck", "--deep", "other.json"]);
    assert_ne!(code(&output), 0, "{}", stdout(&output));
    bench.put("cut.json", &record[..record.len() / 2]);
    assert_eq!(code(&bench.run(&["recheck", "--deep", "cut.json"])), 3);
    assert_eq!(code(&bench.run(&["recheck", "none.json"])), 2);
}
