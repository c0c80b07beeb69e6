#!/bin/sh
# Lints the OpenAPI document with a validator of OpenAPI 3.1 and two independent linters: zero findings, or exit 1.
# Before that, each linter must find the defects planted for it in a copy, so that its silence means something.
#
#   sh tests/contract/lint.sh [DOCUMENT]        default: openapi/v1.json
#
# Needs Python on the path with openapi-spec-validator, as tests/run.sh sets it up, and Node.js 20 with npm. The linters
# are installed at the versions pinned in tests/contract/linters.
set -eu
document=$(realpath "${1:-$(dirname "$0")/../../openapi/v1.json}")
cd "$(dirname "$0")/../.."
. tests/contract/tools.sh

document_at "$document"
python3 -c 'import openapi_spec_validator' 2>/dev/null || fail "Missing tool: the Python package openapi-spec-validator."
linters=$(node_tools tests/contract/linters)
export REDOCLY_TELEMETRY=off REDOCLY_SUPPRESS_UPDATE_NOTICE=true
work=$(mktemp -d)
trap 'rm -rf "$work"' EXIT

redocly() {
    "$linters/redocly" lint "$@" --config openapi/redocly.yaml --max-problems 1000 2>&1
}

spectral() {
    "$linters/spectral" lint "$@" --ruleset openapi/.spectral.yaml --fail-severity hint 2>&1
}

python3 tests/contract/linters/planted.py "$document" "$work/planted.json"
for linter in redocly spectral; do
    if "$linter" "$work/planted.json" >"$work/$linter"; then
        fail "$linter passed a document full of defects."
    fi
    python3 tests/contract/linters/planted.py --check "$work/$linter" "$linter"
done
if python3 -m openapi_spec_validator "$work/planted.json" >/dev/null 2>&1; then
    fail "The validator passed a document full of defects."
fi

say "validator of OpenAPI 3.1"
python3 -m openapi_spec_validator "$document"
say "first linter: redocly, its strict recommended rules"
redocly "$document"
say "second linter: spectral, its recommended rules and those of this contract"
spectral "$document"
say "lint: no findings"
