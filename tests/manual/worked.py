"""worked.py TEMPLATES GRIDLEAK ARCHIVE: the manual's three worked limits, worked out here once more
from the formulas that the manual gives, as a doubtful engineer would. The figures that it prints
are these figures, rounded, and the program's own agree with them."""
import json
import math
import os
import subprocess
import sys

templates, program, archive = sys.argv[1:4]
with open(os.path.join(templates, "manual-worked.md"), encoding="utf-8") as file:
    text = file.read()
mistakes = []
checked = 0


def printed(words, where):
    global checked
    checked += 1
    if words not in where:
        mistakes.append(f"not in the manual: '{words}'")


def close(name, ours, theirs, relative):
    global checked
    checked += 1
    if theirs is None or not abs(ours - theirs) <= relative * abs(ours):
        mistakes.append(f"{name}: by hand {ours:.6g}, the program {theirs}")


def findings(job):
    out = subprocess.run([program, "assess", "--json", os.path.join(archive, job + ".yaml")],
                         capture_output=True, check=True).stdout
    return {part["ref"]: part for part in json.loads(out)["capacitors"]}


def criterion(part, key, joint=False):
    return next(c["value"] for c in part["criteria"] if c["key"] == key and c["joint"] == joint)


def section(title):
    return " ".join(text.split("### " + title)[1].split("\n### ")[0].split())


def coupling():
    here = section("A coupling capacitor")
    va, vg2, vg1, ia, ig2, gm, ra, m = 250, 250, -16.5, 0.034, 0.0065, 0.0025, 80e3, 0.4
    cathode, grid_leak, source, factor = 407, 470e3, 90, 2 ** (25 / 10)
    d0, q0 = 1.5 * ia / gm, ig2 / ia
    screen_part = m * ia * q0 / (va * (1 + q0))
    ka = max(0, 1 / ra - screen_part) / gm
    mu12 = vg2 / (d0 - vg1 - ka * va)
    risen = d0 * 1.1 ** (2 / 3)
    cathode_v = (ia + ig2) * cathode
    grid = risen - d0 + 0.1 * cathode_v * (1 + 1 / mu12 + ka)
    leak = grid / grid_leak
    full = leak * source / (source - grid)
    warm = full / 2
    bench = warm / factor * 100 / source
    for words in (f"{d0:.2f} V", f"= {q0:.4f}", f"= {screen_part * 1e6:.2f} µS", f"= {ka:.5f}",
                  f"= {mu12:.3f}", f"= {risen:.3f} V", f"by {risen - d0:.3f} V",
                  f"{0.1 * cathode_v:.3f} V", f"= {grid:.3f} V", f"= {leak * 1e6:.3f} µA",
                  f"({source} - {grid:.3f}) V", f"{(source - grid) / leak / 1e6:.2f} MΩ",
                  f"{full * 1e6:.3f} µA", f"{1.1 * va * ia:.2f} W", f"warm: {warm * 1e6:.3f} µA",
                  f"{factor:.3f}", f"{warm / factor * 1e6:.3f} µA at 90 V",
                  f"{bench * 1e6:.3f} µA, or {100 / bench / 1e6:.0f} MΩ"):
        printed(words, here)
    part = findings("2031-101")["C14"]
    # R_k is a rounded 407 ohm: the bare stage stands 0.06 % above the row.
    close("coupling, warm", warm, part["limit_a"], 0.002)
    close("coupling, at 100 V", bench, part["sheet_limit_a"] * 100 / part["sheet_voltage_v"], 0.002)
    close("coupling, bench", warm / factor, part["bench_limit_a"], 0.002)
    reading = 0.6e-6 * source / 100 * factor
    printed(f"{reading * 1e6:.2f} µA warm", here)
    close("coupling, reading", reading, part["leakage_warm_a"], 1e-6)


def avc():
    here = section("A bypass of an AVC line")
    feed, service, factor = 1e6, 20, 2 ** (25 / 10)
    warm = service / (19 * feed)
    bench = warm / factor
    loss = lambda g: 100 * g * feed / (1 + g * feed)
    c3, c7 = (i * service / 100 * factor / service for i in (0.05e-6, 0.70e-6))
    for words in (f"{warm * 1e6:.3f} µA", f"{bench * 1e6:.3f} µA at 20 V",
                  f"{bench * 5 * 1e6:.3f} µA at 100 V", f"{service / bench / 1e6:.0f} MΩ",
                  f"{c7 * service * 1e6:.3f} µA warm", f"{1 / c7 / 1e6:.1f} MΩ",
                  f"{loss(c7):.2f} %", f"{c3 * service * 1e6:.4f} µA warm", f"{1 / c3 / 1e6:.0f} MΩ",
                  f"{1 / (c3 + c7) / 1e6:.1f} MΩ", f"{loss(c3 + c7):.2f} %",
                  f"{bench * 5 / 2 * 1e6:.3f} µA at 100 V"):
        printed(words, here)
    parts = findings("2031-102")
    close("AVC, warm", warm, parts["C7"]["limit_a"], 1e-6)
    close("AVC, bench", bench, parts["C7"]["bench_limit_a"], 1e-6)
    close("AVC, C7", loss(c7), criterion(parts["C7"], "line loss"), 1e-6)
    close("AVC, both", loss(c3 + c7), criterion(parts["C7"], "line loss", True), 1e-6)
    sheet = parts["C7"]["sheet_limit_a"] * 100 / parts["C7"]["sheet_voltage_v"]
    close("AVC, sheet", bench * 5 / 2, sheet, 1e-6)


def reservoir():
    here = section("A reservoir")
    factor = 2 ** (25 / 30.3)
    rule = (0.04 * 16 + 0.3) * 1e-3
    surface = math.pi * 0.035 * (0.075 + 0.035 / 2)
    heat = 30.3 * 12 * surface / (4 * math.e * math.log(2))
    share = 0.02 * 60e-3
    warm = min(rule * factor, heat / 320, share)
    reading = 400e-6 * factor
    for words in (f"= {factor:.3f}", f"= {rule * 1e3:.3f} mA", f"{rule * factor * 1e3:.3f} mA warm",
                  f"{surface:.5f} m²", f"= {heat:.3f} W", f"{heat / 320 * 1e3:.3f} mA warm",
                  f"{share * 1e3:.3f} mA", f"{warm / factor * 1e3:.3f} mA",
                  f"{320 / (warm / factor) / 1e6:.3f} MΩ", f"{reading * 1e3:.3f} mA warm",
                  f"{100 * reading / 60e-3:.2f} %", f"{reading * 320:.3f} W"):
        printed(words, here)
    part = findings("2031-103")["C20"]
    close("reservoir, warm", warm, part["limit_a"], 1e-6)
    close("reservoir, bench", warm / factor, part["bench_limit_a"], 1e-6)
    close("reservoir, heat", heat,
          next(c["limit"] for c in part["criteria"] if c["key"] == "heat"), 1e-6)
    close("reservoir, reading", reading, part["leakage_warm_a"], 1e-6)


coupling()
avc()
reservoir()
print(f"3 limits worked by hand, {checked} figures, {len(mistakes)} differ")
sys.exit("\n".join(mistakes) or 0)
