//! The balance of every pair of factors: a grid that is calm where all is even, and the worst pairs.

use std::fmt::Write as _;
use std::ops::Range;

use super::balance::{Balance, Evenness, Pair, WORST, counts};
use super::escape::{escape, stranger};
use super::labels::heads;
use super::section::{close, open, scroller, table};
use super::words::count;
use super::{MOST_FACTORS, Page};

/// Columns of the grid that fit side by side on paper.
const ACROSS: usize = 32;
/// So many pairs are shown with all their counts, if neither factor has more levels than this.
const DETAILED: usize = 3;
const MOST_LEVELS: u16 = 10;

pub(super) fn write(page: &Page<'_>, out: &mut String) {
    let factors = page.array.factors();
    open("balance", "Balance of every pair", out);
    let Some(found) = Balance::count(page.array, factors <= MOST_FACTORS) else {
        let text = match page.certificate {
            Some(c) if c.strength >= 2 => {
                "There are too many pairs, runs or levels to draw them here. The judges found every pair even."
            }
            _ => "There are too many pairs, runs or levels to count them here.",
        };
        let _ = writeln!(out, "<p>{text}</p>");
        return close(out);
    };
    let _ = writeln!(out, "<p>{}</p>", summary(page, &found));
    if factors <= MOST_FACTORS {
        out.push_str(LEGEND);
        let heads = heads(&page.labels, page.array, factors);
        for start in (0..factors).step_by(ACROSS) {
            grid(&found, &heads, start..factors.min(start + ACROSS), out);
        }
    } else {
        let _ = writeln!(out, "<p class=\"note\">More than {MOST_FACTORS} factors: no grid is drawn.</p>");
    }
    if !found.worst.is_empty() {
        worst(page, &found, out);
    }
    close(out);
}

const LEGEND: &str = "<ul class=\"legend\">\n\
<li><span class=\"chip e0\">·</span> all combinations equally often</li>\n\
<li><span class=\"chip e1\">≈</span> some once more than others: as even as the runs allow</li>\n\
<li><span class=\"chip e2\">2</span> uneven: the number is the largest distance from the even share, in runs</li>\n\
<li><span class=\"chip e3\">∅ 2</span> some combination is missing altogether</li>\n\
<li>on the diagonal: the levels of one factor</li>\n\
</ul>\n";

fn summary(page: &Page<'_>, found: &Balance) -> String {
    let pairs: u64 = found.tally.iter().sum();
    let [even, nearly, uneven, missing] = found.tally;
    match pairs {
        0 => return "There is one factor, so there are no pairs; the grid shows its levels.".into(),
        _ if even == pairs => {
            let more = match page.certificate {
                Some(c) if c.strength < page.strength && page.strength > 2 => {
                    " What fails shows only with more than two factors: see the evidence."
                }
                _ => "",
            };
            let all =
                if pairs == 1 { "The one pair shows".into() } else { format!("All {pairs} pairs show") };
            return format!("{all} every combination of settings equally often.{more}");
        }
        _ => {}
    }
    let mut text = format!("Of {}: {even} even", count(pairs, "pair"));
    let parts =
        [(nearly, "as even as the runs allow"), (uneven, "uneven"), (missing, "without some combination")];
    for (n, what) in parts.iter().filter(|p| p.0 > 0) {
        let _ = write!(text, ", {n} {what}");
    }
    text + "."
}

/// The columns in `across`, and every row that has a pair with one of them.
fn grid(found: &Balance, heads: &[String], across: Range<usize>, out: &mut String) {
    let caption = if across.len() < heads.len() {
        format!("Factor by factor, columns {} to {}", across.start + 1, across.end)
    } else {
        "Factor by factor".to_owned()
    };
    scroller("box fit", &caption, out);
    let _ = write!(out, "<table class=\"grid\">\n<caption>{caption}</caption>\n<thead><tr><td></td>");
    for head in &heads[across.clone()] {
        let _ = write!(out, "<th scope=\"col\"><bdi>{}</bdi></th>", escape(head));
    }
    out.push_str("</tr></thead>\n<tbody>\n");
    for (i, row) in found.grid.iter().enumerate().skip(across.start) {
        let _ = write!(out, "<tr><th scope=\"row\"><bdi>{}</bdi></th>", escape(&heads[i]));
        for j in across.clone() {
            match row.get(j) {
                Some(pair) => cell(pair, out),
                None => out.push_str("<td></td>"),
            }
        }
        out.push_str("</tr>\n");
    }
    out.push_str("</tbody>\n</table>\n</div>\n");
}

fn cell(pair: &Pair, out: &mut String) {
    let class = pair.evenness as usize;
    let text = match pair.evenness {
        Evenness::Even => "·".to_owned(),
        Evenness::AsEvenAsCanBe => "≈".to_owned(),
        Evenness::Uneven => escape(&pair.deviation_text()),
        Evenness::Missing => format!("∅ {}", escape(&pair.deviation_text())),
    };
    let diagonal = if pair.columns[0] == pair.columns[1] { " own" } else { "" };
    let _ = write!(out, "<td class=\"e{class}{diagonal}\">{text}</td>");
}

fn worst(page: &Page<'_>, found: &Balance, out: &mut String) {
    out.push_str("<h3>The pairs farthest from even</h3>\n");
    let runs = page.array.runs() as u64;
    let row = |pair: &Pair| {
        let share = crate::verify::Ratio::new(runs, u128::from(pair.cells.max(1)));
        vec![
            pair_name(page, pair),
            share.to_string(),
            combination(page, pair, pair.rarest),
            combination(page, pair, pair.commonest),
        ]
    };
    let head = ["Pair", "Even share, runs", "Rarest", "Most frequent"].map(str::to_owned);
    let uneven: u64 = found.tally[1..].iter().sum();
    let caption = if uneven > WORST as u64 {
        format!("The worst {WORST} of {uneven} pairs that are not even")
    } else {
        "All pairs that are not even, the worst first".to_owned()
    };
    table(&caption, &head, found.worst.iter().map(row), out);
    let small = |pair: &&Pair| pair.columns.iter().all(|&j| page.array.levels()[j] <= MOST_LEVELS);
    for pair in found.worst.iter().filter(small).take(DETAILED) {
        all_counts(page, pair, out);
    }
}

fn factor(page: &Page<'_>, j: usize) -> String {
    stranger(&page.labels.name(j))
}

fn pair_name(page: &Page<'_>, pair: &Pair) -> String {
    let [i, j] = pair.columns;
    format!("{} × {}", factor(page, i), factor(page, j))
}

fn setting(page: &Page<'_>, j: usize, symbol: u16) -> String {
    stranger(&page.labels.setting(j, symbol, page.array.levels()[j]))
}

fn combination(page: &Page<'_>, pair: &Pair, (times, symbols): (u64, [u16; 2])) -> String {
    let [i, j] = pair.columns;
    let (a, b) = (setting(page, i, symbols[0]), setting(page, j, symbols[1]));
    format!("{a} with {b}: {}", if times == 0 { "never".into() } else { count(times, "run") })
}

/// How often every combination of a pair occurs.
fn all_counts(page: &Page<'_>, pair: &Pair, out: &mut String) {
    let [i, j] = pair.columns;
    let (r, s) = (page.array.levels()[i], page.array.levels()[j]);
    let counts = counts(page.array, i, j);
    let head: Vec<String> = std::iter::once(format!("{} ↓ {} →", factor(page, i), factor(page, j)))
        .chain((0..s).map(|b| setting(page, j, b)))
        .collect();
    let row = |a: u16| {
        let own = &counts[usize::from(a) * usize::from(s)..][..usize::from(s)];
        std::iter::once(setting(page, i, a)).chain(own.iter().map(u64::to_string)).collect()
    };
    let caption = format!("Runs with each combination of {}", pair_name(page, pair));
    table(&caption, &head, (0..r).map(row), out);
}
