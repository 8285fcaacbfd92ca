#!/usr/bin/env python3
"""recompute.py FINDINGS.jsonl OUTPUT: shares, drift, recall and call-backs computed anew from the output of
assess --json and from the job files' own words, compared with the CSV files beside statistics.html, and with
the tables of the page itself. Shares no code with the program: Student's t by integrating its density, Wilson's interval by solving its equation."""
import csv
import datetime
import html
import json
import math
import re
import statistics
import sys

findings = [json.loads(line) for line in open(sys.argv[1])]
output = sys.argv[2]
wrong = []
compared = 0


def t_quantile95(freedom):
    norm = math.exp(math.lgamma((freedom + 1) / 2) - math.lgamma(freedom / 2)) / math.sqrt(freedom * math.pi)

    def half(x, steps=2000):  # Simpson from 0 to x
        h = x / steps
        density = lambda u: norm * (1 + u * u / freedom) ** (-(freedom + 1) / 2)
        total = density(0) + density(x)
        for i in range(1, steps):
            total += density(i * h) * (4 if i % 2 else 2)
        return total * h / 3

    low, high = 0.0, 15.0
    for _ in range(60):
        middle = (low + high) / 2
        low, high = (middle, high) if half(middle) < 0.475 else (low, middle)
    return low


def wilson(p, n):
    """Ends of the interval: |p - q| = z sqrt(q(1-q)/n), solved by bisection."""
    z = 1.959963984540054

    def end(inside, outside):
        for _ in range(80):
            middle = (inside + outside) / 2
            if abs(p - middle) <= z * math.sqrt(middle * (1 - middle) / n):
                inside = middle
            else:
                outside = middle
        return inside

    return (0.0 if p == 0 else end(p, 0.0)), (1.0 if p == 1 else end(p, 1.0))


def close(a, b, what, tolerance=2e-5):
    global compared
    compared += 1
    if (a is None) != (b is None) or (a is not None and abs(a - b) > tolerance * max(1, abs(b))):
        wrong.append("%s: %s, not %s" % (what, a, b))


def shares(members):
    """members: (set, outcome, unread) of one group."""
    sets = {}
    unread = sum(1 for _, _, missing in members if missing)
    outcomes = {}
    for job, outcome, missing in members:
        if missing:
            continue
        outcomes[outcome] = outcomes.get(outcome, 0) + 1
        if outcome in ("pass", "conditional pass", "conditional fail", "fail"):
            one = sets.setdefault(job, [0, 0])
            one[1] += 1
            one[0] += outcome == "fail"
    x = sum(one[0] for one in sets.values())
    n = sum(one[1] for one in sets.values())
    m = len(sets)
    answer = dict(failed=x, read=n, sets=m, unread=unread, share=None, low=None, high=None, outcomes=outcomes)
    if m >= 5:
        p = x / n
        if p in (0, 1):
            effective = m
        else:
            v = m / (m - 1) * sum((a - p * b) ** 2 for a, b in sets.values()) / n ** 2
            deff = max(1, v * n / (p * (1 - p)))
            effective = n / deff * (1.959963984540054 / t_quantile95(m - 1)) ** 2
        answer.update(share=p, effective=effective)
        answer["low"], answer["high"] = wilson(p, effective)
    return answer


groups = {}
for job in findings:
    if job["continues"]:
        continue
    year = job["set"]["year"] if "set" in job else None
    first, last = (job["set"].get("year_first"), job["set"].get("year_last"))
    decade = "%ds" % ((first + last) // 2 // 10 * 10) if first else ""
    cans = {can["ref"]: can for can in job.get("cans", [])}
    for part in job["capacitors"]:
        member = (job["job"], part["outcome_found"], part["replaced_unmeasured"])
        maker = part["maker"] or (cans[part["can"]]["maker"] if part["can"] else None) or ""
        for key in (("all", ""), ("type", part["type"] or ""), ("place", part["place"] or ""), ("decade", decade),
                    ("maker", maker)):
            groups.setdefault(key, []).append(member)

rows = list(csv.DictReader(open(output + "/statistics.csv")))
seen = set()
intervals = 0
for row in rows:
    key = (row["grouping"], row["label"])
    seen.add(key)
    if key not in groups:
        wrong.append("group %s is not among the findings" % (key,))
        continue
    expected = shares(groups[key])
    for name in ("failed", "read", "sets", "unread"):
        close(float(row[name]), expected[name], "%s %s" % (key, name))
    for name in ("pass", "conditional pass", "not judged", "conditional fail", "fail"):
        close(float(row[name]), expected["outcomes"].get(name, 0), "%s %s" % (key, name))
    for name in ("share", "low", "high"):
        close(float(row[name]) if row[name] else None, expected[name], "%s %s" % (key, name))
    if expected["share"] is not None:
        intervals += 1
        total = expected["read"] + expected["unread"]
        close(float(row["effective_parts"]), expected["effective"], "%s effective" % (key,), 1e-4)
        close(float(row["share_if_unread_good"]), expected["failed"] / total, "%s best" % (key,))
        close(float(row["share_if_unread_failed"]), (expected["failed"] + expected["unread"]) / total,
              "%s worst" % (key,))
for key in groups:
    if key not in seen:
        wrong.append("group %s is missing in statistics.csv" % (key,))
# The page: the same rows, in per cent to a tenth.
with open(output + "/statistics.html", encoding="utf-8") as file:
    page = file.read()


def page_rows(name):
    """The cells of each row of a table of the page, as text."""
    table = re.search(r'id="table_%s">(.*?)</table>' % name, page, re.S)
    for line in re.findall(r"<tr>(<th scope=\"row\".*?)</tr>", table.group(1) if table else "", re.S):
        yield [html.unescape(re.sub(r"<[^>]*>", "", cell)).replace("\u2009", "")
               for cell in re.findall(r"<t[hd][^>]*>(.*?)</t[hd]>", line, re.S)]


for grouping in ("type", "place", "decade", "maker"):
    shown = {cells[0].lower(): [float(figure) for cell in cells[1:] for figure in re.findall(r"[\d.]+", cell)]
             for cells in page_rows(grouping)}
    for row in rows:
        if row["grouping"] != grouping or not row["label"]:
            continue
        figures = [float(row[name]) for name in ("failed", "read", "sets")]
        if row["share"]:
            figures += [100 * float(row[name]) for name in ("share", "low", "high")]
        figures.append(float(row["unread"]))
        if row["share"] and float(row["unread"]):
            figures += [100 * float(row[name]) for name in ("share_if_unread_good", "share_if_unread_failed")]
        figures.append(float(row["not judged"]))
        got = shown.pop(row["label"].lower(), None)
        if got is None or len(got) != len(figures):
            wrong.append("statistics.html: %s %s: %s, not %s" % (grouping, row["label"], got, figures))
            continue
        for a, b in zip(got, figures):
            compared += 1
            if abs(a - b) > 0.0501:
                wrong.append("statistics.html: %s %s: %s, not %s" % (grouping, row["label"], a, b))
    if shown:
        wrong.append("statistics.html: the table by %s has rows that statistics.csv has not: %s" % (grouping, list(shown)))
if not any(float(row["unread"]) for row in rows):
    wrong.append("no part was replaced unread: the shares with and without them are not told apart")
if intervals < 10:
    wrong.append("only %d groups have an interval: too few to check" % intervals)

# Parts kept before and there again: the two jobs' readings side by side.
by_number = {job["job"]: job for job in findings}
again = {(row["job"], row["ref"]): row for row in csv.DictReader(open(output + "/revisits.csv"))}
revisits = 0
drifts = {}
for job in findings:
    if not job["continues"]:
        continue
    before = {part["ref"]: part for part in by_number[job["continues"]]["capacitors"]}
    for part in job["capacitors"]:
        old = before.get(part["ref"])
        row = again.pop((job["job"], part["ref"]), None)
        kept = old and old["done"] in ("kept", "kept untested", "reformed")
        if not kept:
            if row:
                wrong.append("%s %s was not kept before" % (job["job"], part["ref"]))
            continue
        # the synthetic jobs read every part at the same volts and times: the last pair alike
        pairs = [(a, b) for a in old["readings"] for b in part["readings"]
                 if a["set_v"] == b["set_v"] and a["time_s"] == b["time_s"]]
        if not pairs or row is None:
            wrong.append("%s %s: nothing compared" % (job["job"], part["ref"]))
            continue
        a, b = pairs[-1]
        bound = a.get("bound") or b.get("bound")
        revisits += 1
        factor = None if bound else b["current_a"] / a["current_a"]
        close(float(row["leakage_factor"]) if row["leakage_factor"] else None, factor,
              "%s %s leakage factor" % (job["job"], part["ref"]), 1e-3)
        away = datetime.date.fromisoformat(job["received"]) - datetime.date.fromisoformat(
            by_number[job["continues"]]["returned"])
        close(float(row["years"]), away.days / 365.25, "%s %s years" % (job["job"], part["ref"]), 2e-3)
        drift = drifts.setdefault(part["type"], {"parts": 0, "judged": 0, "failed": 0, "a year": []})
        drift["parts"] += 1
        drift["judged"] += part["outcome_found"] != "not judged"
        drift["failed"] += part["outcome_found"] == "fail"
        if factor:
            drift["a year"].append(factor ** (365.25 / away.days))
        if row["outcome"] != part["outcome_found"]:
            wrong.append("%s %s: outcome %s" % (job["job"], part["ref"], row["outcome"]))
# The page's table of them: counts, and the leakage's growth in a year, median and middle half.
shown = {cells[0]: cells[1:] for cells in page_rows("drift")}
for label, drift in drifts.items():
    cells = shown.get(label, [""] * 4)
    figures = [float(figure) for cell in cells[:4] for figure in re.findall(r"[\d.]+", cell)]
    expected = [drift["parts"], drift["judged"], drift["failed"]]
    if drift["a year"]:
        low, middle, high = (statistics.quantiles(drift["a year"], n=4, method="inclusive")
                             if len(drift["a year"]) > 1 else drift["a year"] * 3)
        expected += [middle, low, high]
    compared += len(expected)
    if len(figures) != len(expected) or any(abs(a - b) > 0.0051 + 0.001 * b for a, b in zip(figures, expected)):
        wrong.append("statistics.html: %s met again: %s, not %s" % (label, figures, expected))
if revisits < 10:
    wrong.append("only %d parts met again: too few to check" % revisits)

# Batches and call-backs.
recall = sorted((row["batch"], row["job"], row["ref"]) for row in csv.DictReader(open(output + "/recall.csv")))
expected = sorted((part["batch"], job["job"], part["ref"]) for job in findings
                  for kind in ("capacitors", "resistors", "windings") for part in job.get(kind, [])
                  if part.get("batch"))
compared += len(expected)
if recall != expected or not expected:
    wrong.append("recall.csv: %d rows, %d batched parts" % (len(recall), len(expected)))
calls = [(row["call_back"], row["job"]) for row in csv.DictReader(open(output + "/call-backs.csv"))]
expected = sorted((job["call_back"], job["job"]) for job in findings if job.get("call_back"))
compared += len(expected)
if calls != expected or not expected:
    wrong.append("call-backs.csv: %s, not %s" % (calls[:3], expected[:3]))

for line in wrong[:20]:
    print(line)
print("%d numbers recomputed, %d intervals, %d parts met again, %d wrong" % (compared, intervals, revisits, len(wrong)))
sys.exit(1 if wrong else 0)
