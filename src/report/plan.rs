//! The factors, and the runs as a picture: a tone and a text for every level.

use std::fmt::Write as _;
use std::ops::Range;

use super::escape::{escape, stranger, width};
use super::labels::{Cells, heads};
use super::section::{close, open, scroller, table};
use super::words::count;
use super::{MOST_FACTORS, MOST_RUNS, Page};

/// At most so many settings of a factor are named.
const MOST_SETTINGS: u16 = 12;
/// The width of a page of paper in tenths of a millimetre, less the numbers of the runs.
const PAPER: usize = 1600;

pub(super) fn write(page: &Page<'_>, out: &mut String) {
    let (runs, factors) = (page.array.runs(), page.array.factors());
    let shown = factors.min(MOST_FACTORS);
    let levels = &page.array.levels()[..shown];
    let cells: Vec<Cells> = levels.iter().enumerate().map(|(j, &s)| Cells::new(&page.labels, j, s)).collect();
    key(page, &cells, out);
    open("plan", "The plan", out);
    if runs > MOST_RUNS || factors > MOST_FACTORS {
        let _ = writeln!(
            out,
            "<p class=\"note\">Shown: {} of {} and {} of {}. The file has them all.</p>",
            if runs > MOST_RUNS { format!("the first {MOST_RUNS}") } else { format!("all {runs}") },
            count(runs as u64, "run"),
            if factors > MOST_FACTORS {
                format!("the first {MOST_FACTORS}")
            } else {
                format!("all {factors}")
            },
            count(factors as u64, "factor"),
        );
    }
    let heads = heads(&page.labels, page.array, shown);
    for block in blocks(&cells, &heads) {
        picture(page, &cells, &heads, block, out);
    }
    close(out);
}

/// Factors that fit side by side on paper.
fn blocks(cells: &[Cells], heads: &[String]) -> Vec<Range<usize>> {
    let mut blocks = Vec::new();
    let (mut start, mut used) = (0, 0);
    for (j, (cell, head)) in cells.iter().zip(heads).enumerate() {
        let wide = cell.width().max(width(head)) * 13 + 10;
        if used + wide > PAPER && j > start {
            blocks.push(start..j);
            (start, used) = (j, 0);
        }
        used += wide;
    }
    blocks.push(start..cells.len());
    blocks
}

fn picture(page: &Page<'_>, cells: &[Cells], heads: &[String], block: Range<usize>, out: &mut String) {
    let caption = if block.len() < page.array.factors() {
        format!("Runs down, factors {} to {} across", block.start + 1, block.end)
    } else {
        "Runs down, factors across".to_owned()
    };
    scroller("box fit", &caption, out);
    let _ = write!(
        out,
        "<table class=\"plan\">\n<caption>{caption}</caption>\n<thead><tr><th scope=\"col\">Run</th>"
    );
    for head in &heads[block.clone()] {
        let _ = write!(out, "<th scope=\"col\"><bdi>{}</bdi></th>", escape(head));
    }
    out.push_str("</tr></thead>\n<tbody>\n");
    let marked: Vec<Vec<String>> = block
        .clone()
        .map(|j| {
            let of = |symbol| (format!("<td class=t{}>", cells[j].tone(symbol)), cells[j].text(symbol));
            let column = page.array.column(j);
            column.iter().take(MOST_RUNS).map(|&x| of(x)).map(|(tag, text)| tag + &escape(&text)).collect()
        })
        .collect();
    for run in 0..page.array.runs().min(MOST_RUNS) {
        let _ = write!(out, "<tr><th scope=\"row\">{}</th>", run + 1);
        for column in &marked {
            let _ = write!(out, "{}</td>", column[run]);
        }
        out.push_str("</tr>\n");
    }
    out.push_str("</tbody>\n</table>\n</div>\n");
}

/// The factors with their settings, each with the tone and text it has in the picture.
fn key(page: &Page<'_>, cells: &[Cells], out: &mut String) {
    open("factors", "Factors and settings", out);
    let row = |(j, cell): (usize, &Cells)| {
        let s = page.array.levels()[j];
        let mut chips = String::new();
        for symbol in 0..s.min(MOST_SETTINGS) {
            let (text, setting) = (cell.text(symbol), page.labels.setting(j, symbol, s));
            let _ = write!(
                chips,
                "<span class=\"setting\"><span class=\"chip t{}\">{}</span>",
                cell.tone(symbol),
                escape(&text)
            );
            if text != setting {
                let _ = write!(chips, " {}", stranger(&setting));
            }
            chips.push_str("</span> ");
        }
        if s > MOST_SETTINGS {
            let _ = write!(chips, "and {} more", s - MOST_SETTINGS);
        }
        vec![(j + 1).to_string(), stranger(&page.labels.name(j)), s.to_string(), chips]
    };
    let head = ["No.", "Factor", "Levels", "Settings"].map(str::to_owned);
    let more = page.array.factors() - cells.len();
    let caption = if more > 0 {
        format!("The first {} of {}", cells.len(), count(page.array.factors() as u64, "factor"))
    } else {
        "Every setting with its tone and text in the plan".to_owned()
    };
    table(&caption, &head, cells.iter().enumerate().map(row), out);
    close(out);
}
