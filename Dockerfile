# syntax=docker/dockerfile:1
# Bases are pinned by version tag; pin them by digest where your registry mirror gives you one.

FROM rust:1.95-bookworm AS build
WORKDIR /build
# The dependencies alone first: this layer is rebuilt only when the manifests change.
COPY Cargo.toml Cargo.lock ./
RUN mkdir src \
    && echo 'fn main() {}' > src/main.rs \
    && touch src/lib.rs \
    && cargo build --release --locked
COPY src src
COPY openapi openapi
COPY deploy/config.default.toml deploy/config.default.toml
# Newer than the placeholders, or cargo would keep what it built from them.
RUN touch src/main.rs src/lib.rs \
    && cargo build --release --locked --bin dipcast

FROM debian:12.11-slim
# hadolint ignore=DL3008
RUN apt-get update \
    && apt-get install -y --no-install-recommends ca-certificates \
    && rm -rf /var/lib/apt/lists/* \
    && install -d -o 10001 -g 10001 /var/lib/dipcast
COPY --from=build /build/target/release/dipcast /usr/local/bin/dipcast
# A number, so that a cluster can see that it is not root.
USER 10001:10001
# Fetched weather; mount a volume there and it outlasts the container.
ENV DIPCAST__STORE__FILE=/var/lib/dipcast/dipcast.db
EXPOSE 8080
STOPSIGNAL SIGTERM
HEALTHCHECK --interval=10s --timeout=3s --start-period=5s --retries=3 CMD ["dipcast", "healthcheck"]
# Inside a container loopback is of no use; beyond it the server wants keys, or `--allow-anonymous` said aloud.
ENTRYPOINT ["dipcast"]
CMD ["serve", "--bind", "0.0.0.0:8080"]
