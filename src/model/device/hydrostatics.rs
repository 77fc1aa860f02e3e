//! How high a lifted volume stands above the level left in the body, and how far the device leans with it.

use std::f64::consts::FRAC_PI_2;
use std::sync::Arc;

use super::curve::{Curve, Stops};
use super::vessel::Vessel;

/// Inner geometry, with the lift laid out as a smooth curve for fast reading.
///
/// The curve agrees with the exact geometry ([`Self::exact_lift_m`]) to 1e-8 of the largest lift. Valid for lifted
/// volumes from 0 to [`Self::last_volume_m3`]; beyond both ends it goes on straight, so that a search may overstep.
#[derive(Debug, Clone)]
pub struct Hydrostatics {
    vessel: Vessel,
    lift: Arc<Curve>,
    lean: Option<Lean>,
}

/// How the device leans as liquid moves up: `tan(lean) = forward moment / stiffness(V)`.
#[derive(Debug, Clone)]
pub(super) struct Lean {
    /// Sum of mass times depth below the pivot, over the lifted volume [kg m].
    pub(super) stiffness: Arc<Curve>,
    /// Sum of mass times forward offset [kg m].
    pub(super) forward_kg_m: f64,
    /// Lifted volumes are divided by this before the stiffness is read; 1 in the nominal device.
    pub(super) volume_factor: f64,
}

impl Hydrostatics {
    /// Lays the lift of a vessel; upright until a lean is given.
    pub(super) fn new(vessel: Vessel) -> Self {
        let lift = Curve::new(&|volume| vessel.lift(volume), stops(&vessel));
        Self {
            vessel,
            lift: Arc::new(lift),
            lean: None,
        }
    }

    /// The same geometry, leaning.
    pub(super) fn leaning(self, stiffness: &dyn Fn(f64) -> (f64, f64), forward_kg_m: f64) -> Self {
        let stiffness = Arc::new(Curve::new(stiffness, stops(&self.vessel)));
        Self {
            lean: Some(Lean {
                stiffness,
                forward_kg_m,
                volume_factor: 1.0,
            }),
            ..self
        }
    }

    /// The same geometry with the whole lean moved to `factor` times the lifted volumes.
    pub(super) fn with_lean_volume_factor(&self, factor: f64) -> Self {
        let lean = self.lean.clone().map(|lean| Lean {
            volume_factor: lean.volume_factor * factor,
            ..lean
        });
        Self { lean, ..self.clone() }
    }

    /// The exact geometry behind the curve.
    pub(super) fn vessel(&self) -> &Vessel {
        &self.vessel
    }

    /// Whether the lean follows from masses.
    pub(super) fn leans(&self) -> bool {
        self.lean.is_some()
    }

    /// Lifted volume at which the meniscus enters the head [m³].
    pub fn tube_volume_m3(&self) -> f64 {
        self.vessel.tube_volume_m3()
    }

    /// Last lifted volume at which there is still liquid over the tube's end and room in the head [m³].
    pub fn last_volume_m3(&self) -> f64 {
        self.vessel.run_out_m3().min(self.vessel.head_full_m3())
    }

    /// Effective lift for a lifted volume: upper meniscus minus level left in the body, times the cosine of the lean [m].
    pub fn lift_m(&self, lifted_m3: f64) -> f64 {
        self.lift_and_slope(lifted_m3).0
    }

    /// Derivative of [`Self::lift_m`] by the lifted volume [1/m²]. Where the meniscus enters the head the lean's part
    /// of it jumps, and the tube's side is given.
    pub fn lift_slope_1_m2(&self, lifted_m3: f64) -> f64 {
        self.lift_and_slope(lifted_m3).1
    }

    /// [`Self::lift_m`] and [`Self::lift_slope_1_m2`] in one reading.
    pub fn lift_and_slope(&self, lifted_m3: f64) -> (f64, f64) {
        let (lift, slope) = self.lift.at(lifted_m3);
        let Some(lean) = &self.lean else {
            return (lift, slope);
        };
        let (cosine, cosine_slope) = lean.cosine(lifted_m3);
        (lift * cosine, slope * cosine + lift * cosine_slope)
    }

    /// Lean from upright [rad]; 0 where the balance was given as a tip volume, because then it is not known.
    pub fn lean_rad(&self, lifted_m3: f64) -> f64 {
        self.lean.as_ref().map_or(0.0, |lean| lean.angle_rad(lifted_m3))
    }

    /// [`Self::lift_m`] from the geometry itself, without the curve: slower, and what the curve is judged by [m].
    pub fn exact_lift_m(&self, lifted_m3: f64) -> f64 {
        self.vessel.lift(lifted_m3).0 * self.lean.as_ref().map_or(1.0, |lean| lean.cosine(lifted_m3).0)
    }
}

impl Lean {
    /// Cosine of the lean and its derivative by the lifted volume [1/m³].
    fn cosine(&self, lifted_m3: f64) -> (f64, f64) {
        let (stiffness, slope) = self.stiffness.at(lifted_m3 / self.volume_factor);
        let squared = self.forward_kg_m * self.forward_kg_m;
        let length = (stiffness * stiffness + squared).sqrt();
        (
            stiffness / length,
            slope / self.volume_factor * squared / length.powi(3),
        )
    }

    fn angle_rad(&self, lifted_m3: f64) -> f64 {
        let stiffness = self.stiffness.at(lifted_m3 / self.volume_factor).0;
        FRAC_PI_2 - (stiffness / self.forward_kg_m).atan()
    }
}

/// Where the curves of a vessel begin and end.
fn stops(vessel: &Vessel) -> Stops {
    let tube_end_m3 = vessel.tube_volume_m3();
    // Near the mouth the surface grows by 2π(r - h) per height, so the height is a root of V from this origin.
    let growth_m = 2.0 * std::f64::consts::PI * (vessel.head.radius_m - vessel.mouth_m());
    let last_m3 = vessel.run_out_m3().min(vessel.head_full_m3());
    Stops {
        tube_end_m3,
        middle_m3: 0.5 * (tube_end_m3 + last_m3),
        last_m3,
        root_from_m3: tube_end_m3 - vessel.bore_m2().powi(2) / (2.0 * growth_m),
        root_to_m3: vessel.head_brimming_m3(),
    }
}

#[cfg(test)]
mod tests {
    use super::super::sphere::Sphere;
    use super::*;

    fn shelf() -> Vessel {
        let mut vessel = Vessel {
            body: Sphere { radius_m: 0.0152 },
            head: Sphere { radius_m: 0.0117 },
            bore_radius_m: 0.0025,
            tube_radius_m: 0.0035,
            tube_top_m: 0.110,
            tube_end_m: 0.003,
            rest_level_m: 0.0,
        };
        vessel.rest_level_m = vessel.rest_level_for_m(9.5e-6).expect("it fits");
        vessel
    }

    #[test]
    fn nothing_is_lifted_at_rest() {
        let vessel = shelf();
        assert!(vessel.lift(0.0).0.abs() < 1e-15);
        assert!((vessel.content_at_rest_m3(vessel.rest_level_m) - 9.5e-6).abs() < 1e-18);
    }

    #[test]
    fn liquid_is_neither_lost_nor_made_by_lifting() {
        let vessel = shelf();
        for step in 0..=50 {
            let lifted = vessel.tube_volume_m3() * step as f64 / 50.0;
            let column = vessel.bore_m2() * (vessel.meniscus(lifted).0 - vessel.tube_end_m);
            let total = vessel.outside_m3(vessel.level_m(lifted)) + column;
            assert!((total - 9.5e-6).abs() < 1e-17, "{total} after lifting {lifted}");
        }
    }

    #[test]
    fn the_exact_slope_is_the_derivative_and_runs_on_into_the_head() {
        let vessel = shelf();
        let step = 1e-12;
        for volume in [1e-8, 1e-6, vessel.tube_volume_m3() + 1e-9, 3e-6, 6e-6] {
            let numeric = (vessel.lift(volume + step).0 - vessel.lift(volume - step).0) / (2.0 * step);
            assert!((vessel.lift(volume).1 / numeric - 1.0).abs() < 1e-4, "at {volume}");
            let moment = (vessel.liquid_moment(volume + step).0 - vessel.liquid_moment(volume - step).0) / (2.0 * step);
            assert!(
                (vessel.liquid_moment(volume).1 / moment - 1.0).abs() < 1e-4,
                "moment at {volume}"
            );
        }
        let mouth = vessel.tube_volume_m3();
        let (below, above) = (vessel.lift(mouth * (1.0 - 1e-12)), vessel.lift(mouth * (1.0 + 1e-12)));
        assert!((below.0 - above.0).abs() < 1e-10 && (below.1 / above.1 - 1.0).abs() < 1e-5);
    }

    #[test]
    fn the_curve_agrees_with_the_exact_form() {
        let hydrostatics = Hydrostatics::new(shelf());
        let (mut worst, mut worst_slope) = (0.0_f64, 0.0_f64);
        let last = hydrostatics.last_volume_m3();
        for step in 1..20_000 {
            let volume = last * step as f64 / 20_000.0;
            let exact = shelf().lift(volume);
            let read = hydrostatics.lift_and_slope(volume);
            worst = worst.max((read.0 / exact.0 - 1.0).abs());
            worst_slope = worst_slope.max((read.1 / exact.1 - 1.0).abs());
        }
        // Measured 3e-9 and 2e-7; the limits leave room for other shapes, not for a coarser curve.
        assert!(hydrostatics.lift.pieces() < 2000, "small enough for a cache");
        assert!(worst < 1e-8, "lift off by {worst:e}");
        assert!(worst_slope < 1e-6, "slope off by {worst_slope:e}");
    }
}
