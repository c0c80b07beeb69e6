#!/bin/sh
# Every shell script of the repository, read by shellcheck.
set -eu
cd "$(dirname "$0")/../.."
. tests/tools.sh
python_tools
debian_tool git git
scripts=$(git ls-files --cached --others --exclude-standard -- '*.sh' .ci/run)
# A list of paths without blanks; `NAME= command` sets an empty variable for that command and is meant.
# shellcheck disable=SC2086
shellcheck --severity=warning --exclude=SC1007 --shell=sh --external-sources --source-path=. $scripts
say "$(printf '%s\n' $scripts | wc -l) scripts are clean."
