//! A hunt as a list of tasks: several methods and groups in turn, on all cores, resumable and in
//! parts.
//!
//! | file | what lives there |
//! | --- | --- |
//! | `request` | what is asked for: mix, runs, strength, seed, symmetry, shard |
//! | `work` | the work list: which method with which group, in which order, with how much effort |
//! | `state` | what was done so far, to be written down and gone on with |
//! | `run` | the tasks on all cores, and what they come to |

mod request;
mod run;
mod state;
mod work;

pub use request::{HuntError, HuntRequest, MAX_RUNS, Shard, Symmetry};
pub use run::{Find, Impossible, Observer, Outcome, RunError, Stopped, run};
pub use state::{Placed, State};
