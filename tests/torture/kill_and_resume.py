#!/usr/bin/env python3
# A run ended at evenly spaced moments of its life, each time resumed, against the uninterrupted run.
# Usage: kill_and_resume.py PROGRAM STRUCTURE KILL|INT TIMES RUN_OPTIONS...   (in an empty folder)
# Every point that the run had shown as finished (on its own progress line) 10 s before the end has to be in the file.
# SPDX-License-Identifier: MIT
import os, pty, re, select, signal, subprocess, sys, time

import h5py
import numpy as np

CHECKPOINT = 10  # seconds


def run(program, arguments):
    start = time.monotonic()
    subprocess.run([program] + arguments, check=True, stdout=subprocess.DEVNULL, stderr=subprocess.DEVNULL)
    return time.monotonic() - start


def scale(values):
    finite = values[np.isfinite(values)]
    return np.max(np.abs(finite)) if finite.size else 1.0


def compare(whole, resumed):
    """Largest difference of any variable in units of its scale (an error's: its figure's); list of complaints."""
    worst, complaints = 0.0, []
    with h5py.File(whole) as a, h5py.File(resumed) as b:
        if set(a) != set(b):
            complaints.append(f"datasets differ: {set(a) ^ set(b)}")
        for name in a.attrs:
            if name not in ("created", "command_line") and not np.array_equal(a.attrs[name], b.attrs[name]):
                complaints.append(f"attribute {name}: {a.attrs[name]} and {b.attrs[name]}")
        for name in a:
            if a[name].dtype.kind not in "fi":
                continue
            x, y = a[name][()], b[name][()]
            if x.shape != y.shape or not np.array_equal(np.isnan(x), np.isnan(y)):
                complaints.append(f"{name}: shapes or missing values differ")
                continue
            base = name[: -len("_error")] if name.endswith("_error") else name
            size = scale(a[base][()])
            difference = np.nanmax(np.abs(x - y)) / size if x.size and size > 0 else 0.0
            if difference > worst:
                worst = difference
            if difference > 1e-9:
                complaints.append(f"{name}: differs by {difference:.2e} of its scale")
            for attribute in a[name].attrs:
                if attribute in ("units", "long_name") and a[name].attrs[attribute] != b[name].attrs[attribute]:
                    complaints.append(f"{name}.{attribute} differs")
    return worst, complaints


def run_until(program, arguments, moment, ending):
    """Runs on a pseudo-terminal up to a moment, then ends the run; finishing times of its points."""
    master, slave = pty.openpty()
    environment = dict(os.environ, TERM="xterm", COLUMNS="100")
    process = subprocess.Popen([program] + arguments, stderr=slave, stdout=subprocess.DEVNULL, env=environment)
    os.close(slave)
    start, seen, finished, text = time.monotonic(), None, [], ""
    while process.poll() is None and time.monotonic() - start < moment:
        if select.select([master], [], [], 0.05)[0]:
            try:
                text += os.read(master, 65536).decode(errors="replace")
            except OSError:
                break
            lines = text.split("\r")
            text = lines.pop()  # the last one may not be whole yet
            for line in lines:
                found = re.search(r"% [#.]+ (\S+) V", line)
                if found and found.group(1) != seen:
                    seen = found.group(1)
                    finished.append(time.monotonic() - start)
    ended = time.monotonic() - start
    if process.poll() is None:
        process.send_signal(ending)
    process.wait()
    os.close(master)
    return ended, finished


def main():
    program, structure, ending, times = sys.argv[1], sys.argv[2], sys.argv[3], int(sys.argv[4])
    ending = {"KILL": signal.SIGKILL, "INT": signal.SIGINT}[ending]
    command = ["iv", structure, *sys.argv[5:]]
    life = run(program, command + ["-o", "whole.h5"])
    with h5py.File("whole.h5") as file:
        total = len(file["bias"])
    print(f"uninterrupted: {life:.1f} s, {total} points", flush=True)
    failures, with_points, worst = [], 0, 0.0
    for k in range(times):
        name = f"ended-{k}.h5"
        moment = life * (k + 1) / (times + 1)
        ended, finished = run_until(program, command + ["-o", name], moment, ending)
        margin = CHECKPOINT if ending == signal.SIGKILL else 0.5
        needed = sum(1 for when in finished if when <= ended - margin)
        points = 0
        if os.path.exists(name):
            with h5py.File(name) as file:
                points = int(file.attrs["points_done"])
                if len(file["bias"]) != points:
                    failures.append(f"{k}: {len(file['bias'])} biases, points_done {points}")
        if points < needed:
            failures.append(f"{k} at {ended:.1f} s: {points} points there, {needed} were finished {margin} s before")
        with_points += points > 0
        resumed_life = run(program, command + ["-o", name, "--resume"])
        difference, complaints = compare("whole.h5", name)
        worst = max(worst, difference)
        failures += [f"{k} at {ended:.1f} s: {text}" for text in complaints]
        print(f"{k} at {ended:6.1f} s: {points} points there ({needed} needed); resumed in {resumed_life:.1f} s, "
              f"differs by {difference:.1e} of scale", flush=True)
        os.remove(name)
        for leftover in os.listdir("."):
            if ".tmp." in leftover:
                os.remove(leftover)
    print(f"{with_points} of {times} survivors hold points; worst difference {worst:.1e} of scale")
    for text in failures:
        print("FAILED", text)
    sys.exit(1 if failures else 0)


main()
