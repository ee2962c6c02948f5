#!/usr/bin/env bash
# The tests that the everyday run keeps small, at their full size. Usage: tests/full_size.sh BUILD_FOLDER
# SPDX-License-Identifier: MIT
set -euo pipefail
build=${1:-build}
BANDWRIGHT_ERROR_BAR_SEEDS=100 "$build/bin/test_convergence" --gtest_filter='ErrorBars.*'
