#!/usr/bin/env bash
# Builds and runs the tests. `bash tests/run.sh --full` adds the sanitizer, thread, clang-tidy and fuzz runs.
set -euo pipefail
cd "$(dirname "${BASH_SOURCE[0]}")/.."
source app/packages.sh

full=no
case "${1:-}" in
  "") ;;
  --full) full=yes ;;
  *) echo "usage: bash tests/run.sh [--full]" >&2; exit 2 ;;
esac
packages=("${ebbline_packages_program[@]}" "${ebbline_packages_tests[@]}")
[ $full = yes ] && packages+=("${ebbline_packages_full[@]}")
ebbline_ensure_packages "${packages[@]}"
jobs=$(nproc)

# Windows of the tests go to a display of their own, so that nothing flashes on the user's.
with_display() { xvfb-run -a -s "-screen 0 1600x1200x24 -nolisten tcp" "$@"; }

# Configures and builds one preset, or the targets named after it; prints the log only if that fails.
build() {
  local preset=$1 log=build/$1-build.log
  shift
  mkdir -p build
  if ! { cmake --preset "$preset" && cmake --build --preset "$preset" -j "$jobs" ${1:+--target "$@"}; } >"$log" 2>&1; then
    cat "$log" >&2
    echo "tests: the build of preset $preset failed, see above." >&2
    return 1
  fi
}

slowest_files() {
  echo "Slowest ten files to build, seconds:"
  awk '!/^#/ && $4 ~ /\.o$/ {t[$4] = ($2 - $1) / 1000} END {for (f in t) printf "%8.1f  %s\n", t[f], f}' \
    build/release/.ninja_log | sort -rn | head -n 10
}

slowest_suites() {
  echo "Slowest ten suites to run, seconds:"
  sed -nE 's/^ *[0-9]+\/[0-9]+ Test +#[0-9]+: ([^ ]+) .* ([0-9.]+) sec.*$/\2 \1/p' "$1" |
    sort -rn | head -n 10 | awk '{printf "%8.2f  %s\n", $1, $2}'
}

build release
slowest_files
log=build/release-tests.log
status=0
with_display ctest --preset release | tee "$log" || status=$?
slowest_suites "$log"
grep -hE 'tests passed|tests failed|^Total Test time' "$log" || true
[ $status -eq 0 ] || exit "$status"
[ $full = yes ] || exit 0

echo "== address and undefined-behaviour sanitizers"
build sanitizers
# Leaks inside the display and font libraries are not ours to mend; tests/support/leaks.supp names them.
ASAN_OPTIONS=detect_leaks=1 LSAN_OPTIONS="suppressions=$PWD/tests/support/leaks.supp:print_suppressions=0" \
  UBSAN_OPTIONS=print_stacktrace=1 with_display ctest --preset sanitizers

echo "== thread sanitizer"
build thread
ctest --preset thread

echo "== clang-tidy on core"
mapfile -t files < <(git ls-files 'core/*.cpp')
printf '%s\n' "${files[@]}" | xargs -P "$jobs" -n 4 clang-tidy-14 --quiet -p build/release

echo "== fuzz targets, 60 seconds each"
build fuzz fuzz_reader
shopt -s nullglob
for target in build/fuzz/tests/fuzz/fuzz_*; do
  [ -x "$target" ] && [ -f "$target" ] || continue
  corpus=build/fuzz/corpus/$(basename "$target")
  mkdir -p "$corpus"
  "$target" -max_total_time=60 -print_final_stats=1 -artifact_prefix="$corpus-" "$corpus" samples
done
echo "tests: full run passed"
