#!/bin/sh
# run.sh BUILD: the program against sources outside it. The stage solver against ngspice on the same
# circuits, within 0.1 %; supplies and reforms against ngspice transients; published figures and a
# Monte Carlo, a row each (table.sh); the assessment of whole jobs against a second calculation.
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
    said=$(awk -f "$here/compare.awk" "$work/$case.txt" "$work/$case.out") && good=ok || { failed=$((failed + 1)); good=DIFFERS; }
    echo "$said"
    worst=$(echo "$said" | sed -n 's/.*worst \([0-9.]*\) %$/\1/p')
    printf 'Stages\t%s, worst figure (%%)\tngspice, operating point, on the same law\tseen\t0\t%s\t0.1\t%s\n' \
        "$case" "$worst" "$good" >>"$work/stages.tsv"
done
# The comparison itself: another circuit's figures must not pass.
set -- $cases
if awk -f "$here/compare.awk" "$work/$1.txt" "$work/$2.out" >/dev/null; then
    echo "compare.awk takes $2 for $1"
    failed=$((failed + 1))
fi
echo "$count circuits, $failed differ"
[ "$failed" = 0 ] && [ "$count" -ge 20 ] || exit 1
make -s BUILD="$build" "$build/gridleak"
"$here/supply/run.sh" "$build"
"$here/reform/run.sh" "$build"
DRAWS=${DRAWS:-100000} "$here/table.sh" "$build"
mkdir -p "$work/blind"
python3 "$here/blind/blind.py" "$build/gridleak" "$work/blind"
"$here/assessment/check.sh" "$build"
