#!/bin/sh
# run.sh BUILD: each allocation, and each writing call of the system, made to fail in turn while a
# small archive is published, a job assessed and its sheet written. The program ends with exit 3 and a
# sentence, never by a signal, and no file stands half written under its final name.
# Where there are more calls than FAULT_RUNS (default 60), as many of them, spread evenly.
set -u
build=$(cd "$1" && pwd)
here=$(cd "$(dirname "$0")" && pwd)
root=$(cd "$here/../.." && pwd)
program=$build/gridleak
work=$build/tests/fault
runs=${FAULT_RUNS:-60}
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

# Whether all came out as without a fault.
same() {
    cmp -s stdout stdout.right || return 1
    [ ! -e sheet.right ] || cmp -s sheet.pdf sheet.right || return 1
    [ -z "$publishes" ] || diff -r --exclude=.gridleak cut new-out >/dev/null
}

# turn NAME KIND STAY KEPT COMMAND...: let every call fail in turn. KEPT: what the status may be
# besides 3, where the program can go on without what failed.
turn() {
    name=$1 kind=$2 stay=$3 kept=$4
    shift 4
    rm -rf cut sheet.pdf
    cp -a old-out cut
    env FAULT_KIND="$kind" FAULT_COUNT="$work/count" LD_PRELOAD="$work/fail_at.so" "$@" >stdout.right 2>stderr || :
    rm -f sheet.right
    [ ! -e sheet.pdf ] || mv sheet.pdf sheet.right
    calls=$(cat count)
    step=$(((calls + runs - 1) / runs))
    [ "$step" -gt 0 ] || step=1
    at=1 made=0
    while [ "$at" -le "$calls" ]; do
        rm -rf cut sheet.pdf
        cp -a old-out cut
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
        whole "$name, $kind $at of $calls"
        made=$((made + 1))
        at=$((at + step))
    done
    echo "$name: $calls calls of $kind, $made made to fail"
}

publish() { turn publish "$1" "$2" "$3" "$program" publish -q --threads 1 new -o cut; }
publishes=
turn assess memory '' '' "$program" assess --json -q "$root/jobs-example/2031-014.yaml"
turn sheet memory '' '' "$program" sheet -q "$root/jobs-example/2031-014.yaml" -o sheet.pdf
publishes=yes
publish memory '' ''
publish write '' ''
publish write stay ''
publish open '' ''
publish rename '' ''
publish mkdir '' '0'
publish close '' '0'

# Less and less memory for the whole: the program says so, wherever it ends.
short=0
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
