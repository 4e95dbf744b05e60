#!/usr/bin/env bash
# Writes the figures in the documents anew: README.md from the program, docs/validation.md from the tests.
# With --check: fails when a check is listed in docs/validation.md and was not run, or the other way round.
set -euo pipefail
cd "$(dirname "$0")/.."

lines() {
    cargo test --tests --locked -- --nocapture 2>/dev/null |
        grep -oE 'VALIDATION( \| [^|]+){5} \|' | sed 's/^VALIDATION //' | LC_ALL=C sort -u
}

page() {
    cat <<'EOF'
# Validation

Every check of the physics against something outside the project, with the residuals of the last run of `docs/refresh.sh`. The tests
fail when the largest residual exceeds the tolerance. Where the reference numbers come from, and how to make them anew:
`tests/reference/README.md`; libraries and versions stand in the head of each table there.

| check | points | median residual | largest residual | tolerance |
|---|---|---|---|---|
EOF
    echo "$1"
}

if [ "${1:-}" != --check ]; then
    SEAPLUMB_REFRESH=1 cargo test --test readme --locked
fi
found=$(lines)
[ -n "$found" ] || { echo "no validation lines: do the tests pass?" >&2; exit 1; }
names() { sed -n 's/^| \([^|]*\) | [0-9].*/\1/p' | LC_ALL=C sort -u; }
if [ "${1:-}" = --check ]; then
    # Without the real casts their check cannot run.
    diff <(names <docs/validation.md | grep -v 'real casts') <(names <<<"$found" | grep -v 'real casts')
    echo "docs/validation.md lists the checks that ran"
else
    page "$found" >docs/validation.md
fi
