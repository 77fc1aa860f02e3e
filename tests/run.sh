#!/usr/bin/env bash
# Installs what it uses and runs every test. `tests/run.sh long` runs the long ones instead.
set -euo pipefail
cd "$(dirname "$0")/.."
export CI=true CARGO_TERM_COLOR=never
# shellcheck source=tests/steps/tools.sh
. tests/steps/tools.sh
# shellcheck source=tests/steps/server.sh
. tests/steps/server.sh
trap 'stop_server || true' EXIT

passed=0
failed=0

# step NAME COMMAND...: runs one step, says how long it took, and goes on if it fails.
step() {
    local name=$1 from=$SECONDS
    shift
    echo "== $name"
    if "$@" 2>&1; then
        passed=$((passed + 1))
        echo "== $name: ok, $((SECONDS - from)) s"
    else
        failed=$((failed + 1))
        echo "== $name: FAILED, $((SECONDS - from)) s"
    fi
}

release_build() { cargo build --quiet --release --locked; }

# openapi_document PATH VERSION
openapi_document() {
    curl --silent --fail --output target/steps/openapi.json "$base/$1" \
        && "$venv/bin/openapi-spec-validator" --schema "$2" target/steps/openapi.json \
        && "$venv/bin/python" tests/steps/examples.py target/steps/openapi.json
}

# fuzz_the_document OPTION...: how much is asked; all the rest is fixed.
fuzz_the_document() {
    timeout 1500 "$venv/bin/schemathesis" --config-file tests/steps/schemathesis.toml run "$base/openapi.json" \
        --url "$base" --checks all --seed 1 --continue-on-failure "$@"
}

image_lint() {
    "$venv/bin/hadolint" Dockerfile && python3 tests/steps/image.py "$binary"
}

everything() {
    step "tools" install_tools
    step "format" cargo fmt --check
    step "lints" cargo clippy --quiet --locked --all-targets -- -D warnings
    step "shell scripts" "$venv/bin/shellcheck" --external-sources tests/run.sh tests/steps/clients.sh tests/benches/instructions.sh .ci/run
    step "unit, integration and reference tests" cargo nextest run --profile ci --locked
    step "examples in the docs" cargo test --quiet --locked --doc
    step "release build" release_build
    step "image" image_lint
    step "server starts" start_server
    step "OpenAPI 3.1" openapi_document openapi.json 3.1
    step "OpenAPI 3.0" openapi_document openapi-3.0.json 3.0
    for version in 3.1 3.0; do
        step "Python client from $version" tests/steps/clients.sh python $version "$base"
        step "TypeScript client from $version" tests/steps/clients.sh typescript $version "$base"
    done
    step "requests made up from the document" fuzz_the_document --max-examples 150
    step "examples of the README" python3 tests/steps/readme.py README.md "$base" "$binary"
    step "server stops" stop_server
}

long() {
    step "tools" install_tools
    step "release build" release_build
    step "property tests, 20,000 cases each" env PROPTEST_CASES=20000 cargo nextest run --release --locked --profile long
    step "server starts" start_server
    step "requests made up from the document, at length" fuzz_the_document --max-examples 1500 --max-time 1200
    step "memory over 10,000 predictions" python3 tests/steps/endurance.py memory "$base" "$server_pid"
    step "SIGTERM under load" python3 tests/steps/endurance.py drain "$base" "$server_pid"
    step "server stops" stop_server
}

case "${1:-}" in
    "") everything ;;
    long) long ;;
    *) echo "usage: tests/run.sh [long]" && exit 2 ;;
esac

echo "steps of tests/run.sh, $SECONDS s in all:"
echo "$passed passed, $failed failed"
[ "$failed" -eq 0 ]
