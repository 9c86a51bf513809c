# Packages of a fresh Debian 12, by name. Sourced by src/open.sh and tests/run.sh.
# install_missing NAME...: installs those that are not there yet; asks for nothing.

build_packages="build-essential cmake ninja-build pkg-config
 libsdl2-dev libepoxy-dev libcglm-dev libfyaml-dev libjansson-dev
 libcairo2-dev libpango1.0-dev libfontconfig-dev fonts-inter fonts-dejavu-core
 libgl1-mesa-dri libegl1 libgl1 libgles2"
test_packages="libcmocka-dev libgsl-dev libembree-dev python3-numpy xvfb xauth xdotool x11-utils
 clang libomp-dev libclang-rt-14-dev clang-format clang-tidy"

install_missing() {
    missing=""
    for package in "$@"; do
        dpkg-query -W -f='${Status}' "$package" 2>/dev/null | grep -q "ok installed" ||
            missing="$missing $package"
    done
    [ -z "$missing" ] && return 0
    as_root=""
    [ "$(id -u)" = 0 ] || as_root="sudo"
    echo "Installing:$missing"
    $as_root apt-get update -q
    # shellcheck disable=SC2086
    DEBIAN_FRONTEND=noninteractive $as_root apt-get install -y -q --no-install-recommends $missing
}
