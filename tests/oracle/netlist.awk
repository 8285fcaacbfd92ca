# From the lines of one case (stages.c) to a netlist for ngspice. The law of the valve is written
# here from the figures of its row alone, as SPICE expressions; resistors and sources stand for
# themselves, leaks are resistors.

function has(key) { return (key in f) && f[key] + 0 != 0 }

# A resistance between two nodes; 0 ohm is a wire.
function resistor(name, from, to, ohm) {
    if (ohm + 0 == 0) print "V" name " " from " " to " 0"
    else print "R" name " " from " " to " " ohm
}

function leak(name, from, siemens) {
    if (siemens + 0 > 0) print "R" name " " from " 0 " 1 / siemens
}

# Only once for a node that stages share.
function first(what, node) {
    if (node < 0) return 1
    return !((what, node) in done) && (done[what, node] = 1)
}

BEGIN {
    print "* stages against ngspice"
    print ".options reltol=1e-7 abstol=1e-14 vntol=1e-9 itl1=2000 gmin=1e-18"
}

{
    delete f
    for (i = 1; i <= NF; i++) {
        cut = index($i, "=")
        f[substr($i, 1, cut - 1)] = substr($i, cut + 1)
    }
    n = f["stage"]
    triode = f["kind"] ~ /triode/
    m = f["kind"] == "beam_tetrode" ? 1 : f["kind"] == "output_pentode" ? 0.4 : 0
    k = f["cathode_node"] >= 0 ? "kn" f["cathode_node"] : "k" n
    s = f["screen_node"] >= 0 ? "sn" f["screen_node"] : "s" n
    b = f["bias_node"] >= 0 ? "bn" f["bias_node"] : "0"
    a = "a" n; g = "g" n

    # the circuit
    print "Vht" n " ht" n " 0 " f["supply"]
    resistor("load" n, "ht" n, a, f["anode_ohm"])
    leak("aleak" n, a, f["anode_leak"])
    if (first("cathode", f["cathode_node"])) resistor("k" n, k, "0", f["cathode_ohm"])
    leak("kleak" n, k, f["cathode_leak"])
    if (!triode) {
        if (first("screen", f["screen_node"])) {
            print "Vsht" n " sht" n " 0 " f["screen_supply"]
            resistor("drop" n, "sht" n, s, f["screen_ohm"])
            if (b != "0") print "Fs" n " " b " 0 Vsht" n " -1"
        }
        leak("sleak" n, s, f["screen_leak"])
    }
    if (b != "0") {
        print "Fa" n " " b " 0 Vht" n " -1"
        if (first("bias", f["bias_node"])) {
            print "Rbias" n " " b " 0 " f["bias_ohm"]
            print "Iothers" n " " b " 0 " f["others"]
        }
    }
    print "Vret" n " ret" n " " b " " f["return"]
    resistor("feed" n, "ret" n, "far" n, f["bias_feed"])
    leak("bleak" n, "far" n, f["bias_leak"])
    resistor("g" n, g, "far" n, f["grid_leak"])
    if (has("coupling_leak")) {
        print "Vsrc" n " src" n " 0 " f["source"]
        print "Rsrc" n " src" n " " g " " f["source_ohm"] + 1 / f["coupling_leak"]
        if (b != "0") print "Fsrc" n " " b " 0 Vsrc" n " -1" # it is fed from the same HT
    }

    # the valve
    gk = "V(" g "," k ")"; ak = "V(" a "v," k ")"; sk = "V(" s "," k ")"
    print "Vam" n " " a " " a "v 0"
    print "Bg" n " " g " " k " I = 15e-6*exp(min(" gk ",0.5)/0.23)*(1+max(" gk "-0.5,0)/0.23)"
    if (triode) {
        power = ("gm" in f) ? 1.5 : 1.3
        mu = ("mu" in f) ? f["mu"] : f["gm"] * f["ra"]
        drive = ("gm" in f) ? "1.5*" f["ia0"] "/" f["gm"] : "(" f["vg10"] ")+" f["va0"] "/" mu
        print ".param d0_" n "={" drive "}"
        print "Bd" n " d" n " 0 V = max({d0_" n "}+" gk "-(" f["vg10"] ")+(" ak "-" f["va0"] ")/" mu ",0)"
        print "Ba" n " " a "v " k " I = " f["ia0"] "*pow(V(d" n ")/{d0_" n "}," power ")*(1-exp(-max(" ak ",0)/5))"
    } else {
        q0 = "(" f["ig20"] "/" f["ia0"] ")"
        print ".param d0_" n "={1.5*" f["ia0"] "/" f["gm"] "}"
        ka = ("ra" in f) ? "max(0,1/" f["ra"] "-" m "*" f["ia0"] "*" q0 "/(" f["va0"] "*(1+" q0 ")))/" f["gm"] : "0"
        print ".param ka_" n "={" ka "}"
        print ".param mu_" n "={" f["vg20"] "/(d0_" n "-(" f["vg10"] ")-ka_" n "*" f["va0"] ")}"
        floored = "max(" sk ",0.5)"
        print "Bd" n " d" n " 0 V = max({d0_" n "}+" gk "-(" f["vg10"] ")+(" sk "-" f["vg20"] ")/{mu_" n "}+{ka_" n "}*(" ak "-" f["va0"] "),0)"
        print "Bi" n " i" n " 0 V = 1000*(" f["ia0"] "+" f["ig20"] ")*pow(V(d" n ")/{d0_" n "},1.5)"
        print "Bq" n " q" n " 0 V = " q0 "*pow((" floored "/max(" ak ",0.2*" floored "))/(" f["vg20"] "/" f["va0"] ")," m ")"
        print "Bn" n " n" n " 0 V = min(1,(1-exp(-max(" ak ",0)/(0.1*" floored ")))/(1-exp(-" f["va0"] "/(0.1*" f["vg20"] "))))"
        print "Ba" n " " a "v " k " I = 0.001*V(i" n ")*V(n" n ")/(1+V(q" n "))"
        print "Vsm" n " " s " sv" n " 0"
        print "Bs" n " sv" n " " k " I = 0.001*V(i" n ")*(1-V(n" n ")/(1+V(q" n ")))"
    }
    order = order "echo stage " n "\n" "print v(" g ") v(" k ") v(" a ") i(vam" n ")\n"
    if (!triode) order = order "print v(" s ") i(vsm" n ")\n"
}

END {
    print ".control"
    print "set numdgt=10"
    print "op"
    printf "%s", order
    print "quit"
    print ".endc"
    print ".end"
}
