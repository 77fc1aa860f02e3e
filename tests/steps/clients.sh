#!/usr/bin/env bash
# clients.sh LANGUAGE VERSION ADDRESS: makes a client from the description the running service serves in that OpenAPI
# version, compiles it and the programs of tests/clients strictly, and runs them against the service.
set -euo pipefail
cd "$(dirname "$0")/../.."
language=$1 version=$2 address=$3
made=target/steps/clients/$language-$version
venv=tests/.venv

case $version in
    3.1) document=openapi.json ;;
    *) document=openapi-$version.json ;;
esac

python() {
    if ! "$venv/bin/openapi-python-client" generate --path "$made/openapi.json" --meta none --overwrite \
        --output-path "$made/dipcast_client" --config tests/clients/python/generator.yml > "$made/generator.log" 2>&1 \
        || ! no_unknown_warnings "$made/generator.log"; then
        cat "$made/generator.log"
        return 1
    fi
    MYPYPATH=$made "$venv/bin/mypy" --strict --cache-dir "$made/.mypy_cache" tests/clients/python/*.py
    for program in tests/clients/python/*.py; do
        PYTHONPATH=$made "$venv/bin/python" "$program" "$address"
    done
}

# It knows no bodies of CSV or gzip, only the form beside them; whatever else it leaves out is a failure.
no_unknown_warnings() {
    local all known
    all=$(grep -cE '^(WARNING|ERROR)' "$1" || true)
    known=$(grep -cE '^Unsupported content type (text/csv|application/gzip)$' "$1" || true)
    [ "$all" -eq "$known" ]
}

typescript() {
    rm -rf "$made/built" "$made"/*.ts
    cp tests/clients/typescript/*.ts tests/clients/typescript/*.json "$made"
    cd "$made"
    if ! cmp -s package-lock.json node_modules/installed.json; then
        npm ci --no-audit --no-fund --ignore-scripts --loglevel error
        cp package-lock.json node_modules/installed.json
    fi
    node_modules/.bin/openapi-typescript openapi.json --output dipcast.ts
    node_modules/.bin/tsc --project .
    for program in built/*.js; do
        node "$program" "$address"
    done
}

mkdir -p "$made"
curl --silent --show-error --fail --output "$made/openapi.json" "$address/$document"
"$language"
