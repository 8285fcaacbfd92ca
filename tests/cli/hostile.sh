#!/bin/sh
# hostile.sh BUILD WORK: markup, script and signs of every format in every text field of a job.
set -eu
here=$(cd "$(dirname "$0")" && pwd)
PYTHONDONTWRITEBYTECODE=1 python3 "$here/hostile.py" "$(cd "$1" && pwd)/gridleak" "$2" "$here/../pdf/images/base.jpg"
