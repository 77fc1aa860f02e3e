//! One adaptive step of an ordinary differential equation (Dormand and Prince 1980, order 5 with an embedded 4).

/// States carried: two that are controlled, then heat taken, heat gained, water and ethanol lost.
pub(super) type Vector = [f64; 6];

const A: [[f64; 6]; 6] = [
    [1.0 / 5.0, 0.0, 0.0, 0.0, 0.0, 0.0],
    [3.0 / 40.0, 9.0 / 40.0, 0.0, 0.0, 0.0, 0.0],
    [44.0 / 45.0, -56.0 / 15.0, 32.0 / 9.0, 0.0, 0.0, 0.0],
    [
        19372.0 / 6561.0,
        -25360.0 / 2187.0,
        64448.0 / 6561.0,
        -212.0 / 729.0,
        0.0,
        0.0,
    ],
    [
        9017.0 / 3168.0,
        -355.0 / 33.0,
        46732.0 / 5247.0,
        49.0 / 176.0,
        -5103.0 / 18656.0,
        0.0,
    ],
    [
        35.0 / 384.0,
        0.0,
        500.0 / 1113.0,
        125.0 / 192.0,
        -2187.0 / 6784.0,
        11.0 / 84.0,
    ],
];
const C: [f64; 6] = [1.0 / 5.0, 3.0 / 10.0, 4.0 / 5.0, 8.0 / 9.0, 1.0, 1.0];
/// Fifth less fourth order weights.
const ERROR: [f64; 7] = [
    71.0 / 57600.0,
    0.0,
    -71.0 / 16695.0,
    71.0 / 1920.0,
    -17253.0 / 339200.0,
    22.0 / 525.0,
    -1.0 / 40.0,
];

/// The state after `step`, and the error estimate of the two controlled states.
pub(super) fn dormand_prince(
    slope: &impl Fn(f64, &Vector) -> Vector,
    time: f64,
    from: &Vector,
    step: f64,
) -> (Vector, [f64; 2]) {
    let mut slopes = [[0.0; 6]; 7];
    slopes[0] = slope(time, from);
    let mut reached = *from;
    for stage in 0..6 {
        reached = *from;
        for (weight, known) in A[stage].iter().zip(&slopes).take(stage + 1) {
            for (value, s) in reached.iter_mut().zip(known) {
                *value += step * weight * s;
            }
        }
        slopes[stage + 1] = slope(time + C[stage] * step, &reached);
    }
    let error = [0, 1].map(|i| step * ERROR.iter().zip(&slopes).map(|(weight, s)| weight * s[i]).sum::<f64>());
    (reached, error)
}

#[cfg(test)]
mod tests {
    use super::*;

    fn miss(step: f64) -> f64 {
        let slope = |_t: f64, y: &Vector| [-y[0], y[1], 0.0, 0.0, 0.0, 0.0];
        let (one, _) = dormand_prince(&slope, 0.0, &[1.0, 1.0, 0.0, 0.0, 0.0, 0.0], step);
        (one[1] - step.exp()).abs().max((one[0] - (-step).exp()).abs())
    }

    #[test]
    fn an_exponential_to_fifth_order() {
        assert!(miss(0.1) < 1e-9);
        // One step of order 5 errs with the sixth power of the step: halving it leaves a sixty-fourth.
        assert!((miss(0.4) / miss(0.2) / 64.0 - 1.0).abs() < 0.2);
    }
}
