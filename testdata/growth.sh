#!/usr/bin/env bash
# How the processor time grows with lots, routes and draws, over three sizes each, and the most memory
# that the demonstration takes with 200 to 20 000 draws. The tests count bytes in place of time.
set -euo pipefail
cd "$(dirname "$0")/.."
go test ./internal/study -run EffortGrows -growth-timed -count 1 -v | grep growth_test
work=$(mktemp -d)
trap 'rm -rf "$work"' EXIT
go build -o "$work/parch" ./cmd/parch
for draws in 200 2000 20000; do
	python3 - "$work/parch" "$draws" "$work/plan.xlsx" <<'PY'
import resource, subprocess, sys
program, draws, book = sys.argv[1:]
subprocess.run([program, "compare", "--demo", "--quiet", "--force", "--draws", draws, "--workbook", book], check=True)
used = resource.getrusage(resource.RUSAGE_CHILDREN)
print(f"{draws} draws: {used.ru_utime + used.ru_stime:.2f} s of processor time, at most {used.ru_maxrss / 1024:.0f} MB")
PY
done
