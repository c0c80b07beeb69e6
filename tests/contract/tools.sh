# Sourced at the top of the repository by the scripts of this folder: tools of Node.js and Java, Python packages that
# only clients need, and a service to work against. Versions are pinned; a tool that cannot be had is named.
. tests/tools.sh

contract_tools=${CONTRACT_TOOLS:-$PWD/.cache/contract}
export JAVA_TOOL_OPTIONS="-Xmx1g -XX:+UseSerialGC"

# document_at FILE: ends the script if the document has not been written.
document_at() {
    [ -s "$1" ] || fail "$1 is not there; write it with: python -m loopslack.api.document"
}

# node_tools FOLDER: installs the packages pinned in the folder once; prints the folder of their commands.
node_tools() {
    debian_tool node nodejs >&2
    debian_tool npm npm >&2
    node -e 'process.exit(Number(process.versions.node.split(".")[0]) < 20 ? 1 : 0)' ||
        fail "Missing tool: Node.js 20 or later; this is $(node --version)."
    place=$contract_tools/$(basename "$1")-$(cat "$1/package.json" "$1/package-lock.json" | cksum | tr ' ' -)
    if [ ! -e "$place/installed" ]; then
        rm -rf "$place"
        mkdir -p "$place"
        cp "$1/package.json" "$1/package-lock.json" "$place/"
        (cd "$place" && npm ci --ignore-scripts --no-audit --no-fund --loglevel error >&2) ||
            fail "Missing tools: the packages pinned in $1/package-lock.json could not be installed."
        : >"$place/installed"
    fi
    printf '%s\n' "$place/node_modules/.bin"
}

# client_python FILE: an environment with exactly the packages pinned in the file; prints its interpreter.
client_python() {
    find_python
    place=$contract_tools/python-$(cksum <"$1" | tr ' ' -)
    if [ ! -e "$place/installed" ]; then
        make_environment "$place"
        "$place/bin/python" -m pip install --quiet --no-input --disable-pip-version-check --require-hashes --no-deps \
            --requirement "$1" >&2 || fail "Missing tools: the packages pinned in $1 could not be installed."
        : >"$place/installed"
    fi
    printf '%s\n' "$place/bin/python"
}

# start_service: serves the checked-out code on a free loopback port until the script ends; sets `url`.
start_service() {
    port=$(python3 -c 'import socket; s = socket.socket(); s.bind(("127.0.0.1", 0)); print(s.getsockname()[1])')
    url=http://127.0.0.1:$port
    service_log=$(mktemp)
    # One caller after another on a busy machine is no overload, so the service is not to shed here.
    LOOPSLACK_SHED_LAG_SECONDS=10 LOOPSLACK_BIND=127.0.0.1:$port WEB_CONCURRENCY=${WEB_CONCURRENCY:-1} \
        python3 -m gunicorn --config deploy/gunicorn.conf.py >"$service_log" 2>&1 &
    service_process=$!
    python3 - "$url/livez" "$service_process" <<'END' || { cat "$service_log" >&2; fail "The service did not start."; }
import os, sys, time, urllib.request
for _ in range(100):
    try:
        os.kill(int(sys.argv[2]), 0)
        urllib.request.urlopen(sys.argv[1], timeout=5).read()
        sys.exit(0)
    except ProcessLookupError:
        break
    except OSError:
        time.sleep(0.2)
sys.exit(1)
END
}

# stop_service: ends what `start_service` began, if it did.
stop_service() {
    [ -z "${service_process:-}" ] || kill "$service_process" 2>/dev/null || true
    rm -f "${service_log:-}"
}
