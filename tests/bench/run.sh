#!/usr/bin/env bash
# Whole-process times as ratios, side by side in one run: audit of a sample over a process that only reads the same file (kinds list as the floor of loading), and time by stage; then random converters against draws, in full.
set -euo pipefail
cd "$(dirname "$0")/../.."
program=${1:-build/cli/onehand}
runs=${2:-25}
median() {
    local i
    for ((i = 0; i < runs; ++i)); do
        local from to
        from=$(date +%s%N)
        "$@" >/dev/null 2>&1 || true
        to=$(date +%s%N)
        echo $(((to - from) / 1000))
    done | sort -n | sed -n "$((runs / 2 + 1))p"
}
cmake -S . -B build/bench -G Ninja -DONEHAND_BENCH=ON -DCMAKE_BUILD_TYPE=Release >/dev/null
cmake --build build/bench --target parse_only load_share random_converters onehand
for sample in samples/*.toml; do
    parse=$(median build/bench/tests/bench/parse_only "$sample")
    audit=$(median build/bench/cli/onehand audit "$sample")
    kinds=$(median build/bench/cli/onehand kinds)
    awk -v name="$sample" -v a="$audit" -v k="$kinds" -v p="$parse" 'BEGIN { printf "%s: whole process, audit/parse %.1f, rules loaded/parse %.1f\n", name, a / p, k / p }'
done
build/bench/tests/bench/load_share samples/*.toml
build/bench/tests/bench/random_converters 300 10000
