#!/bin/sh
# Whole cold processes: time and peak memory of issuing and checking, by GNU time.
# Usage: cargo build --release && sh benches/whole.sh [RUNS]
set -eu
cd "$(dirname "$0")/.."
wl=${WITNESSLINE:-target/release/witnessline}
runs=${1:-40}
work=$(mktemp -d)
trap 'rm -rf "$work"' EXIT

# measure NAME COMMAND...: least and median wall time of RUNS processes, peak memory of the largest.
measure() {
    name=$1
    shift
    i=0
    while [ "$i" -lt "$runs" ]; do
        rm -rf "$work/out"
        start=$(date +%s%N)
        /usr/bin/time -a -o "$work/mem" -f '%M' "$@" >/dev/null 2>"$work/err" || {
            # 1: issued, with findings. Anything above is no measurement.
            [ $? -eq 1 ] || { cat "$work/err" >&2; exit 1; }
        }
        end=$(date +%s%N)
        echo $(((end - start) / 1000)) >>"$work/us"
        i=$((i + 1))
    done
    kb=$(grep -E '^[0-9]+$' "$work/mem" | sort -n | tail -1)
    sort -n "$work/us" | awk -v n="$name" -v kb="$kb" \
        '{ t[NR] = $1 } END { printf "%-34s least %8.1f ms  median %8.1f ms  peak %7.1f MB\n",
          n, t[1] / 1000, t[int((NR + 1) / 2)] / 1000, kb / 1024 }'
    rm -f "$work/us" "$work/mem"
}

spec=specs/bearing-housing.toml
# The same part on the largest sheet.
sed 's/^sheet .*/sheet = "A0"/' "$spec" >"$work/a0.toml"
measure "process alone (--version)" "$wl" --version
measure "issue --as svg" "$wl" issue "$spec" --as svg --to "$work/out"
measure "check" "$wl" check "$spec"
runs=$(((runs + 3) / 4))
measure "issue --as png --dpi 300 (A2)" "$wl" issue "$spec" --as png --dpi 300 --to "$work/out"
measure "issue --as png --dpi 300 (A0)" "$wl" issue "$work/a0.toml" --as png --dpi 300 --to "$work/out"
