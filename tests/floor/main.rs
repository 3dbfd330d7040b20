//! Floors and their proofs, against the shelf, against published values and against corruption.

mod corrupted;
mod impossible;
mod rejections;
mod shares;
