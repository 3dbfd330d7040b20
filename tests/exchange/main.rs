//! Files as other people send them (all invented here): what they are taken to be, and what is said
//! about those that cannot be read.

mod properties;

use trysquare::exchange::{HeaderOption, ReadOptions, Received, RunColumn, Separator, json, read_any};

fn file(name: &str) -> Vec<u8> {
    let path = format!("{}/tests/fixtures/received/{name}", env!("CARGO_MANIFEST_DIR"));
    std::fs::read(path).unwrap()
}

fn received(name: &str) -> Received {
    read_any(&file(name), &ReadOptions::default()).unwrap_or_else(|e| panic!("{name}: {e}"))
}

fn refused(name: &str, options: &ReadOptions) -> String {
    read_any(&file(name), options).map_or_else(|e| e.to_string(), |r| format!("read: {}", r.describe()))
}

/// The 9-run array with columns a, b, a + b, a + 2b over GF(3).
fn nine_runs() -> Vec<Vec<u16>> {
    (0..9).map(|i| (i / 3, i % 3)).map(|(a, b)| vec![a, b, (a + b) % 3, (a + 2 * b) % 3]).collect()
}

/// The 8-run array with columns a, b, c, a + b over GF(2).
fn eight_runs() -> Vec<Vec<u16>> {
    (0..8).map(|i| [i >> 2 & 1, i >> 1 & 1, i & 1]).map(|[a, b, c]| vec![a, b, c, a ^ b]).collect()
}

fn rows(received: &Received) -> Vec<Vec<u16>> {
    received.array.rows().collect()
}

#[test]
fn a_spreadsheet_with_decimal_commas_and_loose_ends() {
    let r = received("spreadsheet.csv");
    assert_eq!(
        r.describe(),
        "header: yes; run column: Run; separator: semicolon; 9 runs × 4 factors; levels 3 3 3 3; \
         factors oven °C, feed, time, mould"
    );
    assert_eq!(
        r.remarks,
        ["lines without any filled cell, skipped: 1", "lines with empty cells at the end, left out: 10"]
    );
    assert_eq!(r.array.column(0), [0, 0, 0, 1, 1, 1, 2, 2, 2]);
    assert_eq!(r.array.column(1), [0, 1, 2, 0, 1, 2, 0, 1, 2]);
    assert_eq!((r.level_name(1, 0), r.level_name(1, 2)), (Some("12,5"), Some("17,5")));
    // Texts in the order of their code points: kurz, lang, mittel.
    assert_eq!(r.level_name(2, 1), Some("lang"));
    assert_eq!(r.level_name(2, 3), None);
}

#[test]
fn tabs_and_carriage_returns_without_a_header() {
    let r = received("tabs_cr.txt");
    assert_eq!(
        r.describe(),
        "header: no; run column: none; separator: tab; 9 runs × 4 factors; levels 3 3 3 3"
    );
    assert_eq!(rows(&r), nine_runs());
    assert_eq!(r.level_name(0, 0), Some("-1"));
}

#[test]
fn quoted_cells_with_separators_quotes_and_line_ends() {
    let r = received("quoted.csv");
    assert_eq!(
        r.describe(),
        "header: yes; run column: none; separator: comma; 8 runs × 4 factors; levels 2 2 2 2; \
         factors heat, oven, part, fan, speed (rpm)"
    );
    assert_eq!(r.level_name(0, 0), Some("high \"ramp\""));
    assert_eq!(r.level_name(3, 0), Some("1e3"));
    assert_eq!(r.array.column(3), [0, 0, 1, 1, 1, 1, 0, 0]);
}

#[test]
fn a_header_over_nothing_but_texts() {
    assert_eq!(
        received("all_text.csv").describe(),
        "header: yes; run column: none; separator: comma; 8 runs × 4 factors; levels 2 2 2 2; \
         factors oven, temp, mould, sheet"
    );
    let r = received("letters_no_header.csv");
    assert_eq!(
        r.describe(),
        "header: no; run column: none; separator: comma; 9 runs × 4 factors; levels 3 3 3 3"
    );
    assert_eq!(rows(&r), nine_runs());
}

#[test]
fn a_first_column_without_a_name_is_an_index() {
    let r = received("index.csv");
    assert_eq!(
        r.describe(),
        "header: yes; run column: column 1; separator: comma; 8 runs × 4 factors; levels 2 2 2 2; \
         factors x1, x2, x3, x4"
    );
    assert_eq!(rows(&r), eight_runs());
}

#[test]
fn run_orders_comments_and_a_response() {
    let options = ReadOptions { leave_out: vec!["Yield".into()], ..ReadOptions::default() };
    let r = read_any(&file("orders.csv"), &options).unwrap();
    assert_eq!(
        r.describe(),
        "header: yes; run column: StdOrder, RunOrder; left out: yield; separator: comma; \
         8 runs × 4 factors; levels 2 2 2 2; factors A, B, C, D"
    );
    assert_eq!(r.remarks, ["lines that begin with #, taken as comments: 2"]);
    assert_eq!(rows(&r), eight_runs());
    let options = ReadOptions { only: Some(vec!["D".into(), "3".into()]), ..ReadOptions::default() };
    let r = read_any(&file("orders.csv"), &options).unwrap();
    assert_eq!(r.names.unwrap(), ["D", "A"]);
    assert_eq!(r.left_out, ["StdOrder", "RunOrder", "B", "C", "yield"]);
}

#[test]
fn an_unnamed_column_that_counts_the_runs() {
    let r = received("unnamed_runs.csv");
    assert_eq!(
        r.describe(),
        "header: no; run column: column 1; separator: comma; 9 runs × 4 factors; levels 3 3 3 3"
    );
    assert_eq!(r.remarks, ["column 1 counts the runs and has no name: it was taken as the run number"]);
    assert_eq!(rows(&r), nine_runs());
    let options = ReadOptions { run_column: RunColumn::No, ..ReadOptions::default() };
    let r = read_any(&file("unnamed_runs.csv"), &options).unwrap();
    assert_eq!(r.array.levels(), [9, 3, 3, 3, 3]);
}

#[test]
fn cells_aligned_with_blanks() {
    let r = received("aligned.txt");
    assert_eq!(
        r.describe(),
        "header: yes; run column: run; separator: blank; 4 runs × 2 factors; levels 2 2; \
         factors oven, lid position"
    );
}

#[test]
fn every_refusal_names_the_place_and_what_to_do() {
    let default = ReadOptions::default();
    let cases = [
        (
            "bad_ragged.csv",
            "line 4, column 3: the row has 2 cells, the table has 3 columns; every row needs 3",
        ),
        (
            "bad_too_many_cells.csv",
            "line 5, column 4: the row has 4 cells, the table has 3 columns; every row needs 3",
        ),
        (
            "bad_empty_cell.csv",
            "line 3, column 2: the cell is empty; every run needs a level of every factor, and every column \
             of a header a name",
        ),
        (
            "bad_one_level.csv",
            "line 2, column 2 (bath temp): the factor has one level only, \"20\" in every run; leave it out \
             with --leave-out \"bath temp\", or give the number of levels it should have with --levels",
        ),
        (
            "bad_header_only.csv",
            "the file has no runs: its only line, line 1, seems to name the columns; if that line is a run, \
             say so with --header no",
        ),
        ("bad_empty.csv", "the file is empty; it should hold one line per run"),
        ("bad_utf16.csv", "the file is encoded in UTF-16 (little endian); save it as UTF-8"),
        (
            "bad_latin1.csv",
            "line 1: byte 6 of the file is not UTF-8; save the file as UTF-8 (it may be in a Windows or Latin \
             encoding)",
        ),
        (
            "bad_binary.bin",
            "line 1: byte 6 of the file is a NUL, which no text holds; give a text file, CSV or JSON",
        ),
        (
            "bad_open_quote.csv",
            "line 3, column 2: the quote that opens here is never closed; close it, or double every quote \
             inside the cell",
        ),
        (
            "bad_after_quote.csv",
            "line 3, column 2: text after the closing quote; double every quote inside the cell, or name the \
             right --separator",
        ),
        (
            "bad_header_or_run.csv",
            "line 1, column 3: the first row may be a header or a run: \"C\" in column 3 occurs nowhere below, \
             \"A\" in column 1 does; say which with --header yes or --header no",
        ),
        (
            "bad_typo_first_run.csv",
            "line 1, column 1: the first row may be a header or a run: \"lwo\" in column 1 occurs nowhere below, \
             \"0\" in column 2 does; say which with --header yes or --header no",
        ),
        (
            "bad_numbers_as_names.csv",
            "line 1, column 1: the first row may be a header or a run: its cells occur below, but without it \
             every column is balanced; say which with --header yes or --header no",
        ),
        (
            "bad_run_or_factor.csv",
            "line 2, column 1: mixture may number the runs or be a factor: all its values differ; say which \
             with --run-column 1 or --run-column no",
        ),
        (
            "bad_repeated_runs_column.csv",
            "line 2, column 1: Run may number the runs or be a factor: it repeats values; say which with \
             --run-column 1 or --run-column no",
        ),
        (
            "bad_comment_or_run.csv",
            "line 1, column 1: the line begins with # and has 2 cells, as many as the table; delete it if it is \
             a comment, put the first cell in quotes if it is not",
        ),
        (
            "bad_thousands.csv",
            "line 3, column 1: \"1\" and \"1,000\" may be one level or two; write equal levels alike, and \
             numbers without thousands separators",
        ),
        ("bad_not_closed.json", "line 1, column 42: not JSON: EOF while parsing a list"),
        ("bad_ragged.json", "line 3, column 4: run 3 has 1 cell, run 1 has 2; every run needs the same"),
        ("bad_null.json", "line 1, column 14: the cell is empty; every run needs a level of every factor"),
        (
            "bad_no_array.json",
            "line 1, column 11: the object has no key \"array\"; give the runs under this key",
        ),
    ];
    let wrong: Vec<(&str, String)> = cases
        .iter()
        .map(|&(n, m)| (n, m, refused(n, &default)))
        .filter(|(_, m, r)| m != r)
        .map(|(n, _, r)| (n, r))
        .collect();
    assert!(wrong.is_empty(), "{wrong:#?}");
    let listed = cases.map(|(name, _)| name);
    let folder = format!("{}/tests/fixtures/received", env!("CARGO_MANIFEST_DIR"));
    for entry in std::fs::read_dir(folder).unwrap() {
        let name = entry.unwrap().file_name().into_string().unwrap();
        assert!(!name.starts_with("bad_") || listed.contains(&name.as_str()), "{name} is not tested");
    }
}

#[test]
fn options_settle_what_cannot_be_told() {
    let header = |header| ReadOptions { header, ..ReadOptions::default() };
    let read = |name: &str, options: &ReadOptions| read_any(&file(name), options).unwrap();
    let r = read("bad_header_or_run.csv", &header(HeaderOption::Yes));
    assert_eq!((r.array.runs(), r.array.levels()), (4, &[2, 2, 2][..]));
    let r = read("bad_header_or_run.csv", &header(HeaderOption::No));
    assert_eq!((r.array.runs(), r.array.levels()), (5, &[2, 2, 3][..]));
    let r = read("bad_numbers_as_names.csv", &header(HeaderOption::Yes));
    assert_eq!((r.array.runs(), r.names.unwrap().len()), (9, 3));
    let run_column = |run_column| ReadOptions { run_column, ..ReadOptions::default() };
    let r = read("bad_run_or_factor.csv", &run_column(RunColumn::First));
    assert_eq!((r.array.levels(), &r.run_columns[..]), (&[2, 2][..], &["mixture".to_owned()][..]));
    let r = read("bad_run_or_factor.csv", &run_column(RunColumn::Column("MIXTURE".into())));
    assert_eq!(r.array.levels(), [2, 2]);
    let r = read("bad_run_or_factor.csv", &run_column(RunColumn::No));
    assert_eq!(r.array.levels(), [4, 2, 2]);
    let levels = |mix: &str| ReadOptions { levels: Some(mix.parse().unwrap()), ..ReadOptions::default() };
    let r = read("bad_run_or_factor.csv", &levels("4 2 2"));
    assert_eq!(r.array.levels(), [4, 2, 2]);
    let r = read("bad_one_level.csv", &levels("2 3 2"));
    assert_eq!((r.array.levels(), r.array.column(1)), (&[2, 3, 2][..], &[0; 4][..]));
}

#[test]
fn options_that_fit_no_column_are_refused() {
    let leave_out = |names: &[&str]| ReadOptions {
        leave_out: names.iter().map(|&n| n.to_owned()).collect(),
        ..ReadOptions::default()
    };
    assert_eq!(
        refused("all_text.csv", &leave_out(&["yield"])),
        "there is no column \"yield\"; the columns are oven, temp, mould, sheet"
    );
    assert_eq!(
        refused("tabs_cr.txt", &leave_out(&["5"])),
        "there is no column \"5\"; the columns have the numbers 1 to 4"
    );
    assert_eq!(
        refused("all_text.csv", &leave_out(&["1", "2", "3", "4"])),
        "no column is left to be a factor; leave out fewer"
    );
    let levels = |mix: &str| ReadOptions { levels: Some(mix.parse().unwrap()), ..ReadOptions::default() };
    assert_eq!(
        refused("tabs_cr.txt", &levels("3 3 2 3")),
        "line 1, column 3: 3 different levels, but 2 are declared for the factor"
    );
    assert_eq!(
        refused("tabs_cr.txt", &levels("3 3")),
        "levels are declared for 2 factors, the file has 4; correct --levels, or name run numbers and \
         responses with --run-column and --leave-out"
    );
    let wrong =
        ReadOptions { separator: Some(Separator::Comma), header: HeaderOption::No, ..ReadOptions::default() };
    assert_eq!(read_any(&file("tabs_cr.txt"), &wrong).unwrap().array.levels(), [9]);
    let e = read_any(b"y,A,y\n1,0,0\n1,1,1\n2,0,1\n2,1,0\n", &leave_out(&["y"])).unwrap_err();
    assert_eq!(e.to_string(), "columns 1 and 3 are both named \"y\"; give the number instead");
}

#[test]
fn more_levels_than_an_array_holds() {
    let text: String = (0..65_536).map(|i| format!("x{},{}\n", i, i % 2)).collect();
    let options =
        ReadOptions { run_column: RunColumn::No, header: HeaderOption::No, ..ReadOptions::default() };
    assert_eq!(
        read_any(text.as_bytes(), &options).unwrap_err().to_string(),
        "line 1, column 1: 65536 different levels, a factor has at most 65535; if the column is no factor, \
         leave it out with --leave-out 1"
    );
}

#[test]
fn json_of_every_shape() {
    let read = |text: &str| json::read(text.as_bytes(), &ReadOptions::default()).unwrap();
    let seek = read(
        r#"{"request":"2^1 3^1","strength":2,"runs":6,"floor":{"proof":{}},"levels":[2,3],
            "array":[[0,0],[0,1],[0,2],[1,0],[1,1],[1,2]],"recipe":{}}"#,
    );
    assert_eq!(seek.describe(), "JSON; 6 runs × 2 factors; levels 2 3");
    let gap = read(r#"{"levels":[2,4],"array":[[0,0],[0,3],[1,0],[1,3]]}"#);
    assert_eq!((gap.array.levels(), gap.array.column(1)), (&[2, 4][..], &[0, 3, 0, 3][..]));
    let bare = read("[[1,\"a\"],[2,\"b\"],[3,\"a\"],[4,\"b\"]]");
    assert_eq!(bare.array.levels(), [4, 2]);
    let named = read(
        r#"[{"run":1,"oven":180.5,"fan":true},{"fan":false,"run":2,"oven":180.5},
            {"run":3,"oven":200,"fan":true},{"run":4,"oven":200,"fan":false}]"#,
    );
    assert_eq!(named.describe(), "JSON; run column: run; 4 runs × 2 factors; levels 2 2; factors oven, fan");
    let refused = |text: &str| json::read(text.as_bytes(), &ReadOptions::default()).unwrap_err().to_string();
    assert_eq!(refused("[]"), "line 1, column 2: the array has no runs");
    assert_eq!(
        refused(r#"[{"a":0,"b":1},{"a":0,"c":1}]"#),
        "line 1, column 25: run 2 names \"c\", which run 1 does not"
    );
    assert_eq!(
        refused("[[0,1],[0,[1]]]"),
        "line 1, column 11: invalid type: sequence, expected a level, that is a number or a text"
    );
}

/// A header is taken as one only when its cells cannot be levels.
#[test]
fn headers_are_told_from_runs_or_asked_for() {
    let below = |first: &str, rows: &[&str]| {
        let text = format!("{first}\n{}\n", rows.join("\n"));
        let options = ReadOptions { run_column: RunColumn::No, ..ReadOptions::default() };
        match read_any(text.as_bytes(), &options) {
            Ok(r) => (if r.header { "header" } else { "run" }).to_owned(),
            Err(e) => e.to_string().split_once(": ").unwrap().1[..33].to_owned(),
        }
    };
    let unclear = "the first row may be a header or ";
    let numbers = ["0,0,0", "0,1,1", "1,0,1", "1,1,0"];
    let texts = ["low,cold,A", "low,hot,B", "high,cold,B", "high,hot,A"];
    let reals = ["0.1,0.7", "0.2,0.3", "0.3,0.9"];
    for (first, rows, expected) in [
        ("A,B,C", &numbers[..], "header"),
        ("0,1,1", &numbers, "run"),
        // A third level that occurs once; a run with a letter for a digit.
        ("2,0,0", &numbers, "run"),
        ("O,0,0", &numbers, unclear),
        ("1,2,3", &numbers, unclear),
        ("y,A,y", &numbers, "header"),
        ("oven,temp,mould", &texts, "header"),
        ("low,cold,A", &texts[1..], "run"),
        // A run done twice, or names that are levels too: balanced only without it.
        ("low,hot,A", &texts, unclear),
        // A column named like one of its levels; a centre point.
        ("oven,temp,A", &texts, unclear),
        ("mid,mid,mid", &texts, unclear),
        ("1,2,3", &texts, "header"),
        ("x,y", &reals, "header"),
        ("0.4,0.1", &reals, "run"),
        ("oven", &["low", "high", "low", "high"], unclear),
        ("oven", &["0", "1", "0", "1"], "header"),
        ("oven,temp", &["low,cold", "high,hot"], unclear),
        ("Run,A,B", &["1,A,B", "2,A,A", "3,B,B", "4,B,A"], "header"),
    ] {
        assert_eq!(below(first, rows), expected, "{first} over {rows:?}");
    }
}

/// The columns that number the runs, told apart from factors.
#[test]
fn run_columns_are_told_from_factors_or_asked_for() {
    let of = |text: &str| match read_any(text.as_bytes(), &ReadOptions::default()) {
        Ok(r) => r.run_columns.join(", "),
        Err(e) => e.to_string(),
    };
    assert_eq!(of("No.,A,B\n3,0,0\n1,0,1\n4,1,0\n2,1,1\n"), "No.");
    assert_eq!(of("A,B,run order\n0,0,2\n0,1,1\n1,0,4\n1,1,3\n"), "run order");
    assert_eq!(of("run,A,B\nR1,0,0\nR2,0,1\nR3,1,0\nR4,1,1\n"), "run");
    assert_eq!(of("0 0 0\n1 0 1\n2 1 0\n3 1 1\n"), "column 1");
    // Levels as many as runs in every column: the first is one like the others.
    assert_eq!(of("0,0\n1,1\n2,2\n"), "");
    // Names that Trysquare itself gives to factors.
    assert_eq!(of("F1,F2\n0,0\n1,1\n2,0\n3,1\n"), "");
    let asked = "may number the runs or be a factor: all its values differ; say which with --run-column 1 or \
                 --run-column no";
    assert_eq!(of("3,0,0\n1,0,1\n4,1,0\n2,1,1\n"), format!("line 1, column 1: column 1 {asked}"));
    assert_eq!(
        of("mix 1,0,0\nmix 2,0,1\nmix 3,1,0\nmix 4,1,1\n"),
        format!("line 1, column 1: column 1 {asked}")
    );
}
