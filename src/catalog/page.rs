//! The shelf as a page of text.

use std::fmt::Write;

use super::bag::Bag;
use super::fit::Packer;
use super::shelf::{Parent, Shelf};
use crate::mix::Mix;

/// One line of `catalog/published.txt`: a mix that the literature holds.
pub(super) struct Published {
    pub(super) strength: u32,
    pub(super) runs: u64,
    pub(super) bag: Bag,
}

pub(super) fn published() -> Vec<Published> {
    include_str!("../../catalog/published.txt")
        .lines()
        .filter(|line| !line.starts_with('#'))
        .map(|line| {
            let mut words = line.splitn(3, ' ');
            let mut next = || words.next().expect("three entries in every line");
            let (strength, runs) = (next().parse().expect("a strength"), next().parse().expect("runs"));
            let mix: Mix = next().parse().expect("a mix");
            Published { strength, runs, bag: Bag::of_levels(mix.levels()) }
        })
        .collect()
}

/// The maximal mixes for every number of runs up to `most` at strengths 2 and 3, as a Markdown
/// page: how each is made, how many of the N − 1 degrees of freedom it uses, and which published
/// mixes known to this project the shelf does not reach.
///
/// The page starts with the command that makes it; the same version of the crate gives the same
/// page.
#[must_use]
pub fn page(shelf: &Shelf, most: u64) -> String {
    let published = published();
    let mut text = String::from(
        "<!-- made by: cargo run --release --example shelf_page > catalog/SHELF.md -->\n\n# The shelf\n\n\
         For each number of runs the mixes that are not obtained from another one by dropping, merging or\n\
         splitting columns, with the degrees of freedom they use and how they are made. Mixes that the\n\
         literature holds, as far as this project remembers them (`published.txt`), and that the shelf does\n\
         not reach stand below each table.\n",
    );
    for strength in [2, 3] {
        write!(text, "\n## Strength {strength}\n").expect("writing to a string");
        let packer = Packer::new(shelf, strength);
        for runs in 4..=most {
            let all = shelf.parents(runs, strength);
            let parents: Vec<&Parent> =
                all.iter().map(AsRef::as_ref).filter(|p| p.bag.factors() >= u64::from(strength)).collect();
            let missing: Vec<String> = published
                .iter()
                .filter(|row| (row.strength, row.runs) == (strength, runs))
                .filter(|row| !parents.iter().any(|p| packer.fit(&row.bag, &p.bag).is_some()))
                .map(|row| row.bag.to_string())
                .collect();
            section(&mut text, runs, &parents, &missing).expect("writing to a string");
        }
    }
    text
}

fn section(text: &mut String, runs: u64, parents: &[&Parent], missing: &[String]) -> std::fmt::Result {
    if parents.is_empty() && missing.is_empty() {
        return Ok(());
    }
    write!(text, "\n### {runs} runs\n\n")?;
    if !parents.is_empty() {
        write!(text, "| mix | of {} | how it is made | source |\n| --- | --- | --- | --- |\n", runs - 1)?;
    }
    for p in parents {
        writeln!(
            text,
            "| {} | {} | {} | {} |",
            p.bag,
            p.bag.degrees(),
            p.recipe,
            p.source.replace('|', "/")
        )?;
    }
    if !missing.is_empty() {
        write!(text, "\nPublished, not reached here: {}.\n", missing.join("; "))?;
    }
    Ok(())
}
