#!/usr/bin/env bash
# Solves the same problems here and in Python (Debian: python3-numpy, python3-scipy, python3-openpyxl,
# python3-xlsxwriter), holds the answers together and prints the ratio of the times.
# Use: testdata/reference/bench.sh [RUNS], by default 3.
set -euo pipefail
cd "$(dirname "$0")/../.."
work=$(mktemp -d)
trap 'rm -rf "$work"' EXIT
go build -o "$work/reference" ./testdata/reference
export TMPDIR="$work"
export GOGC=400 # as the program sets it for itself
/usr/bin/python3 testdata/reference/reference.py "$work/reference" "${1:-3}"
