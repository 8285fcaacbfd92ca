#!/bin/sh
# run.sh BUILD: everything that the manual shows is done. Its example jobs are read without a
# mistake, its commands run and print what it says, its worked limits are worked out again from its
# formulas and held against the program, and the page is made of it.
set -eu
build=$(cd "$1" && pwd)
here=$(cd "$(dirname "$0")" && pwd)
root=$(cd "$here/../.." && pwd)
work=$build/tests/manual
rm -rf "$work"
mkdir -p "$work/archive"
cp -R "$root/jobs-example/photos" "$root/jobs-example/2031-014.yaml" "$work/archive"
PATH=$build:$PATH python3 "$here/examples.py" "$root/templates" "$work/archive"
# With the limits that a shop has by default, not with those of the last example.
echo 'name: Oxlade & Finch' >"$work/archive/shop.yaml"
python3 "$here/worked.py" "$root/templates" "$build/gridleak" "$work/archive"
python3 "$here/page.py" "$work/archive/output" "$build/gridleak"
"$here/developers.sh" "$root"
