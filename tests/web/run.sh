#!/bin/sh
# run.sh BUILD [FOLDER...]: pages looked at by programs that share no code with ours. The sample
# pages of the writers' tests, every page of the example archive as published, and every .html below
# the folders given:
# the Nu checker (HTML, CSS, SVG), then Chromium with axe-core, at phone and desk width, light and
# dark, and on paper (look.js).
set -eu
build=$(cd "$1" && pwd)
shift
here=$(cd "$(dirname "$0")" && pwd)
root=$(cd "$here/../.." && pwd)
work=$build/tests/web
published=$build/tests/web-published
rm -rf "$work" "$published"
mkdir -p "$work/pictures"

# Installed once for each state of the lock file.
if ! cmp -s "$here/package-lock.json" "$here/node_modules/.installed"; then
    (cd "$here" && npm ci --silent --no-audit --no-fund)
    cp "$here/package-lock.json" "$here/node_modules/.installed"
fi

make -s -C "$root" BUILD="$build" "$build/tests/unit/write/html_test" >&2
(cd "$root" && "$build/tests/unit/write/html_test" "$work")
for number in 01 02 03; do
    cp "$here/grey.png" "$work/pictures/$number.jpg"
done

make -s -C "$root" BUILD="$build" all >&2
"$build/gridleak" publish -q "$root/jobs-example" -o "$published" 2>"$work/publish.log" || {
    cat "$work/publish.log"
    exit 1
}
pages=$work/pages.list
find "$work" "$published" "$@" -name '*.html' -type f | LC_ALL=C sort >"$pages"
tr '\n' '\0' <"$pages" | xargs -0 java -jar "$here/node_modules/vnu-jar/build/dist/vnu.jar" --errors-only
echo "$(wc -l <"$pages") pages are valid HTML"
find "$work" -maxdepth 1 -name '*.svg' -type f | LC_ALL=C sort | tr '\n' '\0' |
    xargs -0 java -jar "$here/node_modules/vnu-jar/build/dist/vnu.jar" --errors-only --svg

node "$here/look.js" "$work" "$pages"

# On paper page 1 answers all: set, headline, and the whole picture of all capacitors.
pdftotext -f 1 -l 1 -layout "$work/sample.pdf" "$work/page-1.txt"
for words in 'page 1 of' 'Record 2031-022' 'Ashdene Plover 54' '45 of 52' '16 of 21' 'across mains' \
    'Figure 1'; do
    grep -q -e "$words" "$work/page-1.txt" || {
        echo "page 1 on paper lacks '$words'"
        exit 1
    }
done
echo "page 1 on paper holds the picture"
