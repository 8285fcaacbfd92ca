#!/bin/sh
# run.sh BUILD: the stage solver against ngspice on the same circuits, within 0.1 %.
set -eu
build=$1
here=$(dirname "$0")
work=$build/oracle
command -v ngspice >/dev/null || { echo "ngspice is not installed" >&2; exit 1; }
objects="$build/src/assess/stage_solver.o $build/src/assess/stage_nodes.o $build/src/assess/valve_law.o
    $build/src/reference/valve_book.o $build/src/reference/source.o"
make -s BUILD="$build" $objects
rm -rf "$work"
mkdir -p "$work"
${CC:-gcc} -std=c11 -Wall -Wextra -Isrc "$here/stages.c" $objects -lm -o "$work/stages"
"$work/stages" >"$work/stages.txt"
cases=$(sed 's/^case=\([^ ]*\) .*/\1/' "$work/stages.txt" | uniq)
count=0
failed=0
for case in $cases; do
    count=$((count + 1))
    grep "^case=$case " "$work/stages.txt" >"$work/$case.txt"
    awk -f "$here/netlist.awk" "$work/$case.txt" >"$work/$case.cir"
    ngspice -b "$work/$case.cir" >"$work/$case.out" 2>&1 || true
    awk -f "$here/compare.awk" "$work/$case.txt" "$work/$case.out" || failed=$((failed + 1))
done
# The comparison itself: another circuit's figures must not pass.
set -- $cases
if awk -f "$here/compare.awk" "$work/$1.txt" "$work/$2.out" >/dev/null; then
    echo "compare.awk takes $2 for $1"
    failed=$((failed + 1))
fi
echo "$count circuits, $failed differ"
[ "$failed" = 0 ] && [ "$count" -ge 20 ]
make -s BUILD="$build" "$build/gridleak"
"$here/assessment/check.sh" "$build"
