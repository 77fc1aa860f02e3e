//! Between the wire and the device room's record.

use super::{Device, Head, Lamp, LampEnd};
use crate::http::v1::schedule::Schedule;
use crate::service::records::{Definition, DipDefinition, HeadDefinition, LampDefinition, LampTarget};

/// When the device's lamp is lit, if it has one and does not always shine.
pub fn lamp_schedule(device: &Device) -> Option<Schedule> {
    device.lamp.as_ref().and_then(|lamp| lamp.lit.clone())
}

impl Device {
    /// The device with its lamp, if it has one, lit at these hours.
    pub fn lit(mut self, hours: Option<Schedule>) -> Self {
        if let Some(lamp) = &mut self.lamp {
            lamp.lit = hours;
        }
        self
    }
}

impl From<Device> for Definition {
    fn from(wire: Device) -> Self {
        Self {
            name: wire.name,
            head: wire.head.into(),
            tube: wire.tube.into(),
            body: wire.body.into(),
            fluid: wire.fluid.into(),
            balance: wire.balance.into(),
            dip: wire.dip.map(DipDefinition::from).unwrap_or_default(),
            conduction_w_k: wire.conduction_w_k,
            evaporant: wire.evaporant.into(),
            lamp: wire.lamp.map(Into::into),
            cup: wire.cup.map(Into::into),
            max_temperature_c: wire.max_temperature_c,
        }
    }
}

impl From<Definition> for Device {
    fn from(record: Definition) -> Self {
        let dip = (record.dip != DipDefinition::default()).then(|| record.dip.into());
        Self {
            name: record.name,
            head: record.head.into(),
            tube: record.tube.into(),
            body: record.body.into(),
            fluid: record.fluid.into(),
            balance: record.balance.into(),
            dip,
            conduction_w_k: record.conduction_w_k,
            evaporant: record.evaporant.into(),
            lamp: record.lamp.map(Into::into),
            cup: record.cup.map(Into::into),
            max_temperature_c: record.max_temperature_c,
        }
    }
}

impl From<Head> for HeadDefinition {
    fn from(wire: Head) -> Self {
        Self {
            outer_diameter_mm: wire.outer_diameter_mm,
            wall_mm: wire.wall_mm,
            beak_area_cm2: wire.beak_area_cm2,
            felt: wire.felt.into(),
        }
    }
}

impl From<HeadDefinition> for Head {
    fn from(record: HeadDefinition) -> Self {
        Self {
            outer_diameter_mm: record.outer_diameter_mm,
            wall_mm: record.wall_mm,
            beak_area_cm2: record.beak_area_cm2,
            felt: record.felt.into(),
        }
    }
}

impl From<Lamp> for LampDefinition {
    fn from(wire: Lamp) -> Self {
        let on = match wire.on {
            LampEnd::Body => LampTarget::Body,
            LampEnd::Head => LampTarget::Head,
        };
        Self {
            on,
            absorbed_w: wire.absorbed_w,
        }
    }
}

impl From<LampDefinition> for Lamp {
    fn from(record: LampDefinition) -> Self {
        let on = match record.on {
            LampTarget::Body => LampEnd::Body,
            LampTarget::Head => LampEnd::Head,
        };
        Self {
            on,
            absorbed_w: record.absorbed_w,
            lit: None,
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::service::examples;

    #[test]
    fn every_example_survives_the_way_out_and_back() {
        for example in examples() {
            let text = serde_json::to_string(&Device::from(example.definition.clone())).unwrap();
            let back: Device = serde_json::from_str(&text).unwrap();
            assert_eq!(Definition::from(back), example.definition, "{}", example.name);
        }
    }
}
