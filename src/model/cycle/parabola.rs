//! A parabola through three points: how a smooth curve is carried through a narrow range.

/// Newton form of the parabola through three points.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Parabola {
    x0: f64,
    x1: f64,
    c0: f64,
    c1: f64,
    c2: f64,
}

impl Parabola {
    /// Through three points with distinct abscissae.
    pub(super) fn through(xs: [f64; 3], ys: [f64; 3]) -> Self {
        let c1 = (ys[1] - ys[0]) / (xs[1] - xs[0]);
        let c12 = (ys[2] - ys[1]) / (xs[2] - xs[1]);
        let c2 = (c12 - c1) / (xs[2] - xs[0]);
        Self {
            x0: xs[0],
            x1: xs[1],
            c0: ys[0],
            c1,
            c2,
        }
    }

    /// Value at `x`.
    #[inline]
    pub(super) fn at(&self, x: f64) -> f64 {
        self.c0 + (x - self.x0) * (self.c1 + (x - self.x1) * self.c2)
    }

    /// Slope at `x`.
    #[inline]
    pub(super) fn slope(&self, x: f64) -> f64 {
        self.c1 + self.c2 * (2.0 * x - self.x0 - self.x1)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_parabola_is_itself() {
        let f = |x: f64| 2.0 - 3.0 * x + 0.5 * x * x;
        let xs = [1.0, 2.5, 7.0];
        let p = Parabola::through(xs, xs.map(f));
        assert!((p.at(4.0) - f(4.0)).abs() < 1e-12);
        assert!((p.slope(4.0) - 1.0).abs() < 1e-12);
    }
}
