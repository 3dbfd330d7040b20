//! Moves of vectors of block types, and the group that some generate.

/// A move of the vectors: the entry at block j goes to block `positions[j]`, its type turned.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Turn {
    /// The image of every block.
    pub positions: Vec<u16>,
    /// For every block the images of the types 1, 2, 3: a signed permutation.
    pub types: Vec<[i8; 3]>,
}

/// The largest group.
const GROUP: usize = 1024;
/// An element of the group.
#[derive(Clone, PartialEq, Eq)]
pub(super) struct Element {
    /// The image of every block.
    pub(super) to: Vec<u8>,
    /// For every block the image of every entry.
    pub(super) turn: Vec<[u8; 6]>,
}

/// All elements, the identity first.
pub(super) fn group(p: usize, generators: &[Turn]) -> Option<Vec<Element>> {
    let generators: Vec<Element> = generators.iter().map(|t| element(p, t)).collect::<Option<_>>()?;
    let one = Element { to: (0..p as u8).collect(), turn: vec![[0, 1, 2, 3, 4, 5]; p] };
    let mut elements = vec![one];
    let mut at = 0;
    while at < elements.len() {
        for g in &generators {
            let next = product(&elements[at], g);
            if !elements.contains(&next) {
                elements.push(next);
            }
        }
        if elements.len() > GROUP {
            return None;
        }
        at += 1;
    }
    Some(elements)
}

fn element(p: usize, turn: &Turn) -> Option<Element> {
    let mut sorted = turn.positions.clone();
    sorted.sort_unstable();
    if sorted != (0..p as u16).collect::<Vec<_>>() || turn.types.len() != p {
        return None;
    }
    let table = |images: &[i8; 3]| {
        let mut known = images.map(i8::unsigned_abs);
        known.sort_unstable();
        let code = |c: u8| {
            let image = images[usize::from(c / 2)];
            2 * (image.unsigned_abs() - 1) + (u8::from(image < 0) ^ (c & 1))
        };
        (known == [1, 2, 3]).then(|| [0, 1, 2, 3, 4, 5].map(code))
    };
    let turns = turn.types.iter().map(table).collect::<Option<_>>()?;
    Some(Element { to: turn.positions.iter().map(|&x| x as u8).collect(), turn: turns })
}

/// First a, then b.
fn product(a: &Element, b: &Element) -> Element {
    let to: Vec<u8> = a.to.iter().map(|&j| b.to[usize::from(j)]).collect();
    let turn = a.turn.iter().zip(&a.to).map(|(t, &j)| t.map(|c| b.turn[usize::from(j)][usize::from(c)]));
    Element { turn: turn.collect(), to }
}

/// The first element of each class of conjugates, the identity left out.
pub(super) fn classes(elements: &[Element]) -> Vec<usize> {
    let mut firsts = Vec::new();
    let mut met = vec![false; elements.len()];
    for i in 1..elements.len() {
        if met[i] {
            continue;
        }
        firsts.push(i);
        // k is a conjugate of i when i·h = h·k for some h.
        for h in elements {
            let image = product(&elements[i], h);
            for (k, e) in elements.iter().enumerate() {
                if !met[k] && product(h, e) == image {
                    met[k] = true;
                }
            }
        }
    }
    firsts
}
