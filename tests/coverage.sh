#!/bin/sh
# coverage.sh BUILD: lines of src that the unit tests, the command line tests and the goldens reach, by
# folder and in all (gcov); exit 1 below COVERAGE per cent (default 90). The worst files are named.
set -eu
root=$(cd "$(dirname "$0")/.." && pwd)
build=$1/coverage
cd "$root"
mkdir -p "$build"
build=$(cd "$build" && pwd)
find "$build" -name '*.gcda' -delete
make -s -j2 BUILD="$build" OPTIMISE="-O0 -g" EXTRA=--coverage all unit >"$build/unit.log" 2>&1 || {
    tail -n 40 "$build/unit.log"
    exit 1
}
tests/cli/run.sh "$build" || [ "${COVERAGE_GOES_ON:-}" ]
EXTRA=--coverage tests/golden/run.sh "$build" || [ "${COVERAGE_GOES_ON:-}" ]
for object in $(find "$build/src" -name '*.gcda'); do
    gcov --no-output --object-directory "$(dirname "$object")" "$object" 2>/dev/null
done | awk -v limit="${COVERAGE:-90}" '
    /^File/ { file = $2; gsub(/\x27/, "", file) }
    /^Lines executed:/ && file ~ /^src\// {
        split($0, part, /[:%]| of /)
        lines = $NF
        hit = part[2] / 100 * lines
        if (!(file in of) || hit > reached[file]) { reached[file] = hit; of[file] = lines }
        file = ""
    }
    END {
        for (file in of) {
            split(file, path, "/")
            folder = path[3] == "" ? "main.c" : path[2]
            sum[folder] += of[file]; got[folder] += reached[file]
            all += of[file]; all_got += reached[file]
            printf "%6.1f %% %5d missed  %s\n", 100 * reached[file] / of[file], of[file] - reached[file], file | "sort -k3 -n -r | head -n 25"
        }
        close("sort -k3 -n -r | head -n 25")
        print ""
        for (folder in sum) printf "%6.1f %% of %6d lines  %s\n", 100 * got[folder] / sum[folder], sum[folder], folder
        printf "%6.1f %% of %6d lines in all\n", 100 * all_got / all, all
        exit 100 * all_got / all < limit
    }'
