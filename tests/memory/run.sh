#!/bin/sh
# run.sh BUILD: the program and its unit tests under AddressSanitizer and UBSan, and two threads
# publishing under ThreadSanitizer, over the example archive. MEMORY=all, as make check-memory: valgrind's
# memcheck over assess, sheet and publish, and helgrind over two threads, as well.
set -eu
build=$(cd "$1" && pwd)
root=$(cd "$(dirname "$0")/../.." && pwd)
work=$build/tests/memory
rm -rf "$work"
mkdir -p "$work"
cd "$root"

# Bytes that libraries keep for the life of the program are not ours to give back.
export ASAN_OPTIONS=detect_leaks=1:allocator_may_return_null=1 UBSAN_OPTIONS=halt_on_error=1:print_stacktrace=1
sanitize="-fsanitize=address,undefined -fno-sanitize-recover=undefined"
make -s -j2 BUILD="$build/asan" OPTIMISE="-O1 -g" EXTRA="$sanitize" all unit >"$work/asan.log" 2>&1 || {
    tail -n 60 "$work/asan.log"
    exit 1
}
tail -n 1 "$work/asan.log"
for job in jobs-example/2*.yaml; do
    "$build/asan/gridleak" assess -q "$job" >"$work/asan.out" 2>"$work/asan.err"
    "$build/asan/gridleak" assess --json -q "$job" >"$work/asan.out" 2>"$work/asan.err"
    "$build/asan/gridleak" sheet -q "$job" >"$work/asan.out" 2>"$work/asan.err"
done
"$build/asan/gridleak" publish -q jobs-example -o "$work/asan-out" 2>"$work/asan.err"
"$build/gridleak" publish -q jobs-example -o "$work/out" 2>"$work/plain.err"
diff -r --exclude=.gridleak "$work/out" "$work/asan-out" >"$work/asan.diff" || {
    echo "other bytes under AddressSanitizer:"
    head -n 5 "$work/asan.diff"
    exit 1
}
echo "AddressSanitizer and UBSan: unit tests, assess, sheet, publish clean"

make -s -j2 BUILD="$build/tsan" OPTIMISE="-O1 -g" EXTRA="-fsanitize=thread" all >"$work/tsan.log" 2>&1
TSAN_OPTIONS=halt_on_error=1 "$build/tsan/gridleak" publish -q --threads 2 jobs-example -o "$work/tsan-out" 2>"$work/tsan.err" || {
    tail -n 40 "$work/tsan.err"
    exit 1
}
echo "ThreadSanitizer: publish by two threads clean"
[ "${MEMORY:-}" = all ] || exit 0

memcheck() {
    valgrind --quiet --error-exitcode=99 --leak-check=full --errors-for-leak-kinds=definite "$@" \
        >"$work/valgrind.out" 2>"$work/valgrind.err" || { tail -n 40 "$work/valgrind.err"; exit 1; }
}
for job in jobs-example/2*.yaml; do
    memcheck "$build/gridleak" assess -q "$job"
    memcheck "$build/gridleak" assess --json -q "$job"
    memcheck "$build/gridleak" sheet -q "$job"
done
memcheck "$build/gridleak" publish -q jobs-example -o "$work/valgrind-out"
echo "valgrind: assess, sheet, publish clean"
valgrind --quiet --tool=helgrind --error-exitcode=99 "$build/gridleak" publish -q --threads 2 jobs-example \
    -o "$work/helgrind-out" >"$work/helgrind.out" 2>"$work/helgrind.err" || { tail -n 40 "$work/helgrind.err"; exit 1; }
echo "helgrind: publish by two threads clean"
