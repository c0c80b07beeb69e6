#!/bin/sh
# Pins every requirement file with the hashes of all its wheels, for CPython 3.11 to 3.14 on any platform.
# Run after changing a dependency in pyproject.toml or in one of the .in files; commit what changes.
set -eu
cd "$(dirname "$0")/.."
. deploy/environment.sh
find_python
lock_environment=.cache/lock
[ -x "$lock_environment/bin/uv" ] || {
    make_environment "$lock_environment"
    "$lock_environment/bin/pip" install -qq uv
}

lock() {
    output=$1
    shift
    "$lock_environment/bin/uv" pip compile --quiet --universal --python-version 3.11 --generate-hashes \
        --no-emit-index-url --no-header --no-annotate --output-file "$output" "$@"
    echo "$output: $(grep -c '==' "$output") packages"
}

lock deploy/requirements.txt pyproject.toml deploy/requirements.in --extra sheet
lock deploy/speed-requirements.txt deploy/speed-requirements.in
lock tests/tools-requirements.txt tests/tools-requirements.in
lock tests/node-requirements.txt tests/node-requirements.in
lock tests/requirements.txt pyproject.toml deploy/requirements.in tests/requirements.in --all-extras \
    --constraint deploy/requirements.txt
