//! The judges, from outside.

mod certificates;
mod engines;
mod samples;
mod sought;
