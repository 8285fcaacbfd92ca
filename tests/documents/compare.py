#!/usr/bin/env python3
"""compare.py SITE FINDINGS COUNTS: read the published copies as a stranger would, with Python's own
HTML parser, pdftotext and plain text, and hold them against each other, against the findings, and
against the counts made by hand."""
import collections
import html.parser
import json
import os
import re
import subprocess
import sys
import zlib

site, findings_file, counts_file = sys.argv[1:]
mistakes = []


def wrong(text):
    mistakes.append(text)


def plain(text):
    """One space for every kind of space; raised note signs are taken off by the callers."""
    return re.sub(r"[\s\u00a0\u2009\u202f]+", " ", text).strip()


NOTE = "\u2020"
NUMBER = re.compile(r"[<>≤≥]?\s?[+\u2212\u00b1]?\d+(?: \d{3})*(?:\.\d+)?")


def numbers(text):
    return [re.sub(r"[\s\u00a0\u2009]", "", n) for n in NUMBER.findall(re.sub(r"(?<=\d)[\u2009\u00a0](?=\d{3})", " ", text))]


class Tables(html.parser.HTMLParser):
    """Rows of cells of every table in <main>, without drawings; NOTE stands for raised note signs."""

    def __init__(self):
        super().__init__()
        self.tables, self.row, self.cell, self.skip = [], None, None, 0
        self.working = []  # of each table: folded away on screen, and left out on paper

    def handle_starttag(self, tag, attributes):
        if tag in ("svg", "sup", "style", "script"):
            self.skip += 1
            if tag == "sup" and self.cell is not None:
                self.cell += NOTE
        elif tag == "table":
            self.tables.append([])
            self.working.append("calc" in dict(attributes).get("class", "").split())
        elif tag == "tr" and self.tables:
            self.row = []
        elif tag in ("td", "th") and self.row is not None:
            self.cell = ""
        elif tag == "br" and self.cell is not None:
            self.cell += " "
        elif self.cell is not None and dict(attributes).get("class", "").split()[:1] in (["why"], ["unit"], ["second"]):
            self.cell += " "

    def handle_endtag(self, tag):
        if tag in ("svg", "sup", "style", "script"):
            self.skip -= 1
        elif tag in ("td", "th") and self.cell is not None:
            self.row.append(plain(self.cell))
            self.cell = None
        elif tag == "tr" and self.row is not None:
            self.tables[-1].append(self.row)
            self.row = None

    def handle_data(self, data):
        if self.cell is not None and not self.skip:
            self.cell += data


def html_tables(path, on_paper=False):
    parser = Tables()
    parser.feed(open(path, encoding="utf-8").read())
    return [t for t, working in zip(parser.tables, parser.working) if t and not (on_paper and working)]


def table_numbers(tables):
    return sorted(number for table in tables for number in sequence(table))


def sequence(table):
    """The numbers of a table in reading order, however it is broken into rows."""
    return [number for row in table for cell in row for number in numbers(cell)]


def markdown_tables(text):
    tables = []
    inside = False
    for line in less_notes(text).split("\n"):
        if not line.startswith("|"):
            inside = False
            continue
        if not inside:
            tables.append([])
        inside = True
        if not re.fullmatch(r"[|: -]+", line):
            tables[-1].append([plain(cell.replace("\\", "")) for cell in re.split(r"(?<!\\)\|", line)[1:-1]])
    return tables


def unlike_markdown(tables, markdown):
    """Tables of which no table of the Markdown, in the same order, has the same numbers. Markdown has more
    tables: there a curve is one. What is a row of its own above others is a column there."""
    given = markdown_tables(markdown)
    unlike = []
    for table in tables:
        above = {less_marks(row[0]) for row in table if len(row) == 1}
        wanted = sequence([row for row in table if len(row) > 1])
        same = [i for i, other in enumerate(given) if wanted == sequence(
            [[cell for cell in row if less_marks(cell) not in above] for row in other])]
        if same:
            given = given[same[0] + 1:]
        elif wanted:
            unlike.append(table)
    return unlike


def less_marks(cell):
    return cell.replace(NOTE, "").strip()


def figures(text):
    """Runs of digits as a PDF's text has them: a thousand's space may come out as any space."""
    return re.findall(r"\d+(?:\.\d+)?", text)


class Written:
    """The figures of a PDF in the order they are written in, and where each stands."""

    def __init__(self, path):
        self.figures = figures(subprocess.run(["pdftotext", "-raw", path, "-"], check=True,
                                              capture_output=True).stdout.decode())
        self.at = collections.defaultdict(list)
        for i, figure in enumerate(self.figures):
            self.at[figure].append(i)

    def side_by_side(self, wanted, more):
        needed = collections.Counter(wanted)
        rarest = min(needed, key=lambda figure: len(self.at[figure]))
        for place in self.at[rarest]:
            for size in range(len(wanted), len(wanted) + more + 1):
                for start in range(max(0, place - size + 1), place + 1):
                    if not needed - collections.Counter(self.figures[start:start + size]):
                        return True
        return False


def unlike_pdf(tables, written):
    """Rows whose numbers do not stand side by side in the PDF. A row's cells need not come from left to right,
    and a note's sign grows onto the number before it."""
    unlike = []
    for row in (row for table in tables for row in table):
        text = " | ".join(row)
        wanted = figures(re.sub(r"[\d.]+ ?" + NOTE, "", text))
        if wanted and not written.side_by_side(wanted, 3 * text.count(NOTE)):
            unlike.append(row)
    return unlike


def less_notes(text):
    """Note signs of Markdown: <sup>1</sup>, or raised digits."""
    return re.sub(r"[\u00b9\u00b2\u00b3\u2070-\u2079]", "", re.sub(r"<sup>.*?</sup>", "", text))


def lacking(wanted, given):
    given = list(given)
    missing = []
    for item in wanted:
        if item in given:
            given.remove(item)
        else:
            missing.append(item)
    return missing


def other_digit(text):
    """The text with another last digit in its last number."""
    end = list(re.finditer(r"\d", text))[-1].start()
    return f"{text[:end]}{(int(text[end]) + 3) % 10}{text[end + 1:]}"


def compare_itself(stem):
    """The comparison notices other digits in a row of any table, where it holds more than a figure or two."""
    markdown = open(stem + ".md", encoding="utf-8").read()
    written = Written(stem + ".pdf")
    tables = html_tables(stem + ".html", on_paper=True)
    tried = 0
    for table in tables:
        for i, row in enumerate(table):
            changed = [cell if NOTE in cell or not re.search(r"\d", cell) else other_digit(cell) for cell in row]
            if len(row) == 1 or len(figures(" ".join(a for a, b in zip(changed, row) if a != b))) < 3:
                continue
            tried += 1
            if not unlike_markdown([table[:i] + [changed] + table[i + 1:]], markdown):
                wrong(f"{stem}: other digits pass in the Markdown: {changed}")
            if not unlike_pdf([[changed]], written):
                wrong(f"{stem}: other digits pass in the PDF: {changed}")
    if tried < 40:
        wrong(f"{stem}: the comparison was tried on {tried} rows only")


def compare_record(stem):
    html_text = open(stem + ".html", encoding="utf-8").read()
    markdown = open(stem + ".md", encoding="utf-8").read()
    pdf = subprocess.run(["pdftotext", "-layout", stem + ".pdf", "-"], check=True,
                         capture_output=True).stdout.decode()
    tables = html_tables(stem + ".html")
    wanted = table_numbers(tables)
    if len(wanted) < 60:
        wrong(f"{stem}: only {len(wanted)} numbers in the tables: the comparison reads nothing")
    in_markdown = numbers(less_notes(markdown.replace("\\", "")))
    missing = lacking(wanted, in_markdown)
    if missing:
        wrong(f"{stem}: numbers of the HTML tables not in Markdown: {missing[:12]}")
    on_paper = html_tables(stem + ".html", on_paper=True)
    for table in unlike_markdown(on_paper, markdown):
        wrong(f"{stem}: no table of the Markdown has the numbers of this one: {table[:3]}")
    for row in unlike_pdf(on_paper, Written(stem + ".pdf")):
        wrong(f"{stem}: this row's numbers do not stand together in the PDF: {row}")
    for text, kind in ((html_text, "HTML"), (markdown, "Markdown"), (pdf, "PDF")):
        if "Kept original parts" not in text:
            wrong(f"{stem}: no headline in {kind}")
    return html_text, markdown, pdf


def check_counts(job, found):
    """Every count made by hand, against the findings; the copies are compared with them."""
    o = found["originality"]
    pairs = counts.get(job)
    if not pairs:
        return wrong(f"{job}: nobody counted it by hand")
    got = {**o["total"], **{name: value for name, value in o.items() if isinstance(value, int)}}
    got["kept"] = (o["kept"], o["of"])
    for row in o["by_kind"] + list(o["seen"].values()) + [o["valves"]]:
        got[row["name"].split(" ")[-1]] = (row["kept"], row["of"])
    for name, value in pairs.items():
        if got.get(name) != value:
            wrong(f"{job}: {name} {got.get(name)}, by hand {value}")
    return None


def said_counts(pairs):
    """What a record has to say of the counts made by hand; nothing of a count of nought."""
    yield r"(?<!\d)%d of %d(?!\d)" % pairs["kept"]
    for name in ("capacitors", "resistors", "windings", "controls"):
        yield r"%s ?%d of %d(?!\d)" % (name, *pairs[name])
    yield r"above %d of %d, from below %d of %d, hidden %d of %d(?!\d)" % (
        *pairs["above"], *pairs["below"], *pairs["hidden"])
    yield r"Valves %d of %d(?!\d)" % pairs["valves"]
    for name, words in (("disconnected", "left in place, disconnected"), ("restuffed", "shells? kept, new inside"),
                        ("removed", "removed"), ("open", "parts? (?:are|is) still open")):
        if pairs[name]:
            yield r"(?<!\d)%d %s" % (pairs[name], words)


def read_counts(path):
    table = {}
    for line in open(path, encoding="utf-8"):
        words = line.split()
        if not words or words[0].startswith("#"):
            continue
        pairs = table.setdefault(words[0], {})
        i = 1
        while i < len(words):
            if i + 3 < len(words) and words[i + 2] == "of":
                pairs[words[i]] = (int(words[i + 1]), int(words[i + 3]))
                i += 4
            else:
                pairs[words[i]] = int(words[i + 1])
                i += 2
    return table


def pdf_bytes(path):
    """Everything in a PDF a reader could dig out: plain bytes, and every stream inflated."""
    data = open(path, "rb").read()
    out = [data]
    for match in re.finditer(rb"stream\r?\n", data):
        try:
            out.append(zlib.decompressobj().decompress(data[match.end():]))
        except zlib.error:
            pass
    text = subprocess.run(["pdftotext", path, "-"], check=True, capture_output=True).stdout
    info = subprocess.run(["pdfinfo", path], check=True, capture_output=True).stdout
    return b"\n".join(out + [text, info])


def check_sale(folder, owner):
    name, contact = owner.get("name") or "", owner.get("contact") or ""
    words = [w for w in {name, name.split()[-1] if name else "", contact} if len(w) > 2]
    if not words:
        return
    for base, _, files in os.walk(folder):
        for file in files:
            path = os.path.join(base, file)
            data = pdf_bytes(path) if file.endswith(".pdf") else open(path, "rb").read()
            for word in words:
                for form in (word.encode(), word.encode("utf-16-be")):
                    if form.lower() in data.lower() or word.lower() in file.lower():
                        wrong(f"{path} holds '{word}'")


def judged(node):
    """Every figure of the findings that was held against a limit."""
    if isinstance(node, dict) and "source" in node and node.get("outcome", "not judged") != "not judged":
        yield node
    for below in node.values() if isinstance(node, dict) else node if isinstance(node, list) else ():
        yield from judged(below)


def check_sources(job, found):
    """Each names the source of its limit."""
    figures_judged = list(judged(found))
    if len(figures_judged) < 20:
        wrong(f"{job}: only {len(figures_judged)} figures are judged: nothing is looked at")
    for figure in figures_judged:
        if figure["source"] in (None, "", "none"):
            wrong(f"{job}: judged without a source: {figure}")


counts = read_counts(counts_file)
compare_itself(os.path.join(site, "jobs", "2031-014", "client", "2031-014"))
records = 0
for line in open(findings_file, encoding="utf-8"):
    found = json.loads(line)
    job = found["job"]
    folder = os.path.join(site, "jobs", job)
    check_counts(job, found)
    check_sources(job, found)
    stems = [os.path.join(folder, "shop")]
    for copy in ("client", "sale"):
        if os.path.isdir(os.path.join(folder, copy)):
            stems.append(os.path.join(folder, copy, job))
    finished = found.get("returned") is not None
    if len(stems) != (3 if finished else 1):
        wrong(f"{job}: {len(stems)} copies, returned {found.get('returned')}")
    for stem in stems:
        records += 1
        for text, kind in zip(compare_record(stem), ("HTML", "Markdown", "PDF")):
            less_tags = plain(re.sub(r"<[^>]*>", "", text))
            for said in said_counts(counts[job]) if job in counts else ():
                if not re.search(said, less_tags):
                    wrong(f"{stem}: '{said}' is not said in {kind}")
    check_sale(os.path.join(folder, "sale"), found.get("owner") or {})

if records < 10:
    wrong(f"only {records} records compared")
for text in mistakes:
    print(text)
print(f"{records} records in three formats: the same numbers in all, the counts made by hand in each")
sys.exit(1 if mistakes else 0)
