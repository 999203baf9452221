# shellcheck shell=bash
# Sourced by the scripts that build: installs what is missing, then configures and builds.
#
#   setup_packages library tests      installs these groups of Debian packages, where they are absent
#   setup_decimal_comma               makes the locale de_DE.UTF-8
#   build_preset gcc-release [-D...] [-- TARGET...]
#
# Each prints one line per step that takes time; the long output goes to build/*.log and is shown
# when a step fails.

root=$(cd "$(dirname "${BASH_SOURCE[0]}")/../.." && pwd)
export LC_ALL=C.UTF-8 CTEST_PARALLEL_LEVEL=${CTEST_PARALLEL_LEVEL:-$(nproc)}
if command -v ccache >/dev/null; then
  export CMAKE_CXX_COMPILER_LAUNCHER=ccache
fi

declare -A packages=(
  [library]="g++ cmake ninja-build libboost-dev libceres-dev libcli11-dev libeigen3-dev libfmt-dev
             libhwy-dev libtomlplusplus-dev nlohmann-json3-dev"
  [tests]="doctest-dev locales pkg-config python3 python3-jsonschema python3-mpmath"
  [clang]="clang"
  [sanitizers]="libclang-rt-dev"
  [benchmarks]="python3 python3-scipy"
)

fail() {
  echo "$(basename "$root"): $*" >&2
  exit 2
}

# Runs a command as root; false where that cannot be had without asking.
as_root() {
  if [ "$(id -u)" = 0 ]; then
    "$@"
  elif command -v sudo >/dev/null && { sudo -n true 2>/dev/null || [ -t 0 ]; }; then
    sudo "$@"
  else
    return 77
  fi
}

# Runs a command quietly: its output goes to build/NAME.log, whose end is shown where it fails.
quietly() {
  local log=$root/build/$1.log
  shift
  mkdir -p "$root/build"
  "$@" >"$log" 2>&1 </dev/null && return
  tail -n 40 "$log" >&2
  fail "failed: $* (all of its output: $log)"
}

missing_packages() {
  local installed name
  installed=$(dpkg-query -W -f '${binary:Package} ${db:Status-Status}\n' "$@" 2>/dev/null |
    sed -n 's/^\([^: ]*\)[^ ]* installed$/\1/p' || true)
  for name; do
    grep -qxF "$name" <<<"$installed" || echo "$name"
  done
}

setup_packages() {
  local group wanted=() missing
  command -v dpkg-query >/dev/null || return 0  # no Debian: what is missing, CMake names
  for group; do
    read -r -d '' -a words <<<"${packages[$group]}" || true
    wanted+=("${words[@]}")
  done
  mapfile -t missing < <(missing_packages "${wanted[@]}")
  [ ${#missing[@]} -gt 0 ] || return 0
  as_root true || fail "needs root or sudo, once, for: apt-get install ${missing[*]}"
  echo "Installing ${missing[*]}"
  quietly apt-update as_root apt-get -q -o DPkg::Lock::Timeout=120 update
  quietly apt-install as_root env DEBIAN_FRONTEND=noninteractive \
    apt-get -q -y -o DPkg::Lock::Timeout=120 install --no-install-recommends "${missing[@]}"
}

setup_decimal_comma() {
  ! locale -a 2>/dev/null | grep -qix 'de_DE\.utf-\?8' || return 0
  as_root true || fail "needs root or sudo, once, for: localedef -i de_DE -f UTF-8 de_DE.UTF-8"
  quietly localedef as_root localedef -i de_DE -f UTF-8 de_DE.UTF-8
}

build_preset() {
  local preset=$1 options=() targets=()
  shift
  while [ $# -gt 0 ] && [ "$1" != -- ]; do
    options+=("$1")
    shift
  done
  [ $# -lt 2 ] || targets=(--target "${@:2}")
  echo "Building $preset (build/$preset)"
  cd "$root" || exit
  quietly "$preset-configure" cmake --preset "$preset" "${options[@]}"
  quietly "$preset-build" cmake --build --preset "$preset" "${targets[@]}"
}
