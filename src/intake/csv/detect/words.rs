//! Words by which columns are called, in English, German, French, Spanish, Norwegian, Dutch and Italian: common practice,
//! no source. A stem of five letters or more is also found inside a word (`lufttemperatur`).

use crate::model::weather::Quantity;
use Quantity::{
    AirTemperature, DewPoint, RelativeHumidity, SeaLevelPressure, Shortwave, StationPressure, WetBulb, WindSpeed,
};

/// The single words or phrases of a list.
pub(super) fn listed(list: &'static str) -> impl Iterator<Item = &'static str> {
    list.split(", ")
}

/// Phrases whose stems must all be there. The more telling come first.
pub(super) const VARIABLES: [(Quantity, &str); 8] = [
    (
        WetBulb,
        "wet bulb, wetbulb, feuchtkugel, feuchttemperatur, thermometre mouille, bulbe humide, bulbo humedo, \
         bulbo umido, natte bol, nattebol, vatkule, vattemperatur, twb",
    ),
    (
        DewPoint,
        "dew point, dewpoint, dew, dewp, dewpt, tdew, dwpt, taupunkt, point rosee, rosee, punto rocio, rocio, \
         doggpunkt, duggpunkt, dauwpunt, punto rugiada, rugiada",
    ),
    (
        SeaLevelPressure,
        "sea level pressure, pressure sea level, mslp, slp, pressure msl, press msl, luftdruck nn, luftdruck \
         nhn, luftdruck meeres, meeresniveau, pression niveau mer, pression mer, presion nivel mar, presion \
         mar, lufttrykk havniva, havniva, luchtdruk zeeniveau, zeeniveau, pressione livello mare, pressione \
         mare, pmer",
    ),
    (
        StationPressure,
        "station pressure, stationsdruck, luftdruck, pressure, press, pres, baro, barometer, barometric, \
         druck, pression, presion, lufttrykk, trykk, luchtdruk, druk, pressione, qfe, mbar",
    ),
    (
        RelativeHumidity,
        "relative humidity, relativ feucht, rel hum, rel feucht, humidity, humid, hum, rhum, relhum, \
         luftfeuchte, luftfeuchtigkeit, feuchte, feuchtigkeit, humidite, hygrometrie, humedad, luftfuktighet, \
         fuktighet, fukt, luchtvochtigheid, vochtigheid, vocht, umidita",
    ),
    (
        WindSpeed,
        "wind speed, windspeed, windspd, wspd, wind spd, windgeschwindigkeit, windgeschw, windstarke, vitesse \
         vent, velocidad viento, viento, vindhastighet, vindstyrke, vind, windsnelheid, velocita vento, \
         vento, vent, wind, anemometer",
    ),
    (
        Shortwave,
        "global horiz, ghi, global radiation, global irradiance, globalstrahlung, shortwave, short wave, \
         solar radiation, solar irradiance, irradiance, solar, pyranometer, rayonnement global, rayonnement, \
         radiacion global, radiacion, globalstraling, straling, solinnstraling, radiazione globale, \
         radiazione, strahlung, radiation",
    ),
    (
        AirTemperature,
        "air temperature, air temp, dry bulb, drybulb, lufttemperatur, temperature air, temperatura aire, \
         temperatura aria, tair, airtemp, tdry, drybulbtemperature, temperatur, temperature, temperatura, \
         temperatuur, temp, temper, tmp, thermometer",
    ),
];

/// Letters that stand for a variable only beside a unit: in one national format `RH` is rain, and `T` is anything.
pub(super) const BARE: [(Quantity, &str); 8] = [
    (AirTemperature, "t, ta, tt, db, tdb, tl"),
    (RelativeHumidity, "rh, hr, rf, r, f, u, ur, rv, h, hum"),
    (DewPoint, "td, tp, dp, dpt"),
    (WetBulb, "tw, wb"),
    (StationPressure, "p, pa, qnh, po"),
    (SeaLevelPressure, "p0, pmsl, msl"),
    (WindSpeed, "ws, ff, v, w, wg, fh"),
    (Shortwave, "g, sr, gr, qg, rs"),
];

/// Words that make a column something else, whatever it is called besides.
pub(super) const NEVER: &str = "flag, flags, qc, quality, source, src, uncertainty, uncert, std, stdev, sd, deviation, count, \
         departure, change, tendency, trend, units, max, min, maximum, minimum, peak, daily, monthly, \
         setpoint, soll, sollwert, heating, cooling, degree, altimeter, qualitat, error, status";

/// Words that make a column something else for one kind of variable.
pub(super) const NOT_FOR: [(Quantity, &str); 4] = [
    (
        AirTemperature,
        "soil, boden, ground, surface, water, wasser, sea, sst, battery, batterie, cpu, logger, internal, \
         panel, module, cell, chill, feels, apparent, heat, gefuhlte, globe, black, road, sky, roof, radiant, \
         wet, dew, virtual, potential, chp, cm, cr, glass, sol, suelo, suolo, jord, bodem",
    ),
    (
        RelativeHumidity,
        "absolute, absolut, specific, mixing, soil, boden, suelo",
    ),
    (
        WindSpeed,
        "gust, gusts, direction, dir, richtung, windrichtung, rafale, rafales, boe, boen, boeen, racha, \
         rachas, retning, vindretning, richting, windrichting, raffica, direzione, direccion, chill, run, \
         kast, vindkast, stoot, windstoot, windbo, windspitze, spitze, gustspeed",
    ),
    (
        Shortwave,
        "direct, normal, diffuse, diffus, dni, dhi, beam, extraterrestrial, uv, net, longwave, long, thermal, \
         illuminance, illum, etr, etrn, up, reflected, direkt, zenith, azimuth, elevation",
    ),
];

/// What part of a time a column holds.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum TimeWord {
    Stamp,
    Year,
    Month,
    Day,
    DayOfYear,
    Hour,
    Minute,
    Zone,
}

/// Whole names of time columns.
pub(super) const TIMES: [(TimeWord, &str); 8] = [
    (
        TimeWord::Stamp,
        "timestamp, time stamp, datetime, date time, date, time, zeitstempel, datum, datum zeit, datum \
         uhrzeit, zeit, uhrzeit, zeitpunkt, messzeit, messzeitpunkt, horodatage, date heure, heure, dato, \
         tid, tidspunkt, dato tid, klokkeslett, tijd, tijdstip, datum tijd, fecha, fecha hora, hora, data, \
         data ora, ora, epoch, unix, unix time, unixtime, ts, valid, valid time, local time, localtime, time \
         local, utc, utc time, time utc, date utc, observation time, obs time, observed, reading time, \
         measured at, recorded, recorded at, created, created at, serial, time hour, hour ending, hhmm, \
         yyyymmdd, yyyymmddhh, dt, period end, period start, date local, gmt, time gmt",
    ),
    (
        TimeWord::Year,
        "year, yr, yyyy, yy, jahr, annee, an, ano, ar, jaar, anno",
    ),
    (
        TimeWord::Month,
        "month, mon, mo, mm, mnth, monat, mois, mes, maned, maand, mese",
    ),
    (TimeWord::Day, "day, dd, dy, tag, jour, dia, dag, giorno, day of month"),
    (
        TimeWord::DayOfYear,
        "doy, day of year, jday, julian day, julian, yday, tag des jahres, jour annee",
    ),
    (
        TimeWord::Hour,
        "hour, hr, hh, hours, stunde, std, heure, hora, time, uur, ora, hour ending, he",
    ),
    (TimeWord::Minute, "minute, min, mi, minuut, minuto, minutt, minutes"),
    (
        TimeWord::Zone,
        "tz, timezone, time zone, zeitzone, utc offset, gmt offset, zone, fuseau horaire, tidssone, tijdzone, \
         zona horaria, fuso orario",
    ),
];
