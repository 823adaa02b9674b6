#!/usr/bin/env bash
# Builds and runs the fuzz targets for a number of seconds each, seeded from samples/ and rules/.
set -euo pipefail
cd "$(dirname "$0")/../.."
seconds=${1:-10}
out=build/fuzz
mkdir -p "$out/seeds"
cp samples/*.toml rules/*.toml rules/tables/*.toml "$out/seeds/" 2>/dev/null || true
cmake -S . -B "$out" -G Ninja -DCMAKE_CXX_COMPILER=clang++ -DONEHAND_FUZZ=ON -DCMAKE_BUILD_TYPE=RelWithDebInfo -DCMAKE_CXX_FLAGS_RELWITHDEBINFO="-O1 -gline-tables-only" >/dev/null
cmake --build "$out" --target fuzz_quantity fuzz_expression fuzz_document -j "$(nproc)"
for target in quantity expression document; do
    echo "-- fuzz_$target"
    mkdir -p "$out/corpus_$target"
    "$out/tests/fuzz/fuzz_$target" -max_total_time="$seconds" -max_len=4096 -verbosity=0 "$out/corpus_$target" "$out/seeds" 2>"$out/fuzz_$target.log" || { tail -40 "$out/fuzz_$target.log"; exit 1; }
done
