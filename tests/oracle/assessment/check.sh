#!/bin/sh
# check.sh BUILD: the assessment against a second calculation, on the example jobs and on jobs of
# corner cases, and against the table of leakages, limits and outcomes.
set -eu
build=$(cd "$1" && pwd)
here=$(cd "$(dirname "$0")" && pwd)
root=$(cd "$here/../../.." && pwd)
work=$build/oracle/assessment
mkdir -p "$work"
cd "$root"
findings() { # OUT JOB...
    out=$1
    shift
    for job in "$@"; do
        "$build/gridleak" assess --json "$job" 2>/dev/null || { echo "$job: not assessed" >&2; exit 1; }
    done >"$out"
}
findings "$work/examples.jsonl" jobs-example/2*.yaml
findings "$work/corners.jsonl" "$here"/jobs/*.yaml
# Valid JSON, one object a line, the same keys in every capacitor of every job.
jq -es 'length > 0 and ([.[].capacitors[] | keys] | unique | length) == 1 and
    ([.[].capacitors[].criteria[] | keys] | unique | length) == 1 and
    ([.[].capacitors[].effects[] | keys] | unique | length) == 1 and
    ([.[].capacitors[].readings[] | keys] | unique | length) == 1 and
    ([.[].stages[] | keys] | unique | length) == 1 and ([.[] | keys] | unique | length) == 1' \
    "$work/examples.jsonl" "$work/corners.jsonl" >/dev/null || { echo "keys differ between jobs" >&2; exit 1; }
failed=0
python3 "$here/assessment.py" "$here/valves.txt" "$work/examples.jsonl" jobs-example/shop.yaml jobs-example/2*.yaml || failed=1
python3 "$here/assessment.py" "$here/valves.txt" "$work/corners.jsonl" - "$here"/jobs/*.yaml || failed=1
python3 "$here/outcomes.py" tests/golden/jobs/expected-outcomes.txt "$work/examples.jsonl" || failed=1
# The comparison itself: a limit 2 % off must not pass.
jq -c '.capacitors |= map(if .limit_a then .limit_a *= 1.02 else . end)' "$work/corners.jsonl" >"$work/wrong.jsonl"
if python3 "$here/assessment.py" "$here/valves.txt" "$work/wrong.jsonl" - "$here"/jobs/*.yaml >/dev/null; then
    echo "limits 2 % off are taken for right"
    failed=1
fi
exit $failed
