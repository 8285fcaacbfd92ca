#!/bin/sh
# commands.sh BUILD WORK: each command as typed, with its exit status and the words that matter.
set -u
here=$(cd "$(dirname "$0")" && pwd)
root=$(cd "$here/../.." && pwd)
program=$(cd "$1" && pwd)/gridleak
work=$2
. "$here/kit.sh"
example=$root/jobs-example

# ---- the program
expect 2 "$program"
says 'gridleak publish'
expect 0 "$program" --help
says 'gridleak COMMAND --help'
expect 0 "$program" --version
says '^gridleak [0-9]'
expect 2 "$program" solder
tells "no command 'solder'"
expect 0 "$program" --man-page
says '^.TH GRIDLEAK 1'
if command -v man >/dev/null 2>&1; then
    "$program" --man-page >"$work/gridleak.1"
    expect 0 man --warnings -l "$work/gridleak.1"
    silent stderr
fi

# ---- every command of the README has its help, with the options that the README names
sed -n '/^## Commands/,/^## Safety/p' "$root/README.md" | grep -o 'gridleak [a-z][a-z]*' | sort -u |
    while read -r _ command; do echo "$command"; done >"$work/commands"
[ "$(wc -l <"$work/commands")" -ge 7 ] || say_failed "the README lists too few commands"
while read -r command; do
    expect 0 "$program" "$command" --help
    cp "$work/stdout" "$work/$command.help"
    expect 2 "$program" "$command" --no-such-option
    tells "unknown option '--no-such-option' of $command"
done <"$work/commands"
grep -n 'gridleak' "$root/README.md" | grep -o 'gridleak [a-z]*.*--[a-z]*' | while read -r _ command rest; do
    [ -f "$work/$command.help" ] || continue
    for option in $(echo "$rest" | sed 's/gridleak.*//' | grep -o -e '--[a-z]*'); do
        grep -q -e "$option" "$work/$command.help" || echo "$command $option"
    done
done >"$work/unknown"
[ ! -s "$work/unknown" ] || say_failed "in the README, not in the help: $(tr '\n' ' ' <"$work/unknown")"

# ---- usage
for command in start sheet assess publish seal prove; do
    expect 2 "$program" $command
    tells "usage: gridleak $command"
done
expect 2 "$program" fields more
tells 'usage: gridleak fields'
expect 2 "$program" sheet a.yaml b.yaml
tells 'usage: gridleak sheet'
expect 2 "$program" seal a.yaml shop
tells 'client|sale'
expect 2 "$program" publish "$example" --threads none
tells 'a number from 1 to 64'
expect 2 "$program" publish "$example" --threads
tells 'needs N'
expect 2 "$program" assess --json=yes "$example/2031-014.yaml"
tells 'takes no value'
expect 2 "$program" publish "$work/nowhere" -o "$work/none"
tells 'is no archive'
gone "$work/none"
expect 2 "$program" publish "$example" "$example/2031-014.yaml" -o "$work/none"
tells 'one archive, or job files'
expect 2 "$program" assess --archive "$work/nowhere" "$example/2031-014.yaml"
tells 'is no archive'

expect 2 "$program" assess --json --working C14 "$example/2031-014.yaml"
tells 'give one of them'
mkdir -p "$work/numbers"
echo 'name: Oxlade & Finch' >"$work/numbers/shop.yaml"
expect 0 "$program" start 2031-015.yaml --archive "$work/numbers"
there "$work/numbers/2031-015.yaml"
expect 2 "$program" start 2031/016 --archive "$work/numbers"
tells 'cannot be a job number'
expect 3 "$program" sheet "$example/2031-014.yaml" -o "$work/nowhere/sheet.pdf"
tells 'no such folder'

printf 'name: Oxlade & Finch\naccent: #1b4b6b\n' >"$work/numbers/shop.yaml"
for command in assess sheet; do
    expect 0 "$program" $command "$work/numbers/2031-015.yaml"
    tells "'accent' is empty: a # begins a comment"
    [ "$(grep -c 'is empty' "$work/stderr")" = 1 ] || say_failed "$command tells of shop.yaml more than once"
done
expect 0 "$program" publish "$work/numbers" -o "$work/numbers-out"
tells "'accent' is empty: a # begins a comment"
echo 'wording: US' >"$work/numbers/shop.yaml"
expect 2 "$program" assess "$work/numbers/2031-015.yaml"
tells 'write wording: us'

# ---- assess
for job in "$example"/2*.yaml; do
    expect 0 "$program" assess "$job"
    says "^Findings $(basename "$job" .yaml)"
    python3 "$here/columns.py" 80 <"$work/stdout" || say_failed "assess $job is wider than 80 columns"
    expect 0 "$program" sheet "$job"
    python3 "$here/columns.py" 80 <"$work/stdout" || say_failed "sheet $job is wider than 80 columns"
done
expect 0 "$program" assess --working c14 "$example/2031-014.yaml"
says 'Working of C14'
says 'V_c = V_set'
says 'RCA'
python3 "$here/columns.py" 80 <"$work/stdout" || say_failed "assess --working is wider than 80 columns"
expect 0 "$program" assess --working R8 "$example/2031-014.yaml"
says 'Off its marking'
expect 2 "$program" assess --working C99 "$example/2031-014.yaml"
tells "no part 'C99' in this job"
expect 0 "$program" assess --json "$example/2031-014.yaml" "$example/2029-003.yaml"
[ "$(wc -l <"$work/stdout")" = 2 ] || say_failed "assess --json: not one object a line"
[ "$(jq -r .job.number "$work/stdout" 2>/dev/null || jq -r .job "$work/stdout")" != null ] || say_failed "assess --json: no job"
jq -e '.findings == 1 and .copy == "shop" and (.capacitors | length) > 10' "$work/stdout" >/dev/null ||
    say_failed "assess --json: not the keys of version 1"
# The keys that the manual promises: unknown is null, never left out.
jq -e -s 'def all_have($names): all(.[]; . as $one | all($names[]; . as $name | $one | has($name)));
    ([.[].capacitors[]] | all_have(["ref", "can", "was", "type", "maker", "value_f", "rated_v", "place", "stage", "seen",
        "state", "done", "outcome_found", "outcome", "advice", "service_v", "leakage_a", "leakage_warm_a",
        "uncertainty_a", "limit_a", "bench_limit_a", "sheet_limit_a", "sheet_voltage_v", "effect", "criteria", "readings"])) and
    ([.[].capacitors[].effect | values] | length > 10 and all_have(["key", "value", "unit", "text"])) and
    ([.[].capacitors[].criteria[]] | length > 10 and
        all_have(["key", "value", "unit", "uncertainty", "limit", "outcome", "source"])) and
    ([.[].stages[] | .designed, .found, .left] | length > 10 and all_have(["grid_v", "cathode_v", "anode_v", "screen_v",
        "anode_a", "screen_a", "cathode_a", "anode_w", "screen_w"])) and
    ([.[].originality] | all_have(["kept", "of", "by_kind", "seen", "restuffed", "replaced", "replaced_unmeasured",
        "earlier_repairs", "missing"])) and
    ([.[].diagnostics[]] | length > 0 and all_have(["path", "line", "column", "severity", "code", "text", "hint"]))' \
    "$work/stdout" >/dev/null || say_failed "assess --json: a key is left out"
cat "$example/2029-003.yaml" >"$work/piped"
expect 0 sh -c "'$program' assess --archive '$example' - <'$work/piped'"
says '^Findings 2029-003'
expect 0 sh -c "'$program' sheet --archive '$example' - <'$work/piped'"
says '2029-003'
expect 2 "$program" assess "$work/nowhere.yaml"
tells 'cannot read it: no such file'
expect 2 "$program" assess "$work"
tells 'cannot read it: not a regular file'
expect 3 sh -c "'$program' assess '$example/2031-014.yaml' >/dev/full"
tells 'cannot write to standard output'
expect 3 sh -c "'$program' fields >/dev/full"

# Warnings are told and change the status only when asked; a failed part never does.
expect 1 "$program" assess --strict "$example/2029-003.yaml"
tells 'warning: '
archive_of "$work/plain" 2031-001
expect 0 "$program" assess --strict "$work/plain/2031-001.yaml"
silent stderr
sed 's/0.2 uA/900 uA/' "$work/plain/2031-001.yaml" >"$work/plain/2031-002.yaml"
sed -i 's/^job: .*/job: 2031-002/; s/done: kept/done: replaced/' "$work/plain/2031-002.yaml"
expect 0 "$program" assess --strict "$work/plain/2031-002.yaml"
says 'fail'
# --quiet keeps warnings and leaves notes out.
sed 's/0.1 uF/0.1 MF/' "$work/plain/2031-001.yaml" >"$work/plain/2031-003.yaml"
sed -i 's/^job: .*/job: 2031-003/' "$work/plain/2031-003.yaml"
expect 0 "$program" assess "$work/plain/2031-003.yaml"
tells ': note: '
expect 0 "$program" assess --quiet "$work/plain/2031-003.yaml"
silent stderr
expect 1 "$program" assess -q --strict "$example/2029-003.yaml"
tells 'warning: '
# One broken file: the others are assessed all the same.
printf 'job: broken\nset:\n  maker: [a\n' >"$work/plain/broken.yaml"
expect 2 "$program" assess "$work/plain/broken.yaml" "$work/plain/2031-001.yaml"
says '^Findings 2031-001'
tells 'broken.yaml:3:10: error: '
expect 2 "$program" assess --json "$work/plain/broken.yaml"
jq -e '(.diagnostics | length) > 0 and .diagnostics[0].severity == "error" and has("capacitors")' "$work/stdout" >/dev/null ||
    say_failed "a file with errors gives no object with diagnostics"

# Bold on a terminal, unless NO_COLOR says no; never into a file.
python3 "$here/terminal.py" "$program" assess "$example/2031-014.yaml" >"$work/tty"
grep -q "$(printf '\033')\[1m" "$work/tty" || say_failed "nothing is bold on a terminal"
NO_COLOR=1 python3 "$here/terminal.py" "$program" assess "$example/2031-014.yaml" >"$work/tty"
! grep -q "$(printf '\033')" "$work/tty" || say_failed "NO_COLOR is not respected"
expect 0 "$program" assess "$example/2031-014.yaml"
! grep -q "$(printf '\033')" "$work/stdout" || say_failed "escape sequences in a file"

# ---- sheet
for kind in html pdf md; do
    expect 0 "$program" sheet "$example/2031-014.yaml" -o "$work/sheet.$kind"
    silent stdout
    there "$work/sheet.$kind"
done
head -c 5 "$work/sheet.pdf" | grep -q '%PDF-' || say_failed "sheet.pdf is no PDF"
grep -q '<!doctype html>' "$work/sheet.html" || say_failed "sheet.html is no page"
expect 2 "$program" sheet "$example/2031-014.yaml" -o "$work/sheet.doc"
tells 'should end in .html, .pdf or .md'
gone "$work/sheet.doc"
expect 3 "$program" sheet "$example/2031-014.yaml" -o "$work/nowhere/sheet.md"
tells 'cannot write'
expect 2 "$program" sheet "$work/plain/broken.yaml" -o "$work/broken.pdf"
gone "$work/broken.pdf"

# ---- fields
expect 0 "$program" fields
for key in grid_leak readings place marked fitted after_rest; do says "$key"; done
expect 0 "$program" fields --schema
jq -e '."$schema" | test("draft-07")' "$work/stdout" >/dev/null || say_failed "the schema is not draft-07"
cp "$work/stdout" "$work/job.schema.json"
# Debian's own Python has the two packages; another one first in PATH may not.
python=python3
"$python" -c 'import jsonschema, yaml' 2>/dev/null || python=/usr/bin/python3
expect 0 "$python" "$here/schema.py" "$work/job.schema.json" "$example"/2*.yaml "$root/tests/golden/diagnostics/2031-014.yaml"
says '^7 jobs accepted'

# ---- start
archive_of "$work/start" 2031-001
expect 0 sh -c "cd '$work/start' && '$program' start 2031-020"
says '2031-020.yaml'
before=$(sha256sum "$work/start/2031-020.yaml")
expect 2 sh -c "cd '$work/start' && '$program' start 2031-020"
tells 'is there already'
[ "$before" = "$(sha256sum "$work/start/2031-020.yaml")" ] || say_failed "start wrote over a file"
expect 0 "$program" assess "$work/start/2031-020.yaml"
mkdir "$work/start/below"
expect 0 sh -c "cd '$work/start/below' && '$program' start 2031-021a"
there "$work/start/2031-021a.yaml"
expect 2 "$program" start --archive "$work/start" 2031-021A
tells 'is there already'
for number in '' ../x .x a/b 'a b' "$(printf 'a\001')"; do
    expect 2 "$program" start --archive "$work/start" "$number"
    tells 'cannot be a job number'
done
expect 0 "$program" start --archive "$example" --like 2031-014 -- 9999-1
mv "$example/9999-1.yaml" "$work/start/9999-1.yaml"
grep -q '0.02 uF 400 V 20 %' "$work/start/9999-1.yaml" || say_failed "--like keeps no parts"
! grep -q '118204\|1.1 uA' "$work/start/9999-1.yaml" || say_failed "--like keeps the serial or a reading"
expect 0 "$program" assess "$work/start/9999-1.yaml"
expect 2 "$program" start --archive "$work/start" --like 1999-1 2031-022
tells 'cannot read'
gone "$work/start/2031-022.yaml"
if [ "$(id -u)" != 0 ]; then
    chmod a-w "$work/start"
    expect 3 "$program" start --archive "$work/start" 2031-023
    chmod u+w "$work/start"
fi

# ---- the README's example does what the README says
python3 "$here/readme_blocks.py" "$root/README.md" "$work/readme" || say_failed "the README has no example"
cd "$work/readme" || exit 1
expect 0 "$program" assess 2031-020.yaml
while IFS= read -r line; do
    grep -q -x -F -e "$line" "$work/stdout" || say_failed "the README shows '$line'"
done <expected-findings
sed -i 's/readings:/readigns:/' 2031-020.yaml
expect 2 "$program" assess 2031-020.yaml
while IFS= read -r line; do
    grep -q -x -F -e "$line" "$work/stderr" || say_failed "the README shows '$line'"
done <expected-diagnostic

finish
