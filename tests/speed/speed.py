#!/usr/bin/env python3
"""speed.py GRIDLEAK FLOOR WORK COUNT: one table of what publishing COUNT synthetic jobs costs.

Seconds are wall time; memory is the largest resident set. The floor is the same work by the
libraries alone (floor.c), on a sample of the same jobs in the same run, by processor time; the
program's processor time stands beside it. Instructions are callgrind's: the difference between
publishing two jobs and one, so that starting up does not count.
"""
import os
import re
import shutil
import subprocess
import sys
import time

SAMPLE = 100


def run(arguments, **more):
    """Wall seconds, processor seconds, peak KB, what it printed."""
    started = time.perf_counter()
    process = subprocess.Popen(arguments, stdout=subprocess.PIPE, stderr=subprocess.DEVNULL, **more)
    printed = process.stdout.read()
    _, status, used = os.wait4(process.pid, 0)
    process.returncode = os.waitstatus_to_exitcode(status)
    if process.returncode != 0:
        sys.exit("speed: exit %d: %s" % (process.returncode, " ".join(arguments)))
    return time.perf_counter() - started, used.ru_utime + used.ru_stime, used.ru_maxrss, printed


def row(what, count, wall, cpu, peak):
    print("%-34s %9.2f %9.2f %11.1f %9.0f" % (what, wall, cpu, count / wall, peak / 1024))


def change_one(archive, name, stamp):
    path = os.path.join(archive, name)
    with open(path) as file:
        text = file.read()
    with open(path, "w") as file:
        file.write(re.sub(r"technician: .*", "technician: R. O. %s" % stamp, text))


def instructions(arguments, work):
    out = os.path.join(work, "callgrind.out")
    subprocess.run(["valgrind", "--tool=callgrind", "--callgrind-out-file=" + out] + arguments, check=True,
                   stdout=subprocess.DEVNULL, stderr=subprocess.DEVNULL)
    with open(out) as file:
        for line in file:
            found = re.match(r"(?:summary|totals): (\d+)", line)
            if found:
                return int(found.group(1))
    sys.exit("speed: callgrind says nothing")


def manifest_of(path, names, archive, output):
    with open(path, "w") as file:
        for name in names:
            job = name[:-5]
            folder = os.path.join(output, "jobs", job)
            files = [os.path.join(archive, name)]
            for part in ("shop.md", "client/%s.md" % job, "sale/%s.md" % job):
                if os.path.exists(os.path.join(folder, part)):
                    files.append(os.path.join(folder, part))
            file.write("\t".join(files) + "\n")


def main():
    gridleak, floor, work, count = sys.argv[1], sys.argv[2], sys.argv[3], int(sys.argv[4])
    here = os.path.dirname(os.path.abspath(__file__))
    archive = os.path.join(work, "archive-%d" % count)
    output = os.path.join(work, "output")
    names = None
    if not os.path.exists(os.path.join(archive, "complete")):
        shutil.rmtree(archive, ignore_errors=True)
        subprocess.run([sys.executable, os.path.join(here, "make_archive.py"), archive, str(count)], check=True)
        open(os.path.join(archive, "complete"), "w").close()
    names = sorted(name for name in os.listdir(archive) if name.endswith(".yaml") and name != "shop.yaml")
    size = sum(os.path.getsize(os.path.join(archive, name)) for name in names) / len(names)
    print("%d jobs of %.1f KB, %d processors" % (count, size / 1024, os.cpu_count()))
    print("%-34s %9s %9s %11s %9s" % ("", "seconds", "cpu s", "jobs/s", "peak MB"))
    sample = names[:SAMPLE]
    paths = [os.path.join(archive, name) for name in sample]
    row("read and assess, %d jobs" % len(sample), len(sample), *run([gridleak, "assess", "-q", "--json"] + paths)[:3])
    full = {}
    for threads in ("1", "2"):
        publish = [gridleak, "publish", "-q", "--threads", threads, archive, "-o", output]
        shutil.rmtree(output, ignore_errors=True)
        full[threads] = run(publish)
        row("full, %s thread%s" % (threads, "s" if threads == "2" else ""), count, *full[threads][:3])
        row("  nothing changed", count, *run(publish)[:3])
        change_one(archive, names[count // 2], "%s.%d" % (threads, time.time_ns()))
        row("  one changed", count, *run(publish)[:3])
    row("pages alone", count, *run([gridleak, "publish", "-q", "--pages", archive, "-o", output])[:3])
    print("two threads are %.2f times as fast as one" % (full["1"][0] / full["2"][0]))

    fonts = os.path.join(os.path.dirname(gridleak), "share", "gridleak", "fonts")
    manifest = os.path.join(work, "manifest")
    manifest_of(manifest, sample, archive, output)
    printed = run([floor, fonts, manifest])[3]
    yaml, cmark, haru, plain = (float(word) / len(sample) for word in printed.split())
    own = full["1"][1] / count
    print()
    print("%-34s %12s %12s" % ("a job", "cpu ms", "instructions"))
    one = os.path.join(work, "manifest-1")
    manifest_of(one, names[:1], archive, output)
    two = os.path.join(work, "manifest-2")
    manifest_of(two, names[:2], archive, output)
    floor_count = instructions([floor, fonts, two, "faces"], work) - instructions([floor, fonts, one, "faces"], work)
    aside = os.path.join(work, "aside")
    shutil.rmtree(aside, ignore_errors=True)
    single = [gridleak, "publish", "-q", "--threads", "1"]
    own_count = (instructions(single + paths[:2] + ["-o", aside], work) -
                 instructions(single + paths[:1] + ["-o", os.path.join(work, "aside-1")], work))
    shutil.rmtree(aside, ignore_errors=True)
    shutil.rmtree(os.path.join(work, "aside-1"), ignore_errors=True)
    print("%-34s %12.2f" % ("floor: libyaml, events", 1000 * yaml))
    print("%-34s %12.2f" % ("floor: cmark, Markdown to HTML", 1000 * cmark))
    print("%-34s %12.2f" % ("floor: libharu, pages, two faces", 1000 * haru))
    print("%-34s %12.2f" % ("  the same without faces embedded", 1000 * plain))
    print("%-34s %12.2f %12d" % ("floor", 1000 * (yaml + cmark + haru), floor_count))
    print("%-34s %12.2f %12d" % ("gridleak, all copies and sheet", 1000 * own, own_count))
    print("%-34s %12.2f %12.2f" % ("ratio to the floor", own / (yaml + cmark + haru), own_count / floor_count))
    print("%-34s %12.2f" % ("  to the floor without faces", own / (yaml + cmark + plain)))


main()
