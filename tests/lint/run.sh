#!/bin/sh
# Style and structure: clang-format, the include rule, cppcheck, clang-tidy with clang's static analyser. The
# analyser follows calls a little way; LINT=deep (make analyse) as far as it can, which takes minutes.
set -eu
cd "$(git rev-parse --show-toplevel)"
tests/lint/include-rule.sh
# shellcheck disable=SC2046
clang-format --dry-run -Werror $(git ls-files 'src/*.[ch]' 'tests/*.[ch]' | xargs ls 2>/dev/null)
cppcheck --quiet --std=c11 --error-exitcode=1 --enable=warning,performance,portability \
    --inline-suppr --suppress=missingIncludeSystem -j 2 -Isrc src
mode=shallow
[ "${LINT:-}" != deep ] || mode=deep
libraries=$(pkg-config --cflags harfbuzz-subset yaml-0.1 libcmark cminpack libcjson)
git ls-files 'src/*.c' | xargs ls 2>/dev/null | xargs -P 2 -n 10 sh -c 'mode=$1 libraries=$2
    shift 2
    out=$(clang-tidy --quiet "$@" -- -Xclang -analyzer-config -Xclang mode=$mode -std=c11 -D_GNU_SOURCE -DGRIDLEAK_VERSION="\"0\"" -Isrc $libraries 2>/dev/null) && exit 0
    echo "$out"
    exit 255' tidy "$mode" "$libraries"
echo "clang-format, include rule, cppcheck, clang-tidy, static analyser ($mode): clean"
