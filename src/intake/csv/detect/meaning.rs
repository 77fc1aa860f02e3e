//! What a column's name says: which variable, in which unit, and what is left of the name.

use unicode_normalization::UnicodeNormalization;
use unicode_normalization::char::is_combining_mark;

use super::table::Name;
use super::words::{BARE, NEVER, NOT_FOR, TIMES, TimeWord, VARIABLES, listed};
use crate::model::weather::{Quantity, Unit};

/// What a name says.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Meaning {
    pub quantity: Quantity,
    pub unit: Option<Unit>,
    /// A unit that is written beside it but not known here.
    pub strange_unit: Option<String>,
    /// True: only letters that count beside a unit alone.
    pub bare: bool,
    /// Words that are neither the variable nor its unit: which of several sensors it is.
    pub tag: Vec<String>,
}

/// The variable a name speaks of.
pub(super) fn meaning(name: &Name) -> Option<Meaning> {
    let words = words(&format!("{} {}", name.first, name.more));
    let has = |list: &'static str| listed(list).any(|other| words.iter().any(|word| word == other));
    if has(NEVER) {
        return None;
    }
    let (quantity, stems, bare) = named(&words).or_else(|| bare_letters(&words))?;
    if NOT_FOR
        .iter()
        .any(|(variable, never)| *variable == quantity && has(never))
    {
        return None;
    }
    let unit = unit_of(name, quantity);
    let tag = words
        .into_iter()
        .filter(|word| !stems.iter().any(|stem| fits(word, stem)) && !is_unit_word(word))
        .collect();
    Some(Meaning {
        quantity,
        unit,
        strange_unit: if unit.is_none() { strange_unit(name) } else { None },
        bare,
        tag,
    })
}

fn named(words: &[String]) -> Option<(Quantity, Vec<&'static str>, bool)> {
    for (quantity, phrases) in VARIABLES {
        for phrase in listed(phrases) {
            let stems: Vec<&'static str> = phrase.split(' ').collect();
            if stems.iter().all(|stem| words.iter().any(|word| fits(word, stem))) {
                return Some((quantity, stems, false));
            }
        }
    }
    None
}

fn bare_letters(words: &[String]) -> Option<(Quantity, Vec<&'static str>, bool)> {
    let first = words.first()?;
    let found = BARE
        .iter()
        .find_map(|(quantity, letters)| listed(letters).find(|l| l == first).map(|letter| (*quantity, letter)));
    found.map(|(quantity, letter)| (quantity, vec![letter], true))
}

fn fits(word: &str, stem: &str) -> bool {
    word == stem || stem.len() >= 5 && word.contains(stem)
}

/// What part of a time a name speaks of, units and zones in it aside.
pub(super) fn time_words(name: &Name) -> Vec<TimeWord> {
    let words: Vec<String> = words(&name.first)
        .into_iter()
        .filter(|word| !is_zone_word(word) && word.parse::<u32>().is_err())
        .collect();
    let whole = words.join(" ");
    let bare: Vec<&str> = words
        .iter()
        .map(String::as_str)
        .filter(|word| !is_format_word(word))
        .collect();
    let bare = bare.join(" ");
    let named = |list: &'static str| listed(list).any(|name| name == whole || name == bare);
    let mut found: Vec<TimeWord> = TIMES
        .iter()
        .filter(|(_, list)| named(list))
        .map(|(word, _)| *word)
        .collect();
    if found.is_empty()
        && words
            .first()
            .is_some_and(|first| ["date", "time", "timestamp", "datum", "zeit", "datetime"].contains(&first.as_str()))
    {
        found.push(TimeWord::Stamp);
    }
    found
}

/// Letters that show how a date is written, as in `Date (MM/DD/YYYY)`.
fn is_format_word(word: &str) -> bool {
    word.len() >= 2
        && word
            .chars()
            .all(|c| matches!(c, 'd' | 'm' | 'y' | 'h' | 's' | 'j' | 't' | 'z'))
}

fn is_zone_word(word: &str) -> bool {
    matches!(
        word,
        "utc" | "gmt" | "lst" | "mez" | "est" | "mst" | "pst" | "cst" | "local" | "lokal"
    )
}

/// A name in plain lower-case words: compatibility forms, accents and case set aside, `DryBulb` and `T1` cut in two.
pub(super) fn words(name: &str) -> Vec<String> {
    let mut plain = String::new();
    let mut before = ' ';
    for letter in name.nfkd().filter(|c| !is_combining_mark(*c)) {
        let new_word = before.is_lowercase() && letter.is_uppercase()
            || before.is_alphabetic() && letter.is_ascii_digit()
            || before.is_ascii_digit() && letter.is_alphabetic();
        if new_word {
            plain.push(' ');
        }
        plain.push(letter);
        before = letter;
    }
    let spelled = plain
        .to_lowercase()
        .replace('ß', "ss")
        .replace('ø', "o")
        .replace('æ', "ae")
        .replace('œ', "oe");
    spelled
        .split(|c: char| !c.is_alphanumeric())
        .filter(|word| !word.is_empty())
        .map(str::to_string)
        .collect()
}

/// Whether a whole cell is a unit, brackets aside.
pub(super) fn is_unit(cell: &str) -> bool {
    Unit::parse(without_brackets(cell)).is_some() || matches!(cell, "°" | "deg" | "Grad" | "UTC" | "W" | "mm" | "h")
}

fn without_brackets(cell: &str) -> &str {
    cell.trim()
        .trim_matches(|c| matches!(c, '(' | ')' | '[' | ']' | '{' | '}' | '"'))
        .trim()
}

/// The unit beside the name: in the row of units, in brackets, or at its end.
fn unit_of(name: &Name, quantity: Quantity) -> Option<Unit> {
    let known = |text: &str| Unit::parse(text).filter(|unit| quantity.units().contains(unit));
    known(without_brackets(&name.unit))
        .or_else(|| {
            bracketed(&name.first)
                .chain(bracketed(&name.more))
                .find_map(|text| windows(text, 0, quantity))
        })
        .or_else(|| windows(&name.more, 0, quantity))
        .or_else(|| windows(&name.first, 1, quantity))
}

/// What stands in brackets.
fn bracketed(text: &str) -> impl Iterator<Item = &str> {
    text.split(['(', '[', '{'])
        .skip(1)
        .map(|rest| rest.split([')', ']', '}']).next().unwrap_or(rest))
}

/// A unit among the words of a text, from a word on; up to three words make one (`w_m2`, `mm hg`).
fn windows(text: &str, from: usize, quantity: Quantity) -> Option<Unit> {
    let spaced = camel_spaced(text);
    let words: Vec<&str> = spaced
        .split(|c: char| c.is_whitespace() || matches!(c, '_' | ',' | ';' | ':' | '(' | ')' | '[' | ']' | '{' | '}'))
        .filter(|word| !word.is_empty())
        .collect();
    for length in [3, 2, 1] {
        for start in (from..words.len()).rev().filter(|start| start + length <= words.len()) {
            let joined = words[start..start + length].join("_");
            let letter = joined.chars().count() == 1 && joined.chars().all(char::is_alphabetic);
            let single_letter = letter && start + length != words.len() || joined.bytes().all(|b| b.is_ascii_digit());
            let unit = Unit::parse(&joined).or_else(|| Unit::parse(&joined.replace('_', "")));
            if let Some(unit) = unit.filter(|unit| !single_letter && quantity.units().contains(unit)) {
                return Some(unit);
            }
        }
    }
    None
}

/// `TemperatureF` as two words; units such as `inHg` stay whole, since they follow a sign.
fn camel_spaced(text: &str) -> String {
    match text.char_indices().last() {
        Some((at, last)) if matches!(last, 'C' | 'F' | 'K') && text[..at].ends_with(|c: char| c.is_lowercase()) => {
            format!("{} {last}", &text[..at])
        }
        _ => text.to_string(),
    }
}

/// Something in brackets or in the row of units that looks like a unit and is none we know.
fn strange_unit(name: &Name) -> Option<String> {
    let mut texts = std::iter::once(name.unit.as_str())
        .chain(bracketed(&name.first))
        .map(str::trim);
    texts
        .find(|text| !text.is_empty() && text.chars().count() <= 12 && text.contains(|c: char| !c.is_ascii_digit()))
        .map(str::to_string)
}

fn is_unit_word(word: &str) -> bool {
    let numbered = word.bytes().all(|b| b.is_ascii_digit());
    !numbered && Unit::parse(word).is_some()
        || matches!(
            word,
            "w" | "m" | "s" | "m2" | "deg" | "in" | "hg" | "mm" | "h" | "o" | "grad"
        )
}

#[cfg(test)]
mod tests {
    use super::*;

    fn of(name: &str) -> Option<(Quantity, Option<Unit>)> {
        let name = Name {
            first: name.into(),
            ..Name::default()
        };
        meaning(&name).map(|m| (m.quantity, m.unit))
    }

    #[test]
    fn names_in_seven_languages_are_understood() {
        use Quantity::*;
        use Unit::*;
        for (name, quantity, unit) in [
            ("Air Temperature [deg C]", AirTemperature, Some(Celsius)),
            ("Lufttemperatur (°C)", AirTemperature, Some(Celsius)),
            ("Température de l'air en °C", AirTemperature, Some(Celsius)),
            ("Temperatura del aire (ºC)", AirTemperature, Some(Celsius)),
            ("Temperatura aria [°C]", AirTemperature, Some(Celsius)),
            ("Luchttemperatuur (°C)", AirTemperature, Some(Celsius)),
            ("Temp, °C (LGR S/N: 10, SEN S/N: 4)", AirTemperature, Some(Celsius)),
            ("TemperatureF", AirTemperature, Some(Fahrenheit)),
            ("temp_f", AirTemperature, Some(Fahrenheit)),
            ("T [°C]", AirTemperature, Some(Celsius)),
            ("rel. Luftfeuchte [%]", RelativeHumidity, Some(Percent)),
            ("Humidité relative (%)", RelativeHumidity, Some(Percent)),
            ("Humedad relativa %", RelativeHumidity, Some(Percent)),
            ("Relativ luftfuktighet (%)", RelativeHumidity, Some(Percent)),
            ("Relatieve luchtvochtigheid (%)", RelativeHumidity, Some(Percent)),
            ("Umidità relativa (%)", RelativeHumidity, Some(Percent)),
            ("RH (%)", RelativeHumidity, Some(Percent)),
            ("Taupunkt °C", DewPoint, Some(Celsius)),
            ("Point de rosée (°C)", DewPoint, Some(Celsius)),
            ("Feuchtkugeltemperatur [°C]", WetBulb, Some(Celsius)),
            ("Wet-bulb (F)", WetBulb, Some(Fahrenheit)),
            ("Luftdruck auf NN (hPa)", SeaLevelPressure, Some(Hectopascal)),
            ("Press_mm_hg", StationPressure, Some(MillimetreHg)),
            ("Pressione (hPa)", StationPressure, Some(Hectopascal)),
            ("Baro inHg", StationPressure, Some(InchHg)),
            ("Vitesse du vent (km/h)", WindSpeed, Some(KilometrePerHour)),
            ("Vindhastighet [m/s]", WindSpeed, Some(MetrePerSecond)),
            ("wind_speed_m_s", WindSpeed, Some(MetrePerSecond)),
            ("shortwave_w_m2", Shortwave, Some(WattPerSquareMetre)),
            ("GHI (W/m^2)", Shortwave, Some(WattPerSquareMetre)),
            ("HourlyDryBulbTemperature", AirTemperature, None),
            ("dewp", DewPoint, None),
        ] {
            assert_eq!(of(name), Some((quantity, unit)), "{name}");
        }
    }

    #[test]
    fn what_only_looks_like_a_variable_is_left_alone() {
        for name in [
            "Soil temperature (°C)",
            "Temp max (°C)",
            "Dry-bulb source",
            "Wind gust (m/s)",
            "Windrichtung (°)",
            "Direct Normal [W/m^2]",
            "Temp CHP1 [deg C]",
            "Battery [V]",
            "station",
            "Event",
            "Feels like (°C)",
        ] {
            assert_eq!(of(name), None, "{name}");
        }
    }

    #[test]
    fn bare_letters_are_marked_and_sensors_keep_their_tag() {
        let of = |first: &str| {
            meaning(&Name {
                first: first.into(),
                ..Name::default()
            })
            .unwrap()
        };
        assert!(of("T1").bare && of("RH_1").bare && !of("temp").bare);
        assert_eq!(
            (of("T1").tag, of("Temp outdoor (°C)").tag),
            (vec!["1".to_string()], vec!["outdoor".to_string()])
        );
        assert_eq!(of("Strahlung [J/cm2]").strange_unit.as_deref(), Some("J/cm2"));
    }
}
