//! Trysquare makes the smallest orthogonal array for a list of factors and certifies arrays, its
//! own and other people's.
#![forbid(unsafe_code)]

pub mod algebra;
pub mod array;
pub mod construct;
pub mod exchange;
pub mod mix;
