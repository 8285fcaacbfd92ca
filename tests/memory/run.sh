#!/bin/sh
# run.sh BUILD: the program and its unit tests under AddressSanitizer and UBSan, and two threads
# publishing under ThreadSanitizer, over the example archive. MEMORY=all, as make check-memory: valgrind's
# memcheck over every command, and helgrind over two threads, as well (a minute more).
set -eu
build=$(cd "$1" && pwd)
root=$(cd "$(dirname "$0")/../.." && pwd)
work=$build/tests/memory
rm -rf "$work"
mkdir -p "$work"
cd "$root"

# run COMMAND...: it, quietly; what it said when it fails.
run() {
    "$@" >"$work/said" 2>"$work/told" || {
        echo "failed: $*"
        tail -n 40 "$work/told"
        exit 1
    }
}
# every_command OUT PROGRAM...: each command of the program, named with what it runs under.
every_command() {
    out=$1
    shift
    for job in jobs-example/2*.yaml; do
        run "$@" assess -q "$job"
        run "$@" assess --json -q "$job"
        run "$@" sheet -q "$job"
    done
    run "$@" assess -q --working C14 jobs-example/2031-014.yaml
    for format in html md pdf; do
        run "$@" sheet -q jobs-example/2031-014.yaml -o "$out.$format"
    done
    run "$@" publish -q jobs-example -o "$out"
    run "$@" publish -q jobs-example/2031-014.yaml -o "$out"
    run "$@" publish -q --pages jobs-example -o "$out"
    run "$@" find -o "$out" C14
    cp -r jobs-example "$out.archive"
    run "$@" start 2040-001 --like 2031-014 -a "$out.archive"
    run "$@" seal "$out.archive/2031-014.yaml" sale -o "$out"
    run "$@" prove "$out.archive/sealed/2031-014-sale-1"
    run "$@" fields
    run "$@" fields --schema
    run "$@" --man-page
}

# Bytes that libraries keep for the life of the program are not ours to give back.
export ASAN_OPTIONS=detect_leaks=1:allocator_may_return_null=1 UBSAN_OPTIONS=halt_on_error=1:print_stacktrace=1
sanitize="-fsanitize=address,undefined -fno-sanitize-recover=undefined"
make -s -j2 BUILD="$build/asan" OPTIMISE="-O1 -g" EXTRA="$sanitize" all unit >"$work/asan.log" 2>&1 || {
    tail -n 60 "$work/asan.log"
    exit 1
}
tail -n 1 "$work/asan.log"
every_command "$work/asan-out" "$build/asan/gridleak"
"$build/gridleak" publish -q jobs-example -o "$work/out" 2>"$work/plain.err"
diff -r --exclude=.gridleak "$work/out" "$work/asan-out" >"$work/asan.diff" || {
    echo "other bytes under AddressSanitizer:"
    head -n 5 "$work/asan.diff"
    exit 1
}
echo "AddressSanitizer and UBSan: unit tests and every command clean"

make -s -j2 BUILD="$build/tsan" OPTIMISE="-O1 -g" EXTRA="-fsanitize=thread" all >"$work/tsan.log" 2>&1
TSAN_OPTIONS=halt_on_error=1 "$build/tsan/gridleak" publish -q --threads 2 jobs-example -o "$work/tsan-out" 2>"$work/tsan.err" || {
    tail -n 40 "$work/tsan.err"
    exit 1
}
echo "ThreadSanitizer: publish by two threads clean"
[ "${MEMORY:-}" = all ] || exit 0

every_command "$work/valgrind-out" valgrind --quiet --error-exitcode=99 --leak-check=full \
    --errors-for-leak-kinds=definite "$build/gridleak"
echo "valgrind: every command clean"
valgrind --quiet --tool=helgrind --error-exitcode=99 "$build/gridleak" publish -q --threads 2 jobs-example \
    -o "$work/helgrind-out" >"$work/helgrind.out" 2>"$work/helgrind.err" || { tail -n 40 "$work/helgrind.err"; exit 1; }
echo "helgrind: publish by two threads clean"
