use std::collections::HashMap;

/// One column of every orbit under a group of automorphisms of the array they extend: the first
/// of the list.
///
/// # Parameters
/// * `columns`: as [`columns`](super::columns::columns) lists them, all of them;
/// * `rows`, `levels`: the distinct runs and the levels of a column;
/// * `generators`: permutations of the distinct runs.
///
/// # Cost
/// Columns × generators × runs × levels steps.
pub(super) fn orbit_representatives(
    columns: Vec<Box<[u8]>>,
    rows: usize,
    levels: usize,
    generators: &[Vec<u8>],
) -> Vec<Box<[u8]>> {
    if generators.is_empty() || columns.len() < 2 {
        return columns;
    }
    let places: HashMap<&[u8], u32> =
        columns.iter().enumerate().map(|(i, column)| (&**column, i as u32)).collect();
    let mut parent: Vec<u32> = (0..columns.len() as u32).collect();
    for generator in generators {
        for (i, column) in columns.iter().enumerate() {
            let moved = moved(column, rows, levels, generator);
            // The list is closed under automorphisms, so the image is in it.
            if let Some(&to) = places.get(&*moved) {
                let (a, b) = (root(&mut parent, i as u32), root(&mut parent, to));
                parent[a.max(b) as usize] = a.min(b);
            }
        }
    }
    let first: Vec<bool> = (0..columns.len() as u32).map(|i| root(&mut parent, i) == i).collect();
    columns.into_iter().zip(first).filter_map(|(column, first)| first.then_some(column)).collect()
}

fn root(parent: &mut [u32], mut at: u32) -> u32 {
    while parent[at as usize] != at {
        parent[at as usize] = parent[parent[at as usize] as usize];
        at = parent[at as usize];
    }
    at
}

/// The column after a permutation of the runs, its levels named as [`columns`] names them.
///
/// [`columns`]: super::columns::columns
fn moved(column: &[u8], rows: usize, levels: usize, generator: &[u8]) -> Vec<u8> {
    let mut vectors = vec![vec![0u8; rows]; levels];
    for (r, &to) in generator.iter().enumerate() {
        for (l, vector) in vectors.iter_mut().enumerate() {
            vector[usize::from(to)] = column[r * levels + l];
        }
    }
    vectors.sort_unstable_by(|a, b| b.cmp(a));
    (0..rows * levels).map(|i| vectors[i % levels][i / levels]).collect()
}
