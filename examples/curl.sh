#!/bin/sh
# Sends every example request to a running service and prints the status of each answer beside the expected one.
# Needs curl and jq. Usage: examples/curl.sh [BASE_URL]
set -eu
base="${1:-http://127.0.0.1:8080}"
cd "$(dirname "$0")/requests"

for file in */*.json; do
    status="$(jq --compact-output .request "$file" |
        curl --silent --show-error --output /dev/null --write-out '%{http_code}' --json @- "$base/v1/${file%%/*}")"
    printf '%s (expected %s)  %s: %s\n' "$status" "$(jq .status "$file")" "${file%.json}" "$(jq --raw-output .title "$file")"
done
