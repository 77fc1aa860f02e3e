//! The one mapping from what the service says to what a caller is told.

use crate::http::error::{FaultItem, INTERNAL_DETAIL, Problem, ProblemCode};
use crate::http::extract::RETRY_AFTER_BUSY_S;
use crate::http::v1::weather::inline_name;
use crate::service::records::{Fault, WeatherFault};
use crate::service::{HourLimit, OrderFault, PredictError, SourceTrouble, WeatherTrouble, trouble};

/// The problem of a prediction that was not made; `upload` says whether the readings came in a file.
pub fn problem_of(error: PredictError, upload: bool) -> Problem {
    match error {
        PredictError::Faults(faults) => {
            let items = faults.iter().map(|fault| item(fault, upload)).collect();
            Problem::with_faults(code_of(&faults), items)
        }
        PredictError::TooMany { limit, found } => too_many(limit, found),
        PredictError::Busy { waiting } => {
            let detail = format!("all places are taken and {waiting} predictions wait; send the same request again");
            Problem::new(ProblemCode::Busy, detail).retry_after(RETRY_AFTER_BUSY_S)
        }
        PredictError::Source(trouble) => no_weather(trouble),
        PredictError::Stopped => Problem::new(ProblemCode::NotReady, "the run was stopped; send the request again")
            .retry_after(RETRY_AFTER_BUSY_S),
        PredictError::Broken(reason) => {
            tracing::error!(reason, "a prediction broke");
            Problem::new(ProblemCode::InternalError, INTERNAL_DETAIL)
        }
    }
}

/// 503 if asking again helps, else 502.
fn no_weather(trouble: SourceTrouble) -> Problem {
    match trouble.retry_after_s {
        Some(seconds) => Problem::new(ProblemCode::WeatherSourceUnavailable, trouble.detail).retry_after(seconds),
        None => Problem::new(ProblemCode::WeatherSourceFailed, trouble.detail),
    }
}

/// One code for all faults: that of their part if they share one.
fn code_of(faults: &[OrderFault]) -> ProblemCode {
    let all = |is: fn(&OrderFault) -> bool| faults.iter().all(is);
    let any = |kind: WeatherTrouble| {
        faults
            .iter()
            .any(|fault| matches!(fault, OrderFault::Weather(f) if trouble(f) == kind))
    };
    if all(|fault| matches!(fault, OrderFault::Weather(_))) {
        return match (any(WeatherTrouble::TooLarge), any(WeatherTrouble::Unreadable)) {
            (true, _) => ProblemCode::BodyTooLarge,
            (_, true) => ProblemCode::UnreadableWeather,
            _ => ProblemCode::InvalidWeather,
        };
    }
    if all(|fault| matches!(fault, OrderFault::Device(_))) {
        ProblemCode::InvalidDevice
    } else {
        ProblemCode::InvalidRequest
    }
}

fn item(fault: &OrderFault, upload: bool) -> FaultItem {
    match fault {
        OrderFault::Example(fault) => at("/device_example", fault),
        OrderFault::Device(fault) => at("/device", fault),
        OrderFault::Options(fault) => options_item(fault),
        OrderFault::Weather(fault) => weather_item(fault, upload),
    }
}

fn at(root: &str, fault: &Fault) -> FaultItem {
    let pointer = if fault.field.is_empty() {
        root.to_owned()
    } else {
        format!("{root}/{}", fault.field)
    };
    FaultItem::at(pointer, fault.code, fault.detail.clone())
}

/// The lamp's hours stand with the device, everything else where its path says.
fn options_item(fault: &Fault) -> FaultItem {
    let pointer = match fault.field.strip_prefix("options/lamp_hours") {
        Some(rest) => format!("/device/lamp/lit{rest}"),
        None => format!("/{}", fault.field),
    };
    FaultItem::at(pointer, fault.code, fault.detail.clone())
}

fn weather_item(fault: &WeatherFault, upload: bool) -> FaultItem {
    let layout = fault
        .column
        .as_deref()
        .filter(|column| column.starts_with("layout/") || column.starts_with("hints/"));
    if let Some(path) = layout {
        return FaultItem::at(format!("/weather/{path}"), fault.code, fault.detail.clone());
    }
    let endpoint = fault
        .column
        .as_deref()
        .and_then(|column| column.strip_prefix("endpoint/"));
    if let Some(field) = endpoint {
        return FaultItem::at(format!("/weather/{field}"), fault.code, fault.detail.clone());
    }
    if upload {
        let row = fault.row.map(|row| row as u64);
        return FaultItem::in_file(row, fault.column.clone(), fault.code, fault.detail.clone());
    }
    let column = fault
        .column
        .as_deref()
        .and_then(inline_name)
        .map(|name| format!("/{name}"))
        .unwrap_or_default();
    let place = fault.row.filter(|_| !column.is_empty() && column != "/start");
    let place = place
        .map(|row| format!("/{}", row.saturating_sub(1)))
        .unwrap_or_default();
    FaultItem::at(format!("/weather{column}{place}"), fault.code, fault.detail.clone())
}

fn too_many(limit: HourLimit, found: usize) -> Problem {
    let (most, what) = (limit.most(), limit.what());
    let remedy = match limit {
        HourLimit::Averaged => "split the series and carry end_state over as options.initial_state",
        HourLimit::Resolved => "split the series, or use method averaged",
        HourLimit::Bands => "ask for fewer samples, or for bands: false, or split the series",
    };
    let detail = format!("expected at most {most} {what}, found {found}; {remedy}");
    let pointer = if limit == HourLimit::Bands {
        "/options/samples"
    } else {
        "/weather"
    };
    Problem::with_faults(
        ProblemCode::TooManyHours,
        vec![FaultItem::at(pointer, "too_many_hours", detail)],
    )
}

#[cfg(test)]
mod tests {
    use super::*;

    fn weather(code: &'static str) -> OrderFault {
        OrderFault::Weather(WeatherFault::whole(code, "x"))
    }

    #[test]
    fn the_code_is_that_of_the_part_all_faults_share() {
        let device = OrderFault::Device(Fault::new("tube/bore_mm", "below_minimum", "x"));
        assert_eq!(code_of(std::slice::from_ref(&device)), ProblemCode::InvalidDevice);
        assert_eq!(code_of(&[device, weather("no_humidity")]), ProblemCode::InvalidRequest);
        assert_eq!(code_of(&[weather("no_humidity")]), ProblemCode::InvalidWeather);
        assert_eq!(code_of(&[weather("empty_file")]), ProblemCode::UnreadableWeather);
        assert_eq!(code_of(&[weather("compression_bomb")]), ProblemCode::BodyTooLarge);
    }

    #[test]
    fn pointers_lead_into_the_request_as_it_was_sent() {
        let lamp = Fault::new("options/lamp_hours/weekly/mon/0", "invalid_interval", "x");
        assert_eq!(options_item(&lamp).pointer.unwrap(), "/device/lamp/lit/weekly/mon/0");
        let row = WeatherFault::row(3, Some("air_temperature"), "x", "y");
        assert_eq!(
            weather_item(&row, false).pointer.unwrap(),
            "/weather/air_temperature_c/2"
        );
        assert_eq!(weather_item(&row, true).row, Some(3));
        let layout = WeatherFault::column("layout/time/zone", "x", "y");
        assert_eq!(
            weather_item(&layout, true).pointer.unwrap(),
            "/weather/layout/time/zone"
        );
    }

    #[test]
    fn what_broke_is_not_told() {
        let problem = problem_of(PredictError::Broken("panicked at src/secret.rs".to_owned()), false);
        assert_eq!(
            (problem.code, problem.detail.as_str()),
            (ProblemCode::InternalError, INTERNAL_DETAIL)
        );
        assert!(problem.errors.is_empty());
    }
}
