#!/bin/sh
# The main job on invented incidents: check the records, assess them, write the PDF reports.
# Does all set-up by itself. Usage: sh examples/run.sh
set -eu
root=$(cd "$(dirname "$0")/.." && pwd)
. "$root/examples/setup.sh"
set_up run ""

cd "$root"
out=examples/out
site=examples/site.yaml
set -- examples/incidents/*.yaml
mkdir -p "$out"
rm -f "$out"/*.pdf

# Exit status 3 means: done, and something must be isolated or taken out of use. Not a failure here.
run() {
    status=0
    "$venv/bin/triage" "$@" || status=$?
    case $status in
        0 | 3) ;;
        *)
            echo "triage $1 stopped with exit status $status; its message is above." >&2
            exit "$status"
            ;;
    esac
}

echo "Checking $# incident records"
run check "$@" >"$out/check.txt"
echo "Assessing them"
run assess "$@" --site "$site" >"$out/assessments.txt"
echo "Writing the reports"
run report "$@" -o "$out" --site "$site" >"$out/reports.txt"
run log examples/logs/or6-air.csv --record examples/incidents/or6-isolated-first-fault.yaml \
    --site "$site" --date-order day-first >"$out/or6-air.txt"

echo
echo "Done. The reports are in $root/$out:"
for report in "$out"/*.pdf; do echo "    ${report##*/}"; done
echo "The same assessments as text: $root/$out/assessments.txt"
echo "A humidity log read at the time of an event: $root/$out/or6-air.txt"
echo "Values to confirm, if any: $root/$out/check.txt"
