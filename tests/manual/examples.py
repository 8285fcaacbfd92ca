"""examples.py TEMPLATES ARCHIVE: the manual's fenced blocks, tried in the archive.

```yaml           a job file, or a piece of one: laid over the whole job that stands before it
```yaml shop.yaml the archive's shop.yaml from here on
```console        $ commands, run in the archive, each with status 0; the lines below must be printed
Other blocks are formulas. Commands in `code` that begin with gridleak are run too.
"""
import json
import os
import re
import subprocess
import sys

templates, archive = sys.argv[1:3]
JOB_LINE = re.compile(r"^job: (\S+)$", re.M)
mistakes = []


def manual_text(name):
    """A template with the templates that it names put in, as the program does."""
    with open(os.path.join(templates, name + ".md"), encoding="utf-8") as file:
        text = file.read()

    def partial(match):
        below = match.group(1)
        return manual_text(below) if below.startswith("manual-") else match.group(0)

    return re.sub(r"^\{\{> ([\w-]+)\}\}$", partial, text, flags=re.M)


def sections(text, indent=""):
    """[key, lines below it] for each key at this indentation."""
    found = []
    for line in text.splitlines():
        if line and not line.startswith(indent + " ") and not line.startswith(indent + "#"):
            found.append([line[len(indent):].split(":")[0], [line]])
        elif found:
            found[-1][1].append(line)
    return found


def laid_over(whole, piece):
    """The keys of a piece replace or join those of a whole job, two levels deep."""
    keys = dict(sections(whole))
    for key, lines in sections(piece):
        old = keys.get(key)
        if old and len(old) > 1 and len(lines) > 1 and not lines[1].lstrip().startswith("-"):
            below = dict(sections("\n".join(old[1:]), "  "))
            below.update(sections("\n".join(lines[1:]), "  "))
            lines = [lines[0]] + [line for item in below.values() for line in item]
        keys[key] = lines
    return "\n".join(line for lines in keys.values() for line in lines) + "\n"


def run(command):
    return subprocess.run(command, shell=True, cwd=archive, capture_output=True, text=True,
                          stdin=subprocess.DEVNULL)


def mistake(line, words, shown=""):
    mistakes.append(f"manual, line {line}: {words}\n{shown}")


def write(name, text):
    with open(os.path.join(archive, name), "w", encoding="utf-8") as file:
        file.write(text)


def try_job(line, text):
    number = JOB_LINE.search(text).group(1)
    write(number + ".yaml", text)
    done = run(f"gridleak assess --strict {number}.yaml")
    if done.returncode or done.stderr:
        mistake(line, f"the example is not clean (exit {done.returncode})", done.stderr)


def try_console(line, body):
    output = ""
    for typed in body.splitlines():
        if typed.startswith("$ "):
            done = run(typed[2:])
            output = done.stdout
            if done.returncode:
                mistake(line, f"exit {done.returncode}: {typed}", done.stderr)
        elif typed not in output:
            mistake(line, f"not printed: '{typed}'", output)


def choices_of(schema, key):
    """The choices of a key, wherever the schema has it."""
    if isinstance(schema, list):
        return next((found for item in schema if (found := choices_of(item, key))), None)
    if not isinstance(schema, dict):
        return None
    own = schema.get("properties", {}).get(key, {}).get("enum")
    return own or choices_of(list(schema.values()), key)


def reasons():
    """What may stand under an outcome, from words.yaml."""
    with open(os.path.join(templates, "words.yaml"), encoding="utf-8") as file:
        section = re.search(r"^reason:\n((?:  .*\n)+)", file.read(), re.M).group(1)
    phrases = [line.split(": ", 1)[1].strip('"') for line in section.splitlines()]
    assert len(phrases) > 10
    return [phrase.replace("{{term.valve}}", "valve") for phrase in phrases]


def main():
    text = manual_text("manual")
    whole, jobs, pieces, commands = None, 0, 0, 0
    pattern = re.compile(r"^```([^\n]*)\n(.*?)^```$|(?<!`)`(gridleak [^`\n]+)`", re.M | re.S)
    for match in pattern.finditer(text):
        kind, body, _ = match.groups()
        if kind == "yaml" and JOB_LINE.search(body):
            write(JOB_LINE.search(body).group(1) + ".yaml", body)
    for match in pattern.finditer(text):
        kind, body, inline = match.groups()
        line = text.count("\n", 0, match.start()) + 1
        if inline and inline.split()[1].isupper():
            continue  # a form: every command has it
        if inline:
            # With a name in capitals, or alone, it is no whole command: it has its help.
            shown = re.sub(r" [A-Z][A-Za-z.|-]*", "", inline)
            whole_command = shown == inline and len(inline.split()) > 2 or inline == "gridleak fields"
            done = run(inline if whole_command else " ".join(inline.split()[:2]) + " --help")
            commands += 1
            if done.returncode:
                mistake(line, f"exit {done.returncode}: {inline}", done.stderr)
        elif kind == "yaml shop.yaml":
            write("shop.yaml", body)
        elif kind == "yaml" and JOB_LINE.search(body):
            whole = body
            jobs += 1
            try_job(line, body)
        elif kind == "yaml":
            pieces += 1
            piece = JOB_LINE.sub("job: piece", laid_over(whole, body))
            try_job(line, piece)
            os.remove(os.path.join(archive, "piece.yaml"))
        elif kind == "console":
            commands += body.count("$ ")
            try_console(line, body)
    print(f"{jobs} jobs, {pieces} pieces, {commands} commands of the manual, {len(mistakes)} mistakes")
    places = json.loads(run("gridleak fields --schema").stdout)
    for place in choices_of(places, "place"):
        if f"place: {place}\n" not in text:
            mistakes.append(f"no example for the place '{place}'")
    for reason in reasons():
        if f"*{reason}*" not in text:
            mistakes.append(f"the manual does not say what '{reason}' means")
    if jobs < 4 or pieces < 10 or commands < 15:
        mistakes.append("too few examples were found")
    sys.exit("\n".join(mistakes) or 0)


main()
