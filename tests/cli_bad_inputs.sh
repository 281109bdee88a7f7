#!/bin/sh
# Every bad input kept in tests/bad_inputs is refused, or told of, with the words that were agreed.
#
# tests/bad_inputs/NAME/        one case
#     model.json                the input, to the byte
#     args                      the command line behind "scantling"; default: size model.json
#     expect                    the exit code, then standard error as it must be
#     expect_stdout_has         lines, each of which standard output must contain
# tests/bad_inputs/families.py  makes the cases that differ from one good model in one value, and the large ones
#
# Each case runs in its folder, where no file may appear. Standard output must be empty where there is no result (exit codes 2, 3, 4, 6, 7 and 70).
cd "$(dirname "$0")/.." || exit 1
root=$(pwd)
program=${BUILD:-build}/scantling
case $program in /*) ;; *) program=$root/$program ;; esac
[ -x "$program" ] || { echo "$program is missing: make it first"; exit 1; }
tmp=$(mktemp -d) || exit 1
trap 'rm -rf "$tmp"' EXIT
trap 'exit 1' HUP INT TERM
export LC_ALL=C OMP_THREAD_LIMIT=1 OPENBLAS_NUM_THREADS=1
export ASAN_OPTIONS=exitcode=99 UBSAN_OPTIONS=exitcode=99
held=0 broken=0
out=$tmp/out err=$tmp/err

# broken_because NAME WORDS: counts and tells.
broken_because() {
    broken=$((broken + 1))
    echo "BROKEN $1: $2"
}

# files: the names in the current folder, as the shell sees them (no program to start: there are many cases).
files() {
    set -- * .[!.]*
    echo "$*"
}

# kept FOLDER: one case, run in its folder.
kept() {
    cd "$1" || exit 1
    name=${1##*/} args='size model.json'
    [ -f args ] && read -r args <args
    before=$(files)
    eval "timeout 10 \"\$program\" $args" >"$out" 2>"$err" </dev/null
    code=$?
    read -r expected <expect
    after=$(files)
    if [ "$code" != "$expected" ] || ! cmp -s -i $((${#expected} + 1)):0 expect "$err"; then
        broken_because "$name" "exit code $code, expected $expected; standard error expected (-), found (+):"
        tail -n +2 expect | diff -U 2 - "$err" | tail -n +3 | cut -c 1-400
    elif [ "$after" != "$before" ]; then
        broken_because "$name" "files before: $before; after: $after"
    elif [ -s "$out" ] && case $code in [23467] | 70) true ;; *) false ;; esac; then
        broken_because "$name" "printed on standard output: $(head -n 1 "$out")"
    elif [ -f expect_stdout_has ] && missing=$(lacks expect_stdout_has); then
        broken_because "$name" "standard output lacks: $missing"
    else
        held=$((held + 1))
    fi
}

# lacks FILE: prints the first line of FILE that is nowhere in standard output; false when there is none.
lacks() {
    while IFS= read -r line; do
        grep -qF -e "$line" "$out" || { echo "$line"; return 0; }
    done <"$1"
    return 1
}

mkdir "$tmp/made"
python3 tests/bad_inputs/families.py "$tmp/made" || { echo "families.py failed"; exit 1; }
for folder in "$root"/tests/bad_inputs/*/expect "$tmp"/made/*/expect; do
    [ -f "$folder" ] && kept "${folder%/expect}"
done

echo
echo "$held held, $broken broken"
[ "$broken" = 0 ]
