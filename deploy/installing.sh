# Sourced by deploy/serve and deploy/check: bring in what is missing, leave alone what is there.
# shellcheck shell=sh
# Expects $root, the folder of the clone.

# What Python's wheels expect of a bare Debian: RDKit draws with the two X libraries.
site_packages="ca-certificates python3 python3-venv libexpat1 libxext6 libxrender1"

# Wheels come without compiled modules; the first start compiles what it uses, for all later ones.
unset PYTHONDONTWRITEBYTECODE

say() { echo "$*" >&2; }

as_root() {
    if [ "$(id -u)" -eq 0 ]; then
        "$@"
    elif command -v sudo >/dev/null; then
        sudo "$@"
    else
        say "These need root or sudo: $*"
        exit 1
    fi
}

# Install those of the named Debian packages that are missing.
debian_packages() {
    command -v dpkg-query >/dev/null || { say "This is no Debian: install $* yourself."; return 0; }
    missing=
    for package in "$@"; do
        state=$(dpkg-query --show --showformat='${db:Status-Status}' "$package" 2>/dev/null || true)
        [ "$state" = installed ] || missing="$missing $package"
    done
    [ -z "$missing" ] && return 0
    say "Installing Debian packages:$missing"
    as_root env DEBIAN_FRONTEND=noninteractive sh -c "
        { apt-get -qq update && apt-get -qq -y install --no-install-recommends $missing; } >&2 </dev/null"
}

# Tell whether the file $2 holds the word $1.
holds() { [ -r "$2" ] && [ "$(cat "$2")" = "$1" ]; }

hash_of() { cat "$@" | sha256sum | cut -d ' ' -f 1; }

# Run pip in the virtual environment $1. Making one without pip saves five seconds: Debian's own
# wheel of pip serves, or else Python's.
pip_in() {
    python="$1/bin/python"
    shift
    wheel=$(find /usr/share/python-wheels -name 'pip-*.whl' 2>/dev/null | head -n 1)
    if [ -z "$wheel" ]; then "$python" -m ensurepip >/dev/null; fi
    PYTHONPATH="$wheel" "$python" -m pip --quiet --disable-pip-version-check --no-input "$@"
}

# Install what the lock $2 names into the virtual environment $1. uv takes half of pip's time but
# doesn't read pip's configuration: where it can't reach the registry, pip does it.
install_locked() {
    hashed="--no-deps --require-hashes --only-binary :all:"
    # shellcheck disable=SC2086 # a list of options
    "$1/bin/uv" pip install --quiet $hashed --python "$1/bin/python" --requirement "$2" ||
        pip_in "$1" install $hashed --no-compile --requirement "$2"
}

# Make the virtual environment $1 hold exactly what the lock $2 names, unless it does already.
environment() {
    lock=$(hash_of "$2")
    holds "$lock" "$1/.lock" && return 0
    say "Filling $1 from $2"
    python3 -m venv --clear --without-pip "$1"
    pip_in "$1" install --no-deps --require-hashes --requirement "$root/deploy/uv.lock"
    install_locked "$1" "$2"
    echo "$lock" >"$1/.lock"
}

# Lay the front-end parts, unless they are there already; $1 is the virtual environment that takes
# npm when the machine has none, $2 is --tests or nothing.
front_end_parts() {
    lock=$(hash_of "$root/reactions/parts/package-lock.json" "$root/deploy/parts")
    stamp="$root/reactions/parts/node_modules/.lock${2:-}"
    if holds "$lock" "$stamp" && [ -d "$root/reactions/static/reactions/parts" ]; then return 0; fi
    say "Fetching the front-end parts"
    if ! command -v npm >/dev/null && ! [ -x "$1/bin/npm" ]; then
        install_locked "$1" "$root/deploy/npm.lock"
    fi
    VIRTUAL_ENV="$1" "$root/deploy/parts" "${2:-}"
    echo "$lock" >"$root/reactions/parts/node_modules/.lock"
    echo "$lock" >"$stamp"
}
