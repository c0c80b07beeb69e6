#!/bin/sh
# Every file of deploy/ that no other stage runs, held against the schema or the linter of what will read it.
set -eu
cd "$(dirname "$0")/../.."
. tests/tools.sh
python_tools
debian_tool systemd-analyze systemd

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
