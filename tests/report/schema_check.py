#!/usr/bin/env python3
"""Validates real JSON output of the program against lib/report/result.schema.json with the general-purpose jsonschema package."""
import json
import subprocess
import sys

import jsonschema

program, source = sys.argv[1:3]
schema = json.load(open(f"{source}/lib/report/result.schema.json"))
validator = jsonschema.Draft7Validator(schema)
validator.check_schema(schema)
files = ["tide-clock-as-built", "tide-clock-corrected", "geiger-bench", "minimal", "negative-rail", "repair-rail", "valve-rail-flyback", "photomultiplier-ladder"]
bad = 0
runs = [["audit", "--format", "json", f"samples/{f}.toml"] for f in files]
runs.append(["audit", "--format", "json", "samples/minimal.toml", "no-such-file.toml"])
runs.append(["discharge", "--format", "json", "samples/geiger-bench.toml"])
runs.append(["spacing", "--format", "json", "samples/tide-clock-as-built.toml"])
runs.append(["spacing", "--format", "json", "samples/repair-rail.toml"])
for run in runs:
    out = subprocess.run([program, *run], cwd=source, capture_output=True, text=True).stdout
    for error in validator.iter_errors(json.loads(out)):
        print(run, list(error.absolute_path), error.message[:200])
        bad += 1
# A schema that accepts anything would be no check: a wrong verdict and a stray key must be refused.
good = json.loads(subprocess.run([program, *runs[0]], cwd=source, capture_output=True, text=True).stdout)
good["audits"][0]["findings"][0]["verdict"] = "fine"
assert list(validator.iter_errors(good)), "a wrong verdict was accepted"
good["audits"][0]["findings"][0]["verdict"] = "fail"
good["audits"][0]["stray"] = 1
assert list(validator.iter_errors(good)), "a stray key was accepted"
print(f"{len(runs)} outputs, {bad} errors")
sys.exit(1 if bad else 0)
