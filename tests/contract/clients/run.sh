#!/bin/sh
# Generates the four clients from the OpenAPI document with the settings of openapi/generators, compiles them, and lets
# the TypeScript, Python and Kotlin ones work against the running service: a design, a batch, a refused question, unset
# optional members sent as null. Swift is checked for syntax. The first calls shown in the documentation are part of it.
#
#   sh tests/contract/clients/run.sh [URL [DOCUMENT]]      without a URL it starts the service itself
#
# Needs Python on the path with the service installed, as tests/run.sh sets it up, Java 17 and Node.js 20 with npm.
# Everything else is installed at the versions pinned beside this file. About two minutes on two cores.
set -eu
cd "$(dirname "$0")/../../.."
. tests/contract/tools.sh

here=$PWD/tests/contract/clients
url=${1:-}
document=${2:-openapi/v1.json}
document_at "$document"
debian_tool java default-jre-headless
node_bin=$(node_tools "$here")
tools_python=$(client_python "$here/requirements.txt")

work=$(mktemp -d)
trap 'stop_service; rm -rf "$work"' EXIT
[ -n "$url" ] || start_service
cp "$document" "$work/v1.json"
cp -r openapi/generators "$work/generators"

generate() { # generate NAME
    "$(dirname "$tools_python")/openapi-generator-cli" generate -c "$work/generators/$1.yaml" -i "$work/v1.json" \
        -o "$work/$1" >"$work/$1.log" 2>&1 || { cat "$work/$1.log" >&2; fail "$1 could not be generated."; }
    say "$1: generated"
}

# TypeScript: types by openapi-typescript, calls by openapi-fetch.
(cd "$work/generators" && "$node_bin/openapi-typescript" --redocly typescript.yaml >"$work/typescript.log" 2>&1) ||
    { cat "$work/typescript.log" >&2; exit 1; }
mkdir "$work/typescript"
mv "$work/generators/loopslack.ts" "$work/typescript/"
cp "$work/generators/first-call.ts" "$here/typescript/client.ts" "$work/typescript/"
say '{"type": "module"}' >"$work/typescript/package.json"
ln -s "$node_bin/.." "$work/typescript/node_modules"
(cd "$work/typescript" && "$node_bin/tsc" --strict --noUncheckedIndexedAccess --target es2022 --module nodenext \
    --moduleResolution nodenext --lib es2022,dom,dom.iterable --types node --typeRoots node_modules/@types \
    --outDir compiled first-call.ts client.ts)
ln -s "$node_bin/.." "$work/typescript/compiled/node_modules"
say '{"type": "module"}' >"$work/typescript/compiled/package.json"
say "typescript: compiled (strict, no unchecked indexed access)"
node "$work/typescript/compiled/first-call.js" "$url"
node "$work/typescript/compiled/client.js" "$url" "$PWD/openapi/examples"

generate python
PYTHONPATH="$work/python" "$tools_python" "$work/generators/first_call.py" "$url"
PYTHONPATH="$work/python" "$tools_python" "$here/python/client.py" "$url" "$PWD/openapi/examples"

# Kotlin: everything generated but the set-up of the HTTP library, for which Libraries.kt stands in, and what would put
# a token into its requests.
generate kotlin
kotlin=$node_bin/../kotlin-compiler
jars=$("$tools_python" -c 'import run_kotlin_kernel, os; print(os.path.join(list(run_kotlin_kernel.__path__)[0], "jars"))')
path=$jars/kotlinx-serialization-core-jvm-1.9.0.jar:$jars/kotlinx-serialization-json-jvm-1.9.0.jar
path=$path:$kotlin/lib/kotlinx-coroutines-core-jvm.jar
source=$work/kotlin/src/main/kotlin/loopslack/client
rm "$source/infrastructure/ApiClient.kt" "$source/infrastructure/ResponseExt.kt" "$source/auth/HttpBearerAuth.kt"
JAVA_TOOL_OPTIONS="-Xmx2g -XX:+UseSerialGC" java -cp "$kotlin/lib/*" org.jetbrains.kotlin.cli.jvm.K2JVMCompiler \
    -kotlin-home "$kotlin" -nowarn -Xplugin="$kotlin/lib/kotlinx-serialization-compiler-plugin.jar" -cp "$path" \
    -d "$work/kotlin-classes" "$source" "$here/kotlin" "$work/generators/FirstCall.kt" >"$work/kotlinc.log" 2>&1 ||
    { cat "$work/kotlinc.log" >&2; exit 1; }
say "kotlin: compiled"
for main in FirstCallKt ClientKt; do
    env -u JAVA_TOOL_OPTIONS java -cp "$work/kotlin-classes:$path:$kotlin/lib/kotlin-stdlib.jar" "$main" "$url" "$PWD/openapi/examples"
done

generate swift
"$tools_python" "$here/swift_syntax.py" "$work/swift" "$work/generators/FirstCall.swift"
say "clients: TypeScript, Python and Kotlin worked against $url; Swift is sound in syntax"
