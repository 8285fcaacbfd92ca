#!/bin/sh
# run.sh BUILD: templates rendered here and by npm's mustache, which knows nothing of this program.
set -eu
build=$1
here=$(dirname "$0")
work=$build/mustache
rm -rf "$work"
mkdir -p "$work/templates"
cp "$here/package.json" "$here/package-lock.json" "$here/compare.js" "$work"
npm ci --silent --no-audit --no-fund --prefix "$work"
make -s BUILD="$build" "$build/libbase.a"
${CC:-gcc} -std=c11 -D_GNU_SOURCE -Wall -Wextra -Isrc "$here/render.c" "$build/libbase.a" \
    $(pkg-config --libs nettle) -lm -o "$work/render"
node "$work/compare.js" make "$here/data.txt" "$work/templates"
"$work/render" "$here/data.txt" "$work/templates"
node "$work/compare.js" check "$here/data.txt" "$work/templates"
