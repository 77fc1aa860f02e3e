//! Density of ethanol-water mixtures, and strength by volume against strength by mass [OIML1975].

#![expect(clippy::excessive_precision, reason = "the digits are those the standard prints")]

/// Terms of the general formula of [OIML1975] that depend on strength alone, at 20 °C [kg/m3].
const AT_20_C: [f64; 12] = [
    9.982012300e2,
    -1.929769495e2,
    3.891238958e2,
    -1.668103923e3,
    1.352215441e4,
    -8.829278388e4,
    3.062874042e5,
    -6.138381234e5,
    7.470172998e5,
    -5.478461354e5,
    2.234460334e5,
    -3.903285426e4,
];

/// Terms that depend on temperature alone, first to sixth power of (t - 20 °C).
const WATER: [f64; 6] = [
    -2.0618513e-1,
    -5.2682542e-3,
    3.6130013e-5,
    -3.8957702e-7,
    7.1693540e-9,
    -9.9739231e-11,
];

/// Mixed terms: one row per power of (t - 20 °C), each a polynomial in strength without constant term.
const MIXED: [&[f64]; 5] = [
    &[
        1.693443461530087e-1,
        -1.046914743455169e1,
        7.196353469546523e1,
        -7.047478054272792e2,
        3.924090430035045e3,
        -1.210164659068747e4,
        2.248646550400788e4,
        -2.605562982188164e4,
        1.852373922069467e4,
        -7.420201433430137e3,
        1.285617841998974e3,
    ],
    &[
        -1.193013005057010e-2,
        2.517399633803461e-1,
        -2.170575700536993,
        1.353034988843029e1,
        -5.029988758547014e1,
        1.096355666577570e2,
        -1.422753946421155e2,
        1.080435942856230e2,
        -4.414153236817392e1,
        7.442971530188783,
    ],
    &[
        -6.802995733503803e-4,
        1.876837790289664e-2,
        -2.002561813734156e-1,
        1.022992966719220,
        -2.895696483903638,
        4.810060584300675,
        -4.672147440794683,
        2.458043105903461,
        -5.411227621436812e-1,
    ],
    &[
        4.075376675622027e-6,
        -8.763058573471110e-6,
        6.515031360099368e-6,
        -1.515784836987210e-6,
    ],
    &[-2.788074354782409e-8, 1.345612883493354e-8],
];

fn polynomial(coefficients: &[f64], x: f64) -> f64 {
    coefficients.iter().rev().fold(0.0, |sum, c| sum * x + c)
}

/// Density of a mixture [kg/m3] of ethanol mass fraction [0-1] at a temperature [°C, -20 to 40] [OIML1975].
///
/// Outside that range of temperature the nearest end is taken, since the polynomial bends away quickly.
pub(super) fn mixture_density_kg_m3(mass_fraction: f64, temp_c: f64) -> f64 {
    let t = temp_c.clamp(-20.0, 40.0) - 20.0;
    if mass_fraction == 0.0 {
        return AT_20_C[0] + t * polynomial(&WATER, t);
    }
    let mixed: f64 = MIXED.iter().rev().fold(0.0, |sum, row| {
        (sum + mass_fraction * polynomial(row, mass_fraction)) * t
    });
    polynomial(&AT_20_C, mass_fraction) + t * polynomial(&WATER, t) + mixed
}

/// Strength [% ABV at 20 °C] of an ethanol mass fraction [0-1] [OIML1975].
pub(super) fn abv_pct(mass_fraction: f64) -> f64 {
    100.0 * mass_fraction * polynomial(&AT_20_C, mass_fraction) / polynomial(&AT_20_C, 1.0)
}

/// Ethanol mass fraction [0-1] of a strength [% ABV at 20 °C, 0-100]; strengths outside are held at the ends.
pub(super) fn mass_fraction(abv: f64) -> f64 {
    if abv <= 0.0 {
        return 0.0;
    }
    let (mut low, mut high) = (0.0, 1.0);
    for _ in 0..52 {
        let middle = 0.5 * (low + high);
        if abv_pct(middle) < abv {
            low = middle
        } else {
            high = middle
        }
    }
    0.5 * (low + high)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn strength_converts_both_ways() {
        for step in 0..=100 {
            let abv = f64::from(step);
            assert!((abv_pct(mass_fraction(abv)) - abv).abs() < 1e-9, "{abv}");
        }
    }
}
