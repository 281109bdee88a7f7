#!/bin/sh
# The library example compiles against the static and the shared library and sizes the demo. Prints "N held, M broken".
BUILD=${BUILD:-build}
work=$(mktemp -d) || exit 1
trap 'rm -rf "$work"' EXIT
held=0 broken=0
ok() {
    if [ "$?" = 0 ]; then held=$((held + 1)); else broken=$((broken + 1)); echo "broken: $1"; fi
}
flags=${SAN:-} # what the library was built with
# shellcheck disable=SC2086 # the flags are several words
${CC:-cc} -std=c11 -Wall -Wextra -Werror $flags examples/size_a_truss.c -Iinclude "$BUILD/libscantling.a" -lcholmod -lamd -lcjson -lm -o "$work/static"
ok "it compiles with the static library"
"$work/static" models/demo_roof.json >"$work/out" 2>"$work/err"
ok "and runs"
grep -q "Every limit is kept" "$work/out" && grep -q "Preliminary sizing only" "$work/out"
ok "and prints the finding and the caution"
[ ! -s "$work/err" ]
ok "and nothing else"
# shellcheck disable=SC2086
${CC:-cc} -std=c11 $flags examples/size_a_truss.c -Iinclude -L"$BUILD" -lscantling -o "$work/shared"
ok "it links with the shared library"
ln -s "$(cd "$BUILD" && pwd)/libscantling.so" "$work/libscantling.so.0"
LD_LIBRARY_PATH=$work "$work/shared" models/demo_roof.json | cmp -s - "$work/out"
ok "and prints the same"
"$work/static" no-such-file.json >"$work/out" 2>"$work/err"
[ "$?" = 3 ] && grep -q "cannot be opened" "$work/err"
ok "a file that is not there is told"
echo '#include "scantling.h"' >"$work/only.cpp"
if command -v g++ >/dev/null 2>&1; then
    g++ -Wall -Wextra -Werror -Iinclude -fsyntax-only "$work/only.cpp"
    ok "the header stands alone in C++"
fi
echo "$held held, $broken broken"
[ "$broken" = 0 ]
