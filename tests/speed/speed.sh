#!/bin/sh
# speed.sh BUILD COUNT: the table of `make speed`. Not part of `make check`: it measures, and what it
# measures depends on the machine.
set -eu
build=$(cd "$1" && pwd)
count=$2
here=$(cd "$(dirname "$0")" && pwd)
work=$build/speed
mkdir -p "$work"
${CC:-gcc} -std=c11 -D_GNU_SOURCE -O2 -Wall -Wextra $(pkg-config --cflags libcmark yaml-0.1) "$here/floor.c" \
    $(pkg-config --libs libcmark yaml-0.1) -lhpdf -o "$work/floor"
python3 "$here/speed.py" "$build/gridleak" "$work/floor" "$work" "$count"
web=$here/../web
if ! cmp -s "$web/package-lock.json" "$web/node_modules/.installed"; then
    (cd "$web" && npm ci --silent --no-audit --no-fund)
    cp "$web/package-lock.json" "$web/node_modules/.installed"
fi
echo
NODE_PATH=$web/node_modules node "$here/keystroke.js" "$work/output"
