#!/bin/sh
# run.sh BUILD: each allocation, and each call of the system that reads or writes, made to fail in
# turn: while a small archive is published, whole, its pages and one job; a job assessed, its sheet
# written, a job started, found, sealed and proved. The program ends with exit 3 and a sentence, or a
# finding, never by a signal; no file stands half written under its final name, and the next publish
# mends all. Where there are more calls than FAULT_RUNS (default 40; a sixth of it for the smaller
# commands), as many of them, spread evenly; FAULT_SEED (default 0) moves them along.
set -u
build=$(cd "$1" && pwd)
here=$(cd "$(dirname "$0")" && pwd)
root=$(cd "$here/../.." && pwd)
program=$build/gridleak
work=$build/tests/fault
runs=${FAULT_RUNS:-40}
seed=${FAULT_SEED:-0}
rm -rf "$work"
mkdir -p "$work"
${CC:-gcc} -shared -fPIC -O1 -Wall -o "$work/fail_at.so" "$here/fail_at.c" -ldl || exit 1
. "$root/tests/cli/kit.sh"
cd "$work" || exit 1

# Two states of an archive: a job of every kind of document, with a photograph.
archive_of old 2031-001 2031-002
mkdir old/photos
cp "$root/tests/pdf/images/base.jpg" "$root/tests/pdf/images/pal.png" old/photos/
cp "$root/jobs-example/2031-014.yaml" old/
mkdir -p old/photos/2031-014
cp "$root"/jobs-example/photos/2031-014/* old/photos/2031-014/
printf 'photos:\n  - file: photos/base.jpg\n    shows: C1\n  - file: photos/pal.png\n    shows: C1\n' >>old/2031-001.yaml
printf 'work: |\n  It *hums*, see [here](https://example.org).\n' >>old/2031-002.yaml
rm old/2031-014.yaml # its memory is that of many jobs; assessed by itself below
cp -r old new
for job in new/2*.yaml; do sed -i 's/^received:/technician: A. Nother\nreceived:/' "$job"; done
"$program" publish old -q -o old-out || exit 1
"$program" publish new -q -o new-out || exit 1


whole() {
    (cd cut && find . -type f ! -name '*.part-*' ! -path './.gridleak/*') | while read -r file; do
        cmp -s "cut/$file" "old-out/$file" || cmp -s "cut/$file" "new-out/$file" || echo "$file"
    done >broken
    [ ! -s broken ] || say_failed "$1: neither the old nor the new file: $(head -n 3 broken)"
}

# After a fault a publish without one leaves what a fresh one does.
mended() {
    "$program" publish new -q -o cut 2>stderr || say_failed "$1: the next publish: $(tail -n 2 stderr)"
    diff -r --exclude=.gridleak cut new-out >difference || say_failed "$1: not mended: $(head -n 3 difference)"
    find cut -name '*.part-*' | grep -q . && say_failed "$1: left aside: $(find cut -name '*.part-*' | head -n 1)"
}

# The chain is whole and each line has its folder, which is proved; a folder that got no line is not;
# the next seal is as if nothing had been.
chained() {
    before=$(cat arc/seals.txt 2>/dev/null | wc -l)
    "$program" seal arc/2031-001.yaml sale -o new-out >proof 2>&1 || say_failed "$1: the next seal: $(cat proof)"
    find arc/sealed -name '.part-*' | grep -q . && say_failed "$1: left aside in sealed/"
    [ "$(wc -l <arc/seals.txt)" = $((before + 1)) ] || say_failed "$1: not one line more"
    for folder in arc/sealed/*; do
        wanted=1
        ! grep -q " sealed/${folder##*/} " arc/seals.txt || wanted=0
        sealed=0
        "$program" prove "$folder" >proof 2>&1 || sealed=$?
        [ $sealed = $wanted ] || say_failed "$1: $folder: $(tail -n 1 proof)"
    done
}

# The new job's file is whole or not there.
started() {
    [ ! -e arc/2040-001.yaml ] || cmp -s arc/2040-001.yaml started.right || say_failed "$1: half a job file"
}

# Before each run; after a failed one; whether all came out as without a fault.
prepare() {
    rm -rf cut sheet.pdf arc
    [ "$about" != publish ] || cp -a old-out cut
    [ "$about" != archive ] || cp -a arc.before arc
}
inspect() {
    case $about in
    publish) case $kind in read | pdf) ;; *) whole "$1" ;; esac
        [ $((made % 8)) != 0 ] || mended "$1" ;;
    archive) [ "$name" != seal ] || chained "$1"
        started "$1" ;;
    esac
}
same() {
    cmp -s stdout stdout.right || return 1
    [ ! -e sheet.right ] || cmp -s sheet.pdf sheet.right || return 1
    case $about in
    publish) diff -r --exclude=.gridleak cut cut.right >/dev/null ;;
    archive) diff -r --exclude='*.part-*' arc arc.right >/dev/null ;;
    esac
}

# turn NAME KIND STAY KEPT COMMAND...: let every call fail in turn. KEPT: what the status may be
# besides 3, where the program can go on without what failed, or says no.
turn() {
    name=$1 kind=$2 stay=$3 kept=$4 made=0
    shift 4
    prepare
    env FAULT_KIND="$kind" FAULT_COUNT="$work/count" LD_PRELOAD="$work/fail_at.so" "$@" >stdout.right 2>stderr || :
    rm -rf sheet.right cut.right arc.right
    for made_file in cut arc; do [ ! -e $made_file ] || mv $made_file $made_file.right; done
    [ ! -e sheet.pdf ] || mv sheet.pdf sheet.right
    calls=$(cat count)
    step=$(((calls + runs - 1) / runs))
    [ "$step" -gt 0 ] || step=1
    at=$((1 + seed % step))
    while [ "$at" -le "$calls" ]; do
        prepare
        status=0 right=
        env FAULT_KIND="$kind" FAULT_AT="$at" ${stay:+FAULT_STAY=1} FAULT_COUNT="$work/count" \
            LD_PRELOAD="$work/fail_at.so" timeout 60 "$@" >stdout 2>stderr </dev/null || status=$?
        # what failed may not have mattered: then all is as it should be
        [ "$status" != 0 ] || ! same || status=3 right=1
        case " 3 $kept " in
        *" $status "*) ;;
        *) say_failed "$name, $kind $at of $calls: exit $status: $(tail -n 2 stderr)" ;;
        esac
        if [ "$status" = 3 ] && [ -z "$right" ] && ! grep -q '^gridleak: ' stderr; then
            say_failed "$name, $kind $at of $calls: exit 3 without a sentence: $(tail -n 2 stderr)"
        fi
        pdf_is_told "$name, $at of $calls"
        inspect "$name, $kind $at of $calls"
        made=$((made + 1))
        at=$((at + step))
    done
    [ "$calls" = 0 ] || echo "$name: $calls calls of $kind, $made made to fail"
}

# Only here does a PDF fail: no file can make it.
pdf_is_told() {
    [ "$kind" != pdf ] || grep -q 'error: cannot make a PDF of ' stderr ||
        say_failed "$1: nothing said of the PDF: $(tail -n 2 stderr)"
    [ "$kind" != pdf ] || [ ! -e sheet.pdf ] || say_failed "$1: there is a PDF"
}

about=
turn assess memory '' '' "$program" assess --json -q "$root/jobs-example/2031-014.yaml"
turn sheet memory '' '' "$program" sheet -q "$root/jobs-example/2031-014.yaml" -o sheet.pdf
turn sheet pdf '' '' "$program" sheet -q "$root/jobs-example/2031-014.yaml" -o sheet.pdf

# A job that is sealed once already, found, proved, and a new one.
cp -r new arc.before
"$program" seal arc.before/2031-001.yaml sale -o new-out >/dev/null || exit 1
"$program" start 2040-001 --like 2031-001 -a arc.before >/dev/null || exit 1
mv arc.before/2040-001.yaml started.right
about=archive
all_runs=$runs
runs=$(((runs + 5) / 6))
for kind in memory write open rename mkdir unlink close opendir read; do
    # what cannot be read is told as not there or as changed
    refused=
    case $kind in read | opendir) refused='1 2' ;; close | unlink) refused=0 ;; esac
    turn seal $kind '' "$refused" "$program" seal arc/2031-001.yaml client -o new-out
    turn prove $kind '' "$refused" "$program" prove arc/sealed/2031-001-sale-1
    turn find $kind '' '' "$program" find -o new-out C1
    turn start $kind '' "$refused" "$program" start 2040-001 --like 2031-001 -a arc
done
turn seal fsync '' 0 "$program" seal arc/2031-001.yaml client -o new-out
turn start link '' '' "$program" start 2040-001 --like 2031-001 -a arc

about=publish
for part in whole pages job; do
    [ $part != whole ] || runs=$all_runs
    [ $part = whole ] || runs=$(((all_runs + 5) / 6))
    publish() { # KIND STAY KEPT
        case $part in
        whole) turn publish "$1" "$2" "$3" "$program" publish -q --threads 1 new -o cut ;;
        pages) turn pages "$1" "$2" "$3" "$program" publish -q --pages new -o cut ;;
        job) turn job "$1" "$2" "$3" "$program" publish -q new/2031-001.yaml -o cut ;;
        esac
    }
    publish memory '' ''
    publish write '' ''
    publish write stay ''
    publish open '' ''
    publish rename '' ''
    publish mkdir '' '0'
    publish unlink '' '0'
    publish close '' '0'
    publish opendir '' '2'
    publish read '' '2'
    [ $part = pages ] || publish pdf '' '2'
done

# Less and less memory for the whole: the program says so, wherever it ends.
short=0 kind=memory
rm -rf cut.right stdout.right
cp -a new-out cut.right
: >stdout.right
for limit in 24 28 32 36 40 44 48 52 56 60 64 68 72 76 80 84 88 92 96 100 110 120 130 140 150 160 180 200 240 280; do
    rm -rf cut
    cp -a old-out cut
    status=0
    sh -c "ulimit -v $((limit * 1024)); exec '$program' publish -q --threads 1 new -o cut" >stdout 2>stderr || status=$?
    # 127: the loader itself had no room for the libraries
    case $status in
    0) same || say_failed "ulimit -v $limit MB: exit 0 with other files" ;;
    3) short=$((short + 1)); grep -q '^gridleak: ' stderr || say_failed "ulimit -v $limit MB: no sentence" ;;
    127) ;;
    *) say_failed "ulimit -v $limit MB: exit $status: $(tail -n 2 stderr)" ;;
    esac
    whole "ulimit -v $limit MB"
done
[ $short -ge 3 ] || say_failed "only $short of the limits were too small"
echo "$short limits of memory too small, and told"
finish
