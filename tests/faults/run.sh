#!/bin/sh
# Does to a live service what happens to live services, and prints a line for each fault. About two minutes.
# Needs Linux, root for a filesystem of the service's own, and a C compiler for a clock of its own.
set -eu
cd "$(dirname "$0")/../.."
. tests/tools.sh
find_python
install_pinned .cache/tests tests/requirements.txt
debian_tool gcc gcc libc6-dev
debian_tool unshare util-linux
mkdir -p .cache/faults
gcc -O2 -Wall -Wextra -Werror -shared -fPIC -o .cache/faults/clock.so tests/faults/clock.c -ldl
exec "$tests_python" -m pytest tests/faults/test_faults.py tests/faults/test_sides.py "$@"
