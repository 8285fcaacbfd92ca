#!/bin/sh
# Style and structure: clang-format, the include rule, cppcheck, clang-tidy.
set -eu
cd "$(git rev-parse --show-toplevel)"
tests/lint/include-rule.sh
clang-format --dry-run -Werror $(git ls-files 'src/*.[ch]' 'tests/*.[ch]' | xargs ls 2>/dev/null)
cppcheck --quiet --std=c11 --error-exitcode=1 --enable=warning,performance,portability \
    --inline-suppr --suppress=missingIncludeSystem -Isrc src
