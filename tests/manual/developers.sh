#!/bin/sh
# developers.sh ROOT: every file and folder that DEVELOPERS.md names is there, and no line of it is
# wider than 130.
set -eu
cd "$1"
bad=0
count=0
for name in $(grep -o '`[a-zA-Z_-]*/[a-zA-Z0-9_/-]*[a-zA-Z0-9_.]*[a-z/]`' DEVELOPERS.md | tr -d '\140' | sort -u); do
    count=$((count + 1))
    [ -e "$name" ] || [ -e "src/$name" ] || {
        echo "DEVELOPERS.md names $name, which is not there"
        bad=1
    }
done
[ "$count" -ge 20 ] || { echo "DEVELOPERS.md: only $count files were found in it"; bad=1; }
wide=$(awk '{ gsub(/[\200-\277]/, "") } length > 130 { printf " %d", FNR }' DEVELOPERS.md)
[ -z "$wide" ] || { echo "DEVELOPERS.md is wider than 130 in line$wide"; bad=1; }
echo "DEVELOPERS.md names $count files"
[ "$bad" = 0 ]
