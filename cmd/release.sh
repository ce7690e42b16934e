#!/usr/bin/env bash
# Builds parch for all systems it is given out for, the same bytes from the same commit wherever it
# is run with the same Go. Use: cmd/release.sh [FOLDER], by default ./dist. Prints the checksums.
set -euo pipefail
into=$(realpath -m "${1:-dist}")
cd "$(dirname "$0")/.."
mkdir -p "$into"

for system in linux/amd64 linux/arm64 darwin/amd64 darwin/arm64 windows/amd64 windows/arm64; do
	os=${system%/*} arch=${system#*/}
	name=parch-$os-$arch
	[ "$os" != windows ] || name=$name.exe
	CGO_ENABLED=0 GOOS=$os GOARCH=$arch GOFLAGS=-mod=readonly go build -trimpath -ldflags '-s -w -buildid=' -o "$into/$name" ./cmd/parch
done
go list -deps -f '{{with .Module}}{{if not .Main}}{{.Path}} {{.Version}} {{.Dir}}{{end}}{{end}}' ./cmd/parch | sort -u | while read -r module version folder; do
	printf '\n== %s %s\n' "$module" "$version"
	cat "$folder"/[Ll][Ii][Cc][Ee][Nn][SsCc][Ee]*
done | cat LICENSE - >"$into/licences.txt"
cd "$into" && sha256sum parch-* licences.txt
