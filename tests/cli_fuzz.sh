#!/bin/sh
# The kept inputs of the fuzzers hold; in full runs with clang, a minute of fresh fuzzing for each. "N held, M broken".
BUILD=${BUILD:-build}
held=0 broken=0
ok() {
    if [ "$?" = 0 ]; then held=$((held + 1)); else broken=$((broken + 1)); echo "broken: $1"; fi
}
for fuzzer in gate reader analysis; do
    "$BUILD/tests/fuzz_$fuzzer" tests/fuzz/corpus/$fuzzer >"$BUILD/fuzz.log" 2>&1
    ok "kept inputs of $fuzzer: $(tail -n 5 "$BUILD/fuzz.log")"
    [ "$(sed -n 's/ inputs$//p' "$BUILD/fuzz.log")" = "$(find tests/fuzz/corpus/$fuzzer -type f | wc -l)" ]
    ok "every one of them was run"
    # no input at all, and one byte
    mkdir -p "$BUILD/fuzz_few"
    : >"$BUILD/fuzz_few/empty"
    printf '{' >"$BUILD/fuzz_few/one"
    "$BUILD/tests/fuzz_$fuzzer" "$BUILD/fuzz_few" >/dev/null 2>&1
    ok "an empty input and a byte"
done
if [ -n "$SCT_TEST_FULL" ]; then
    if printf 'int LLVMFuzzerTestOneInput(const char *d, long n) { return d && n < 0; }\n' |
        clang -x c - -fsanitize=fuzzer -o "$BUILD/fuzz_probe" 2>/dev/null; then
        make -s BUILD="$BUILD" FUZZ_SECONDS="${FUZZ_SECONDS:-60}" fuzz
        ok "fresh fuzzing"
    else
        echo "skipped: fresh fuzzing needs clang and libclang-rt-dev"
    fi
fi
echo "$held held, $broken broken"
[ "$broken" = 0 ]
