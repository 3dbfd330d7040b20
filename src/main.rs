//! The program `trysquare`; everything is in the library, see `trysquare::cli`.
#![forbid(unsafe_code)]

fn main() -> std::process::ExitCode {
    trysquare::cli::run().into()
}
