#!/bin/sh
# Fuzzes a served contract within minutes: sh tests/live/fuzz.sh URL [EXAMPLES]. Every check, fixed seed.
#
# Every operation gets its examples and random questions, valid and not. The phase that tries each member in turn runs
# on the operations whose questions are small; on a whole loop, nested as it is, it takes longer than all other tests
# together, and is left to tests/contract/fuzz_live.sh. Left out are the stream of lines, whose media type the fuzzer
# cannot write, and the two copies of the document itself, which are compared byte for byte elsewhere.
set -eu
cd "$(dirname "$0")/../.."

url=$1
examples=${2:-12}
document=.cache/strict-document.json
PYTHONPATH=tests python -m contract.strict_document "$document"

fuzz() {
    schemathesis --config-file tests/contract/schemathesis.toml run "$document" --url "$url" --checks all \
        --seed 1 --continue-on-failure --max-response-time 10 "$@"
}

fuzz --phases examples,fuzzing --max-examples "$examples" \
    --exclude-path-regex '^/v1/(loop-design/(stream|batch)|openapi)'
# A design of a batch that breaks the schema is refused by itself, and the batch answered: see the configuration, which
# the choice of all checks on the command line overrides.
fuzz --phases examples,fuzzing --max-examples "$examples" --exclude-checks negative_data_rejection \
    --include-path /v1/loop-design/batch
fuzz --phases coverage --include-path-regex '^/(v1/(expansion|fluids|tubes|rules|vessel-series|sources)|livez|readyz)$'
