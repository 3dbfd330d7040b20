//! Looks for an array with a prescribed group: `find_array RUNS MIX GROUP SEED ATTEMPTS POOL`, the
//! group written as cyclic orders (`3`, `3x3`) or `1`; prints the seed.

use trysquare::hunt::orbits_seed;
use trysquare::hunt::symmetric::{Motion, STEPS, SymmetricHunt, hunt};
use trysquare::mix::Mix;

fn main() -> Result<(), Box<dyn std::error::Error>> {
    let words: Vec<String> = std::env::args().skip(1).collect();
    let [runs, mix, group, seed, attempts, pool] = &words[..] else {
        return Err("write: find_array RUNS MIX GROUP SEED ATTEMPTS POOL".into());
    };
    let group: Vec<u16> = match group.as_str() {
        "1" => vec![],
        orders => orders.split('x').map(str::parse).collect::<Result<_, _>>()?,
    };
    let request = SymmetricHunt {
        runs: runs.parse()?,
        levels: mix.parse::<Mix>()?.levels().to_vec(),
        strength: 2,
        group,
        fixed: vec![],
        motion: Motion::Any,
        elementary: false,
        seed: seed.parse()?,
        attempts: attempts.parse()?,
        pool: pool.parse()?,
        steps: STEPS,
        exchanges: 0,
    };
    let start = std::time::Instant::now();
    let found = hunt(&request, None).ok_or("the runs are no multiple of the group or of a level")?;
    eprintln!(
        "{} of {} columns, attempt {}, {:.1} s",
        found.columns.len(),
        request.levels.len(),
        found.attempt,
        start.elapsed().as_secs_f64()
    );
    let source = format!(
        "computed for this project: examples/find_array {runs} \"{mix}\" {} {seed} {attempts} {pool}",
        words[2]
    );
    print!("{}", orbits_seed(&request.group, &found.columns, 2, &source)?);
    if found.complete { Ok(()) } else { Err("not all columns were found".into()) }
}
