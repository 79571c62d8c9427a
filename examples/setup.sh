# Set-up shared by examples/run.sh and tests/run.sh: source it, then call
#   set_up NAME EXTRAS [TOOL=PACKAGE ...]
# NAME marks what is installed for whom, EXTRAS are optional-dependency groups of pyproject.toml
# ("" for none), each TOOL=PACKAGE is a program that is installed where apt is present and done
# without elsewhere. Sets $root and $venv. Asks nothing; does nothing when all is there.
# Fails by leaving the script, so it also works where the shell does not stop at an error by itself.
# Other folders and interpreters: TRIAGE_VENV=/some/folder PYTHON=python3.12 sh examples/run.sh

PATH=$PATH:/usr/sbin:/sbin
venv=${TRIAGE_VENV:-$root/.venv}

find_python() {
    for python in "${PYTHON:-python3}" python3.14 python3.13 python3.12 python3.11; do
        if "$python" -c 'import sys; sys.exit(sys.version_info < (3, 11))' 2>/dev/null; then
            return 0
        fi
    done
    echo "Python 3.11 or newer was not found. Install it, or name it: PYTHON=/path/to/python3" >&2
    exit 2
}

# Asks the loader itself, so that any way of installing the library counts.
has_library() {
    "$python" - "$@" 2>/dev/null <<'PY'
import ctypes, sys
for name in sys.argv[1:]:
    try:
        ctypes.CDLL(name)
    except OSError:
        continue
    sys.exit(0)
sys.exit(1)
PY
}

missing_packages() {
    needed=""
    has_library libpangoft2-1.0.so.0 libpangoft2-1.0.dylib ||
        needed="$needed libpango-1.0-0 libpangoft2-1.0-0"
    has_library libharfbuzz-subset.so.0 libharfbuzz-subset.dylib ||
        needed="$needed libharfbuzz-subset0"
    "$python" -c 'import ensurepip, venv' 2>/dev/null || needed="$needed python3-venv"
    ! command -v apt-get >/dev/null 2>&1 || [ -e /etc/ssl/certs/ca-certificates.crt ] ||
        needed="$needed ca-certificates"
}

missing_tools() {
    wanted=""
    for pair in "$@"; do
        command -v "${pair%%=*}" >/dev/null 2>&1 || wanted="$wanted ${pair#*=}"
    done
}

please_install() {
    echo "$1" >&2
    echo "Please install these system packages (Debian names), then start again:" >&2
    for package in $needed; do echo "    $package" >&2; done
    echo "They draw the text of the PDF reports; other systems call them pango and harfbuzz." >&2
    exit 2
}

apt() {
    if [ "$(id -u)" = 0 ]; then
        env DEBIAN_FRONTEND=noninteractive apt-get -qq "$@"
    else
        sudo -n env DEBIAN_FRONTEND=noninteractive apt-get -qq "$@"
    fi >/dev/null 2>"$apt_log" </dev/null
}

may_install() {
    command -v apt-get >/dev/null 2>&1 || return 1
    [ "$(id -u)" = 0 ] || sudo -n true 2>/dev/null
}

install_packages() {
    [ -n "$needed$wanted" ] || return 0
    if ! may_install; then
        [ -z "$needed" ] || please_install "Some system packages are missing and cannot be installed from here."
        echo "Going on without:$wanted" >&2
        return 0
    fi
    echo "Installing system packages:$needed$wanted"
    apt_log=$(mktemp)
    apt update || true
    if [ -n "$needed" ] && ! apt install -y --no-install-recommends $needed; then
        cat "$apt_log" >&2
        please_install "apt-get could not install them."
    fi
    [ -z "$wanted" ] || apt install -y --no-install-recommends $wanted ||
        echo "Going on without:$wanted" >&2
    rm -f "$apt_log"
}

make_venv() {
    if ! "$venv/bin/python" -c 'import pip' 2>/dev/null; then
        echo "Making a virtual environment in $venv"
        "$python" -m venv --clear "$venv" || exit 1
    fi
}

# pip with its words kept back unless it fails.
pip_into() {
    pip_python=$1 pip_log=$(mktemp)
    shift
    "$pip_python" -m pip install --no-input --disable-pip-version-check "$@" \
        >"$pip_log" 2>&1 </dev/null || {
        cat "$pip_log" >&2
        exit 1
    }
    rm -f "$pip_log"
}

install_project() {
    stamp=$venv/.set-up-for-$1
    state=$( (cat "$root/pyproject.toml"; echo "$2 $venv $root"; "$venv/bin/python" -VV) | cksum)
    if [ "$(cat "$stamp" 2>/dev/null)" != "$state" ]; then
        echo "Installing the program${2:+ and what its tests use} (once, about a minute)"
        pip_into "$venv/bin/python" -e "$root${2:+[$2]}"
        echo "$state" >"$stamp"
    fi
}

set_up() {
    name=$1 extras=$2
    shift 2
    find_python
    missing_packages
    missing_tools "$@"
    install_packages
    make_venv
    install_project "$name" "$extras"
}
