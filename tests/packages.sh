#!/bin/sh
# packages.sh NAME...: install the Debian packages that are missing; elsewhere name them.
set -eu
missing=
if command -v dpkg-query >/dev/null 2>&1; then
    for name in "$@"; do
        case $name in
        # A machine may have its own Node.js, outside Debian's packages.
        nodejs | npm) command -v "${name%js}" >/dev/null 2>&1 && continue ;;
        esac
        dpkg-query -W -f '${Status}' "$name" 2>/dev/null | grep -q 'ok installed' || missing="$missing $name"
    done
else
    echo "This is no Debian: please install what these packages hold, then run make again:" >&2
    echo "  $*" >&2
    exit 0
fi
[ -n "$missing" ] || exit 0
as_root=
[ "$(id -u)" = 0 ] || as_root=sudo
echo "installing:$missing"
export DEBIAN_FRONTEND=noninteractive
$as_root apt-get update -qq
# shellcheck disable=SC2086
$as_root apt-get install -y -qq --no-install-recommends $missing >/dev/null
