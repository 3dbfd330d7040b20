//! The parts of the page that are text: verdict, figures, evidence, criteria, floor, commands.

use std::fmt::Write as _;

use super::escape::{escape, shortened, stranger};
use super::section::{close, open};
use super::words::{self, CAUTION, count, sentence};
use super::{Page, Smaller};
use crate::verify::{Nearness, Ratio};

const STYLE: &str = include_str!("page.css");

/// Everything down to the verdict.
pub(super) fn head(page: &Page<'_>, out: &mut String) {
    let (mark, class, few, text) = words::verdict(page);
    let title = escape(&shortened(&page.title, 120));
    let _ = write!(
        out,
        "<!DOCTYPE html>\n<html lang=\"en\">\n<head>\n<meta charset=\"utf-8\">\n\
         <meta name=\"viewport\" content=\"width=device-width, initial-scale=1\">\n\
         <meta name=\"color-scheme\" content=\"light dark\">\n\
         <meta http-equiv=\"Content-Security-Policy\" content=\"default-src 'none'; style-src 'unsafe-inline'\">\n\
         <title>{few}: {title}</title>\n<style>\n{STYLE}</style>\n</head>\n<body>\n<main>\n\
         <header>\n{LOGO}<p class=\"brand\">Trysquare</p>\n<h1><bdi>{title}</bdi></h1>\n\
         <p class=\"size\">{}</p>\n\
         <div class=\"verdict {class}\">\n<p class=\"mark\" aria-hidden=\"true\">{mark}</p>\n\
         <div>\n<p class=\"few\">{few}</p>\n<p>{text}</p>\n</div>\n</div>\n\
         <p class=\"caution\"><strong>Before use.</strong> {}</p>\n</header>\n",
        escape(&size(page)),
        escape(&sentence(&CAUTION.replace('\n', " "))),
    );
}

/// The tool the program is named after.
const LOGO: &str = "<svg class=\"logo\" viewBox=\"0 0 40 40\" role=\"img\" aria-labelledby=\"logo\">\
<title id=\"logo\">A try square</title>\
<path class=\"stock\" d=\"M3 3h11v34H3z\"/><path class=\"blade\" d=\"M14 28h23v9H14z\"/>\
<path class=\"ticks\" d=\"M18 28v4M22 28v3M26 28v4M30 28v3M34 28v4\"/></svg>\n";

fn size(page: &Page<'_>) -> String {
    let (runs, factors) = (page.array.runs() as u64, page.array.factors() as u64);
    let mix = shortened(&page.array.mix().to_string(), 120);
    format!("{} × {}: {mix}", count(runs, "run"), count(factors, "factor"))
}

/// The figures, a line each.
pub(super) fn figures(page: &Page<'_>, out: &mut String) {
    open("figures", "Figures", out);
    out.push_str("<dl>\n");
    let mut line = |label: &str, value: String| {
        let _ = writeln!(out, "<div><dt>{label}</dt><dd>{value}</dd></div>");
    };
    line("Runs", page.array.runs().to_string());
    line("Factors", page.array.factors().to_string());
    if let Some(c) = page.certificate {
        line("Strength", escape(&words::strength(c)));
        if c.strength > 0 {
            line("Index", escape(&index(c.strength, c.index.iter().map(|(&p, &n)| (p, n)))));
        }
        let repeated = match c.repeated_runs {
            0 => "none".to_owned(),
            1 => "1 repeats an earlier run".to_owned(),
            n => format!("{n} repeat an earlier run"),
        };
        line("Repeated runs", repeated);
        line("Judged by", escape(&words::engines(&c.engines)));
    }
    let sha256 =
        page.certificate.map_or_else(|| crate::verify::digest::sha256(page.array), |c| c.sha256.clone());
    line("Digest", format!("<code>sha256 {}</code>", escape(&sha256)));
    for text in &page.read_as {
        line("Read as", stranger_line(text));
    }
    out.push_str("</dl>\n");
    close(out);
}

/// A line of the program that may hold names from a file.
fn stranger_line(text: &str) -> String {
    format!("<bdi>{}</bdi>", escape(&shortened(text, 600)))
}

/// How often combinations of as many factors as the strength says occur.
fn index(strength: usize, products: impl Iterator<Item = (u64, u64)>) -> String {
    const SHOWN: usize = 6;
    let each = |(product, n): (u64, u64)| {
        let times = if n == 1 { "once".to_owned() } else { format!("{n} times") };
        format!("{times} where there are {product}")
    };
    let mut shown: Vec<String> = products.take(SHOWN + 1).map(each).collect();
    if shown.len() > SHOWN {
        shown[SHOWN] = "…".into();
    }
    let of =
        if strength == 1 { "each level".into() } else { format!("each combination of {strength} factors") };
    format!("{of} occurs {}", shown.join(", "))
}

/// The combination that shows why the answer is no, in the words of the file.
pub(super) fn evidence(page: &Page<'_>, out: &mut String) {
    let Some(witness) = page.witness else { return };
    open("evidence", "Why not", out);
    let known = |j: usize| page.array.levels().get(j).copied().unwrap_or(u16::MAX);
    let shown: Vec<String> = witness
        .columns
        .iter()
        .zip(&witness.combination)
        .take(12)
        .map(|(&j, &symbol)| {
            let (name, setting) = (page.labels.name(j), page.labels.setting(j, symbol, known(j)));
            format!("<strong>{} = {}</strong>", stranger(&name), stranger(&setting))
        })
        .collect();
    let columns: Vec<String> =
        witness.columns.iter().take(12).map(|j| j.saturating_add(1).to_string()).collect();
    let times =
        if witness.count == 0 { "in no run".into() } else { format!("in {}", count(witness.count, "run")) };
    let _ = writeln!(
        out,
        "<p class=\"evidence\">{} occurs <strong>{times}</strong>; its even share is {}{}.</p>",
        shown.join(" with "),
        witness.expected,
        if witness.expected == Ratio::new(1, 1) { " run" } else { " runs" },
    );
    let plural = if columns.len() == 1 { "" } else { "s" };
    let _ = write!(out, "<p>Factor{plural} {}, counted from 1.", columns.join(", "));
    if witness.expected.denominator() > 1 {
        let runs = count(page.array.runs() as u64, "run");
        let _ = write!(out, " No plan of {runs} can show every combination of these factors equally often.");
    }
    out.push_str("</p>\n");
    close(out);
}

/// How near a plan is that is not orthogonal.
pub(super) fn criteria(page: &Page<'_>, out: &mut String) {
    let Some(near) = page.nearness else { return };
    open("criteria", "How near it is to orthogonal", out);
    out.push_str("<dl>\n");
    let mut line = |label: &str, value: String| {
        let _ = writeln!(out, "<div><dt>{label}</dt><dd>{value}</dd></div>");
    };
    line("Levels", levels(near).to_owned());
    if near.pairs > 0 {
        let least = if near.attains_the_bound() {
            "the least that any plan of this size can have, proved".to_owned()
        } else {
            format!("no plan of this size has less than {}", decimal(&near.least_deviation))
        };
        line(
            "Pair counts",
            format!("squared distances from the even share sum to {}; {least}", decimal(&near.deviation)),
        );
    }
    if let Some(c) = near.by_pairs.as_ref().and_then(|p| p.correlation.as_ref()) {
        let [i, j] = c.columns.map(|j| stranger(&page.labels.name(j)));
        let text = if c.squared == "0" {
            "none between main effects of different factors".to_owned()
        } else {
            let [d, e] = c.degrees.map(degree);
            format!("at most {:.4} between main effects: {i} ({d}) and {j} ({e})", c.value)
        };
        line("Correlation", text);
    }
    let efficiency = match &near.efficiency {
        None => "not worked out: too many parameters".to_owned(),
        Some(e) if e.value == 0.0 => {
            format!(
                "0: the {} of the main-effects model cannot be estimated",
                count(e.parameters as u64, "parameter")
            )
        }
        Some(e) => format!("{:.4}, where an orthogonal plan has 1", e.value),
    };
    line("D-efficiency", efficiency);
    out.push_str("</dl>\n");
    close(out);
}

fn levels(near: &Nearness) -> &'static str {
    match near.largest_level_difference() {
        0 => "the levels of every factor occur equally often",
        1 => "as even as the runs allow",
        _ => "in some factors uneven: see the diagonal of the grid",
    }
}

fn degree(degree: u32) -> String {
    match degree {
        1 => "linear".into(),
        2 => "quadratic".into(),
        3 => "cubic".into(),
        d => format!("degree {d}"),
    }
}

/// A fraction as text with its decimal value where it is not whole.
fn decimal(fraction: &str) -> String {
    let value =
        fraction.split_once('/').and_then(|(a, b)| Some(a.parse::<f64>().ok()? / b.parse::<f64>().ok()?));
    match value {
        Some(value) if fraction.len() > 12 => format!("{value:.3}"),
        Some(value) => format!("{} ({value:.3})", escape(fraction)),
        None => escape(fraction),
    }
}

/// The word-length pattern and what it means.
pub(super) fn confusion(page: &Page<'_>, out: &mut String) {
    let Some(certificate) = page.certificate else { return };
    open("confusion", "What is confused with what", out);
    let Some(pattern) = &certificate.word_length_pattern else {
        out.push_str("<p>Not worked out: there are too many runs and factors for it to be quick.</p>\n");
        return close(out);
    };
    let meaning = sentence(words::meaning(pattern, certificate.levels.len()));
    let _ = writeln!(out, "<p>{}</p>", escape(&meaning));
    let entry =
        |(i, b): (usize, &String)| format!("<li><span>B<sub>{}</sub></span> {}</li>", i + 1, escape(b));
    let entries: String = pattern.iter().take(64).enumerate().map(entry).collect();
    let _ = writeln!(out, "<ul class=\"pattern\">{entries}</ul>");
    out.push_str(
        "<p class=\"note\">The word-length pattern: B<sub>j</sub> says how much the effects of j factors \
         together are mixed up with the mean. The first that is not 0 decides.</p>\n",
    );
    close(out);
}

/// The lower bound with its reason, and how the plan is built.
pub(super) fn floor(page: &Page<'_>, out: &mut String) {
    if let Some(floor) = &page.floor {
        open("floor", "Can it be smaller?", out);
        let runs = count(floor.runs, "run");
        let gap = match floor.smaller {
            Smaller::Impossible => "This plan has just so many: none is smaller.".to_owned(),
            Smaller::NoneKnown(n) => format!(
                "This plan has {n} more: within this gap, a smaller plan is neither known here nor ruled out."
            ),
            Smaller::NotLookedFor(n) => format!(
                "This plan has {n} more; whether a smaller one is known was not looked into: ask trysquare seek."
            ),
        };
        let reason = escape(floor.reason.trim_end_matches('.'));
        let _ = writeln!(
            out,
            "<p>Every plan of these factors at strength {} has at least {runs} ({reason}). {gap}</p>",
            page.strength
        );
        close(out);
    }
    if let Some(recipe) = &page.recipe {
        open("recipe", "How it is built", out);
        let _ = writeln!(out, "<p>{}</p>", escape(&sentence(&shortened(recipe, 2000))));
        close(out);
    }
}

/// The commands that check the plan again, and the end.
pub(super) fn foot(page: &Page<'_>, out: &mut String) {
    if !page.commands.is_empty() {
        open("again", "Check it again", out);
        out.push_str("<p>Do not trust this page: whoever has the file can judge it anew.</p>\n");
        for command in &page.commands {
            let _ = writeln!(out, "<pre><code>{}</code></pre>", escape(&shortened(command, 2000)));
        }
        close(out);
    }
    let version =
        page.certificate.map_or(concat!("trysquare ", env!("CARGO_PKG_VERSION")), |c| &c.engine_version);
    let _ = write!(out, "<footer><p>Made by {}.</p></footer>\n</main>\n</body>\n</html>\n", escape(version));
}
