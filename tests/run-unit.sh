#!/bin/sh
# run-unit.sh PROGRAM...: run each, say which failed.
failed=0
for program in "$@"; do
    "$program" >"$program.log" 2>&1 || { failed=$((failed + 1)); cat "$program.log"; }
done
echo "$(($# - failed)) passed, $failed failed"
[ "$failed" = 0 ]
