use super::sketch::Sketch;

/// Refines colourings of the distinct runs of a sketch by what the columns and their levels say.
///
/// The colour of a run is the place of its class in the order of classes, so the colours of a
/// class of m runs that begins at place p are all p. A step gives every level of every column the
/// multiset of the colours of its runs, every column the multiset of its levels, and every run its
/// old colour with the multiset of its levels. All of it goes through 64-bit sums that do not
/// depend on any order; two different multisets with one sum only refine less, since the sum of
/// isomorphic things is the same anyway.
pub(super) struct Refiner<'a> {
    sketch: &'a Sketch,
    kinds: &'a [u64],
    /// Where the levels of each column begin in `symbols`.
    starts: Vec<usize>,
    symbols: Vec<u64>,
    keys: Vec<(u8, u64, u8)>,
}

/// A bijection that scatters its values (the finaliser of Steele, Lea & Flood 2014).
pub(super) fn scatter(x: u64) -> u64 {
    let x = x.wrapping_add(0x9e37_79b9_7f4a_7c15);
    let x = (x ^ (x >> 30)).wrapping_mul(0xbf58_476d_1ce4_e5b9);
    let x = (x ^ (x >> 27)).wrapping_mul(0x94d0_49bb_1331_11eb);
    x ^ (x >> 31)
}

impl<'a> Refiner<'a> {
    /// `kinds[j]` says which columns may change places: those of one kind.
    pub(super) fn new(sketch: &'a Sketch, kinds: &'a [u64]) -> Self {
        let mut starts = Vec::with_capacity(kinds.len());
        let mut size = 0;
        for &s in &sketch.levels {
            starts.push(size);
            size += usize::from(s);
        }
        Self { sketch, kinds, starts, symbols: vec![0; size], keys: vec![(0, 0, 0); sketch.rows.len()] }
    }

    /// The first colouring: runs by how often they occur and how far they are from the others.
    pub(super) fn begin(&mut self) -> (Vec<u8>, u64) {
        let Sketch { rows, weights, .. } = self.sketch;
        for (r, row) in rows.iter().enumerate() {
            let mut sum = scatter(u64::from(weights[r]));
            for (other, &weight) in rows.iter().zip(weights) {
                let mut apart = 0u64;
                for (j, &kind) in self.kinds.iter().enumerate() {
                    if row[j] != other[j] {
                        apart = apart.wrapping_add(scatter(kind));
                    }
                }
                sum = sum.wrapping_add(scatter(apart).wrapping_mul(u64::from(weight)));
            }
            self.keys[r] = (0, sum, r as u8);
        }
        let mut colours = vec![0; rows.len()];
        let (_, trace) = self.rank(&mut colours);
        let more = self.refine(&mut colours);
        (colours, scatter(trace ^ more))
    }

    /// Refines until nothing changes; returns a number that isomorphic colourings share.
    pub(super) fn refine(&mut self, colours: &mut [u8]) -> u64 {
        let mut trace = 0;
        let mut classes = 0;
        loop {
            self.describe(colours);
            let (now, more) = self.rank(colours);
            trace = scatter(trace ^ more);
            if now == classes || now == colours.len() {
                return trace;
            }
            classes = now;
        }
    }

    /// Writes the new key of every run.
    fn describe(&mut self, colours: &[u8]) {
        let Sketch { rows, weights, .. } = self.sketch;
        self.symbols.fill(0);
        for (r, row) in rows.iter().enumerate() {
            let own = scatter(u64::from(colours[r]) << 16 | u64::from(weights[r]));
            for (&start, &x) in self.starts.iter().zip(row) {
                let cell = &mut self.symbols[start + usize::from(x)];
                *cell = cell.wrapping_add(own);
            }
        }
        for (j, &start) in self.starts.iter().enumerate() {
            let levels = &mut self.symbols[start..start + usize::from(self.sketch.levels[j])];
            let mut column = scatter(self.kinds[j]);
            for level in levels.iter_mut() {
                *level = scatter(*level);
                column = column.wrapping_add(*level);
            }
            let column = scatter(column);
            for level in levels {
                *level = scatter(level.wrapping_add(column));
            }
        }
        for (r, row) in rows.iter().enumerate() {
            let mut sum = 0u64;
            for (&start, &x) in self.starts.iter().zip(row) {
                sum = sum.wrapping_add(self.symbols[start + usize::from(x)]);
            }
            self.keys[r] = (colours[r], sum, r as u8);
        }
    }

    /// Turns keys into colours; returns the number of classes and a digest of them.
    fn rank(&mut self, colours: &mut [u8]) -> (usize, u64) {
        self.keys.sort_unstable();
        let (mut classes, mut first, mut trace) = (0, 0, 0u64);
        for i in 0..self.keys.len() {
            let (colour, key, row) = self.keys[i];
            if i == 0 || (colour, key) != (self.keys[i - 1].0, self.keys[i - 1].1) {
                classes += 1;
                first = i;
            }
            trace = scatter(trace ^ key ^ u64::from(colour));
            colours[usize::from(row)] = first as u8;
        }
        (classes, trace)
    }
}
