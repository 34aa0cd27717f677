# Sourced by app/run and tests/run: what the project needs from the system, and how it is built. Debian 12.

root=$(cd "$(dirname "${BASH_SOURCE[0]}")/.." && pwd)
build=$root/build/release

# Compilers and libraries, and what the window needs at run time (screen plugins, OpenGL, a typeface).
program_packages=(build-essential cmake ninja-build pkg-config
    qt6-base-dev qt6-svg-dev libqcustomplot-dev
    libeigen3-dev libfmt-dev nlohmann-json3-dev libcli11-dev catch2
    qt6-qpa-plugins libgl1 libegl1 fonts-inter fontconfig)
# A second opinion in another language, and a screen for the window tests.
test_packages=(python3 python3-scipy xvfb xauth)

say() { printf '%s\n' "$*" >&2; }

is_installed() { [ "$(dpkg-query -W -f '${db:Status-Status}' "$1" 2>/dev/null)" = installed ]; }

as_root() {
    if [ "$(id -u)" -eq 0 ]; then
        "$@"
    elif command -v sudo >/dev/null; then
        sudo "$@"
    else
        say "Installing packages needs root: run this as root, or install sudo."
        return 1
    fi
}

# install_missing PACKAGE…: asks the package manager only for what is not there; needs no network otherwise.
install_missing() {
    local package missing=()
    for package in "$@"; do is_installed "$package" || missing+=("$package"); done
    [ ${#missing[@]} -eq 0 ] && return 0
    if ! command -v apt-get >/dev/null; then
        say "Please install with your system's package manager: ${missing[*]}"
        return 1
    fi
    say "Installing: ${missing[*]}"
    as_root apt-get -o Acquire::Retries=3 -q update >&2 &&
        as_root env DEBIAN_FRONTEND=noninteractive apt-get -q install --yes --no-install-recommends "${missing[@]}" >&2 &&
        return 0
    say "These packages could not be installed: ${missing[*]}"
    return 1
}

# build_release TARGET…: configures once and builds with all cores.
build_release() {
    (cd "$root" && cmake --preset release && cmake --build --preset release --parallel "$(nproc)" --target "$@") >&2
}
