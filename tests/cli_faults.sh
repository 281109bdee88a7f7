#!/bin/sh
# The program in a world that fails it: full disks, closed streams, small limits, interrupts. Prints "N held, M broken".
BUILD=${BUILD:-build}
PROGRAM=$(cd "$BUILD" && pwd)/scantling
work=$(mktemp -d) || exit 1
trap 'chmod -R u+w "$work"; rm -rf "$work"' EXIT
held=0 broken=0
DEMO=models/demo_roof.json
LONG=models/benchmarks/200bar.json

ok() { # ok WORDS: the last command's verdict
    if [ "$?" = 0 ]; then held=$((held + 1)); else broken=$((broken + 1)); echo "broken: $1"; fi
}
is() { # is EXPECTED CODE WORDS
    [ "$1" = "$2" ] || echo "exit code $2, expected $1: $(head -n 3 "$work/err")"
    [ "$1" = "$2" ]
    ok "$3"
}
says() { grep -qF -- "$1" "$work/err"; ok "standard error says: $1"; }
untouched() { # untouched FOLDER: four old files, nothing beside them
    [ "$(cat "$1"/* | sort | uniq -c | tr -s ' ')" = " 4 old" ] && [ "$(ls -A "$1" | wc -l)" = 4 ]
    ok "the old outputs are untouched: $2"
}
old_outputs() {
    rm -rf "$1"
    mkdir "$1"
    for file in result.json schedule.csv drawing.svg model.json; do echo old >"$1/$file"; done
}

"$PROGRAM" size $DEMO -o "$work/good" >"$work/summary" 2>"$work/err"
is 0 $? "a run without fault"
SIZED=$work/good/model.json

# ---- streams -----------------------------------------------------------------------------------------------------
full() { # full ARGUMENTS: standard output on a full disk, closed, and a pipe whose reader is gone
    "$PROGRAM" "$@" >/dev/full 2>"$work/err"
    is 6 $? "full disk: $*"
    says "standard output cannot be written"
    "$PROGRAM" "$@" >&- 2>"$work/err"
    is 6 $? "closed standard output: $*"
    { "$PROGRAM" "$@" 2>"$work/err"; echo $? >"$work/code"; } | true
    code=$(cat "$work/code")
    [ "$code" = 6 ] || [ "$code" = 0 ] # all may have gone into the pipe before its reader left
    ok "a reader that goes away: $* ($code)"
}
full --help
full --version
full size --help
full size $DEMO
full size $DEMO --json
full check "$SIZED"
full explain "$SIZED" --member T4
"$PROGRAM" size $DEMO 2>/dev/full | cmp -s - "$work/summary"
ok "a full disk behind standard error changes nothing"
"$PROGRAM" size $DEMO 2>&- | cmp -s - "$work/summary"
ok "nor does a closed standard error"
"$PROGRAM" size $DEMO -o "$work/closed" --quiet <&- >&- 2>&-
ok "all three streams closed, nothing to print"
for file in result.json schedule.csv drawing.svg model.json; do
    cmp -s "$work/closed/$file" "$work/good/$file"
    ok "and $file is whole"
done
"$PROGRAM" size - <&- >"$work/out" 2>"$work/err"
is 3 $? "a model on a closed standard input"
says "<stdin>: error: cannot be"
"$PROGRAM" size - </dev/null >"$work/out" 2>"$work/err"
is 3 $? "an empty standard input"
for kind in file pipe; do
    if [ $kind = file ]; then "$PROGRAM" size $DEMO -o "$work/$kind" >"$work/out" 2>&1
    else cat $DEMO | "$PROGRAM" size - -o "$work/$kind" 2>&1 | cat >"$work/out"; fi
    cmp -s "$work/out" "$work/summary"
    ok "same summary by $kind"
    cmp -s "$work/$kind/result.json" "$work/good/result.json"
    ok "same result by $kind"
done

# ---- folders ------------------------------------------------------------------------------------------------------
# Root may write anywhere: the permissions are tried as nobody, where that can be done.
as_nobody=
if [ "$(id -u)" = 0 ] && command -v setpriv >/dev/null 2>&1 && setpriv --reuid=65534 --regid=65534 --clear-groups true 2>/dev/null; then
    as_nobody="setpriv --reuid=65534 --regid=65534 --clear-groups"
    chmod 755 "$work"
fi
if [ "$(id -u)" != 0 ] || [ -n "$as_nobody" ]; then
    cp "$PROGRAM" "$work/program" && cp $DEMO "$work/demo.json" && chmod a+rx "$work/program" && chmod a+r "$work/demo.json"
    old_outputs "$work/locked"
    chmod 555 "$work/locked"
    $as_nobody "$work/program" size "$work/demo.json" -o "$work/locked" --force >"$work/out" 2>"$work/err"
    is 6 $? "a folder that is read only"
    says "cannot be written to: Permission denied"
    [ ! -s "$work/out" ]
    ok "told before the work: nothing is printed"
    untouched "$work/locked" "read only"
    $as_nobody "$work/program" size "$work/demo.json" -o "$work/locked/new" >"$work/out" 2>"$work/err"
    is 6 $? "a new folder in it"
    chmod 000 "$work/demo.json"
    $as_nobody "$work/program" size "$work/demo.json" >"$work/out" 2>"$work/err"
    is 3 $? "a model that may not be read"
    says "cannot be opened: Permission denied"
fi
old_outputs "$work/taken"
rm "$work/taken/model.json"
mkdir -p "$work/taken/model.json/x"
"$PROGRAM" size $DEMO -o "$work/taken" --force --quiet 2>"$work/err"
is 6 $? "a folder in the place of the last file"
rm -r "$work/taken/model.json"
echo old >"$work/taken/model.json"
untouched "$work/taken" "the first three were taken back"
old_outputs "$work/linked"
rm "$work/linked/result.json"
echo precious >"$work/precious"
ln -s "$work/precious" "$work/linked/result.json"
"$PROGRAM" size $DEMO -o "$work/linked" --force --quiet 2>"$work/err"
is 0 $? "a symbolic link in the place of an output"
[ "$(cat "$work/precious")" = precious ]
ok "is replaced, not followed"
mkdir "$work/two"
for k in 1 2 3 4; do "$PROGRAM" size $DEMO -o "$work/two" --force --quiet 2>"$work/err.$k" & done
wait
for file in result.json schedule.csv drawing.svg model.json; do
    cmp -s "$work/two/$file" "$work/good/$file"
    ok "four runs into one folder at once: $file is whole"
done
[ "$(ls -A "$work/two" | wc -l)" = 4 ]
ok "and nothing is left beside"

# ---- limits -------------------------------------------------------------------------------------------------------
# What `make coverage` counts would be torn by a limit: it goes elsewhere.
uncounted="env GCOV_PREFIX=$work/counters GCOV_ERROR_FILE=/dev/null"
limited() { # limited CODES WORDS LIMIT ARGUMENTS
    codes=$1 words=$2 limit=$3
    shift 3
    (eval "ulimit $limit" && exec $uncounted "$PROGRAM" "$@") >"$work/out" 2>"$work/err"
    code=$?
    case " $codes " in *" $code "*) true ;; *) echo "exit code $code: $(head -n 2 "$work/err")"; false ;; esac
    ok "$words ($code)"
}
for blocks in 0 1 20; do
    old_outputs "$work/files"
    limited 6 "files of $blocks blocks at most" "-f $blocks" size $DEMO -o "$work/files" --force --quiet
    [ $blocks = 0 ] || says "File too large" # with 0, standard error may not grow either
    untouched "$work/files" "file size limit"
done
limited 0 "one file handle at a time" "-n 4" size $DEMO -o "$work/handles" --quiet
case $BUILD in
*sanitize*) ;; # a sanitizer takes terabytes of addresses and a stack of its own
*)
    limited 0 "a stack of 256 kB" "-s 256" size $DEMO
    cmp -s "$work/out" "$work/summary"
    ok "gives the same"
    python3 - "$work" <<'END'
import json, sys
deep = '[' * 100000
open(sys.argv[1] + '/deep.json', 'w').write(deep)
n = 4000
joints = {"J%d" % i: {"at": [i // 2, i % 2]} for i in range(n)}
joints["J0"]["support"] = joints["J1"]["support"] = ["x", "y"]
ends = [(0, 1)] + [e for i in range(0, n - 2, 2) for e in ((i, i + 2), (i + 1, i + 3), (i, i + 3), (i + 2, i + 3))]
members = {"M%d" % k: {"from": "J%d" % a, "to": "J%d" % b, "group": "all"} for k, (a, b) in enumerate(ends)}
json.dump({"scantling": 1, "dimensions": 2, "units": {"length": "m", "force": "kN", "stress": "MPa"},
           "materials": {"S": {"E": 210000, "density": "7850 kg/m3", "allowable": {"tension": 140, "compression": 140}}},
           "joints": joints, "groups": {"all": {"material": "S", "area": "1 m2"}}, "members": members,
           "cases": {"load": {"action": "other", "joints": {"J%d" % (n - 1): [0, -1e-6]}}},
           "combinations": {"load": {"for": "allowable", "sum": {"load": 1}}},
           "limits": {"buckling": {"by": "none"}}}, open(sys.argv[1] + '/large.json', 'w'))
END
    limited "3" "100,000 brackets on a small stack" "-s 256" size "$work/deep.json"
    for megabytes in 64 128 256; do
        limited 0 "$megabytes MB of addresses" "-v $((megabytes * 1024))" size $DEMO --quiet
        limited "0 1 4 7" "$megabytes MB for 8,000 members" "-v $((megabytes * 1024))" check "$work/large.json" --quiet
    done
    # from what the loader alone takes upwards, somewhere within the run memory ends
    for kilobytes in 28 30 32 33 34 35 36 37 38 39 40 42 44; do
        (ulimit -v $((kilobytes * 1024)) && exec $uncounted "$PROGRAM" --version) >/dev/null 2>&1 || continue
        old_outputs "$work/tight"
        (ulimit -v $((kilobytes * 1024)) && exec $uncounted "$PROGRAM" check "$work/large.json" -o "$work/tight" --force --quiet) >"$work/out" 2>"$work/err"
        code=$?
        case $code in
        7) untouched "$work/tight" "$kilobytes MB" ;;
        0 | 1 | 4) true; ok "$kilobytes MB: done" ;;
        *) echo "exit code $code: $(head -n 2 "$work/err")"; false; ok "$kilobytes MB of addresses" ;;
        esac
    done
    ;;
esac

# ---- interrupts ---------------------------------------------------------------------------------------------------
# At moments all over a run: outputs are all there or none, the exit code tells; a second interrupt ends at once.
moments=${SCT_TEST_FULL:+50}
moments=${moments:-12}
bad=0 stopped=0
k=0
while [ $k -lt "$moments" ]; do
    k=$((k + 1))
    signal=INT code_expected=130
    [ $((k % 2)) = 0 ] && signal=TERM code_expected=143
    rm -rf "$work/stopped"
    delay=$(awk "BEGIN { x = ($k * 0.6180339887) % 1; print x * x * 0.6 }")
    "$PROGRAM" size $LONG --starts 12 -o "$work/stopped" >"$work/out" 2>"$work/err" &
    pid=$!
    sleep "$delay"
    kill -$signal $pid 2>/dev/null
    [ $((k % 3)) = 0 ] && kill -$signal $pid 2>/dev/null
    wait $pid
    code=$?
    files=$(ls -A "$work/stopped" 2>/dev/null | tr '\n' ' ')
    case $code in
    "$code_expected") stopped=$((stopped + 1)) ;;
    0 | 1 | 5) ;; # it was faster
    *) bad=$((bad + 1)); echo "after $delay s: exit code $code" ;;
    esac
    case $files in
    "drawing.svg model.json result.json schedule.csv ") tail -n 1 "$work/stopped/model.json" | grep -q '^}' ;;
    "") [ $code = "$code_expected" ] ;;
    *) false ;;
    esac || { bad=$((bad + 1)); echo "after $delay s: code $code, outputs: $files"; }
done
[ $bad = 0 ]
ok "interrupts at $moments moments"
[ $stopped -gt 0 ]
ok "some of them in time"
echo "measured: $stopped of $moments interrupts came in time; no half set of outputs"
"$PROGRAM" size $LONG --starts 1000 -o "$work/twice" >"$work/out" 2>"$work/err" &
pid=$!
sleep 0.3
kill -INT $pid
kill -INT $pid
wait $pid
is 130 $? "a second interrupt"

echo "$held held, $broken broken"
[ "$broken" = 0 ]
