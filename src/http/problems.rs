//! The table of problem types: each has a stable code, a status and a page that explains it.

use axum::http::StatusCode;

/// What went wrong, as far as a caller can act on it. The order is that of [`KINDS`].
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
#[expect(missing_docs, reason = "the table below says what each one means")]
pub enum ProblemCode {
    BadRequest,
    InvalidJson,
    InvalidMultipart,
    UnreadableWeather,
    Unauthorized,
    NotFound,
    MethodNotAllowed,
    NotAcceptable,
    BodyTooLarge,
    UnsupportedMediaType,
    InvalidRequest,
    InvalidDevice,
    InvalidWeather,
    TooManyHours,
    TooManyRequests,
    InternalError,
    WeatherSourceFailed,
    WeatherSourceUnavailable,
    Busy,
    Timeout,
    NotReady,
}

/// One problem type.
#[derive(Debug)]
pub struct ProblemKind {
    /// Stable code; the problem's `type` is `/problems/` and this.
    pub code: &'static str,
    /// HTTP status.
    pub status: StatusCode,
    /// One line for people.
    pub title: &'static str,
    /// Why it happens.
    pub cause: &'static str,
    /// A request that brings it about.
    pub example: &'static str,
    /// What to do.
    pub remedy: &'static str,
}

impl ProblemCode {
    /// Its row of the table.
    pub fn kind(self) -> &'static ProblemKind {
        &KINDS[self as usize]
    }
}

const fn kind(
    code: &'static str,
    status: StatusCode,
    title: &'static str,
    [cause, example, remedy]: [&'static str; 3],
) -> ProblemKind {
    ProblemKind {
        code,
        status,
        title,
        cause,
        example,
        remedy,
    }
}

/// All problem types.
pub static KINDS: [ProblemKind; 21] = [
    kind(
        "bad_request",
        StatusCode::BAD_REQUEST,
        "The request cannot be read",
        [
            "Something in the request's head is malformed, for example a path that is not UTF-8.",
            "GET /problems/%ff",
            "Send a well-formed request; the detail says what was found.",
        ],
    ),
    kind(
        "invalid_json",
        StatusCode::BAD_REQUEST,
        "The body is not JSON",
        [
            "The body, or the part `request`, is not well-formed JSON in UTF-8, names a field twice, or holds a number JSON does not know (NaN, Infinity, 1e999).",
            "{\"device_example\": \"shelf\", \"options\": {\"seed\": NaN}}",
            "The detail names line and column. Write missing readings as null.",
        ],
    ),
    kind(
        "invalid_multipart",
        StatusCode::BAD_REQUEST,
        "The form cannot be read",
        [
            "The multipart body breaks off, has no boundary, or a part is repeated, unknown or missing.",
            "A form with the parts `request` and `wether`.",
            "Send exactly the parts `request` (JSON) and `weather` (CSV or gzipped CSV), in any order.",
        ],
    ),
    kind(
        "unreadable_weather",
        StatusCode::BAD_REQUEST,
        "The weather file cannot be read",
        [
            "The file is empty, holds no rows, is not text in the stated encoding, or its gzip stream is broken.",
            "An image sent as the part `weather`.",
            "Send text with one header row and at least one row of readings; state the encoding in layout.dialect.encoding if it is not UTF-8.",
        ],
    ),
    kind(
        "unauthorized",
        StatusCode::UNAUTHORIZED,
        "A valid key is needed",
        [
            "This service is configured with keys, and the request carries none or an unknown one.",
            "GET /v1/fluids without a key.",
            "Send `Authorization: Bearer KEY` or `X-Api-Key: KEY`; ask the operator for a key.",
        ],
    ),
    kind(
        "not_found",
        StatusCode::NOT_FOUND,
        "There is nothing here",
        [
            "No resource has this path.",
            "GET /v1/fluid",
            "See /docs or /openapi.json for all paths.",
        ],
    ),
    kind(
        "method_not_allowed",
        StatusCode::METHOD_NOT_ALLOWED,
        "This path does not take this method",
        [
            "The path exists, the method does not.",
            "GET /v1/predictions",
            "Use one of the methods in the Allow header.",
        ],
    ),
    kind(
        "not_acceptable",
        StatusCode::NOT_ACCEPTABLE,
        "No such format here",
        [
            "The Accept header or the query parameter `format` asks for a format this resource does not have.",
            "POST /v1/predictions?format=xml",
            "Take one of the formats listed in the detail and in `available`.",
        ],
    ),
    kind(
        "body_too_large",
        StatusCode::PAYLOAD_TOO_LARGE,
        "The body is too large",
        [
            "The body, or the weather file after decompression, is larger than this service accepts.",
            "A 2 GB body; a small gzip file that unpacks to gigabytes.",
            "Send fewer hours, or fewer columns; the detail names the limit. The operator can raise it.",
        ],
    ),
    kind(
        "unsupported_media_type",
        StatusCode::UNSUPPORTED_MEDIA_TYPE,
        "This content type is not understood",
        [
            "The Content-Type header is missing or names a format this resource does not read.",
            "POST /v1/predictions with Content-Type: text/plain.",
            "Send application/json, or multipart/form-data with the parts `request` and `weather`.",
        ],
    ),
    kind(
        "invalid_request",
        StatusCode::UNPROCESSABLE_ENTITY,
        "The request is readable but wrong",
        [
            "Fields are unknown, missing, of the wrong type, out of range or contradict each other.",
            "{\"device_example\": \"shelf\", \"wether\": {\"kind\": \"upload\"}}",
            "`errors` lists every fault with a pointer to its place and the remedy. Field names are those of /openapi.json.",
        ],
    ),
    kind(
        "invalid_device",
        StatusCode::UNPROCESSABLE_ENTITY,
        "This device cannot work",
        [
            "Each figure is possible, but together they make no device that dips: it tips when dry, runs out of liquid, cannot drain, or would burst.",
            "A tube of 1 mm bore: the bubble locks and the head never drains.",
            "`errors` names each reason. Start from a device of /v1/example-devices and change one thing at a time.",
        ],
    ),
    kind(
        "invalid_weather",
        StatusCode::UNPROCESSABLE_ENTITY,
        "The weather is readable but wrong",
        [
            "Readings are implausible, columns are swapped or of unequal length, units do not fit, times repeat or run backwards, or too many hours are missing.",
            "Relative humidity given as 0.45 where per cent is expected.",
            "`errors` lists the faults by pointer or by row and column. Correct the file, or the mapping in weather.layout.",
        ],
    ),
    kind(
        "too_many_hours",
        StatusCode::UNPROCESSABLE_ENTITY,
        "The series is too long for one answer",
        [
            "The number of hours, or of hours times samples, is above what is answered at once.",
            "300,000 hours with method averaged.",
            "Split the series; carry the state over with options.initial_state. The detail names the limit.",
        ],
    ),
    kind(
        "too_many_requests",
        StatusCode::TOO_MANY_REQUESTS,
        "Too many requests",
        [
            "This key or address has used up its requests for the moment.",
            "More requests a minute than the RateLimit-Policy header allows.",
            "Wait as many seconds as Retry-After says.",
        ],
    ),
    kind(
        "internal_error",
        StatusCode::INTERNAL_SERVER_ERROR,
        "Our fault",
        [
            "Something broke inside the service. Nothing about it is shown here; the log has it under the request id.",
            "None: it should not happen.",
            "Send the operator the request id (`instance`).",
        ],
    ),
    kind(
        "weather_source_failed",
        StatusCode::BAD_GATEWAY,
        "The weather source gave nothing of use",
        [
            "The source refused the question, or answered something it is not known to answer: another unit, another place, a redirect.",
            "A source whose form of answer has changed.",
            "Asking again does not help. Take another source of /v1/weather-sources, or send readings; tell the operator the request id.",
        ],
    ),
    kind(
        "weather_source_unavailable",
        StatusCode::SERVICE_UNAVAILABLE,
        "The weather source does not answer now",
        [
            "The source is down, slow or overloaded, it rests after failures, or what this service may ask of it is used up; and no earlier answer is kept.",
            "Weather of a hundred new places within a minute.",
            "Send the same request again after the seconds in Retry-After, or take another source of /v1/weather-sources.",
        ],
    ),
    kind(
        "busy",
        StatusCode::SERVICE_UNAVAILABLE,
        "All places are taken",
        [
            "As many predictions are running and waiting, or as many bodies are in memory, as this service allows.",
            "Hundreds of long predictions at once.",
            "Send the same request again after the seconds in Retry-After.",
        ],
    ),
    kind(
        "timeout",
        StatusCode::SERVICE_UNAVAILABLE,
        "It took too long",
        [
            "The answer was not ready in the time this service allows a request; the run was stopped.",
            "A long resolved run on a loaded machine; a body sent very slowly.",
            "Try again later, or ask for fewer hours or samples, or for method averaged.",
        ],
    ),
    kind(
        "not_ready",
        StatusCode::SERVICE_UNAVAILABLE,
        "Not ready for requests",
        [
            "The service is starting or shutting down.",
            "GET /readyz after the stop signal.",
            "Try again after the seconds in Retry-After, or another instance.",
        ],
    ),
];

#[cfg(test)]
mod tests {
    use super::*;

    fn snake_case(name: &str) -> String {
        let spaced = name.chars().flat_map(|letter| {
            let gap = letter.is_uppercase().then_some('_');
            gap.into_iter().chain(letter.to_lowercase())
        });
        spaced.collect::<String>().trim_start_matches('_').to_owned()
    }

    #[test]
    fn the_table_is_in_the_order_of_the_codes() {
        assert_eq!(ProblemCode::NotReady as usize + 1, KINDS.len());
        for code in [
            ProblemCode::BadRequest,
            ProblemCode::BodyTooLarge,
            ProblemCode::InvalidWeather,
            ProblemCode::NotReady,
        ] {
            assert_eq!(code.kind().code, snake_case(&format!("{code:?}")));
        }
    }

    #[test]
    fn every_row_explains_itself() {
        for kind in &KINDS {
            let texts = [kind.title, kind.cause, kind.example, kind.remedy];
            assert!(
                texts.iter().all(|text| text.len() > 8),
                "{} has an empty text",
                kind.code
            );
            assert!(kind.status.as_u16() >= 400, "{} is no error status", kind.code);
        }
    }
}
