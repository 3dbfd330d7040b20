//! The program as people and scripts meet it: what it prints, its exit codes, the files it leaves.
//!
//! Printed text is kept in `snapshots/`; after a wanted change rewrite it with
//! `INSTA_UPDATE=always cargo test --test cli`.

mod bad_input;
mod bad_usage;
mod batch;
mod bench;
mod commands;
mod files;
mod hunt;
mod near;
mod report;
mod schema;
