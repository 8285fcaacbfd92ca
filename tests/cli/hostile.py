"""hostile.py PROGRAM WORK PICTURE: markup, script and signs of every format in every text field.

Which fields take free text is found by trying. With each payload in all of them at once (and in
every key that is the user's own) the job is published, and no element, attribute, link, table cell
or line of any format may come from it. Prose that opens something and never closes it hides no
section and no caution.
"""
import collections
import glob
import html.parser
import json
import os
import re
import shutil
import subprocess
import sys
import xml.etree.ElementTree

import hostile_job

program, work, picture = sys.argv[1:4]
archive, output = os.path.join(work, "archive"), os.path.join(work, "out")
folders = [("shop", "shop"), ("client/hostile", "client"), ("sale/hostile", "sale")]
failures = 0


def fail(*words):
    global failures
    failures += 1
    if failures < 40:
        print("FAILED:", *words)


def run(*words, text=None):
    return subprocess.run([program, *words], input=text, capture_output=True, timeout=60)


def publish(tree):
    """Publish the job alone; what was said."""
    shutil.rmtree(output, ignore_errors=True)
    with open(os.path.join(archive, "hostile.yaml"), "w", encoding="utf-8") as file:
        file.write(hostile_job.yaml(tree))
    done = run("publish", archive, "-o", output)
    if done.returncode not in (0, 2):
        fail("exit", done.returncode, done.stderr[:300])
    return done


def read(name):
    with open(os.path.join(output, name), encoding="utf-8", newline="") as file:
        return file.read()


class Page(html.parser.HTMLParser):
    """What of a page is structure, and what is text."""

    def __init__(self, text):
        super().__init__(convert_charrefs=True)
        self.shape, self.links, self.text, self.depth = collections.Counter(), [], [], []
        self.headings, self.items = [], 0
        self.feed(text)
        self.close()

    def handle_starttag(self, tag, attrs):
        self.shape[(tag, tuple(sorted(name for name, _ in attrs)))] += 1
        self.links += [value or "" for name, value in attrs if name in ("href", "src", "action", "srcset")]
        self.depth.append(tag)
        if tag in ("h1", "h2", "h3"):
            self.headings.append("")
        self.items += tag == "li"

    def handle_endtag(self, tag):
        while self.depth and self.depth.pop() != tag:
            pass

    def handle_comment(self, data):
        self.shape[("comment", ())] += 1

    def handle_data(self, data):
        if "style" in self.depth or "script" in self.depth:
            return
        self.text.append(data)
        if self.depth and self.depth[-1] in ("h1", "h2", "h3"):
            self.headings[-1] += data

    def words(self):
        return re.sub(r"\s+", " ", "".join(self.text))


def html_pages():
    return [f"jobs/hostile/{stem}.html" for stem, _ in folders] + ["jobs/hostile/sheet.html", "index.html"]


def check_links(name, page, allowed):
    for link in page.links:
        if not re.match(r"(#|[a-z0-9./_-]+$|https?://|mailto:|tel:|data:image/(png|jpeg|svg))", link, re.I) or \
                re.match(r"\s*(javascript|vbscript|data:text)", link, re.I):
            fail(name, "links to", link[:80])
        if re.match(r"https?:", link) and link not in allowed:
            fail(name, "links to", link[:80])


def columns(line):
    """Cells of a Markdown table's line."""
    return len(re.findall(r"(?<!\\)(?:\\\\)*\|", line))


def check_markdown(name, text, plain):
    """The same lines as the plain record's, the same cells, nothing that a reader would take for markup."""
    if "\r" in text:
        fail(name, "has a carriage return")
    lines, plain_lines = text.split("\n"), plain.split("\n")
    if [columns(line) for line in lines if line.startswith("|")] != \
            [columns(line) for line in plain_lines if line.startswith("|")]:
        fail(name, "has other table cells")
    for pattern, what in ((r"(?<!\\)<[a-zA-Z/!?]", "markup"), (r"(?<!\\)\]\((?!pictures/)", "a link"),
                          (r"^ {0,3}(#{2,6} .*alert|=+$|-+$)", "a heading")):
        for line in lines:
            bare = re.sub(r"(`+)(?!`).*?(?<!`)\1(?!`)", "", line) if what == "markup" else line
            if re.search(pattern, bare.replace("\\\\", "")) and not any(line == one for one in plain_lines):
                fail(name, "has", what, "in", line[:100])
                break


def pdf_text(name):
    path = os.path.join(output, name)
    if subprocess.run(["qpdf", "--check", path], capture_output=True).returncode:
        fail(name, "is damaged")
    raw = subprocess.run(["qpdf", "--qdf", "--object-streams=disable", path, "-"], capture_output=True).stdout
    for word in (b"/JavaScript", b"/JS ", b"/Launch", b"/SubmitForm", b"/EmbeddedFile"):
        if word in raw:
            fail(name, "holds", word)
    for uri in re.findall(rb"/URI \((.*?)\)", raw):
        if not re.match(rb"(https?|mailto|tel):", uri):
            fail(name, "links to", uri[:80])
    text = subprocess.run(["pdftotext", "-layout", path, "-"], capture_output=True).stdout.decode()
    return re.sub(r"\s+", " ", text)


def check_files():
    for name in glob.glob(os.path.join(output, "jobs/hostile/**/*.svg"), recursive=True):
        try:
            root = xml.etree.ElementTree.parse(name).getroot()
        except xml.etree.ElementTree.ParseError as error:
            fail(name, "is no XML:", error)
            continue
        for element in root.iter():
            if element.tag.split("}")[-1] in ("script", "foreignObject", "a", "image", "use", "iframe") or \
                    any(key.lower().startswith("on") or "href" in key for key in element.attrib):
                fail(name, "holds", element.tag, element.attrib)
    for name in glob.glob(os.path.join(output, "jobs/hostile/**/*.json"), recursive=True):
        with open(name, encoding="utf-8") as file:
            json.load(file)
    for name in glob.glob(os.path.join(output, "**"), recursive=True):
        if not re.fullmatch(r"[A-Za-z0-9._-]+", os.path.basename(name.rstrip("/"))):
            fail("a file is named", name)


def free_text_fields(tree):
    """The scalars that take any text, and the keys that do."""
    probe = 'zq <b> "x" & zq'
    texts, keys = [], []
    for path, _ in hostile_job.lines(tree):
        if path in (("photos", 0, "file"),):
            continue  # names a file that must be there; its own tests are elsewhere
        text = hostile_job.yaml(hostile_job.replaced(tree, path, probe)).encode()
        if run("assess", "--archive", archive, "-q", "-", text=text).returncode == 0:
            texts.append(path)
        for length in range(2, len(path) + 1):
            above = path[:length]
            if isinstance(above[-1], str) and above not in keys and hostile_job_key_is_free(tree, above, probe):
                keys.append(above)
    return texts, keys


tried = set()


def hostile_job_key_is_free(tree, path, probe):
    if path in tried:
        return False
    tried.add(path)
    text = hostile_job.yaml(hostile_job.renamed(tree, path, probe)).encode()
    return run("assess", "--archive", archive, "-q", "-", text=text).returncode == 0


def with_payload(tree, texts, keys, payload):
    for path in texts:
        # `1. alert` in a line of values is a number without a unit, and told
        if not (payload[0].isdigit() and path[-1] in ("marked", "fitted", "earth bond", "fuse")):
            tree = hostile_job.replaced(tree, path, payload)
    for number, path in enumerate(keys):
        tree = hostile_job.renamed(tree, path, f"{payload} {number}")
    return tree


def snapshot():
    pages = {name: Page(read(name)) for name in html_pages()}
    texts = {f"jobs/hostile/{stem}.md": read(f"jobs/hostile/{stem}.md") for stem, _ in folders}
    return pages, texts


# ---- every key is in the job, or the next payload would miss it
os.makedirs(os.path.join(archive, "photos"))
shutil.copy(picture, os.path.join(archive, "photos", "one.jpg"))
with open(os.path.join(archive, "shop.yaml"), "w", encoding="utf-8") as file:
    file.write("name: Oxlade & Finch\n")
base = hostile_job.tree()
known = hostile_job.fields(program)


def generic(path):
    """A path with '*' where the schema has one."""
    for length in range(1, len(path) + 1):
        for star in range(1 << (length - 1)):
            shape = tuple("*" if index and star >> (index - 1) & 1 else part
                          for index, part in enumerate(path[:length]))
            if shape in known:
                yield shape


covered = {shape for path, _ in hostile_job.lines(base) for shape in generic(path)}
for path in sorted(known - covered):
    fail("no line of the hostile job has", ".".join(path))
done = publish(base)
if done.returncode != 0:
    print(done.stderr.decode())
    sys.exit("the job is refused before anything hostile is in it")

texts, keys = free_text_fields(base)
names = {path[-1] for path in texts}
for name in ("maker", "model", "chassis", "serial", "description", "technician", "date_code", "reason", "note",
             "signed", "batch", "price", "caption", "arrival", "request", "private", "plan", "approvals", "work",
             "not_done", "hazards", "row_source", "what", "contact", "name"):
    if name not in names:
        fail("free text is refused in", name)
print(f"{len(texts)} scalars and {len(keys)} keys take free text")
# The owner's name and contact keep their places' words: else every sale copy would be withheld.
open_texts = [path for path in texts if path[0] != "owner"]
prose = [path for path in texts if path == ("reforms", 0, "note") or len(path) == 1 and path[0] in
         ("arrival", "request", "private", "plan", "approvals", "work", "not_done", "hazards")]
single = [path for path in open_texts if path not in prose]

publish(with_payload(base, single, keys, "word and word"))
plain_pages, plain_texts = snapshot()

payloads = [
    "<script>alert(1)</script>", '"><img src=x onerror=alert(1)>', "'><svg/onload=alert(1)>",
    "](javascript:alert(1)) [alert](javascript:alert(1)) ![alert](javascript:alert(1))",
    "<javascript:alert(1)> <https://alert.example/>", "`alert` ``a | b`` | c || d \\| e \\\\| f",
    "{{job}} {{{set}}} {{&x}} {{> cautions}} {{#set}} {{/set}} {{! alert", "--> ]]> </style></title></table> alert",
    "# headline of ours alert", "- alert", "1. alert", "> alert", "=== alert", "--- | --- | alert", "[alert]: http://alert.example",
    "&lt;script&gt; &#60;script> &amp;alert", "*alert* _alert_ ~~alert~~ **alert", "\\ \\* \\< alert \\",
    "(alert) \\) \\( %PDF endobj stream", "\u202ealert\u2066 \u200f\u202d", "\u0000alert", "a\u0007lert \u001b[31m",
    "alert\rheadline\r\nof ours", "alert\u2028of\u2029ours\u0085", "\ufeffalert \ufffe", "alert " * 60, "alert" * 200,
    "=cmd|' /C alert'!A0", "../../../alert", "%s%n%x alert",
]
for payload in payloads:
    done = publish(with_payload(base, single, keys, payload))
    if done.returncode == 2:
        # Refused as a whole is safe as well, when it is said why; only controls may be.
        if not re.search(r"[\x00-\x1f\u0080-\u009f\u2028\u2029\ufeff\ufffe\u202a-\u202e\u2066-\u2069\u200f]", payload) and \
                not payload.startswith(("../",)) and len(payload) < 200:
            fail(repr(payload), "is refused:", done.stderr.decode()[:300])
        if not os.path.exists(os.path.join(output, "jobs/hostile/shop.html")):
            continue
    pages, markdown = snapshot()
    for name, page in pages.items():
        extra = {shape for shape in page.shape if shape not in plain_pages[name].shape}
        if extra:
            fail(name, repr(payload), "adds", sorted(extra)[:3])
        for tag in ("script", "img", "a", "svg", "style", "tr", "td", "th", "table", "h1", "h2", "h3", "comment"):
            ours = sum(count for shape, count in page.shape.items() if shape[0] == tag)
            plain = sum(count for shape, count in plain_pages[name].shape.items() if shape[0] == tag)
            if ours != plain and not payload[0].isdigit():
                fail(name, repr(payload), f"{tag}: {ours} instead of {plain}")
        check_links(name, page, ())
        if re.search("[\u202a-\u202e\u2066-\u2069\u0000-\u0008\u000b-\u001f\u0085]", page.words()):
            fail(name, repr(payload), "a control or bidirectional character gets through")
    for name, text in markdown.items():
        if not payload[0].isdigit():
            check_markdown(f"{name} {payload!r}", text, plain_texts[name])
    if "alert" not in pdf_text("jobs/hostile/shop.pdf").replace(" ", "").replace("-", ""):
        fail("shop.pdf does not show", repr(payload))
    pdf_text("jobs/hostile/sheet.pdf")
    shown = pages["jobs/hostile/shop.html"].words()
    if not re.search(r"[\x00-\x1f\u0080-\u2fff]", payload) and payload.strip() not in shown:
        fail("shop.html does not show", repr(payload))
    check_files()

# ---- prose that opens something and never closes it
publish(base)
plain_pages, plain_texts = snapshot()
plain_pdf = pdf_text("jobs/hostile/shop.pdf")


def headings(markdown):
    return [line for line in markdown.split("\n") if re.match("#{1,3} ", line)]


def cautions(markdown):
    """Lines of the last section of that name."""
    section = re.split(r"^#+ [0-9]+ Cautions$", markdown, flags=re.M)[1:]
    return [line for line in re.split("^#", section[-1], flags=re.M)[0].split("\n")
            if line.startswith("  - ")] if section else []


wanted = {name: cautions(text) for name, text in plain_texts.items()}
for name, lines in wanted.items():
    if len(lines) < 6:
        fail(name, "has", len(lines), "cautions to begin with")
openers = ["<!-- ", "<!--\n\nmore", "```\ncode", "~~~~ x\ncode", "    \n\n    indented", "[Cautions]: javascript:alert(1)",
           "[x]: <", "<script>", "<pre>", "<style>", "<textarea>", "<![CDATA[", "<?php", "<!DOCTYPE", "<div>\n\n<table>",
           "<details><summary>", "> " * 300 + "deep", "- " * 200 + "deep", "* a\n" * 500, "[" * 2000, "![[]()" * 2000,
           "`" * 999, "*" * 3000, "|a|\n|-|\n", "# One\n\n## Two\n\n# Cautions\n\n- none", "***\n---\n", "&#x110000; &bogus;",
           "\\", "a\\\n", "[a](<b", "![a](", "<a href=\"", "$$\\begin{x}", "1986. a\n\n   b", "=====\n", "a\n=====",
           "[i]: http://one.example\n[ref]: http://two.example 'open", "{{> cautions}}\n{{#never}}\n{{{x", "\tindented\n\t\tmore"]
for opener in openers:
    tree = base
    for path in prose:
        # what is named in the hazards has a caution of its own, which must stay as well
        named = "Asbestos.\n\n" if path == ("hazards",) else ""
        tree = hostile_job.replaced(tree, path, named + opener)
    done = publish(tree)
    if done.returncode != 0:
        fail(repr(opener[:30]), "is refused:", done.stderr.decode()[:300])
        continue
    pages, markdown = snapshot()
    for name, text in markdown.items():
        missing = [line for line in headings(plain_texts[name]) if line not in text.split("\n")]
        if missing:
            fail(name, repr(opener[:30]), "hides", missing[:3])
        lost = [line for line in wanted[name] if line not in text.split("\n")]
        if lost:
            fail(name, repr(opener[:30]), "hides the caution", lost[0][:60])
        if re.search(r"(?<![\\`])<(script|!--|style|pre|div|textarea|\?php|!\[CDATA|details)", re.sub(
                r"^(```|~~~).*?^\1", "", text, flags=re.M | re.S)) and not re.search(r"^ {4,}|`", opener):
            fail(name, repr(opener[:30]), "leaves raw HTML")
    for name, page in pages.items():
        missing = [text for text in plain_pages[name].headings if text not in page.headings]
        if missing:
            fail(name, repr(opener[:30]), "hides", missing[:3])
        for tag in ("script", "style", "table", "img", "svg"):
            ours = sum(count for shape, count in page.shape.items() if shape[0] == tag)
            plain = sum(count for shape, count in plain_pages[name].shape.items() if shape[0] == tag)
            if ours != plain:
                fail(name, repr(opener[:30]), f"{tag}: {ours} instead of {plain}")
        check_links(name, page, ("http://one.example", "http://two.example"))
        for line in wanted.get(name.replace(".html", ".md"), []):
            start = re.sub(r"[\\*]", "", line[4:]).replace("\xa0", " ")[:40]
            if start not in page.words():
                fail(name, repr(opener[:30]), "hides the caution", start)
    text = pdf_text("jobs/hostile/shop.pdf")
    for line in wanted["jobs/hostile/shop.md"]:
        start = re.sub(r"[\\*]", "", line[4:])[:25]
        if text.count(start) < plain_pdf.count(start) or not plain_pdf.count(start):
            fail("shop.pdf", repr(opener[:30]), "hides the caution", start)
    check_files()
print(f"{len(payloads)} payloads in all text fields, {len(openers)} openers in {len(prose)} fields of prose")
sys.exit(failures > 0)
