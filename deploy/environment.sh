# Sourced by the scripts that need a Python environment: finds an interpreter, makes the environment, installs
# pinned requirements into it, and knows when all that has been done before. Needs Python 3.11 or later, no more.

# say LINE...
say() {
    printf '%s\n' "$@"
}

# fail LINE...
fail() {
    printf '%s\n' "" "$@" >&2
    exit 1
}

# Sets `python` to $PYTHON, or to the first interpreter on the path that is new enough.
find_python() {
    for candidate in ${PYTHON:-python3 python3.14 python3.13 python3.12 python3.11 python}; do
        if "$candidate" -c 'import sys; sys.exit(not (3, 11) <= sys.version_info[:2] <= (3, 14))' 2>/dev/null; then
            python=$candidate
            return
        fi
    done
    fail "Python 3.11, 3.12, 3.13 or 3.14 is needed, and ${PYTHON:-no python3 on the path} is none of them." \
        "Install one, or name it: PYTHON=/path/to/python3 sh $0"
}

# make_environment FOLDER: an empty environment; says what to install if Python came without the means.
make_environment() {
    rm -rf "$1"
    mkdir -p "$(dirname "$1")"
    if ! output=$("$python" -m venv "$1" 2>&1); then
        rm -rf "$1"
        case "$output" in
        *ensurepip* | *"No module named venv"*)
            fail "Python's venv module is not installed. On Debian and Ubuntu: apt-get install python3-venv"
            ;;
        esac
        fail "The environment $1 could not be made: $output"
    fi
}

# install_pinned FOLDER FILE: an environment that holds exactly what FILE pins, and this package from its source.
# Done once: a stamp remembers the interpreter, the file and the package's own metadata.
install_pinned() {
    stamp=$("$python" -c '
import hashlib, pathlib, sys
digest = hashlib.sha256(sys.version.encode())
for name in sys.argv[1:]:
    digest.update(pathlib.Path(name).read_bytes())
print(digest.hexdigest())' "$2" pyproject.toml)
    [ "$(cat "$1/stamp" 2>/dev/null)" = "$stamp" ] && return
    say "Installing $(grep -c '==' "$2") pinned packages into $1; the first time takes about a minute."
    make_environment "$1"
    PIP_DISABLE_PIP_VERSION_CHECK=1 "$1/bin/python" -m pip install -qq --no-input --require-hashes \
        --only-binary :all: --requirement "$2" || fail "The packages pinned in $2 could not be installed."
    PIP_DISABLE_PIP_VERSION_CHECK=1 "$1/bin/python" -m pip install -qq --no-input --no-deps --no-index \
        --no-build-isolation --editable . || fail "The package itself could not be installed."
    printf '%s\n' "$stamp" >"$1/stamp"
}
