#!/usr/bin/env bash
# Installs what is missing and runs every check, stopping at the first failure: format, warnings as errors, tests, the same under sanitizers, lint, coverage, a short fuzz.
set -euo pipefail
cd "$(dirname "$0")/.."

packages=(g++ cmake ninja-build ccache libboost-dev libtomlplusplus-dev libfmt-dev libcli11-dev libeigen3-dev nlohmann-json3-dev nettle-dev
          doctest-dev clang-format clang-tidy clang libclang-rt-14-dev gcovr python3-jsonschema)
. cli/install.sh
install_missing "${packages[@]}"

jobs=$(nproc)
stage() { echo "== $1 ($SECONDS s)"; }

stage "format"
git ls-files '*.cpp' '*.hpp' | xargs clang-format --dry-run --Werror

stage "build, warnings are errors"
cmake -S . -B build/check -G Ninja -DONEHAND_DEV=ON -DCMAKE_BUILD_TYPE=Release >/dev/null
cmake --build build/check -j "$jobs"

stage "tests"
ctest --test-dir build/check --output-on-failure --no-tests=error -j "$jobs" | tee build/check/ctest.log

stage "mutants of the rules that an example notices"
build/check/tests/test_rule -tc="every mutant*" | grep "mutants noticed"

stage "tests under address and undefined-behaviour sanitizers, coverage counted"
cmake -S . -B build/sanitize -G Ninja -DONEHAND_DEV=ON -DONEHAND_SANITIZE=ON -DONEHAND_COVERAGE=ON -DCMAKE_BUILD_TYPE=RelWithDebInfo -DCMAKE_CXX_FLAGS_RELWITHDEBINFO="-O1" >/dev/null
cmake --build build/sanitize -j "$jobs"
find build/sanitize -name '*.gcda' -delete
ctest --test-dir build/sanitize --output-on-failure --no-tests=error -j "$jobs" -LE long

stage "coverage of lib/"
gcovr --root . --filter 'lib/' --exclude-throw-branches --exclude-unreachable-branches --gcov-ignore-parse-errors build/sanitize --print-summary 2>/dev/null | tail -4 || echo "coverage could not be read"

stage "lint"
git ls-files 'lib/*.cpp' 'cli/*.cpp' | grep -v 'cli/options.cpp' | xargs -P "$jobs" -n 6 clang-tidy -p build/check --quiet --extra-arg=-Wno-unknown-warning-option 2>/dev/null

stage "short fuzz: quantities, expressions, documents"
bash tests/fuzz/run.sh 8

stage "all done; the tests said"
tail -3 build/check/ctest.log
