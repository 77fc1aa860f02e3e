//! What head and body take up of the sunlight that reaches the device.

use crate::model::device::Device;
use crate::model::place::PlacedAir;
use crate::model::weather::Stamp;

/// A convex body shows a quarter of its surface to light from any one side, on average over all sides [Cauchy1841].
const SHOWN: f64 = 0.25;

/// Sunlight on one device, hour by hour.
#[derive(Debug, Clone)]
pub(super) struct Sun {
    irradiance_w_m2: Vec<f64>,
    stamp: Stamp,
    head_m2: f64,
    body_m2: f64,
}

impl Sun {
    /// None where no sunlight reaches it. The tube counts to the body.
    pub(super) fn on(device: &Device, air: &PlacedAir) -> Option<Self> {
        let (head, body) = (&device.head, &device.body);
        Some(Self {
            irradiance_w_m2: air.shortwave_w_m2.clone()?,
            stamp: air.series.shortwave_stamp,
            head_m2: SHOWN * head.absorptance * head.wet_area_m2,
            body_m2: SHOWN * body.absorptance * (body.area_m2 + body.tube_area_m2),
        })
    }

    /// Taken up by head and body at both ends of an hour [W]. The mean of an hour is held all through it, so that no energy
    /// is lost and none comes before sunrise; an instant runs straight to the next.
    pub(super) fn absorbed_w(&self, hour: usize) -> [(f64, f64); 2] {
        let own = self.irradiance_w_m2[hour];
        let end = match self.stamp {
            Stamp::MeanOfHour => own,
            Stamp::Instant => self.irradiance_w_m2.get(hour + 1).copied().unwrap_or(own),
        };
        [own, end].map(|w_m2| (w_m2 * self.head_m2, w_m2 * self.body_m2))
    }
}
