#!/bin/sh
# run.sh BUILD UNIT_PROGRAM...: every test of the project. A suite is a unit program or a
# tests/*/run.sh BUILD; each says what it did, and fails by its exit status.
set -u
build=$1
shift
passed=0
failed=0
suite() { # NAME COMMAND...
    name=$1
    shift
    started=$(date +%s)
    if "$@" >"$build/suite.log" 2>&1; then
        passed=$((passed + 1))
        echo "pass  $name  ($(($(date +%s) - started)) s)"
    else
        failed=$((failed + 1))
        echo "FAIL  $name"
        tail -n 60 "$build/suite.log"
    fi
}
for program in "$@"; do
    suite "${program#"$build"/tests/}" "$program"
done
for script in tests/*/run.sh; do
    suite "$script" "$script" "$build"
done
echo "$passed passed, $failed failed"
[ "$failed" = 0 ]
