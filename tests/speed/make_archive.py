#!/usr/bin/env python3
"""make_archive.py FOLDER COUNT [FIRST]: an archive of COUNT synthetic jobs, numbered from FIRST.

Each job has about 60 parts, 300 readings and 40 KB, as a whole restoration of a large set has. The
same number always gives the same file. Names are invented. One job in forty is a later visit of
the job twenty before it.
"""
import os
import random
import sys

MAKERS = ["Pellworth Wireless", "Harkaway & Lisle", "Lindmere", "Cassant", "Hollin & Wray", "Ostrand",
          "Pavill", "Marrick", "Vessel Radio", "Thornby"]
MODELS = ["Curlew", "Console", "Tern", "Bijou", "Type", "Kvartett", "Lyric", "Compass", "Beacon", "Mariner",
          "Heron", "Sonnet"]
PART_MAKERS = ["Brackmoor", "Dunsford", "Telcap", "Orrell", "Wexley", "Solent"]
DIELECTRICS = ["waxed paper", "waxed paper", "paper", "moulded paper", "oil paper", "metallised paper", "mica",
               "ceramic", "polystyrene", "polyester"]
LEAKY = {"waxed paper": -6.2, "paper": -6.4, "moulded paper": -6.8, "oil paper": -7.0, "metallised paper": -6.8,
         "mica": -8.2, "ceramic": -8.2, "polystyrene": -8.6, "polyester": -8.4}
PLACES = [
    ("coupling", ["stage: output", "source: 90 V 220k"]),
    ("coupling", ["stage: af", "source: 60 V 100k"]),
    ("avc bypass", ["line: avc", "feed: 2 meg", "service: 12 V"]),
    ("screen bypass", ["stage: if", "service: 100 V"]),
    ("decoupling", ["feed: 10k", "current: 6 mA", "service: 240 V"]),
    ("tone", ["stage: output", "service: 250 V"]),
    ("detector", ["feed: 470k", "service: 15 V"]),
    ("tuning", ["circuit: 22k", "service: 100 V"]),
]
PROSE = ("The set came with a dry loft behind it and a mains lead that could not be trusted. Dust was drawn off "
         "first, then the chassis was taken out and photographed from both sides. Every part that could be lifted "
         "without disturbing the wiring was read with one lead free, and the reading was written down before the "
         "limit was looked up. Where the wiring was brittle the part was left alone and the record says so. ")


def current(amperes):
    micro = amperes * 1e6
    if micro < 0.01:
        return "under 0.01 uA"
    return "%.2f uA" % micro if micro < 100 else "%.0f uA" % micro


def capacitor(random_, ref, out):
    kind = random_.choice(DIELECTRICS)
    place, facts = random_.choice(PLACES)
    value = random_.choice(["0.005 uF", "0.01 uF", "0.02 uF", "0.05 uF", "0.1 uF", "250 pF", "0.25 uF"])
    volts = random_.choice([350, 400, 500, 600])
    steady = 10 ** random_.gauss(LEAKY[kind], 0.9)
    spread = steady * random_.uniform(0.5, 3)
    out.append("  %s:" % ref)
    out.append("    type: %s" % kind)
    out.append("    maker: %s" % random_.choice(PART_MAKERS))
    out.append("    marked: %s %d V 20 %%" % (value, volts))
    out.append("    place: %s" % place)
    out.extend("    " + fact for fact in facts)
    out.append("    readings:")
    for volt in (50, 100):
        words = ["%d V %s %s" % (volt, times, current((steady + spread * 60 / seconds) * volt / 100))
                 for times, seconds in (("60 s", 60), ("2 min", 120), ("5 min", 300), ("10 min", 600))]
        out.append("      - " + ", ".join([words[0]] + [word.split(" ", 2)[2] for word in words[1:]]))
    failed = steady > 2e-7
    if failed and random_.random() < 0.9:
        out.append("    done: %s" % random_.choice(["replaced", "restuffed"]))
        out.append("    fitted: polypropylene %s 630 V" % value)
        out.append("    batch: 20%02d-P%02d" % (random_.randint(26, 36), random_.randint(1, 12)))
        out.append("    signed: inside the end cap, with the year")
        out.append("    reason: as agreed with the owner")
    else:
        out.append("    done: kept")
        out.append("    reason: the owner wished it left as it is, whatever was read")
    out.append("    note: read with the chassis on its side and the lead at the tag strip lifted, as the others were")


def electrolytic(random_, ref, out):
    level = 10 ** random_.uniform(-5, -3.2)
    out.append("  %s:" % ref)
    out.append("    type: electrolytic")
    out.append("    maker: %s" % random_.choice(PART_MAKERS))
    out.append("    marked: 16 uF 450 V")
    out.append("    place: %s" % random_.choice(["reservoir", "smoothing"]))
    out.append("    current: 65 mA")
    out.append("    service: 300 V")
    out.append("    measured: %.1f uF" % random_.uniform(10, 24))
    out.append("    readings:")
    out.append("      - 300 V 60 s %s, 2 min %s, 5 min %s, 10 min %s" % tuple(
        current(level * (1 + 4 * 60 / seconds)) for seconds in (60, 120, 300, 600)))
    out.append("    done: %s" % random_.choice(["kept", "reformed"]))
    out.append("    reason: the owner wished it left as it is, whatever was read")


def job_text(number, name, earlier):
    random_ = random.Random(earlier if earlier is not None else number)
    maker = random_.choice(MAKERS)
    model = "%s %d" % (random_.choice(MODELS), random_.choice([4, 5, 17, 36, 42, 44, 56, 71]))
    year = random_.randint(1930, 1962)
    serial = random_.randint(10000, 999999)
    random_ = random.Random(number)
    start = 2020 + number // 600 + (5 if earlier is not None else 0)
    month, day = 1 + number // 50 % 12, 1 + number % 27
    out = ["job: %s" % name, "set:", "  maker: %s" % maker, "  model: %s" % model, "  chassis: C%d" % (serial % 97),
           "  serial: %d" % serial, "  year: about %d" % year, "  supply: transformer", "  mains: 230 V",
           "  frequency: 50 Hz", "owner:", "  name: A. Client-%d" % number, "  contact: by post",
           "received: %d-%02d-%02d" % (start, month, day)]
    if number % 40 != 7:
        out.append("returned: %d-%02d-28" % (start, month))
    if number % 10 == 3:
        out.append("call_back: %d-%02d-01" % (start + 5, month))
    out += ["technician: R. O.", "conditions:", "  bench: 19 C", "  humidity: 48 %", "  working: 45 C"]
    for section in ("arrival", "request", "plan", "work"):
        out.append("%s: |" % section)
        for part in range(9):
            words = (PROSE * 2).split()
            turn = random_.randrange(len(words) // 2)
            text = " ".join(words[turn:turn + 75])
            for at in range(0, len(text), 96):
                out.append("  " + text[at:at + 96].strip())
            out.append("")
    out += ["instruments:", "  leakage:", "    accuracy: 2 % + 0.02 uA", "    resolution: 0.01 uA", "    series: 10k",
            "    volts: 25 V, 50 V, 100 V, 250 V, 300 V",
            "stages:",
            "  if:", "    valve: V2 6SK7", "    supply: 247 V", "    anode: 150 ohm", "    screen: R4", "    cathode: R5",
            "    grid_leak: 2 meg",
            "  af:", "    valve: V3 6SQ7", "    row: A1-100 (later issue)", "    supply: 247 V", "    anode: R9",
            "    bias: contact", "    grid_leak: R8",
            "  output:", "    valve: V4 6V6GT", "    row: A1-250", "    supply: 262.5 V", "    anode: T2",
            "    cathode: R12", "    grid_leak: R10", "    measured:",
            "      found: grid %.1f V, cathode 13.7 V, anode 247 V, screen 262 V" % random_.uniform(0, 2),
            "      left: grid 0.0 V, cathode 12.6 V, anode 249 V, screen 263 V"]
    out.append("capacitors:")
    for i in range(1, 36):
        capacitor(random_, "C%d" % i, out)
    for i in range(36, 39):
        electrolytic(random_, "C%d" % i, out)
    values = {4: "68k", 5: "330 ohm", 8: "10 meg", 9: "270k", 10: "470k", 12: "270 ohm"}
    out.append("resistors:")
    for i in range(1, 17):
        marked = values.get(i, random_.choice(["100k", "47k", "1 meg", "22k", "2.2k"]))
        ohms = {"68k": 68e3, "330 ohm": 330, "10 meg": 1e7, "270k": 270e3, "470k": 470e3, "270 ohm": 270, "100k": 1e5,
                "47k": 47e3, "1 meg": 1e6, "22k": 22e3, "2.2k": 2200}[marked] * random_.uniform(0.9, 1.15)
        text = "%.3g" % ohms if ohms < 1000 else "%.4g" % (ohms / 1e3)
        out.append("  R%d: {marked: %s 1 W 20 %%, measured: %s, done: kept}" % (
            i, marked, text + (" ohm" if ohms < 1000 else " kohm")))
    out += ["windings:", "  T1: {marked: 38 ohm, measured: 39 ohm, insulation: over 100 M, done: kept}",
            "  T2: {marked: 310 ohm, measured: 316 ohm, insulation: over 100 M, done: kept}", "valves:"]
    for i, kind in enumerate(["6SK7", "6SQ7", "6V6GT"]):
        out.append("  V%d: {tested: %d %%, done: kept}" % (i + 2, random_.randint(60, 99)))
    if earlier is not None:
        out.append("continues: %s" % name_of(earlier))
    return "\n".join(out) + "\n"


def name_of(number):
    return "%d-%05d" % (2020 + number // 600, number)


def earlier_of(number):
    return number - 20 if number % 40 == 31 else None


def main():
    folder, count = sys.argv[1], int(sys.argv[2])
    first = int(sys.argv[3]) if len(sys.argv) > 3 else 1
    os.makedirs(folder, exist_ok=True)
    with open(os.path.join(folder, "shop.yaml"), "w") as shop:
        shop.write("name: Speed Test\ntrade: Synthetic jobs\naddress: 1 Clock Street\ncontact: by post\n")
    for number in range(first, first + count):
        name = name_of(number)
        with open(os.path.join(folder, name + ".yaml"), "w") as file:
            file.write(job_text(number, name, earlier_of(number)))


main()
