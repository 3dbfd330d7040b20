//! Finds starters of Latin squares; the seeds in `catalog/` name the arguments they were found with.
//!
//! ```text
//! find_latin v M T [LIMIT]
//! find_latin quasi GROUP ROWS EMPTY SEED NODES ATTEMPTS [ROWS-TO/IMAGES/SHIFT]…
//! ```
//! Lists are written with commas. A symmetry: where each row goes, the images of the generators of
//! the cyclic factors, what is added in each row.

use trysquare::algebra::AbelianGroup;
use trysquare::hunt::latin::{QuasiDifferenceSearch, Symmetry, least_v_vector, quasi_difference_matrix};

fn list<T: std::str::FromStr>(text: &str) -> Result<Vec<T>, String> {
    text.split(',').map(|x| x.parse().map_err(|_| format!("{text:?} is no list of numbers"))).collect()
}

fn number<T: std::str::FromStr>(text: Option<&String>) -> Result<T, String> {
    text.and_then(|t| t.parse().ok()).ok_or_else(|| "a number is missing or wrong".to_owned())
}

fn line<T: ToString>(entries: impl IntoIterator<Item = T>) -> String {
    entries.into_iter().map(|e| e.to_string()).collect::<Vec<_>>().join(" ")
}

fn v_vector(args: &[String]) -> Result<(), String> {
    let limit = if args.len() > 2 { number(args.get(2))? } else { u64::MAX };
    let found = least_v_vector(number(args.first())?, number(args.get(1))?, limit);
    match found.map_err(|e| e.to_string())? {
        Some(vector) => println!("{}", line(vector)),
        None => println!("none"),
    }
    Ok(())
}

fn quasi(args: &[String]) -> Result<(), String> {
    let group = AbelianGroup::new(&list::<u16>(args.first().ok_or("a group is missing")?)?)
        .map_err(|e| e.to_string())?;
    let symmetry = |text: &String| {
        let parts: Vec<&str> = text.split('/').collect();
        let [rows, images, shift] = parts[..] else { return Err(format!("{text:?} is no symmetry")) };
        Symmetry::new(&group, &list(rows)?, &list(images)?, &list(shift)?)
            .ok_or_else(|| format!("{text:?} is no symmetry"))
    };
    let symmetries = args.iter().skip(6).map(symmetry).collect::<Result<Vec<_>, String>>()?;
    let search = QuasiDifferenceSearch {
        rows: number(args.get(1))?,
        empty: number(args.get(2))?,
        seed: number(args.get(3))?,
        nodes: number(args.get(4))?,
        attempts: number(args.get(5))?,
        symmetries,
        group,
    };
    match quasi_difference_matrix(&search) {
        Some(columns) => {
            for c in columns {
                println!("{}", line(c.iter().map(|e| e.map_or("-".to_owned(), |e| e.to_string()))));
            }
        }
        None => println!("none"),
    }
    Ok(())
}

fn main() -> Result<(), String> {
    let args: Vec<String> = std::env::args().skip(1).collect();
    match args.first().map(String::as_str) {
        Some("v") => v_vector(&args[1..]),
        Some("quasi") => quasi(&args[1..]),
        _ => {
            Err("find_latin v M T [LIMIT] | quasi GROUP ROWS EMPTY SEED NODES ATTEMPTS [SYMMETRY]…"
                .to_owned())
        }
    }
}
