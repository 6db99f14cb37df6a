#!/usr/bin/env bash
# The acceptance of the slider in one command: 200 moves on 1,000 terminals under a virtual display, p95 within 33 ms.
#   bash tests/ui/shell/slider_latency.sh [build folder]
set -euo pipefail
root="$(cd "$(dirname "$0")/../../.." && pwd)"
build="${1:-$root/build/release}"
[ -f "$build/build.ninja" ] || cmake -S "$root" -B "$build" -G Ninja > /dev/null
ninja -C "$build" slider_latency > /dev/null
exec xvfb-run -a -s "-screen 0 1600x1000x24" "$build/tests/ui/shell/slider_latency" --must 33
