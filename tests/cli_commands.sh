#!/bin/sh
# The command line: help, options, outputs, exit codes, the two streams apart. Prints "N held, M broken".
BUILD=${BUILD:-build}
PROGRAM=$(cd "$BUILD" && pwd)/scantling
work=$(mktemp -d) || exit 1
trap 'rm -rf "$work"' EXIT
held=0 broken=0
DEMO=models/demo_roof.json

ok() { # ok WORDS: the last command's verdict
    if [ "$?" = 0 ]; then held=$((held + 1)); else broken=$((broken + 1)); echo "broken: $1"; fi
}
run() { # run EXPECTED_CODE WORDS ARGUMENTS...: streams go to $work/out and $work/err
    expected=$1 words=$2
    shift 2
    "$PROGRAM" "$@" >"$work/out" 2>"$work/err" </dev/null
    code=$?
    [ "$code" = "$expected" ] || echo "exit code $code, expected $expected: $(head -n 3 "$work/err")"
    [ "$code" = "$expected" ]
    ok "$words"
}
says() { grep -qF -- "$1" "$work/err"; ok "standard error says: $1"; }
prints() { grep -qF -- "$1" "$work/out"; ok "standard output prints: $1"; }
silent_out() { [ ! -s "$work/out" ]; ok "standard output is empty"; }
silent_err() { [ ! -s "$work/err" ]; ok "standard error is empty"; }

CAUTION="Preliminary sizing only. A licensed engineer must review it; local codes govern. Connections are not covered."

run 2 "no argument is a usage fault"; silent_out; says "usage: scantling COMMAND"
run 0 "--help" --help; prints "usage: scantling COMMAND"; prints "$CAUTION"; silent_err
run 0 "--version" --version; prints "scantling 0.1.0"; prints "model format 1"
for command in size check explain; do
    run 0 "$command --help" $command --help; prints "usage: scantling $command"; prints "$CAUTION"
    head -n 1 "$work/out" | grep -q "^  scantling $command"; ok "the help of $command begins with an example"
done
run 2 "an unknown command is named" siez "$DEMO"; says 'did you mean "size"?'; silent_out
run 2 "an unknown option is named" size --forse "$DEMO"; says "did you mean --force?"
run 2 "an option without its value" size "$DEMO" -o; says "needs a value"
run 2 "an option given twice" size --seed 1 --seed 2 "$DEMO"; says "--seed is given twice"
run 2 "a model too many" size "$DEMO" other.json; says 'unexpected argument "other.json"'
run 2 "no model" size; says "MODEL is missing"
run 2 "a number that is none" size --starts abc "$DEMO"; says '--starts: found "abc"; expected a whole number'
run 2 "a negative tolerance" size --tolerance -1 "$DEMO"; says "tolerance must be above 0"
run 2 "an infinite tolerance" size --tolerance 1e999 "$DEMO"; says "expected a number"
run 2 "a comma is no point" size --tolerance 0,5 "$DEMO"; says "expected a number"
run 2 "a word that is none" size --progress sometimes "$DEMO"; says "expected one of auto, always, never, json"
run 2 "two combinations in one drawing" size "$DEMO" -o "$work/x" --draw-loads a --draw-deflected b; says "different combinations"
run 2 "two diagrams of two combinations" size "$DEMO" -o "$work/x" --draw-moment a --draw-shear b; says "--draw-moment and --draw-shear name different combinations"
run 2 "a diagram without a folder" size "$DEMO" --draw-axial envelope; says "--draw-axial needs -o"
run 2 "a drawing without a folder" size "$DEMO" --draw-loads "full snow"; says "needs -o"
run 2 "a drawn combination that is none" size "$DEMO" -o "$work/y" --draw-loads "ful snow"; says 'did you mean "full snow"?'
[ -z "$(ls "$work/y" 2>/dev/null)" ]; ok "nothing was written"
run 3 "a file that is not there" size "$work/none.json"; says "cannot be opened: No such file"
run 3 "a folder is no file" size models; says "models: error: cannot be read: Is a directory"

run 0 "size" size "$DEMO" -o "$work/demo"; prints "Every limit is kept"; prints "$CAUTION"; silent_err
for file in result.json schedule.csv drawing.svg model.json; do
    [ -s "$work/demo/$file" ]; ok "$file is written"
done
[ "$(ls "$work/demo" | wc -l)" = 4 ]; ok "nothing else is written"
grep -q "^  \"caution\": \"$CAUTION\"" "$work/demo/result.json"; ok "the caution is the first key of result.json"
head -n 2 "$work/demo/result.json" | grep -q caution; ok "and stands first"
tail -n 1 "$work/demo/schedule.csv" | grep -q "Preliminary sizing only"; ok "the caution is the last record of schedule.csv"
grep -q "Preliminary sizing only" "$work/demo/drawing.svg"; ok "the drawing carries the caution"
cp "$work/demo/result.json" "$work/before"
run 6 "outputs are not overwritten" size "$DEMO" -o "$work/demo"; says "exists already; --force replaces it"; silent_out
cmp -s "$work/before" "$work/demo/result.json"; ok "the old output is untouched"
run 0 "--force replaces" size "$DEMO" -o "$work/demo" --force --quiet; silent_out; silent_err
cmp -s "$work/before" "$work/demo/result.json"; ok "the same run gives the same bytes"
run 0 "the sized model passes its check" check "$work/demo/model.json"; prints "Every limit is kept"
run 0 "check writes its outputs" check "$work/demo/model.json" -o "$work/checked" --quiet
[ "$(ls "$work/checked" | tr '\n' ' ')" = "drawing.svg result.json schedule.csv " ]; ok "and no model"
run 0 "size of a sized model only checks" size "$work/demo/model.json"; says "every group is held: nothing to size"
run 3 "check of an unsized model" check "$DEMO"; says '/groups/top chord: the group has no size to check; expected "section"'; silent_out
run 0 "explain" explain "$work/demo/model.json" --member T4; prints "Johnson: sigma_cr = fy (1 - fy lambda^2/(4 pi^2 E))"; prints "passes"; prints "$CAUTION"
FRAME=models/demo_frame.json
run 0 "a frame with diagrams" size "$FRAME" -o "$work/frame" --draw-loads "floors full" --draw-moment "floors full" --draw-shear envelope
prints "Bending, at the place that governs"; prints "Moments of supports"; prints "Elastic critical load factors"
grep -q "Bending moment (floors full), kNm, on the side in tension" "$work/frame/drawing.svg"; ok "moments are drawn"
grep -q "Shear force (envelope of the combinations for strength)" "$work/frame/drawing.svg"; ok "an envelope is drawn beside a combination"
grep -q "^end,roof 1,roof beams," "$work/frame/schedule.csv"; ok "the schedule has the ends"
run 0 "explain a beam" explain "$work/frame/model.json" --member "roof 1"; prints "|N|/(A sigma_cr/n) + |M_in|/(W_in f)"; prints "Bow, |v|/limit"
run 2 "explain without a member" explain "$work/demo/model.json"; says "--member is missing"
run 2 "explain of no member" explain "$work/demo/model.json" --member T44; says 'no member "T44"; did you mean "T4"?'

run 0 "--json" size "$DEMO" --json; silent_err
cmp -s "$work/out" "$work/demo/result.json"; ok "prints result.json"
python3 -c "import json,sys; r=json.load(open(sys.argv[1])); assert r['format']=='scantling result' and r['version']==1 and r['kept'] is True" "$work/out"; ok "is JSON with format and version"
run 0 "--iterations 0 checks the start" size "$DEMO" --iterations 0 --json; prints '"outcome": "not optimised"'
run 0 "--color=always colours" size "$DEMO" --color=always; printf '\033' >"$work/esc"; grep -qf "$work/esc" "$work/out"; ok "with escapes"
run 0 "no colour into a pipe" size "$DEMO"; ! grep -qf "$work/esc" "$work/out"; ok "without escapes"
run 0 "-- ends the options" size -- "$DEMO"
"$PROGRAM" size - <"$DEMO" >"$work/out" 2>"$work/err"; ok "a model on standard input"
cp "$DEMO" "$work/-x.json"
(cd "$work" && "$PROGRAM" size --quiet -- -x.json); ok "a file called -x.json"
"$PROGRAM" size "$DEMO" >/dev/full 2>"$work/err"; [ "$?" = 6 ]; ok "a full disk behind standard output is exit code 6"
"$PROGRAM" --help >/dev/full 2>"$work/err"; [ "$?" = 6 ]; ok "also for the help"
: >"$work/file"
run 6 "a file in place of the folder" size "$DEMO" -o "$work/file"; says "is not a folder"
run 6 "a folder that cannot be made" size "$DEMO" -o "$work/no/such/parent"; says "cannot be made: No such file"
LC_ALL=de_DE.UTF-8 "$PROGRAM" size --json "$DEMO" >"$work/de" 2>/dev/null; cmp -s "$work/de" "$work/before"; ok "another locale gives the same bytes"
env -i "$PROGRAM" size --json "$DEMO" >"$work/bare" 2>/dev/null; cmp -s "$work/bare" "$work/before"; ok "an empty environment gives the same bytes"
run 0 "progress on request goes to standard error only" size models/benchmarks/200bar.json --progress=json --starts 40
! grep -q '"stage"' "$work/out"; ok "and never to standard output"

# An interrupt during a long run: complete outputs of the best so far, marked; exit code 130.
"$PROGRAM" size models/benchmarks/200bar.json --starts 1000 -o "$work/stopped" >"$work/out" 2>"$work/err" &
pid=$!
sleep 1
kill -INT $pid
wait $pid
[ "$?" = 130 ]; ok "an interrupt ends with 130"
grep -q '"outcome": "interrupted"' "$work/stopped/result.json"; ok "outputs are marked interrupted"
[ "$(ls "$work/stopped" | wc -l)" = 4 ]; ok "and complete"

echo "$held held, $broken broken"
[ "$broken" = 0 ]
