//! A smooth curve over the lifted volume, kept as cubic pieces so that the hot loop pays a few multiplications.

use std::sync::Arc;

/// Worst error allowed against the exact function, relative to the largest value on the curve.
const ERROR_LIMIT: f64 = 1e-10;
/// Fewest and most pieces of one stretch.
const PIECES: (usize, usize) = (16, 4096);
/// How far beside a stop the function is asked, relative: its derivative may jump there.
const BESIDE: f64 = 1e-14;

/// Value and derivative of the exact function at a lifted volume.
pub(super) type Exact<'a> = &'a dyn Fn(f64) -> (f64, f64);

/// The coordinate in which the pieces of a stretch are equally wide. The surface of a cap grows from a sphere's lowest
/// point like a root of the volume and shrinks like one towards its highest: in these coordinates both are smooth.
#[derive(Debug, Clone, Copy)]
enum Coordinate {
    /// The lifted volume itself.
    Even,
    /// `sqrt(V - origin)`.
    Above(f64),
    /// `-sqrt(origin - V)`.
    Below(f64),
}

impl Coordinate {
    fn of(self, volume_m3: f64) -> f64 {
        match self {
            Self::Even => volume_m3,
            Self::Above(origin) => (volume_m3 - origin).sqrt(),
            Self::Below(origin) => -(origin - volume_m3).sqrt(),
        }
    }

    fn volume_m3(self, u: f64) -> f64 {
        match self {
            Self::Even => u,
            Self::Above(origin) => origin + u * u,
            Self::Below(origin) => origin - u * u,
        }
    }

    /// Derivative of the volume by the coordinate.
    fn stretching(self, u: f64) -> f64 {
        match self {
            Self::Even => 1.0,
            Self::Above(_) => 2.0 * u,
            Self::Below(_) => -2.0 * u,
        }
    }
}

/// One stretch of equal pieces.
#[derive(Debug, Clone)]
struct Stretch {
    coordinate: Coordinate,
    start_u: f64,
    pieces_per_u: f64,
    pieces: Arc<[[f64; 4]]>,
}

/// A curve in three stretches: the tube, the lower and the upper part of the head.
#[derive(Debug, Clone)]
pub(super) struct Curve {
    stops: Stops,
    tube: Stretch,
    lower_head: Stretch,
    upper_head: Stretch,
}

/// Where the stretches of a curve begin and end, and from where the roots are taken.
#[derive(Debug, Clone, Copy)]
pub(super) struct Stops {
    /// Lifted volume at which the head begins [m³].
    pub(super) tube_end_m3: f64,
    /// Lifted volume between the lower and the upper part of the head [m³].
    pub(super) middle_m3: f64,
    /// Last lifted volume of the curve [m³].
    pub(super) last_m3: f64,
    /// Lifted volume below the head's begin from which its lower root is taken [m³].
    pub(super) root_from_m3: f64,
    /// Lifted volume beyond the last one to which its upper root is taken [m³].
    pub(super) root_to_m3: f64,
}

impl Curve {
    /// Lays the pieces, doubling their number until the error limit holds between them.
    pub(super) fn new(exact: Exact<'_>, stops: Stops) -> Self {
        let Stops {
            tube_end_m3,
            middle_m3,
            last_m3,
            root_from_m3,
            root_to_m3,
        } = stops;
        Self {
            stops,
            tube: Stretch::new(exact, Coordinate::Even, [0.0, tube_end_m3]),
            lower_head: Stretch::new(exact, Coordinate::Above(root_from_m3), [tube_end_m3, middle_m3]),
            upper_head: Stretch::new(exact, Coordinate::Below(root_to_m3), [middle_m3, last_m3]),
        }
    }

    /// Value and derivative at a lifted volume; beyond the ends the curve goes on straight.
    pub(super) fn at(&self, lifted_m3: f64) -> (f64, f64) {
        let inside = lifted_m3.clamp(0.0, self.stops.last_m3);
        let stretch = if inside <= self.stops.tube_end_m3 {
            &self.tube
        } else if inside <= self.stops.middle_m3 {
            &self.lower_head
        } else {
            &self.upper_head
        };
        let (value, slope) = stretch.at(inside);
        (value + slope * (lifted_m3 - inside), slope)
    }

    /// How many pieces the curve took.
    #[cfg(test)]
    pub(super) fn pieces(&self) -> usize {
        self.tube.pieces.len() + self.lower_head.pieces.len() + self.upper_head.pieces.len()
    }
}

impl Stretch {
    fn new(exact: Exact<'_>, coordinate: Coordinate, [from_m3, to_m3]: [f64; 2]) -> Self {
        let inside = |volume_m3: f64| volume_m3.clamp(from_m3 * (1.0 + BESIDE), to_m3 * (1.0 - BESIDE));
        let along = |u: f64| {
            let (value, slope) = exact(inside(coordinate.volume_m3(u)));
            (value, slope * coordinate.stretching(u))
        };
        let ends = [coordinate.of(from_m3), coordinate.of(to_m3)];
        let mut count = PIECES.0;
        loop {
            let stretch = Self::with_pieces(&along, coordinate, ends, count);
            if count >= PIECES.1 || stretch.worst_error(&along) < ERROR_LIMIT {
                return stretch;
            }
            count *= 2;
        }
    }

    fn with_pieces(along: Exact<'_>, coordinate: Coordinate, [start_u, end_u]: [f64; 2], count: usize) -> Self {
        let width = (end_u - start_u) / count as f64;
        let knots: Vec<(f64, f64)> = (0..=count).map(|i| along(start_u + width * i as f64)).collect();
        Self {
            coordinate,
            start_u,
            pieces_per_u: 1.0 / width,
            pieces: knots.windows(2).map(|pair| hermite(pair[0], pair[1], width)).collect(),
        }
    }

    fn at(&self, volume_m3: f64) -> (f64, f64) {
        let u = self.coordinate.of(volume_m3);
        let (value, slope) = self.along(u);
        (value, slope / self.coordinate.stretching(u))
    }

    fn along(&self, u: f64) -> (f64, f64) {
        let along = (u - self.start_u) * self.pieces_per_u;
        let index = (along as usize).min(self.pieces.len() - 1);
        let t = along - index as f64;
        let [a, b, c, d] = self.pieces[index];
        let slope = b + t * (2.0 * c + t * 3.0 * d);
        (a + t * (b + t * (c + t * d)), slope * self.pieces_per_u)
    }

    fn worst_error(&self, along: Exact<'_>) -> f64 {
        let (mut worst, mut largest) = (0.0_f64, f64::MIN_POSITIVE);
        for index in 0..self.pieces.len() {
            let u = self.start_u + (index as f64 + 0.5) / self.pieces_per_u;
            let truth = along(u).0;
            worst = worst.max((self.along(u).0 - truth).abs());
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
