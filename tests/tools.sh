# Sourced by the stages that need more than Python: gets a tool where this user may, and names it where not.
. deploy/environment.sh

tools_environment=.cache/tools

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

# python_tools: the pinned tools that come as Python packages, in an environment of their own on the path.
python_tools() {
    find_python
    stamp=$(cksum <tests/tools-requirements.txt)
    if [ "$(cat "$tools_environment/stamp" 2>/dev/null)" != "$stamp" ]; then
        make_environment "$tools_environment"
        PIP_DISABLE_PIP_VERSION_CHECK=1 "$tools_environment/bin/python" -m pip install --quiet --no-input \
            --require-hashes --requirement tests/tools-requirements.txt ||
            fail "Missing tools: the packages pinned in tests/tools-requirements.txt could not be installed."
        printf '%s\n' "$stamp" >"$tools_environment/stamp"
    fi
    PATH="$PWD/$tools_environment/bin:$PATH"
    export PATH
}
