#!/bin/sh
# interrupted.sh BUILD WORK: a publish that is killed, that fills the disk, that may not write: every
# file of the output folder is the old one or the new one, whole, and the next publish mends the rest.
set -u
here=$(cd "$(dirname "$0")" && pwd)
root=$(cd "$here/../.." && pwd)
program=$(cd "$1" && pwd)/gridleak
work=$2
. "$here/kit.sh"
cd "$work" || exit 1

# Two states of an archive in which every file of the output differs.
cp -r "$root/jobs-example" old
cp -r "$root/jobs-example" new
sed -i 's/^technician: .*/technician: A. Nother/; s/^received:/technician: A. Nother\nreceived:/' new/2*.yaml
for job in new/2*.yaml; do # a job that had one already now has two: keep one
    awk '!/^technician:/ || !seen++' "$job" >job && mv job "$job"
done
expect 0 "$program" publish old -q -o old-out
started=$(date +%s%N)
expect 0 "$program" publish new -q -o new-out
took=$((($(date +%s%N) - started) / 1000000))

# whole FOLDER: each file, but those still aside, is the old or the new one.
whole() {
    (cd "$1" && find . -type f ! -name '*.part-*' ! -path './.gridleak/*') | while read -r file; do
        cmp -s "$1/$file" "old-out/$file" || cmp -s "$1/$file" "new-out/$file" || echo "$file"
    done >broken
    [ ! -s broken ] || say_failed "$2: neither the old nor the new file: $(head -n 3 broken)"
    (cd old-out && find . -type f ! -path './.gridleak/*') | while read -r file; do
        [ -e "$1/$file" ] || [ ! -e "new-out/$file" ] || echo "$file"
    done >lost
    [ ! -s lost ] || say_failed "$2: lost: $(head -n 3 lost)"
}

mended() {
    echo half >"$1/index.html.part-77"
    echo half >"$1/.gridleak/state.part-77"
    expect 0 "$program" publish new -q -o "$1"
    diff -r --exclude=.gridleak new-out "$1" >difference || say_failed "$2: not mended: $(head -n 3 difference)"
    left=$(find "$1" -name '*.part-*' | head -n 3)
    [ -z "$left" ] || say_failed "$2: left over: $left"
}

killed=0
for turn in 1 2 3 4 5 6 7 8 9 10 11 12 13 14 15 16 17 18 19 20; do
    rm -rf cut
    cp -a old-out cut
    "$program" publish new -q -o cut 2>/dev/null &
    victim=$!
    sleep "$(awk -v turn=$turn -v took=$took 'BEGIN { srand(turn); printf "%.4f", (turn - rand()) * took / 20000 }')"
    kill -9 $victim 2>/dev/null
    wait $victim 2>/dev/null
    [ $? != 137 ] || killed=$((killed + 1))
    whole cut "killed, turn $turn"
    [ $((turn % 5)) != 0 ] || mended cut "killed, turn $turn"
done
[ $killed -ge 5 ] || say_failed "only $killed of 20 were killed before the end"

# ---- job files that change while they are published: the next publish knows
for turn in 1 2 3 4 5 6; do
    rm -rf cut moving
    cp -r old moving
    "$program" publish moving -q -o cut 2>/dev/null &
    sleep "$(awk -v turn=$turn -v took=$took 'BEGIN { printf "%.4f", turn * took / 7000 }')"
    cp new/2*.yaml moving/
    wait $!
    expect 0 "$program" publish moving -q -o cut
    diff -r --exclude=.gridleak new-out cut >difference ||
        say_failed "changed while published, turn $turn: the old one stays: $(head -n 3 difference)"
done

# ---- the shop's name changes while a publish waits for another
rm -rf cut moving
cp -r old moving
expect 0 "$program" publish moving -q -o cut
python3 "$here/hold_lock.py" cut/.gridleak/lock 2 >holder &
while [ ! -s holder ]; do sleep 0.05; done
"$program" publish moving -q --wait -o cut 2>/dev/null &
waiting=$!
sleep 1
sed -i 's/^name: .*/name: Another Shop/' moving/shop.yaml
wait $waiting
expect 0 "$program" publish moving -q -o cut
grep -q 'Another Shop' cut/jobs/2031-014/shop.md || say_failed "changed while it waited: the old name stays"

# ---- a full disk: a small file system of its own where that is allowed, else a limit on file sizes
mkdir disk
if mount -t tmpfs -o size=20m tmpfs disk 2>/dev/null; then
    cp -a old-out disk/out
    head -c 30000000 /dev/zero >disk/ballast 2>/dev/null
    expect 3 "$program" publish new -o disk/out
    tells "cannot write 'disk/out/.*': the disk is full"
    whole disk/out "full disk"
    rm disk/ballast
    mended disk/out "full disk"
    expect 0 "$program" publish old -q -o disk/out
    mount -o remount,ro disk
    expect 3 "$program" publish new -o disk/out
    tells "cannot write 'disk/out/*.*': the disk is read-only"
    whole disk/out "read-only"
    umount disk
    echo "full disk and read-only: on a tmpfs"
fi
rm -rf cut
cp -a old-out cut
expect 3 sh -c "trap '' XFSZ; ulimit -f 48; '$program' publish new -o cut"
tells "cannot write 'cut/.*': "
whole cut "a limit on file sizes"
mended cut "a limit on file sizes"

# ---- an output folder that cannot be one
echo kept >file
expect 3 "$program" publish new -o file
tells "cannot write 'file': not a regular file\|cannot write 'file'"
[ "$(cat file)" = kept ] || say_failed "a file named as output folder was written over"
mkdir odd
echo kept >odd/jobs
expect 3 "$program" publish new -o odd
tells "cannot write 'odd/jobs"
[ "$(cat odd/jobs)" = kept ] || say_failed "a file in the way was written over"
if [ "$(id -u)" != 0 ]; then
    rm -rf cut
    cp -a old-out cut
    chmod -R a-w cut
    expect 3 "$program" publish new -o cut
    tells 'not permitted'
    chmod -R u+w cut
    whole cut "a folder without permission"
fi
finish
