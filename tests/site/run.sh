#!/bin/sh
# run.sh BUILD: the pages over all jobs. Numbers of statistics.csv recomputed from assess --json by a
# program of its own; the pages valid by the Nu checker; search, filters, order and address in
# Chromium, opened as files, with a hostile job among them, held against `gridleak find`; axe-core on
# every kind of page; and jobs published by parallel processes give the same bytes as one run.
set -eu
build=$(cd "$1" && pwd)
here=$(cd "$(dirname "$0")" && pwd)
root=$(cd "$here/../.." && pwd)
web=$root/tests/web
work=$build/tests/site
gridleak=$build/gridleak
rm -rf "$work"
mkdir -p "$work"

if ! cmp -s "$web/package-lock.json" "$web/node_modules/.installed"; then
    (cd "$web" && npm ci --silent --no-audit --no-fund)
    cp "$web/package-lock.json" "$web/node_modules/.installed"
fi

# 60 synthetic jobs: enough sets for intervals, and revisits.
python3 "$root/tests/speed/make_archive.py" "$work/many" 60
# Parts that were replaced without a reading: every second one of those replaced, at a first visit.
python3 - "$work"/many/2*.yaml <<'PY'
import re
import sys
for path in sys.argv[1:]:
    with open(path) as file:
        text = file.read()
    if "continues:" not in text:
        with open(path, "w") as file:
            file.write(re.sub(r"(?m)^(  C\d*[02468]:\n(?:    (?!readings).*\n)*)    readings:\n(?:      .*\n)+"
                              r"(?=    done: replaced)", r"\1", text))
PY
"$gridleak" publish -q "$work/many" -o "$work/many-out" >"$work/many.log" 2>&1 || { cat "$work/many.log"; exit 1; }
ls "$work"/many/*.yaml | grep -v shop.yaml | xargs "$gridleak" assess --json >"$work/many.jsonl" 2>/dev/null
python3 "$here/recompute.py" "$work/many.jsonl" "$work/many-out"

# By parallel processes, then the pages.
ls "$work"/many/*.yaml | grep -v shop.yaml |
    xargs -n 15 -P 4 "$gridleak" publish -q -o "$work/parallel-out" >>"$work/many.log" 2>&1
"$gridleak" publish -q --pages "$work/many" -o "$work/parallel-out"
diff -r -x .gridleak "$work/many-out" "$work/parallel-out"
echo "parallel processes and --pages: the same bytes as one run"

# One job changed: as if all had been made anew.
sed -i 's/^technician: .*/technician: B. Changed/' "$work"/many/2020-00010.yaml
"$gridleak" publish -q "$work/many" -o "$work/many-out" >>"$work/many.log" 2>&1
rm "$work"/many/2020-00012.yaml
"$gridleak" publish -q "$work/many" -o "$work/many-out" >>"$work/many.log" 2>&1
"$gridleak" publish -q "$work/many" -o "$work/anew" >>"$work/many.log" 2>&1
diff -r -x .gridleak "$work/many-out" "$work/anew"
echo "one job changed, one gone: the same bytes as made anew"

# The example with a hostile job, a broken one and a chain that is wrong.
cp -r "$root/jobs-example" "$work/shop"
cp "$here"/hostile.yaml "$work/shop/2040-001.yaml"
printf 'job: 2040-002\nset:\n  maker: <i>Broken\n  modell: x\n' >"$work/shop/2040-002.yaml"
sed 's/^job: .*/job: 2040-003/; s/^continues: .*/continues: 2019-404/' "$root/jobs-example/2037-008.yaml" >"$work/shop/2040-003.yaml"
status=0
"$gridleak" publish -q "$work/shop" -o "$work/out" >"$work/shop.log" 2>&1 || status=$?
[ "$status" = 2 ] || { cat "$work/shop.log"; echo "a broken job gave exit $status, not 2"; exit 1; }
grep -q "there is no job '2019-404' in the archive" "$work/shop.log"
ASTRAY=$work/shop/2019-404.yaml
sed 's/^job: .*/job: 2019-404/; s/^continues: .*/continues: 2040-003/; s/serial: .*/serial: other/' \
    "$root/jobs-example/2037-008.yaml" >"$ASTRAY"
"$gridleak" publish -q "$work/shop" -o "$work/out" >"$work/shop.log" 2>&1 || true
for words in "go round in a circle" "has the serial 'other'" "was returned on"; do
    grep -q -e "$words" "$work/shop.log" || { echo "the chain of visits: '$words' is not said"; exit 1; }
done
rm "$ASTRAY"
"$gridleak" publish -q "$work/shop" -o "$work/out" >"$work/shop.log" 2>&1 || true
grep -q "there is no job '2019-404' in the archive" "$work/shop.log" || { echo "a lost visit is not noticed"; exit 1; }

find "$work/out" "$work/many-out" -maxdepth 2 -name '*.html' ! -path '*/jobs/*' | LC_ALL=C sort | head -n 14 >"$work/pages"
tr '\n' '\0' <"$work/pages" | xargs -0 java -jar "$web/node_modules/vnu-jar/build/dist/vnu.jar" --errors-only
echo "$(wc -l <"$work/pages") pages are valid HTML"
NODE_PATH=$web/node_modules node "$here/site.js" "$gridleak" "$work/out" "$work/many-out"
