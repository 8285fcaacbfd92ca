#!/usr/bin/env python3
"""compare.py SITE FINDINGS COUNTS: read the published copies as a stranger would, with Python's own
HTML parser, pdftotext and plain text, and hold them against each other, against the findings, and
against the counts made by hand."""
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


NUMBER = re.compile(r"[<>≤≥]?\s?[+\u2212\u00b1]?\d+(?: \d{3})*(?:\.\d+)?")


def numbers(text):
    return [re.sub(r"[\s\u00a0\u2009]", "", n) for n in NUMBER.findall(re.sub(r"(?<=\d)[\u2009\u00a0](?=\d{3})", " ", text))]


class Tables(html.parser.HTMLParser):
    """Rows of cells of every table in <main>, without drawings and raised note signs."""

    def __init__(self):
        super().__init__()
        self.tables, self.row, self.cell, self.skip = [], None, None, 0
        self.working = []  # of each table: folded away on screen, and left out on paper

    def handle_starttag(self, tag, attributes):
        if tag in ("svg", "sup", "style", "script"):
            self.skip += 1
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
    found = []
    for table in tables:
        for row in table:
            for cell in row:
                found += numbers(cell)
    return sorted(found)


def markdown_table_text(text):
    return "\n".join(line for line in text.split("\n") if line.startswith("|"))


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
    in_pdf = numbers(pdf.replace("\n", "  "))
    missing = lacking(table_numbers(html_tables(stem + ".html", on_paper=True)), in_pdf)
    if missing:
        wrong(f"{stem}: numbers of the HTML tables not in the PDF: {missing[:12]}")
    for text, kind in ((html_text, "HTML"), (markdown, "Markdown"), (pdf, "PDF")):
        if "Kept original parts" not in text:
            wrong(f"{stem}: no headline in {kind}")
    return html_text, markdown, pdf


def check_counts(job, found):
    """The three counts and the headline, from the findings; the copies are compared with them."""
    o = found["originality"]
    pairs = counts.get(job)
    if not pairs:
        return wrong(f"{job}: nobody counted it by hand")
    kinds = {k["kind"] if "kind" in k else k["name"]: k for k in o["by_kind"]}
    got = {"kept": (o["kept"], o["of"])}
    for name, row in kinds.items():
        got[name.split(",")[0].split(" ")[-1] if "controls" in name else name] = (row["kept"], row["of"])
    for name, row in o["seen"].items():
        got[name] = (row["kept"], row["of"])
    for name, value in pairs.items():
        if isinstance(value, tuple):
            if name in got and got[name] != value:
                wrong(f"{job}: {name} {got[name]}, by hand {value}")
            elif name not in got and name != "valves":
                wrong(f"{job}: the findings have no {name}: {sorted(got)}")
        elif name in o and o[name] != value:
            wrong(f"{job}: {name} {o[name]}, by hand {value}")
    return None


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


counts = read_counts(counts_file)
records = 0
for line in open(findings_file, encoding="utf-8"):
    found = json.loads(line)
    job = found["job"]
    folder = os.path.join(site, "jobs", job)
    check_counts(job, found)
    stems = [os.path.join(folder, "shop")]
    for copy in ("client", "sale"):
        if os.path.isdir(os.path.join(folder, copy)):
            stems.append(os.path.join(folder, copy, job))
    finished = found.get("returned") is not None
    if len(stems) != (3 if finished else 1):
        wrong(f"{job}: {len(stems)} copies, returned {found.get('returned')}")
    kept, of = counts.get(job, {}).get("kept", (None, None))
    for stem in stems:
        records += 1
        for text, kind in zip(compare_record(stem), ("HTML", "Markdown", "PDF")):
            less_tags = plain(re.sub(r"<[^>]*>", "", text))
            if f"{kept} of {of}" not in less_tags:
                wrong(f"{stem}: no '{kept} of {of}' in {kind}")
    check_sale(os.path.join(folder, "sale"), found.get("owner") or {})

if records < 10:
    wrong(f"only {records} records compared")
for text in mistakes:
    print(text)
print(f"{records} records in three formats: the same numbers in all, the counts made by hand in each")
sys.exit(1 if mistakes else 0)
