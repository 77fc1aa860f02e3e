-- Answers of weather services, one row a question. The answer stands last, so that counting does not read it.
CREATE TABLE fetched_weather (
    question TEXT NOT NULL PRIMARY KEY,
    source TEXT NOT NULL,
    fetched_unix_s BIGINT NOT NULL,
    -- NULL: the answer holds for good.
    expires_unix_s BIGINT,
    -- The service's own Last-Modified, to the letter; it goes back in If-Modified-Since.
    last_modified TEXT,
    used_unix_s BIGINT NOT NULL,
    bytes BIGINT NOT NULL,
    -- Gzipped.
    answer BYTEA NOT NULL
);

CREATE INDEX fetched_weather_used ON fetched_weather (used_unix_s);
CREATE INDEX fetched_weather_source ON fetched_weather (source, fetched_unix_s);
