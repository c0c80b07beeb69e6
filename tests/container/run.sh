#!/bin/sh
# Builds the image, runs it the way it is meant to be run (no root, nothing to write to, no privileges), and calls it.
set -eu
cd "$(dirname "$0")/../.."
. tests/tools.sh
debian_tool mmdebstrap mmdebstrap
debian_tool buildah buildah
debian_tool podman podman
debian_tool runc runc
python_tools
CONTAINERS_CONF=$PWD/tests/container/containers.conf
export CONTAINERS_CONF

image=localhost/loopslack:tested
name=loopslack-tested-$$
sh deploy/image.sh "$image"

port=$(python -c 'import socket; s = socket.socket(); s.bind(("127.0.0.1", 0)); print(s.getsockname()[1])')
# The limits are those of compose.yaml; only address and network differ, and what a busy machine would trip over.
limits=$("$tests_python" tests/container/compose.py)
say "As compose.yaml has it: $limits"
# A list of options without blanks in them:
# shellcheck disable=SC2086
podman --log-level fatal run --detach --name "$name" --network host $limits \
    --env LOOPSLACK_BIND="127.0.0.1:$port" \
    --env LOOPSLACK_SHED_LAG_SECONDS=10 --env LOOPSLACK_DEADLINE_SECONDS=120 "$image" >/dev/null
trap 'podman --log-level fatal rm --force --time 1 "$name" >/dev/null 2>&1' EXIT INT TERM

# The tools' interpreter is first on the path: it has the schema of the bill of materials.
if ! python tests/container/smoke.py "$name" "$port"; then
    say "The container's log:"
    podman logs "$name" 2>&1 | tail -n 40
    exit 1
fi

say "The contract, fuzzed against the container:"
PATH="$(dirname "$tests_python"):$PATH" sh tests/live/fuzz.sh "http://127.0.0.1:$port" 5

began=$(date +%s)
podman --log-level fatal stop --time 20 "$name" >/dev/null
stopped=$(podman inspect --format '{{.State.ExitCode}}' "$name")
say "Stopped with exit code $stopped in $(($(date +%s) - began)) s."
[ "$stopped" = 0 ]
