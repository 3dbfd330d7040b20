//! `seek --batch`.

use std::io::{BufRead, BufReader, Write};
use std::process::Stdio;

use insta::assert_snapshot;
use serde_json::Value;

use crate::bench::{Bench, code, shown, stdout};

const MIXES: &str = "\u{feff}# what the ovens need\n2^1 3^7\n\n  2^3  \r\n2^1 1^3\n2^21 3^2\n2\n3^4";

#[test]
fn every_line_is_answered_in_order() {
    let bench = Bench::with("mixes.txt", MIXES);
    let output = bench.run(&["seek", "--batch", "mixes.txt", "--max-runs", "40"]);
    let answers: Vec<Value> = stdout(&output).lines().map(|l| serde_json::from_str(l).unwrap()).collect();
    let requests: Vec<&str> = answers.iter().map(|a| a["request"].as_str().unwrap()).collect();
    assert_eq!(requests, ["2^1 3^7", "2^3", "2^1 1^3", "2^21 3^2", "2^1", "3^4"]);
    let runs: Vec<Option<u64>> = answers.iter().map(|a| a["runs"].as_u64()).collect();
    assert_eq!(runs, [Some(18), Some(4), None, None, Some(2), Some(9)]);
    assert_eq!(answers[2]["line"], 5);
    assert_eq!(answers[3]["verdict"], "limit-reached");
    assert_eq!(code(&output), 3);
}

#[test]
fn text() {
    let bench = Bench::new();
    let arguments = ["seek", "--batch", "-", "--max-runs", "3"];
    assert_snapshot!("batch_stdin", shown(&arguments, &bench.run_on(&arguments, "2\n2 2\n")));
    let arguments = ["seek", "--batch", "-", "--strength", "3"];
    assert_snapshot!("batch_errors", shown(&arguments, &bench.run_on(&arguments, "2 3\nthree\n65535^4\n")));
    let arguments = ["seek", "--batch", "-"];
    assert_snapshot!("batch_empty", shown(&arguments, &bench.run_on(&arguments, "# nothing\n\n")));
}

#[test]
fn the_worst_line_decides_the_exit_code() {
    let bench = Bench::new();
    for (lines, max_runs, expected) in [
        ("2\n3\n", "9", 0),
        ("2\n2 2\n", "3", 1),
        ("2^4\n2^21 3^2\n2 2\n", "40", 4),
        ("2\n1\n2^21 3^2\n", "40", 3),
    ] {
        let output = bench.run_on(&["seek", "--batch", "-", "--max-runs", max_runs], lines);
        assert_eq!(code(&output), expected, "{lines:?}");
        assert_eq!(stdout(&output).lines().count(), lines.lines().count());
    }
}

#[test]
fn an_answer_does_not_wait_for_the_next_question() {
    let mut child = Bench::new().command(&["seek", "--batch", "-"]).stdin(Stdio::piped()).spawn().unwrap();
    let mut questions = child.stdin.take().unwrap();
    let mut answers = BufReader::new(child.stdout.take().unwrap());
    for mix in ["2^3", "3^4", "2^11"] {
        writeln!(questions, "{mix}").unwrap();
        let mut line = String::new();
        answers.read_line(&mut line).unwrap();
        assert!(line.starts_with(&format!("{{\"request\":\"{mix}\"")), "{line}");
    }
    drop(questions);
    assert!(child.wait().unwrap().success());
}

#[test]
fn bytes_that_are_no_text_are_an_error_on_their_line() {
    let bench = Bench::with("mixes.txt", b"2^3\n2\xff\n3^4\n");
    let output = bench.run(&["seek", "--batch", "mixes.txt"]);
    let answers: Vec<Value> = stdout(&output).lines().map(|l| serde_json::from_str(l).unwrap()).collect();
    assert_eq!((answers.len(), &answers[1]["line"], code(&output)), (3, &Value::from(2), 3));
}

/// Same request, same bytes: mixed requests from a fixed rule, answered by one and by two threads.
#[test]
fn threads_change_nothing() {
    let bench = Bench::new();
    let mixes: String = (0..120).map(|i| format!("2^{} {}^{}\n", 1 + i % 7, 3 + i % 4, 1 + i % 3)).collect();
    bench.put("mixes.txt", mixes);
    let answers = |threads| bench.run(&["seek", "--batch", "mixes.txt", "--threads", threads]);
    let (one, two) = (answers("1"), answers("2"));
    assert_eq!(code(&one), 0);
    assert_eq!(stdout(&one).lines().count(), 120);
    assert_eq!(one.stdout, two.stdout);
    for mix in ["2^1 3^7", "2^20 4", "3^9 9"] {
        let answer = |threads| bench.run(&["seek", mix, "--json", "--threads", threads]).stdout;
        assert_eq!(answer("1"), answer("2"));
    }
}
