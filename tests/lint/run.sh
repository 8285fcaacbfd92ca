#!/bin/sh
# Style and structure: clang-format, the include rule, cppcheck, clang-tidy. LINT=all adds clang's static
# analyser, which takes minutes.
set -eu
cd "$(git rev-parse --show-toplevel)"
tests/lint/include-rule.sh
# shellcheck disable=SC2046
clang-format --dry-run -Werror $(git ls-files 'src/*.[ch]' 'tests/*.[ch]' | xargs ls 2>/dev/null)
cppcheck --quiet --std=c11 --error-exitcode=1 --enable=warning,performance,portability \
    --inline-suppr --suppress=missingIncludeSystem -j 2 -Isrc src
checks=
[ "${LINT:-}" = all ] || checks="--checks=-clang-analyzer-*"
libraries=$(pkg-config --cflags harfbuzz-subset yaml-0.1 libcmark cminpack libcjson)
git ls-files 'src/*.c' | xargs ls 2>/dev/null | xargs -P 2 -n 10 sh -c 'checks=$1 libraries=$2
    shift 2
    out=$(clang-tidy --quiet $checks "$@" -- -std=c11 -D_GNU_SOURCE -DGRIDLEAK_VERSION="\"0\"" -Isrc $libraries 2>/dev/null) && exit 0
    echo "$out"
    exit 255' tidy "$checks" "$libraries"
echo "clang-format, include rule, cppcheck, clang-tidy: clean"
