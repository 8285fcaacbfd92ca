#!/bin/sh
# The include rule: a module sees itself and the modules below it; write sees of report only the
# document and exhibit types; each library's header stays in its module. And nothing below main.c
# prints or exits.
set -eu
modules="base quantity reference job assess report write archive"
bad=0
say() { echo "$1" >&2; bad=1; }
# Only includes that the checks below can read: from src/, plainly written.
for line in $(grep -n -E '^[[:space:]]*#[[:space:]]*include' -r src --include='*.[ch]' |
    grep -v -E ':#include (<[A-Za-z0-9_/.-]+>|"([a-z_]+/)?[a-z0-9_]+\.h")( /\*|$)' | cut -d: -f1,2); do
    say "$line: write it #include \"module/name.h\" or <library.h>"
done
for file in $(find src -mindepth 1 -name '*.[ch]'); do
    module=${file#src/}
    module=${module%%/*}
    case " $modules main.c command_rows.h " in *" $module "*) ;; *) say "$file: belongs to no module" ;; esac
done
below=
for module in $modules; do
    below="$below $module"
    for line in $(grep -n -o -H '^#include "[a-z_]*/' src/$module/*.[ch] 2>/dev/null | sed 's/#include "//; s/\/$//'); do
        used=${line##*:}
        case " $below " in *" $used "*) ;; *) say "${line%:*}: $module may not include $used" ;; esac
    done
done
for line in $(grep -n -o -H '#include "report/[a-z_]*\.h' src/write/*.[ch] 2>/dev/null | tr -d '"' | sed 's/#include //'); do
    case $line in *report/document.h | *report/exhibit.h) ;; *) say "$line: write sees of report only document.h and exhibit.h" ;; esac
done
only_in() { # HEADER-PATTERN FILE-PATTERN
    for file in $(grep -l -E "#include <$1>" -r src || true); do
        echo "$file" | grep -q -E "^src/($2)" || say "$file: <$1> is not for this module"
    done
}
only_in 'yaml\.h' 'job/yaml_'
only_in 'hpdf.*\.h' 'write/pdf_'
only_in 'cmark\.h' 'report/|write/'
only_in 'hb.*\.h' 'write/font_'
only_in 'png\.h' 'write/picture'
only_in 'turbojpeg\.h' 'write/picture'
only_in '(cminpack-1/)?(cminpack|minpack)\.h' 'assess/numeric'
only_in 'nettle/.*\.h' 'base/hash'
only_in 'cjson/.*\.h' 'archive/'
only_in 'libdeflate\.h' 'write/deflate'
only_in 'utf8proc\.h' 'report/|write/text_width|archive/'
only_in 'pthread\.h' 'archive/'
for line in $(grep -n -E '\<((printf|fprintf|puts|fputs|putchar|perror|exit|abort)\(|stdout\>|stderr\>)' \
    -r src --include='*.[ch]' | grep -v '^src/main\.c:' | cut -d: -f1,2); do
    say "$line: only main.c prints and exits"
done
[ $bad = 0 ]
