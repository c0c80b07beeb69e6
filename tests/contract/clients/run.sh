#!/bin/sh
# Generates the four clients from the OpenAPI document with the settings of openapi/generators, compiles them, and lets
# the TypeScript, Python and Kotlin ones work against a running service: a design, a batch, a refused question, unset
# optional members sent as null. Swift is checked for syntax. The first calls shown in the documentation are part of it.
#
#   sh tests/contract/clients/run.sh URL [DOCUMENT]      for instance http://127.0.0.1:8000 openapi/v1.json
#
# Needs Python (set PYTHON to choose one), Java 17, Node.js 20 and npm. Everything else is installed at pinned versions
# into LOOPSLACK_TOOLS (default: loopslack under the user's cache folder). About two minutes on two cores.
set -eu

here=$(CDPATH= cd -- "$(dirname -- "$0")" && pwd)
root=$(CDPATH= cd -- "$here/../../.." && pwd)
url=${1:?usage: run.sh URL [DOCUMENT]}
document=${2:-$root/openapi/v1.json}
python=${PYTHON:-python3}
. "$here/../tools.sh"

need_file "$document" "write it with: python -m loopslack.api.document"
need java "a Java runtime, 17 or later"
node_bin=$(node_tools "$here")
tools_python=$(python_tools "$here/requirements.txt" clients-python)
"$python" - "$url/livez" <<'END' || { echo "run.sh: no service answers at $url" >&2; exit 1; }
import sys, urllib.request
urllib.request.urlopen(sys.argv[1], timeout=5).read()
END

work=$(mktemp -d)
trap 'rm -rf "$work"' EXIT
cp "$document" "$work/v1.json"
cp -r "$root/openapi/generators" "$work/generators"
JAVA_TOOL_OPTIONS="-Xmx1g -XX:+UseSerialGC"
export JAVA_TOOL_OPTIONS

generate() { # generate NAME
    "$(dirname -- "$tools_python")/openapi-generator-cli" generate -c "$work/generators/$1.yaml" -i "$work/v1.json" \
        -o "$work/$1" >"$work/$1.log" 2>&1 || { cat "$work/$1.log" >&2; exit 1; }
    echo "$1: generated"
}

# TypeScript: types by openapi-typescript, calls by openapi-fetch.
(cd "$work/generators" && "$node_bin/openapi-typescript" --redocly typescript.yaml >"$work/typescript.log" 2>&1) ||
    { cat "$work/typescript.log" >&2; exit 1; }
mkdir "$work/typescript"
mv "$work/generators/loopslack.ts" "$work/typescript/"
cp "$work/generators/first-call.ts" "$here/typescript/client.ts" "$work/typescript/"
echo '{"type": "module"}' >"$work/typescript/package.json"
ln -s "$node_bin/.." "$work/typescript/node_modules"
(cd "$work/typescript" && "$node_bin/tsc" --strict --noUncheckedIndexedAccess --target es2022 --module nodenext \
    --moduleResolution nodenext --lib es2022,dom,dom.iterable --types node --typeRoots node_modules/@types \
    --outDir compiled first-call.ts client.ts)
ln -s "$node_bin/.." "$work/typescript/compiled/node_modules"
echo '{"type": "module"}' >"$work/typescript/compiled/package.json"
echo "typescript: compiled (strict, no unchecked indexed access)"
node "$work/typescript/compiled/first-call.js" "$url"
node "$work/typescript/compiled/client.js" "$url"

generate python
PYTHONPATH="$work/python" "$tools_python" "$work/generators/first_call.py" "$url"
PYTHONPATH="$work/python" "$tools_python" "$here/python/client.py" "$url"

# Kotlin: everything generated but the set-up of the HTTP library, for which Libraries.kt stands in.
generate kotlin
kotlin=$node_bin/../kotlin-compiler
jars=$("$tools_python" -c 'import run_kotlin_kernel, os; print(os.path.join(list(run_kotlin_kernel.__path__)[0], "jars"))')
path=$jars/kotlinx-serialization-core-jvm-1.9.0.jar:$jars/kotlinx-serialization-json-jvm-1.9.0.jar
path=$path:$kotlin/lib/kotlinx-coroutines-core-jvm.jar
source=$work/kotlin/src/main/kotlin/loopslack/client
rm "$source/infrastructure/ApiClient.kt" "$source/infrastructure/ResponseExt.kt"
JAVA_TOOL_OPTIONS="-Xmx2g -XX:+UseSerialGC" java -cp "$kotlin/lib/*" org.jetbrains.kotlin.cli.jvm.K2JVMCompiler \
    -kotlin-home "$kotlin" -nowarn -Xplugin="$kotlin/lib/kotlinx-serialization-compiler-plugin.jar" -cp "$path" \
    -d "$work/kotlin-classes" "$source" "$here/kotlin" "$work/generators/first-call.kt" >"$work/kotlinc.log" 2>&1 ||
    { cat "$work/kotlinc.log" >&2; exit 1; }
echo "kotlin: compiled"
for main in First_callKt ClientKt; do
    JAVA_TOOL_OPTIONS= java -cp "$work/kotlin-classes:$path:$kotlin/lib/kotlin-stdlib.jar" "$main" "$url"
done

generate swift
"$tools_python" "$here/swift_syntax.py" "$work/swift" "$work/generators/first-call.swift"
echo "clients: TypeScript, Python and Kotlin worked against $url; Swift is sound in syntax"
