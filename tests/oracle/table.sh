#!/bin/sh
# table.sh BUILD: one row for each check of the program against something outside it. Prints the
# table, writes it as BUILD/oracle/numbers.md, and fails when a row does or when the manual's page
# (templates/numbers.md) tells of other rows. UPDATE=1 takes the page over.
# DRAWS: draws of each Monte Carlo; make oracle takes 10^6.
set -eu
build=$(cd "$1" && pwd)
here=$(cd "$(dirname "$0")" && pwd)
root=$(cd "$here/../.." && pwd)
work=$build/oracle
cd "$root"
libraries="$build/libassess.a $build/libjob.a $build/libreference.a $build/libquantity.a $build/libbase.a"
make -s BUILD="$build" $libraries
${CC:-gcc} -O2 -std=c11 -D_GNU_SOURCE -Wall -Wextra -Isrc -Itests/unit/assess "$here"/table/*.c $libraries \
    -lcminpack -lyaml -lm -o "$work/table"
"$work/table" >"$work/rows.tsv" || true
cat "$work/stages.tsv" "$work/supply.tsv" "$work/reform.tsv" >>"$work/rows.tsv"
awk -F '\t' '{
    printf "%-8s %-18s %-64.64s expected %-20s got %-12s within %s\n         %s (%s)\n", $8, $1, $2, $5, $6, $7, $3, $4
}' "$work/rows.tsv"
awk -F '\t' '
    BEGIN {
        print "{{! Made by make oracle from the rows of the checks: UPDATE=1 writes it anew. }}"
        print "Each line is a check that `make oracle` runs: what was calculated, what it should be by a source"
        print "outside of this program, what the program gave, and how far they may differ. Behind the group"
        print "stands where the figures come from, and whether they were seen there."
    }
    $1 "\t" $3 != last {
        last = $1 "\t" $3
        gsub(/\*/, "\\*", $3); gsub(/_/, "\\_", $3)
        printf "\n**%s.** %s; %s.\n\n", $1, $3, $4
    }
    {
        gsub(/\*/, "\\*", $2); gsub(/_/, "\\_", $2)
        printf "- %s: %s, got %s, within %s\n", $2, $5, $6, $7
    }' "$work/rows.tsv" >"$work/numbers.md"
if [ "${UPDATE:-}" ]; then
    cp "$work/numbers.md" templates/numbers.md
fi
# What was got may move in its last figures from one machine to the next; what is checked may not.
strip() { sed 's/, got .*//' "$1"; }
strip templates/numbers.md >"$work/page.txt"
strip "$work/numbers.md" >"$work/made.txt"
bad=$(awk -F '\t' '$8 != "ok"' "$work/rows.tsv" | wc -l)
echo "$(wc -l <"$work/rows.tsv") rows, $bad differ"
cmp -s "$work/page.txt" "$work/made.txt" || { echo "templates/numbers.md tells of other rows: UPDATE=1 make oracle"; exit 1; }
[ "$bad" = 0 ]
