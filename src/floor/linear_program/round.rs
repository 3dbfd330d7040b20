use super::Question;
use crate::floor::proof::{Term, Weights};

/// The smallest scale from which on doubling has no sense: the weights no longer fit.
pub(super) const MAX_SCALE: f64 = (1u64 << 40) as f64;

/// Integer weights near real ones: D·f_j rounded for D = 1, 5/4, 3/2, 7/4, 2, …, the constant what
/// they need; the first that are `strong`, else the ones with the best bound.
///
/// Any rounding is valid with its constant; it costs O(1/D).
pub(super) fn round(
    question: &Question<'_>,
    weights: &[(usize, f64)],
    strong: impl Fn(&Weights) -> bool,
) -> Option<Weights> {
    let largest = weights.iter().map(|f| f.1.abs()).fold(0.0, f64::max);
    let mut best: Option<(f64, Weights)> = None;
    let mut scale = 1.0;
    while largest * scale < MAX_SCALE {
        for quarter in 4..8 {
            let Some((value, found)) = at_scale(question, weights, scale * f64::from(quarter) / 4.0) else {
                continue;
            };
            if strong(&found) && found.check(question.counts, question.strength).is_ok() {
                return Some(found);
            }
            if best.as_ref().is_none_or(|(known, _)| value > *known) {
                best = Some((value, found));
            }
        }
        scale *= 2.0;
    }
    best.map(|b| b.1)
}

/// The weights at one scale, with the value of their bound; `None` when they say nothing.
fn at_scale(question: &Question<'_>, weights: &[(usize, f64)], scale: f64) -> Option<(f64, Weights)> {
    let mut rounded: Vec<(usize, f64)> = weights
        .iter()
        .map(|&(j, f)| (j, (f * scale).round()))
        .map(|(j, f)| (j, if question.free(j) { f } else { f.max(0.0) }))
        .filter(|f| f.1 != 0.0)
        .collect();
    if rounded.is_empty() {
        return None;
    }
    rounded.sort_by_key(|f| f.0);
    let needed = question.constant(&rounded);
    // What floating point leaves open is paid for; the exact check has the last word.
    let constant = (needed + 1e-9 * (1.0 + rounded.iter().map(|f| f.1.abs()).sum::<f64>())).floor();
    let constant = if constant >= needed - 1e-9 { constant } else { needed.ceil() };
    if constant < 1.0 {
        return None;
    }
    let value = question.value(&rounded, constant);
    let terms = rounded
        .iter()
        .map(|&(j, f)| Term { at: question.space.tuple(j).to_vec(), weight: f as i64 })
        .collect();
    Some((value, Weights { constant: constant as i64, terms }))
}
