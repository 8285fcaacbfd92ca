# What the scripts of this folder share: sourced with $program, $root and $work set.

# Also in the subshells of pipelines: counted in a file.
say_failed() { echo "FAILED: $*" | tee -a "$work/failures"; }

# expect STATUS COMMAND...: run it; its words go to $work/stdout and $work/stderr.
expect() {
    wanted=$1
    shift
    status=0
    "$@" >"$work/stdout" 2>"$work/stderr" </dev/null || status=$?
    [ "$status" = "$wanted" ] && return 0
    say_failed "exit $status, not $wanted: $*"
    sed 's/^/    /' "$work/stderr" | head -n 20
}

# says PATTERN, tells PATTERN: standard output, standard error holds a line like it.
says() { grep -q -e "$1" "$work/stdout" || say_failed "standard output without '$1': $(head -c 300 "$work/stdout")"; }
tells() { grep -q -e "$1" "$work/stderr" || say_failed "standard error without '$1': $(head -c 300 "$work/stderr")"; }
tells_not() { ! grep -q -e "$1" "$work/stderr" || say_failed "standard error has '$1': $(head -c 300 "$work/stderr")"; }
silent() { [ ! -s "$work/$1" ] || say_failed "$1 is not empty: $(head -c 300 "$work/$1")"; }

there() { [ -e "$1" ] || say_failed "there is no $1"; }
gone() { [ ! -e "$1" ] || say_failed "$1 is there"; }

# stamps FOLDER: name, size and time of every file but the bookkeeping.
stamps() {
    (cd "$1" && find . -type f ! -path './.gridleak/*' -printf '%p %s %T@\n' | LC_ALL=C sort)
}

# A job of few parts, with the given number, on standard output.
small_job() {
    cat <<JOB
job: $1
set:
  maker: Pellworth Wireless
  model: Curlew 56
  supply: transformer
  mains: 230 V
  frequency: 50 Hz
received: 2031-02-03
returned: 2031-02-19
conditions:
  bench: 19 C
capacitors:
  C1:
    type: paper
    marked: 0.1 uF 350 V
    place: decoupling
    service: 250 V
    feed: 10k
    current: 2 mA
    readings:
      - 250 V 60 s 0.2 uA
    done: kept
JOB
}

# archive_of FOLDER NUMBER...: an archive with such jobs.
archive_of() {
    folder=$1
    shift
    mkdir -p "$folder"
    echo 'name: Oxlade & Finch' >"$folder/shop.yaml"
    for number in "$@"; do
        small_job "$number" >"$folder/$number.yaml"
    done
}

finish() {
    [ ! -e "$work/failures" ] || exit 1
}
