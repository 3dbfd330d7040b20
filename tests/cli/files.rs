//! Output files appear whole or not at all; a closed pipe is no accident.

use std::process::Stdio;

use crate::bench::{Bench, code, stderr, stdout};

#[test]
fn a_file_holds_what_stdout_would() {
    let bench = Bench::new();
    for format in ["csv", "json", "text"] {
        let printed = bench.run(&["seek", "2^4 4", "--format", format]);
        let written = bench.run(&["seek", "2^4 4", "--format", format, "--out", "o"]);
        assert_eq!((code(&written), stdout(&written)), (0, ""));
        assert_eq!(bench.get("o"), stdout(&printed));
        assert_eq!(bench.files(), ["o"]);
    }
}

#[test]
fn what_was_written_can_be_read() {
    let bench = Bench::new();
    for format in ["csv", "json", "text"] {
        for symbols in ["zero", "one", "coded"] {
            let arguments = [
                "seek",
                "3 2 4",
                "--format",
                format,
                "--symbols",
                symbols,
                "--out",
                "o",
                "--certificate",
                "c",
            ];
            assert_eq!(code(&bench.run(&arguments)), 0);
            let output = bench.run(&["recheck", "c", "o"]);
            assert_eq!(code(&output), 0, "{format} {symbols}: {}{}", stdout(&output), stderr(&output));
        }
    }
}

#[test]
fn nothing_is_left_behind_when_there_is_no_array() {
    let bench = Bench::with("o", "what was there before");
    for max_runs in ["30", "40"] {
        let arguments = ["seek", "6^4", "--max-runs", max_runs, "--out", "o", "--certificate", "c"];
        assert_ne!(code(&bench.run(&arguments)), 0);
        assert_eq!(bench.files(), ["o"]);
        assert_eq!(bench.get("o"), "what was there before");
    }
}

#[test]
fn quiet_says_nothing() {
    let bench = Bench::with("a.csv", "0,0\n0,1\n1,0\n1,1\n");
    for arguments in [["seek", "2^3", "--quiet"], ["certify", "a.csv", "--quiet"]] {
        let output = bench.run(&arguments);
        assert_eq!((code(&output), stderr(&output)), (0, ""));
    }
}

#[test]
fn a_closed_pipe_ends_the_output_quietly() {
    let bench = Bench::with("a.csv", "a,b\n0,0\n0,1\n1,0\n1,1\n");
    bench.put("b.csv", "a,b\n0,0\n0,1\n1,0\n1,0\n");
    bench.put("mixes.txt", "2^3\n3^4\n");
    let cases: [(&[&str], i32); 7] = [
        (&["seek", "2^3", "--quiet"], 0),
        (&["seek", "2^3", "--json", "--quiet"], 0),
        (&["seek", "--batch", "mixes.txt", "--quiet"], 0),
        (&["certify", "a.csv", "--quiet"], 0),
        (&["certify", "b.csv", "--quiet"], 1),
        (&["floor", "2^3"], 0),
        (&["catalog", "--runs", "8", "--json"], 0),
    ];
    for (arguments, expected) in cases {
        let mut child = bench.command(arguments).spawn().unwrap();
        drop(child.stdout.take());
        let output = child.wait_with_output().unwrap();
        assert_eq!((code(&output), stderr(&output)), (expected, ""), "{arguments:?}");
    }
}

#[cfg(unix)]
#[test]
fn an_interrupt_leaves_nothing_behind() {
    let bench = Bench::new();
    let mut child =
        bench.command(&["seek", "--batch", "-", "--out", "o"]).stdin(Stdio::piped()).spawn().unwrap();
    // The program waits for a line; its unfinished file shows that it is ready.
    while bench.files().is_empty() {
        std::thread::sleep(std::time::Duration::from_millis(5));
    }
    let sent = std::process::Command::new("kill").args(["-INT", &child.id().to_string()]).status().unwrap();
    assert!(sent.success());
    let stdin = child.stdin.take();
    let output = child.wait_with_output().unwrap();
    drop(stdin);
    assert_eq!((code(&output), stderr(&output)), (4, "error: interrupted; no file was written\n"));
    assert_eq!(bench.files(), Vec::<String>::new());
}

#[cfg(unix)]
#[test]
fn a_link_is_followed_and_a_device_written_to() {
    use std::os::unix::fs::{FileTypeExt, PermissionsExt, symlink};
    let bench = Bench::with("real.csv", "before");
    symlink("real.csv", bench.path("link.csv")).unwrap();
    assert_eq!(code(&bench.run(&["seek", "2^3", "--out", "link.csv"])), 0);
    assert!(bench.path("link.csv").is_symlink());
    assert!(bench.get("real.csv").starts_with("F1,F2,F3\n"));
    let mode = bench.path("real.csv").metadata().unwrap().permissions().mode();
    assert_ne!(mode & 0o044, 0, "a new file is readable as the umask allows");
    assert_eq!(code(&bench.run(&["seek", "2^3", "--out", "/dev/null", "--certificate", "/dev/null"])), 0);
    assert!(std::fs::metadata("/dev/null").unwrap().file_type().is_char_device());
}
