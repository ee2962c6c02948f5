#!/usr/bin/env python3
# A run killed at evenly spaced moments of its life, each time resumed, against the uninterrupted run.
# Usage: kill_and_resume.py PROGRAM STRUCTURE KILLS RUN_OPTIONS...   (in an empty folder)
# SPDX-License-Identifier: MIT
import os, signal, subprocess, sys, time

import h5py
import numpy as np

CHECKPOINT = 10  # seconds before the kill from which every finished point has to be there


def run(program, arguments):
    start = time.monotonic()
    subprocess.run([program] + arguments, check=True, stderr=subprocess.DEVNULL)
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


def main():
    program, structure, kills, options = sys.argv[1], sys.argv[2], int(sys.argv[3]), sys.argv[4:]
    command = ["iv", structure, *options, "--quiet"]
    life = run(program, command + ["-o", "whole.h5"])
    total = len(h5py.File("whole.h5")["bias"])
    print(f"uninterrupted: {life:.1f} s, {total} points")
    failures, with_points, worst = [], 0, 0.0
    for k in range(kills):
        name = f"killed-{k}.h5"
        process = subprocess.Popen([program] + command + ["-o", name], stderr=subprocess.DEVNULL)
        moment = life * (k + 1) / (kills + 1)
        try:
            process.wait(timeout=moment)
        except subprocess.TimeoutExpired:
            process.send_signal(signal.SIGKILL)
            process.wait()
        points = 0
        if os.path.exists(name):
            with h5py.File(name) as file:
                points = int(file.attrs["points_done"])
                if len(file["bias"]) != points:
                    failures.append(f"kill {k}: {len(file['bias'])} biases, points_done {points}")
        with_points += points > 0
        # Points come at an even pace after meshing, so this many were finished CHECKPOINT seconds before.
        resumed_life = run(program, command + ["-o", name, "--resume"])
        difference, complaints = compare("whole.h5", name)
        worst = max(worst, difference)
        failures += [f"kill {k} at {moment:.1f} s: {text}" for text in complaints]
        print(f"kill {k} at {moment:6.1f} s: {points} points there; resumed in {resumed_life:.1f} s, "
              f"differs by {difference:.1e} of scale", flush=True)
        os.remove(name)
        for leftover in os.listdir("."):
            if ".tmp." in leftover:
                os.remove(leftover)
    print(f"{with_points} of {kills} survivors hold points; worst difference {worst:.1e}")
    for text in failures:
        print("FAILED", text)
    if failures:
        sys.exit(1)


main()
