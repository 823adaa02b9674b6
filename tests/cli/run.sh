#!/usr/bin/env bash
# The program from outside: arguments, exit codes, texts. Called by ctest with the program and the source folder.
set -u
onehand=$1
source=$2
work=$(mktemp -d)
trap 'rm -rf "$work"' EXIT
failed=0
count=0
expect() { # NAME WANTED-CODE WANTED-TEXT COMMAND...
    local name=$1 code=$2 text=$3
    shift 3
    count=$((count + 1))
    local got
    got=$("$@" 2>&1 </dev/null)
    local rc=$?
    if [ "$rc" -ne "$code" ] || { [ -n "$text" ] && [[ "$got" != *"$text"* ]]; }; then
        echo "FAILED $name: exit $rc (wanted $code), wanted text: $text"
        echo "$got" | head -5
        failed=1
    fi
}
cd "$source" || exit 2
expect "hold" 1 "Energise:  HOLD" "$onehand" audit samples/tide-clock-as-built.toml
expect "conditional" 4 "CONDITIONAL" "$onehand" audit samples/tide-clock-corrected.toml
expect "no objection" 0 "NO OBJECTION FOUND" "$onehand" audit samples/geiger-bench.toml
expect "what if" 0 "NO OBJECTION FOUND" "$onehand" audit samples/tide-clock-corrected.toml --set K1.spike="40 V"
expect "what if wrong" 2 "nearest known name: R9" "$onehand" audit samples/tide-clock-corrected.toml --set R99=1k
expect "several: gravest" 1 "Geiger bench" "$onehand" audit samples/geiger-bench.toml samples/tide-clock-as-built.toml
expect "several: unusable first" 2 "no_such.toml" "$onehand" audit samples/geiger-bench.toml no_such.toml
expect "a folder" 2 "is a folder" "$onehand" audit samples
expect "no file" 2 "" "$onehand" audit
expect "no command" 2 "" "$onehand"
expect "unknown command" 2 "" "$onehand" auditt samples/geiger-bench.toml
expect "unknown option" 2 "" "$onehand" audit --frmat json samples/geiger-bench.toml
expect "format refused" 2 "text, json" "$onehand" audit --format xml samples/geiger-bench.toml
expect "format refused for rules" 2 "no format 'json': text" "$onehand" rules --format json
expect "colour refused" 2 "auto, always or never" "$onehand" audit --colour red samples/geiger-bench.toml
expect "limit set unknown" 2 "nearest known name: IEC 60664-1" "$onehand" audit --limit-sets "IEC 60664-2" samples/geiger-bench.toml
expect "limit set" 1 "used: IEC 60664-1" "$onehand" audit --limit-sets "IEC 60664-1" samples/tide-clock-as-built.toml
expect "working" 1 "[proved]" "$onehand" audit --show-working samples/tide-clock-as-built.toml
expect "json" 4 '"energise": "conditional"' "$onehand" audit --format json samples/tide-clock-corrected.toml
expect "discharge" 0 "After switch-off" "$onehand" discharge samples/tide-clock-as-built.toml
expect "spacing" 0 "strictest figure governs" "$onehand" spacing samples/tide-clock-as-built.toml
expect "spacing, pairs alike in one block" 0 "SW to 0V, SW to G  251 V, functional" "$onehand" spacing samples/tide-clock-corrected.toml
expect "cite a table" 0 "200  400" bash -c "$onehand cite iec-62368-1-charged-capacitor | tr -s ' ' | sed 's/ 200 400/200  400/'"
expect "cite a rule" 0 "limiting element voltage" "$onehand" cite resistor-limiting-voltage
expect "cite a standard" 0 "table iec-60664-1-creepage" "$onehand" cite "IEC 60664-1"
expect "cite nothing" 2 "nothing is known by" "$onehand" cite zzzz
expect "rules of a set" 0 "used for  teaching lab" "$onehand" rules --limit-sets "IEC 60664-1"
expect "rules of no set" 2 "nearest known name: IEC 60664-1" "$onehand" rules --limit-sets "IEC 60664"
expect "cite a clause" 0 "rule access-class" "$onehand" cite "table 4"
expect "rules" 0 "rules; cite ID" "$onehand" rules
expect "kinds" 0 "display-tube" "$onehand" kinds
expect "a kind" 0 "limiting-voltage" "$onehand" kinds resistor
expect "no kind" 2 "nearest known name: resistor" "$onehand" kinds resistr
expect "version" 0 "onehand 0.1.0" "$onehand" --version
expect "help" 0 "audit" "$onehand" --help
expect "no escapes off a terminal" 1 "" bash -c "$onehand audit samples/tide-clock-as-built.toml | grep -q \$'\\x1b' && exit 0 || exit 1"
expect "full disk" 3 "could not be written" bash -c "$onehand audit samples/geiger-bench.toml > /dev/full"
expect "standard input" 0 "NO OBJECTION FOUND" bash -c "cat samples/geiger-bench.toml | $onehand audit -"
cp samples/geiger-bench.toml "$work/own.toml"
expect "output over itself" 2 "over the description itself" "$onehand" audit "$work/own.toml" --output "$work/own.toml"
cmp -s samples/geiger-bench.toml "$work/own.toml" || { echo "FAILED: the description was written over"; failed=1; }
expect "output" 0 "" "$onehand" audit "$work/own.toml" --output "$work/report.txt"
grep -q "NO OBJECTION FOUND" "$work/report.txt" || { echo "FAILED: no report written"; failed=1; }
expect "output nowhere" 3 "" "$onehand" audit "$work/own.toml" --output "$work/none/report.txt"
mkdir "$work/shop"
expect "the sample shop rules" 1 "Creepage with half as much again" "$onehand" audit --rules samples/shop-rules samples/tide-clock-as-built.toml
expect "the sample shop rules are a set" 0 "Harbour bench: what this bench asks" "$onehand" rules --rules samples/shop-rules --limit-sets "Harbour bench"
cp rules/resistor-limiting-voltage.toml "$work/shop/house-resistor.toml"
sed -i 's/<= limiting-voltage/<= 0.5 * limiting-voltage/' "$work/shop/house-resistor.toml"
expect "shop rules stricter" 1 "house-resistor" "$onehand" audit --format json --rules "$work/shop" samples/tide-clock-corrected.toml --set K1.spike="40 V" --set R7.limiting-voltage="150 V"
printf 'names = "resistor-limiting-voltage"\n' | cat - "$work/shop/house-resistor.toml" > "$work/shop/x" && mv "$work/shop/x" "$work/shop/house-resistor.toml"
sed -i 's/<= 0.5 \* limiting-voltage/<= 9 * limiting-voltage/' "$work/shop/house-resistor.toml"
expect "shop rules milder are told" 1 "loosened: shop rule house-resistor is milder" "$onehand" audit --rules "$work/shop" samples/tide-clock-as-built.toml
sed -i '/^require/s/limiting-voltage/limiting-voltag/' "$work/shop/house-resistor.toml"
expect "shop rules broken" 2 "nearest known name: limiting-voltage" "$onehand" audit --rules "$work/shop" samples/geiger-bench.toml
expect "no shop folder" 2 "is no folder" "$onehand" audit --rules "$work/nowhere" samples/geiger-bench.toml
echo "$count cases"
exit $failed
