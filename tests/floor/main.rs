//! Floors and their proofs, against the shelf, against published values and against corruption.

mod corrupted;
mod exact;
mod impossible;
mod parity;
mod rejections;
mod shares;
