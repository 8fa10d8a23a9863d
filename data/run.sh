#!/bin/sh
# Builds Undertone and shows it: installs what is missing, builds into build/, opens the example plan. Without a display it prints the
# solved example and writes its page instead.
set -eu
cd "$(dirname "$0")/.."
. data/setup.sh

need $build_packages
build build

example=data/examples/cold-store.undertone
if [ -n "${WAYLAND_DISPLAY:-}${DISPLAY:-}" ]; then
  UNDERTONE_LOCALE_FOLDER="$PWD/build/po" exec build/undertone "$example"
fi

page=build/example-page.pdf
# 1 only says that not all targets are met: still an answer.
build/undertone-cli solve "$example" || [ $? -eq 1 ]
build/undertone-cli page "$example" --output "$page"
echo
echo "The printed page: $page"
