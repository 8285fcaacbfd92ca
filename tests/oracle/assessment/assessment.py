#!/usr/bin/env python3
"""assessment.py VALVES FINDINGS SHOP JOB...: the assessment worked out a second time, and compared.

Shares nothing with the program: its own reading of the job file, its own three-halves law, its own
solver (nested false position on the node volts), uncertainties by central differences through the
whole calculation. FINDINGS is what `gridleak assess --json` says of the same jobs, a line a job.
Held: warm leakage 0.1 %, limit 0.5 %, expanded uncertainty 3 %, each criterion's value 0.5 %, its
uncertainty 5 %, the soak time 1 %, the outcome as found and last, singly and with the others.
Sources: the formulas of the manual's methods; GUM (JCGM 100:2008) 4.3.7 and 5.1.3 for uncertainties;
ILAC-G8:09/2019 for outcomes; valve rows from VALVES.
"""
import json
import math
import re
import sys

# ---- the trade's notation

UNITS = {
    "pF": ("F", 1e-12), "mmfd": ("F", 1e-12), "nF": ("F", 1e-9), "uF": ("F", 1e-6), "mfd": ("F", 1e-6),
    "mV": ("V", 1e-3), "V": ("V", 1), "uA": ("A", 1e-6), "nA": ("A", 1e-9), "mA": ("A", 1e-3), "A": ("A", 1),
    "ohm": ("R", 1), "k": ("R", 1e3), "meg": ("R", 1e6), "M": ("R", 1e6), "G": ("R", 1e9),
    "s": ("s", 1), "min": ("s", 60), "h": ("s", 3600), "C": ("C", 1), "F": ("Fahrenheit", 1), "W": ("W", 1),
    "%": ("%", 1), "mA/V": ("S", 1e-3), "Hz": ("Hz", 1), "mm": ("m", 1e-3), "H": ("H", 1)}
NUMBER = r"[-+]?\d*\.?\d+"
QUANTITY = re.compile(rf"({NUMBER})\s?(mA/V|mmfd|mfd|meg|ohm|min|pF|nF|uF|mV|uA|nA|mA|Hz|mm|[VAkMGshCFW%H])(?![\w/])")


def quantities(text):
    """[(kind, SI value, as written)] of a line."""
    found = []
    for m in QUANTITY.finditer(text):
        kind, scale = UNITS[m.group(2)]
        value = float(m.group(1)) * scale
        if kind == "Fahrenheit":
            kind, value = "C", (value - 32) / 1.8
        if found and kind == "s" and found[-1][0] == "s":
            found[-1] = ("s", found[-1][1] + value, found[-1][2])
        else:
            found.append((kind, value, m.group(1) + " " + m.group(2)))
    return found


BANDS = "black brown red orange yellow green blue violet grey white".split()


def bands(text):
    """Ohms of `red violet brown silver` (IEC 60062: two figures, zeros, tolerance)."""
    colours = [BANDS.index(word) for word in text.split() if word in BANDS]
    return (10 * colours[0] + colours[1]) * 10.0 ** colours[2] if len(colours) >= 3 else None


def first(text, kind):
    for k, value, _ in quantities(text or ""):
        if k == kind:
            return value
    return bands(text or "") if kind == "R" else None


def last_digit(number, scale):
    places = len(number.split(".")[1]) if "." in number else 0
    return 10.0 ** -places * scale


def read_job(path):
    """Nested dictionaries and lists of texts: only the block style of the examples."""
    lines = []
    for line in open(path, encoding="utf-8"):
        bare = re.sub(r"(^|\s)#.*$", "", line.rstrip("\n"))
        lines.append((len(bare) - len(bare.lstrip()), bare.strip()))
    at = 0

    def block(indent):
        nonlocal at
        result = None
        while at < len(lines):
            depth, text = lines[at]
            if not text:
                at += 1
                continue
            if depth < indent:
                break
            if text.startswith("- "):
                result = [] if result is None else result
                if re.match(r"- \w+: ", text) and not re.match(r"- \d", text):
                    lines[at] = (depth + 2, text[2:])
                    result.append(block(depth + 2))
                else:
                    result.append(text[2:])
                    at += 1
                continue
            key, _, rest = text.partition(":")
            rest = rest.strip()
            result = {} if result is None else result
            at += 1
            if rest == "|":
                while at < len(lines) and (not lines[at][1] or lines[at][0] > depth):
                    at += 1
                result[key] = ""
            elif rest.startswith("{"):
                result[key] = dict(p.split(": ", 1) for p in re.split(r",\s+", rest.strip("{} ")))
            elif rest:
                result[key] = rest
            else:
                result[key] = block(depth + 1)
        return result

    return block(0)


# ---- the valve: three-halves law through one row

class Law:
    def __init__(self, row):
        self.triode = "triode" in row["kind"]
        ia, gm = row["ia"], row["gm"]
        self.va0 = row["va"]
        self.vg10 = row["vg1"]
        self.pa, self.pg2 = row.get("pa"), row.get("pg2")
        self.d0 = 1.5 * ia / gm
        if self.triode:
            self.mu = row.get("mu") or gm * row["ra"]
            self.ik0 = ia
            self.knee0 = 1 - math.exp(-self.va0 / 5)
            return
        ig2 = row["ig2"]
        self.q0, self.ik0, self.vg20 = ig2 / ia, ia + ig2, row["vg2"]
        self.m = {"beam": 1, "output pentode": 0.4}.get(row["kind"], 0)
        ra = row.get("ra")
        self.ka = max(0, 1 / ra - self.m * ia * self.q0 / (self.va0 * (1 + self.q0))) / gm if ra else 0
        self.mu12 = self.vg20 / (self.d0 - self.vg10 - self.ka * self.va0)
        self.knee0 = 1 - math.exp(-self.va0 / (0.1 * self.vg20))

    def currents(self, vg, va, vg2):
        """(cathode, anode, screen) in ampere; volts to the cathode."""
        if self.triode:
            d = self.d0 + (vg - self.vg10) + (va - self.va0) / self.mu
            i = self.ik0 * (max(d, 0) / self.d0) ** 1.5
            i *= (1 - math.exp(-max(va, 0) / 5)) / self.knee0
            return i, i, 0.0
        d = self.d0 + (vg - self.vg10) + (vg2 - self.vg20) / self.mu12 + self.ka * (va - self.va0)
        i = self.ik0 * (max(d, 0) / self.d0) ** 1.5
        q = self.q0 * ((vg2 / max(va, 0.2 * vg2)) / (self.vg20 / self.va0)) ** self.m if vg2 > 0 else self.q0
        k = 1 - math.exp(-max(va, 0) / (0.1 * vg2)) if vg2 > 0 else 0
        ia = i * min(1, k / self.knee0) / (1 + q)
        return i, ia, i - ia


def grid_current(vgk):
    if vgk <= 0.5:
        return 15e-6 * math.exp(vgk / 0.23)
    at = 15e-6 * math.exp(0.5 / 0.23)
    return at * (1 + (vgk - 0.5) / 0.23)


def root(f, low, high, tolerance=1e-12):
    """f falls from f(low) >= 0 to f(high) <= 0: false position, Illinois."""
    a, b = low, high
    fa, fb = f(a), f(b)
    if fa <= 0:
        return a
    if fb >= 0:
        return b
    side = 0
    for _ in range(200):
        x = (fa * b - fb * a) / (fa - fb)
        if not a < x < b:
            x = (a + b) / 2
        fx = f(x)
        if abs(fx) < tolerance or b - a < 1e-13 * max(1, abs(x)):
            return x
        if fx > 0:
            a, fa = x, fx
            if side == 1:
                fb /= 2
            side = 1
        else:
            b, fb = x, fx
            if side == -1:
                fa /= 2
            side = -1
    return x


class Circuit:
    """One stage. Leaks in siemens."""

    def __init__(self, **facts):
        self.law = facts["law"]
        self.vb, self.ra = facts["vb"], facts.get("ra", 0.0)
        self.vs, self.rs = facts.get("vs", self.vb), facts.get("rs", 0.0)
        self.rk, self.rg = facts.get("rk", 0.0), facts.get("rg", 1.0)
        self.ret, self.rb, self.others = facts.get("ret", 0.0), facts.get("rb"), facts.get("others", 0.0)
        self.kn, self.sn, self.bn = facts.get("kn"), facts.get("sn"), facts.get("bn")
        self.sources = []  # (volts, ohm, siemens) on the grid
        self.ga = self.gs = self.gk = self.gb = self.rbf = 0.0


def grid_feed(c, ret, ret_ohm):
    g0 = 1 / (c.rg + ret_ohm)
    total, current = g0, g0 * ret
    for volts, ohm, s in c.sources:
        g = s / (1 + s * ohm)
        total += g
        current += g * volts
    return current / total, 1 / total


def solve_one(c, out, ret, ret_ohm, vk=None, vs=None):
    emf, ohm = grid_feed(c, ret, ret_ohm)
    ae, ao = c.vb / (1 + c.ra * c.ga), c.ra / (1 + c.ra * c.ga)
    se, so = c.vs / (1 + c.rs * c.gs), c.rs / (1 + c.rs * c.gs)
    ko = c.rk / (1 + c.rk * c.gk)

    def at_cathode(k):
        vgk = root(lambda v: emf - k - ohm * grid_current(v) - v, min(emf - k, 0) - 1 - ohm * grid_current(min(emf - k, 3.0)),
                   max(emf - k, 0) + 1) if ohm > 0 else emf - k
        ig = grid_current(vgk)

        def at_screen(s):
            def gap(a):
                return ae - ao * c.law.currents(vgk, a - k, s - k)[1] - a
            a = root(gap, min(k, ae), ae) if ao > 0 and ae > k else ae
            return a, c.law.currents(vgk, a - k, s - k)
        if c.law.triode:
            s = 0.0
        elif vs is not None:
            s = vs
        elif so > 0:
            s = root(lambda s: se - so * at_screen(s)[1][2] - s, -5.0, se)
        else:
            s = se
        a, (i, ia, i2) = at_screen(s)
        out.update(vg=vgk + k, vk=k, va=a, vs=s, ia=ia, i2=i2, ig=ig, i=i + ig, ret=ret)
        return i + ig

    if vk is not None:
        at_cathode(vk)
    elif ko > 0:
        k = root(lambda k: ko * at_cathode(k) - k, 0.0, max(c.vb, c.vs, emf, 1) + 5)
        at_cathode(k)
    else:
        at_cathode(0.0)


def solve(circuits):
    """Node volts and currents of coupled stages."""
    outs = [{} for _ in circuits]
    outer = []
    for kind, name in (("b", "bn"), ("s", "sn"), ("k", "kn")):
        nodes = {}
        for i, c in enumerate(circuits):
            node = getattr(c, name)
            if node is not None and not (kind == "s" and c.law.triode):
                nodes.setdefault(node, []).append(i)
        outer += [(kind, members) for members in nodes.values() if kind == "b" or len(members) > 1]

    def inner(level, held):
        if level == len(outer):
            for i, c in enumerate(circuits):
                h = held.get(i, {})
                if "b" in h:
                    ret, ret_ohm = -h["b"] / (1 + c.rbf * c.gb), c.rbf / (1 + c.rbf * c.gb)
                else:
                    ret, ret_ohm = c.ret / (1 + c.rbf * c.gb), c.rbf / (1 + c.rbf * c.gb)
                solve_one(c, outs[i], ret, ret_ohm, h.get("k"), h.get("s"))
            return
        kind, members = outer[level]
        c0 = circuits[members[0]]

        def gap(v):
            inner(level + 1, {i: {**held.get(i, {}), **({kind: v} if i in members else {})} for i in range(len(circuits))})
            if kind == "k":
                ohm = c0.rk / (1 + c0.rk * max(circuits[i].gk for i in members))
                return ohm * sum(outs[i]["i"] for i in members) - v
            if kind == "s":
                g = max(circuits[i].gs for i in members)
                return c0.vs / (1 + c0.rs * g) - c0.rs / (1 + c0.rs * g) * sum(outs[i]["i2"] for i in members) - v
            g = c0.gb / (1 + c0.rbf * c0.gb)
            current = max(circuits[i].others for i in members)
            current += sum(outs[i]["i"] + circuits[i].ga * outs[i]["va"] + circuits[i].gs * outs[i]["vs"] for i in members)
            return c0.rb / (1 + c0.rb * g) * current - v
        if kind == "s" and c0.rs == 0:
            gap(c0.vs)
        elif kind == "k" and c0.rk == 0:
            gap(0.0)
        elif kind == "s":
            gap(root(gap, -5.0, c0.vs, 1e-9))
        else:
            gap(root(gap, 0.0, max(c.vb for c in circuits) + 5, 1e-9))
    inner(0, {})
    for c, o in zip(circuits, outs):
        o["pa"] = o["ia"] * (o["va"] - o["vk"])
        o["p2"] = o["i2"] * (o["vs"] - o["vk"])
        o["dropper"] = (c.vs - o["vs"]) ** 2 / c.rs if c.rs else 0.0
    return outs


# ---- policy and materials: the documented defaults

POLICY = dict(rise=0.10, dissipation=0.05, pushpull=0.10, grid_shift=0.10, line=0.05, feed_v=0.2, feed_share=0.10,
              screen=0.05, dropper_min=100.0, rail=0.02, ht=0.02, control=0.010, grid=0.10, ratio=20.0, battery=0.02,
              before=10e-6, insulation=100e6, touch=0.5e-3, waxed=2.0, other=1.0, paper_w=0.02, can_w=0.25,
              tube_w=0.05, instrument=0.5, working=45.0, near=55.0, mains=1.1, repeat=0.005, accuracy=0.03, volts=0.01)
ELECTROLYTIC = ("electrolytic", "wet electrolytic", "tantalum")
FILM = ("polystyrene", "polyester", "polypropylene")
MAINS = ("across mains", "mains to chassis", "aerial isolator", "earth isolator", "gram isolator", "chassis isolator")


def theta(kind):
    if kind in FILM:
        return 15.0
    return 30.3 if kind in ("electrolytic", "wet electrolytic") else 10.0


class Job:
    def __init__(self, path, rows, shop):
        self.y = read_job(path)
        self.rows = rows
        self.policy = dict(POLICY)
        names = {"isolator_insulation": ("insulation", "R"), "cathode_current_rise": ("rise", "%")}
        for key, value in ((read_job(shop) or {}).get("policy") or {}).items() if shop else ():
            name, kind = names[key]
            self.policy[name] = first(value, kind) / (100 if kind == "%" else 1)
        conditions = self.y.get("conditions") or {}
        self.bench = first(conditions.get("bench"), "C") if conditions.get("bench") else 20.0
        self.work_c = first(conditions.get("working"), "C") if conditions.get("working") else POLICY["working"]
        self.near_c = first(conditions.get("working_near_heat"), "C") if conditions.get("working_near_heat") else POLICY["near"]
        self.parts = self.y.get("capacitors") or {}
        self.resistors = {**(self.y.get("resistors") or {}), **(self.y.get("windings") or {})}
        self.cans = {}
        for can in (self.y.get("cans") or {}).values():
            for ref in can["holds"].split():
                self.cans[ref] = can
        self.moved = {}  # ref of a measured resistor -> ohm by which it is moved
        self.scales = {}  # stage -> what its valve passes of the book's, by cathode volts read with the parts lifted
        self.scales = self.find_scales()

    def ohms(self, text, phase):
        """Ohms of a value or a ref; None: not given."""
        if not text:
            return None
        text = text.strip()
        if text in self.resistors:
            r = self.resistors[text]
            marked, measured = first(r.get("marked"), "R"), first(r.get("measured"), "R")
            if phase == "designed":
                return marked if marked is not None else measured
            value = measured if measured is not None else marked
            return value + (self.moved.get(text, 0.0) if measured is not None else 0.0)
        return first(text, "R")

    def measured_refs(self, text):
        text = (text or "").strip()
        return [text] if text in self.resistors and self.resistors[text].get("measured") else []

    def instrument(self, name):
        return (self.y.get("instruments") or {}).get(name or "leakage")

    # -- stages
    def row(self, stage):
        given = stage.get("row")
        valve = stage["valve"].split(" ", 1)[1]
        valve = {"ECC83": "12AX7", "6V6": "6V6GT"}.get(valve, valve)
        book = [r for r in self.rows if r["type"] == valve]
        if given and "va " in given:
            kinds = {}
            for piece in given.split(", "):
                key, rest = piece.split(" ", 1)
                kinds[key] = quantities(rest)[0][1] if quantities(rest) else float(rest)
            output = kinds["ia"] >= 15e-3
            kind = ("output pentode" if output else "small pentode") if "vg2" in kinds else ("power triode" if output else "triode")
            return dict(kinds, kind=book[0]["kind"] if book else kind)
        if not book:
            return None
        for r in book:
            if given and r["row"].lower() == given.lower():
                return r
        va = first(stage["supply"], "V")
        vs = first(stage.get("screen"), "V") or va
        usable = [r for r in book if r["gm"]] or book
        return min(usable, key=lambda r: abs(math.log(va / r["va"])) + (abs(math.log(vs / r["vg2"])) if r["vg2"] else 0))

    def circuits(self, phase):
        result = {}
        for name, s in (self.y.get("stages") or {}).items():
            row = self.row(s)
            if not row or not s.get("supply"):
                continue
            facts = dict(law=Law(row), vb=first(s["supply"], "V"))
            facts["law"].ik0 *= self.scales.get(name, 1.0) if phase != "designed" else 1.0
            facts["ra"] = self.ohms(s.get("anode"), phase) or 0.0
            screen = s.get("screen")
            if screen:
                facts["vs"] = first(screen, "V") or facts["vb"]
                ref = [w for w in screen.split() if w in self.resistors]
                facts["rs"] = self.ohms(ref[0] if ref else screen, phase) or 0.0
                facts["sn"] = ref[0] if ref else None
            bias = s.get("bias")
            if s.get("cathode"):
                facts["rk"] = self.ohms(s["cathode"], phase)
                facts["kn"] = s["cathode"] if s["cathode"] in self.resistors else None
            elif bias and bias != "contact" and first(bias, "V") is not None:
                facts["ret"] = first(bias, "V")
            elif bias and bias != "contact":
                facts["rb"] = self.ohms(bias, phase)
                facts["bn"] = bias
                facts["others"] = first(s.get("others"), "A") or 0.0
            facts["rg"] = self.ohms(s.get("grid_leak"), phase) or 1.0
            result[name] = Circuit(**facts)
            result[name].kind = row["kind"]
            result[name].output = s.get("use") == "output" or (not s.get("use") and row["kind"] in ("beam", "output pentode", "power triode"))
        # One screen bypass on several stages ties their screens together.
        for ref, p in self.parts.items():
            names = [n.strip() for n in (p.get("stage") or "").split(",") if n.strip() in result]
            if len(names) > 1 and p.get("place") in ("screen bypass", "cathode bypass"):
                for n in names:
                    attribute = "sn" if p["place"] == "screen bypass" else "kn"
                    if getattr(result[n], attribute) is None:
                        setattr(result[n], attribute, "bypass " + ref)
        return result

    def find_scales(self):
        """{stage: scale}: the rows' currents are scaled, all valves of one cathode resistor alike, until the solved
        cathode stands where it was read without the leaks. By bisection of each scale in turn."""
        wanted = {}
        for name, s in (self.y.get("stages") or {}).items():
            said = s.get("measured") or {}
            for phase in ("found", "left"):
                pieces = (said.get(phase) or "").split(", ")
                volts = [first(p, "V") for p in pieces if p.startswith("cathode ")]
                if "lifted" in pieces and volts and s.get("cathode"):
                    wanted[name] = (phase, volts[0])
        scales = {}
        for _ in range(4 if len(wanted) > 1 else 1):
            done = set()
            for name, (phase, volts) in wanted.items():
                self.scales = {}
                circuits = self.circuits(phase)
                names = self.group(circuits, name)
                mates = [n for n in names if n == name or (circuits[n].kn is not None and circuits[n].kn == circuits[name].kn)]
                if done & set(mates):
                    continue
                done |= set(mates)

                def above(log_scale):
                    self.scales = {**scales, **{n: math.exp(log_scale) for n in mates}}
                    now = self.circuits(phase)
                    return volts - dict(zip(names, solve([now[n] for n in names])))[name]["vk"]
                scales.update({n: math.exp(root(above, -4.0, 4.0, 1e-9)) for n in mates})
        return scales

    def group(self, circuits, name):
        """Names of all stages that hang together with this one."""
        names = [name]
        for n in names:
            for o, c in circuits.items():
                s, t = (self.y["stages"][x] for x in (n, o))
                tied = any(getattr(c, a) is not None and getattr(c, a) == getattr(circuits[n], a) for a in ("kn", "sn", "bn"))
                if o not in names and (tied or s.get("pushpull_with") == o or t.get("pushpull_with") == n):
                    names.append(o)
        return names

    def stage_refs(self, names):
        refs = []
        for n in names:
            s = self.y["stages"][n]
            for key in ("anode", "screen", "cathode", "bias", "grid_leak"):
                for word in (s.get(key) or "").split():
                    refs += [r for r in self.measured_refs(word) if r not in refs]
        return refs


# ---- readings

def part_readings(part, log):
    """All readings of a part, carried along each line."""
    result = []
    for run, (line, after_rest) in enumerate([(x, False) for x in part.get("readings") or []] + [(x, True) for x in log]):
        now = dict(volts=None, time=None, value=None, kind=None, bound="", state="reformed" if after_rest else "found", hot=None,
                   circuit=False, by=None, run=run)
        for piece in line.split(", "):
            now = dict(now)
            by = re.search(r"by (\w+)", piece)
            now["by"] = by.group(1) if by else now["by"]
            for state in ("reformed", "left"):
                if state in piece.split():
                    now["state"] = state
            now["circuit"] = now["circuit"] or "in circuit" in piece
            hot = re.search(r"hot ([\d.]+ [CF])", piece)
            if hot:
                now["hot"] = first(hot.group(1), "C")
                piece = piece.replace(hot.group(0), "")
            now["bound"] = ""
            for bound in ("over", "under"):
                if bound in piece.split():
                    now["bound"] = bound
            for kind, value, written in quantities(re.sub(r"\d{4}-\d\d-\d\d", "", piece)):
                if kind == "V":
                    now["volts"] = value
                elif kind == "s":
                    now["time"] = value
                elif kind in ("A", "R"):
                    now["value"], now["kind"] = value, kind
                    number, unit = written.split(" ")
                    now["digit"] = last_digit(number, UNITS[unit][1])
            result.append(now)
    return result


class Reading:
    """One reading at (possibly moved) inputs."""

    def __init__(self, job, reading):
        self.r = reading
        i = job.instrument(reading["by"]) or {}
        self.name = reading["by"] or "leakage"
        self.series = (first(i.get("series"), "R") or 0.0) + (first(i.get("burden"), "R") or 0.0)
        self.supply = first(i.get("supply_current"), "A")
        accuracy = i.get("accuracy")
        unit = reading["kind"]
        resolution = first(i.get("resolution"), unit)
        self.step = resolution if resolution is not None else reading["digit"]
        if accuracy:
            self.p, self.a = first(accuracy, "%") / 100, first(accuracy, unit) or 0.0
            self.in_amperes = first(accuracy, "A") or 0.0 if unit == "R" else 0.0
        else:
            self.p, self.a, self.in_amperes = job.policy["accuracy"], self.step, 0.0
        volts = first(i.get("volts_accuracy"), "%")
        self.pv = volts / 100 if volts is not None else job.policy["volts"]
        if unit == "R":
            flip = {"over": "under", "under": "over", "": ""}
            self.bound = flip[reading["bound"]]
            self.current = reading["volts"] / (max(reading["value"], 0) + self.series)
            scale = self.current ** 2 / reading["volts"]
            self.step_a, self.abs_a = self.step * scale, self.a * scale + self.in_amperes
            self.step_in_amperes = first(i.get("resolution"), "A") is not None
            if self.step_in_amperes:
                self.step_a = first(i["resolution"], "A")
        else:
            self.bound = reading["bound"]
            self.current = max(reading["value"], 0)
            self.step_a, self.abs_a = self.step, self.a
        self.temp = reading["hot"] if reading["hot"] is not None else job.bench
        self.part_v = max(reading["volts"] - self.current * self.series, reading["volts"] * 1e-3)

    def inputs(self):
        """[(name, standard uncertainty)], k = 1."""
        third = math.sqrt(3)
        return [("accuracy", (self.p * self.current + self.abs_a) / third), ("step", self.step_a / math.sqrt(12)),
                ("volts", self.pv * self.r["volts"] / third), ("series", self.pv * self.series / third),
                ("bench", 0.0 if self.r["hot"] is not None else 1 / third),
                ("part", 1 / third if self.r["hot"] is not None and self.r["hot"] < self.working - 3 else 0.0)]

    def u_at(self, current):
        if self.r["kind"] == "R":  # ohms: what it cannot tell grows with the square of the current
            current = min(current, self.current)
            scale = current ** 2 / self.r["volts"]
            step = self.step_a if self.step_in_amperes else self.step * scale
            absolute = self.a * scale + self.in_amperes
            return 2 * math.hypot((self.p * current + absolute) / math.sqrt(3), step / math.sqrt(12))
        return 2 * math.hypot((self.p * current + self.abs_a) / math.sqrt(3), self.step_a / math.sqrt(12))


def voltage_factor(part_v, service, b, electrolytic):
    x = service / part_v
    if x <= 1:
        return x ** min(b, 1), False
    if x <= 1 / 0.95 * (1 + 1e-12):
        return x ** (5 if electrolytic else 2), False
    return x, True


def temperature_factor(kind, reading_c, working_c, hot):
    if hot and reading_c >= working_c - 3:
        return 1.0
    if kind in FILM:
        reading_c = max(reading_c, 20.0)
    return max(1.0, 2 ** ((working_c - reading_c) / theta(kind)))


# ---- one part

class Part:
    def __init__(self, job, ref):
        self.job, self.ref, self.p = job, ref, job.parts[ref]
        p = self.p
        self.kind, self.place = p.get("type", ""), p.get("place")
        self.electrolytic = self.kind in ELECTROLYTIC
        self.margin = job.policy["waxed"] if self.kind in ("waxed paper", "moulded paper") else job.policy["other"]
        self.working = job.near_c if p.get("near_heat") == "yes" else job.work_c
        self.stages = [n.strip() for n in (p.get("stage") or "").split(",") if n.strip()]
        logs = [r["after_rest"] for r in job.y.get("reforms") or [] if r.get("capacitor") == ref and r.get("after_rest")]
        self.readings = part_readings(p, logs)
        self.designed = job.circuits("designed")
        self.marked_v = first(p.get("marked"), "V")
        self.value = first(p.get("marked"), "F")
        self.service = self.find_service()
        self.b = 1.0
        self.heat_counts = False  # nothing else of the place limits the leak

    def find_service(self):
        p, job = self.p, self.job
        if p.get("service"):
            return abs(first(p["service"], "V"))
        if self.place in MAINS:
            return first(job.y["set"].get("mains"), "V")
        if self.place == "avc feed":
            return abs(first(p["source"], "V"))
        if not self.stages or self.stages[0] not in self.designed:
            if self.place == "screen bypass" and self.stages:
                s = job.y["stages"][self.stages[0]]
                return first(s.get("screen"), "V") or first(s["supply"], "V")
            return None
        names = job.group(self.designed, self.stages[0])
        outs = dict(zip(names, solve([self.designed[n] for n in names])))
        if self.place == "coupling":
            return abs(first(p["source"], "V") - outs[self.stages[0]]["ret"]) if p.get("source") else None
        if self.place == "bias bypass" and first(job.y["stages"][self.stages[0]].get("bias"), "V") is not None:
            return abs(first(job.y["stages"][self.stages[0]]["bias"], "V"))
        key = {"screen bypass": "vs", "cathode bypass": "vk", "tone": "va", "bias bypass": "ret"}.get(self.place)
        return max(abs(outs[n][key]) for n in self.stages if n in outs) if key else None

    def heat_limit(self):
        case = self.p.get("case") or self.job.cans.get(self.ref, {}).get("case")
        if case:
            numbers = [float(x) * 1e-3 for x in re.findall(NUMBER, case)]
            if len(numbers) == 2:
                surface = math.pi * numbers[0] * (numbers[1] + numbers[0] / 2)
            else:
                a, b, c = numbers
                surface = 2 * (a * b + b * c + c * a)
            return theta(self.kind) * 12 * surface / (4 * math.e * math.log(2))
        if not self.electrolytic:
            return self.job.policy["paper_w"]
        return self.job.policy["can_w"] if self.ref in self.job.cans else self.job.policy["tube_w"]

    def ripple_w(self):
        """Heat of a reservoir's pulses in its series resistance; the others carry little of them."""
        s = self.job.y["set"]
        esr, load = first(self.p.get("measured"), "R"), first(self.p.get("current"), "A")
        if self.place != "reservoir" or not esr or not load:
            return 0.0
        half = "half" in s["rectifier"] if s.get("rectifier") else s.get("supply") == "live chassis"
        return ((2.7 if half else 1.7) * load) ** 2 * esr

    def rule_limit(self):
        c, v = self.value * 1e6, self.marked_v
        k = 0.01 if v <= 100 else 0.02 if v <= 250 else 0.025 if v <= 350 else 0.04
        return (k * c + 0.3) * 1e-3

    # -- the place at a leak; `others`: [(part, siemens)] leaking beside it
    def values(self, g, others=(), bare_cache=None, to20=1.0):
        """[(key, value, limit, inverse)]; limit None: outside without this part."""
        p, job, pol = self.p, self.job, self.job.policy
        found = job.circuits("found")
        feed = job.ohms(p.get("feed"), "found")
        v = self.service
        out = []
        heat = (g * v * v + self.ripple_w(), self.heat_limit())
        if self.stages and self.stages[0] in found and self.place in ("coupling", "screen bypass", "cathode bypass", "bias bypass"):
            names = job.group(found, self.stages[0])
            if bare_cache is not None and "bare" in bare_cache:
                bare = bare_cache["bare"]
            else:
                bare = dict(zip(names, solve([found[n] for n in names])))
                if bare_cache is not None:
                    bare_cache["bare"] = bare
            for part, s in [(self, g)] + list(others):
                part.add_leak(found, names, s)
            outs = dict(zip(names, solve([found[n] for n in names])))
            n = self.stages[0]
            if self.place == "screen bypass" and found[n].rs < pol["dropper_min"]:
                out += [("rail drop", 100 * g * found[n].rs, 100 * pol["rail"], False), ("heat", *heat, False)]
            elif self.place == "coupling" and not found[n].output:
                bias = abs(bare[n]["vg"] - bare[n]["vk"])
                out.append(("grid shift", 100 * (outs[n]["vg"] - bare[n]["vg"]) / bias, 100 * pol["grid_shift"], False))
            elif self.place == "screen bypass":
                fall = max(1 - outs[m]["vs"] / bare[m]["vs"] for m in self.stages)
                out.append(("screen fall", 100 * fall, 100 * pol["screen"], False))
                ref = [w for w in (job.y["stages"][n].get("screen") or "").split() if w in job.resistors]
                rating = first(job.resistors[ref[0]].get("marked"), "W") if ref else None
                if rating:
                    out.append(("dropper dissipation", max(outs[m]["dropper"] for m in self.stages), rating, False))
            else:
                rise = max(outs[m]["i"] / bare[m]["i"] - 1 for m in self.stages)
                out.append(("cathode current rise", 100 * rise, 100 * pol["rise"], False))
            if self.place == "coupling" and found[n].output:
                law = found[n].law
                for key, w, most in (("anode dissipation", "pa", law.pa), ("screen dissipation", "p2", law.pg2)):
                    if most and not (w == "p2" and law.triode):
                        out.append((key, outs[n][w], max(most, bare[n][w] + pol["dissipation"] * most), False))
                mate = job.y["stages"][n].get("pushpull_with")
                if mate in outs:
                    out.append(("anode current difference", 100 * abs(outs[n]["ia"] - outs[mate]["ia"]) / bare[n]["ia"], 100 * pol["pushpull"], False))
        elif self.place in ("screen bypass", "cathode bypass"):
            key = "screen" if self.place == "screen bypass" else "cathode"
            ohm = job.ohms(job.y["stages"][self.stages[0]].get(key), "found")
            out.append(("ratio to the resistor", g * ohm, 1 / 20, True))
        elif self.place == "avc bypass":
            r = (g + sum(s for _, s in others)) * feed
            out.append(("line loss", 100 * r / (1 + r), 100 * pol["line"], False))
        elif self.place == "avc feed":
            source = first(p["source"], "V")
            source_ohm = first(p["source"], "R") or 0.0
            limit = pol["feed_v"]
            biases = [abs(o["vg"] - o["vk"]) for n in self.stages if n in self.designed
                      for o in [dict(zip(job.group(self.designed, n), solve([self.designed[m] for m in job.group(self.designed, n)])))[n]]]
            biases += [abs(first(p["delay"], "V"))] if p.get("delay") else []
            if biases:
                limit = min(limit, pol["feed_share"] * min(biases))
            out.append(("line volts", g * source * feed / (1 + g * (feed + source_ohm)), limit, False))
        elif self.place == "decoupling":
            current = first(p["current"], "A")
            out.append(("rail drop", 100 * g * feed, 100 * pol["rail"], False))
            rating = first(job.resistors.get(p["feed"], {}).get("marked"), "W")
            if rating:
                out.append(("dropper dissipation", (current + g * v) ** 2 * feed, rating, False))
            out.append(("heat", *heat, False))
        elif self.place in ("reservoir", "smoothing"):
            out.append(("share of the HT current", 100 * g * v / first(p["current"], "A"), 100 * pol["ht"], False))
            out.append(("heat", *heat, False))
        elif self.place == "tone":
            out.append(("heat", *heat, False))
        elif self.place == "detector":
            if self.stages and self.stages[0] in self.designed:
                names = job.group(self.designed, self.stages[0])
                o = dict(zip(names, solve([self.designed[n] for n in names])))[self.stages[0]]
                out.append(("grid shift", 100 * g * v * feed / abs(o["vg"] - o["vk"]), 100 * pol["grid"], False))
            else:
                out.append(("volts on the control", g * v * feed, pol["control"], False))
        elif self.place == "tuning":
            out.append(("ratio to the circuit", g * first(p["circuit"], "R"), 1 / pol["ratio"], True))
        elif self.place == "battery bypass":
            if p.get("plug_side") == "yes":
                out.append(("share of the drain", g * v, pol["before"], False))
            else:
                out.append(("share of the drain", 100 * g * v / first(p["current"], "A"), 100 * pol["battery"], False))
        elif self.place in MAINS:
            out.append(("insulation", g, 1 / pol["insulation"], True))
        elif self.place == "other":
            percent = first(p["shift"], "%")
            out.append(("shift", 100 * g * feed, percent, False) if percent is not None
                       else ("shift", g * v * feed, abs(first(p["shift"], "V")), False))
        if self.electrolytic:
            if not any(k == "heat" for k, *_ in out):
                out.append(("heat", *heat, False))
            out.append(("leakage rule", g * v * to20, self.rule_limit(), False))
        return out

    def add_leak(self, circuits, names, g):
        for n in self.stages:
            if n not in names:
                continue
            c = circuits[n]
            if self.place == "coupling":
                c.sources.append((first(self.p["source"], "V"), first(self.p["source"], "R") or 0.0, g))
                continue
            if self.place == "tone":
                c.ga += g
                continue
            attribute, node = {"screen bypass": ("gs", "sn"), "cathode bypass": ("gk", "kn"), "bias bypass": ("gb", "bn")}[self.place]
            if self.place == "bias bypass":
                # Across the resistance in the negative lead itself nothing lies between.
                across = self.p.get("feed") == self.job.y["stages"][n].get("bias")
                c.rbf = 0.0 if across else self.job.ohms(self.p.get("feed"), "found") or 0.0
                if c.bn is None:
                    setattr(c, attribute, getattr(c, attribute) + g)
                    continue
            tied = [m for m in names if m == n or (getattr(c, node) is not None and getattr(circuits[m], node) == getattr(c, node))]
            if n == min((m for m in self.stages if m in tied), key=self.stages.index):
                for m in tied:
                    setattr(circuits[m], attribute, getattr(circuits[m], attribute) + g)

    def find_limit(self):
        """Siemens, after the margin: where the first figure that is inside without the leak meets its limit."""
        cache = {}
        to20 = 2 ** ((20 - self.job.bench) / theta(self.kind)) / temperature_factor(self.kind, self.job.bench, self.working, False)
        bare = self.values(0, bare_cache=cache, to20=to20)
        inside = [limit > value for _, value, limit, _ in bare]

        def failing(g):
            return any(ok and value > limit for ok, (_, value, limit, _) in zip(inside, self.values(g, bare_cache=cache, to20=to20)))
        if not any(inside) and bare:
            return None, bare
        low, high = math.log(1e-12), math.log(1e-3)
        self.heat_counts = not failing(1e-3)
        if self.heat_counts:
            return self.heat_limit() / self.service ** 2 / self.margin, bare
        while high - low > 1e-5:
            middle = (low + high) / 2
            low, high = (low, middle) if failing(math.exp(middle)) else (middle, high)
        limit = math.exp((low + high) / 2)
        if limit * self.service ** 2 > self.heat_limit() * 1.0001 and not any(k == "heat" for k, *_ in bare):
            self.heat_counts = True
            limit = self.heat_limit() / self.service ** 2
        return limit / self.margin, bare

    # -- from the reading to the place
    def warm(self, reading, moved=None):
        moved = moved or {}
        current = max(reading.current + moved.get("accuracy", 0) + moved.get("step", 0), 0)
        volts = reading.r["volts"] + moved.get("volts", 0)
        if reading.r["kind"] == "R":
            current *= volts / reading.r["volts"]
        part_v = max(volts - current * (reading.series + moved.get("series", 0)), volts * 1e-3)
        factor, bound = voltage_factor(part_v, self.service, self.b, self.electrolytic)
        # The step where scaling becomes a lower bound is one of the rule, not of the part.
        _, was_bound = voltage_factor(reading.part_v, self.service, self.b, self.electrolytic)
        if bound != was_bound:
            factor = (self.service / part_v) ** (1 if was_bound else 5 if self.electrolytic else 2)
        temp = reading.temp + moved.get("bench", 0) + moved.get("part", 0)
        hot = reading.r["hot"] is not None and reading.temp >= self.working - 3  # that is certain
        return current * factor * temperature_factor(self.kind, temp, self.working, hot), bound, current * factor

    def limit_at(self, reading, limit_a):
        factor = temperature_factor(self.kind, reading.temp, self.working, reading.r["hot"] is not None)
        return limit_a / factor / voltage_factor(reading.part_v, self.service, self.b, self.electrolytic)[0]

    def t_min(self, reading, limit_a):
        floor = 60.0 if self.electrolytic else 15.0
        c = first(self.p.get("measured"), "F")
        if c is None and self.value is not None:
            tolerance = re.search(r"(\d+) %", self.p.get("marked", ""))
            c = self.value * (1 + (float(tolerance.group(1)) / 100 if tolerance else 0))
        if c is None:
            return floor
        c *= 2 if self.electrolytic else 1
        t, volts = 0.0, reading.r["volts"]
        if reading.series > 0 and limit_a:
            t = reading.series * c * max(0, math.log(volts / (0.1 * self.limit_at(reading, limit_a) * reading.series)))
        if reading.supply:
            t += c * volts / reading.supply
        return max(floor, t)

    def reading(self, said):
        found = Reading(self.job, said)
        found.working = self.working
        return found

    def choose(self, latest):
        order = ["found", "reformed", "left"]
        usable = [(i, self.reading(r)) for i, r in enumerate(self.readings)
                  if not r["circuit"] and order.index(r["state"]) <= order.index(latest)]
        if not usable:
            return None
        top = max(order.index(r.r["state"]) for _, r in usable)
        usable = [(i, r) for i, r in usable if order.index(r.r["state"]) == top]
        at = [(i, r) for i, r in usable if r.part_v >= 0.95 * self.service]
        if at:
            usable = at
        else:
            most = max(r.part_v for _, r in usable)
            usable = [(i, r) for i, r in usable if r.part_v >= most * 0.995]
        hot = [(i, r) for i, r in usable if r.r["hot"] is not None and r.r["hot"] >= self.working - 3]
        usable = hot or usable
        longest = max(r.r["time"] or 0 for _, r in usable)
        return [(i, r) for i, r in usable if (r.r["time"] or 0) == longest][-1]

    def rising(self, index):
        """"rising", "falling", "level" or None of the run that ends with a reading."""
        end = self.reading(self.readings[index])
        run = []
        for i in range(index + 1):
            r = self.reading(self.readings[i])
            if r.r["run"] == end.r["run"] and r.r["by"] == end.r["by"] and abs(r.part_v - end.part_v) <= 0.005 * end.part_v \
                    and abs(r.temp - end.temp) <= 1 and r.r["time"]:
                run.append(r)
        if len(run) < 2 or any(r.bound for r in run):
            return None
        noise = [math.hypot(self.job.policy["repeat"] * r.current, r.step_a / math.sqrt(12)) for r in run]
        currents = [r.current for r in run]
        least, most = currents.index(min(currents)), currents.index(max(currents))
        if currents[-1] - currents[least] > max(2 * math.hypot(noise[-1], noise[least]), 0.1 * currents[least]):
            return "rising"
        if currents[most] - currents[-1] > max(2 * math.hypot(noise[-1], noise[most]), 0.1 * currents[-1]):
            return "falling"
        return "level"


OUTCOMES = ["pass", "conditional pass", "not judged", "conditional fail", "fail"]


def verdict(value, limit, u, bound):
    outcome = "pass" if value <= limit - u else "conditional pass" if value <= limit else \
        "conditional fail" if value <= limit + u else "fail"
    if not bound:
        return outcome
    passes = outcome in ("pass", "conditional pass")
    return outcome if passes == (bound == "under") else "not judged"


def capacitance(part):
    """(deviation, U, limit in per cent of the marked value, outcome) of a capacitance; None: not judged by it. By the first
    instrument that reads farads."""
    measured = first(part.p.get("measured"), "F")
    if measured is None or not part.value or not (part.place == "tuning" or part.electrolytic or part.place in MAINS):
        return None
    low, high = (-20.0, 100.0) if part.electrolytic else (-20.0, 20.0)
    tolerance = [v for k, v, _ in quantities(part.p["marked"]) if k == "%"]
    if tolerance:
        low, high = -tolerance[0], tolerance[0]
    deviation = 100 * (measured / part.value - 1)
    limit = high if deviation >= 0 else low
    share, absolute = part.job.policy["accuracy"], None
    for i in (part.job.y.get("instruments") or {}).values():
        if absolute is None and first(i.get("accuracy"), "F") is not None:
            share, absolute = first(i["accuracy"], "%") / 100, first(i["accuracy"], "F")
    if absolute is None:
        number, unit = [w for k, _, w in quantities(part.p["measured"]) if k == "F"][0].split(" ")
        absolute = last_digit(number, UNITS[unit][1])

    def u(farad):
        return 200 / part.value * (share * farad + absolute) / math.sqrt(3)
    sign = 1 if deviation >= 0 else -1
    outcome = verdict(sign * deviation, sign * limit, u(measured), "")
    if outcome != "fail" and u(part.value * (1 + limit / 100)) > part.job.policy["instrument"] * abs(limit):
        outcome = "not judged"
    return deviation, u(measured), limit, outcome


def place_refs(part):
    """Measured resistors that the part's figures hang on."""
    job, place = part.job, part.place
    refs = job.measured_refs(part.p.get("feed")) if place not in ("tuning", "tone", "reservoir", "smoothing", "battery bypass") else []
    found = job.circuits("found")
    if place in ("coupling", "screen bypass", "cathode bypass", "bias bypass") and part.stages:
        if part.stages[0] in found:
            if not (place == "screen bypass" and found[part.stages[0]].rs < job.policy["dropper_min"]):
                refs += [r for r in job.stage_refs(job.group(found, part.stages[0])) if r not in refs]
        else:
            key = "screen" if place == "screen bypass" else "cathode"
            refs += job.measured_refs(job.y["stages"][part.stages[0]].get(key))
    return refs


def spread(part, leaks, to20):
    """Expanded uncertainty of each figure, with covariance by cause: leaks is [(part, reading)]; the first is the part."""
    job = part.job

    def figures(moved_by=None):
        gs = [(q, q.warm(r, (moved_by or {}).get(id(r)))[0] / q.service) for q, r in leaks]
        return [v for _, v, _, _ in part.values(gs[0][1], gs[1:], to20=to20)]
    at = figures()
    variance = [0.0] * len(at)

    def add(plus, minus):
        for i, (a, b) in enumerate(zip(plus, minus)):
            sides = sorted((a - at[i], at[i] - b), key=abs)
            kink = sides[0] * sides[1] <= 0 or abs(sides[1]) > 2 * abs(sides[0])
            change = sides[1] if kink else (a - b) / 2  # one-sided at a kink
            variance[i] += change * change
    instruments = {r.name for _, r in leaks}
    for name in instruments:
        for cause in ("accuracy", "volts", "series"):
            step = {s: {id(r): {cause: s * dict(r.inputs())[cause]} for _, r in leaks if r.name == name} for s in (1, -1)}
            add(figures(step[1]), figures(step[-1]))
    step = {s: {id(r): {"bench": s * dict(r.inputs())["bench"]} for _, r in leaks} for s in (1, -1)}
    add(figures(step[1]), figures(step[-1]))
    for _, r in leaks:
        for cause in ("step", "part"):
            u = dict(r.inputs())[cause]
            add(figures({id(r): {cause: u}}), figures({id(r): {cause: -u}}))
    for ref in place_refs(part):
        ohm = first(job.resistors[ref]["measured"], "R")
        u = job.policy["accuracy"] * ohm / math.sqrt(3)
        both = []
        for sign in (1, -1):
            job.moved = {ref: sign * u}
            both.append(figures())
        job.moved = {}
        add(*both)
    return at, [2 * math.sqrt(v) for v in variance]


def judge(part, chosen, limit_s, bare, others=()):
    """(outcome, [(key, value, U)]) of one reading."""
    index, reading = chosen
    warm_a, lower_bound, service_a = part.warm(reading)
    to20 = service_a * 2 ** ((20 - reading.temp) / theta(part.kind)) / warm_a if warm_a else 1.0
    at, u = spread(part, [(part, reading)] + list(others), to20)
    limit_a = limit_s * part.service
    if part.heat_counts and not any(k == "heat" for k, *_ in bare):
        g = warm_a / part.service
        at.append(g * part.service ** 2)
        u.append(at[-1] / at[0] * u[0] if at[0] else 0.0)
        u[-1] = 2 * math.sqrt(sum(((part.warm(reading, {c: s})[0] - part.warm(reading, {c: -s})[0]) / 2 * part.service) ** 2
                                  for c, s in reading.inputs()))
        bare = bare + [("heat", 0.0, part.heat_limit(), False)]
    soaked = reading.r["time"] is not None and reading.r["time"] >= part.t_min(reading, limit_a)
    trend = part.rising(index)
    falling = part.electrolytic and (trend == "falling" or (trend is None and reading.r["state"] == "found"))
    coarse = reading.u_at(part.limit_at(reading, limit_a)) > part.job.policy["instrument"] * part.limit_at(reading, limit_a)
    # After the margin the figure that binds is allowed what it is at the limit.
    allowed = [v for _, v, _, _ in part.values(limit_s, to20=to20)] + [limit_s * part.service ** 2]
    worst = "pass"
    rows = []
    whole = [v for _, v, _, _ in part.values(limit_s * part.margin, to20=to20)] + [limit_s * part.margin * part.service ** 2]
    for i, (key, bare_value, limit, inverse) in enumerate(bare):
        binding = abs(whole[i] / limit - 1) < 1e-3
        after = limit if part.margin == 1 else allowed[i] if binding else max(bare_value + (limit - bare_value) / part.margin, allowed[i])
        outcome = verdict(at[i], after, u[i], reading.bound)
        fails = outcome in ("fail", "conditional fail")
        if outcome == "not judged" or (fails and (not soaked or falling)):
            outcome = "not judged"
        elif outcome != "fail" and (lower_bound or coarse):
            outcome = "not judged"
        worst = max(worst, outcome, key=OUTCOMES.index)
        rows.append((key, at[i], u[i], after, inverse))
    if trend == "rising" and worst != "fail":
        if soaked and warm_a > 0.1 * limit_a:
            worst = "fail"
        elif worst == "pass":
            worst = "conditional pass"
    return worst, rows, soaked, soaked and not falling and reading.bound != "under"


# ---- comparison

def main():
    valves_file, findings_file, shop, *jobs = sys.argv[1:]
    rows = []
    for line in open(valves_file):
        if not line.startswith("#"):
            t = line.rstrip("\n").split("|")
            n = [float(x) if x else None for x in t[3:]]
            rows.append(dict(type=t[0], kind=t[1], row=t[2], va=n[0], vg2=n[1], vg1=n[2], ia=n[3] * 1e-3, ig2=n[4] and n[4] * 1e-3,
                             gm=n[5] and n[5] * 1e-3, mu=n[6], mu12=n[7], ra=n[8], pa=n[9], pg2=n[10]))
    findings = {}
    for line in open(findings_file):
        found = json.loads(line)
        findings[found["job"]] = found
    mistakes, compared, checks = [], 0, 0

    def hold(name, mine, its, tolerance):
        nonlocal checks
        checks += 1
        if mine is None and its is None:
            return
        if mine is None or its is None or abs(mine - its) > tolerance * max(abs(mine), 1e-30):
            mistakes.append(f"{name}: {its} by the program, {mine} here")

    for path in jobs:
        job = Job(path, rows, shop if shop != "-" else None)
        its_job = findings[job.y["job"]]
        its = {c["ref"]: c for c in its_job["capacitors"]}
        judged = {}
        for ref, p in job.parts.items():
            name = f"{job.y['job']} {ref}"
            if its[ref]["no_reading_passes"] or its[ref]["why"] in ("missing fact", "no row", "stage", "open resistor"):
                continue
            part = Part(job, ref)
            if part.service is None:
                continue
            limit_s, bare = part.find_limit()
            limit_a = limit_s * part.service if limit_s is not None else None
            hold(name + " service", part.service, its[ref]["service_v"], 1e-3)
            hold(name + " limit", limit_a, its[ref]["limit_a"], 5e-3)
            if its[ref]["exponent"] is not None:
                part.b = its[ref]["exponent"]
            done = p.get("done") or job.cans.get(ref, {}).get("done")
            fitted = p.get("fitted") or job.cans.get(ref, {}).get("fitted")
            new = done in ("restuffed", "replaced") or (done == "disconnected" and fitted)
            final, found = part.choose("reformed" if new else "left"), part.choose("found")
            if final is None or limit_s is None:
                continue
            compared += 1
            for chosen, key in ((found, "outcome_found"), (final, "outcome")):
                if chosen is None:
                    hold(name, None, None if its[ref][key] == "not judged" else 1, 0)
                    continue
                outcome, criteria, soaked, proven = judge(part, chosen, limit_s, bare)
                # An early reading that does not pass gives way to the one soaked longest.
                if outcome == "not judged" and not soaked:
                    soak = [(i, part.reading(r)) for i, r in enumerate(part.readings) if not r["circuit"] and r["state"] == chosen[1].r["state"]]
                    soak = [(i, r) for i, r in soak if r.r["time"] and r.r["time"] >= part.t_min(r, limit_a)]
                    if soak:
                        chosen = max(soak, key=lambda x: (x[1].part_v >= 0.95 * part.service, x[1].r["time"]))
                        outcome, criteria, _, proven = judge(part, chosen, limit_s, bare)
                judged[ref, key] = [part, chosen, outcome, (limit_s, bare), proven]
                if key == "outcome":
                    warm_a = part.warm(chosen[1])[0]
                    hold(name + " warm", warm_a, its[ref]["leakage_warm_a"], 1e-3)
                    hold(name + " t_min", part.t_min(chosen[1], limit_a), its[ref]["readings"][chosen[0]]["t_min_s"], 1e-2)
                    theirs = {c["key"]: c for c in its[ref]["criteria"] if not c["joint"]}
                    for k, value, u, after, inverse in criteria:
                        if k not in theirs:
                            mistakes.append(f"{name}: no criterion {k}")
                            continue
                        if inverse and value > 0:
                            value, u, after = 1 / value, u / value ** 2, 1 / after
                        if value:
                            hold(f"{name} {k}", value, theirs[k]["value"], 5e-3)
                            hold(f"{name} {k} limit", after, theirs[k]["limit"], 5e-3)
                            if theirs[k]["uncertainty"] is not None:
                                hold(f"{name} U of {k}", u, theirs[k]["uncertainty"], 5e-2)
        # The stages without leaks, by what was read with the parts lifted where it was.
        for s in its_job["stages"]:
            circuits = job.circuits("found")
            if s["name"] in circuits and s["found"]["no_leak_cathode_a"] is not None:
                names = job.group(circuits, s["name"])
                now = dict(zip(names, solve([circuits[n] for n in names])))[s["name"]]
                hold(f"{job.y['job']} {s['name']} cathode current", now["i"], s["found"]["no_leak_cathode_a"], 1e-3)
        # Jointly: a line, or the stages that hang together. Parts that fail alone are taken out.
        same_reading = {}
        for key in ("outcome_found", "outcome"):
            alone = {ref: x for (ref, k), x in judged.items() if k == key}
            company = {r: x for r, x in alone.items() if x[2] not in ("fail", "conditional fail") and x[1][1].current > 0}
            for ref, (part, chosen, outcome, (limit_s, bare), _) in alone.items():
                mates = []
                if ref in company:
                    for other, x in company.items():
                        q = x[0]
                        if other == ref:
                            continue
                        if part.place == q.place == "avc bypass" and part.p["line"] == q.p["line"]:
                            mates.append((q, x[1][1]))
                        found = job.circuits("found")
                        places = ("coupling", "screen bypass", "cathode bypass", "bias bypass")
                        if part.place in places and q.place in places and part.stages[0] in found and q.stages[0] in job.group(found, part.stages[0]) \
                                and not any(z.place == "screen bypass" and found[z.stages[0]].rs < job.policy["dropper_min"] for z in (part, q)):
                            mates.append((q, x[1][1]))
                if mates:
                    to20 = 1.0
                    # What may not fail a part alone counts in no joint fail either.
                    at, u = spread(part, [(part, chosen[1])] + mates, to20)
                    proven = all(z[4] for z in [alone[ref]] + [alone[q.ref] for q, _ in mates])
                    certain = [(q, r) for q, r in mates if alone[q.ref][4]]
                    if not proven and alone[ref][4]:
                        at_certain, u_certain = spread(part, [(part, chosen[1])] + certain, to20)
                    limits = [v for _, v, _, _ in part.values(limit_s, to20=to20)]
                    whole = [v for _, v, _, _ in part.values(limit_s * part.margin, to20=to20)]
                    worst_of_all = False
                    for i, (k, bare_value, limit, _) in enumerate(bare):
                        if k in ("heat", "leakage rule"):
                            continue
                        binding = abs(whole[i] / limit - 1) < 1e-3
                        after = limit if part.margin == 1 else limits[i] if binding else max(bare_value + (limit - bare_value) / part.margin, limits[i])
                        fails = verdict(at[i], after, u[i], "") in ("fail", "conditional fail")
                        share = effect_share(part, chosen, mates, i) >= 1 / (2 * (1 + len(mates)))
                        worst_of_all = worst_of_all or (fails and share)
                    for i, (k, bare_value, limit, _) in enumerate(bare):
                        if k in ("heat", "leakage rule"):
                            continue
                        binding = abs(whole[i] / limit - 1) < 1e-3
                        after = limit if part.margin == 1 else limits[i] if binding else max(bare_value + (limit - bare_value) / part.margin, limits[i])
                        joint = verdict(at[i], after, u[i], "")
                        theirs = [c for c in its[ref]["criteria"] if c["joint"] and c["key"] == k]
                        if key == "outcome" and not theirs and proven:
                            mistakes.append(f"{job.y['job']} {ref}: no joint {k}")
                        # A joint fail counts only what may fail, and shows that; else all is shown.
                        all_shown = proven or not worst_of_all
                        shown = (at[i], u[i]) if all_shown else (at_certain[i], u_certain[i]) if alone[ref][4] else None
                        if key == "outcome" and theirs and shown:
                            hold(f"{job.y['job']} {ref} joint {k}", shown[0], theirs[0]["value"], 5e-3)
                            hold(f"{job.y['job']} {ref} joint U of {k}", shown[1], theirs[0]["uncertainty"], 5e-2)
                        if not proven and joint in ("fail", "conditional fail"):
                            joint = verdict(at_certain[i], after, u_certain[i], "") if alone[ref][4] else "pass"
                        if joint in ("fail", "conditional fail"):
                            joint = "conditional fail" if effect_share(part, chosen, mates, i) >= 1 / (2 * (1 + len(mates))) else "conditional pass"
                        outcome = max(outcome, joint, key=OUTCOMES.index)
                checks += 1
                # An absorption that still runs is the program's own to say.
                if its[ref]["why"] == "wait":
                    continue
                farads = capacitance(part)
                if farads:
                    outcome = max(outcome, farads[3], key=OUTCOMES.index)
                    said = [c for c in its[ref]["criteria"] if c["key"] == "capacitance"]
                    if key == "outcome" and said:
                        hold(f"{job.y['job']} {ref} capacitance", farads[0], said[0]["value"], 5e-3)
                        hold(f"{job.y['job']} {ref} U of capacitance", farads[1], said[0]["uncertainty"], 5e-3)
                        hold(f"{job.y['job']} {ref} limit of capacitance", farads[2], said[0]["limit"], 1e-6)
                same = judged.get((ref, "outcome")) and judged[ref, "outcome"][1][0] == chosen[0]
                if key == "outcome_found" and mates and same:
                    same_reading[ref] = outcome  # held with the last outcome below
                    continue
                if ref in same_reading:
                    outcome_found = max(outcome, same_reading[ref], key=OUTCOMES.index)
                    if its[ref]["outcome_found"] != outcome_found:
                        mistakes.append(f"{job.y['job']} {ref}: outcome_found {its[ref]['outcome_found']}, {outcome_found} here")
                if outcome != its[ref][key]:
                    mistakes.append(f"{job.y['job']} {ref}: {key} {its[ref][key]} by the program, {outcome} here")
    for text in mistakes:
        print(text)
    print(f"{compared} parts of {len(jobs)} jobs worked out again, {checks} figures and outcomes compared, {len(mistakes)} differ")
    return 1 if mistakes or compared < 20 else 0


def effect_share(part, chosen, mates, i):
    """What the part alone brings to a figure, of what each alone brings."""
    effects = []
    for q, r in [(part, chosen[1])] + mates:
        key = part.values(0)[i][0]
        g = q.warm(r)[0] / q.service
        with_leak = {k: v for k, v, _, _ in q.values(g)}
        bare = {k: v for k, v, _, _ in q.values(0)}
        effects.append(max(with_leak[key] - bare[key], 0) if key in with_leak else 0.0)
    return effects[0] / sum(effects) if sum(effects) else 0.0


if __name__ == "__main__":
    sys.exit(main())
