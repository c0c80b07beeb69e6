# Sourced by the stages that need more than Python: gets a tool where this user may, and names it where not.
. deploy/environment.sh

# The interpreter of the tests' own environment, which run.sh has made; the tools' environments have another. Not used
# here but by the stages that source this:
# shellcheck disable=SC2034
tests_python=$PWD/.cache/tests/bin/python

# debian_tool COMMAND PACKAGE...: the command, installed by the system's package manager if it is missing.
debian_tool() {
    command=$1
    shift
    command -v "$command" >/dev/null 2>&1 && return
    if [ "$(id -u)" = 0 ] && command -v apt-get >/dev/null 2>&1; then
        if [ -z "${package_lists_are_new:-}" ]; then
            apt-get update -qq >/dev/null 2>&1 || say "The package lists could not be brought up to date."
            package_lists_are_new=yes
        fi
        DEBIAN_FRONTEND=noninteractive apt-get install -qq -y --no-install-recommends "$@" >/dev/null 2>&1 || true
    fi
    command -v "$command" >/dev/null 2>&1 ||
        fail "Missing tool: $command. It could not be installed; on Debian it comes with: $*"
}

# pinned_tools FOLDER FILE: the pinned packages of FILE in an environment of their own, first on the path.
pinned_tools() {
    find_python
    stamp=$(cksum <"$2")
    if [ "$(cat "$1/stamp" 2>/dev/null)" != "$stamp" ]; then
        make_environment "$1"
        PIP_DISABLE_PIP_VERSION_CHECK=1 "$1/bin/python" -m pip install -qq --no-input --require-hashes \
            --requirement "$2" || fail "Missing tools: the packages pinned in $2 could not be installed."
        printf '%s\n' "$stamp" >"$1/stamp"
    fi
    PATH="$PWD/$1/bin:$PATH"
    export PATH
}

# python_tools: the tools that come as Python packages.
python_tools() {
    pinned_tools .cache/tools tests/tools-requirements.txt
}

# node_tool: Node.js 20 or later with npm; where the system has none, the one that comes as a Python package.
node_tool() {
    if command -v npm >/dev/null 2>&1 && node -e 'process.exit(parseInt(process.versions.node) < 20)' 2>/dev/null; then
        return
    fi
    pinned_tools .cache/node tests/node-requirements.txt
}
