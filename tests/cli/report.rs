//! `--report`: one page, whole or not at all.

use crate::bench::{Bench, code, stderr};

#[test]
fn a_page_for_every_command_that_has_an_array() {
    let bench = Bench::with("a.csv", "heat,stir\nlow,slow\nlow,slow\nhigh,slow\nhigh,fast\n");
    let output = bench.run(&["certify", "a.csv", "--header", "yes", "--report", "a.html"]);
    assert_eq!(code(&output), 1);
    let page = bench.get("a.html");
    assert!(page.contains("Not orthogonal at strength 2") && page.contains("<bdi>fast</bdi>"));
    assert!(page.contains("trysquare certify a.csv --strength 2 --header yes"));
    for (request, words) in [
        (["seek", "2^3", "--report", "b.html", "--out", "b.csv"].as_slice(), "This plan has just so many"),
        (&["seek", "2^8 5", "--budget", "18", "--report", "b.html"], "Near, not orthogonal"),
        (&["seek", "2^3", "--budget", "5", "--report", "b.html"], "Orthogonal at strength 2"),
    ] {
        assert_eq!(code(&bench.run(request)), 0);
        let page = bench.get("b.html");
        assert!(page.contains(words), "{request:?}");
        assert_eq!(code(&bench.run(request)), 0);
        assert_eq!(bench.get("b.html"), page, "the same bytes again");
    }
    let output = bench.run(&["certify", "b.csv", "--report", "c.html", "--quiet"]);
    assert_eq!(code(&output), 0);
    assert!(bench.get("c.html").contains("no plan of fewer runs can do that"));
}

#[test]
fn no_page_without_an_array_and_none_over_another_file() {
    let bench = Bench::with("a.csv", "0,0\n0,1\n1,0\n1,1\n");
    assert_eq!(code(&bench.run(&["seek", "6^4", "--max-runs", "30", "--report", "p.html"])), 1);
    assert_eq!(bench.files(), ["a.csv"]);
    for arguments in [
        ["certify", "a.csv", "--report", "a.csv"].as_slice(),
        &["certify", "a.csv", "--report", "-"],
        &["certify", "a.csv", "--report", "p", "--certificate", "p"],
        &["seek", "2^3", "--report", "p", "--out", "p"],
        &["seek", "--batch", "a.csv", "--report", "p"],
    ] {
        let output = bench.run(arguments);
        assert_eq!(code(&output), 2, "{arguments:?}: {}", stderr(&output));
        assert_eq!(bench.files(), ["a.csv"]);
    }
}
