//! The page: one self-contained HTML file that shows a plan, what was found out about it, and how
//! to check it again.
//!
//! It needs no script and fetches nothing, reads on paper and on a phone, in light and dark. The
//! same [`Page`] gives the same bytes. Every name comes from a stranger and is escaped.
//!
//! | file | what it writes |
//! | --- | --- |
//! | `facts` | verdict, figures, evidence, criteria, floor, recipe, commands |
//! | `plan` | the factors and the runs as a picture |
//! | `grid` | the balance of every pair, counted in `balance` |
//! | `words` | sentences, some shared with the command line |
//! | `labels`, `escape` | names and settings as safe text |

mod balance;
mod escape;
mod facts;
mod grid;
mod labels;
mod plan;
mod section;
#[cfg(test)]
mod tests;
pub(crate) mod words;

use crate::array::Array;
use crate::verify::{Certificate, Nearness, Witness};

pub use labels::Labels;
pub use section::{Section, Table};
pub use words::CAUTION;

/// At most so many runs are shown in the picture.
pub const MOST_RUNS: usize = 256;
/// At most so many factors are shown in the picture, and have a grid.
pub const MOST_FACTORS: usize = 64;

/// A lower bound on the number of runs, in words.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Floor {
    /// The proved number of runs.
    pub runs: u64,
    /// What it rests on, as the end of a sentence that begins with the number of runs.
    pub reason: String,
    /// What is known about plans of fewer runs than this one.
    pub smaller: Smaller,
}

/// What is known about plans with fewer runs, the numbers counting the runs above the floor.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Smaller {
    /// There is none: the plan has as many runs as the floor.
    Impossible,
    /// None is known here, and none ruled out.
    NoneKnown(u64),
    /// Nobody looked for one.
    NotLookedFor(u64),
}

/// What goes on the page. All parts but the array may be missing.
///
/// What is stated in the parts is shown, not judged: hand in what [`crate::verify`] found out about
/// this very array.
#[derive(Clone, Debug)]
pub struct Page<'a> {
    /// What the page is about: the name of a file, the mix.
    pub title: String,
    /// The plan.
    pub array: &'a Array,
    /// What factors and settings are called.
    pub labels: Labels<'a>,
    /// The strength asked for.
    pub strength: usize,
    /// What the judges found; without it the page says that the plan is near, if it has `nearness`,
    /// or not judged.
    pub certificate: Option<&'a Certificate>,
    /// Why the strength does not hold.
    pub witness: Option<&'a Witness>,
    /// How near to orthogonal the plan is.
    pub nearness: Option<&'a Nearness>,
    /// What a file was taken to be, a line each.
    pub read_as: Vec<String>,
    /// The lower bound on the number of runs.
    pub floor: Option<Floor>,
    /// How the plan is built, in one line.
    pub recipe: Option<String>,
    /// The commands that check the plan again.
    pub commands: Vec<String>,
    /// Whatever else is to be said.
    pub sections: Vec<Section>,
}

impl<'a> Page<'a> {
    /// A page with nothing but an array.
    #[must_use]
    pub fn new(title: impl Into<String>, array: &'a Array, labels: Labels<'a>) -> Self {
        Self {
            title: title.into(),
            array,
            labels,
            strength: array.factors().min(2),
            certificate: None,
            witness: None,
            nearness: None,
            read_as: Vec::new(),
            floor: None,
            recipe: None,
            commands: Vec::new(),
            sections: Vec::new(),
        }
    }
}

/// Writes the page.
///
/// Guarantee: valid HTML without script, reference to any other file, or date; the same bytes for
/// the same page and any number of threads; no panic, whatever the texts.
///
/// Cost: N·k² steps for the balance of pairs where that is below 2^30, otherwise it is not counted;
/// at most [`MOST_RUNS`] × [`MOST_FACTORS`] cells are drawn.
///
/// Reference: common practice, no source.
///
/// ```
/// use trysquare::array::Array;
/// use trysquare::exchange::Symbols;
/// use trysquare::report::{Labels, Page, html};
/// use trysquare::verify::{Demand, certify};
///
/// let array = Array::from_rows(vec![2, 2, 2], &[[0, 0, 0], [0, 1, 1], [1, 0, 1], [1, 1, 0]])?;
/// let judgement = certify(&array, &Demand::strength(2))?;
/// let mut page = Page::new("2^3", &array, Labels::Symbols(Symbols::Zero));
/// page.certificate = Some(&judgement.certificate);
/// assert!(html(&page).contains("Orthogonal at strength 2"));
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
#[must_use]
pub fn html(page: &Page<'_>) -> String {
    let mut out = String::new();
    facts::head(page, &mut out);
    facts::figures(page, &mut out);
    facts::evidence(page, &mut out);
    plan::write(page, &mut out);
    grid::write(page, &mut out);
    facts::criteria(page, &mut out);
    facts::confusion(page, &mut out);
    facts::floor(page, &mut out);
    page.sections.iter().enumerate().for_each(|(i, section)| section.write(i, &mut out));
    facts::foot(page, &mut out);
    out
}
