use super::certify::read_as;
use super::output::{self, Output};
use super::page::Report;
use super::progress::Progress;
use super::seek::{self, Flags, Format};
use super::{ExitCode, Failure, flags, input, words};
use crate::array::Array;
use crate::exchange::document::NearDocument;
use crate::exchange::{ReadError, ReadOptions, Received, Symbols, default_name, read_any};
use crate::hunt::near::{NearOutcome, NearPlan, NearRequest, near};
use crate::seek::{Outcome, Request, Verdict};
use crate::verify::{Certificate, MOST_PARAMETERS, Nearness};

/// Answers `seek --budget`.
pub(super) fn run(flags: &Flags, asked: Request, budget: u64, format: Format) -> Result<ExitCode, Failure> {
    if flags.wants_certificate() {
        return Err(Failure::usage(format!(
            "a near plan gets no certificate; leave out --certificate, or write --max-runs {budget} in place of \
             --budget for an exact array or none"
        )));
    }
    let request = NearRequest {
        strength: asked.strength,
        max_runs: asked.max_runs,
        seed: flags.seed().unwrap_or(0),
        ..NearRequest::new(asked.mix.clone(), budget)
    };
    let request = match flags.keep() {
        Some(file) => request.kept(kept(file, flags, &asked)?),
        None => request,
    };
    let mut out = Output::open(flags.out())?;
    let page = Report::open(flags.report())?;
    let outcome = flags::on_threads(flags.threads(), || {
        let _progress = Progress::start("looking for a plan", None, flags.quiet());
        Ok(near(&request)?)
    })?;
    let (plan, proved) = match &outcome {
        NearOutcome::Exact(answer) => {
            let found = Outcome::Found(answer.clone());
            let code = seek::deliver(flags, format, &answer.request, &found, out, None)?;
            return page.found(answer, flags).map(|()| code);
        }
        NearOutcome::Orthogonal(plan, certificate, floor, verdict) => {
            (plan, Some((certificate.as_ref(), floor.as_ref(), *verdict)))
        }
        NearOutcome::Near(plan) => (plan, None),
    };
    if format == Format::Json {
        let document = NearDocument::new(plan, flags.symbols());
        let document = match proved {
            Some((certificate, floor, verdict)) => document.orthogonal(certificate, floor, verdict),
            None => document,
        };
        out.write(|out| {
            serde_json::to_writer(&mut *out, &document)?;
            out.write_all(b"\n")
        })?;
    }
    seek::write_cells(flags, format, &plan.array, &mut out)?;
    out.finish()?;
    page.near(plan, proved, flags)?;
    flags.say(&account(plan, proved.map(|(certificate, _, verdict)| (certificate, verdict))));
    Ok(ExitCode::Yes)
}

/// The runs in a file, with the levels asked for.
fn kept(file: &str, flags: &Flags, asked: &Request) -> Result<Array, Failure> {
    let options = ReadOptions { levels: Some(asked.mix.clone()), ..ReadOptions::default() };
    let received = read_any(&input::read(file)?, &options).map_err(|e| match e {
        ReadError::DeclaredFactors { declared, factors } => Failure::input(
            input::title(file),
            format!("the mix has {declared} factors and the file {factors}; keep runs of the same factors"),
        ),
        e => Failure::input(input::title(file), e),
    })?;
    if !flags.quiet() {
        output::remark(&read_as(&received));
        if let Some(words) = numbered(&received, flags.symbols()) {
            output::remark(&words);
        }
    }
    Ok(received.array)
}

/// Which words of the file the numbers of the plan stand for, where they are not the same.
fn numbered(received: &Received, symbols: Symbols) -> Option<String> {
    let mut lines = Vec::new();
    for (j, &s) in received.array.levels().iter().enumerate() {
        let value = |symbol: u16| symbols.value(symbol, s).to_string();
        let pairs: Vec<(String, &str)> =
            (0..s).filter_map(|x| received.level_name(j, x).map(|word| (value(x), word))).collect();
        if pairs.iter().any(|(number, word)| number != word) {
            let name = received.names.as_ref().map_or_else(|| default_name(j), |names| names[j].clone());
            let shown: Vec<String> =
                pairs.iter().map(|(number, word)| format!("{word} is {number}")).collect();
            lines.push(format!("  {name}: {}", shown.join(", ")));
        }
    }
    (!lines.is_empty()).then(|| format!("in the plan\n{}", lines.join("\n")))
}

fn account(plan: &NearPlan, exact: Option<(&Certificate, Verdict)>) -> String {
    let (request, nearness) = (&plan.request, &plan.nearness);
    let runs = words::count(request.budget, "run");
    let subject =
        format!("{runs} × {}, {}", words::count(request.mix.factors() as u64, "factor"), request.mix);
    let mut lines = vec![("array", subject)];
    match exact {
        None => {
            let verdict = format!(
                "near: not orthogonal at strength {}; the nearest plan found, judged by the lines below",
                request.strength
            );
            lines.push(("verdict", verdict));
        }
        Some((_, verdict)) => lines.push(("verdict", format!("orthogonal: {}", smallest(verdict)))),
    }
    lines.push(("cost", cost(plan, exact.is_some())));
    for &(factor, s) in plan.too_many_levels.iter().take(5) {
        lines.push(("missing", format!("factor {} has {s} levels and there are only {runs}", factor + 1)));
    }
    lines.push(("levels", levels(nearness)));
    if nearness.pairs > 0 {
        lines.push(("pair counts", pair_counts(nearness)));
        lines.push(("correlation", correlation(nearness)));
    }
    lines.push(("D-efficiency", efficiency(nearness, &runs)));
    if request.strength > 2 {
        lines.push((
            "strength",
            format!("{} was asked for; a near plan is judged at pairs", request.strength),
        ));
    }
    if let Some((certificate, _)) = exact {
        lines.push(("judged by", words::engines(&certificate.engines)));
        lines.push(("sha256", certificate.sha256.clone()));
    }
    if let Some(kept) = &request.kept {
        lines.push((
            "kept",
            format!("{}, unchanged and first in the plan", words::count(kept.runs() as u64, "run")),
        ));
    }
    lines.push(("seed", format!("{}; another --seed may find another plan", request.seed)));
    lines.push(("before use", words::CAUTION.to_owned()));
    words::labelled(&lines)
}

fn smallest(verdict: Verdict) -> &'static str {
    match verdict {
        Verdict::ProvedSmallest => "no array for this mix and strength has fewer runs",
        Verdict::SmallestKnown => "a smaller array is neither known here nor ruled out",
    }
}

/// This plan and the next exact array, a line each.
fn cost(plan: &NearPlan, exact: bool) -> String {
    let runs = words::count(plan.request.budget, "run");
    let worst = plan.nearness.by_pairs.as_ref().and_then(|p| p.worst.as_ref());
    let this = match worst {
        _ if exact => format!("{runs}: exact"),
        Some(w) => format!(
            "{runs}: near-orthogonal, worst pair factors {} and {}, their combinations in {} to {}",
            w.columns[0] + 1,
            w.columns[1] + 1,
            w.smallest,
            words::count(w.largest, "run"),
        ),
        None => format!("{runs}: near-orthogonal"),
    };
    let beside = match plan.next_exact {
        _ if exact => return this,
        None => "no exact array is known here within --max-runs".to_owned(),
        Some(next) => {
            let kept = if next.runs <= plan.request.budget { ", but without the runs to keep" } else { "" };
            let runs = words::count(next.runs, "run");
            format!("{runs}: exact{kept}; {}", smallest(next.verdict))
        }
    };
    format!("{this}\n{beside}")
}

fn levels(nearness: &Nearness) -> String {
    let uneven = nearness.level_differences.iter().filter(|d| **d > 0).count() as u64;
    match nearness.largest_level_difference() {
        0 => "the levels of every factor occur equally often".into(),
        1 => format!(
            "as even as the runs allow: in {}, some levels occur once more than others",
            words::count(uneven, "factor")
        ),
        n => format!(
            "in {} some levels occur up to {n} times more than others",
            words::count(uneven, "factor")
        ),
    }
}

fn pair_counts(nearness: &Nearness) -> String {
    let mut text = if nearness.attains_the_bound() {
        format!("squared deviations sum to {}, proved to be the least possible", sum(&nearness.deviation))
    } else {
        format!(
            "squared deviations sum to {}; no plan of this size has less than {}",
            sum(&nearness.deviation),
            sum(&nearness.least_deviation)
        )
    };
    if let Some(by_pairs) = &nearness.by_pairs {
        let even = nearness.pairs - by_pairs.uneven;
        text.push_str(&format!(
            "\n{even} of {} show all combinations equally often",
            words::count(nearness.pairs, "pair")
        ));
    }
    text
}

/// An exact fraction, with its decimal value when it is not whole.
fn sum(fraction: &str) -> String {
    let Some((top, bottom)) = fraction.split_once('/') else { return fraction.to_owned() };
    match (top.parse::<f64>(), bottom.parse::<f64>()) {
        (Ok(top), Ok(bottom)) if fraction.len() > 12 => format!("{:.3}", top / bottom),
        (Ok(top), Ok(bottom)) => format!("{fraction} ({:.3})", top / bottom),
        _ => fraction.to_owned(),
    }
}

fn correlation(nearness: &Nearness) -> String {
    let Some(by_pairs) = &nearness.by_pairs else {
        return "not worked out: too many runs and factors for it to be quick".into();
    };
    let Some(c) = &by_pairs.correlation else {
        return "not worked out: more than 32 levels, or factors that do not vary".into();
    };
    if c.squared == "0" {
        return "none between main effects of different factors".into();
    }
    let name = |degree: u32| match degree {
        1 => "linear".to_owned(),
        2 => "quadratic".to_owned(),
        3 => "cubic".to_owned(),
        d => format!("degree {d}"),
    };
    format!(
        "at most {:.4} between main effects: factors {} ({}) and {} ({})",
        c.value,
        c.columns[0] + 1,
        name(c.degrees[0]),
        c.columns[1] + 1,
        name(c.degrees[1])
    )
}

fn efficiency(nearness: &Nearness, runs: &str) -> String {
    match &nearness.efficiency {
        None => format!("not worked out: more than {MOST_PARAMETERS} parameters"),
        Some(e) if e.value == 0.0 => {
            format!(
                "0: the {} of the main-effects model cannot be estimated from these {runs}",
                parameters(e.parameters)
            )
        }
        Some(e) => format!(
            "{:.4} for the {} of the main-effects model; an orthogonal array has 1",
            e.value,
            parameters(e.parameters)
        ),
    }
}

fn parameters(p: usize) -> String {
    words::count(p as u64, "parameter")
}
