//! A point on Earth.

use crate::model::weather::WeatherFault;

/// Decimals of a degree that are kept: 0.0001 degree is 11 m, finer than any source, and one source refuses more.
const DECIMALS: f64 = 1e4;
/// Mean radius of the Earth [km], of the IUGG (remembered).
const EARTH_RADIUS_KM: f64 = 6371.0;

/// A point on Earth, kept to four decimals of a degree.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Coordinates {
    /// Latitude [degree north, -90 to 90].
    pub latitude_deg: f64,
    /// Longitude [degree east, -180 to 180].
    pub longitude_deg: f64,
}

impl Coordinates {
    /// Rounds latitude and longitude [degree] to four decimals.
    ///
    /// # Errors
    /// Either one that is no number or out of range.
    pub fn new(latitude_deg: f64, longitude_deg: f64) -> Result<Self, Vec<WeatherFault>> {
        let faults: Vec<WeatherFault> = [
            out_of_range("latitude", latitude_deg, 90.0),
            out_of_range("longitude", longitude_deg, 180.0),
        ]
        .into_iter()
        .flatten()
        .collect();
        // The sum turns -0.0 into 0.0, so that one place has one name.
        let rounded = |degrees: f64| (degrees * DECIMALS).round() / DECIMALS + 0.0;
        if faults.is_empty() {
            Ok(Self {
                latitude_deg: rounded(latitude_deg),
                longitude_deg: rounded(longitude_deg),
            })
        } else {
            Err(faults)
        }
    }

    /// Distance to another point along the sphere [km], by the haversine formula.
    pub fn distance_km(&self, other: &Self) -> f64 {
        let (from, to) = (self.latitude_deg.to_radians(), other.latitude_deg.to_radians());
        let half = |degrees: f64| (degrees.to_radians() / 2.0).sin().powi(2);
        let chord = half(other.latitude_deg - self.latitude_deg)
            + from.cos() * to.cos() * half(other.longitude_deg - self.longitude_deg);
        2.0 * EARTH_RADIUS_KM * chord.min(1.0).sqrt().asin()
    }
}

fn out_of_range(name: &str, found: f64, most: f64) -> Option<WeatherFault> {
    let fits = (-most..=most).contains(&found);
    (!fits).then(|| {
        let detail = format!("expected {} degrees from {} to {most}, found {found}", name, -most);
        WeatherFault::column(format!("endpoint/{name}"), "coordinate_out_of_range", detail)
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn one_place_has_one_name() {
        let place = Coordinates::new(52.123_449, -0.000_01).unwrap();
        assert_eq!((place.latitude_deg, place.longitude_deg), (52.1234, 0.0));
        assert!(place.longitude_deg.is_sign_positive());
    }

    #[test]
    fn both_coordinates_are_judged_at_once() {
        let faults = Coordinates::new(90.1, f64::NAN).unwrap_err();
        assert_eq!(faults.len(), 2, "{faults:?}");
        assert!(Coordinates::new(-90.0, 180.0).is_ok());
    }

    /// A degree of a meridian is 111.2 km on this sphere; the antipodes are half the circumference, 20 015 km (remembered).
    #[test]
    fn distances_on_the_sphere() {
        let at = |latitude, longitude| Coordinates::new(latitude, longitude).unwrap();
        assert!((at(10.0, 20.0).distance_km(&at(11.0, 20.0)) - 111.2).abs() < 0.1);
        assert!((at(60.0, 0.0).distance_km(&at(60.0, 1.0)) - 55.6).abs() < 0.1);
        assert!((at(0.0, 0.0).distance_km(&at(0.0, 180.0)) - 20_015.0).abs() < 1.0);
        assert!(
            at(0.0, 179.9).distance_km(&at(0.0, -179.9)) < 23.0,
            "across the date line"
        );
    }
}
