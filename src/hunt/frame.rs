//! Runs as the points of a box, and permutations of them that act on each coordinate.

use super::splits::Move;

/// The largest group that is expanded.
const MOST: usize = 256;

/// The elements of the group that `generators` generate, the identity left out; `None` when they
/// are no permutations of the box or the group is too large.
///
/// Point (x_1, …, x_r) is run x_1 + radix_1 · (x_2 + …); a generator names for each coordinate the
/// image of every value.
pub(super) fn group(radices: &[u16], generators: &[Vec<Vec<u16>>]) -> Option<Vec<Vec<u8>>> {
    let runs = radices.iter().try_fold(1usize, |n, &r| n.checked_mul(usize::from(r)))?;
    if runs == 0 || runs > 128 {
        return None;
    }
    let mut given = Vec::new();
    for generator in generators {
        if generator.len() != radices.len() {
            return None;
        }
        for (images, &radix) in generator.iter().zip(radices) {
            let mut sorted = images.clone();
            sorted.sort_unstable();
            if sorted != (0..radix).collect::<Vec<_>>() {
                return None;
            }
        }
        let image = |run: usize| {
            let (mut rest, mut weight, mut image) = (run, 1, 0);
            for (images, &radix) in generator.iter().zip(radices) {
                image += weight * usize::from(images[rest % usize::from(radix)]);
                rest /= usize::from(radix);
                weight *= usize::from(radix);
            }
            image as u8
        };
        given.push((0..runs).map(image).collect::<Vec<u8>>());
    }
    let mut elements = vec![(0..runs).map(|r| r as u8).collect::<Vec<u8>>()];
    let mut at = 0;
    while at < elements.len() {
        for g in &given {
            let product: Vec<u8> = elements[at].iter().map(|&r| g[usize::from(r)]).collect();
            if !elements.contains(&product) {
                elements.push(product);
            }
        }
        if elements.len() > MOST {
            return None;
        }
        at += 1;
    }
    elements.remove(0);
    Some(elements)
}

/// Tables for the elements.
pub(super) fn moves(elements: &[Vec<u8>]) -> Vec<Move> {
    elements.iter().map(|e| Move::new(e)).collect()
}

/// Whether every element takes the levels of a column to levels of it.
pub(super) fn keeps(elements: &[Vec<u8>], symbols: &[u8]) -> bool {
    elements.iter().all(|e| {
        let mut image = [None; 256];
        e.iter().zip(symbols).all(|(&to, &from)| {
            let level = symbols[usize::from(to)];
            *image[usize::from(from)].get_or_insert(level) == level
        })
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_group_on_a_box() {
        let turn = |n: u16| (0..n).map(|x| (x + 1) % n).collect::<Vec<u16>>();
        let elements = group(&[3, 2], &[vec![turn(3), turn(2)]]).unwrap();
        assert_eq!(elements.len(), 5);
        assert_eq!(elements[0], [4, 5, 3, 1, 2, 0]);
        assert!(keeps(&elements, &[0, 1, 2, 0, 1, 2]) && keeps(&elements, &[5, 5, 5, 1, 1, 1]));
        assert!(!keeps(&elements, &[0, 0, 1, 1, 2, 2]));
        assert!(group(&[3, 2], &[vec![turn(3)]]).is_none());
        assert!(group(&[3], &[vec![vec![0, 0, 1]]]).is_none());
        assert!(group(&[200], &[]).is_none());
        assert!(group(&[4], &[]).unwrap().is_empty());
    }
}
