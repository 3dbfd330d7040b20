use super::flags::ReadFlags;
use super::output::Output;
use super::{Failure, input, seek, words};
use crate::array::Array;
use crate::exchange::Received;
use crate::floor::{self, Proof};
use crate::hunt::near::NearPlan;
use crate::report::{Floor, Labels, Page, Section, Smaller, html};
use crate::seek::Answer;
use crate::verify::{Certificate, Judgement, Nearness, Verdict, nearness};

/// The criteria of a plan that is not orthogonal are worked out when that takes no more steps.
const MOST_STEPS: u128 = 1 << 32;

/// The file of `--report`, opened before the long work.
pub(super) struct Report(Option<Output>);

impl Report {
    pub(super) fn open(name: Option<&str>) -> Result<Self, Failure> {
        match name {
            Some("-") => Err(Failure::usage("--report needs a file: stdout is for the answer")),
            name => Ok(Self(name.map(|name| Output::open(Some(name))).transpose()?)),
        }
    }

    fn write(self, page: &Page<'_>) -> Result<(), Failure> {
        let Some(mut out) = self.0 else { return Ok(()) };
        let text = html(page);
        out.write(|out| out.write_all(text.as_bytes()))?;
        out.finish()
    }

    /// Somebody else's array, judged.
    pub(super) fn judged(
        self,
        received: &Received,
        judgement: &Judgement,
        file: &str,
        certificate: Option<&str>,
        reading: &ReadFlags,
    ) -> Result<(), Failure> {
        if self.0.is_none() {
            return Ok(());
        }
        let array = &received.array;
        let orthogonal = judgement.verdict == Verdict::Orthogonal;
        let nearness = if orthogonal { None } else { near_enough(array) };
        let mut page = Page::new(input::title(file), array, Labels::Received(received));
        page.strength = judgement.demanded;
        page.certificate = Some(&judgement.certificate);
        page.witness = judgement.witness.as_ref();
        page.nearness = nearness.as_ref();
        page.read_as = std::iter::once(received.describe()).chain(received.remarks.iter().cloned()).collect();
        if orthogonal {
            page.floor = floor_of(array, judgement.demanded);
        }
        let (name, again) = (if file == "-" { "FILE".into() } else { words::quoted(file) }, reading.again());
        page.commands = vec![format!("trysquare certify {name} --strength {}{again}", judgement.demanded)];
        if let Some(certificate) = certificate {
            page.commands.push(format!("trysquare recheck {} {name}{again}", words::quoted(certificate)));
        }
        self.write(&page)
    }

    /// The answer to a request.
    pub(super) fn found(self, answer: &Answer, flags: &seek::Flags) -> Result<(), Failure> {
        let request = &answer.request;
        let title = format!("{} at strength {}", request.mix, request.strength);
        let mut page = Page::new(title, &answer.array, Labels::Symbols(flags.symbols()));
        page.strength = request.strength as usize;
        page.certificate = Some(&answer.certificate);
        page.floor = Some(floor_part(&answer.floor, answer.array.runs()));
        page.recipe = Some(answer.recipe.to_string());
        if !answer.below.is_empty() {
            page.sections.push(Section {
                title: "Fewer runs, one by one".into(),
                paragraphs: words::below(answer).lines().map(str::to_owned).collect(),
                table: None,
            });
        }
        page.commands = vec![seek::check_again(answer, flags)];
        self.write(&page)
    }

    /// A plan of as many runs as can be paid for.
    pub(super) fn near(
        self,
        plan: &NearPlan,
        proved: Option<(&Certificate, &Proof, crate::seek::Verdict)>,
        flags: &seek::Flags,
    ) -> Result<(), Failure> {
        let request = &plan.request;
        let title = format!("{} in {}", request.mix, words::count(request.budget, "run"));
        let mut page = Page::new(title, &plan.array, Labels::Symbols(flags.symbols()));
        page.strength = request.strength as usize;
        page.nearness = Some(&plan.nearness);
        if let Some((certificate, proof, _)) = proved {
            page.certificate = Some(certificate);
            page.floor = Some(floor_part(proof, plan.array.runs()));
        }
        let file = flags.out().filter(|name| *name != "-").map_or("FILE".into(), words::quoted);
        page.commands = vec![format!("trysquare certify {file} --levels \"{}\"", request.mix)];
        self.write(&page)
    }
}

/// The floor below a plan that was sought.
fn floor_part(proof: &Proof, runs: usize) -> Floor {
    let smaller = match (runs as u64).saturating_sub(proof.runs) {
        0 => Smaller::Impossible,
        gap => Smaller::NoneKnown(gap),
    };
    Floor { runs: proof.runs, reason: words::reason(proof), smaller }
}

/// The floor below an array from elsewhere; nobody looked for a smaller one.
fn floor_of(array: &Array, strength: usize) -> Option<Floor> {
    let strength = u32::try_from(strength).ok()?;
    let proof = floor::floor(&array.mix(), strength).ok()?;
    let more = (array.runs() as u64).checked_sub(proof.runs)?;
    let smaller = if more == 0 { Smaller::Impossible } else { Smaller::NotLookedFor(more) };
    Some(Floor { runs: proof.runs, reason: words::reason(&proof), smaller })
}

/// The criteria, unless they would take long.
fn near_enough(array: &Array) -> Option<Nearness> {
    let (runs, k) = (array.runs() as u128, array.factors() as u128);
    let levels: u128 = array.levels().iter().map(|&s| u128::from(s)).sum();
    let by_pairs = (k * k).saturating_mul(runs).saturating_add((levels * levels).saturating_mul(33));
    let by_runs = runs.saturating_mul(runs).saturating_mul(k);
    (by_pairs.min(by_runs) <= MOST_STEPS).then(|| nearness(array))
}
