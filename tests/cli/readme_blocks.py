"""readme_blocks.py README FOLDER: the example job of the README, and what is said about it."""
import os
import re
import sys

text = open(sys.argv[1], encoding="utf-8").read()
folder = sys.argv[2]
os.makedirs(folder, exist_ok=True)
blocks = re.findall(r"^```(\w*)\n(.*?)^```", text, re.M | re.S)
job = next(body for kind, body in blocks if kind == "yaml" and body.startswith("job: 2031-020"))
findings = next(body for kind, body in blocks if not kind and "Outcome" in body)
diagnostic = next(body for kind, body in blocks if not kind and "error: " in body)
for name, body in (("2031-020.yaml", job), ("expected-findings", findings),
                   ("expected-diagnostic", diagnostic)):
    with open(os.path.join(folder, name), "w", encoding="utf-8") as file:
        file.write(body)
