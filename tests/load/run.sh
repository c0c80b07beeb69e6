#!/bin/sh
# Prints every figure of speed, memory and overload beside its bound: sh tests/load/run.sh [--short] [NAME...]
# Needs Python 3.11 or later and sets itself up; about five minutes on two cores, two with --short.
set -eu
cd "$(dirname "$0")/../.."
. deploy/environment.sh
find_python
install_pinned .cache/tests tests/requirements.txt
PYTHONPATH=tests exec .cache/tests/bin/python -m load.figures "$@"
