//! The page of mixes beyond the published values known to this project.

use std::fmt::Write;

use super::bag::Bag;
use super::shelf::Shelf;
use crate::mix::Mix;
use crate::verify::{Certificate, Demand, Verdict, certify};

/// One line of `catalog/beyond.txt`.
struct Row {
    strength: u32,
    runs: u64,
    bag: Bag,
    /// The nearest mixes that the literature is remembered to hold, as written.
    remembered: &'static str,
}

fn rows() -> Vec<Row> {
    include_str!("../../catalog/beyond.txt")
        .lines()
        .filter(|line| !line.starts_with('#'))
        .map(|line| {
            let (left, remembered) = line.split_once(" | ").expect("a stroke in every line");
            let mut words = left.splitn(3, ' ');
            let mut next = || words.next().expect("three entries before the stroke");
            let (strength, runs) = (next().parse().expect("a strength"), next().parse().expect("runs"));
            let mix: Mix = next().parse().expect("a mix");
            Row { strength, runs, bag: Bag::of_levels(mix.levels()), remembered }
        })
        .collect()
}

/// The mixes named in `catalog/beyond.txt` as a Markdown page: what the literature is remembered
/// to hold beside each, how it is made, and what the judges certify of the array built.
///
/// The page starts with the command that makes it; the same version of the crate gives the same
/// page.
///
/// # Errors
/// A sentence that names the mix, when one is not maximal on the shelf, cannot be built or is not
/// what the judges find.
pub fn beyond_page(shelf: &Shelf) -> Result<String, String> {
    let mut text = String::from(
        "<!-- made by: cargo run --release --example beyond_page > catalog/BEYOND.md -->\n\n\
         # Beyond the published values known to us\n\n\
         Every mix here is maximal on the shelf (`SHELF.md`) and is obtained by dropping, merging and splitting\n\
         columns from none that this project remembers from the literature (`published.txt`: from memory, not\n\
         complete, not a copy of any table). That is all that is claimed: others may hold the same or more.\n\
         Remembered beside each: the nearest mixes of the literature, from memory.\n\n\
         The certificate is the judges', who are shown the array alone and not how it was made: strength, the first\n\
         entries of the generalised word-length pattern, and the SHA-256 of the array with its columns in the order\n\
         of the recipe (`src/verify/digest.rs`). `trysquare catalog --runs N` lists the recipes.\n\n\
         | runs | mix | of N − 1 | remembered | how it is made | source | strength | B1, B2, B3, B4 | sha256 |\n\
         | --- | --- | --- | --- | --- | --- | --- | --- | --- |\n",
    );
    for row in rows() {
        let all = shelf.parents(row.runs, row.strength);
        let parent = all.iter().find(|p| p.bag == row.bag);
        let parent = parent.ok_or_else(|| format!("{} in {} runs: not on the shelf", row.bag, row.runs))?;
        let fault = |what: String| format!("{} in {} runs: {what}", row.bag, row.runs);
        let array = parent.recipe.build().map_err(|e| fault(e.to_string()))?;
        let judged =
            certify(&array, &Demand::strength(row.strength as usize)).map_err(|e| fault(e.to_string()))?;
        if judged.verdict != Verdict::Orthogonal || Bag::of_levels(array.levels()) != row.bag {
            return Err(fault("the array is another".to_owned()));
        }
        let certificate = judged.certificate;
        writeln!(
            text,
            "| {} | {} | {} | {} | {} | {} | {} | {} | {} |",
            row.runs,
            row.bag,
            row.bag.degrees(),
            row.remembered,
            parent.recipe,
            parent.source.replace('|', "/"),
            certificate.strength,
            pattern(&certificate),
            certificate.sha256
        )
        .map_err(|e| fault(e.to_string()))?;
    }
    Ok(text)
}

fn pattern(certificate: &Certificate) -> String {
    let first = |p: &Vec<String>| p.iter().take(4).cloned().collect::<Vec<_>>().join(", ");
    certificate.word_length_pattern.as_ref().map_or_else(|| "not computed".to_owned(), first)
}

#[cfg(test)]
mod tests {
    use super::super::fit::Packer;
    use super::super::page::published;
    use super::*;

    /// No published mix yields one of these, the remembered ones are on the list of published
    /// ones, and there are enough of them.
    #[test]
    fn the_published_mixes_do_not_yield_these() {
        let shelf = Shelf::new();
        let published = published();
        for row in rows() {
            let packer = Packer::new(&shelf, row.strength);
            let at: Vec<&Bag> = published
                .iter()
                .filter(|p| (p.strength, p.runs) == (row.strength, row.runs))
                .map(|p| &p.bag)
                .collect();
            for bag in &at {
                assert!(packer.fit(&row.bag, bag).is_none(), "{} runs: {} from {bag}", row.runs, row.bag);
            }
            for mix in row.remembered.split("; ").filter(|m| *m != "none") {
                let mix: Mix = mix.parse().unwrap();
                assert!(at.contains(&&Bag::of_levels(mix.levels())), "{} runs: {mix}", row.runs);
            }
        }
    }
}
