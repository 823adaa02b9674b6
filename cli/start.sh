#!/usr/bin/env bash
# Installs what is missing, builds the program, audits a sample. May be run again at any time.
set -euo pipefail
cd "$(dirname "$0")/.."

packages=(g++ cmake ninja-build libboost-dev libtomlplusplus-dev libfmt-dev libcli11-dev libeigen3-dev nlohmann-json3-dev nettle-dev)
. cli/install.sh
install_missing "${packages[@]}"

echo "== building into build/"
cmake -S . -B build -G Ninja -DCMAKE_BUILD_TYPE=Release >/dev/null
cmake --build build --target onehand

echo "== auditing samples/tide-clock-as-built.toml"
code=0
./build/cli/onehand audit samples/tide-clock-as-built.toml || code=$?
echo
if [ "$code" -gt 1 ] && [ "$code" -ne 4 ]; then
    echo "the audit did not run (exit $code)" >&2
    exit "$code"
fi
echo "Exit code $code of the audit: this sample has mistakes in it on purpose. Now: ./build/cli/onehand audit YOUR.toml"
