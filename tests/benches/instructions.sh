#!/usr/bin/env bash
# Counts the instructions of one averaged hour, one resolved hour, a site-year and a CSV year, under valgrind. The same
# binary gives the same count on a busy machine as on an idle one, so these figures may be compared between versions.
set -euo pipefail
cd "$(dirname "$0")/../.."
command -v valgrind > /dev/null || { apt-get -qq update && apt-get -qq install -y valgrind > /dev/null; }

binary=$(cargo bench --quiet --locked --bench instructions --no-run --message-format json | python3 -c '
import json, sys
built = [line for line in map(json.loads, sys.stdin) if line["reason"] == "compiler-artifact"]
print([one["executable"] for one in built if one["target"]["name"] == "instructions"][-1])')

count() {
    valgrind --tool=callgrind --callgrind-out-file=/dev/null "$binary" "$1" "$2" 2>&1 \
        | sed -n 's/.*Collected *: *\([0-9]*\).*/\1/p'
}

# Two runs of different length: their difference is the case alone, without the start of the program.
for case in averaged-hour resolved-hour site-year csv-year; do
    one=$(count "$case" 1)
    two=$(count "$case" 2)
    printf '%-15s %15d instructions\n' "$case" "$((two - one))"
done
