#!/usr/bin/env bash
# Builds and prints the benchmark table. Arguments go to bench_table (--sizes=10,1000 --seconds=4).
set -euo pipefail
here="$(cd "$(dirname "$0")/../.." && pwd)"
build="${EBBLINE_BUILD:-$here/build/release}"
cmake -S "$here" -B "$build" -G Ninja -DEBBLINE_BENCH=ON -DCMAKE_BUILD_TYPE=Release >/dev/null
cmake --build "$build" --target bench_table >/dev/null
exec "$build/tests/bench/bench_table" "$@"
