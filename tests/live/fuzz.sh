#!/bin/sh
# Fuzzes a served contract over real HTTP: sh tests/live/fuzz.sh URL [EXAMPLES]. Every check, fixed seed.
#
# Every operation gets its examples and random questions, valid and not. The phase that tries each member in turn runs
# on the operations whose questions are small; on a whole loop, nested as it is, it takes longer than all other tests
# together. Left out are the stream of lines, whose media type the fuzzer cannot write (tests/api tries it), and the
# two copies of the document itself, which are compared byte for byte elsewhere.
set -eu
cd "$(dirname "$0")/../.."

fuzz() {
    schemathesis --config-file tests/live/schemathesis.toml run openapi/v1.json --url "$url" --mode all --checks all \
        --seed 1 --continue-on-failure --max-response-time 10 --warnings off \
        --exclude-path /v1/loop-design/stream --exclude-path-regex openapi "$@"
}

url=$1
fuzz --phases examples,fuzzing --max-examples "${2:-12}"
fuzz --phases coverage --include-path-regex '^/(v1/(expansion|fluids|tubes|rules|vessel-series|sources)|livez|readyz)$'
