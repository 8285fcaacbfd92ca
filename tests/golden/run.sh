#!/bin/sh
# run.sh BUILD: what is said about each file of diagnostics/, compared with NAME.expected; and every
# code of diagnostic_codes.h is provoked by some test: it stands in a golden file of any folder, or,
# where no file can provoke it, by its C name in a unit test.
# NAME.make prints a file too large to keep. UPDATE=1 writes the expected files anew: read the
# difference before it is committed.
set -eu
here=$(dirname "$0")
root=$(cd "$here/../.." && pwd)
build=$(cd "$1" && pwd)
work=$build/tests/golden
mkdir -p "$work"
make -s -C "$root" BUILD="$build" "$build/libassess.a" "$build/libjob.a" "$build/libreference.a" "$build/libquantity.a" \
    "$build/libbase.a" >&2
${CC:-gcc} -std=c11 -D_GNU_SOURCE -O1 -g ${EXTRA:-} -I"$root/src" "$root/tests/golden/read_job.c" \
    "$build/libjob.a" "$build/libreference.a" "$build/libquantity.a" "$build/libbase.a" \
    -lyaml -lm -o "$work/read_job"
${CC:-gcc} -std=c11 -D_GNU_SOURCE -O1 -g ${EXTRA:-} -I"$root/src" "$root/tests/golden/assess_job.c" \
    "$build/libassess.a" "$build/libjob.a" "$build/libreference.a" "$build/libquantity.a" \
    "$build/libbase.a" -lyaml -lcminpack -lm -o "$work/assess_job"

bad=0
count=0
cd "$root/tests/golden/diagnostics"
for source in *.yaml *.make missing-file.none; do
    name=${source%.*}
    case $source in
    *.make) sh "$source" >"$work/$name.yaml" && (cd "$work" && ./read_job "$name.yaml") ;;
    *) "$work/read_job" "$name.yaml" ;;
    esac >"$work/$name.out"
    rm -f "$work/$name.yaml"
    count=$((count + 1))
    if [ "${UPDATE:-}" ]; then
        cp "$work/$name.out" "$name.expected"
    elif ! diff -u "$name.expected" "$work/$name.out"; then
        bad=$((bad + 1))
    fi
done
# What the assessment says about jobs that are well written: assessment/.
cd "$root/tests/golden/assessment"
for source in *.yaml; do
    name=${source%.*}
    "$work/assess_job" "$source" >"$work/$name.out"
    count=$((count + 1))
    if [ "${UPDATE:-}" ]; then
        cp "$work/$name.out" "$name.expected"
    elif ! diff -u "$name.expected" "$work/$name.out"; then
        bad=$((bad + 1))
    fi
done
# What publishing says about an archive: photographs, copies, templates, fonts, visits. archive/NAME/
# is published from a copy; two of them lack what the project's own files have.
make -s -C "$root" BUILD="$build" all >&2
${CC:-gcc} -std=c11 -D_GNU_SOURCE -O1 -g ${EXTRA:-} -I"$root/src" "$root/tests/golden/publish_folder.c" \
    $(for module in archive write report assess job reference quantity base; do echo "$build/lib$module.a"; done) \
    $(make -s -C "$root" --eval='print-libraries: ; @echo $(LDLIBS)' print-libraries) -o "$work/publish_folder"
rm -rf "$work/archive"
cp -r "$root/tests/golden/archive" "$work/archive"
cp -r "$build/share/gridleak" "$work/archive/share"
cp -r "$build/share/gridleak" "$work/archive/no-font"
echo 'no font' >"$work/archive/no-font/fonts/OpenSans-Italic.ttf"
mkdir "$work/archive/word-missing/templates"
sed '/^outcome:/,/^[a-z]/{/^  pass:/d}' "$root/templates/words.yaml" >"$work/archive/word-missing/templates/words.yaml"
cd "$work/archive"
for folder in */shop.yaml; do
    name=${folder%/shop.yaml}
    share=share
    [ "$name" != font-unusable ] || share=no-font
    "$work/publish_folder" $share "out/$name" "$name" >"$name.out"
    expected=$root/tests/golden/archive/$name.expected
    count=$((count + 1))
    if [ "${UPDATE:-}" ]; then
        cp "$name.out" "$expected"
    elif ! diff -u "$expected" "$name.out"; then
        bad=$((bad + 1))
    fi
done
echo "$count files of diagnostics, $bad differ"

missing=0
sed -n 's/^DIAGNOSTIC(\([A-Z0-9_]*\),.*"\(.*\)")$/\1 \2/p' "$root/src/base/diagnostic_codes.h" \
    >"$work/codes"
while read -r name code; do
    grep -r -q -w -e "$code" "$root/tests/golden" --include='*.expected' --include='*.json' ||
        grep -r -q -w -e "DIAGNOSTIC_$name" "$root/tests/unit" --include='*_test.c' || {
        echo "no test shows $code"
        missing=$((missing + 1))
    }
done <"$work/codes"
echo "$(wc -l <"$work/codes") codes, $missing without a test"
[ "$bad" = 0 ] && [ "$missing" = 0 ]
