#!/bin/sh
# Every file of deploy/ that no other stage runs, held against the schema or the linter of what will read it.
set -eu
cd "$(dirname "$0")/../.."
. tests/tools.sh
python_tools
debian_tool systemd-analyze systemd
debian_tool strace strace
debian_tool unshare util-linux

work=.cache/deployment
rm -rf "$work"
mkdir -p "$work"

hadolint deploy/Containerfile
say "The Containerfile is clean."

check-jsonschema --builtin-schema vendor.compose-spec deploy/compose.yaml

for folder in base overlays/example; do
    kubectl kustomize "deploy/kubernetes/$folder" >"$work/$(basename "$folder").yaml"
done
for version in 1.33 1.37; do
    kubernetes-validate --strict --kubernetes-version "$version" "$work/base.yaml" "$work/example.yaml"
done
"$tests_python" tests/deployment/manifests.py "$work/base.yaml" "$work/example.yaml"

# The unit names a program that only exists where the service is installed.
sed 's#/opt/loopslack/bin/gunicorn#/bin/true#' deploy/systemd/loopslack.service >"$work/loopslack.service"
systemd-analyze verify "$work/loopslack.service"
systemd-analyze security --offline=true --threshold=20 "$work/loopslack.service" | tail -n 1

"$tests_python" -m gunicorn --check-config --config deploy/gunicorn.conf.py
say "gunicorn accepts its configuration."

"$tests_python" tests/deployment/pins.py
cmp deploy/.containerignore deploy/Containerfile.dockerignore
say "Both names of the list of what enters a build have the same content."

port=$("$tests_python" -c 'import socket; s = socket.socket(); s.bind(("127.0.0.1", 0)); print(s.getsockname()[1])')
sh deploy/up.sh --once --port "$port" >"$work/up.txt"
grep --quiet "HOLDS" "$work/up.txt"
say "up.sh installs, starts, asks and stops."

# In the environment that up.sh has made: what the requirement files pin, and nothing else.
PYTHONPATH=tests "$tests_python" tests/deployment/unit.py deploy/systemd/loopslack.service "$PWD/.cache/service/bin" \
    2>"$work/unit.log" || { tail -n 20 "$work/unit.log"; exit 1; }
