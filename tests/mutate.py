"""Plants small faults in the numerical core, one at a time in a copy, and reports how many the tests catch.

    python3 tests/mutate.py [--count N] [--seed S] [--floor PERCENT] [--only PART_OF_A_PATH] [--sanitize] [--list]

A fault is one token changed: a relation, a sign, an operation, a whole number one larger, a real number a tenth larger, a
condition turned round, a statement left out. Faults that the compiler refuses, or that give the same machine code, are not
counted. A fault is caught when a test program fails or hangs; the tests named after the changed file run first. With
--sanitize what the plain build lets pass is tried under the address and undefined-behaviour sanitizers, too. The places
are drawn by a seeded generator, so that the same sources with the same seed give the same faults.
"""
import argparse
import os
import random
import re
import resource
import shutil
import subprocess
import sys
import tempfile
import time

FOLDERS = ["src/numerics", "src/analysis", "src/rules", "src/sizing"]
SWAPS = {"<": "<=", "<=": "<", ">": ">=", ">=": ">", "==": "!=", "!=": "==", "&&": "||", "||": "&&", "+": "-", "-": "+",
         "*": "/", "/": "*", "+=": "-=", "-=": "+=", "*=": "/=", "/=": "*=", "++": "--"}
TOKEN = re.compile(
    r"(?P<skip>/\*.*?\*/|//[^\n]*|\"(?:\\.|[^\"\\])*\"|'(?:\\.|[^'\\])*'|^[ \t]*\#(?:\\\n|[^\n])*)"
    r"|(?P<name>[A-Za-z_]\w*)|(?P<number>(?:\d+\.?\d*|\.\d+)(?:[eE][-+]?\d+)?[uUlLfF]*)"
    r"|(?P<sign>->|\+\+|--|[-+*/<>=!]=|&&|\|\||[-+*/<>])", re.M | re.S)
# Beginnings of a statement that may be left out: a call, or a change of something.
STATEMENT = re.compile(r"^( +)(?!return\b|break\b|continue\b|goto\b|else\b|if\b|for\b|while\b|case\b|default\b|const\b|static\b)"
                       r"(\*?[A-Za-z_][\w\[\]().>*+, -]*?(?: (?:[-+*/|&]?=) [^;{}]*|\([^;{}]*\)|\+\+|--));$", re.M)
CONDITION = re.compile(r"\bif \(((?:[^()\n]|\([^()\n]*\))+)\)")


def is_binary(text, start):
    """Does an operator at `start` stand between two operands, and not before one, in a type or in a declaration?"""
    before = text[:start].rstrip()
    return before[-1:].isalnum() or before[-1:] in ")]_"


def faults_of(path):
    """All faults of a file: (path, start, end, replacement, kind)."""
    text = open(path).read()
    # Declarations of pointers look like products: the line begins with a type.
    declares = re.compile(r"^\s*(?:static |const |struct |extern )*(?:sct_\w+|double|int|bool|char|size_t|void|long double|cholmod_\w+|\w+)\s+\*")
    found = []
    for m in TOKEN.finditer(text):
        start, end, word = m.start(), m.end(), m.group()
        line = text[text.rfind("\n", 0, start) + 1:(text.find("\n", end) + 1 or len(text)) - 1]
        inside = line.startswith("    ")  # of a function or a struct: what stands at the margin only declares
        if m.group("skip") or not inside or re.match(r"\s*(?:enum|typedef|X\()", line):
            continue
        if m.group("number"):
            if word.isdigit() and len(word) < 4:
                found.append((path, start, end, str(int(word) + 1), "off by one"))
            elif re.match(r"^[\d.]+(?:[eE][-+]?\d+)?$", word):
                found.append((path, start, end, repr(float(word) * 1.1 if float(word) else 0.1), "constant"))
        elif m.group("sign") and word in SWAPS:
            if word in "+-*/" and not is_binary(text, start):
                if word == "-":
                    found.append((path, start, end, "", "sign"))
                continue
            if word == "*" and (declares.match(line) or text[end:end + 1] in ")*" or text[end:end + 1].isalpha()):
                continue
            found.append((path, start, end, SWAPS[word], "operator"))
    for m in STATEMENT.finditer(text):
        if re.match(r"\w*free\(", m.group(2)): # a leak: the sanitizers watch these
            continue
        found.append((path, m.start(2), m.end(2), "(void)0", "dropped statement"))
    for m in CONDITION.finditer(text):
        if "NULL" not in m.group(1):
            found.append((path, m.start(1), m.end(1), "!(" + m.group(1) + ")", "turned condition"))
    return found


class Copy:
    """A copy of the tree that builds: tests are linked with the shared library, so that one fault costs one compilation."""

    def __init__(self, root, sanitize):
        self.root = root
        self.environment = dict(os.environ, OMP_THREAD_LIMIT="1", OPENBLAS_NUM_THREADS="1", LC_ALL="C", BUILD="build",
                                CK_FORK="no", CK_VERBOSITY="minimal")
        for variable in ("MAKEFLAGS", "MFLAGS", "MAKELEVEL", "SAN", "SCT_TEST_FULL"):
            self.environment.pop(variable, None)
        for name in ("Makefile", "README.md", "DEVELOPERS.md", "SAFETY.md", "include", "src", "models", "tests", "examples", ".ci"):
            if os.path.isdir(name):
                shutil.copytree(name, os.path.join(root, name))
            elif os.path.exists(name):
                shutil.copy(name, root)
        self.objects = {}
        self.scripts = {name: ["sh", "tests/cli_%s.sh" % name] for name in ("readme", "commands", "bad_inputs")}
        self.programs = self.build("build")
        self.sanitized = self.build("build/sanitize") if sanitize else {}
        self.sanitized = {name: command for name, command in self.sanitized.items() if self.passes(name, 600, True)}
        self.usual = {}  # [s] of processor time, which other work on the machine does not change much
        for name in list(self.programs) + list(self.scripts):
            before = self.spent()
            if self.passes(name, 600):
                self.usual[name] = self.spent() - before
            else:
                print("left out: %s fails without a fault" % name, flush=True)
                self.programs.pop(name, None)
                self.scripts.pop(name, None)

    @staticmethod
    def spent():
        used = resource.getrusage(resource.RUSAGE_CHILDREN)
        return used.ru_utime + used.ru_stime

    def build(self, folder):
        """Makes everything, and the test programs against the shared library; returns them by name."""
        if not self.make(folder):
            sys.exit("mutate: the sources do not build")
        here, programs = os.path.join(self.root, folder), {}
        for name in sorted(os.listdir(os.path.join(self.root, "tests"))):
            source = os.path.join(self.root, "tests", name)
            if name.startswith("test_") and name.endswith(".c") and "__wrap_" not in open(source).read(): # not by the linker
                out = os.path.join(here, name[:-2])
                subprocess.run(["cc", "-std=c11", "-O1", "-DNGPL", "-Iinclude", "-Isrc", "-Itests", "-I/usr/include/suitesparse",
                                "-I/usr/include/cjson", "-o", out, "tests/" + name, "-L" + folder, "-Wl,-rpath," + here]
                               + self.flags(folder).split() +
                               ["-lscantling", "-lcheck", "-lsubunit", "-lrt", "-lpthread", "-llapack", "-lblas", "-lcholmod",
                                "-lamd", "-lcjson", "-lm"], cwd=self.root, check=True, env=self.environment)
                programs[name[5:-2]] = [out]
        return programs

    @staticmethod
    def flags(folder):
        return "-fsanitize=address,undefined,float-cast-overflow -fno-sanitize-recover=all" if "sanitize" in folder else ""

    def make(self, folder="build"):
        flags = "SAN=%s -fvisibility=default -w" % self.flags(folder)
        optimise = "OPT=-O1 -g0" if "sanitize" in folder else "OPT=-O2 -g0"
        return subprocess.run(["make", "-s", "all", optimise, flags, "BUILD=" + folder], cwd=self.root, env=self.environment,
                              stdout=subprocess.DEVNULL, stderr=subprocess.DEVNULL).returncode == 0

    def passes(self, name, limit, sanitized=False):
        """Does a test pass, within `limit` seconds of processor time for each of its processes?"""
        command = (self.sanitized if sanitized else self.programs).get(name) or self.scripts[name]
        seconds = int(limit) + 1
        run = subprocess.Popen(command, cwd=self.root, env=self.environment, stdout=subprocess.PIPE, stderr=subprocess.STDOUT,
                               text=True, errors="replace", start_new_session=True,
                               preexec_fn=lambda: resource.setrlimit(resource.RLIMIT_CPU, (seconds, seconds)))
        try:
            told = run.communicate(timeout=60 + 20 * seconds)[0]
        except subprocess.TimeoutExpired:
            os.killpg(run.pid, 9)
            run.wait()
            return False
        return run.returncode == 0 and (name in self.scripts or re.search(r"^100%: Checks: [1-9]", told, re.M) is not None)

    def order(self, path):
        """The tests that may know of a file, the likeliest first, then the quick ones."""
        stem = os.path.basename(path)[:-2]
        unlike = {"units", "families", "rewrite", "gate", "drawing"}
        near = [n for n in self.programs if n == stem or n.startswith(stem) or stem.startswith(n)]
        rest = sorted((n for n in self.programs if n not in near and n not in unlike), key=self.usual.get)
        scripts = [n for n in ("readme", "commands") if n in self.scripts]
        if path.startswith("src/analysis") and "bad_inputs" in self.scripts: # slow, and tells of structures
            scripts.append("bad_inputs")
        return near + rest + scripts

    def object_of(self, path):
        return open(os.path.join(self.root, "build", path[:-2] + ".o"), "rb").read()

    def judge(self, fault):
        """None: not counted; else the name of the test that caught it, "" when none did."""
        path, start, end, replacement, _ = fault
        place = os.path.join(self.root, path)
        text = open(place).read()
        before = self.objects.setdefault(path, self.object_of(path))  # first asked for before the file's first fault
        try:
            open(place, "w").write(text[:start] + replacement + text[end:])
            if not self.make() or self.object_of(path) == before:
                return None
            for name in self.order(path):
                if not self.passes(name, 2 + 5 * self.usual[name]):
                    return name
            if self.sanitized and self.make("build/sanitize"):
                for name in self.order(path):
                    if name in self.sanitized and not self.passes(name, 10 + 20 * self.usual[name], True):
                        return name + " (sanitized)"
            return ""
        finally:
            open(place, "w").write(text)  # newer than the object: the next make compiles it again


def main():
    ask = argparse.ArgumentParser(description=__doc__.split("\n")[0])
    ask.add_argument("--count", type=int, default=100)
    ask.add_argument("--seed", type=int, default=1)
    ask.add_argument("--floor", type=float, default=0.0, help="fail when fewer per cent are caught")
    ask.add_argument("--only", default="", help="files whose path holds this")
    ask.add_argument("--sanitize", action="store_true", help="try what is left under the sanitizers, too")
    ask.add_argument("--list", action="store_true", help="print the faults, plant none")
    asked = ask.parse_args()
    os.chdir(os.path.join(os.path.dirname(os.path.abspath(__file__)), ".."))
    paths = [os.path.join(f, n) for f in FOLDERS for n in sorted(os.listdir(f)) if n.endswith(".c")]
    faults = [f for p in paths if asked.only in p for f in faults_of(p)]
    texts = {p: open(p).read() for p in paths}
    random.Random(asked.seed).shuffle(faults)
    with tempfile.TemporaryDirectory() as root:
        copy = None if asked.list else Copy(root, asked.sanitize)
        caught, left = 0, []
        for fault in faults:
            if caught + len(left) == asked.count:
                break
            path, start, end, replacement, kind = fault
            text = texts[path]
            line = text.count("\n", 0, start) + 1
            words = "%s:%d: %s: %s -> %s" % (path, line, kind, text[start:end].split("\n")[0], replacement.split("\n")[0])
            if asked.list:
                print(words)
                caught += 1
                continue
            by = copy.judge(fault)
            if by is None:
                continue
            print("%s: %s" % ("caught by " + by if by else "LEFT", words), flush=True)
            caught += by != ""
            if by == "":
                left.append(words)
    if asked.list:
        return 0
    total = caught + len(left)
    for words in left:
        print("left:", words)
    share = 100.0 * caught / max(total, 1)
    print("measured: %d of %d planted faults are caught (%.0f %%), seed %d" % (caught, total, share, asked.seed))
    return share < asked.floor


if __name__ == "__main__":
    sys.exit(main())
