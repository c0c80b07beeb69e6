# Tools the contract checks need beside Python, sourced by their scripts. A missing one ends the script by its name.

tools_folder=${LOOPSLACK_TOOLS:-${XDG_CACHE_HOME:-$HOME/.cache}/loopslack}

missing() {
    echo "$(basename -- "$0"): missing tool: $1" >&2
    exit 1
}

need() { # need COMMAND HINT
    command -v "$1" >/dev/null 2>&1 || missing "$1 ($2)"
}

need_file() { # need_file FILE HINT
    [ -s "$1" ] || { echo "$(basename -- "$0"): $1 is not there; $2" >&2; exit 1; }
}

need_python() { # need_python MODULE PACKAGE
    "$python" -c "import $1" 2>/dev/null || missing "the Python package $2 for $python"
}

# Installs the pinned packages of a folder once and prints the folder of their commands.
node_tools() { # node_tools FOLDER_WITH_PACKAGE_LOCK
    need node "Node.js 20 or later"
    need npm "comes with Node.js"
    stamp=$(cat "$1/package.json" "$1/package-lock.json" | cksum | tr ' ' -)
    place=$tools_folder/$(basename -- "$1")-$stamp
    if [ ! -e "$place/installed" ]; then
        mkdir -p "$place"
        cp "$1/package.json" "$1/package-lock.json" "$place/"
        (cd "$place" && npm ci --ignore-scripts --no-audit --no-fund --loglevel error >&2) ||
            missing "the packages of $1 (npm could not install them)"
        : >"$place/installed"
    fi
    echo "$place/node_modules/.bin"
}

# Makes a Python environment with the hash-pinned packages of a requirements file once and prints its interpreter.
python_tools() { # python_tools REQUIREMENTS_FILE NAME
    place=$tools_folder/$2-$(cksum <"$1" | tr ' ' -)
    if [ ! -e "$place/installed" ]; then
        "$python" -m venv "$place" >&2 || missing "venv for $python"
        "$place/bin/python" -m pip install --quiet --disable-pip-version-check --require-hashes -r "$1" >&2 ||
            missing "the packages of $1 (pip could not install them)"
        : >"$place/installed"
    fi
    echo "$place/bin/python"
}
