//! A smooth curve over the lifted volume, kept as cubic pieces so that the hot loop pays a few multiplications.

use std::sync::Arc;

/// Worst error allowed against the exact function, relative to the largest value on the curve.
const ERROR_LIMIT: f64 = 1e-11;
/// Fewest and most pieces of one stretch.
const PIECES: (usize, usize) = (32, 8192);

/// Value and derivative of the exact function at a lifted volume.
pub(super) type Exact<'a> = &'a dyn Fn(f64) -> (f64, f64);

/// One stretch of equal pieces in a coordinate `u` that is either `V` itself or `sqrt(V - origin)`.
#[derive(Debug, Clone)]
struct Stretch {
    start_u: f64,
    pieces_per_u: f64,
    pieces: Arc<[[f64; 4]]>,
}

/// A curve in two stretches: the tube, even in `V`, and the head, even in the root of `V`, because the surface of a
/// sphere's cap grows from the tube's mouth like a root.
#[derive(Debug, Clone)]
pub(super) struct Curve {
    tube_end_m3: f64,
    root_origin_m3: f64,
    last_m3: f64,
    tube: Stretch,
    head: Stretch,
}

/// Where the stretches of a curve begin and end.
#[derive(Debug, Clone, Copy)]
pub(super) struct Stops {
    /// Lifted volume at which the head begins [m³].
    pub(super) tube_end_m3: f64,
    /// Lifted volume from which the root is taken, below the head's begin [m³].
    pub(super) root_origin_m3: f64,
    /// Last lifted volume of the curve, above the head's begin [m³].
    pub(super) last_m3: f64,
}

impl Curve {
    /// Lays the pieces, doubling their number until the error limit holds between them.
    pub(super) fn new(exact: Exact<'_>, stops: Stops) -> Self {
        // The derivative may jump where the head begins: each stretch asks on its own side.
        let below = |u: f64| exact(u.min(stops.tube_end_m3 * (1.0 - 1e-14)));
        let above = |u: f64| {
            let volume = (stops.root_origin_m3 + u * u).max(stops.tube_end_m3 * (1.0 + 1e-14));
            let (value, slope) = exact(volume);
            (value, slope * 2.0 * u)
        };
        let root = |volume: f64| (volume - stops.root_origin_m3).sqrt();
        Self {
            tube_end_m3: stops.tube_end_m3,
            root_origin_m3: stops.root_origin_m3,
            last_m3: stops.last_m3,
            tube: Stretch::new(&below, 0.0, stops.tube_end_m3),
            head: Stretch::new(&above, root(stops.tube_end_m3), root(stops.last_m3)),
        }
    }

    /// Value and derivative at a lifted volume; beyond the ends the curve goes on straight.
    pub(super) fn at(&self, lifted_m3: f64) -> (f64, f64) {
        let inside = lifted_m3.clamp(0.0, self.last_m3);
        let (value, slope) = if inside <= self.tube_end_m3 {
            self.tube.at(inside)
        } else {
            let u = (inside - self.root_origin_m3).sqrt();
            let (value, slope) = self.head.at(u);
            (value, slope / (2.0 * u))
        };
        (value + slope * (lifted_m3 - inside), slope)
    }
}

impl Stretch {
    fn new(exact: Exact<'_>, start_u: f64, end_u: f64) -> Self {
        let mut count = PIECES.0;
        loop {
            let stretch = Self::with_pieces(exact, start_u, end_u, count);
            if count >= PIECES.1 || stretch.worst_error(exact) < ERROR_LIMIT {
                return stretch;
            }
            count *= 2;
        }
    }

    fn with_pieces(exact: Exact<'_>, start_u: f64, end_u: f64, count: usize) -> Self {
        let width = (end_u - start_u) / count as f64;
        let knots: Vec<(f64, f64)> = (0..=count).map(|i| exact(start_u + width * i as f64)).collect();
        let pieces = knots.windows(2).map(|pair| hermite(pair[0], pair[1], width)).collect();
        Self {
            start_u,
            pieces_per_u: 1.0 / width,
            pieces,
        }
    }

    fn at(&self, u: f64) -> (f64, f64) {
        let along = (u - self.start_u) * self.pieces_per_u;
        let index = (along as usize).min(self.pieces.len() - 1);
        let t = along - index as f64;
        let [a, b, c, d] = self.pieces[index];
        let slope = b + t * (2.0 * c + t * 3.0 * d);
        (a + t * (b + t * (c + t * d)), slope * self.pieces_per_u)
    }

    fn worst_error(&self, exact: Exact<'_>) -> f64 {
        let (mut worst, mut largest) = (0.0_f64, f64::MIN_POSITIVE);
        for index in 0..self.pieces.len() {
            let u = self.start_u + (index as f64 + 0.5) / self.pieces_per_u;
            let truth = exact(u).0;
            worst = worst.max((self.at(u).0 - truth).abs());
            largest = largest.max(truth.abs());
        }
        worst / largest
    }
}

/// Coefficients of the cubic through two points with two derivatives, in the share of the way.
fn hermite(from: (f64, f64), to: (f64, f64), width: f64) -> [f64; 4] {
    let (begin, end) = (from.1 * width, to.1 * width);
    let rise = to.0 - from.0;
    [from.0, begin, 3.0 * rise - 2.0 * begin - end, begin + end - 2.0 * rise]
}
