#!/usr/bin/env python3
"""blind.py GRIDLEAK WORK [SEED [COUNT]]: jobs whose physics is known to this script alone.

Each job has one paper capacitor with a leak, an absorption current, a temperature and a meter with
errors, all drawn at random. What the capacitor may leak in its place is worked out here by the
formulas of the manual, not by the program. Then the program judges:
  - where the true leak lies outside the guard band its outcome must be on the right side of the limit,
  - of all 95 % intervals (the warm leak, or the steady current of a fit) 92 to 98 % hold the truth.
Errors of the meter and of the test volts are rectangular, as makers state them; the bench's
temperature and the scatter of readings are normal.
"""
import json
import math
import random
import subprocess
import sys

T95 = {2: 4.303, 3: 3.182, 4: 2.776, 5: 2.571, 6: 2.447, 7: 2.365, 8: 2.306, 9: 2.262, 10: 2.228}
WORKING = 45.0
DOUBLING = 10.0


def figures(value, digits=5):
    return f"{value:.{digits}g}"


# ---- places: each gives (lines of the job, service volts, largest warm leak)

def avc_bypass(r):
    feed, volts = r.choice([470e3, 1e6, 2.2e6]), r.uniform(5, 20)
    loss = 0.05
    return ([f"place: avc bypass", "line: main", f"feed: {feed:.0f} ohm", f"service: {figures(volts)} V"],
            volts, volts * loss / ((1 - loss) * feed))


def decoupling(r):
    feed, volts = r.choice([1e3, 4.7e3, 22e3]), r.uniform(100, 280)
    return ([f"place: decoupling", f"feed: {feed:.0f} ohm", "current: 5 mA", f"service: {figures(volts)} V"],
            volts, min(0.02 * volts / feed, 0.02 / volts))


def detector(r):
    feed, volts = r.choice([47e3, 100e3, 220e3]), r.uniform(20, 100)
    return ([f"place: detector", f"feed: {feed:.0f} ohm", f"service: {figures(volts)} V"],
            volts, min(0.010 / feed, 0.02 / volts))


def other(r):
    feed, volts, shift = r.choice([10e3, 100e3, 1e6]), r.uniform(50, 250), r.choice([0.1, 0.5, 2.0])
    return ([f"place: other", f"feed: {feed:.0f} ohm", f"shift: {shift} V", f"service: {figures(volts)} V"],
            volts, min(shift / feed, 0.02 / volts))


def output_stage(leak_s, source, source_ohm, grid_ohm, cathode_ohm):
    """6V6GT, 250 V row, 262.5 V, no resistance in anode and screen: cathode current by the law."""
    d0, ka = 1.5 * 45e-3 / 4.1e-3, max(0, 1 / 50e3 - 45e-3 * 0.1 / (250 * 1.1)) / 4.1e-3
    mu12 = 250 / (d0 + 12.5 - ka * 250)
    into = leak_s / (1 + leak_s * source_ohm)
    grid = source * into / (into + 1 / grid_ohm)
    low, high = 0.0, 100.0
    for _ in range(100):
        cathode = (low + high) / 2
        rail = 262.5 - cathode
        drive = d0 + (grid - cathode + 12.5) + (rail - 250) * (1 / mu12 + ka)
        current = 49.5e-3 * max(drive / d0, 0) ** 1.5
        if current * cathode_ohm > cathode:
            low = cathode
        else:
            high = cathode
    return low / cathode_ohm, (262.5 - low) * low / cathode_ohm / 1.1, (262.5 - low) * low / cathode_ohm / 11


def coupling(r):
    source, source_ohm = r.uniform(70, 160), r.choice([47e3, 100e3, 220e3])
    grid_ohm, cathode_ohm = r.choice([220e3, 470e3]), r.uniform(245, 300)
    grid_ohm, cathode_ohm = round(grid_ohm), round(cathode_ohm, 1)
    bare, bare_w, bare_s = output_stage(0, source, source_ohm, grid_ohm, cathode_ohm)

    def good(leak_s):
        current, anode_w, screen_w = output_stage(leak_s, source, source_ohm, grid_ohm, cathode_ohm)
        return (current <= 1.1 * bare and not (anode_w > 12 and anode_w - bare_w > 0.6)
                and not (screen_w > 2 and screen_w - bare_s > 0.1) and leak_s * source ** 2 <= 0.02)
    low, high = math.log(1e-12), math.log(1e-3)
    for _ in range(100):
        middle = (low + high) / 2
        low, high = (middle, high) if good(math.exp(middle)) else (low, middle)
    return ([f"place: coupling", "stage: output", f"source: {figures(source)} V {source_ohm:.0f} ohm"],
            source, math.exp(low) * source,
            ["stages:", "  output:", "    valve: V4 6V6GT", "    row: va 250 V, vg2 250 V, vg1 -12.5 V, "
             "ia 45 mA, ig2 4.5 mA, gm 4.1 mA/V, ra 50k, pa 12 W, pg2 2 W", "    supply: 262.5 V",
             f"    cathode: {cathode_ohm} ohm", f"    grid_leak: {grid_ohm} ohm"])


PLACES = [avc_bypass, decoupling, detector, other, coupling]


# ---- one job

def make(r, number):
    place = r.choice(PLACES)
    lines, service, limit, *more = place(r)
    waxed = r.random() < 0.4
    limit /= 2 if waxed else 1
    bench = round(r.uniform(15, 25))
    true_bench = bench + r.gauss(0, 1 / math.sqrt(3))
    warm = limit * math.exp(r.uniform(math.log(0.05), math.log(20)))
    cold_s = warm / service * 2 ** ((true_bench - WORKING) / DOUBLING)
    percent, resolution = r.choice([(1, 1e-10), (2, 1e-9), (2, 1e-10), (3, 1e-9)])
    absolute = 2 * resolution
    series = r.choice([0, 10e3, 100e3])
    volts = math.ceil(service * r.uniform(1.0, 1.3))
    true_volts = volts * (1 + r.gauss(0, 0.01 / math.sqrt(3)))
    wrong = r.gauss(0, percent / 100 / math.sqrt(3))
    offset = r.gauss(0, absolute / math.sqrt(3))
    soaked = r.random() < 0.4
    leak = true_volts / (1 / cold_s + series)
    amplitude = leak * r.uniform(0.3, 3) if soaked else 0
    slope = r.uniform(0.6, 1.0)
    times = [15, 30, 60, 120, 240, 480, 900, 1800] if soaked else [r.choice([60, 120, 300])]
    readings = []
    for time in times:
        current = (leak + amplitude * (time / 60) ** -slope) * (1 + r.gauss(0, 0.005))
        shown = current * (1 + wrong) + offset
        shown = max(0, round(shown / resolution) * resolution)
        readings.append(f"{time} s {shown * 1e6:.{4 if resolution < 5e-10 else 3}f} uA")
    text = [f"job: {number}", "set:", "  maker: Pellworth", "  supply: transformer", "  mains: 230 V",
            "  frequency: 50 Hz", "received: 2031-02-03", "conditions:", f"  bench: {bench} C",
            f"  working: {WORKING:.0f} C", "instruments:", "  meter:",
            f"    accuracy: {percent} % + {absolute * 1e6:g} uA", f"    resolution: {resolution * 1e6:g} uA"]
    if series:
        text.append(f"    series: {series:.0f} ohm")
    text += more[0] if more else []
    text += ["capacitors:", "  C1:", f"    type: {'waxed paper' if waxed else 'paper'}",
             "    marked: 0.01 uF 1000 V"] + ["    " + line for line in lines]
    text += ["    readings:", f"      - {volts} V " + ", ".join(readings)]
    truth = {"place": place.__name__, "limit": limit, "warm": warm, "soaked": soaked, "leak": leak,
             "percent": percent, "absolute": absolute, "resolution": resolution}
    return "\n".join(text) + "\n", truth


# ---- what the program says

FAILS, PASSES = {"fail", "conditional fail"}, {"pass", "conditional pass"}


def main():
    program, work = sys.argv[1:3]
    seed = int(sys.argv[3]) if len(sys.argv) > 3 else 20310203
    count = int(sys.argv[4]) if len(sys.argv) > 4 else 500
    r = random.Random(seed)
    truths, files = [], []
    for i in range(count):
        number = f"B-{i + 1:04d}"
        text, truth = make(r, number)
        path = f"{work}/{number}.yaml"
        with open(path, "w") as file:
            file.write(text)
        truths.append(truth)
        files.append(path)
    found = []
    for start in range(0, count, 100):
        made = subprocess.run([program, "assess", "--json", *files[start:start + 100]],
                              stdout=subprocess.PIPE, stderr=subprocess.PIPE, text=True)
        if made.returncode not in (0, 1):
            sys.exit(f"gridleak: {made.stderr[:2000]}")
        found += [json.loads(line) for line in made.stdout.splitlines()]
    wrong = risked = conditional = judged = 0
    covered = intervals = limits_off = 0
    unjudged = {}
    for truth, job in zip(truths, found):
        part = job["capacitors"][0]
        if not part["limit_a"] or abs(part["limit_a"] / truth["limit"] - 1) > 0.005:
            limits_off += 1
            print(f"{job['job']} {truth['place']}: limit {part['limit_a']}, here {truth['limit']}")
        u = part["uncertainty_a"]
        if truth["soaked"]:
            fit = part["absorption"]
            if fit["status"] == "resolved":
                intervals += 1
                accuracy = 2 * (truth["percent"] / 100 * truth["leak"] + truth["absolute"]) / math.sqrt(3)
                half = math.hypot(T95.get(fit["freedom"], 2.0) * fit["steady_error_a"], accuracy)
                covered += abs(fit["steady_a"] - truth["leak"]) <= half
        else:
            intervals += 1
            covered += abs(part["leakage_warm_a"] - truth["warm"]) <= u
        outcome, off = part["outcome_found"], truth["warm"] - truth["limit"]
        right = outcome in (FAILS if off > 0 else PASSES)
        if outcome == "not judged":
            unjudged[part["why"]] = unjudged.get(part["why"], 0) + 1
            continue
        judged += 1
        conditional += outcome.startswith("conditional")
        firm = not outcome.startswith("conditional")
        risked += not right and firm and abs(off) <= u
        if not right and ((firm and abs(off) > u) or abs(off) > 2 * u):
            wrong += 1
            print(f"{job['job']} {truth['place']}: {outcome}, true {truth['warm']:.4g} A of {truth['limit']:.4g} A, U {u:.4g} A")
    share = 100 * covered / intervals
    reasons = ", ".join(f"{why} {n}" for why, n in sorted(unjudged.items())) or "none"
    print(f"seed {seed}: {count} jobs, {judged} judged, of these {conditional} conditional, {wrong} wrong, "
          f"{risked} wrong within the guard band; "
          f"not judged: {reasons}")
    print(f"95 % intervals: {intervals}, of which {share:.1f} % hold the truth (92 to 98)")
    print(f"limits that differ by more than 0.5 %: {limits_off}")
    known = {"instrument", "wait", "still falling", "too early"}
    ok = wrong == 0 and limits_off == 0 and 92 <= share <= 98 and set(unjudged) <= known
    ok = ok and judged >= 0.9 * count and risked <= 0.02 * count
    sys.exit(0 if ok else 1)


main()
