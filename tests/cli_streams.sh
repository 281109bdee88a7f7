#!/bin/sh
# What the command line says where: help, completion, suggestions, colour, progress, JSON. Prints "N held, M broken".
BUILD=${BUILD:-build}
PROGRAM=$(cd "$BUILD" && pwd)/scantling
work=$(mktemp -d) || exit 1
trap 'rm -rf "$work"' EXIT
held=0 broken=0
DEMO=models/demo_roof.json

count() { # count VERDICT WORDS
    if [ "$1" = 0 ]; then held=$((held + 1)); else broken=$((broken + 1)); echo "broken: $2"; fi
}
run() { # run EXPECTED_CODE WORDS ARGUMENTS...: streams go to $work/out and $work/err
    expected=$1 words=$2
    shift 2
    "$PROGRAM" "$@" >"$work/out" 2>"$work/err" </dev/null
    code=$?
    [ "$code" = "$expected" ] || echo "exit code $code, expected $expected: $(head -n 3 "$work/err")"
    [ "$code" = "$expected" ]
    count $? "$words"
}
says() { grep -qF -- "$1" "$work/err"; count $? "standard error says: $1"; }
prints() { grep -qF -- "$1" "$work/out"; count $? "standard output prints: $1"; }
silent_out() { [ ! -s "$work/out" ]; count $? "standard output is empty"; }
silent_err() { [ ! -s "$work/err" ]; count $? "standard error is empty, not: $(head -n 1 "$work/err")"; }
has_escape() { grep -q "$(printf '\033')" "$1"; }

run 0 "a sized model for what follows" size "$DEMO" -o "$work/demo" --quiet
MODEL=$work/demo/model.json

# ---- help
commands=$("$PROGRAM" --help | sed -n 's/^  \([a-z][a-z]*\)  *[A-Z].*/\1/p')
[ "$(echo "$commands" | wc -l)" -ge 5 ]; count $? "the overview lists the commands"
run 2 "no argument" ; silent_out
[ "$(wc -l <"$work/err")" -le 20 ]; count $? "the usage has at most 20 lines"
run 0 "help" help; cp "$work/out" "$work/overview"; silent_err
run 0 "--help" --help; cmp -s "$work/out" "$work/overview"; count $? "help is --help"
for command in $commands; do
    run 0 "help $command" help "$command"; silent_err; cp "$work/out" "$work/help_$command"
    run 0 "$command --help" "$command" --help; cmp -s "$work/out" "$work/help_$command"; count $? "help $command is $command --help"
    run 2 "$command --hlep" "$command" --hlep; silent_out; says 'no option --hlep; did you mean --help?'
    [ "$(wc -l <"$work/err")" -le 20 ]; count $? "the usage of $command has at most 20 lines"
done
# The examples in the help run as they stand, here with another build folder and without what follows a pipe.
mkdir -p "$work/tree/build"
ln -s "$(pwd)/models" "$work/tree/models"
for command in $commands; do
    sed -n '1,/^$/s/^  scantling \(.*\)/\1/p' "$work/help_$command" | sed 's/ |.*//' >"$work/examples"
    [ -s "$work/examples" ]; count $? "the help of $command begins with an example"
    while read -r arguments; do
        (cd "$work/tree" && eval "\"$PROGRAM\" $arguments") >/dev/null 2>"$work/err" </dev/null
        count $? "example: scantling $arguments"
    done <"$work/examples"
done
run 0 "--version" --version; prints "scantling 0."; silent_err

# ---- suggestions for what was mistyped
run 2 "a command" chekc "$MODEL"; says 'no command "chekc"; did you mean "check"?'; silent_out
run 2 "an option in place of the command" --hepl; says 'no option "--hepl"; did you mean "--help"?'
run 2 "nothing near" frobnicate; says 'scantling --help lists what there is'
run 2 "a command to help with" help sise; says 'did you mean "size"?'
run 2 "a shell" completion bsh; says 'did you mean "bash"?'
run 2 "no shell of ours" completion tclsh8; says 'there is one for bash'
run 2 "an option" check "$MODEL" --jsno; says 'did you mean --json?'
run 2 "an option of another command" explain "$MODEL" --member T4 --starts 3; says 'no option --starts'
run 2 "a letter" check -z "$MODEL"; says 'no option -z'
run 2 "short for several options" size "$DEMO" --draw x; says 'option --draw is short for several: --draw-loads, --draw-deflected, --draw-moment, --draw-shear, --draw-axial'
run 2 "a value for a switch" check "$MODEL" --json=5; says 'option --json takes no value; found "5"'
run 2 "a word of an option" check "$MODEL" --color=nevre; says '--color: found "nevre"; did you mean "never"?'
run 2 "no such word" size "$DEMO" --progress=sometimes; says 'expected one of auto, always, never, json'
run 2 "a member" explain "$MODEL" -m B33; says 'no member "B33"; did you mean "B3"?'; silent_out
run 2 "a member, as JSON" explain "$MODEL" -m B33 --json; says 'did you mean "B3"?'; silent_out
run 2 "a combination" check "$MODEL" -o "$work/c" --draw-loads "snow lfet"; says 'did you mean "snow left"?'; silent_out

# ---- JSON on every command that has a result
for command in "size $DEMO" "check $MODEL" "explain $MODEL --member T3"; do
    eval "run 0 '$command --json' $command --json"; silent_err
    python3 -c 'import json, sys
r = json.load(open(sys.argv[1]))
assert list(r)[:3] == ["caution", "format", "version"] and r["version"] == 1, list(r)' "$work/out"
    count $? "has caution, format and version first"
    cp "$work/out" "$work/plain_json"
    eval "run 0 '$command --json --quiet --color=always' $command --json --quiet --color=always"
    cmp -s "$work/out" "$work/plain_json"; count $? "and the same bytes with --quiet and --color=always"
done
# The explanation says what the result says of this member.
"$PROGRAM" check "$MODEL" --json >"$work/result"
for member in T3 B2 D4; do
    "$PROGRAM" explain "$MODEL" --member $member --json >"$work/explained"
    python3 - "$work/result" "$work/explained" <<'PY'
import json, sys
result, told = (json.load(open(path)) for path in sys.argv[1:])
member = next(m for m in result["members"] if m["name"] == told["member"])
group = next(g for g in result["groups"] if g["name"] == told["group"])
assert told["format"] == "scantling explanation"
assert told["section"] == group["section"] and told["area_m2"] == group["area_m2"]
assert told["effective_length_m"] == member["effective_length_m"] and told["slenderness"] == member["slenderness"]
assert [c["force_N"] for c in told["combinations"]] == member["forces_N"]
assert [c["name"] for c in told["combinations"]] == result["combinations"]
assert told["governing"] == {"check": member["check"], "combination": member["combination"],
                             "utilisation": member["utilisation"], "passes": True}
every = [c["utilisation"] for k in told["combinations"] for c in k["checks"]]
every += [told["slenderness_check"]["utilisation"]] if told["slenderness_check"] else []
assert abs(max(every) - member["utilisation"]) < 1e-12
for k in told["combinations"]:
    assert abs(k["stress_Pa"] * told["area_m2"] - k["force_N"]) <= 1e-9 * abs(k["force_N"]) + 1e-6
    for c in k["checks"]:
        assert abs(c["value_Pa"] / c["limit_Pa"] - c["utilisation"]) < 1e-12 and c["passes"]
for c in told["column_strengths"]:
    i = told["radius_of_gyration_m"][c["axis"]]
    slenderness = told["effective_length_m"][c["axis"]] / i
    sigma = (3.141592653589793**2 * told["E_Pa"] / slenderness**2 if c["formula"] == "Euler" else
             told["yield_Pa"] * (1 - told["yield_Pa"] * slenderness**2 / (4 * 3.141592653589793**2 * told["E_Pa"])))
    assert abs(sigma - c["critical_stress_Pa"]) < 1e-9 * sigma
    assert abs(sigma / told["safety"] - c["allowable_Pa"]) < 1e-9 * sigma
PY
    count $? "explain --json agrees with check --json and with the formulas: $member"
done

# ---- quiet
for command in "size $DEMO" "check $MODEL"; do
    eval "run 0 '$command --quiet' $command --quiet"; silent_out; silent_err
done
sed 's/"buckling": {[^}]*}/"buckling": { "by": "none" }/' "$MODEL" >"$work/warned.json"
run 0 "a model that is warned of" explain "$work/warned.json" --member T3; says ": warning: "
run 0 "and quietly not" explain "$work/warned.json" --member T3 --quiet; silent_err; prints "Member T3"

# ---- colour
run 0 "no colour into a pipe" check "$MODEL"; ! has_escape "$work/out"; count $? "has no escapes"
run 0 "colour on request" check "$MODEL" --color=always; has_escape "$work/out"; count $? "has escapes"
run 0 "colour of a warning" check "$work/warned.json" --color always; has_escape "$work/err"; count $? "on standard error, too"
NO_COLOR=1 "$PROGRAM" check "$MODEL" --color=always >"$work/out" 2>"$work/err"; has_escape "$work/out"; count $? "a switch beats NO_COLOR"
run 2 "colour of a fault" check --color=always --jsno; has_escape "$work/err"; count $? "on the command line"
run 3 "colour of an error" check --color=always "$DEMO"; has_escape "$work/err"; count $? "in the input"
sed "s/$(printf '\033')\[[0-9;]*m//g" "$work/err" >"$work/bare"
run 3 "the same error without colour" check "$DEMO"
cmp -s "$work/bare" "$work/err"; count $? "says the same words"
if command -v script >/dev/null 2>&1; then
    terminal() { # terminal FILE COMMAND: standard output and error are a terminal
        script -qec "$2" /dev/null </dev/null >"$1" 2>&1
    }
    unset NO_COLOR
    TERM=xterm terminal "$work/out" "$PROGRAM check $work/warned.json"; has_escape "$work/out"; count $? "colour on a terminal"
    TERM=dumb terminal "$work/out" "$PROGRAM check $work/warned.json"; ! has_escape "$work/out"; count $? "not on a dumb one"
    NO_COLOR=1 TERM=xterm terminal "$work/out" "$PROGRAM check $work/warned.json"; ! has_escape "$work/out"; count $? "not with NO_COLOR"
    NO_COLOR='' TERM=xterm terminal "$work/out" "$PROGRAM check $work/warned.json"; has_escape "$work/out"; count $? "an empty NO_COLOR says nothing"
    TERM=xterm terminal "$work/out" "$PROGRAM check --color=never $work/warned.json"; ! has_escape "$work/out"; count $? "not with --color=never"
    TERM=xterm terminal "$work/out" "$PROGRAM size --color=never models/benchmarks/200bar.json --starts 140"
    grep -q "analyses (" "$work/out"; count $? "progress on a terminal"
    TERM=xterm terminal "$work/out" "$PROGRAM size --progress=never models/benchmarks/200bar.json --starts 140"
    ! grep -q "analyses (" "$work/out"; count $? "none with --progress=never"
else
    echo "skipped: terminals, for want of the command script"
fi

# ---- progress
run 0 "none into a pipe" size models/benchmarks/200bar.json --starts 140 --quiet; silent_err
run 0 "on request" size models/benchmarks/200bar.json --starts 140 --progress=always --quiet; says "analyses ("; silent_out
run 0 "for programs" size models/benchmarks/200bar.json --starts 60 --progress=json --quiet; silent_out
python3 - "$work/err" <<'PY'
import json, sys
told = [json.loads(line) for line in open(sys.argv[1])]
assert told, "nothing told"
for t in told:
    assert list(t) == ["stage", "start", "starts", "analyses", "mass_kg", "violation", "best_kg", "elapsed_s"], t
assert all(a["analyses"] < b["analyses"] and b["elapsed_s"] - a["elapsed_s"] > 0.19 for a, b in zip(told, told[1:]))
PY
count $? "one JSON object a line, at most five a second"
run 0 "short runs tell programs something, too" size "$DEMO" --progress=json --quiet; says '{"stage":"descent","start":1,'

# ---- completion
run 0 "completion bash" completion bash; silent_err
cp "$work/out" "$work/completion"
if command -v bash >/dev/null 2>&1; then
    cat >"$work/complete" <<'SH'
. "$1"
shift
COMP_WORDS=("$@") COMP_CWORD=$(($# - 1)) COMPREPLY=()
_scantling
printf '%s\n' "${COMPREPLY[@]}"
SH
    completes() { # completes EXPECTED WORDS...: the words end with the one under the cursor
        expected=$1
        shift
        got=$(bash "$work/complete" "$work/completion" "$@" | sort | tr '\n' ' ')
        [ "$got" = "$expected " ] || echo "completed to: $got"
        [ "$got" = "$expected " ]
        count $? "completes: $*"
    }
    completes "check" scantling ch
    completes "--help --version" scantling -
    completes "--draw-axial --draw-deflected --draw-loads --draw-moment --draw-shear" scantling size --dr
    completes "always auto never" scantling check --color ""
    completes "json" scantling size --progress = j
    completes "size" scantling help s
    completes "bash" scantling completion ""
    completes "models/demo_braced.json models/demo_chords.json models/demo_frame.json models/demo_roof.json" scantling size models/demo
    completes "models/benchmarks" scantling size -o models/be
    completes "" scantling explain x.json --member T
    for command in $commands; do
        bash "$work/complete" "$work/completion" scantling "$command" -- | sort -u >"$work/got"
        [ -s "$work/got" ] && sed -n '/^options/,/^$/s/^  .*--\([a-z-]*\).*/--\1/p' "$work/help_$command" | sort | cmp -s - "$work/got"
        count $? "the options of $command are completed"
    done
else
    echo "skipped: completion, for want of bash"
fi

echo "$held held, $broken broken"
[ "$broken" = 0 ]
