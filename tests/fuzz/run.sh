#!/bin/sh
# run.sh BUILD: random lines, job files, notes, templates and whole documents, under AddressSanitizer
# and UBSan. FUZZ_SECONDS: how long each; without it a count of each, the same inputs on every machine.
# FUZZ_SEED: default 1.
set -eu
root=$(cd "$(dirname "$0")/../.." && pwd)
build=$(cd "$1" && pwd)/asan # as tests/memory/run.sh builds it
seed=${FUZZ_SEED:-1}
work=$build/tests/fuzz
sanitize="-fsanitize=address,undefined -fno-sanitize-recover=undefined"
export ASAN_OPTIONS=abort_on_error=1 UBSAN_OPTIONS=halt_on_error=1:abort_on_error=1:print_stacktrace=1
export LC_ALL=C # the order of the files below
mkdir -p "$work"
cd "$root"
make -s -j2 BUILD="$build" OPTIMISE="-O1 -g" EXTRA="$sanitize" all fuzzers >"$work/build.log" 2>&1 || {
    tail -n 40 "$work/build.log"
    exit 1
}
amount() { # COUNT: so many, or the time that was asked for
    if [ -n "${FUZZ_SECONDS:-}" ]; then echo "${FUZZ_SECONDS}s"; else echo "$1"; fi
}
"$work/line_fuzz" "$(amount 60000)" "$seed"
"$work/prose_fuzz" "$(amount 1500)" "$seed"
cd "$work"
./reader_fuzz "$(amount 800)" "$seed" "$root"/tests/golden/diagnostics/*.yaml "$root"/jobs-example/*.yaml
./document_fuzz "$(amount 70)" "$seed" "$build/share/gridleak" "$root"/jobs-example/2*.yaml
