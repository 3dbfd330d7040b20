//! Command lines that make no sense: a message that says what to type, exit code 2, no file.

use insta::assert_snapshot;

use crate::bench::{Bench, code, shown, stdout};

/// Each is refused with exit code 2, prints nothing to stdout and leaves no file.
fn refused(name: &str, cases: &[&[&str]]) {
    let bench = Bench::with("plan.csv", "a,b\n0,0\n0,1\n1,0\n1,1\n");
    let mut text = String::new();
    for arguments in cases {
        let output = bench.run(arguments);
        assert_eq!((code(&output), stdout(&output)), (2, ""), "{arguments:?}");
        assert_eq!(bench.files(), ["plan.csv"], "{arguments:?}");
        text.push_str(&shown(arguments, &output));
        text.push('\n');
    }
    assert_snapshot!(name, text);
}

#[test]
fn mixes() {
    refused(
        "usage_mixes",
        &[
            &["seek", "2^1 1^3", "--out", "o.csv"],
            &["seek", "0", "--out", "o.csv"],
            &["seek", ""],
            &["seek", "two threes"],
            &["seek", "3 65536^2"],
            &["floor", "2^"],
            &["catalog", "--containing", "2^0"],
            &["certify", "plan.csv", "--levels", "2 x 1"],
        ],
    );
}

#[test]
fn strengths() {
    refused(
        "usage_strengths",
        &[
            &["seek", "2^3", "--strength", "0", "--out", "o.csv", "--certificate", "c.json"],
            &["seek", "2^3", "--strength", "4", "--out", "o.csv"],
            &["seek", "2^3", "--strength", "two"],
            &["floor", "2^3", "--strength", "0", "--proof", "p.json"],
            &["floor", "2^3", "--strength", "4", "--proof", "p.json"],
            &["certify", "plan.csv", "--strength", "0"],
            &["certify", "plan.csv", "--strength", "3", "--certificate", "c.json"],
            &["catalog", "--strength", "1"],
            &["catalog", "--strength", "3", "--containing", "2^2"],
        ],
    );
}

#[test]
fn contradictions() {
    refused(
        "usage_contradictions",
        &[
            &["seek", "2^3", "--batch", "plan.csv"],
            &["seek", "--batch", "plan.csv", "--format", "csv", "--out", "o"],
            &["seek", "--batch", "plan.csv", "--certificate", "c.json"],
            &["seek", "2^3", "--json", "--format", "csv", "--out", "o"],
            &["seek", "2^3", "--json", "--format", "text"],
            &["seek", "2^3", "--out", "o", "--certificate", "o"],
            &["seek", "--batch", "plan.csv", "--out", "plan.csv"],
            &["seek", "2^3", "--certificate", "-"],
            &["certify", "plan.csv", "--certificate", "plan.csv"],
            &["certify", "plan.csv", "--only", "a", "--only", "c"],
            &["recheck", "-", "-"],
            &["floor", "2^3", "--check", "plan.csv"],
            &["floor", "2^3", "--proof", "-"],
        ],
    );
}

#[test]
fn the_rest() {
    refused(
        "usage_rest",
        &[
            &[],
            &["seek"],
            &["floor"],
            &["certify"],
            &["recheck", "plan.csv"],
            &["wish"],
            &["seek", "2^3", "--threads", "0"],
            &["seek", "2^3", "--max-runs", "0"],
            &["seek", "2^3", "--symbols", "two"],
            &["seek", "2^3", "--format", "xml"],
            &["catalog", "--runs", "36-12"],
            &["seek", "2^3", "--out", "no/such/folder/o.csv"],
            &["seek", "2^3", "--out", "."],
        ],
    );
}
