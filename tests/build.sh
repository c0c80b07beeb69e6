#!/bin/sh
# Builds the source archive and, from it, the wheel; installs the wheel alone and lets the service answer from it, so
# that a data file left out of the package is found here and not by a user.
set -eu
rm -rf .cache/dist .cache/wheel
python -m build --no-isolation --outdir .cache/dist . >.cache/reports/build.log 2>&1 || {
    cat .cache/reports/build.log
    exit 1
}
python -m pip install -qq --no-deps --no-index --no-compile --target .cache/wheel .cache/dist/*.whl
cd .cache/wheel
LOOPSLACK_ACCESS_LOG=false PYTHONPATH=$PWD python ../../tests/answer_from_wheel.py
