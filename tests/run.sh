#!/bin/sh
# Builds Undertone and runs every test, twice: as it is used, and under AddressSanitizer and UBSan.
set -eu
cd "$(dirname "$0")/.."
. data/setup.sh

need $build_packages python3 python3-numpy python3-scipy poppler-utils locales man-db
build build
build build-sanitize -Db_sanitize=address,undefined -Db_lundef=false -Dbuildtype=debug

status=0
for folder in build build-sanitize; do
  echo "== $folder"
  meson test -C "$folder" --print-errorlogs --no-rebuild || status=1
done
/usr/bin/python3 tests/count.py build build-sanitize || status=1
exit $status
