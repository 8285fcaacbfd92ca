#!/bin/sh
# bad_input.sh BUILD WORK: each kind of bad input is told where it stands, ends in exit 2 within
# seconds and bounded memory, leaves nothing behind for its job, and hinders no other.
set -u
here=$(cd "$(dirname "$0")" && pwd)
root=$(cd "$here/../.." && pwd)
program=$(cd "$1" && pwd)/gridleak
work=$2
. "$here/kit.sh"
cd "$work" || exit 1
images=$root/tests/pdf/images
bounded() { timeout 20 sh -c 'ulimit -v 1500000; exec "$@"' bounded "$@"; }

# refused NAME PATTERN: the job on standard input, beside a good one, is refused with these words.
refused() {
    name=$1
    rm -rf archive out
    archive_of archive good
    cat >archive/"$name".yaml
    refused_here "$name" "$2"
}
refused_here() {
    name=$1
    sum=$(sha256sum "archive/$name.yaml")
    expect 2 bounded "$program" assess "archive/$name.yaml"
    tells "^archive/$name.yaml:.*error: "
    grep -q -e "$2" "$work/stderr" || say_failed "$name: not told '$2': $(head -n 3 "$work/stderr")"
    [ "$(wc -c <"$work/stderr")" -lt 20000 ] || say_failed "$name: $(wc -c <"$work/stderr") bytes of diagnostics"
    expect 2 bounded "$program" publish archive -o out
    tells '2 jobs: 1 made, 0 unchanged, 1 left out for mistakes'
    there out/jobs/good/client/good.pdf
    [ "$(ls "out/jobs/$name")" = summary.json ] || say_failed "$name: written all the same: $(ls "out/jobs/$name" | tr '\n' ' ')"
    [ "$sum" = "$(sha256sum "archive/$name.yaml")" ] || say_failed "$name: the input was touched"
}
job_with() { # SED-SCRIPT: the small job, changed
    small_job x | sed "$1"
}

# ---- YAML
refused x 'empty\|nothing' </dev/null
printf '\n# only a comment\n\n' | refused x 'empty\|nothing\|comments'
echo 'Dear Sir, the set hums.' | refused x 'error'
printf '%%PDF-1.4\n\001\002\003\377\376' | refused x 'error'
printf -- '- a\n- b\n' | refused x 'error'
job_with 's/^received.*/&\nreceived: 2031-02-04/' | refused x "key 'received'.*"
job_with 's/^received/recieved/' | refused x "unknown key 'recieved'"
job_with 's/^    marked: .*/    marked:\n      - 0.1 uF/' | refused x 'error'
job_with 's/^conditions:/conditions: warm\nconditions2:/' | refused x 'error'
head -c 100000 /dev/zero | tr '\0' '[' | refused x 'error'
head -c 100000 /dev/zero | tr '\0' '{' | refused x 'error'
(printf 'a: &a [x,x,x,x,x,x,x,x,x]\n'; for i in b c d e f g h i j; do
    printf '%s: &%s [*%s,*%s,*%s,*%s,*%s,*%s,*%s,*%s,*%s]\n' $i $i a a a a a a a a a; done) | refused x 'alias\|anchor'
printf 'job: x\nset:\n  maker: caf\351\n' | refused x '0xE9: this file looks like Latin-1'
printf 'job: x\nset:\n  maker: a\000b\n' | refused x 'error'
(small_job x; printf 'work: |\n'; head -c 1000000 /dev/zero | tr '\0' 'n' | fold -w 70 | sed 's/^/  /') | refused x 'work\|65536\|long\|KB'
(small_job x; head -c 5000000 /dev/zero | tr '\0' '#' | fold -w 70 | sed 's/^/# /') | refused x 'too large'
(small_job x | sed '/^capacitors/,$d'; echo 'resistors:'; awk 'BEGIN { for (i = 0; i < 30000; i++) printf "  R%d: {marked: 10k}\n", i }') | refused x 'error'
(small_job x; awk 'BEGIN { for (i = 0; i < 60; i++) printf "%*sa:\n", i * 2, "" }') | refused x 'error'

# ---- facts
job_with 's/0.1 uF 350 V/0.1/' | refused x 'unit'
job_with 's/0.1 uF 350 V/-0.1 uF 350 V/' | refused x 'error'
job_with 's/250 V 60 s/250 V 0 s/' | refused x 'error'
job_with 's/bench: 19 C/bench: 19 V/' | refused x 'error'
job_with 's/returned: 2031-02-19/returned: 2031-01-19/' | refused x 'before\|after\|order'
job_with 's/returned: 2031-02-19/returned: 2031-02-30/' | refused x 'error'
job_with 's/1,000/&/; s/0.2 uA/1,000 uA/' | refused x '1.000\|1000'
job_with '/feed: 10k/d' | refused x "feed"
job_with '/current: 2 mA/d' | refused x "current"
job_with 's/^job: x/job: y/' | refused x "file named 'x.yaml'"
# a part not yet measured may lack what its place needs: it is not judged, and the job is made
rm -rf archive out
archive_of archive good
job_with '/feed: 10k/d; /readings:/,/uA/d; s/done: kept$/done: kept untested/' >archive/x.yaml
expect 0 "$program" assess archive/x.yaml
says 'not judged'
# a valve that nobody knows costs the stage's figures, not the record
rm -rf archive out
archive_of archive good
job_with 's/^capacitors:/stages:\n  output:\n    valve: V4 9Q9GT\n    supply: 250 V\n    anode: 300 ohm\n    cathode: 270 ohm\n    grid_leak: 470k\n&/' >archive/x.yaml
expect 0 "$program" publish archive -o out
tells "no row for '9Q9GT' in the valve book"
there out/jobs/x/client/x.pdf

# ---- photographs
with_photo() { # FILE-IN-THE-JOB
    rm -rf archive out
    archive_of archive good
    mkdir -p archive/photos outside
    cp "$images/base.jpg" outside/base.jpg
    (small_job x; printf 'photos:\n  - file: %s\n    shows: C1\n' "$1") >archive/x.yaml
}
photo_refused() { # PATTERN
    expect 0 "$program" assess archive/x.yaml
    expect 2 bounded "$program" publish archive -o out
    tells '^archive/x.yaml:[0-9]*:[0-9]*: error: '
    tells "$1"
    [ "$(ls out/jobs/x)" = summary.json ] || say_failed "$1: written all the same: $(ls out/jobs/x | tr '\n' ' ')"
    there out/jobs/good/client/good.pdf
}
with_photo photos/none.jpg
photo_refused "cannot read the photograph 'photos/none.jpg': no such file"
with_photo ../outside/base.jpg
photo_refused 'not inside the archive'
with_photo "$work/outside/base.jpg"
photo_refused 'not inside the archive'
with_photo photos/link.jpg
ln -s ../../outside/base.jpg archive/photos/link.jpg
photo_refused 'not inside the archive'
with_photo out-of-here/base.jpg
ln -s ../outside archive/out-of-here
photo_refused 'not inside the archive'
with_photo photos
photo_refused 'not a regular file'
for damaged in corrupt.png trunc2.jpg; do
    with_photo photos/$damaged
    cp "$images/$damaged" archive/photos/
    photo_refused "cannot use the photograph 'photos/$damaged'"
done
for kind in jpg png; do
    with_photo photos/text.$kind
    echo 'no picture at all' >archive/photos/text.$kind
    photo_refused 'cannot use the photograph'
    with_photo photos/empty.$kind
    : >archive/photos/empty.$kind
    photo_refused 'cannot use the photograph'
done
# every byte position of a picture cut off: refused or used, never a crash
for image in base.jpg prog.jpg pal.png rgb.png; do
    size=$(wc -c <"$images/$image")
    for part in 1 2 3 5 8 13 21 34 55 89; do
        with_photo photos/cut.${image##*.}
        head -c $((size * part / 90)) "$images/$image" >archive/photos/cut.${image##*.}
        status=0
        bounded "$program" publish -q archive/x.yaml -o out 2>"$work/stderr" || status=$?
        [ $status = 2 ] || say_failed "$image cut at $part/90: exit $status"
    done
done
# a fifo, a device and a folder named as a job do not hold it up
rm -rf archive out
archive_of archive good
mkfifo archive/pipe.yaml
ln -s /dev/zero archive/zero.yaml
mkdir archive/folder.yaml
expect 2 bounded "$program" publish archive -o out
there out/jobs/good/client/good.pdf
tells 'archive/zero.yaml: error: '
tells 'archive/folder.yaml: error: '

# ---- what the bench wrote down amiss or left out is told and not judged; the rest of the record is made
rm -rf archive out
archive_of archive
sed 's/^received.*/&\nreturned: 2031-03-03/' "$root/tests/golden/assessment/bench.yaml" >archive/bench.yaml
sed 's/^job: .*/job: order/; s/30 s 2 mA/30 s 0.9 mA/' archive/bench.yaml >archive/order.yaml
expect 0 "$program" publish archive -o out
reasons() { # JOB REASON-OF-THE-LOG
    for file in shop.md "client/$1.md" shop.html "sale/$1.html"; do
        for words in "$2" 'not judged: the job does not say: frequency' 'not judged: the job does not say: meter' \
            'ot judged: no table has the colours white pink red gold'; do
            grep -q -i "$words" "out/jobs/$1/$file" || say_failed "$1: $file does not say '$words'"
        done
    done
    there "out/jobs/$1/client/$1.pdf"
}
reasons bench 'Not judged: its log holds a current that the limiter cannot pass'
reasons order 'Not judged: its log goes back in time'

# ---- a test above the marked volts is a warning that the record prints
rm -rf archive out
archive_of archive good
job_with 's/350 V/200 V/' >archive/x.yaml
expect 0 "$program" publish archive -o out
tells 'warning: .*200 V'
for file in shop.md shop.html client/x.md client/x.html sale/x.md; do
    grep -q -i 'above .*mark\|mark.*above\|marked volt' out/jobs/x/$file || say_failed "$file is silent about a test above the marked volts"
done
# ... and no plan goes above them, whatever stands in the file
rm -rf archive
archive_of archive
ref=0
for volts in 6 12 25 50 63 100 125 150 160 200 275 350 450; do
    for place in 'decoupling' 'reservoir' 'smoothing' 'battery bypass'; do
        for service in 5 24 90 180 249 300 460; do
            ref=$((ref + 1))
            printf '  C%s:\n    type: %s\n    marked: 8 uF %s V\n    place: %s\n    service: %s V\n    current: 20 mA\n' \
                $ref "$([ $((ref % 2)) = 0 ] && echo paper || echo electrolytic)" $volts "$place" $service
            [ "$place" != decoupling ] || echo '    feed: 10k'
        done
    done
done >parts
(small_job plan | sed '/^returned/d; /^  C1:/,$d'; cat parts) >archive/plan.yaml
expect 0 "$program" assess --json archive/plan.yaml
cp "$work/stdout" plan.json
for job in "$root"/jobs-example/2*.yaml; do "$program" assess --json "$job" 2>/dev/null; done >>plan.json
jq -r '.job as $j | .capacitors[] | select(.rated_v != null and .sheet_voltage_v != null) |
    select(.sheet_voltage_v > .rated_v * 1.0000001) | "\(.ref) \(.rated_v) \(.sheet_voltage_v)"' plan.json >above
[ "$(jq '[.capacitors[] | select(.sheet_voltage_v != null)] | length' plan.json | awk '{ n += $1 } END { print n }')" -gt 300 ] ||
    say_failed "too few planned voltages to say anything"
[ ! -s above ] || say_failed "the sheet plans above the marked volts: $(head -n 3 above)"
jq -r '(.capacitors | map({(.ref): .rated_v}) | add) as $rated | .bench.reform_plans[] |
    "\(.ref) \($rated[.ref]) \(.step_v | max)"' plan.json >steps
awk '$3 > $2 * 1.0000001' steps >above
[ "$(wc -l <steps)" -gt 100 ] || say_failed "too few reforms are planned to say anything: $(wc -l <steps)"
[ ! -s above ] || say_failed "a reform is planned above the marked volts: $(head -n 3 above)"

finish
