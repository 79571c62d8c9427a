#!/bin/sh
# Builds the source archive and the wheel, installs the wheel in an empty environment and writes a
# report from a folder that is not the checkout: finds files left out of the package.
# Usage: sh tests/wheel.sh
set -eu
root=$(cd "$(dirname "$0")/.." && pwd)
. "$root/examples/setup.sh"
set_up wheel build

work=$(mktemp -d)
trap 'rm -rf "$work"' EXIT
trap 'exit 1' HUP INT TERM

"$venv/bin/python" -m build --outdir "$work/dist" "$root" >"$work/build.log" 2>&1 </dev/null || {
    cat "$work/build.log" >&2
    exit 1
}
"$python" -m venv "$work/empty"
pip_into "$work/empty/bin/python" "$work"/dist/*.whl

mkdir "$work/elsewhere"
cp "$root/examples/site.yaml" "$work/elsewhere/"
set -- "$root"/examples/incidents/*.yaml
cp "$1" "$work/elsewhere/incident.yaml"
cd "$work/elsewhere"
unset PYTHONPATH

status=0
"$work/empty/bin/triage" report incident.yaml -o out --site site.yaml || status=$?
case $status in
    0 | 3) ;;
    *)
        echo "triage report from the wheel: exit status $status" >&2
        exit 1
        ;;
esac
for report in out/*.pdf; do
    [ "$(head -c 5 "$report")" = "%PDF-" ] || {
        echo "$report is not a PDF" >&2
        exit 1
    }
done
"$work/empty/bin/python" - "$work/empty" <<'PY'
import sys
import triage

assert triage.__file__.startswith(sys.argv[1]), f"imported from {triage.__file__}"
PY
echo "wheel installed and used from another folder"
