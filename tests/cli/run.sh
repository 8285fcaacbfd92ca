#!/bin/sh
# run.sh BUILD: the program as its user meets it: every command with its exit status and words, what
# publishing leaves in the output folder, and bad input.
set -eu
build=$(cd "$1" && pwd)
here=$(cd "$(dirname "$0")" && pwd)
bad=0
for part in commands publish interrupted bad_input hostile; do
    work=$build/tests/cli/$part
    rm -rf "$work"
    mkdir -p "$work"
    started=$(date +%s)
    if "$here/$part.sh" "$build" "$work"; then
        echo "$part: passed in $(($(date +%s) - started)) s"
    else
        bad=1
    fi
done
[ $bad = 0 ]
