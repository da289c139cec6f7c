#!/usr/bin/env bash
# Measures everything that docs/benchmarks.md tells, and prints its tables: crates/bench/measure.sh [DIR [ROUNDS]]
# Shops are written below DIR (default /tmp/railwright-bench, about 600 MB) and stay there, so that a second run
# need not make them again. ROUNDS (default 5) runs of each command, of which the median counts.
# Needs a Rust toolchain and GNU time (Debian: time). Nothing else should run on the machine meanwhile.
set -euo pipefail
cd "$(dirname "${BASH_SOURCE[0]}")/../.."

shops=${1:-/tmp/railwright-bench}
rounds=${2:-5}
bin=${CARGO_TARGET_DIR:-target}/release
scratch=$(mktemp -d)
trap 'rm -rf "$scratch"' EXIT
sheets=(fixed-12v low-5v darlington-15v adjustable-5-15v impossible)

cargo build --release -p railwright -p bench
mkdir -p "$shops"

# shop NAME OPTION...: makes a shop unless it is there.
shop() {
    local name=$1
    shift
    [ -f "$shops/$name/zeners.csv" ] || "$bin/large-shop" "$shops/$name" "$@"
}

# rows NAME COUNT OPTION...: a shop with so many zeners, amplifiers and transistors.
rows() {
    local name=$1 count=$2
    shift 2
    shop "$name" --zeners "$count" --opamps "$count" --transistors "$count" --heatsinks $((count / 10)) "$@"
}

# median COMMAND...: wall seconds, processor seconds and peak MB of the run with the median wall time.
# An exit status of 1 only says that nothing qualifies.
median() {
    local round status
    : >"$scratch/times"
    for ((round = 0; round < rounds; round++)); do
        status=0
        /usr/bin/time -a -o "$scratch/times" -f '%e %U %S %M' "$@" >"$scratch/out" 2>"$scratch/err" || status=$?
        [ "$status" -le 1 ] || { cat "$scratch/err" >&2; return "$status"; }
    done
    grep -v '^Command' "$scratch/times" | sort -n |
        awk -v middle=$(((rounds + 1) / 2)) 'NR == middle { printf "%.2f %.2f %d", $1, $2 + $3, $4 / 1024 }'
}

printf '%s, commit %s, %s, %s cores\n' "$(date +%F)" "$(git rev-parse --short HEAD)" \
    "$(awk -F': ' '/^model name/ { print $2; exit }' /proc/cpuinfo)" "$(nproc)"

printf '\n## The whole tool, 100 000 rows a catalog\n\n'
rows rows-100000 100000
printf '| sheet | wall s | processor s | peak MB | times `csv-only` |\n|---|---|---|---|---|\n'
for sheet in "${sheets[@]}"; do
    read -r wall processor peak <<<"$(median "$bin/railwright" shortlist "$shops/rows-100000/$sheet.toml" \
        --catalogs "$shops/rows-100000" --top 20 --quiet)"
    read -r alone _ _ <<<"$(median "$bin/csv-only" "$shops/rows-100000")"
    printf '| `%s` | %s | %s | %s | %s |\n' "$sheet" "$wall" "$processor" "$peak" \
        "$(awk -v a="$wall" -v b="$alone" 'BEGIN { printf "%.1f", (b > 0 ? a / b : 0) }')"
done
printf '\n`csv-only`, inside the process: '
"$bin/csv-only" "$shops/rows-100000" --rounds 7

printf '\n## The whole tool by size: the list, the front\n\n'
printf '| rows a catalog | sheet | list s | front s | rows of the front |\n|---|---|---|---|---|\n'
for count in 100 1000 10000 100000; do
    rows "rows-$count" "$count"
    for sheet in fixed-12v adjustable-5-15v; do
        read -r list _ _ <<<"$(median "$bin/railwright" shortlist "$shops/rows-$count/$sheet.toml" \
            --catalogs "$shops/rows-$count" --top 20 --quiet)"
        read -r front _ _ <<<"$(median "$bin/railwright" shortlist "$shops/rows-$count/$sheet.toml" \
            --catalogs "$shops/rows-$count" --front --quiet --out "$scratch/front.csv" --overwrite)"
        printf '| %s | `%s` | %s | %s | %s |\n' "$count" "$sheet" "$list" "$front" \
            "$(($(wc -l <"$scratch/front.csv") - 1))"
    done
done

printf '\n## Exact counts, 10 000 rows a catalog (one run)\n\n'
"$bin/stages" "$shops/rows-10000" "$shops/rows-10000/fixed-12v.toml" --count | grep -E '^(shortlist|count)'

printf '\n## Shortages, 1 000 designs, 10 000 rows a catalog: wall s, processor s, peak MB\n\n'
[ -d "$shops/designs/designs" ] || "$bin/large-designs" "$shops/designs"
# used KEY: the part that most designs have in a slot.
used() { grep -h "^$1 " "$shops"/designs/designs/*.toml | sort | uniq -c | sort -rn | awk -F'"' 'NR == 1 { print $2 }'; }
for part in "$(used zener)" "$(used amplifier)" "$(used pass)" "$(used heatsink)" "$(used divider_line)" --exposed; do
    printf '%s: %s\n' "$part" "$(median "$bin/railwright" shortage "$part" --designs "$shops/designs/designs" \
        --catalogs "$shops/designs" --quiet)"
done

printf '\n## Hard shops: the list of ten (one run each)\n\n'
for kind in ties undominated last-check mixed-reasons one-check; do
    for count in 1000 3000 10000; do
        rows "hard-$kind-$count" "$count" --hard "$kind" --pots 20
        for sheet in fixed-12v darlington-15v adjustable-5-15v; do
            printf '%s, %s rows, %s: ' "$kind" "$count" "$sheet"
            "$bin/stages" "$shops/hard-$kind-$count" "$shops/hard-$kind-$count/$sheet.toml" |
                sed -n 's/^shortlist *//p' | cut -c 1-90
        done
    done
done

printf '\n## A peer: joins of a database\n\n'
python=${RAILWRIGHT_PYTHON:-python3}
if "$python" -c 'import duckdb' 2>/dev/null; then
    for count in 100 300; do
        shop "peer-$count" --zeners "$count" --opamps "$count" --transistors "$count" \
            --heatsinks $((count / 10)) --pots 10
        for sheet in fixed-12v low-5v; do
            printf '%s rows, %s\n' "$count" "$sheet"
            "$bin/peer-tables" "$shops/peer-$count" "$shops/peer-$count/$sheet.toml" "$scratch/tables-$count-$sheet"
            "$python" crates/bench/peer/duckdb_join.py "$scratch/tables-$count-$sheet"
        done
    done
else
    printf 'left out: %s has no package duckdb (pip install duckdb)\n' "$python"
fi

printf '\n## Stages, with criterion\n\n'
cargo bench -p bench --bench stages 2>/dev/null | grep -E 'time:|^[a-z-]+/'
