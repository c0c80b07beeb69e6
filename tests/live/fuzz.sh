#!/bin/sh
# Fuzzes a served contract over real HTTP: sh tests/live/fuzz.sh URL [EXAMPLES]. Every phase, every check, fixed seed.
set -eu
cd "$(dirname "$0")/../.."
schemathesis --config-file tests/live/schemathesis.toml run openapi/v1.json --url "$1" \
    --phases examples,coverage,fuzzing,stateful --mode all --checks all --max-examples "${2:-60}" --seed 1 \
    --continue-on-failure --max-response-time 5 --warnings off
