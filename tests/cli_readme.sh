#!/bin/sh
# The README tells the truth: every `sh` block runs, and prints the `text` block that follows it, if one does. The model
# in its `json` block is sized. Prints "N held, M broken".
BUILD=${BUILD:-build}
export BUILD
work=$(mktemp -d) || exit 1
trap 'rm -rf "$work"' EXIT
python3 - "$work" <<'PY'
import os, re, subprocess, sys
work, build = sys.argv[1], os.environ["BUILD"]
blocks = re.findall(r"^```(\w+)\n(.*?)^```$", open("README.md").read(), re.M | re.S)
held = broken = 0
for i, (kind, body) in enumerate(blocks):
    if kind == "json":
        path = os.path.join(work, "readme.json")
        open(path, "w").write(body)
        run = subprocess.run([build + "/scantling", "size", path], capture_output=True, text=True)
        expected = None
    elif kind == "sh":
        compiler = os.environ.get("CC", "cc") + " " + os.environ.get("SAN", "") + " "
        command = body.replace("build/", build + "/").replace("cc ", compiler)
        run = subprocess.run(["sh", "-ec", command], capture_output=True, text=True)
        expected = blocks[i + 1][1] if i + 1 < len(blocks) and blocks[i + 1][0] == "text" else None
    else:
        continue
    good = run.returncode == 0 and (expected is None or run.stdout == expected)
    held += good
    broken += not good
    if not good:
        print("broken:", body, "exit code", run.returncode, run.stderr, "printed:\n" + run.stdout)
print(held, "held,", broken, "broken")
sys.exit(broken > 0)
PY
