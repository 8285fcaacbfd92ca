#!/usr/bin/env python3
"""outcomes.py OUTCOMES FINDINGS: leakage, limit and outcome of the example jobs against a table that
was worked out apart from the program (its header says how). Held to 1 %."""
import json
import sys

table, findings_file = sys.argv[1:]
found = {}
for line in open(findings_file, encoding="utf-8"):
    job = json.loads(line)
    for part in job["capacitors"]:
        found[job["job"], part["ref"]] = part
wrong, rows = [], 0
for line in open(table, encoding="utf-8"):
    if line.startswith("#") or not line.strip():
        continue
    job, ref, leakage, limit, outcome = line.split(None, 4)
    outcome = outcome.strip()
    rows += 1
    part = found.get((job, ref))
    if part is None:
        wrong.append(f"{job} {ref}: not in the findings")
        continue
    for name, expected, key in (("leakage", leakage, "leakage_warm_a"), ("limit", limit, "limit_a")):
        if expected == "-":
            continue
        value = part[key]
        if value is None or abs(value * 1e6 / float(expected) - 1) > 0.01:
            wrong.append(f"{job} {ref}: {name} {value and value * 1e6} uA, expected {expected} uA")
    if part["outcome"] != outcome:
        wrong.append(f"{job} {ref}: {part['outcome']}, expected {outcome}")
for text in wrong:
    print(text)
print(f"{rows} parts of the table compared, {len(wrong)} differ")
sys.exit(1 if wrong or rows < 80 else 0)
