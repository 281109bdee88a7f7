#!/bin/sh
# Fresh fuzzing with libFuzzer, FUZZ_SECONDS for each fuzzer named, from the kept inputs on. What is found stays in
# BUILD/fuzz_found: mend it, and keep the input in tests/fuzz/corpus.
BUILD=${BUILD:-build} found=${BUILD:-build}/fuzz_found bad=0
mkdir -p "$found"
for fuzzer in "$@"; do
    mkdir -p "$BUILD/fuzz_new/$fuzzer"
    log=$BUILD/fuzz_$fuzzer.log
    if "$BUILD/libfuzzer/fuzz_$fuzzer" "$BUILD/fuzz_new/$fuzzer" "tests/fuzz/corpus/$fuzzer" -max_total_time="${FUZZ_SECONDS:-60}" \
        -max_len=4096 -timeout=10 -rss_limit_mb=1024 -print_final_stats=1 -artifact_prefix="$found/$fuzzer-" >"$log" 2>&1; then
        echo "measured: $fuzzer: $(sed -n 's/^stat::number_of_executed_units: //p' "$log") executions, nothing found"
    else
        bad=$((bad + 1))
        echo "broken: $fuzzer"
        grep -v '^#' "$log" | head -n 60
    fi
done
[ $bad = 0 ]
