# compare.awk OURS NGSPICE: one case. 0.1 % on every voltage and current; differences below 0.1 mV
# and 0.1 nA are not counted.

function check(what, ours, theirs, least,    off) {
    compared++
    off = ours - theirs
    if (off < 0) off = -off
    size = theirs < 0 ? -theirs : theirs
    if (size > least && off / size > worst) worst = off / size
    if (off > 0.001 * size && off > least) {
        printf "%s stage %d: %s is %.8g, ngspice has %.8g\n", name, stage, what, ours, theirs
        bad = 1
    }
}

FNR == NR {
    for (i = 1; i <= NF; i++) {
        cut = index($i, "=")
        key = substr($i, 1, cut - 1)
        value = substr($i, cut + 1)
        if (key == "case") name = value
        if (key == "stage") { stage = value; stages++ }
        ours[stage, key] = value
    }
    next
}

/^stage / { stage = $2; place = 0; next }
$2 == "=" && $1 ~ /^[vi]\(/ {
    split("VG VK VA IA VS IS", keys, " ")
    key = keys[++place]
    if (!((stage, key) in ours)) { print name ": " $1 " unasked"; bad = 1; next }
    check(key, ours[stage, key], $3, key ~ /^V/ ? 1e-4 : 1e-10)
    seen[stage, key] = 1
}

END {
    for (i = 1; i <= stages; i++)
        for (j = 1; j <= 6; j++) {
            split("VG VK VA IA VS IS", keys, " ")
            if (((i, keys[j]) in ours) && !((i, keys[j]) in seen)) {
                print name " stage " i ": ngspice gave no " keys[j]
                bad = 1
            }
        }
    printf "%s %s: %d figures, worst %.4f %%\n", bad ? "FAIL" : "pass", name, compared, 100 * worst
    exit bad || compared == 0
}
