#!/bin/sh
# Fuzzes a live service by its own document: examples, coverage, fuzzing and stateful phases with all checks.
#
#   sh tests/contract/fuzz_live.sh [URL]       without a URL it starts the service itself
#
# FUZZ_EXAMPLES sets the questions for each operation (150), FUZZ_SEED the seed (1), FUZZ_PATHS a regular expression
# of the paths to ask (all), for a long run in slices, FUZZ_PHASES the phases: that of coverage tries each member in
# turn whatever the seed, some 33,000 cases in a quarter of an hour. All checks are on but those the configuration
# excepts with a reason; to ask for all of them here would override that. Any failure fails the script, and so does
# any answer with status 500, expected or not: the fuzzer's own rule, held here once more from the service's log.
set -eu
cd "$(dirname "$0")/../.."
. tests/contract/tools.sh

url=${1:-}
python3 -c 'import schemathesis' 2>/dev/null || fail "Missing tool: the Python package schemathesis."
work=$(mktemp -d)
trap 'stop_service; rm -rf "$work"' EXIT
[ -n "$url" ] || start_service
PYTHONPATH=service:tests python3 -m contract.strict_document "$work/v1.json"
python3 -m schemathesis.cli --config-file tests/contract/schemathesis.toml run "$work/v1.json" --url "$url" \
    --phases "${FUZZ_PHASES:-examples,coverage,fuzzing,stateful}" --mode all --continue-on-failure --max-failures 50 \
    --max-examples "${FUZZ_EXAMPLES:-150}" --seed "${FUZZ_SEED:-1}" --include-path-regex "${FUZZ_PATHS:-.}"
if [ -n "${service_log:-}" ] && grep -q '"level":"error"' "$service_log"; then
    grep '"level":"error"' "$service_log" | head -5 >&2
    fail "The service logged faults of its own."
fi
