#!/usr/bin/env bash
# The tests that the everyday run keeps small, at their full size (about an hour on two cores).
# Usage: tests/full_size.sh BUILD_FOLDER
# SPDX-License-Identifier: MIT
set -euo pipefail
build=${1:-build}
BANDWRIGHT_ERROR_BAR_SEEDS=100 "$build/bin/test_convergence" --gtest_filter='ErrorBars.*'

# 1000 structures drawn without regard for reason, on two cores.
BANDWRIGHT_TORTURE_SEEDS=1-500 "$build/bin/test_torture" --gtest_filter='Torture.*' &
BANDWRIGHT_TORTURE_SEEDS=501-1000 "$build/bin/test_torture" --gtest_filter='Torture.*'
wait $!
# A run of more than two minutes, killed 30 times.
root=$(cd "$(dirname "$0")/.." && pwd)
program=$(cd "$build" && pwd)/bin/bandwright
folder=$(mktemp -d)
trap 'rm -rf "$folder"' EXIT
cd "$folder"
/usr/bin/python3 "$root/tests/torture/kill_and_resume.py" "$program" "$root/tests/torture/floating-stack.json" KILL 30 \
  --from=0 --to=-550 --points=420
