#!/bin/sh
# Installs what is missing on Debian 12, builds evenpath and opens its window.
# sh src/open.sh [SCENE]; without a display it writes the picture and prints the budget instead.
set -eu
top=$(cd "$(dirname "$0")/.." && pwd)
. "$top/src/install.sh"
# shellcheck disable=SC2086
install_missing $build_packages
cmake -S "$top" -B "$top/build" -G Ninja -DEVENPATH_TESTS=OFF >"$top/build.log" 2>&1 ||
    { cat "$top/build.log"; exit 1; }
mv "$top/build.log" "$top/build/configure.log"
cmake --build "$top/build" --target evenpath
scene=${1:-$top/scenes/quarry_link.yaml}
if [ -n "${DISPLAY:-}${WAYLAND_DISPLAY:-}" ]; then
    code=0
    "$top/build/evenpath" "$scene" || code=$?
    [ "$code" = 3 ] || exit "$code"
fi
picture=$top/build/$(basename "$scene" .yaml).png
"$top/build/evenpath" picture "$scene" "$picture"
"$top/build/evenpath" budget "$scene"
echo
echo "There is no display here for a window: the picture of the page is in $picture."
