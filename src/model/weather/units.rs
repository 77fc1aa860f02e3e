//! Names of what is read and the units it comes in.

/// A weather variable this room reads. Names follow the CF conventions where they have one.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Quantity {
    /// Dry-bulb temperature of the air.
    AirTemperature,
    /// Relative humidity over liquid water, at all temperatures (WMO-No. 8).
    RelativeHumidity,
    /// Dew-point temperature.
    DewPoint,
    /// Wet-bulb temperature over liquid water.
    WetBulb,
    /// Pressure at the station itself.
    StationPressure,
    /// Pressure reduced to mean sea level.
    SeaLevelPressure,
    /// Wind speed.
    WindSpeed,
    /// Short-wave irradiance on a level surface.
    Shortwave,
}

impl Quantity {
    /// The name used in layouts and messages, for example `air_temperature`.
    pub fn name(self) -> &'static str {
        match self {
            Self::AirTemperature => "air_temperature",
            Self::RelativeHumidity => "relative_humidity",
            Self::DewPoint => "dew_point",
            Self::WetBulb => "wet_bulb",
            Self::StationPressure => "station_pressure",
            Self::SeaLevelPressure => "sea_level_pressure",
            Self::WindSpeed => "wind_speed",
            Self::Shortwave => "shortwave",
        }
    }

    /// The units a value of this kind may come in.
    pub fn units(self) -> &'static [Unit] {
        use Unit::*;
        match self {
            Self::AirTemperature | Self::DewPoint | Self::WetBulb => &[Celsius, Kelvin, Fahrenheit],
            Self::RelativeHumidity => &[Percent, Fraction],
            Self::StationPressure | Self::SeaLevelPressure => &[Hectopascal, Kilopascal, Pascal, InchHg, MillimetreHg],
            Self::WindSpeed => &[MetrePerSecond, KilometrePerHour, MilePerHour, Knot],
            Self::Shortwave => &[WattPerSquareMetre],
        }
    }
}

/// A unit a reading may come in.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Unit {
    /// Degree Celsius.
    Celsius,
    /// Kelvin.
    Kelvin,
    /// Degree Fahrenheit.
    Fahrenheit,
    /// Percent.
    Percent,
    /// Fraction of one.
    Fraction,
    /// Hectopascal, the same as millibar.
    Hectopascal,
    /// Kilopascal.
    Kilopascal,
    /// Pascal.
    Pascal,
    /// Conventional inch of mercury.
    InchHg,
    /// Conventional millimetre of mercury.
    MillimetreHg,
    /// Metre per second.
    MetrePerSecond,
    /// Kilometre per hour.
    KilometrePerHour,
    /// Statute mile per hour.
    MilePerHour,
    /// Nautical mile per hour.
    Knot,
    /// Watt per square metre.
    WattPerSquareMetre,
}

/// What the unit is called in messages, then every spelling that is read, lower case and without spaces.
const SPELLINGS: [(Unit, &str, &[&str]); 15] = [
    (
        Unit::Celsius,
        "°C",
        &[
            "°c",
            "c",
            "cel",
            "degc",
            "deg_c",
            "celsius",
            "℃",
            "ºc",
            "gradc",
            "°celsius",
            "degreescelsius",
        ],
    ),
    (Unit::Kelvin, "K", &["k", "kelvin"]),
    (
        Unit::Fahrenheit,
        "°F",
        &[
            "°f",
            "f",
            "degf",
            "deg_f",
            "[degf]",
            "fahrenheit",
            "℉",
            "ºf",
            "°fahrenheit",
            "degreesfahrenheit",
        ],
    ),
    (
        Unit::Percent,
        "%",
        &["%", "percent", "pct", "%rh", "%rf", "%hr", "%r.h.", "prozent"],
    ),
    (Unit::Fraction, "fraction", &["fraction", "1", "0-1", "0..1"]),
    (
        Unit::Hectopascal,
        "hPa",
        &["hpa", "mbar", "mb", "millibar", "hectopascal"],
    ),
    (Unit::Kilopascal, "kPa", &["kpa", "kilopascal"]),
    (Unit::Pascal, "Pa", &["pa", "pascal"]),
    (Unit::InchHg, "inHg", &["inhg", "[in_i'hg]", "in_hg", "in.hg", "\"hg"]),
    (Unit::MillimetreHg, "mmHg", &["mmhg", "mm[hg]", "mm_hg", "torr"]),
    (
        Unit::MetrePerSecond,
        "m/s",
        &["m/s", "mps", "ms-1", "m_s", "m_s-1", "ms^-1", "ms⁻¹", "m·s-1", "m.s-1"],
    ),
    (
        Unit::KilometrePerHour,
        "km/h",
        &["km/h", "kmh", "kph", "km_h", "kmh-1", "km/u", "km/t"],
    ),
    (Unit::MilePerHour, "mph", &["mph", "mi/h", "mp/h", "[mi_i]/h"]),
    (Unit::Knot, "knot", &["kn", "kt", "knot", "knots", "[kn_i]"]),
    (
        Unit::WattPerSquareMetre,
        "W/m2",
        &[
            "w/m2", "w/m²", "w/m^2", "w/m**2", "w_m2", "wm-2", "wm^-2", "w/sqm", "w/qm", "wm⁻²", "watt/m2",
        ],
    ),
];

/// 0 °C in kelvin, by definition of the degree Celsius (SI brochure, 9th edition, 2.3.1).
const ZERO_CELSIUS_K: f64 = 273.15;
/// Conventional inch of mercury [Pa] (NIST SP 811, appendix B.8; remembered, agrees with 25.4 mmHg to 7 figures).
const INCH_HG_PA: f64 = 3386.389;
/// Conventional millimetre of mercury [Pa]: 13 595.1 kg/m3 times standard gravity times 1 mm.
const MILLIMETRE_HG_PA: f64 = 133.322_387_415;
/// Statute mile per hour [m/s]: 1609.344 m in 3600 s, exact.
const MILE_PER_HOUR_M_S: f64 = 0.44704;
/// Knot [m/s]: 1852 m in 3600 s, exact.
const KNOT_M_S: f64 = 1852.0 / 3600.0;

impl Unit {
    /// Reads a unit as users and UCUM write it: `°C`, `Cel`, `degF`, `%`, `1`, `hPa`, `mbar`, `m/s`, `mph` and so on;
    /// case and spaces do not matter. `None` for anything else.
    pub fn parse(text: &str) -> Option<Self> {
        let plain: String = text
            .chars()
            .filter(|c| !c.is_whitespace())
            .collect::<String>()
            .to_lowercase();
        let found = SPELLINGS
            .iter()
            .find(|(_, _, spellings)| spellings.contains(&plain.as_str()));
        found.map(|(unit, _, _)| *unit)
    }

    /// How the unit is written in messages.
    pub fn symbol(self) -> &'static str {
        let found = SPELLINGS.iter().find(|(unit, _, _)| *unit == self);
        found.map_or("", |(_, symbol, _)| symbol)
    }

    /// The line `si = value * slope + intercept`: K, fraction, Pa, m/s or W/m2.
    pub fn si_line(self) -> (f64, f64) {
        match self {
            Self::Celsius => (1.0, ZERO_CELSIUS_K),
            Self::Fahrenheit => (5.0 / 9.0, ZERO_CELSIUS_K - 32.0 * 5.0 / 9.0),
            Self::Percent => (0.01, 0.0),
            Self::Hectopascal => (100.0, 0.0),
            Self::Kilopascal => (1000.0, 0.0),
            Self::InchHg => (INCH_HG_PA, 0.0),
            Self::MillimetreHg => (MILLIMETRE_HG_PA, 0.0),
            Self::KilometrePerHour => (1.0 / 3.6, 0.0),
            Self::MilePerHour => (MILE_PER_HOUR_M_S, 0.0),
            Self::Knot => (KNOT_M_S, 0.0),
            Self::Kelvin | Self::Fraction | Self::Pascal | Self::MetrePerSecond | Self::WattPerSquareMetre => {
                (1.0, 0.0)
            }
        }
    }

    /// The value in SI: K, fraction, Pa, m/s or W/m2.
    pub fn to_si(self, value: f64) -> f64 {
        let (slope, intercept) = self.si_line();
        value * slope + intercept
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_spelling_is_read_and_every_symbol_reads_back() {
        for (unit, symbol, spellings) in SPELLINGS {
            assert_eq!(Unit::parse(symbol), Some(unit), "{symbol}");
            assert_eq!(unit.symbol(), symbol);
            for spelling in spellings {
                assert_eq!(Unit::parse(spelling), Some(unit), "{spelling}");
            }
        }
        assert_eq!(Unit::parse("furlong"), None);
        assert_eq!(Unit::parse(""), None);
    }

    /// Fixed points of the scales: ice and steam point in °F by definition; 29.92 inHg and 760 mmHg are one standard
    /// atmosphere, 101 325 Pa (common handbook values, remembered).
    #[test]
    fn units_meet_their_fixed_points() {
        let near = |unit: Unit, value: f64, si: f64, tolerance: f64| {
            assert!((unit.to_si(value) - si).abs() <= tolerance, "{unit:?} {value}");
        };
        near(Unit::Celsius, 0.0, 273.15, 0.0);
        near(Unit::Fahrenheit, 32.0, 273.15, 1e-9);
        near(Unit::Fahrenheit, 212.0, 373.15, 1e-9);
        near(Unit::Fahrenheit, -40.0, 233.15, 1e-9);
        near(Unit::Percent, 50.0, 0.5, 0.0);
        near(Unit::Hectopascal, 1013.25, 101_325.0, 1e-9);
        near(Unit::Kilopascal, 101.325, 101_325.0, 1e-9);
        near(Unit::MillimetreHg, 760.0, 101_325.0, 0.02);
        near(Unit::InchHg, 29.92, 101_325.0, 5.0);
        near(Unit::InchHg, 1.0, 25.4 * MILLIMETRE_HG_PA, 0.001);
        near(Unit::KilometrePerHour, 36.0, 10.0, 1e-12);
        near(Unit::MilePerHour, 10.0, 4.4704, 1e-12);
        near(Unit::Knot, 36.0, 18.52, 1e-12);
    }

    #[test]
    fn every_quantity_names_its_units() {
        assert!(Quantity::DewPoint.units().contains(&Unit::Fahrenheit));
        assert!(!Quantity::RelativeHumidity.units().contains(&Unit::Celsius));
        assert_eq!(Quantity::StationPressure.name(), "station_pressure");
    }
}
