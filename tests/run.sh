#!/bin/sh
# Builds Undertone and runs every test, twice: as it is used, and under AddressSanitizer and UBSan.
set -eu
cd "$(dirname "$0")/.."
. data/setup.sh

need $build_packages python3 python3-numpy python3-scipy poppler-utils locales man-db \
  xvfb xdotool dbus-daemon at-spi2-core gir1.2-atspi-2.0 python3-gi libglib2.0-bin
build build
build build-sanitize -Db_sanitize=address,undefined -Db_lundef=false -Dbuildtype=debug

status=0
for folder in build build-sanitize; do
  echo "== $folder"
  meson test -C "$folder" --print-errorlogs --no-rebuild || status=1
done
/usr/bin/python3 tests/count.py build build-sanitize || status=1
exit $status
