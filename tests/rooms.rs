//! Each room imports only from rooms that stand earlier in the design's list; the judges and the
//! checker of proofs see nothing of what makes arrays or searches for bounds.

use std::fs;
use std::path::{Path, PathBuf};

use proc_macro2::{Delimiter, TokenStream, TokenTree};

const ROOMS: [&str; 14] = [
    "mix",
    "array",
    "verify",
    "floor",
    "algebra",
    "construct",
    "recipe",
    "catalog",
    "seek",
    "hunt",
    "plan",
    "exchange",
    "report",
    "cli",
];

/// Every path that starts with `crate` or `super`, in `use` lines and inline; groups taken apart.
fn paths(stream: TokenStream, out: &mut Vec<Vec<String>>) {
    let tokens: Vec<TokenTree> = stream.into_iter().collect();
    let mut i = 0;
    while i < tokens.len() {
        let starts = matches!(&tokens[i], TokenTree::Ident(n) if n == "crate" || n == "super");
        if starts && colons(&tokens, i + 1) {
            i = tree(&tokens, i, Vec::new(), out);
            continue;
        }
        if let TokenTree::Group(group) = &tokens[i] {
            paths(group.stream(), out);
        }
        i += 1;
    }
}

fn colons(tokens: &[TokenTree], at: usize) -> bool {
    let colon = |i: usize| matches!(tokens.get(i), Some(TokenTree::Punct(p)) if p.as_char() == ':');
    colon(at) && colon(at + 1)
}

/// The paths of the use tree at `at`, behind `prefix`; returns where it ends.
fn tree(tokens: &[TokenTree], mut at: usize, mut path: Vec<String>, out: &mut Vec<Vec<String>>) -> usize {
    loop {
        match tokens.get(at) {
            Some(TokenTree::Ident(name)) => path.push(name.to_string()),
            Some(TokenTree::Punct(p)) if p.as_char() == '*' => path.push("*".into()),
            Some(TokenTree::Group(g)) if g.delimiter() == Delimiter::Brace => {
                let inside: Vec<TokenTree> = g.stream().into_iter().collect();
                let comma = |t: &TokenTree| matches!(t, TokenTree::Punct(p) if p.as_char() == ',');
                for branch in inside.split(comma).filter(|b| !b.is_empty()) {
                    tree(branch, 0, path.clone(), out);
                }
                return at + 1;
            }
            // Generic arguments, or the end.
            _ => break,
        }
        at += 1;
        if !colons(tokens, at) {
            break;
        }
        at += 2;
    }
    out.push(path);
    at
}

/// The module path of a file below `src`, such as `["catalog", "fit"]`.
fn module(file: &Path) -> Vec<String> {
    let mut names: Vec<String> =
        file.with_extension("").iter().map(|n| n.to_string_lossy().into_owned()).collect();
    if names.last().is_some_and(|n| n == "mod") {
        names.pop();
    }
    names
}

/// What a path names, from the root of the crate; `None` when it stays inside its own file or
/// names nothing (an inline module's `super`).
fn from_root(path: &[String], module: &[String]) -> Option<Vec<String>> {
    if path[0] == "crate" {
        return Some(path[1..].to_vec());
    }
    let up = path.iter().take_while(|n| *n == "super").count();
    let mut absolute = module[..module.len().saturating_sub(up)].to_vec();
    absolute.extend_from_slice(&path[up..]);
    Some(absolute)
}

/// What is wrong with the imports of a file (named from `src`) with the given text.
fn violations(file: &Path, text: &str) -> Vec<String> {
    let module = module(file);
    let position = |room: &str| ROOMS.iter().position(|r| *r == room);
    let Some(own) = position(&module[0]) else {
        return vec![format!("{} is in no room of the design", file.display())];
    };
    let mut found = Vec::new();
    paths(text.parse().expect("a file of Rust"), &mut found);
    let mut wrong = Vec::new();
    for path in found {
        let Some(absolute) = from_root(&path, &module) else { continue };
        let Some(first) = absolute.first() else { continue };
        let shown = format!("{}: {}", file.display(), path.join("::"));
        if path[0] == "crate" && first == "*" {
            wrong.push(format!("{shown} imports every room"));
        }
        let Some(room) = position(first) else { continue };
        if room > own {
            wrong.push(format!("{shown}: `{first}` stands later than `{}`", ROOMS[own]));
        }
        if ROOMS[own] == "verify" && !["verify", "mix", "array"].contains(&first.as_str()) {
            wrong.push(format!("{shown}: the judges import only mix and array"));
        }
        let sibling = absolute.get(1).is_some_and(|n| PROOF_MAY_NOT.contains(&n.as_str()));
        if module.starts_with(&["floor".to_owned(), "proof".to_owned()]) && first == "floor" && sibling {
            wrong.push(format!("{shown}: the checker of proofs imports nothing that finds bounds"));
        }
    }
    wrong
}

/// The parts of `floor` that find bounds. (The unit tests at the end of the checker's file make the
/// bounds they check through `floor::bounds`, so that name is free.)
const PROOF_MAY_NOT: [&str; 8] =
    ["divisibility", "rao", "pure", "linear_program", "exhaustion", "exclude", "strengthen", "most"];

fn files(folder: &Path, out: &mut Vec<PathBuf>) {
    let mut entries: Vec<PathBuf> =
        fs::read_dir(folder).unwrap().map(|entry| entry.unwrap().path()).collect();
    entries.sort();
    for path in entries {
        if path.is_dir() {
            files(&path, out);
        } else if path.extension().is_some_and(|e| e == "rs") {
            out.push(path);
        }
    }
}

#[test]
fn rooms_import_only_from_earlier_rooms() {
    let root = Path::new(env!("CARGO_MANIFEST_DIR")).join("src");
    let mut all = Vec::new();
    files(&root, &mut all);
    let mut seen = 0;
    let mut wrong = Vec::new();
    for file in &all {
        let name = file.strip_prefix(&root).unwrap();
        if name == Path::new("lib.rs") || name == Path::new("main.rs") {
            continue;
        }
        seen += 1;
        wrong.extend(violations(name, &fs::read_to_string(file).unwrap()));
    }
    assert!(seen > 100, "only {seen} files were read");
    assert!(wrong.is_empty(), "{}", wrong.join("\n"));
}

#[test]
fn planted_lines_are_caught() {
    let caught = |file: &str, text: &str| !violations(Path::new(file), text).is_empty();
    for (file, text) in [
        ("mix.rs", "use crate::array::Array;"),
        ("array.rs", "use super::verify::certify;"),
        ("verify/mod.rs", "use crate::algebra::Field;"),
        ("verify/counting.rs", "use crate::{array::Array, construct::{field, scheme}};"),
        ("verify/counting.rs", "fn f() { let a = vec![super::super::recipe::build()]; }"),
        ("construct/field/bush.rs", "fn f() -> Option<crate::recipe::Recipe> { None }"),
        (
            "construct/field/bush.rs",
            "#[cfg(test)] mod tests { use super::super::super::super::catalog::Shelf; }",
        ),
        ("catalog/fit.rs", "pub use\n    crate ::\n    seek::seek_on;"),
        ("seek/mod.rs", "use crate::*;"),
        ("floor/proof.rs", "use super::rao::rao;"),
        ("floor/proof.rs", "use crate::floor::linear_program::solve;"),
        ("floor/proof/check.rs", "use super::super::exclude::exclude;"),
        ("floor/proof/mod.rs", "use super::exhaustion::Record;"),
        ("attic/mod.rs", ""),
    ] {
        assert!(caught(file, text), "{file}: {text}");
    }
    for (file, text) in [
        ("verify/mod.rs", "pub(crate) use crate::array::Array; use super::mix::Mix;"),
        (
            "verify/mod.rs",
            "// use crate::seek::seek;\n/// [`crate::recipe`]\nfn f() -> &'static str { \"crate::seek\" }",
        ),
        ("catalog/fit.rs", "use super::shelf::Shelf; use crate::recipe::Recipe; use super::*;"),
        ("cli/mod.rs", "use crate::{seek::{self, seek_on}, exchange};"),
        ("floor/proof.rs", "use super::FloorError; use crate::mix::Mix;"),
    ] {
        assert!(!caught(file, text), "{file}: {text}");
    }
}
