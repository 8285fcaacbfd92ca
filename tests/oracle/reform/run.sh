#!/bin/sh
# run.sh BUILD: four reforms simulated by ngspice, a step of volts through a limiter into an
# electrolytic whose steady leak and absorption are known, read as a bench would read them, and
# written down as a job. The program must find the volts across the part (to 0.1 % and the figures
# written) and the steady leak (within its stated error). Rows: BUILD/oracle/reform.tsv.
set -eu
build=$(cd "$1" && pwd)
here=$(cd "$(dirname "$0")" && pwd)
root=$(cd "$here/../../.." && pwd)
work=$build/oracle/reform
mkdir -p "$work"
make -s -C "$root" BUILD="$build" "$build/gridleak"
: >"$build/oracle/reform.tsv"
failed=0
row() { # WHAT EXPECTED GOT TOLERANCE
    awk -v what="$1" -v expected="$2" -v got="$3" -v tolerance="$4" 'BEGIN {
        difference = got - expected
        good = got != "null" && difference <= tolerance && -difference <= tolerance
        printf "Reforming\t%s\tngspice, transient\tseen\t%.5g\t%.5g\t%.2g\t%s\n", what, expected, got, tolerance,
            good ? "ok" : "DIFFERS"
        exit !good
    }' >>"$build/oracle/reform.tsv" || { failed=$((failed + 1)); echo "$1: $3, not $2 within $4"; }
}
times="60 90 120 180 300 450 600 900 1200 1800 2700 3600"
# NAME VOLTS LIMITER FARAD LEAK_OHM, then absorption as branches "OHM FARAD" in parallel
reform() {
    name=$1 volts=$2 limiter=$3 farad=$4 leak=$5
    shift 5
    {
        echo "$name"
        echo "v1 a 0 pwl(0 0 0.1 $volts)"
        echo "rl a p $limiter"
        echo "c0 p 0 $farad"
        echo "rs p 0 $leak"
        n=0
        while [ $# -gt 0 ]; do
            n=$((n + 1))
            echo "ra$n p q$n $1"
            echo "ca$n q$n 0 $2"
            shift 2
        done
        echo ".tran 0.5 3601 0 0.5 uic"
        for time in $times; do
            echo ".meas tran v$time find v(p) at=$time"
            echo ".meas tran i$time find i(v1) at=$time"
        done
        echo ".end"
    } >"$work/$name.cir"
    ngspice -b "$work/$name.cir" >"$work/$name.out" 2>&1 || true
    line=
    for time in $times; do
        current=$(awk -v key="i$time" '$1 == key {printf "%.2f", -$3 * 1e6}' "$work/$name.out")
        line="$line${line:+, }$time s $current uA"
    done
    number=R-$(echo "$name" | tr _ -)
    cat >"$work/$number.yaml" <<JOB
job: $number
set:
  maker: Pellworth
received: 2031-02-03
conditions:
  bench: 20 C
instruments:
  meter:
    accuracy: 0.2 % + 0.01 uA
    resolution: 0.01 uA
capacitors:
  C1:
    type: electrolytic
    marked: 16 uF 450 V
    place: reservoir
    current: 60 mA
    service: $volts V
reforms:
  - capacitor: C1
    limiter: $limiter ohm
    log:
      - $volts V $line
JOB
    "$build/gridleak" assess --json "$work/$number.yaml" 2>"$work/$name.err" >"$work/$name.json"
    last=$(awk '$1 == "v3600" {print $3}' "$work/$name.out")
    row "$name: volts across the part after 1 h" "$last" \
        "$(jq '.bench.reforms[0].steps[0].part_v' "$work/$name.json")" "$(awk "BEGIN {print 0.001 * $last}")"
    row "$name: steady leak (uA)" "$(awk "BEGIN {print 1e6 * $last / $leak}")" \
        "$(jq '.bench.reforms[0].plateau_a * 1e6' "$work/$name.json")" \
        "$(jq '.bench.reforms[0].plateau_uncertainty_a * 1e6 // 0' "$work/$name.json")"
}
# one time constant: an exponential; three and five spread over decades: between the two laws
reform exponential 320 10000 16e-6 2e6 600e3 800e-6
reform three_branches 320 10000 16e-6 1.2e6 400e3 120e-6 900e3 300e-6 2e6 600e-6
reform five_branches 300 4700 16e-6 900e3 300e3 60e-6 500e3 180e-6 900e3 400e-6 1.6e6 800e-6 3e6 1200e-6
reform small_leak 250 4700 8e-6 6e6 800e3 30e-6 2e6 80e-6 4e6 150e-6
echo "$(wc -l <"$build/oracle/reform.tsv") figures of four reforms, $failed differ"
[ "$failed" = 0 ]
