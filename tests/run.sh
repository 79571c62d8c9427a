#!/bin/sh
# All tests. Does all set-up by itself. Usage: sh tests/run.sh [pytest arguments]
set -eu
root=$(cd "$(dirname "$0")/.." && pwd)
. "$root/examples/setup.sh"
set_up tests test ngspice=ngspice pdftotext=poppler-utils

cd "$root"
export LC_ALL=C.UTF-8
exec "$venv/bin/python" -m pytest -q -n 2 "$@"
