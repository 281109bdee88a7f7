#!/bin/sh
# Every bad input kept in tests/bad_inputs is refused, or told of, with the words that were agreed.
#
# tests/bad_inputs/NAME/        one case
#     model.json                the input, to the byte
#     args                      the command line behind "scantling"; default: size model.json
#     expect                    the exit code, then standard error as it must be
#     expect_stdout_has         lines, each of which standard output must contain
# tests/bad_inputs/good.json    a small model without a fault: the cases below on files, limits and signals start from it
# tests/bad_inputs/families.py  makes the cases that differ from one good model in one value, and the large ones
#
# Each case runs in its folder, where no file may appear. Standard output must be empty where there is no result (exit codes 2, 3, 4, 6, 7 and 70).
cd "$(dirname "$0")/.." || exit 1
root=$(pwd)
program=${BUILD:-build}/scantling
case $program in /*) ;; *) program=$root/$program ;; esac
[ -x "$program" ] || { echo "$program is missing: make it first"; exit 1; }
[ -n "$SCT_GUARDED" ] || SCT_GUARDED=1 exec timeout 1800 sh tests/cli_bad_inputs.sh # one watch over all, and a CPU limit on each case
ulimit -t 10
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

# same_lines FILE OTHER: is OTHER what FILE holds behind its first line?
same_lines() {
    same=true
    exec 3<"$1" 4<"$2"
    read -r _ <&3
    while IFS= read -r line <&3; do
        IFS= read -r other <&4 && [ "$line" = "$other" ] || same=false
    done
    read -r other <&4 && same=false
    exec 3<&- 4<&-
    $same
}

# kept FOLDER: one case, run in its folder.
kept() {
    cd "$1" || exit 1
    name=${1##*/} args='size model.json'
    [ -f args ] && read -r args <args
    before=$(files)
    eval "\"\$program\" $args" >"$out" 2>"$err" </dev/null
    code=$?
    read -r expected <expect
    after=$(files)
    if [ "$code" != "$expected" ] || ! same_lines expect "$err"; then
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

# ---- files, limits and signals: what no folder can hold ----------------------------------------------------------------

# fresh: an empty folder with the good model in it.
fresh() {
    rm -rf "$tmp/run" && mkdir "$tmp/run" && cd "$tmp/run" && cp "$root/tests/bad_inputs/good.json" model.json
}

# says NAME CODE STDERR COMMAND...: the exit code and all of standard error. CODE may be a list: any of them.
says() {
    name=$1 codes=$2 words=$3
    shift 3
    "$@" >"$out" 2>"$err" </dev/null
    code=$?
    case " $codes " in
    *" $code "*) ;;
    *)
        broken_because "$name" "exit code $code, expected $codes; $(head -n 3 "$err")"
        return 1
        ;;
    esac
    if [ "$words" != any ] && [ "$(cat "$err")" != "$words" ]; then
        broken_because "$name" "found: $(cat "$err")"
        return 1
    fi
    held=$((held + 1))
}

# holds $? NAME WHAT: the last test command, as a case of its own.
holds() {
    if [ "$1" = 0 ]; then held=$((held + 1)); else broken_because "$2" "$3"; fi
}

# limited OPTION VALUE COMMAND...: under a limit of the shell. What `make coverage` counts would be torn by it: elsewhere.
limited() {
    (
        ulimit "$1" "$2" || exit 99
        shift 2
        exec env GCOV_PREFIX="$tmp/counters" GCOV_ERROR_FILE=/dev/null "$@"
    )
}

whole='drawing.svg model.json result.json schedule.csv'

fresh
mkdir out && echo mine >out/schedule.csv
says F07-existing-output-is-refused 6 'scantling: error: out/schedule.csv exists already; --force replaces it' \
    "$program" size -o out model.json
[ "$(cat out/schedule.csv)" = mine ] && [ "$(ls -A out)" = schedule.csv ]
holds $? F07-existing-output-stays 'the old output changed, or a new one stands beside it'
says F07-force-replaces 0 '' "$program" size -q --force -o out model.json
[ "$(echo $(ls -A out))" = "$whole" ] && ! grep -q mine out/schedule.csv
holds $? F07-force-replaces-whole "outputs: $(ls -A out 2>&1 | tr "\n" " ")"
cp -r out before
says F07-bad-model-leaves-the-old-outputs 3 any "$program" size --force -o out before/schedule.csv
diff -r out before >/dev/null
holds $? F07-old-outputs-are-the-same-bytes 'a run on a bad model changed outputs'
says F07-bad-model-makes-no-folder 3 any "$program" size -o new before/schedule.csv
[ ! -e new ]
holds $? F07-no-folder-is-left 'a run on a bad model left a folder'
mkdir wall && mkdir wall/result.json
says F07-a-folder-in-the-way 6 any "$program" size --force -o wall model.json
[ "$(ls -A wall)" = result.json ]
holds $? F07-nothing-beside-the-folder-in-the-way "outputs: $(echo $(ls -A wall))"

fresh
if [ "$(id -u)" != 0 ]; then
    mkdir shut && chmod 555 shut
    says F03-read-only-folder 6 'scantling: error: the folder shut cannot be written to: Permission denied' \
        "$program" size -o shut model.json
    chmod 000 model.json
    says F01-unreadable-file 3 'model.json: error: cannot be opened: Permission denied' "$program" size model.json
fi

fresh
for folder in -out 'line
feed' 'ö ü' '%s%n'; do
    says "F08-folder-named-$folder" 0 '' "$program" size -q -o "$folder" model.json
    [ "$(echo $(ls -A "./$folder"))" = "$whole" ] && [ "$(ls -A | wc -l)" -ge 2 ]
    holds $? "F08-outputs-in-$folder" 'outputs are not in the folder'
done

fresh
(sleep 0.2 && "$program" size model.json 2>"$err" || echo $? >code) | true
[ "$(cat code)" = 6 ]
holds $? F06-reader-goes-away "exit code $(cat code), expected 6"

fresh
"$program" size -o a -q --json model.json >a.json && env -i TZ=Asia/Kathmandu LC_ALL=de_DE.UTF-8 HOME=/nowhere \
    "$program" size -o b -q --json model.json >b.json && diff -r a b >/dev/null && cmp -s a.json b.json
holds $? F12-environment-changes-nothing 'outputs differ with another time zone, locale and home'
"$program" size -q -f -o a model.json &
"$program" size -q -f -o a model.json
wait
[ "$(echo $(ls -A a))" = "$whole" ] && diff -r a b >/dev/null
holds $? F11-two-runs-into-one-folder "outputs: $(echo $(ls -A a))"

fresh
cp "$root/models/demo_roof.json" long.json
for moment in 0.05 0.15 0.3; do
    says "F09-interrupt-after-$moment" '0 1 130' any \
        timeout --preserve-status -s INT "$moment" "$program" size -q -f --starts 200 --tolerance 1e-12 -o out long.json
    [ ! -e out ] || [ "$(echo $(ls -A out))" = "$whole" ] || [ -z "$(ls -A out)" ]
    holds $? "F09-outputs-after-$moment" "outputs: $(ls -A out 2>&1 | tr "\n" " ")"
done
says F09-terminate '143' any timeout --preserve-status -s TERM 0.3 "$program" size -q --starts 1000 long.json

fresh
if ! grep -q __asan_init "$program"; then # which reserves much, and opens its own library
    for limit in 65536 131072 262144; do
        says "R02-address-space-of-$limit-kB" '0 7 127' any limited -v $limit "$program" size model.json
    done
    says R07-one-file-handle 0 '' limited -n 4 "$program" size -q -o few model.json
fi
says R03-stack-of-256-kB 0 '' limited -s 256 "$program" size model.json
printf '%0100000d' 0 | tr 0 '[' >deep.json
says R03-depth-on-a-small-stack 3 'deep.json:1:65: error: nested deeper than 64 levels; that is the most that is read' \
    limited -s 256 "$program" size deep.json
says R08-file-size-limit 6 'out/result.json: error: cannot be written: File too large' \
     limited -f 1 "$program" size -q -o out model.json
[ ! -e out ] || ! ls -A out | grep -qv '\.csv$\|\.json$\|\.svg$'
holds $? R08-no-half-file "left: $(ls -A out 2>&1)"

# Numbers come back to the bit from the file that is written: the joint's place as the double nearest to what stood there.
for digits in 17 30 60; do
    fresh
    cp "$tmp/made/N08-$digits-digits/model.json" model.json
    "$program" size -q -o a model.json && "$program" check -q -o b a/model.json && python3 -c 'import json
height = [json.load(open(name))["joints"]["C"]["at"][1] for name in ("model.json", "a/model.json")]
shown = [joint["at_m"][1] for name in "ab" for joint in json.load(open(name + "/result.json"))["joints"]
         if joint["name"] == "C"]
assert len(set(height + shown)) == 1 and len(shown) == 2, (height, shown)' 2>"$err"
    holds $? "N08-$digits-digits-written-and-read-again" "$(tail -n 1 "$err")"
done

# F04: a disk with room for more and more of the four outputs, until all go on it.
fresh
mkdir disk
if [ "$(id -u)" = 0 ] && mount -t tmpfs -o size=4k none disk 2>/dev/null; then
    umount disk
    fits=false full=0
    for kilobytes in 4 8 12 16 20 24 28 32 40 48 64; do
        $fits && break
        mount -t tmpfs -o size=${kilobytes}k none disk
        "$program" size -q -o disk model.json 2>"$err"
        code=$?
        left=$(ls -A disk)
        umount disk
        if [ $code = 0 ]; then
            fits=true
        else
            [ $code = 6 ] && [ -z "$left" ] && grep -q 'error: cannot be written: No space left on device$' "$err"
            holds $? "F04-full-disk-of-$kilobytes-kB" "exit code $code, left: $left; $(cat "$err")"
            full=$((full + 1))
        fi
    done
    $fits && [ $full -ge 3 ]
    holds $? F04-disks-of-every-size "$full of the disks were full"
else
    echo "skipped: F04 a disk that is truly full: only root can mount a small one"
fi

# R04: refused before the memory is taken, with the figures; and a million joints with three million members.
fresh
python3 -c 'n = 800
print("{\"scantling\":1,\"dimensions\":2,\"units\":{\"length\":\"m\",\"force\":\"kN\",\"stress\":\"MPa\"},")
print("\"materials\":{\"s\":{\"E\":210000,\"density\":\"7850 kg/m3\",\"yield\":235,\"allowable\":{\"tension\":140,\"compression\":140}}},")
held = ",\"support\":[\"x\",\"y\"]"
print("\"joints\":{" + ",".join("\"%d\":{\"at\":[%d,%d]%s}" % (i, i // 2, i % 2, held if i in (0, 2 * n) else "")
      for i in range(2 * n + 2)) + "},")
ends = [(2 * i + a, 2 * i + b) for i in range(n) for a, b in ((0, 1), (0, 2), (1, 3), (0, 3))] + [(2 * n, 2 * n + 1)]
area = "{\"material\":\"s\",\"area\":{\"at_least\":\"1 mm2\",\"at_most\":\"1e5 mm2\"},\"second_moment\":{\"c\":1}}"
print("\"groups\":{" + ",".join("\"%d\":%s" % (e, area) for e in range(len(ends))) + "},")
print("\"members\":{" + ",".join("\"%d\":{\"from\":\"%d\",\"to\":\"%d\",\"group\":\"%d\"}" % (e, a, b, e)
      for e, (a, b) in enumerate(ends)) + "},")
print("\"cases\":{\"P\":{\"joints\":{\"%d\":[0,-1]}}}," % n)
print("\"combinations\":{\"S\":{\"for\":\"allowable\",\"sum\":{\"P\":1}}},\"limits\":{\"buckling\":{\"by\":\"Euler\",\"safety\":2}}}")
' >groups.json
if ! grep -q __asan_init "$program"; then
    says R04-more-memory-than-there-is 7 any limited -v 300000 "$program" size groups.json
    grep -q '^groups.json: error: the model is too large: 3200 unknowns and 3201 sized groups need about [0-9]* MB of memory ([0-9]* MB for the factor of the stiffness matrix, [0-9]* MB for the search); at most 276 MB may be taken here$' "$err"
    holds $? R04-the-estimate-is-told "$(cat "$err")"
fi
{
    echo '{"scantling":1,"joints":{'
    seq 1000000 | sed 's/.*/"&":{"at":[&,0]},/'
    echo '"0":{"at":[0,0]}},"members":{'
    seq 3000000 | sed 's/.*/"&":{"from":"&","to":"0","group":"all"},/'
} 2>/dev/null | "$program" size - >"$out" 2>"$err"
[ "$(cat "$err")" = '<stdin>: error: the file is larger than 67108864 bytes, the most that is read' ] && [ ! -s "$out" ]
holds $? R04-a-million-joints "$(cat "$err")"
cd "$root" || exit 1

echo
echo "$held held, $broken broken"
[ "$broken" = 0 ]
