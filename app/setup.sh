# Installs what is missing and builds the release preset. Sourced by app/run and tests/run, from the project's root.

build_packages="build-essential cmake ninja-build qt6-base-dev qt6-svg-dev libqcustomplot-dev libeigen3-dev catch2
  nlohmann-json3-dev libcli11-dev libfmt-dev libgl-dev libxkbcommon-dev fonts-inter fontconfig"

as_root() {
    if [ "$(id -u)" = 0 ]; then "$@"; elif command -v sudo >/dev/null; then sudo "$@"; else
        echo "These packages are missing and need root or sudo: $missing" >&2
        return 1
    fi
}

# install_missing PACKAGE…: touches apt only when something is really missing.
install_missing() {
    missing=""
    for package in "$@"; do
        dpkg-query -W -f='${Status}' "$package" 2>/dev/null | grep -q 'install ok installed' || missing="$missing $package"
    done
    [ -z "$missing" ] && return 0
    echo "Installing:$missing"
    as_root apt-get update -q
    as_root env DEBIAN_FRONTEND=noninteractive apt-get install -q -y --no-install-recommends $missing
}

# build [TARGET…]: all when none is named.
build() {
    cmake --preset release >build-configure.log 2>&1 || { cat build-configure.log; rm -f build-configure.log; return 1; }
    rm -f build-configure.log
    if [ $# -gt 0 ]; then cmake --build --preset release --target "$@"; else cmake --build --preset release; fi
}
