//! What the head of an answer says about time.

use std::time::Duration;

use chrono::DateTime;
use reqwest::header::{CACHE_CONTROL, DATE, EXPIRES, HeaderMap, HeaderName, LAST_MODIFIED, RETRY_AFTER};

/// No source is left in peace for longer than this because it said so.
const LONGEST_WAIT: Duration = Duration::from_secs(86_400);

fn text(headers: &HeaderMap, name: HeaderName) -> Option<&str> {
    headers.get(name)?.to_str().ok().map(str::trim)
}

fn date(headers: &HeaderMap, name: HeaderName) -> Option<i64> {
    // The IMF fixdate of HTTP is a date of e-mail.
    DateTime::parse_from_rfc2822(text(headers, name)?)
        .ok()
        .map(|date| date.timestamp())
}

/// When to ask again, in seconds or as a date.
pub(super) fn retry_after(headers: &HeaderMap, now_unix_s: i64) -> Option<Duration> {
    let seconds = text(headers, RETRY_AFTER)?.parse::<u64>().ok();
    let until = || {
        let until = date(headers, RETRY_AFTER)?;
        u64::try_from(until - date(headers, DATE).unwrap_or(now_unix_s)).ok()
    };
    seconds
        .or_else(until)
        .map(|seconds| Duration::from_secs(seconds).min(LONGEST_WAIT))
}

/// When the answer expires [unix s], measured by the sender's clock against ours.
pub(super) fn expires_unix_s(headers: &HeaderMap, now_unix_s: i64) -> Option<i64> {
    let age_s = text(headers, CACHE_CONTROL)
        .into_iter()
        .flat_map(|directives| directives.split(','))
        .find_map(|directive| directive.trim().strip_prefix("max-age=")?.parse::<i64>().ok());
    let by_date = || Some(date(headers, EXPIRES)? - date(headers, DATE).unwrap_or(now_unix_s));
    age_s
        .or_else(by_date)
        .map(|seconds| now_unix_s.saturating_add(seconds.max(0)))
}

/// Its Last-Modified, to the letter.
pub(super) fn last_modified(headers: &HeaderMap) -> Option<String> {
    text(headers, LAST_MODIFIED).map(str::to_owned)
}

/// How long a source that was asked too much wants to be left in peace, by its words where it does not say it in a header.
pub(super) fn wait_in_words(told: &str, now_unix_s: i64) -> Duration {
    let told = told.to_lowercase();
    let says = |word: &str| told.contains(word);
    let until_next = |period_s: i64| Duration::from_secs((period_s - now_unix_s.rem_euclid(period_s)) as u64);
    match () {
        () if says("concurrent") => Duration::from_secs(1),
        () if says("daily") || says("day") || says("tomorrow") => until_next(86_400),
        () if says("hour") => until_next(3600),
        () => Duration::from_secs(60),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    const NOW: i64 = 784_111_777;

    fn headers(pairs: &[(&'static str, &'static str)]) -> HeaderMap {
        let pair = |(name, value): &(&'static str, &'static str)| {
            (
                HeaderName::from_static(name),
                reqwest::header::HeaderValue::from_static(value),
            )
        };
        pairs.iter().map(pair).collect()
    }

    /// The example date of RFC 9110, section 5.6.7, is 784111777 s after 1970.
    #[test]
    fn dates_are_those_of_http() {
        let expires = headers(&[("expires", "Sun, 06 Nov 1994 08:49:37 GMT")]);
        assert_eq!(expires_unix_s(&expires, NOW - 60), Some(NOW));
        let skewed = headers(&[
            ("expires", "Sun, 06 Nov 1994 08:49:37 GMT"),
            ("date", "Sun, 06 Nov 1994 08:39:37 GMT"),
        ]);
        assert_eq!(
            expires_unix_s(&skewed, 1000),
            Some(1600),
            "ten minutes by the sender's clock"
        );
        assert_eq!(
            expires_unix_s(&headers(&[("cache-control", "public, max-age=30")]), 5),
            Some(35)
        );
        assert_eq!(expires_unix_s(&headers(&[("expires", "0")]), 5), None);
    }

    #[test]
    fn retry_after_comes_as_seconds_or_date() {
        let wait = |value| retry_after(&headers(&[("retry-after", value)]), NOW);
        assert_eq!(wait("120"), Some(Duration::from_secs(120)));
        assert_eq!(wait("Sun, 06 Nov 1994 08:50:37 GMT"), Some(Duration::from_secs(60)));
        assert_eq!(wait("soon"), None);
        assert_eq!(wait("99999999999"), Some(LONGEST_WAIT));
    }

    #[test]
    fn words_say_how_long_too() {
        // 08:49:37 GMT.
        assert_eq!(wait_in_words("Minutely limit exceeded", NOW).as_secs(), 60);
        assert_eq!(
            wait_in_words("Hourly limit exceeded, try again in the next hour", NOW).as_secs(),
            623
        );
        assert_eq!(
            wait_in_words("Daily limit exceeded, try again tomorrow", NOW).as_secs(),
            54_623
        );
        assert_eq!(wait_in_words("Too many concurrent requests", NOW).as_secs(), 1);
        assert_eq!(wait_in_words("", NOW).as_secs(), 60);
    }
}
