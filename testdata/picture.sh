#!/usr/bin/env bash
# Makes testdata/decision.png, the picture in the README, from the demonstration's
# workbook. Needs LibreOffice and pdftoppm.
set -euo pipefail
here=$(cd "$(dirname "$0")" && pwd)
work=$(mktemp -d)
trap 'rm -rf "$work"' EXIT
cd "$here/.."
go run ./cmd/parch compare --demo --quiet --workbook "$work/demo.xlsx"
soffice "-env:UserInstallation=file://$work/profile" --headless --convert-to pdf --outdir "$work" "$work/demo.xlsx" >/dev/null
page=$(pdftotext "$work/demo.pdf" - | awk 'BEGIN { RS = "\f" } /^Decision/ && !page { page = NR } END { print page }')
pdftoppm -r 90 -f "$page" -l "$page" -singlefile -png "$work/demo.pdf" "$here/decision"
