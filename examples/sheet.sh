#!/bin/sh
# Writes the calculation sheet of a spec check beside its request: as a page, and as PDF where a Chromium is found.
# Needs curl, jq and a running service. Usage: examples/sheet.sh REQUEST.json [BASE_URL]
# The file holds a request, or an example with its request inside.
set -eu
file="$1"
base="${2:-http://127.0.0.1:8080}"
page="${file%.json}.html"

jq --compact-output '.request // .' "$file" |
    curl --silent --show-error --fail-with-body --output "$page" --header 'Accept: text/html' --json @- "$base/v1/spec-check" ||
    { cat "$page" >&2; rm -f "$page"; exit 1; }
echo "$page"

for browser in chromium chromium-browser google-chrome; do
    command -v "$browser" >/dev/null || continue
    # The page itself sets margins and page numbers, and fits A4 and Letter: the printer decides.
    "$browser" --headless --no-pdf-header-footer --print-to-pdf="${page%.html}.pdf" \
        "file://$(realpath "$page")" >/dev/null 2>&1 && echo "${page%.html}.pdf"
    exit
done
echo "no Chromium found: open the page in a browser and print it" >&2
