#!/usr/bin/env bash
# Builds Ebbline if needed and starts it: the window on the office sample, or, without a display, the main job
# headless: the office loop swept through part-load states, as a table and as out/report.pdf.
set -euo pipefail
cd "$(dirname "${BASH_SOURCE[0]}")/.."
source app/packages.sh
ebbline_ensure_packages "${ebbline_packages_program[@]}"

log=$(mktemp)
trap 'rm -f "$log"' EXIT
echo "ebbline: building (the first time takes some minutes)"
if ! { cmake --preset app && cmake --build --preset app --target ebbline; } >"$log" 2>&1; then
  cat "$log" >&2
  echo "ebbline: the build failed; the first line with 'error' above says where." >&2
  exit 1
fi

ebbline=build/app/app/ebbline
sample=samples/office.ebbline
if [ -n "${DISPLAY:-}${WAYLAND_DISPLAY:-}" ]; then
  echo "ebbline: opening $sample"
  exec "$ebbline" open "$sample"
fi

echo "ebbline: no display, so the main job is done here: $sample swept through part-load states"
mkdir -p out
"$ebbline" sweep "$sample"
"$ebbline" report "$sample" -o out/report.pdf
