#!/bin/sh
# Lints the OpenAPI document with a validator of OpenAPI 3.1 and two independent linters. Zero findings, or exit 1.
#
#   sh tests/contract/lint.sh [DOCUMENT]        default: openapi/v1.yaml
#
# Needs Python with openapi-spec-validator (set PYTHON to choose one), Node.js 20 and npm. The linters are installed at
# the pinned versions of tests/contract/linters into LOOPSLACK_TOOLS (default: loopslack under the user's cache folder).
set -eu

here=$(CDPATH= cd -- "$(dirname -- "$0")" && pwd)
root=$(CDPATH= cd -- "$here/../.." && pwd)
document=${1:-$root/openapi/v1.yaml}
python=${PYTHON:-python3}
. "$here/tools.sh"

need_file "$document" "write it with: python -m loopslack.api.document"
need_python openapi_spec_validator "openapi-spec-validator"
linters=$(node_tools "$here/linters")

echo "validator of OpenAPI 3.1"
"$python" -m openapi_spec_validator "$document"
echo "first linter (redocly, strict recommended rules)"
REDOCLY_TELEMETRY=off REDOCLY_SUPPRESS_UPDATE_NOTICE=true "$linters/redocly" lint "$document" \
    --config "$root/openapi/redocly.yaml" --max-problems 200
echo "second linter (spectral, recommended rules and the rules of the house)"
"$linters/spectral" lint "$document" --ruleset "$root/openapi/.spectral.yaml" --fail-severity hint
echo "lint: no findings in ${document#"$root"/}"
