#!/usr/bin/env bash
# How the processor time grows with lots, routes and draws, over three sizes each, and the most memory
# that the demonstration takes with 200 to 20 000 draws, and twenty lots with 10 000. The tests count bytes
# in place of time.
set -euo pipefail
cd "$(dirname "$0")/.."
go test ./internal/study -run EffortGrows -growth-timed -count 1 -v | grep growth_test
work=$(mktemp -d)
trap 'rm -rf "$work"' EXIT
go build -o "$work/parch" ./cmd/parch
measure() {
	python3 - "$@" <<'PY'
import resource, subprocess, sys, time
what, *command = sys.argv[1:]
began = time.monotonic()
subprocess.run(command, check=True, stdout=subprocess.DEVNULL)
used = resource.getrusage(resource.RUSAGE_CHILDREN)
print(f"{what}: {time.monotonic() - began:.1f} s, {used.ru_utime + used.ru_stime:.1f} s of processor time, at most {used.ru_maxrss / 1024:.0f} MiB")
PY
}
for draws in 200 2000 20000; do
	measure "$draws draws" "$work/parch" compare --demo --quiet --force --draws "$draws" --workbook "$work/plan.xlsx"
done
measure "twenty lots, 10000 draws" "$work/parch" compare testdata/twenty-lots.yaml --quiet --draws 10000 --workbook "$work/twenty.xlsx"
