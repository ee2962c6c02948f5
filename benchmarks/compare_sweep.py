# SPDX-License-Identifier: MIT
"""Times the program's bias sweep against the same sweep in NumPy (numpy_sweep.py), each in a process of its own.

    compare_sweep.py PROGRAM [--runs N]

Both solve the same equations on the same mesh at the same 200 biases (sweep-diode.json) on one thread, in turn; the
least time of each counts. The program's is that of its whole process: start-up, reading, meshing, solving, figures,
the file on the disk. The script's is its own figure, without Python's start and the imports, and it is handed the
mesh. The program writes all its fields and figures, the script five fields. Where the program can leave out its error
bars, which solve every bias on coarser meshes too, it does, since the script has none.
"""
import argparse
import json
import os
import re
import subprocess
import sys
import tempfile
from pathlib import Path
from time import perf_counter

import numpy_sweep

HERE = Path(__file__).resolve().parent
ONE_THREAD = {**os.environ, "OMP_NUM_THREADS": "1", "OPENBLAS_NUM_THREADS": "1", "PYTHONDONTWRITEBYTECODE": "1"}


def run(command):
    """Standard output and seconds of a process, which must succeed."""
    start = perf_counter()
    try:
        done = subprocess.run(command, env=ONE_THREAD, capture_output=True, text=True)
    except OSError as trouble:
        sys.exit(f"compare_sweep.py: {trouble}")
    seconds = perf_counter() - start
    if done.returncode:
        sys.exit(f"compare_sweep.py: {' '.join(map(str, command))[:200]}: status {done.returncode}\n{done.stderr}")
    return done.stdout, seconds


def main():
    parser = argparse.ArgumentParser(description=__doc__.splitlines()[0])
    parser.add_argument("program", help="the program's binary")
    parser.add_argument("--runs", type=int, default=10, help="runs of each (default 10)")
    options = parser.parse_args()
    if options.runs < 1:
        parser.error("--runs must be at least 1")

    help_text, _ = run([options.program, "iv", "--help"])
    error_bars = "--no-error-bars" not in help_text
    listed = ",".join(f"{bias:g}" for branch in numpy_sweep.biases() for bias in branch)
    with tempfile.TemporaryDirectory() as folder:
        result, script_result = Path(folder, "program.h5"), Path(folder, "script.h5")
        sweep = [options.program, "iv", HERE / "sweep-diode.json", f"--biases={listed}", "-o", result]
        if not error_bars:
            sweep.append("--no-error-bars")
        script = [sys.executable, HERE / "numpy_sweep.py", result, "-o", script_result, "--compare", result, "--json"]

        table, _ = run(sweep)  # not timed: brings the counts and the mesh
        nodes, iterations = (int(number) for number in re.search(r"(\d+) nodes, (\d+) Newton", table).groups())
        times, script_times = [], []
        for _ in range(options.runs):
            times.append(run([*sweep, "--quiet"])[1])
            outcome = json.loads(run(script)[0])
            script_times.append(outcome["seconds"])

    seconds, script_seconds = min(times), min(script_times)
    per_iteration, script_per_iteration = seconds / iterations, script_seconds / outcome["iterations"]
    if outcome["nodes"] != nodes:
        sys.exit(f"compare_sweep.py: {nodes} nodes in the program, {outcome['nodes']} in the script")
    print(f"200 biases, {nodes} nodes, {options.runs} runs of each, one thread")
    print(f"{'':<10}{'least':>9}{'most':>10}{'iterations':>13}{'per iteration':>16}")
    for name, all_times, count, each in (
        ("program", times, iterations, per_iteration),
        ("script", script_times, outcome["iterations"], script_per_iteration),
    ):
        print(f"{name:<10}{min(all_times):>7.3f} s{max(all_times):>8.3f} s{count:>13}{1e6 * each:>13.1f} us")
    print(f"script / program: {script_seconds / seconds:.2f}, per iteration {script_per_iteration / per_iteration:.2f}")
    print("the program's iterations include those of its meshing", end="")
    print(" and of the coarser meshes of its error bars" if error_bars else "; no error bars")
    for name, (difference, volt, count) in outcome["differences"].items():
        print(f"largest relative difference of currents {name} ({count} points): {difference:.1e} at {volt:g} V")


if __name__ == "__main__":
    main()
