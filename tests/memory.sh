#!/bin/sh
# The test programs given, under valgrind: no access to what is not ours, nothing used before it is set, nothing lost. Only
# valgrind's verdict counts here, since it computes long double with 64 bits and some tests ask for more.
# Prints "measured:" with what was run.
command -v valgrind >/dev/null 2>&1 || { echo "skipped: valgrind is not installed"; exit 0; }
export OMP_THREAD_LIMIT=1 OPENBLAS_NUM_THREADS=1 LC_ALL=C CK_DEFAULT_TIMEOUT=1200 CK_VERBOSITY=minimal
unset SCT_TEST_FULL # the long versions take hours here
work=$(mktemp -d) || exit 1
trap 'rm -rf "$work"' EXIT
programs=0 bad=0
for program in "$@"; do
    case $program in
    */test_faults | */test_memory) continue ;; # have a malloc of their own, and count what is lost themselves
    */test_benchmarks | */test_large) continue ;; # hours
    esac
    valgrind -q --leak-check=full --errors-for-leak-kinds=definite,indirect --error-exitcode=99 --log-file="$work/log.%p" \
        "$program" >"$work/told" 2>&1
    programs=$((programs + 1))
    cat "$work"/log.* >"$work/log" 2>/dev/null
    rm -f "$work"/log.*
    if [ -s "$work/log" ]; then
        bad=$((bad + 1))
        echo "FAIL $(basename "$program") under valgrind"
        head -n 40 "$work/log"
    else
        echo "ok   $(basename "$program") under valgrind"
    fi
done
echo "measured: $programs test programs under valgrind, $bad with errors of memory"
[ "$bad" = 0 ]
