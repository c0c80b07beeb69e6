#!/bin/sh
# Lints the OpenAPI document with a validator of OpenAPI 3.1 and two independent linters: zero findings, or exit 1.
#
#   sh tests/contract/lint.sh [DOCUMENT]        default: openapi/v1.yaml
#
# Needs Python on the path with openapi-spec-validator, as tests/run.sh sets it up, and Node.js 20 with npm. The linters
# are installed at the versions pinned in tests/contract/linters.
set -eu
document=$(realpath "${1:-$(dirname "$0")/../../openapi/v1.yaml}")
cd "$(dirname "$0")/../.."
. tests/contract/tools.sh

document_at "$document"
python3 -c 'import openapi_spec_validator' 2>/dev/null || fail "Missing tool: the Python package openapi-spec-validator."
linters=$(node_tools tests/contract/linters)

say "validator of OpenAPI 3.1"
python3 -m openapi_spec_validator "$document"
say "first linter: redocly, its strict recommended rules"
REDOCLY_TELEMETRY=off REDOCLY_SUPPRESS_UPDATE_NOTICE=true "$linters/redocly" lint "$document" \
    --config openapi/redocly.yaml --max-problems 200
say "second linter: spectral, its recommended rules and those of this contract"
"$linters/spectral" lint "$document" --ruleset openapi/.spectral.yaml --fail-severity hint
say "lint: no findings"
