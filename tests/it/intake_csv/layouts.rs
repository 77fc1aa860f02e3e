//! Files as people have them, each in a form of its own, read with no options at all. The values of the first and the last
//! reading were written by hand from the text beside them. All stations are invented.

use dipcast::intake::csv::{Hints, Limits, detect, read};
use dipcast::model::weather::RawReadings;
use dipcast::model::weather::zone::instant_text;

use crate::intake_csv::gzip;

/// What a reading should be: time, air temperature [°C], and relative humidity [%], dew point or wet bulb [°C].
struct Reading(&'static str, f64, Moist);

enum Moist {
    Rh(f64),
    Dew(f64),
    Wet(f64),
}
use Moist::{Dew, Rh, Wet};

fn check(name: &str, bytes: &[u8], count: usize, first: Reading, last: Reading) -> RawReadings {
    let raw = read(bytes, None, &Limits::default()).unwrap_or_else(|faults| panic!("{name}: {faults:#?}"));
    assert_eq!(raw.len(), count, "{name}");
    for (at, Reading(time, temp_c, moist)) in [(0, first), (count - 1, last)] {
        assert_eq!(instant_text(raw.time_unix_s[at]), time, "{name}");
        close(name, raw.air_temp_k[at] - 273.15, temp_c);
        let value = |column: &Option<Vec<f64>>| column.as_ref().unwrap_or_else(|| panic!("{name}: {raw:?}"))[at];
        match moist {
            Rh(percent) => close(name, 100.0 * value(&raw.relative_humidity), percent),
            Dew(celsius) => close(name, value(&raw.dew_point_k) - 273.15, celsius),
            Wet(celsius) => close(name, value(&raw.wet_bulb_k) - 273.15, celsius),
        }
    }
    the_layout_sent_back_reads_the_same(name, bytes, &raw);
    raw
}

fn close(name: &str, found: f64, expected: f64) {
    assert!(
        (found - expected).abs() < 1e-6,
        "{name}: found {found}, expected {expected}"
    );
}

/// As JSON, as it would be sent, unchanged.
fn the_layout_sent_back_reads_the_same(name: &str, bytes: &[u8], by_looking: &RawReadings) {
    let detection = detect(bytes, &Hints::default(), &Limits::default()).unwrap();
    let text = serde_json::to_string(detection.settled().unwrap()).unwrap();
    let layout = serde_json::from_str(&text).unwrap();
    let sent_back =
        read(bytes, Some(&layout), &Limits::default()).unwrap_or_else(|faults| panic!("{name}: {text}: {faults:#?}"));
    let plain = |raw: &RawReadings| RawReadings {
        assumptions: Vec::new(),
        ..raw.clone()
    };
    // Missing values are unequal to themselves; their text is not.
    assert_eq!(
        format!("{:?}", plain(by_looking)),
        format!("{:?}", plain(&sent_back)),
        "{name}: {text}"
    );
}

fn said(raw: &RawReadings, words: &str) {
    let all: Vec<String> = raw
        .assumptions
        .iter()
        .map(|said| format!("{}: {}", said.what, said.value))
        .collect();
    assert!(
        all.iter().any(|text| text.contains(words)),
        "{words:?} is not in {all:#?}"
    );
}

#[test]
fn semicolons_and_decimal_commas_in_german() {
    let text = "Zeit (UTC+1);Lufttemperatur (°C);rel. Luftfeuchte (%);Luftdruck (hPa)\n\
                30.01.2026 23:00;-1,5;80,5;1.013,2\n31.01.2026 00:00;-2,25;81;1.012,9\n";
    let first = Reading("2026-01-30T22:00:00Z", -1.5, Rh(80.5));
    let raw = check(
        "German",
        text.as_bytes(),
        2,
        first,
        Reading("2026-01-30T23:00:00Z", -2.25, Rh(81.0)),
    );
    close("thousands", raw.pressure_pa.as_ref().unwrap()[0], 101_320.0);
    said(&raw, "zone +01:00");
}

#[test]
fn tabs_and_kelvin() {
    let text = "time (UTC)\tTemperature [K]\tRH [%]\n2026-01-01 00:00\t271.65\t50\n2026-01-01 01:00\t272.15\t49.5\n";
    check(
        "tab",
        text.as_bytes(),
        2,
        Reading("2026-01-01T00:00:00Z", -1.5, Rh(50.0)),
        Reading("2026-01-01T01:00:00Z", -1.0, Rh(49.5)),
    );
}

#[test]
fn a_byte_order_mark_and_humidity_as_a_fraction() {
    let text = "\u{feff}timestamp,temp_c,humidity\n2026-01-01T00:00:00Z,20.5,0.45\n2026-01-01T01:00:00+01:00,21,0.5\n";
    let first = Reading("2026-01-01T00:00:00Z", 20.5, Rh(45.0));
    let raw = check(
        "BOM",
        text.as_bytes(),
        2,
        first,
        Reading("2026-01-01T00:00:00Z", 21.0, Rh(50.0)),
    );
    said(&raw, "fraction for \"humidity\"");
}

#[test]
fn sixteen_bits_with_and_without_a_mark_and_gzipped() {
    let text = "Tid (UTC+01:00);Lufttemperatur [°C];Relativ luftfuktighet [%]\n2026-01-01 00:00;-5,5;90,0\n2026-01-01 00:10;-5,6;91,5\n";
    let little: Vec<u8> = text.encode_utf16().flat_map(u16::to_le_bytes).collect();
    let big: Vec<u8> = text.encode_utf16().flat_map(u16::to_be_bytes).collect();
    let marked = [&[0xff, 0xfe][..], &little].concat();
    for (name, bytes) in [
        ("little", little),
        ("big", big),
        ("zipped", gzip(&marked)),
        ("marked", marked),
    ] {
        let first = Reading("2025-12-31T23:00:00Z", -5.5, Rh(90.0));
        check(name, &bytes, 2, first, Reading("2025-12-31T23:10:00Z", -5.6, Rh(91.5)));
    }
}

#[test]
fn date_and_time_apart_month_first_decided_by_a_row() {
    let text = "Date,Time (UTC),Air temp (°F),RH (%)\n01/12/2026,23:00,50,60\n01/13/2026,00:00,41,61\n";
    let raw = check(
        "split",
        text.as_bytes(),
        2,
        Reading("2026-01-12T23:00:00Z", 10.0, Rh(60.0)),
        Reading("2026-01-13T00:00:00Z", 5.0, Rh(61.0)),
    );
    said(&raw, "decided by row 3");
}

#[test]
fn day_first_decided_by_the_run_of_the_rows() {
    let text = "Fecha y hora (UTC),Temperatura del aire (ºC),Humedad relativa (%)\n03/04/2026 22:00,10,60\n03/04/2026 23:00,11,61\n04/04/2026 00:00,12,62\n";
    let raw = check(
        "Spanish",
        text.as_bytes(),
        3,
        Reading("2026-04-03T22:00:00Z", 10.0, Rh(60.0)),
        Reading("2026-04-04T00:00:00Z", 12.0, Rh(62.0)),
    );
    said(&raw, "only so do the rows follow one another (row 4)");
}

#[test]
fn year_month_day_and_hour_in_columns() {
    let text = "year,month,day,hour (UTC),air temperature (°C),dew point (°C),wind (km/h)\n2026,1,31,23,10.5,3,36\n2026,2,1,0,10,2.5,18\n";
    let raw = check(
        "columns",
        text.as_bytes(),
        2,
        Reading("2026-01-31T23:00:00Z", 10.5, Dew(3.0)),
        Reading("2026-02-01T00:00:00Z", 10.0, Dew(2.5)),
    );
    close("wind", raw.wind_speed_m_s.unwrap()[0], 10.0);
}

#[test]
fn a_typical_year_with_hours_to_24_and_its_zone_in_the_station_line() {
    let text = "700001,\"TOLMARROW SKERRY\",AK,-9.0,55.3,-140.5,7\nDate (MM/DD/YYYY),Time (HH:MM),Dry-bulb (C),RHum (%),Pressure (mbar)\n\
                01/31/1997,23:00,4.0,93,1012\n01/31/1997,24:00,4.5,92,1012\n02/01/1991,01:00,5.0,91,1011\n";
    let first = Reading("2021-02-01T08:00:00Z", 4.0, Rh(93.0));
    let raw = check(
        "typical year",
        text.as_bytes(),
        3,
        first,
        Reading("2021-02-01T10:00:00Z", 5.0, Rh(91.0)),
    );
    assert_eq!(raw.label.name(), "mean_of_preceding_hour");
    said(&raw, "hours counted from 1 to 24 end at their stamp");
    said(&raw, "2021");
}

#[test]
fn a_twelve_hour_clock_and_an_offset_in_the_header() {
    let text = "\"#\",\"Date Time, GMT-05:00\",\"Temp, °C (SN 7)\",\"RH, % (SN 7)\"\n1,01/13/26 11:50:00 PM,21.5,40.25\n2,01/14/26 12:00:00 AM,21.25,40.5\n";
    check(
        "12 hours",
        text.as_bytes(),
        2,
        Reading("2026-01-14T04:50:00Z", 21.5, Rh(40.25)),
        Reading("2026-01-14T05:00:00Z", 21.25, Rh(40.5)),
    );
}

#[test]
fn epochs_in_seconds_and_milliseconds() {
    let seconds = "epoch,temperature_c,rh_pct\n1767225600,20,50\n1767229200,21,51\n";
    let milliseconds = seconds.replace("00,2", "00000,2");
    for text in [seconds, &milliseconds] {
        check(
            "epoch",
            text.as_bytes(),
            2,
            Reading("2026-01-01T00:00:00Z", 20.0, Rh(50.0)),
            Reading("2026-01-01T01:00:00Z", 21.0, Rh(51.0)),
        );
    }
}

#[test]
fn fahrenheit_inches_of_mercury_and_a_named_zone() {
    let text = "Time (America/New_York),TemperatureF,Humidity,Pressure,WindSpeedMPH\n2026-07-01 12:00,68.0,40,29.92,10\n2026-07-01 12:05,69.8,41,29.93,0\n";
    let raw = check(
        "US",
        text.as_bytes(),
        2,
        Reading("2026-07-01T16:00:00Z", 20.0, Rh(40.0)),
        Reading("2026-07-01T16:05:00Z", 21.0, Rh(41.0)),
    );
    // 29.92 conventional inches of mercury.
    assert!((raw.pressure_pa.as_ref().unwrap()[0] - 29.92 * 3386.389).abs() < 1e-6);
    said(&raw, "inHg for \"Pressure\": the only unit");
}

#[test]
fn a_ten_minute_logger_with_comments_and_marks() {
    let text = "# logger 7, all times UTC\n# every 10 minutes\nDate;Time;T [°C];RH [%];p [hPa]\n2026-01-31;23:50;20.1;45;1001.5\n# battery changed\n2026-02-01;00:00;-999;-999;999.9\n2026-02-01;00:10;20.3;46;1001.4\n";
    let raw = check(
        "10 minutes",
        text.as_bytes(),
        3,
        Reading("2026-01-31T23:50:00Z", 20.1, Rh(45.0)),
        Reading("2026-02-01T00:10:00Z", 20.3, Rh(46.0)),
    );
    assert!(raw.air_temp_k[1].is_nan() && raw.relative_humidity.as_ref().unwrap()[1].is_nan());
    close(
        "999.9 hPa is a pressure",
        raw.pressure_pa.as_ref().unwrap()[1],
        99_990.0,
    );
    said(&raw, "-999 in \"T [°C]\", 1 times");
}

#[test]
fn a_log_of_changes_with_one_value_a_row() {
    let text = "time,sensor,value,unit\n2026-01-01T00:00:00Z,hall temperature,20.0,°C\n2026-01-01T00:00:00Z,hall humidity,40,%\n2026-01-01T00:05:00Z,door,1,\n\
                2026-01-01T00:25:00Z,hall temperature,21.5,°C\n2026-01-01T02:00:00Z,hall humidity,45,%\n";
    let raw = check(
        "changes",
        text.as_bytes(),
        13,
        Reading("2026-01-01T00:00:00Z", 20.0, Rh(40.0)),
        Reading("2026-01-01T02:00:00Z", 21.5, Rh(45.0)),
    );
    close("holds until it changes", raw.air_temp_k[2], 293.15);
    close("and then the next", raw.air_temp_k[3], 294.65);
    said(&raw, "each holds until the next of its name, 24 hours at most");
}

#[test]
fn a_preamble_of_twelve_lines() {
    let preamble: String = (1..=10).map(|line| format!("Remark {line},nothing of use\n")).collect();
    let text = format!(
        "Station export\nTime zone,UTC-03:30\n{preamble}timestamp,air_temp,relative_humidity\n,degC,%\n2026-01-01 00:30,-3.5,77\n2026-01-01 01:30,-3.25,78\n"
    );
    check(
        "preamble",
        text.as_bytes(),
        2,
        Reading("2026-01-01T04:00:00Z", -3.5, Rh(77.0)),
        Reading("2026-01-01T05:00:00Z", -3.25, Rh(78.0)),
    );
}

/// Lines 1 and 2 and the last line of the file: 20.0 °C, 15.0 °C, 73 %, 1017 hPa, 6.7 m/s in the first hour.
#[test]
fn a_typical_year_of_fixed_width() {
    let bytes = std::fs::read(crate::data("miami_two_days.tm2")).unwrap();
    let raw = check(
        "tmy2",
        &bytes,
        48,
        Reading("2021-01-01T06:00:00Z", 20.0, Dew(15.0)),
        Reading("2021-01-03T05:00:00Z", 8.9, Dew(5.0)),
    );
    close("pressure", raw.pressure_pa.as_ref().unwrap()[0], 101_700.0);
    close("wind", raw.wind_speed_m_s.as_ref().unwrap()[0], 6.7);
    said(&raw, "tmy2");
}

#[test]
fn serial_days_of_a_spreadsheet() {
    // 46023 is 1 January 2026, 46023.5 its noon.
    let text = "Datum (UTC);Temperatur °C;Feuchte %\n46023;1,5;80\n46023,5;2,5;70\n";
    check(
        "serial",
        text.as_bytes(),
        2,
        Reading("2026-01-01T00:00:00Z", 1.5, Rh(80.0)),
        Reading("2026-01-01T12:00:00Z", 2.5, Rh(70.0)),
    );
}

#[test]
fn french_in_windows_1252_with_a_wet_bulb() {
    let text = "Date;Heure UTC;Température de l'air (°C);Bulbe humide (°C)\n13/01/2026;00h00;5,0;3,5\n13/01/2026;01h00;4,0;3,0\n";
    let (bytes, _, _) = encoding_rs::WINDOWS_1252.encode(text);
    let raw = check(
        "French",
        &bytes,
        2,
        Reading("2026-01-13T00:00:00Z", 5.0, Wet(3.5)),
        Reading("2026-01-13T01:00:00Z", 4.0, Wet(3.0)),
    );
    said(&raw, "windows-1252");
}

#[test]
fn dutch_and_italian() {
    let dutch = "Datum;Tijd (UTC);Luchttemperatuur (°C);Relatieve luchtvochtigheid (%);Dauwpunt (°C)\n20260131;23;5,0;80;1,8\n20260201;0;4,5;82;1,7\n";
    check(
        "Dutch",
        dutch.as_bytes(),
        2,
        Reading("2026-01-31T23:00:00Z", 5.0, Rh(80.0)),
        Reading("2026-02-01T00:00:00Z", 4.5, Dew(1.7)),
    );
    let italian = "Data e ora [UTC];Temperatura aria [°C];Umidità relativa [%]\n31/01/2026 23:00;5,0;80\n01/02/2026 00:00;4,5;82\n";
    check(
        "Italian",
        italian.as_bytes(),
        2,
        Reading("2026-01-31T23:00:00Z", 5.0, Rh(80.0)),
        Reading("2026-02-01T00:00:00Z", 4.5, Rh(82.0)),
    );
}

#[test]
fn a_row_of_units_and_a_column_of_zones() {
    let text = "date,time,zone,temperature,humidity,pressure\n-,-,-,°C,%,kPa\n2026-01-01,00:00,GMT+1,20.5,50,101.3\n2026-01-01,01:00,GMT+1,20.0,51,101.2\n";
    let raw = check(
        "unit row",
        text.as_bytes(),
        2,
        Reading("2025-12-31T23:00:00Z", 20.5, Rh(50.0)),
        Reading("2026-01-01T00:00:00Z", 20.0, Rh(51.0)),
    );
    close("kPa", raw.pressure_pa.unwrap()[0], 101_300.0);
}

#[test]
fn quoted_numbers_with_thousands() {
    let text = "\"time\",\"temperature (°C)\",\"humidity (%)\",\"pressure (hPa)\"\n\"2026-01-01T00:00Z\",\"20.5\",\"50\",\"1,013.2\"\n\"2026-01-01T01:00Z\",\"20.0\",\"51\",\"999.5\"\n";
    let raw = check(
        "quoted",
        text.as_bytes(),
        2,
        Reading("2026-01-01T00:00:00Z", 20.5, Rh(50.0)),
        Reading("2026-01-01T01:00:00Z", 20.0, Rh(51.0)),
    );
    close("pressure", raw.pressure_pa.unwrap()[0], 101_320.0);
}

#[test]
fn day_of_the_year_with_hours_and_minutes_in_one_number() {
    let text = "Year,DOY,MST,Air Temperature [deg C],Rel Humidity [%],Station Pressure [mBar]\n2018,291,2359,16.1,48.73,927.9\n2018,292,0,16.06,48.83,927.8\n2018,292,1,16.03,49.08,-7999\n";
    let raw = check(
        "day of year",
        text.as_bytes(),
        3,
        Reading("2018-10-19T06:59:00Z", 16.1, Rh(48.73)),
        Reading("2018-10-19T07:01:00Z", 16.03, Rh(49.08)),
    );
    assert!(raw.pressure_pa.unwrap()[2].is_nan());
}

#[test]
fn units_in_a_line_under_their_names() {
    let text = "Source,Time Zone,Temperature Units,Pressure Units,Wind Speed\nskerry,-8,c,mbar,m/s\nYear,Month,Day,Hour,Minute,Dew Point,Temperature,Pressure,Wind Speed\n2008,1,1,0,30,-11,-1,950,3.4\n2008,1,1,1,30,-11,-2,951,3.5\n";
    check(
        "lines above",
        text.as_bytes(),
        2,
        Reading("2008-01-01T08:30:00Z", -1.0, Dew(-11.0)),
        Reading("2008-01-01T09:30:00Z", -2.0, Dew(-11.0)),
    );
}

#[test]
fn the_same_reading_in_two_units_and_several_sensors_with_their_humidity() {
    let text = "time,Temperature (°C),Temperature (°F),Humidity (%)\n2026-01-01T00:00Z,20,68,50\n2026-01-01T01:00Z,21,69.8,51\n";
    check(
        "two units",
        text.as_bytes(),
        2,
        Reading("2026-01-01T00:00:00Z", 20.0, Rh(50.0)),
        Reading("2026-01-01T01:00:00Z", 21.0, Rh(51.0)),
    );
}
