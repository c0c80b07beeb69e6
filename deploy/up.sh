#!/bin/sh
# Starts the service on this machine and shows what it does: installs it, serves it on loopback, sends it the
# example design of the README and prints the answer for a person. Needs Python 3.11 or later, no more.
set -eu
cd "$(dirname "$0")/.."
. deploy/environment.sh

usage() {
    say "usage: sh deploy/up.sh [--once] [--port N]" \
        "" \
        "  --once     stop after the answer instead of serving until Ctrl-C" \
        "  --port N   serve on another port than 8000"
}

once=no
port=8000
while [ $# -gt 0 ]; do
    case "$1" in
    --once) once=yes ;;
    --port)
        shift
        port=${1:-}
        ;;
    --port=*) port=${1#--port=} ;;
    --help | -h)
        usage
        exit 0
        ;;
    *)
        usage >&2
        exit 2
        ;;
    esac
    shift
done
case "$port" in
'' | *[!0-9]*) fail "--port wants a number from 1 to 65535, not '$port'." ;;
esac
[ "$port" -ge 1 ] && [ "$port" -le 65535 ] || fail "--port wants a number from 1 to 65535, not $port."

unset PYTHONPATH PYTHONHOME
export PYTHONNOUSERSITE=1 PYTHONDONTWRITEBYTECODE=
find_python
"$python" deploy/first_design.py --port "$port" --free || exit 1

environment=.cache/service
install_pinned "$environment" deploy/requirements.txt

log=.cache/service.log
LOOPSLACK_BIND="127.0.0.1:$port" WEB_CONCURRENCY="${WEB_CONCURRENCY:-2}" \
    "$environment/bin/gunicorn" --config deploy/gunicorn.conf.py >"$log" 2>&1 &
server=$!

stop_server() {
    trap - INT TERM HUP EXIT
    kill -TERM "$server" 2>/dev/null || true
    wait "$server" 2>/dev/null || true
}
stopped_by_hand() {
    stop_server
    say "" "Stopped."
    exit 0
}
trap stop_server EXIT
trap stopped_by_hand INT TERM HUP

if ! "$environment/bin/python" deploy/first_design.py --port "$port" --server "$server"; then
    say "" "The last lines of the server's log, $log:" >&2
    tail -n 20 "$log" >&2
    exit 1
fi
[ "$once" = yes ] && exit 0

say "" "Serving on http://127.0.0.1:$port until Ctrl-C; the log is $log."
wait "$server" || true
fail "The server stopped by itself. The last lines of $log:
$(tail -n 20 "$log")"
