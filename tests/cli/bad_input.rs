//! Files that cannot be read as an array: message with the place, exit code 3, no output file.

use insta::assert_snapshot;

use crate::bench::{Bench, code, shown, stdout};

fn refused(name: &str, file: &str, content: impl AsRef<[u8]>) {
    let bench = Bench::with(file, content);
    let arguments = ["certify", file, "--certificate", "c.json", "--json"];
    let output = bench.run(&arguments);
    assert_eq!((code(&output), stdout(&output)), (3, ""), "{name}");
    assert_eq!(bench.files(), [file], "{name}");
    assert_snapshot!(format!("input_{name}"), shown(&arguments, &output));
}

#[test]
fn files_that_are_no_arrays() {
    refused("ragged", "a.csv", "a,b,c\n0,0,0\n0,1\n1,0,1\n1,1,0\n");
    refused("too_wide", "a.csv", "a,b\n0,0\n0,1,1\n1,0\n1,1\n");
    refused("empty_cell", "a.csv", "a,b\n0,0\n0,\n1,0\n1,1\n");
    refused("one_level", "a.csv", "a,b\n0,5\n1,5\n0,5\n1,5\n");
    refused("no_runs", "a.csv", "oven,mould\n");
    refused("empty", "a.csv", "");
    refused("blank", "a.csv", "\n  \n# a comment\n\n");
    refused("nul", "a.csv", b"a,b\n0,0\n0,\0\n");
    refused("not_utf_8", "a.csv", b"a,b\n0,0\n0,\xff\n");
    refused("utf_16", "a.csv", b"\xff\xfea\0,\0b\0\n\0");
    refused("open_quote", "a.csv", "a,b\n0,\"1\n1,0\n");
    refused("after_quote", "a.csv", "a,b\n0,\"1\"x\n1,0\n");
    refused("header_unclear", "a.csv", "1,2\n3,4\n3,2\n1,4\n1,2\n");
    refused("json_cut", "a.json", "[[0,0],[0,1],[1");
    refused("json_ragged", "a.json", "[[0,0],[0]]");
    refused("json_no_array", "a.json", "{\"runs\":4}");
    refused("json_empty", "a.json", "[]");
}

#[test]
fn levels_that_do_not_fit() {
    let bench = Bench::with("a.csv", "a,b\n0,0\n0,1\n1,0\n1,2\n");
    for (name, levels) in [("declared", "2^2"), ("declared_factors", "2^3")] {
        let arguments = ["certify", "a.csv", "--levels", levels, "--certificate", "c.json"];
        let output = bench.run(&arguments);
        assert_eq!((code(&output), bench.files()), (3, vec!["a.csv".to_owned()]));
        assert_snapshot!(format!("input_{name}"), shown(&arguments, &output));
    }
}

#[test]
fn files_that_are_not_there() {
    let bench = Bench::with("a.csv", "0,0\n0,1\n1,0\n1,1\n");
    let cases: [&[&str]; 7] = [
        &["certify", "b.csv", "--certificate", "c.json"],
        &["certify", ".", "--certificate", "c.json"],
        &["recheck", "b.json", "a.csv"],
        &["recheck", "a.csv", "a.csv"],
        &["floor", "--check", "b.json"],
        &["floor", "--check", "a.csv"],
        &["seek", "--batch", "b.txt", "--out", "o"],
    ];
    let mut text = String::new();
    for arguments in cases {
        let output = bench.run(arguments);
        assert_eq!((code(&output), stdout(&output)), (3, ""), "{arguments:?}");
        assert_eq!(bench.files(), ["a.csv"]);
        text.push_str(&shown(arguments, &output));
        text.push('\n');
    }
    assert_snapshot!("input_missing", text);
}

/// A certificate cut anywhere is refused, never accepted and never a panic.
#[test]
fn a_cut_certificate_is_refused() {
    let bench = Bench::with("a.csv", "a,b\n0,0\n0,1\n1,0\n1,1\n");
    assert_eq!(code(&bench.run(&["certify", "a.csv", "--certificate", "c.json"])), 0);
    let whole = bench.get("c.json");
    for cut in (0..whole.trim_end().len()).step_by(17) {
        bench.put("d.json", &whole[..cut]);
        assert_eq!(code(&bench.run(&["recheck", "d.json", "a.csv"])), 3, "{cut}");
    }
    assert_eq!(code(&bench.run(&["recheck", "c.json", "a.csv"])), 0);
}
