//! Laws of reading and writing.

use proptest::prelude::*;
use trysquare::array::Array;
use trysquare::exchange::{
    Header, HeaderOption, ReadOptions, RunColumn, Separator, Symbols, csv, json, read_any, text,
};

fn options() -> impl Strategy<Value = ReadOptions> {
    (
        prop::sample::select(vec![HeaderOption::Auto, HeaderOption::Yes, HeaderOption::No]),
        prop::sample::select(vec![
            RunColumn::Auto,
            RunColumn::No,
            RunColumn::First,
            RunColumn::Column("2".into()),
        ]),
        prop::option::of(prop::sample::select(Separator::ALL.to_vec())),
        prop::collection::vec("[1-3a]", 0..2),
        prop::option::of(prop::collection::vec("[1-3a]", 0..3)),
        prop::option::of(prop::collection::vec(2u16..4, 1..4)),
    )
        .prop_map(|(header, run_column, separator, leave_out, only, levels)| ReadOptions {
            header,
            run_column,
            separator,
            leave_out,
            only,
            levels: levels.map(|l| trysquare::mix::Mix::new(l).unwrap()),
        })
}

/// Any array of up to 5 levels.
fn array() -> impl Strategy<Value = Array> {
    (1usize..20, prop::collection::vec(2u16..6, 1..6)).prop_flat_map(|(runs, levels)| {
        let cells: Vec<_> = levels.iter().map(|&s| prop::collection::vec(0..s, runs)).collect();
        cells.prop_map(move |columns| Array::new(runs, levels.clone(), columns.concat()).unwrap())
    })
}

/// An array in which every level occurs.
fn full_array() -> impl Strategy<Value = Array> {
    array().prop_map(|a| {
        let extra = usize::from(*a.levels().iter().max().unwrap());
        let symbol = |i: usize, j: usize| match i.checked_sub(extra) {
            Some(i) => a.get(i, j),
            None => (i % usize::from(a.levels()[j])) as u16,
        };
        Array::from_fn(a.runs() + extra, a.levels().to_vec(), symbol).unwrap()
    })
}

fn written(write: impl FnOnce(&mut Vec<u8>) -> std::io::Result<()>) -> Vec<u8> {
    let mut out = Vec::new();
    write(&mut out).unwrap();
    out
}

fn say(bytes: &[u8], options: &ReadOptions) {
    match read_any(bytes, options) {
        Ok(received) => assert!(!received.describe().is_empty()),
        Err(e) => assert!(!e.to_string().is_empty()),
    }
}

proptest! {
    #[test]
    fn no_bytes_panic(bytes in prop::collection::vec(any::<u8>(), 0..200), options in options()) {
        say(&bytes, &options);
    }

    #[test]
    fn no_csv_like_text_panics(
        text in "\u{FEFF}?[-+0-3ab.,;\t\" \r\n#]{0,60}|([ab01#]?[,; ][ab01\"]?[,; ][01]?[,; ]?\r?\n){0,8}",
        options in options(),
    ) {
        say(text.as_bytes(), &options);
        for separator in Separator::ALL {
            let _ = csv::read(text.as_bytes(), &ReadOptions { separator: Some(separator), ..options.clone() });
        }
    }

    #[test]
    fn no_json_like_text_panics(
        text in "[\\[{]([\\[\\]{},:\"0-2a ]|\"array\":|\"levels\":|null|\\[0,1\\],?){0,20}[\\]}]*",
        options in options(),
    ) {
        if let Err(e) = json::read(text.as_bytes(), &options) {
            prop_assert!(!e.to_string().is_empty());
        }
    }

    #[test]
    fn a_cut_file_is_no_panic(array in full_array(), cut in 0usize..400, options in options()) {
        let text = written(|out| text::write(&array, Symbols::Coded, Header::Default, out));
        say(&text[..cut.min(text.len())], &options);
        let json = written(|out| json::write(&array, Symbols::Zero, out));
        say(&json[..cut.min(json.len())], &options);
    }

    #[test]
    fn what_is_written_is_read_again(array in full_array()) {
        let auto = ReadOptions::default();
        let bare = ReadOptions { header: HeaderOption::No, run_column: RunColumn::No, ..auto.clone() };
        for symbols in Symbols::ALL {
            for separator in Separator::ALL {
                let write = |header| written(|out| csv::write_separated(&array, symbols, header, separator, out));
                let named = read_any(&write(Header::Default), &auto).unwrap();
                prop_assert_eq!(&named.array, &array);
                prop_assert!(named.header && named.run_columns.is_empty());
                if array.factors() > 1 {
                    prop_assert_eq!(named.separator, Some(separator));
                }
                prop_assert_eq!(named.level_name(0, 1), Some(&*symbols.value(1, array.levels()[0]).to_string()));
                prop_assert_eq!(&read_any(&write(Header::None), &bare).unwrap().array, &array);
            }
            let table = written(|out| text::write(&array, symbols, Header::Default, out));
            let read = read_any(&table, &auto).unwrap();
            prop_assert_eq!(&read.array, &array);
            prop_assert_eq!(&read.run_columns, &["run"]);
            let json = written(|out| json::write(&array, symbols, out));
            prop_assert_eq!(&read_any(&json, &auto).unwrap().array, &array);
        }
    }

    #[test]
    fn declared_levels_keep_those_that_do_not_occur(array in array()) {
        let options = ReadOptions {
            header: HeaderOption::No,
            run_column: RunColumn::No,
            levels: Some(array.mix()),
            ..ReadOptions::default()
        };
        let csv = written(|out| csv::write(&array, Symbols::Zero, Header::None, out));
        prop_assert_eq!(csv::read(&csv, &options).unwrap().array, array);
    }

    /// Any names survive, whatever has to be quoted; the symbols do not depend on the order of runs.
    #[test]
    fn names_and_run_order(
        array in full_array(),
        names in prop::collection::vec("[a-z#][-a-z,;\" \t\n#é]{0,6}[a-z]", 5),
        separator in prop::sample::select(Separator::ALL.to_vec()),
    ) {
        let names = &names[..array.factors()];
        let options = ReadOptions {
            header: HeaderOption::Yes,
            run_column: RunColumn::No,
            separator: Some(separator),
            ..ReadOptions::default()
        };
        let reversed = Array::from_fn(array.runs(), array.levels().to_vec(), |i, j| {
            array.get(array.runs() - 1 - i, j)
        })
        .unwrap();
        for a in [&array, &reversed] {
            let header = Header::Names(names);
            let bytes = written(|out| csv::write_separated(a, Symbols::One, header, separator, out));
            let read = csv::read(&bytes, &options).unwrap();
            prop_assert_eq!(&read.array, a);
            prop_assert_eq!(&read.names.unwrap()[..], names);
        }
    }
}
