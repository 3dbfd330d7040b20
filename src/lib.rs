//! Trysquare makes the smallest orthogonal array for a list of factors and certifies arrays, its
//! own and other people's.
#![forbid(unsafe_code)]

pub mod algebra;
pub mod array;
pub mod catalog;
pub mod construct;
pub mod exchange;
pub mod floor;
pub mod hunt;
pub mod mix;
pub mod recipe;
pub mod seek;
pub mod verify;
