"""page.py OUTPUT GRIDLEAK: manual.html holds every section and every key, stands alone, and the list
of the archive leads to it."""
import html
import json
import os
import re
import subprocess
import sys

output, program = sys.argv[1:3]
with open(os.path.join(output, "manual.html"), encoding="utf-8") as file:
    page = file.read()
with open(os.path.join(output, "index.html"), encoding="utf-8") as file:
    index = file.read()
page_without_style = re.sub(r"<style[^>]*>.*?</style>", "", page, flags=re.S)
text = html.unescape(re.sub(r"<[^>]*>", "", page_without_style))
mistakes = []
if 'href="manual.html"' not in index:
    mistakes.append("index.html does not lead to the manual")
for left_over in ("{{", "}}", "\\"):
    if left_over in text:
        mistakes.append(f"'{left_over}' stands in the text of the page")
for heading in ("Safety first", "The bench routine", "How to write a job file", "Places",
                "How to read a record", "Methods", "Three limits worked by hand",
                "Archive, copies and seals", "Templates and wording", "Limits of the shop",
                "Every key", "Where the numbers come from"):
    if not re.search(r"<h2[^>]*>(<span[^>]*>[^<]*</span> )?" + re.escape(heading) + "</h2>", page):
        mistakes.append(f"no section '{heading}'")
if page.index("Safety first") > page.index("The bench routine"):
    mistakes.append("safety does not come first")


def keys(schema, found):
    """Every key that the JSON Schema knows."""
    if isinstance(schema, dict):
        for name, below in schema.get("properties", {}).items():
            found.add(name)
        for below in schema.values():
            keys(below, found)
    elif isinstance(schema, list):
        for below in schema:
            keys(below, found)
    return found


schema = json.loads(subprocess.run([program, "fields", "--schema"], capture_output=True,
                                   check=True).stdout)
known = keys(schema, set())
rows = set(re.findall(r'<th scope="row"[^>]*>([a-z_0-9]+)</th>', page))
for key in sorted(known - rows):
    mistakes.append(f"no row for the key '{key}'")
for key in ("cathode_current_rise", "guard_band", "leakage_rule", "accent"):
    if key not in rows:
        mistakes.append(f"no row for '{key}' of shop.yaml")
if re.search(r'(src|href)="https?:', page):
    mistakes.append("the page asks another host")
print(f"manual.html: {len(known)} keys of job files, {len(mistakes)} mistakes")
if len(known) < 100:
    mistakes.append("too few keys were found")
sys.exit("\n".join(mistakes) or 0)
