# Keeps the project's own Python environment, .venv; sourced by the scripts beside it.
#
#   prepare run     what a run of membrane needs
#   prepare test    that, and what the tests need
#   prepare bench   what a run needs, and what scripts/bench compares it with
#
# Nothing is installed while the fingerprint of the last installation is current.

root=$(cd "$(dirname "${BASH_SOURCE[0]}")/.." && pwd)
venv=$root/.venv
python=$venv/bin/python
constraints=$root/scripts/constraints.txt

prepare() {
    is_current "$1" || install_packages "$1"
    provide_libraries
}

is_current() {
    [[ -f $venv/ready-$1 && $(<"$venv/ready-$1") == "$(fingerprint)" ]]
}

# The folder counts as well: an environment does not survive being moved.
fingerprint() {
    { echo "$root" && cat "$root/pyproject.toml" "$constraints"; } | cksum
}

install_packages() {
    echo "Setting up $venv (a minute or two, once)" >&2
    make_environment
    pip_install setuptools
    case $1 in
        run) (cd "$root" && pip_install --no-build-isolation --editable .) ;;
        *) (cd "$root" && pip_install --no-build-isolation --editable ".[$1]") ;;
    esac
    fingerprint >"$venv/ready-run"
    fingerprint >"$venv/ready-$1"
}

make_environment() {
    "$python" -m pip --version >/dev/null 2>&1 && return
    python3 -c 'import sys; sys.exit(sys.version_info < (3, 11))' ||
        stop "membrane needs Python 3.11 or newer as python3."
    python3 -m venv --clear "$venv"
}

pip_install() {
    "$python" -m pip install --quiet --disable-pip-version-check --no-warn-script-location \
        --constraint "$constraints" "$@"
}

# gmsh comes with all but the system's graphics libraries, which it needs even to mesh.
provide_libraries() {
    local packages
    packages=$(missing_packages)
    [[ -n $packages ]] || return 0
    if [[ $(id -u) == 0 ]] && command -v apt-get >/dev/null; then
        apt_install "$packages"
        packages=$(missing_packages)
    fi
    [[ -z $packages ]] || stop "gmsh lacks system libraries; please run this line, then try again:
sudo apt-get update && sudo apt-get install --yes $packages"
}

missing_packages() {
    missing_libraries | debian_names | sort -u | paste --serial --delimiters=' '
}

missing_libraries() {
    command -v ldd >/dev/null || return 0
    ldd "$venv"/lib/libgmsh.so.* | sed -n 's/^[[:space:]]*\(.*\) => not found.*/\1/p'
}

# The Debian Policy Manual, section 8.1, names a package after the library that it holds.
debian_names() {
    sed -E -e 's/([0-9])\.so\./\1-/; s/\.so(\.|$)//; y/_/-/; s/(.*)/\L&/'
}

apt_install() {
    echo "Installing libraries that gmsh needs: $1" >&2
    export DEBIAN_FRONTEND=noninteractive DEBCONF_NOWARNINGS=yes
    apt-get update -qq
    xargs apt-get install -qq --yes --no-install-recommends <<<"$1" >/dev/null
}

stop() {
    echo "$@" >&2
    exit 1
}
