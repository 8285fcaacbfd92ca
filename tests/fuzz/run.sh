#!/bin/sh
# run.sh BUILD: lines, the reader on changed files, notes and templates, under AddressSanitizer and UBSan, for FUZZ_SECONDS
# (default 5) from FUZZ_SEED (default 1).
set -eu
root=$(cd "$(dirname "$0")/../.." && pwd)
build=$(cd "$1" && pwd)/fuzz
sanitize="-fsanitize=address,undefined -fno-sanitize-recover=undefined"
mkdir -p "$build"
cd "$root"
libraries="$build/libjob.a $build/libreference.a $build/libquantity.a $build/libbase.a"
make -s BUILD="$build" EXTRA="$sanitize" $libraries >&2
# shellcheck disable=SC2086
${CC:-gcc} -std=c11 -D_GNU_SOURCE -O1 -g $sanitize -Isrc tests/fuzz/reader_fuzz.c $libraries \
    -lyaml -lnettle -lm -o "$build/reader_fuzz"
# shellcheck disable=SC2086
${CC:-gcc} -std=c11 -D_GNU_SOURCE -O1 -g $sanitize -Isrc tests/fuzz/line_fuzz.c $libraries \
    -lyaml -lnettle -lm -o "$build/line_fuzz"
"$build/line_fuzz" "${FUZZ_SECONDS:-5}" "${FUZZ_SEED:-1}"
cd "$build"
./reader_fuzz "${FUZZ_SECONDS:-5}" "${FUZZ_SEED:-1}" "$root"/tests/golden/diagnostics/*.yaml \
    $(find "$root/jobs-example" -name '*.yaml')
# Notes and templates.
cd "$root"
libraries="$build/libreport.a $build/libassess.a $build/libjob.a $build/libreference.a $build/libquantity.a
    $build/libbase.a"
make -s BUILD="$build" EXTRA="$sanitize" $libraries >&2
# shellcheck disable=SC2086
${CC:-gcc} -std=c11 -D_GNU_SOURCE -O1 -g $sanitize -Isrc -Itests tests/fuzz/prose_fuzz.c $libraries \
    $(pkg-config --libs yaml-0.1 libcmark cminpack nettle) -lutf8proc -lm -o "$build/prose_fuzz"
"$build/prose_fuzz" "${FUZZ_SECONDS:-5}" "${FUZZ_SEED:-1}"
