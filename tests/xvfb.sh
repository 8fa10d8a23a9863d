#!/bin/bash
# xvfb.sh WIDTHxHEIGHT COMMAND...: runs a command on a display of its own, with a home of its own.
set -u
size=$1
shift
scratch=$(mktemp -d)
mkfifo "$scratch/display"
Xvfb -displayfd 3 -screen 0 "${size}x24" -nolisten tcp -noreset 3>"$scratch/display" >"$scratch/xvfb.log" 2>&1 &
server=$!
trap 'kill $server 2>/dev/null; wait $server 2>/dev/null; rm -rf "$scratch"' EXIT
read -r -t 20 number <"$scratch/display" || { cat "$scratch/xvfb.log" >&2; echo "Xvfb did not start" >&2; exit 99; }
mkdir -p "$scratch/home" "$scratch/run"
chmod 700 "$scratch/run"
export DISPLAY=":$number" HOME="$scratch/home" XDG_RUNTIME_DIR="$scratch/run" XDG_CONFIG_HOME="$scratch/home/.config" \
  XDG_DATA_HOME="$scratch/home/.local/share" XDG_CACHE_HOME="$scratch/home/.cache"
unset WAYLAND_DISPLAY
"$@"
status=$?
exit $status
