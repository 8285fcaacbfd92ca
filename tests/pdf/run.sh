#!/bin/sh
# run.sh BUILD: documents as PDF, looked at by programs that share no code with ours: PDFBox
# Preflight (ISO 19005-1, level B), qpdf, poppler.
set -eu
cd "$(dirname "$0")/../.."
build=$1
maker=$build/tests/unit/write/pdf_document_test
work=$(mktemp -d)
trap 'rm -rf "$work"' EXIT
say() {
    echo "$*" >&2
    exit 1
}

silent() { # the command succeeds and says nothing on standard error
    "$@" >"$work/out" 2>"$work/err" || { cat "$work/err" >&2; say "failed: $*"; }
    [ ! -s "$work/err" ] || { cat "$work/err" >&2; say "not silent: $*"; }
}

mkdir "$work/one" "$work/two"
"$maker" "$work/one"
"$maker" "$work/two"

j=/usr/share/java
classes=$j/preflight.jar:$j/xmpbox.jar:$j/pdfbox2.jar:$j/fontbox2.jar:$j/commons-logging.jar:$j/javax.activation.jar:$j/jaxb-api.jar
for file in "$work"/one/*.pdf; do
    name=$(basename "$file")
    cmp "$file" "$work/two/$name" || say "$name: not the same in two runs"
    java -cp $classes org.apache.pdfbox.preflight.Validator_A1b "$file" >"$work/out" 2>&1 || true
    grep -q "is a valid PDF/A-1b file" "$work/out" || { cat "$work/out" >&2; say "$name: not PDF/A-1b"; }
    silent qpdf --check "$file"
    silent pdftoppm -r 20 "$file" "$work/page"
    silent pdftotext -layout "$file" "${file%.pdf}.txt"
    silent pdffonts "$file"
    # columns: name (may hold spaces), type, encoding, emb sub uni, object
    awk 'NR > 2 && !/ yes yes yes +[0-9]+ +[0-9]+$/ { print; bad = 1 } END { exit bad }' "$work/out" ||
        say "$name: a font is not embedded, not a subset or cannot be searched"
done
echo "archive files: valid, silent, the same in two runs"

holds() { # NAME TEXT
    grep -q -F -- "$2" "$work/one/$1.txt" || say "$1.pdf: '$2' not found"
}
holds record "Ashdene Plover 54"
holds record "page 6 of 6"
holds record "output grid +6.1 V"
holds record "0.014"
holds record "1 480"
holds record "conditional pass"
holds record "not judged"
holds long "(continued)"
# copied, the fingerprint is what sha256sum prints, whatever is shown
holds record "5d41c7e290ab36f817d24e6bc3905fa1882e6d074bf9a315e06c2d9871f3b54a"
holds record "as little changed as is sensible"
holds sheet "Bench sheet 2031-022"
holds sheet "no reading passes: fit class X2"
holds awkward "Łódź Ψυχή naïve"
holds awkward "(\\)"
silent pdftotext -raw "$work/one/awkward.pdf" "$work/raw.txt"
grep -q "$(printf 'Ohm sign \342\204\246 and Omega \316\251, micro \302\265 and mu \316\274')" "$work/raw.txt" ||
    say "awkward.pdf: characters of one glyph do not stay apart"
echo "texts and numbers: found"

# Short sections stand beside each other, a long and a short one do not; columns lose nothing and
# come in their order.
grep -q "1 Leftmost  *2 Rightmost" "$work/one/beside.txt" || say "beside.pdf: sections not side by side"
if grep -q "3 Longer.*4 Shorter" "$work/one/beside.txt"; then say "beside.pdf: unequal sections side by side"; fi
pdftotext -raw "$work/one/beside.pdf" - | grep -o "^Paragraph [0-9]*" >"$work/paragraphs"
seq 1 300 | sed 's/^/Paragraph /' | cmp -s - "$work/paragraphs" || say "beside.pdf: paragraphs lost or out of order"
qpdf --json "$work/one/beside.pdf" | jq -r '.outlines[].title' | tr '\n' '/' |
    grep -q "^Leftmost/Rightmost/Longer/Shorter/Columns/Behind/$" || say "beside.pdf: outline"
echo "side by side, columns: right"

# A table over pages: its head stands on each of them.
for page in 3 4 5; do
    pdftotext -f $page -l $page -layout "$work/one/long.pdf" - | grep -q "Effect in its place" ||
        say "long.pdf: no table head on page $page"
done
# Page 1 holds the picture of all capacitors, with its caption, on A4 and on Letter.
for name in record letter; do
    pdftotext -f 1 -l 1 -layout "$work/one/$name.pdf" - | grep -q "Figure 1" ||
        say "$name.pdf: the picture of all capacitors is not on page 1"
done
# 22 parts on one page of a bench sheet.
for name in sheet letter-sheet; do
    pdftotext -f 1 -l 1 -layout "$work/one/$name.pdf" - | grep -q "^ *C23 " ||
        say "$name.pdf: the last part is not on page 1"
done
size() { # NAME WORDS
    pdfinfo "$work/one/$1.pdf" | grep -q "Page size: *$2" || say "$1.pdf: page size is not $2"
}
size record "595.276 x 841.89"
size letter "612 x 792"
size letter-sheet "612 x 792"

# Nothing stands outside the text block (the hanging section number apart), in points.
inside() { # NAME LEFT RIGHT BOTTOM
    pdftotext -bbox "$work/one/$1.pdf" "$work/box.html"
    sed -n 's/.*<word xMin="\([0-9.-]*\)" yMin="\([0-9.-]*\)" xMax="\([0-9.-]*\)" yMax="\([0-9.-]*\)">\(.*\)<.*/\1 \3 \4 \5/p' \
        "$work/box.html" >"$work/words"
    [ "$(wc -l <"$work/words")" -gt 10 ] || say "$1.pdf: no words to measure"
    awk -v left="$2" -v right="$3" -v bottom="$4" \
        '($1 < left - 0.5 && !($4 ~ /^[0-9]+$/ && $1 > left - 26)) || $2 > right + 0.5 || $3 > bottom + 3 {
            print; bad = 1 } END { exit bad }' "$work/words" >&2 || say "$1.pdf: words outside the text block"
}
inside record 70.87 547.09 793.7
inside long 70.87 547.09 793.7
inside awkward 70.87 547.09 793.7
inside beside 70.87 547.09 793.7
inside pictures 70.87 547.09 793.7
inside letter 70.87 564.1 742.7
inside sheet 51.02 561.26 807.9
inside letter-sheet 51.02 577.99 757.99
echo "pages: sizes, margins, heads of tables, page 1"

qpdf --json "$work/one/record.pdf" | jq -r '.outlines[].title' >"$work/outline"
head -n 3 "$work/outline" | tr '\n' '/' | grep -q "^All capacitors at a glance/Condition on arrival/Leakage/$" ||
    { cat "$work/outline" >&2; say "record.pdf: outline"; }
qpdf --json "$work/one/record.pdf" | jq -r '.outlines[1].kids[0].title' | grep -q "^Asked for$" ||
    say "record.pdf: outline below a section"
qpdf --qdf --object-streams=disable "$work/one/awkward.pdf" "$work/plain.pdf"
grep -a -q "/URI (https://example.org/a%20b?q=%C5%81%C3%B3d%C5%BA)" "$work/plain.pdf" || say "awkward.pdf: no link"
if grep -a -q "javascript:" "$work/plain.pdf"; then say "awkward.pdf: a link that must not be"; fi
images=$(pdfimages -list "$work/one/pictures.pdf" | tail -n +3 | wc -l)
[ "$images" -eq 8 ] || say "pictures.pdf: $images images, not 8"
if grep -a -q "Exif" "$work/one/pictures.pdf"; then say "pictures.pdf: camera data"; fi
echo "outline, links, pictures: right"
