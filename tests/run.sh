#!/bin/sh
# Everything this project checks about itself, in order of cost. Needs Python 3.11 or later and sets itself up.
#
#   sh tests/run.sh               what needs nothing else: format, types, floors, tests, contract, build
#   sh tests/run.sh --all         and what needs more tools: linters, clients, browser, container, faults, figures
#   sh tests/run.sh NAME...       only the named stages
#
# With --all a missing tool is installed where this user may install it, and named as a failure where not. Nothing
# is ever passed over in silence: the last lines say which stages ran and how many tests passed and failed.
set -u
cd "$(dirname "$0")/.." || exit 1
. deploy/environment.sh

basic_stages="format lint types floors tests connections contract build"
further_stages="shell deployment remedies extremes contract-lint clients fuzz-live browser faults load container"

stage_format() { ruff format --check --quiet . || ruff format --diff --quiet .; }
stage_lint() { ruff check --quiet .; }
stage_types() { mypy; }
stage_floors() { lint-imports; }
stage_tests() {
    run_pytest tests --numprocesses auto --dist worksteal --durations 12 \
        --cov --cov-report= --cov-report=json:.cache/coverage.json &&
        python tests/coverage_of_core.py .cache/coverage.json
}
stage_connections() { run_pytest tests/faults/test_connections.py; }
stage_contract() { python -m loopslack.api.document --check; }
stage_build() { sh tests/build.sh; }

stage_shell() { sh tests/deployment/shell.sh; }
stage_deployment() { sh tests/deployment/run.sh; }
stage_remedies() { python tests/calc/remedies/thousand.py; }
stage_extremes() { python tests/calc/extreme/hunt.py 0 2000; }
stage_contract_lint() { with_node sh tests/contract/lint.sh; }
stage_clients() { with_node sh tests/contract/clients/run.sh; }
stage_fuzz_live() { python tests/with_service.py sh tests/live/fuzz.sh URL; }
stage_browser() { with_node sh tests/browser/run.sh; }
stage_faults() { sh tests/faults/run.sh; }
stage_load() { sh tests/load/run.sh --short; }
stage_container() { sh tests/container/run.sh; }

# A pytest run whose counts are added to those of the last line. A skipped test counts as failed here: what a
# stage cannot test on this machine is for the stage to install or to name.
run_pytest() {
    report=.cache/reports/$stage.xml
    rm -f "$report"
    python -m pytest --junit-xml="$report" "$@"
    pytest_status=$?
    [ -s "$report" ] || {
        say "" "pytest ended without a report, with exit code $pytest_status."
        return 1
    }
    python tests/count.py "$report" >.cache/reports/counts || return 1
    read -r more_passed more_failed more_skipped <.cache/reports/counts
    passed=$((passed + more_passed))
    failed=$((failed + more_failed))
    [ "$more_skipped" -eq 0 ] || say "" "$more_skipped tests were skipped, which counts as a failure here."
    [ "$pytest_status" -eq 0 ] && [ "$more_skipped" -eq 0 ]
}

# A script that needs Node.js, with the tests' own Python first on the path all the same.
with_node() {
    (
        . tests/tools.sh
        node_tool
        PATH="$PWD/.cache/tests/bin:$PATH" "$@"
    )
}

run_stage() {
    stage=$1
    say "" "== $stage"
    began=$(date +%s)
    before=$passed+$failed
    if "stage_$(printf %s "$stage" | tr - _)"; then
        outcome=passed
    else
        outcome=FAILED
        failed_stages="$failed_stages $stage"
    fi
    # A stage without tests of its own counts as one, and so does a failure that no test has counted.
    if [ "$outcome" = passed ]; then
        [ "$before" = "$passed+$failed" ] && passed=$((passed + 1))
    else
        failed=$((failed + 1))
    fi
    seconds=$(($(date +%s) - began))
    say "-- $stage: $outcome in $seconds s"
    ran="$ran $stage ($seconds s)"
}

case "${1:-}" in
--all) stages="$basic_stages $further_stages" ;;
--help | -h)
    sed -n '2,9s/^# \{0,1\}//p' "$0"
    say "" "stages: $basic_stages" "with --all: $further_stages"
    exit 0
    ;;
'') stages=$basic_stages ;;
*) stages=$* ;;
esac
for stage in $stages; do
    case " $basic_stages $further_stages " in
    *" $stage "*) ;;
    *) fail "There is no stage '$stage'. Stages: $basic_stages $further_stages" ;;
    esac
done

unset PYTHONPATH PYTHONHOME
export PYTHONNOUSERSITE=1
all_began=$(date +%s)
find_python
install_pinned .cache/tests tests/requirements.txt
PATH="$PWD/.cache/tests/bin:$PATH"
export PATH
mkdir -p .cache/reports
passed=0 failed=0 ran="" failed_stages=""
for name in $stages; do
    run_stage "$name"
done

say "" "Ran in $(($(date +%s) - all_began)) s with $("$python" --version):$ran."
[ -z "$failed_stages" ] || say "Stages that failed:$failed_stages."
say "$passed passed, $failed failed"
[ -z "$failed_stages" ] && [ "$failed" -eq 0 ]
