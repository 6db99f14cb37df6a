# The one list of Debian 12 packages Ebbline is built from, and how a missing one is installed.
# Sourced by app/start.sh and tests/run.sh; does nothing by itself, and uses no network when nothing is missing.

ebbline_packages_program=(
  build-essential cmake ninja-build ccache
  qt6-base-dev qt6-charts-dev libqt6opengl6-dev qt6-svg-dev
  libeigen3-dev nlohmann-json3-dev libexpected-dev libfmt-dev libtbb-dev libcli11-dev
  fonts-lato
)
ebbline_packages_tests=(
  libgtest-dev libgmock-dev libbenchmark-dev libsuitesparse-dev libsundials-dev libvalijson-dev
  xvfb xauth xdotool poppler-utils
)
ebbline_packages_full=(clang-14 clang-tidy-14 libclang-rt-14-dev)

# Runs a command as root: directly, or through sudo.
ebbline_as_root() {
  if [ "$(id -u)" -eq 0 ]; then "$@"; else sudo "$@"; fi
}

# Prints those of the named packages that are not installed, one a line.
ebbline_missing() {
  local name
  for name in "$@"; do
    dpkg-query -W -f '${db:Status-Status}' "$name" 2>/dev/null | grep -qx installed || echo "$name"
  done
}

# Installs what is missing of the named packages. On failure says in one line which and what to do, and returns 1.
ebbline_ensure_packages() {
  local missing log name unknown=()
  if ! command -v dpkg-query >/dev/null || ! command -v apt-get >/dev/null; then
    echo "ebbline: this is not a Debian system (no apt-get): install the packages named in app/packages.sh by hand." >&2
    return 1
  fi
  mapfile -t missing < <(ebbline_missing "$@")
  [ ${#missing[@]} -eq 0 ] && return 0
  if [ "$(id -u)" -ne 0 ] && ! command -v sudo >/dev/null; then
    echo "ebbline: not installed: ${missing[*]}; run as root: apt-get install ${missing[*]}" >&2
    return 1
  fi
  echo "ebbline: installing ${missing[*]}"
  log=$(mktemp)
  # Lists may be absent or old; a failed update matters only if the packages then cannot be had.
  ebbline_as_root apt-get update >"$log" 2>&1 || true
  for name in "${missing[@]}"; do
    apt-cache show "$name" >/dev/null 2>&1 || unknown+=("$name")
  done
  if [ ${#unknown[@]} -gt 0 ]; then
    echo "ebbline: no package source offers: ${unknown[*]}; check the network and that the sources are Debian 12 (bookworm), then run this again." >&2
    rm -f "$log"
    return 1
  fi
  if ! ebbline_as_root env DEBIAN_FRONTEND=noninteractive apt-get install -y --no-install-recommends \
    "${missing[@]}" >>"$log" 2>&1; then
    mapfile -t missing < <(ebbline_missing "$@")
    echo "ebbline: could not install: ${missing[*]}; apt-get says: $(grep -m1 '^E:' "$log" || tail -n1 "$log"); mend that, then run this again." >&2
    rm -f "$log"
    return 1
  fi
  rm -f "$log"
}
