#!/bin/sh
# run.sh BUILD: the example archive as published: the same bytes twice, the same numbers in all
# formats, kept counts as counted by hand, nothing of the owner in a sale copy, PDFs valid.
set -eu
build=$(cd "$1" && pwd)
here=$(cd "$(dirname "$0")" && pwd)
root=$(cd "$here/../.." && pwd)
work=$build/tests/documents
rm -rf "$work"
mkdir -p "$work"
cd "$root"

# The second time from another folder: where an archive lies is no part of it.
cp -r jobs-example "$work/elsewhere"
for pass in one two; do
    archive=jobs-example
    [ $pass = one ] || archive=$work/elsewhere
    "$build/gridleak" publish "$archive" -q -o "$work/$pass" 2>"$work/$pass.log" || {
        cat "$work/$pass.log"
        exit 1
    }
done
# .gridleak/state tells when inputs changed, not what was made.
diff -rq --exclude=.gridleak "$work/one" "$work/two"
echo "the same bytes in two runs, from two places"

for job in jobs-example/*.yaml; do
    case $job in */shop.yaml) continue ;; esac
    "$build/gridleak" assess --json "$job" 2>/dev/null
done >"$work/findings.jsonl"
python3 "$here/compare.py" "$work/one" "$work/findings.jsonl" tests/golden/jobs/expected-counts.txt

# ISO 19005-1:2005 level B by Apache PDFBox Preflight; structure by qpdf; fonts by poppler.
java=/usr/share/java
find "$work/one" -name '*.pdf' | LC_ALL=C sort >"$work/pdfs"
while read -r file; do
    java -cp $java/preflight.jar:$java/xmpbox.jar:$java/pdfbox2.jar:$java/fontbox2.jar:$java/commons-logging.jar:$java/javax.activation.jar:$java/jaxb-api.jar \
        org.apache.pdfbox.preflight.Validator_A1b "$file" </dev/null >"$work/preflight" 2>&1 || true
    grep -q "is a valid PDF/A-1b file" "$work/preflight" || { echo "$file"; cat "$work/preflight"; exit 1; }
    qpdf --check "$file" >"$work/qpdf" 2>&1 || { cat "$work/qpdf"; exit 1; }
    # columns: name, type, encoding, emb, sub, uni, object
    pdffonts "$file" | awk -v file="$file" 'NR > 2 && !/ yes +yes +yes +[0-9]+ +0$/ { print file ": " $0; bad = 1 }
        END { exit bad || NR < 3 }'
done <"$work/pdfs"
echo "$(wc -l <"$work/pdfs") PDFs are valid PDF/A-1b, whole, all fonts embedded as subsets"
