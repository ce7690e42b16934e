#!/bin/sh
# Holds the settings found for 200 random jobs against a dense grid over all settings.
# It takes some minutes; the tests do it for a few jobs and a coarser grid.
set -eu
cd "$(dirname "$0")/.."
PARCH_OPTIMALITY="${1:-200}" go test ./internal/search -run TestTunedAgainstADenseGrid -timeout 120m -count 1 -v
