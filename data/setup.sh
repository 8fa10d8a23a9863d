# Sourced by data/run.sh and tests/run.sh: installs the Debian packages that are missing, and builds.

build_packages='gcc libc6-dev pkgconf meson ninja-build gettext libgtk-4-dev libjson-glib-dev liblapacke-dev libopenblas-dev
  libcairo2-dev libpango1.0-dev libgdk-pixbuf-2.0-dev libpoppler-glib-dev librsvg2-common fonts-dejavu-core adwaita-icon-theme'

# need PACKAGE...: installs those of them that are not there; stops with one message where that cannot be done.
need () {
  missing=
  for package in "$@"; do
    status=$(dpkg-query -W -f '${db:Status-Status}' "$package" 2>/dev/null) || status=
    [ "$status" = installed ] || missing="$missing $package"
  done
  [ -n "$missing" ] || return 0

  if [ "$(id -u)" -eq 0 ]; then
    as_root=env
  elif command -v sudo >/dev/null 2>&1; then
    as_root='sudo env'
  else
    echo "These packages are missing:$missing" >&2
    echo "Run this script as root, or install them first: apt-get install$missing" >&2
    exit 1
  fi
  if ! command -v apt-get >/dev/null 2>&1; then
    echo "These packages are missing, and there is no apt-get to install them:$missing" >&2
    exit 1
  fi
  echo "Installing:$missing"
  log=$(mktemp)
  if ! { $as_root apt-get update -q &&
         $as_root DEBIAN_FRONTEND=noninteractive apt-get install -q -y --no-install-recommends $missing; } >"$log" 2>&1; then
    cat "$log" >&2
    rm -f "$log"
    echo "The packages could not be installed; what apt-get said is above." >&2
    exit 1
  fi
  rm -f "$log"
}

# build FOLDER [MESON OPTION...]: configures once, then compiles what changed; quiet unless something fails.
build () {
  folder=$1
  shift
  log=$(mktemp)
  if { [ -f "$folder/build.ninja" ] || meson setup "$folder" "$@"; } >"$log" 2>&1 && ninja -C "$folder" >>"$log" 2>&1; then
    rm -f "$log"
  else
    cat "$log" >&2
    rm -f "$log"
    echo "The build in $folder failed; what it said is above." >&2
    exit 1
  fi
}
