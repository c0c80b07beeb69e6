#!/bin/sh
# Tests the pages of the service in a headless Chromium that reaches the service and nothing else.
#
#   sh tests/browser/run.sh [URL]      without a URL it starts the service itself, on loopback
#
# Every file *.mjs of this folder is run that exports a default async function; it gets a browser context of its own and
# the address of the service: `export default async function (context, url) {}`. What it throws is a failure, and so is
# a request to any other host, an error or warning on the console or an exception in a page. A file may also export
# `options` of its context and the `seconds` it may take. A test that makes the service refuse says so beforehand,
# `context.expectedRefusals = [422]`, since the browser writes such answers to the console by itself.
# FILTER=name runs the files whose name has it. Screenshots are kept in .cache/browser.
#
# Needs Python on the path with the service installed, as tests/run.sh sets it up, Node.js 20 with npm, Chromium, and Poppler
# and qpdf for the PDFs.
# What is missing is installed where this user may, and named as a failure where not.
set -eu
cd "$(dirname "$0")/../.."
. tests/contract/tools.sh

trap stop_service EXIT
url=${1:-}
[ -n "$url" ] || start_service # first, since the next line may put another Python on the path
node_tool
debian_tool chromium chromium
debian_tool pdftotext poppler-utils
debian_tool qpdf qpdf
tools=$(node_tools tests/browser)
BROWSER_TOOLS=$(dirname "$tools") CHROMIUM=$(command -v chromium) SCREENSHOTS=$PWD/.cache/browser \
    node tests/browser/support/runner.mjs "$url"
