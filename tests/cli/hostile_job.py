"""A job with every key that a job file can have, and what each key would bear.

fields(PROGRAM): the paths of all keys, from the JSON Schema of the program.
job(): (path, value) of every line, in the order of the file; a path is a tuple of keys.
"""
import json
import subprocess

PART = {"maker": "Dunmere", "was": "original", "seen": "above"}


def capacitor(**more):
    part = {"type": "waxed paper", "maker": "Dunmere", "marked": "0.05 uF 350 V", "date_code": "FEB 51",
            "seen": "below", "was": "original", "place": "decoupling", "feed": "10k", "current": "2 mA",
            "service": "100 V", "near_heat": "no", "readings": ["100 V 60 s 0.2 uA, 5 min 0.2 uA"],
            "measured": "0.05 uF", "case": "12 x 35 mm", "done": "kept", "reason": "it is good",
            "note": "wax has run"}
    part.update(more)
    return {key: value for key, value in part.items() if value is not None}


def tree():
    replaced = {"done": "replaced", "fitted": "polypropylene 0.047 uF 630 V", "age": "modern",
                "batch": "2029-W14", "signed": "inside end cap", "price": "1.20"}
    electrolytic = {"type": "electrolytic", "marked": "8 uF 450 V", "measured": "9 uF esr 2 ohm",
                    "service": "250 V", "feed": None, "readings": ["250 V 60 s 0.2 mA, 5 min 0.1 mA"]}
    in_can = {**electrolytic, "maker": None, "date_code": None, "seen": None, "was": None, "case": None,
              "done": None, "reason": None, "note": None}
    renewed = {"seen": "above", "was": "original", "done": "replaced", "fitted": "270 ohm 1 W",
               "age": "modern", "batch": "2029-W14", "price": "1.20", "reason": "out of tolerance",
               "note": "body discoloured", "maker": "Dunmere"}
    return {
        "job": "hostile",
        "set": {"maker": "Pellworth Wireless", "model": "Curlew 56", "chassis": "C56/2", "serial": "118204",
                "description": "table superhet", "year": "about 1951", "supply": "transformer",
                "mains": "230 V", "frequency": "50 Hz", "ht_secondary": "275 V", "rectifier": "full wave"},
        "owner": {"name": "Zyx Qwv", "contact": "99 Jkj Street"},
        "received": "2031-02-03", "returned": "2031-03-19", "technician": "R. Oxlade",
        "conditions": {"bench": "19 C", "humidity": "48 %", "working": "45 C", "working_near_heat": "55 C"},
        "arrival": "Dusty.", "request": "Make it play.", "private": "A fuse was bridged.",
        "plan": "Measure.", "approvals": "Agreed by letter.",
        "instruments": {"leakage": {
            "description": "leakage meter", "accuracy": "2 % + 0.02 uA", "resolution": "0.01 uA",
            "series": "10k", "burden": "2k", "supply_current": "2 mA", "volts_accuracy": "1 %",
            "volts": "25 V, 50 V, 100 V, 250 V", "compared": "2030-11-02", "full_scale": "50 uA"},
            "meter": {"description": "multimeter", "sensitivity": "20 kohm/V"},
            "digital": {"description": "multimeter", "input": "10 M"}},
        "stages": {
            "output": {"valve": "V4 6V6GT", "supply": "262.5 V", "anode": "310 ohm", "screen": "250 V 1k 1 W",
                       "cathode": "R12", "grid_leak": "470k", "use": "output",
                       "measured": {"found": "cathode 16.2 V, anode 238 V", "left": "cathode 12.9 V, anode 242 V"}},
            "left": {"valve": "V6 6V6GT", "supply": "250 V", "anode": "310 ohm", "bias": "R20", "others": "28 mA",
                     "grid_leak": "470k", "pushpull_with": "right"},
            "right": {"valve": "V7 6V6GT", "supply": "250 V", "anode": "310 ohm", "bias": "R20", "others": "28 mA",
                      "grid_leak": "470k", "pushpull_with": "left"},
            "first": {"valve": "V3 XY99", "row": "va 250 V, vg1 -2 V, ia 1.2 mA, gm 1.6 mA/V, mu 100",
                      "row_source": "maker's sheet", "supply": "250 V", "anode": "220k", "cathode": "1.5k",
                      "grid_leak": "1 meg"}},
        "cans": {"CAN1": {"holds": "C20 C21", "maker": "Dunmere", "seen": "above", "was": "original",
                          "done": "replaced", "fitted": "electrolytic 22 uF 450 V", "age": "modern",
                          "date_code": "FEB 51", "case": "35 x 75 mm", "signed": "under the rivet",
                          "batch": "2029-W14", "price": "9.50", "reason": "one section is dead",
                          "note": "rivets undisturbed"}},
        "capacitors": {
            "C1": capacitor(),
            "C2": capacitor(**replaced),
            "C3": capacitor(**{**replaced, "done": "restuffed"}),
            "C4": capacitor(place="coupling", stage="output", source="90 V 220k", feed=None, current=None,
                            service="90 V", readings=["100 V 60 s 9 uA"], done=None),
            "C5": capacitor(place="avc feed", source="90 V", delay="3 V", feed="1 meg", current=None),
            "C6": capacitor(place="avc bypass", line="avc", feed="1 meg", current=None, service="12 V"),
            "C7": capacitor(place="tuning", circuit="150k", feed=None, current=None),
            "C8": capacitor(place="other", shift="0.1 V", current=None),
            "C9": capacitor(place="other", pulse="yes", pulse_peak="800 V", shift="1 V", current=None),
            "C10": capacitor(place="across mains", plug_side="yes", service=None, feed=None, current=None,
                             **{**replaced, "fitted": "X2 0.047 uF 275 V"}),
            "C20": capacitor(place="reservoir", rule="JAN-C-62", ripple="100 Hz",
                             hum="found 2.1 V, left 1.4 V", **in_can),
            "C21": capacitor(place="smoothing", **in_can)},
        "resistors": {"R12": {**renewed, "marked": "270 ohm 1 W 10 %", "measured": "310 ohm", "volts": "12.9 V",
                              "date_code": "FEB 51"},
                      "R20": {"marked": "120 ohm 2 W", "done": "kept untested"}},
        "windings": {"T2": {**renewed, "marked": "310 ohm", "measured": "316 ohm", "temperature": "24 C",
                            "insulation": "over 100 M", "inductance": "10 H", "fitted": "rewound 305 ohm"}},
        "controls": {"VR1": {"what": "volume", "seen": "above", "was": "original", "done": "replaced",
                             "fitted": "500k log", "age": "modern", "price": "1.20", "reason": "worn out"}},
        "valves": {"V8": {"type": "5Y3GT", "maker": "Dunmere", "tested": "78 %", "date_code": "FEB 51",
                          "seen": "above", "was": "original", "done": "replaced", "fitted": "5Y3GT, used",
                          "price": "1.20", "reason": "low"}},
        "counts": {"capacitors": "6", "resistors": "19", "windings": "7", "controls": "3"},
        "voltages": {"meter": "1000 ohm/V", "sheet_mains": "230 V", "found_mains": "236 V",
                     "left_mains": "234 V", "points": {
                         "V4 anode": "sheet 248 V, range 500 V, source 310 ohm, found 247 V, left 249 V"}},
        "performance": {"sensitivity": "found 310 uV, left 42 uV, for 50 mW out"},
        "safety": {"earth bond": "0.08 ohm", "fuse": "3 A"},
        "photos": [{"file": "photos/one.jpg", "shows": "C1 C2", "caption": "underside as it came", "pair": "1",
                    "when": "before", "copies": "sale", "taken": "2031-02-03"}],
        "work": "2031-02-10 Reformed.", "not_done": "Dial cord.", "hazards": "Asbestos.",
        "removed": {"bag 1": "C2 C4"},
        "reforms": [{"capacitor": "C20", "date": "2031-02-10", "limiter": "47k", "volts": "across the part",
                     "log": ["50 V 30 s 170 uA, 5 min 21 uA, 12 min 30 s 9 uA"], "rest": "12 h",
                     "after_rest": "250 V 5 min 0.2 mA", "note": "case stayed at 24 C"}],
        "continues": "2024-031", "call_back": "2036-03-01",
    }


def lines(node, path=()):
    """(path, scalar) of every leaf; a list's item has its number as key."""
    pairs = node.items() if isinstance(node, dict) else enumerate(node)
    for key, value in pairs:
        if isinstance(value, (dict, list)):
            yield from lines(value, path + (key,))
        else:
            yield path + (key,), value


def replaced(node, path, value):
    """The tree with another scalar at path."""
    head, rest = path[0], path[1:]
    copy = dict(node) if isinstance(node, dict) else list(node)
    copy[head] = replaced(copy[head], rest, value) if rest else value
    return copy


def renamed(node, path, name):
    """The tree with another key at path, in its place."""
    head, rest = path[0], path[1:]
    if rest:
        copy = dict(node) if isinstance(node, dict) else list(node)
        copy[head] = renamed(copy[head], rest, name)
        return copy
    return {name if key == head else key: value for key, value in node.items()}


def yaml(node, indent=0):
    """Block style, every scalar in double quotes (JSON's escapes are YAML's)."""
    space = " " * indent
    out = []
    if isinstance(node, list):
        for item in node:
            if isinstance(item, dict):
                body = yaml(item, indent + 2)
                out.append(f"{space}- {body[indent + 2:]}")
            else:
                out.append(f"{space}- {json.dumps(item)}\n")
        return "".join(out)
    for key, value in node.items():
        name = key if key.replace("_", "").isalnum() else json.dumps(key)
        if isinstance(value, (dict, list)):
            out.append(f"{space}{name}:\n{yaml(value, indent + 2)}")
        else:
            out.append(f"{space}{name}: {json.dumps(value)}\n")
    return "".join(out)


def fields(program):
    """Paths of all keys in the schema; '*' for a key of the user's own or an item."""
    schema = json.loads(subprocess.run([program, "fields", "--schema"], check=True, capture_output=True).stdout)

    def walk(node, path):
        for key, below in node.get("properties", {}).items():
            yield path + (key,)
            yield from walk(below, path + (key,))
        for name in ("additionalProperties", "items"):
            if isinstance(node.get(name), dict):
                yield from walk(node[name], path + ("*",))
    return set(walk(schema, ()))
