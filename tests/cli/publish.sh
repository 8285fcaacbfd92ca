#!/bin/sh
# publish.sh BUILD WORK: what publishing makes, leaves alone and takes away.
set -u
here=$(cd "$(dirname "$0")" && pwd)
root=$(cd "$here/../.." && pwd)
program=$(cd "$1" && pwd)/gridleak
work=$2
. "$here/kit.sh"
cp -r "$root/jobs-example" "$work/archive"
cd "$work" || exit 1

# ---- a broken job stops no other, nothing but its summary is made, and no input is touched
archive_of mixed 2031-001 2031-002 2031-003
printf 'job: 2031-004\nset:\n  makker: X\n' >mixed/2031-004.yaml
find mixed -type f -exec sha256sum {} + | sort >before
expect 2 "$program" publish mixed -o mixed-out
tells '2031-004.yaml:3:3: error: unknown key .makker.'
tells '4 jobs: 3 made, 0 unchanged, 1 left out for mistakes'
[ "$(ls mixed-out/jobs/2031-004)" = summary.json ] || say_failed "files of a broken job: $(ls mixed-out/jobs/2031-004)"
for number in 1 2 3; do
    for file in shop.html shop.md shop.pdf sheet.html sheet.pdf client/2031-00$number.pdf sale/2031-00$number.md; do
        there mixed-out/jobs/2031-00$number/$file
    done
done
[ "$(wc -l <mixed-out/summaries.jsonl)" = 4 ] || say_failed "summaries.jsonl has not a line a job"
grep -q '2031-004' mixed-out/index.html || say_failed "the broken job is not in the list"
find mixed -type f -exec sha256sum {} + | sort >after
cmp -s before after || say_failed "publish touched its input"
# Its mistakes are told again, but the pages have nothing new to show.
stamps mixed-out >stamps-before
expect 2 "$program" publish mixed -o mixed-out
tells 'unknown key .makker.'
tells '4 jobs: 0 made, 3 unchanged, 1 left out for mistakes'
stamps mixed-out >stamps-after
cmp -s stamps-before stamps-after || say_failed "a broken job has the pages written again"
# A job that breaks later keeps the record that was published before.
expect 2 "$program" publish mixed -o mixed-out
stamps mixed-out | grep 'jobs/2031-001/client' >client-before
echo 'nonsense: yes' >>mixed/2031-001.yaml
expect 2 "$program" publish mixed -o mixed-out
stamps mixed-out | grep 'jobs/2031-001/client' >client-after
cmp -s client-before client-after || say_failed "mistakes in a job file took its earlier record away"
# Mended, it is made again; without its file, it goes.
sed -i '$d' mixed/2031-001.yaml
rm mixed/2031-004.yaml
expect 0 "$program" publish mixed -o mixed-out
gone mixed-out/jobs/2031-004
! grep -q '2031-004' mixed-out/index.html mixed-out/summaries.jsonl || say_failed "a removed job is still listed"

# ---- unchanged: nothing is touched; one changed: that one alone is made
expect 0 "$program" publish archive -o out
stamps out >before
expect 0 "$program" publish archive -o out
tells '6 jobs: 0 made, 6 unchanged'
stamps out >after
cmp -s before after || say_failed "publishing an unchanged archive touched files"
touch archive/2031-014.yaml
expect 0 "$program" publish archive -o out
tells '6 unchanged'
sed -i 's/^technician: .*/technician: A. Nother/' archive/2031-014.yaml
expect 0 "$program" publish archive -o out
tells '6 jobs: [12] made'
stamps out >after
diff before after | sed -n 's/^[<>] \.\/jobs\/\([^/]*\).*/\1/p' | sort -u >touched
# a later visit to the same set may show what the earlier one found
grep -q -x 2031-014 touched || say_failed "a changed job is not made again"
[ "$(grep -c -v -e 2031-014 -e 2037-008 touched)" = 0 ] || say_failed "others were touched: $(cat touched)"
grep -q 'A. Nother' out/jobs/2031-014/shop.md || say_failed "the change is not in the record"
# A photograph is an input as well.
photo=$(find archive/photos/2029-003 -type f | head -n 1)
expect 0 "$program" publish archive -o out
printf 'x' >>"$photo"
expect 0 "$program" publish archive -o out
tells '6 jobs: 1 made, 5 unchanged'
rm "$photo"
expect 2 "$program" publish archive -o out
tells '2029-003.yaml:[0-9]*:[0-9]*: error: cannot read the photograph'
cp "$root/jobs-example/${photo#archive/}" "$photo"
# The shop's file and the templates are inputs of every job.
sed -i 's/^name: .*/name: Another Shop/' archive/shop.yaml
expect 0 "$program" publish archive -o out
tells '6 jobs: 6 made'
# A lost file comes back.
rm -r out/jobs/2031-014
expect 0 "$program" publish archive -o out
tells '6 jobs: 1 made, 5 unchanged'
there out/jobs/2031-014/client/findings.json

# ---- jobs named one by one, at the same time, and then the pages: the same bytes as in one run
rm -rf out one
cp "$root"/jobs-example/shop.yaml archive/shop.yaml
expect 0 "$program" publish archive -o one
for job in archive/2*.yaml; do
    "$program" publish -q "$job" -o out 2>>parallel.log &
done
wait
expect 0 "$program" publish --pages archive -o out
diff -r --exclude=.gridleak one out >difference || say_failed "jobs one by one: $(head -n 5 difference)"
# Two threads and one, and a second place on the disk, are no difference either.
expect 0 "$program" publish archive -o "$work/far/away/out" --threads 1
diff -r --exclude=.gridleak one far/away/out >difference || say_failed "one thread: $(head -n 5 difference)"

# ---- what the pages show is what the jobs' folders hold, whatever happened in between
stays_whole() { # WHAT
    "$program" publish -q archive -o fresh 2>>whole.log
    "$program" publish -q archive -o out 2>>whole.log
    diff -r --exclude=.gridleak fresh out >difference || say_failed "$1: $(head -n 5 difference)"
    rm -rf fresh
}
summary=out/jobs/2031-014/summary.json
cp archive/2031-014.yaml kept.yaml
stays_whole "before"
# Published by name with another maker, shown by the pages, and changed back.
sed -i 's/^  maker: .*/  maker: Another/' archive/2031-014.yaml
expect 0 "$program" publish archive/2031-014.yaml -o out
expect 0 "$program" publish --pages archive -o out
grep -q Another out/index.html || say_failed "--pages does not show a job published by name"
cp kept.yaml archive/2031-014.yaml
stays_whole "a job published by name and changed back"
# A publish killed after it made the job, which was then changed back.
sed -i 's/^  maker: .*/  maker: Another/' archive/2031-014.yaml
cp out/.gridleak/state state-of-before
"$program" publish -q archive/2031-014.yaml -o out 2>>whole.log
cp kept.yaml archive/2031-014.yaml
cp state-of-before out/.gridleak/state
stays_whole "a killed publish"
# Jobs that come, go and change at once, with the columns of the last time at hand.
sed 's/^job: .*/job: 2030-500/' kept.yaml >archive/2030-500.yaml
sed 's/^job: .*/job: 2039-500/; s/^  maker: .*/  maker: Third/' kept.yaml >archive/2039-500.yaml
stays_whole "two jobs more"
rm archive/2030-500.yaml
sed -i 's/^  maker: .*/  maker: Fourth/' archive/2039-500.yaml
stays_whole "one less, one changed"
rm archive/2039-500.yaml
stays_whole "as before"
# Damaged columns, or summaries that somebody touched: not believed.
for damage in 'truncate -s -1' 'truncate -s 100' 'truncate -s 0' rm; do
    $damage out/.gridleak/columns
    sed -i "s/^  model: .*/  model: Model $damage/" archive/2031-014.yaml
    stays_whole "columns after '$damage'"
done
printf '\377\377\377\377' | dd of=out/.gridleak/columns bs=1 seek=2000 conv=notrunc status=none
sed -i "s/^  model: .*/  model: Overwritten/" archive/2031-014.yaml
stays_whole "columns overwritten"
echo '{}' >>out/summaries.jsonl
sed -i "s/^  model: .*/  model: Appended/" archive/2031-014.yaml
stays_whole "summaries with a line too many"
cp kept.yaml archive/2031-014.yaml
grep -q 2031-014 $summary || say_failed "no summary"

# ---- the output folder is held by one publish at a time
python3 "$here/hold_lock.py" one/.gridleak/lock 3 >holder &
for _ in 1 2 3 4 5 6 7 8 9 10 11 12 13 14 15 16 17 18 19 20; do [ -s holder ] && break; sleep 0.1; done
stamps one >before
expect 3 "$program" publish archive -o one
tells "is being published by process $(cat holder)"
expect 3 "$program" publish --pages archive -o one
expect 3 "$program" publish archive/2031-014.yaml -o one
stamps one >after
cmp -s before after || say_failed "a publish that found the folder held wrote into it"
expect 0 "$program" publish archive -o one --wait
wait

# ---- two numbers that differ in case only
archive_of twins 2031-a 2031-A
expect 2 "$program" publish twins -o twins-out
tells 'differs from .2031-[aA]. in case only'
gone twins-out/jobs/2031-a/shop.html
gone twins-out/jobs/2031-A/shop.html

# ---- templates and words of the archive's own
archive_of own 2031-001
mkdir own/templates
own_template() { # NAME SED-SCRIPT PATTERN
    sed "$2" "$root/templates/$1" >own/templates/$1
    expect 2 "$program" publish own -o own-out
    tells "$3"
    rm own/templates/$1
}
own_template record.md '1s/^/{{#open}}/' 'template-syntax\|error: '
own_template record.md '1s/^/{{{raw}}}/' 'error: '
own_template record.md '$s/$/\n\n{{> nothing_of_that_name}}\n/' 'nothing_of_that_name'
own_template words.yaml '/^outcome/d' 'error: '
cp "$root/templates/record.md" own/templates/
sed -i '1s/^/# A heading of our own\n\n/' own/templates/record.md
expect 0 "$program" publish own -o own-out
grep -q 'heading of our own' own-out/jobs/2031-001/shop.md || say_failed "the archive's template is not used"

# ---- an output folder where publish would remove what is not its own
archive_of spaced\ shop 2031-001
mkdir -p spaced\ shop/jobs/notes foreign/jobs/mine foreign-models/models
echo 'kept by hand' >spaced\ shop/jobs/notes/1.txt
expect 2 "$program" publish 'spaced shop' -o 'spaced shop'
tells "'spaced shop' is an archive"
there 'spaced shop/jobs/notes/1.txt'
expect 2 "$program" publish 'spaced shop' -o foreign
tells "'foreign/jobs' was made by something else"
expect 2 "$program" publish 'spaced shop' -o foreign-models
tells "'foreign-models/models' was made by something else"
ln -s 'spaced shop' linked
expect 0 "$program" publish linked -o 'spaced shop/out'
tells '^1 job: 1 made'
expect 0 "$program" publish linked -o 'spaced shop/out'
tells '0 made, 1 unchanged'
archive_of no-jobs
expect 0 "$program" publish no-jobs -o no-jobs-out
there no-jobs-out/index.html

# ---- mistakes and findings: what follows from a mistake is not told beside it
sed 's/ - 250 V 60 s 0.2 uA/ - 250 V 60 s ~0.2 uA/' mixed/2031-001.yaml >slip.yaml
sed 's/2031-001/slip/' slip.yaml >mixed/slip.yaml
expect 2 "$program" assess mixed/slip.yaml
tells 'write the figure alone'
tells_not 'without a reading'
rm mixed/slip.yaml

# ---- sections of a can that differ have each their own 'fitted'
archive_of cans 2031-001
cat >>cans/2031-001.yaml <<'JOB'
  C2:
    type: electrolytic
    marked: 16 uF 450 V
    fitted: electrolytic 22 uF 500 V
  C3:
    type: electrolytic
    marked: 25 uF 25 V
    fitted: electrolytic 33 uF 63 V
cans:
  CAN1:
    holds: C2 C3
    done: restuffed
JOB
expect 0 "$program" publish cans -o cans-out
grep -q 'C2 electrolytic 22.*; C3 electrolytic 33' cans-out/jobs/2031-001/shop.md ||
    say_failed "what was fitted in the sections of a can is not in the record"

# ---- a sign that no font has: once a job, with its file
archive_of signs 2031-001
sed -i 's/Curlew 56/Curlew \xE3\x90\x80/' signs/2031-001.yaml
expect 0 "$program" publish signs -o signs-out
tells '^signs/2031-001.yaml: warning: no font has the sign U+3400'
[ "$(grep -c 'no font has' "$work/stderr")" = 1 ] || say_failed "a missing sign is told more than once"

# ---- find: a date in another form is no empty answer
expect 2 "$program" find from=3/2/31 -o signs-out
tells "'3/2/31' is no date: write 2031-02-03 or 2031-03-02"
expect 0 "$program" find from=2031 -o signs-out
expect 2 "$program" find place= -o signs-out
tells "nothing stands behind 'place='"

# ---- seal and prove
expect 2 "$program" prove "$work/nowhere"
tells 'is no folder'
expect 0 "$program" publish archive -o sealing
expect 0 "$program" seal archive/2031-014.yaml client -o sealing
says 'sealed/2031-014-client-1$'
expect 0 "$program" seal archive/2031-014.yaml sale -o sealing
expect 0 "$program" prove archive/sealed/2031-014-client-1
says 'sealed, chain of 2 checked'
cp -r archive/sealed/2031-014-client-1 handed-out
expect 0 "$program" prove handed-out
says 'seals.txt not at hand'
(cd handed-out && sha256sum --quiet -c manifest.sha256) || say_failed "sha256sum does not read the manifest"
echo >>handed-out/2031-014.md
expect 1 "$program" prove handed-out
says 'changed: 2031-014.md'
expect 2 "$program" seal archive/2029-9.yaml client -o sealing
tells "publish first; a job without 'returned' has the shop's copy only"
echo >>sealing/jobs/2031-014/client/2031-014.md
expect 2 "$program" seal archive/2031-014.yaml client -o sealing
tells 'publish again'

finish
