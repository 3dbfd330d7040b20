//! What the commands print when all is well, and when the answer is no.

use insta::assert_snapshot;

use crate::bench::{Bench, code, stdout};

/// Nine runs of three ovens, three temperatures and three moulds; every two factors balanced.
const PLAN: &str = "\
Run;oven;temperature;mould
1;A;180;x
2;A;200;y
3;A;220;z
4;B;180;y
5;B;200;z
6;B;220;x
7;C;180;z
8;C;200;x
9;C;220;y
";

#[test]
fn help() {
    let bench = Bench::new();
    assert_snapshot!("help", bench.show(&["--help"]));
    for command in ["seek", "certify", "recheck", "floor", "catalog", "hunt"] {
        assert_snapshot!(format!("help_{command}"), bench.show(&[command, "--help"]));
    }
    assert_snapshot!("version", bench.show(&["--version"]));
}

#[test]
fn seek() {
    let bench = Bench::new();
    assert_snapshot!("seek", bench.show(&["seek", "2^1 3^7"]));
    assert_snapshot!(
        "seek_strength_3",
        bench.show(&["seek", "2^4", "--strength", "3", "--symbols", "coded"])
    );
    assert_snapshot!("seek_text", bench.show(&["seek", "3", "2", "--format", "text", "--symbols", "one"]));
    assert_snapshot!("seek_gap", bench.show(&["seek", "6^2 2^2", "--seed", "7"]));
    assert_snapshot!("seek_impossible", bench.show(&["seek", "2^1 3^7", "--max-runs", "17"]));
    assert_snapshot!("seek_limit", bench.show(&["seek", "2^21 3^2", "--max-runs", "40"]));
    assert_snapshot!("seek_single_factor", bench.show(&["seek", "5"]));
}

#[test]
fn seek_json() {
    let bench = Bench::new();
    assert_snapshot!("seek_json", bench.show(&["seek", "2^3", "--json", "--quiet"]));
    assert_snapshot!(
        "seek_json_coded",
        bench.show(&["seek", "3,2", "--json", "--quiet", "--symbols", "coded"])
    );
    assert_snapshot!(
        "seek_json_impossible",
        bench.show(&["seek", "2^3", "--json", "--max-runs", "3", "--quiet"])
    );
    assert_snapshot!(
        "seek_json_limit",
        bench.show(&["seek", "2^21 3^2", "--json", "--max-runs", "40", "--quiet"])
    );
}

#[test]
fn the_columns_keep_the_order_of_the_request() {
    let answer: serde_json::Value =
        serde_json::from_slice(&Bench::new().run(&["seek", "3^2 2 3^2", "--json"]).stdout).unwrap();
    assert_eq!(answer["levels"], serde_json::json!([3, 3, 2, 3, 3]));
    assert_eq!(answer["request"], "2^1 3^4");
}

#[test]
fn certify() {
    let bench = Bench::with("plan.csv", PLAN);
    bench.put("wrong.csv", PLAN.replace("5;B;200;z", "5;B;200;x"));
    bench.put("nine.csv", "a,b\n0,0\n0,1\n1,0\n1,1\n0,0\n0,1\n1,0\n1,1\n0,0\n");
    bench.put("two_thirds.csv", "a,b\n0,p\n1,q\n2,p\n0,q\n1,p\n2,q\n");
    bench.put("fractions.csv", "0,0\n0,0\n0,1\n1,0\n1,1\n1,1\n");
    assert_snapshot!("certify", bench.show(&["certify", "plan.csv"]));
    assert_snapshot!(
        "certify_thorough",
        bench.show(&["certify", "plan.csv", "--thorough", "--strength", "1"])
    );
    assert_snapshot!("certify_json", bench.show(&["certify", "plan.csv", "--json"]));
    assert_snapshot!("certify_wrong", bench.show(&["certify", "wrong.csv"]));
    assert_snapshot!("certify_wrong_json", bench.show(&["certify", "wrong.csv", "--json", "--quiet"]));
    assert_snapshot!("certify_unbalanced", bench.show(&["certify", "nine.csv"]));
    assert_snapshot!("certify_stronger", bench.show(&["certify", "two_thirds.csv", "--strength", "1"]));
    assert_snapshot!("certify_fraction", bench.show(&["certify", "fractions.csv", "--json", "--quiet"]));
    assert_snapshot!("certify_fraction_text", bench.show(&["certify", "fractions.csv", "--quiet"]));
}

#[test]
fn flags_put_the_reading_right() {
    let bench = Bench::with("plan.csv", PLAN);
    bench.put("numbers.csv", "0,0\n0,1\n1,0\n1,1\n");
    for (name, arguments) in [
        ("only", ["certify", "plan.csv", "--only", "mould", "--only", "oven"].as_slice()),
        ("leave_out", &["certify", "plan.csv", "--leave-out", "temperature"]),
        ("levels", &["certify", "plan.csv", "--levels", "3^2 4"]),
        ("header", &["certify", "numbers.csv", "--header", "no", "--run-column", "no"]),
        ("run_column", &["certify", "plan.csv", "--run-column", "Run", "--separator", "semicolon"]),
    ] {
        assert_snapshot!(format!("certify_{name}"), bench.show(arguments));
    }
}

#[test]
fn a_file_may_come_from_stdin() {
    let bench = Bench::new();
    let output = bench.run_on(&["certify", "-", "--quiet"], PLAN);
    assert_eq!((code(&output), output.stderr.len()), (0, 0));
    assert!(stdout(&output).starts_with("verdict        orthogonal at strength 2\n"), "{}", stdout(&output));
}

#[test]
fn recheck() {
    let bench = Bench::with("plan.csv", PLAN);
    bench.put("wrong.csv", PLAN.replace("5;B;200;z", "5;B;200;x"));
    bench.put("short.csv", PLAN.replace("9;C;220;y\n", ""));
    assert_eq!(code(&bench.run(&["certify", "plan.csv", "--certificate", "plan.json"])), 0);
    assert_snapshot!("recheck", bench.show(&["recheck", "plan.json", "plan.csv"]));
    assert_snapshot!("recheck_wrong", bench.show(&["recheck", "plan.json", "wrong.csv"]));
    assert_snapshot!(
        "recheck_wrong_json",
        bench.show(&["recheck", "plan.json", "wrong.csv", "--json", "--quiet"])
    );
    assert_snapshot!("recheck_short", bench.show(&["recheck", "plan.json", "short.csv"]));
    bench.put("lie.json", bench.get("plan.json").replace("\"strength\": 2", "\"strength\": 3"));
    assert_snapshot!("recheck_lie", bench.show(&["recheck", "lie.json", "plan.csv"]));
}

#[test]
fn recheck_builds_the_recipe_again() {
    let bench = Bench::new();
    let made =
        bench.run(&["seek", "2^1 3^7", "--out", "a.csv", "--certificate", "c.json", "--symbols", "coded"]);
    assert_eq!(code(&made), 0);
    assert_snapshot!("recheck_recipe", bench.show(&["recheck", "c.json", "a.csv"]));
    let other: serde_json::Value =
        serde_json::from_slice(&bench.run(&["seek", "3^7 2", "--json", "--quiet"]).stdout).unwrap();
    let mut certificate: serde_json::Value = serde_json::from_str(&bench.get("c.json")).unwrap();
    for (name, recipe) in [
        ("other", other["recipe"].clone()),
        ("unreadable", serde_json::json!({"make": "wish"})),
        ("huge", serde_json::json!({"make": "rao-hamming", "q": 2, "n": 60})),
        ("broken", serde_json::json!({"make": "rao-hamming", "q": 6, "n": 2})),
    ] {
        certificate["recipe"] = recipe;
        bench.put("d.json", certificate.to_string());
        assert_snapshot!(
            format!("recheck_recipe_{name}"),
            bench.show(&["recheck", "d.json", "a.csv", "--quiet"])
        );
    }
}

#[test]
fn the_object_of_seek_is_certificate_and_array_in_one() {
    let bench = Bench::new();
    assert_eq!(code(&bench.run(&["seek", "2^2 4", "--json", "--out", "answer.json"])), 0);
    assert_snapshot!("recheck_answer", bench.show(&["recheck", "answer.json", "answer.json"]));
}

#[test]
fn floor() {
    let bench = Bench::new();
    assert_snapshot!("floor", bench.show(&["floor", "2^1 3^7"]));
    assert_snapshot!("floor_strength_3", bench.show(&["floor", "3^8", "--strength", "3"]));
    assert_snapshot!("floor_single_factor", bench.show(&["floor", "5"]));
    assert_snapshot!("floor_json", bench.show(&["floor", "3^8", "--json"]));
    assert_snapshot!("floor_raised", bench.show(&["floor", "3 2^5"]));
    assert_snapshot!("floor_most", bench.show(&["floor", "2^? 3^1", "--runs", "12"]));
    assert_snapshot!("floor_most_open", bench.show(&["floor", "3^? 2", "--runs", "36"]));
    assert_snapshot!("floor_most_json", bench.show(&["floor", "2^?", "6", "--runs", "12", "--json"]));
    assert_snapshot!("floor_most_none", bench.show(&["floor", "2^? 3^2", "--runs", "12"]));
    assert_snapshot!("floor_most_without_term", bench.show(&["floor", "2^3 3^1", "--runs", "12"]));
    assert_snapshot!("floor_most_without_runs", bench.show(&["floor", "2^? 3^1"]));
    assert_snapshot!("seek_raised", bench.show(&["seek", "3 2^5", "--format", "text"]));
    assert_snapshot!("floor_too_large", bench.show(&["floor", "65521^5", "--strength", "5"]));
}

#[test]
fn a_proof_is_written_and_checked() {
    let bench = Bench::new();
    assert_eq!(code(&bench.run(&["floor", "3^8", "--proof", "p.json"])), 0);
    assert_snapshot!("proof", bench.get("p.json"));
    assert_snapshot!("floor_check", bench.show(&["floor", "--check", "p.json"]));
    bench.put("q.json", bench.get("p.json").replace("\"runs\": 27", "\"runs\": 36"));
    assert_snapshot!("floor_check_false", bench.show(&["floor", "--check", "q.json"]));
    bench.put("r.json", bench.get("p.json").replace("\"version\": 2", "\"version\": 9"));
    assert_snapshot!("floor_check_version", bench.show(&["floor", "--check", "r.json"]));
    assert_eq!(code(&bench.run(&["floor", "6^4", "--proof", "t.json"])), 0);
    assert_snapshot!("floor_check_recorded", bench.show(&["floor", "--check", "t.json"]));
    assert_snapshot!("floor_check_deep", bench.show(&["floor", "--check", "t.json", "--deep"]));
    bench.put("s.json", &bench.get("p.json")[..40]);
    assert_snapshot!("floor_check_cut", bench.show(&["floor", "--check", "s.json"]));
}

#[test]
fn catalog() {
    let bench = Bench::new();
    assert_snapshot!("catalog", bench.show(&["catalog", "--runs", "4-18"]));
    assert_snapshot!("catalog_strength_3", bench.show(&["catalog", "--runs", "8-24", "--strength", "3"]));
    assert_snapshot!(
        "catalog_containing",
        bench.show(&["catalog", "--containing", "2 3^7", "--runs", "4-36"])
    );
    assert_snapshot!("catalog_json", bench.show(&["catalog", "--runs", "8", "--json"]));
    assert_snapshot!("catalog_nothing", bench.show(&["catalog", "--runs", "7"]));
    assert_snapshot!(
        "catalog_nothing_contains",
        bench.show(&["catalog", "--runs", "4-17", "--containing", "2 3^7"])
    );
}

/// A parent needs as many factors as the strength, or it is no array of that strength at all.
#[test]
fn no_parent_has_fewer_factors_than_the_strength() {
    let output = Bench::new().run(&["catalog", "--strength", "3", "--json"]);
    assert!(stdout(&output).lines().count() > 20);
    for line in stdout(&output).lines() {
        let parent: serde_json::Value = serde_json::from_str(line).unwrap();
        let mix: trysquare::mix::Mix = parent["mix"].as_str().unwrap().parse().unwrap();
        assert!(mix.factors() >= 3, "{line}");
    }
}
