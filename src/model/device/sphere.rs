//! Caps of a sphere: the bulbs of a device are spheres and their liquid is a cap.

use std::f64::consts::PI;

/// A sphere seen from its lowest point.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Sphere {
    /// Radius [m].
    pub(super) radius_m: f64,
}

impl Sphere {
    /// The whole volume [m³].
    pub(super) fn volume_m3(&self) -> f64 {
        4.0 / 3.0 * PI * self.radius_m.powi(3)
    }

    /// The whole surface [m²].
    pub(super) fn area_m2(&self) -> f64 {
        4.0 * PI * self.radius_m * self.radius_m
    }

    /// Area of the liquid surface at a height above the lowest point [m²]; 0 outside the sphere.
    pub(super) fn surface_m2(&self, height_m: f64) -> f64 {
        (PI * height_m * (2.0 * self.radius_m - height_m)).max(0.0)
    }

    /// Volume below a height [m³]; the height is held inside the sphere.
    pub(super) fn cap_volume_m3(&self, height_m: f64) -> f64 {
        let height = height_m.clamp(0.0, 2.0 * self.radius_m);
        PI * height * height * (3.0 * self.radius_m - height) / 3.0
    }

    /// Height below which a volume lies [m]; the inverse of [`Self::cap_volume_m3`].
    pub(super) fn cap_height_m(&self, volume_m3: f64) -> f64 {
        self.radius_m + self.radius_m * middle_root(3.0 * volume_m3 / (PI * self.radius_m.powi(3)))
    }

    /// Height of the lower circle of a given radius, where a tube of that bore opens into the sphere [m].
    pub(super) fn mouth_height_m(&self, mouth_radius_m: f64) -> f64 {
        // r - sqrt(r² - a²) written without the difference of two nearly equal numbers.
        let squared = mouth_radius_m * mouth_radius_m;
        squared / (self.radius_m + (self.radius_m * self.radius_m - squared).max(0.0).sqrt())
    }
}

/// The root in -1..1 of `s³ - 3 s + (w - 2) = 0` for `w` in 0..4, by the cosine of a third of an angle.
///
/// Every level in a sphere, with or without an upright tube through it, is this root after scaling.
pub(super) fn middle_root(w: f64) -> f64 {
    let third = (2.0 * PI - (1.0 - 0.5 * w).clamp(-1.0, 1.0).acos()) / 3.0;
    2.0 * third.cos()
}

#[cfg(test)]
mod tests {
    use super::*;

    const BULB: Sphere = Sphere { radius_m: 0.0152 };

    #[test]
    fn a_half_full_sphere_stands_at_its_centre() {
        assert!((BULB.cap_height_m(0.5 * BULB.volume_m3()) - BULB.radius_m).abs() < 1e-15);
    }

    #[test]
    fn cap_height_inverts_cap_volume() {
        for step in 1..100 {
            let height = 2.0 * BULB.radius_m * step as f64 / 100.0;
            let back = BULB.cap_height_m(BULB.cap_volume_m3(height));
            assert!((back - height).abs() < 1e-12, "{height} came back as {back}");
        }
    }

    #[test]
    fn the_mouth_has_the_area_of_the_bore() {
        let height = BULB.mouth_height_m(0.0025);
        assert!((BULB.surface_m2(height) / (PI * 0.0025 * 0.0025) - 1.0).abs() < 1e-12);
    }
}
