"""schema.py SCHEMA JOB...: an editor that reads the JSON Schema accepts these jobs, and marks what
is wrong in them. Read with PyYAML and jsonschema (draft-07), which share no code with the program."""
import copy
import datetime
import json
import sys

import jsonschema
import yaml

with open(sys.argv[1], encoding="utf-8") as file:
    schema = json.load(file)
jsonschema.Draft7Validator.check_schema(schema)
validator = jsonschema.Draft7Validator(schema)
failures = 0


def fail(*words):
    global failures
    failures += 1
    print("FAILED:", *words)


def as_json(value):
    """What an editor sees: a date is text in YAML 1.2."""
    if isinstance(value, dict):
        return {str(key): as_json(below) for key, below in value.items()}
    if isinstance(value, list):
        return [as_json(below) for below in value]
    return value.isoformat() if isinstance(value, datetime.date) else value


def first_of(job, section):
    return next(iter(job[section].values()))


def check_refused(name, job, change):
    wrong = copy.deepcopy(job)
    change(wrong)
    if validator.is_valid(wrong):
        fail(name, "is accepted with a mistake in it")


mistakes = [
    lambda job: job.update(recieved="2031-02-03"),
    lambda job: job["set"].update(modell="Curlew"),
    lambda job: job["set"].update(supply="steam"),
    lambda job: job.update(set="Curlew 56"),
    lambda job: first_of(job, "capacitors").update(place="cupling"),
    lambda job: first_of(job, "capacitors").update(type="papper"),
    lambda job: first_of(job, "capacitors").update(done="thrown away"),
    lambda job: first_of(job, "capacitors").update(redaings="100 V 60 s 1 uA"),
    lambda job: first_of(job, "capacitors").update(marked={"value": "0.1 uF"}),
    lambda job: job.update(capacitors=["C1"]),
]
for path in sys.argv[2:]:
    with open(path, encoding="utf-8") as file:
        job = as_json(yaml.safe_load(file))
    for error in validator.iter_errors(job):
        fail(path, "/".join(map(str, error.absolute_path)), error.message[:120])
    for number, change in enumerate(mistakes):
        check_refused(f"{path}, mistake {number}", job, change)
print(f"{len(sys.argv) - 2} jobs accepted by the schema, {len(mistakes)} mistakes in each refused")
sys.exit(failures > 0)
