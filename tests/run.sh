#!/usr/bin/env bash
# Installs what is missing and runs every check, stopping at the first failure: format, warnings as errors, tests, the same under sanitizers, lint, coverage, a short fuzz.
set -euo pipefail
cd "$(dirname "$0")/.."

packages=(g++ cmake ninja-build ccache libboost-dev libtomlplusplus-dev libfmt-dev libcli11-dev libeigen3-dev nlohmann-json3-dev nettle-dev
          doctest-dev clang-format clang-tidy clang libclang-rt-14-dev gcovr python3-jsonschema)
. cli/install.sh
install_missing "${packages[@]}"

jobs=$(nproc)

echo "== format"
git ls-files '*.cpp' '*.hpp' | xargs clang-format --dry-run --Werror

echo "== build, warnings are errors"
cmake -S . -B build/check -G Ninja -DONEHAND_DEV=ON -DCMAKE_BUILD_TYPE=Release >/dev/null
cmake --build build/check -j "$jobs"

echo "== tests"
ctest --test-dir build/check --output-on-failure --no-tests=error -j "$jobs"

echo "== tests under address and undefined-behaviour sanitizers"
cmake -S . -B build/sanitize -G Ninja -DONEHAND_DEV=ON -DONEHAND_SANITIZE=ON -DCMAKE_BUILD_TYPE=RelWithDebInfo -DCMAKE_CXX_FLAGS_RELWITHDEBINFO="-O1 -g" >/dev/null
cmake --build build/sanitize -j "$jobs"
ctest --test-dir build/sanitize --output-on-failure --no-tests=error -j "$jobs" -LE long

echo "== lint"
git ls-files 'lib/*.cpp' 'cli/*.cpp' | grep -v 'cli/options.cpp' | xargs -P "$jobs" -n 6 clang-tidy -p build/check --quiet --extra-arg=-Wno-unknown-warning-option 2>/dev/null

echo "== coverage of lib/"
cmake -S . -B build/coverage -G Ninja -DONEHAND_DEV=ON -DONEHAND_COVERAGE=ON -DCMAKE_BUILD_TYPE=Debug >/dev/null
cmake --build build/coverage -j "$jobs"
ctest --test-dir build/coverage --output-on-failure --no-tests=error -j "$jobs" -LE long >/dev/null
gcovr --root . --filter 'lib/' --exclude-throw-branches --exclude-unreachable-branches build/coverage --print-summary 2>/dev/null | tail -4 || echo "coverage could not be read"

echo "== short fuzz: quantities, expressions, documents"
bash tests/fuzz/run.sh 8

echo "== tests, closing line"
ctest --test-dir build/check --no-tests=error -j "$jobs" | tail -3
