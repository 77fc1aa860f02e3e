#!/usr/bin/env bash
# Installs what it uses and runs every test. `tests/run.sh long` runs the long ones instead.
set -euo pipefail
cd "$(dirname "$0")/.."
export CI=true CARGO_TERM_COLOR=never

passed=0
failed=0
started=$SECONDS

# step NAME COMMAND...: runs one step, says how long it took, and goes on if it fails.
step() {
    local name=$1 from=$SECONDS
    shift
    echo "== $name"
    if "$@"; then
        passed=$((passed + 1))
        echo "== $name: ok, $((SECONDS - from)) s"
    else
        failed=$((failed + 1))
        echo "== $name: FAILED, $((SECONDS - from)) s"
    fi
}

rust_tests() {
    cargo nextest run --profile ci --locked 2>&1
}

step "format" cargo fmt --check
step "lints" cargo clippy --quiet --locked --all-targets -- -D warnings
step "unit, integration and reference tests" rust_tests
step "examples in the docs" cargo test --quiet --locked --doc

echo "steps of tests/run.sh, $((SECONDS - started)) s in all:"
echo "$passed passed, $failed failed"
[ "$failed" -eq 0 ]
