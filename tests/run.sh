#!/bin/sh
# Runs the test programs given and every tests/cli_*.sh; judges by what was counted, not by exit codes alone.
# CHOLMOD's OpenMP and the test runner's fork do not go together: one thread.
export OMP_THREAD_LIMIT=1 OPENBLAS_NUM_THREADS=1 LC_ALL=C
export UBSAN_OPTIONS=print_stacktrace=1
export CK_DEFAULT_TIMEOUT="${CK_DEFAULT_TIMEOUT:-60}" # [s] the usual 4 are too few on a busy machine
passed=0 failed=0
log=$(mktemp) || exit 1
trap 'rm -f "$log"' EXIT
for program in "$@"; do
    "$program" >"$log" 2>&1
    code=$?
    line=$(grep -E '^[0-9]+%: Checks: [0-9]+, Failures: [0-9]+, Errors: [0-9]+$' "$log" | tail -n 1)
    checks=$(echo "$line" | sed -n 's/.*Checks: \([0-9]*\),.*/\1/p')
    bad=$(echo "$line" | sed -n 's/.*Failures: \([0-9]*\), Errors: \([0-9]*\)/\1 + \2/p')
    if [ -z "$checks" ] || [ "$checks" = 0 ]; then
        echo "FAIL $(basename "$program"): no test was counted (exit code $code)"
        cat "$log"
        failed=$((failed + 1))
        continue
    fi
    bad=$((${bad:-1}))
    passed=$((passed + checks - bad))
    failed=$((failed + bad))
    [ "$bad" = 0 ] && [ "$code" != 0 ] && failed=$((failed + 1))
    if [ "$bad" = 0 ] && [ "$code" = 0 ]; then
        printf 'ok   %-28s %4d\n' "$(basename "$program")" "$checks"
        grep -E '^(measured|skipped):' "$log"
    else
        printf 'FAIL %-28s %4d of %d (exit code %d)\n' "$(basename "$program")" "$bad" "$checks" "$code"
        cat "$log"
    fi
done
for script in tests/cli_*.sh; do
    sh "$script" >"$log" 2>&1
    code=$?
    line=$(grep -E '^[0-9]+ held, [0-9]+ broken$' "$log" | tail -n 1)
    held=$(echo "$line" | sed -n 's/^\([0-9]*\) held.*/\1/p')
    broken=$(echo "$line" | sed -n 's/.* \([0-9]*\) broken$/\1/p')
    if [ -z "$held" ] || [ "$held" = 0 ]; then
        echo "FAIL $(basename "$script"): no test was counted (exit code $code)"
        cat "$log"
        failed=$((failed + 1))
        continue
    fi
    passed=$((passed + held))
    failed=$((failed + broken))
    [ "$broken" = 0 ] && [ "$code" != 0 ] && failed=$((failed + 1))
    if [ "$broken" = 0 ] && [ "$code" = 0 ]; then
        printf 'ok   %-28s %4d\n' "$(basename "$script")" "$held"
        grep -E '^(measured|skipped):' "$log"
    else
        printf 'FAIL %-28s %4d of %d\n' "$(basename "$script")" "$broken" "$((held + broken))"
        cat "$log"
    fi
done
echo
echo "$passed passed, $failed failed"
[ "$failed" = 0 ]
