//! `seek --budget`: what fits is exact, what does not is near.

use insta::assert_snapshot;
use serde_json::Value;

use crate::bench::{Bench, code, stderr};

#[test]
fn near_plans() {
    let bench = Bench::new();
    assert_snapshot!("near", bench.show(&["seek", "2^1 3^7", "--budget", "17"]));
    assert_snapshot!(
        "near_text",
        bench.show(&[
            "seek",
            "2^8 5",
            "--budget",
            "18",
            "--seed",
            "3",
            "--format",
            "text",
            "--symbols",
            "one"
        ])
    );
    assert_snapshot!("near_json", bench.show(&["seek", "3 2^2", "--budget", "5", "--json"]));
    assert_snapshot!("near_too_few_runs", bench.show(&["seek", "7", "2^2", "--budget", "5"]));
    assert_snapshot!("near_one_factor", bench.show(&["seek", "5", "--budget", "3"]));
    assert_snapshot!("near_strength_3", bench.show(&["seek", "2^4", "--budget", "7", "--strength", "3"]));
}

#[test]
fn exact_where_it_fits() {
    let bench = Bench::new();
    assert_snapshot!("near_exact", bench.show(&["seek", "2^1 3^7", "--budget", "20"]));
    let json =
        |arguments: &[&str]| -> Value { serde_json::from_slice(&bench.run(arguments).stdout).unwrap() };
    let (budget, plain) =
        (json(&["seek", "2^3", "--budget", "7", "--json"]), json(&["seek", "2^3", "--json"]));
    assert_eq!(budget, plain, "the document of seek itself");
}

#[test]
fn runs_to_keep() {
    let bench = Bench::with("made.csv", "run,a,b,c\n1,0,0,2\n2,0,1,0\n3,1,1,0\n");
    assert_snapshot!("near_keep", bench.show(&["seek", "2^2 3", "--budget", "7", "--keep", "made.csv"]));
    bench.put("one.csv", "1,1,2\n");
    assert_snapshot!(
        "near_keep_exact",
        bench.show(&["seek", "2^2 3", "--budget", "12", "--keep", "one.csv"])
    );
    let document: Value = serde_json::from_slice(
        &bench.run(&["seek", "2^2 3", "--budget", "12", "--keep", "one.csv", "--json"]).stdout,
    )
    .unwrap();
    assert_eq!((&document["verdict"], &document["kept"]), (&"proved-smallest".into(), &1.into()));
    assert_eq!(document["certificate"]["strength"], 3, "all combinations once");
    assert_eq!(document["array"][0], serde_json::json!([1, 1, 2]));
    bench.put("words.csv", "oven,mould,alloy\nold,x,grey\nnew,y,red\n");
    assert_snapshot!(
        "near_keep_words",
        bench.show(&["seek", "2^2 3", "--budget", "7", "--keep", "words.csv"])
    );
}

#[test]
fn a_near_plan_is_not_called_orthogonal() {
    let bench = Bench::new();
    let output = bench.run(&["seek", "2^8 5", "--budget", "18", "--out", "plan.csv"]);
    assert_eq!(code(&output), 0);
    assert!(stderr(&output).contains("verdict       near: not orthogonal"), "{}", stderr(&output));
    assert_eq!(code(&bench.run(&["certify", "plan.csv"])), 1);
}

#[test]
fn the_same_bytes_for_any_number_of_threads() {
    let bench = Bench::new();
    let on = |threads: &str| {
        bench.run(&["seek", "3^4 2", "--budget", "11", "--json", "--threads", threads]).stdout
    };
    assert_eq!(on("1"), on("3"));
}

#[test]
fn what_makes_no_sense() {
    let bench = Bench::with("made.csv", "0,0\n0,1\n1,1\n");
    for (name, arguments) in [
        ("certificate", ["seek", "2^3", "--budget", "3", "--certificate", "c.json"].as_slice()),
        ("keep_alone", &["seek", "2^3", "--keep", "made.csv"]),
        ("zero", &["seek", "2^3", "--budget", "0"]),
        ("keep_more", &["seek", "2^2", "--budget", "2", "--keep", "made.csv"]),
        ("keep_other", &["seek", "2^3", "--budget", "5", "--keep", "made.csv"]),
        ("large", &["seek", "60000^100", "--budget", "100000"]),
    ] {
        assert_snapshot!(format!("near_wrong_{name}"), bench.show(arguments));
    }
    assert!(bench.files().iter().all(|f| f == "made.csv"));
}
