#!/usr/bin/env python3
"""Makes the bad inputs that differ from one good model in one value: python3 families.py FOLDER

Each becomes FOLDER/NAME/ with model.json, expect and, where needed, args, as tests/cli_bad_inputs.sh reads them.
base.json  the good model, in which every key of the format stands
edits.txt  cases one by one: the name, lines that change the base, the exit code, standard error; then an empty line
               POINTER = TEXT   the value becomes this text, right or wrong
               POINTER -        the entry goes
               POINTER + TEXT   an entry more, at the end of this object or array
               args ...         the command line
missing.txt  what is said when a key is left out, for every key of the base
types.txt    what is said of a value of each wrong type, for every value of the base
frame.json, frame_edits.txt, frame_missing.txt, frame_types.txt
             the same for a plane frame: the tables hold what base.json has not
space.json, space_edits.txt
             the same for a frame in space: edits alone
"""
import math
import os
import re
import sys

HERE = os.path.dirname(os.path.abspath(__file__))
TOKEN = re.compile(r'\s*("(?:[^"\\]|\\.)*"|[][{}:,]|[^\s][^][{}:,\s]*)')


def read(name):
    with open(os.path.join(HERE, name), encoding="utf-8", newline="") as file:
        return file.read()


class Base:
    """The text of the good model with the place of every value: spans[pointer] = begin, end, begin of its key."""

    def __init__(self, text):
        self.text, self.at, self.spans = text, 0, {}
        self.value("", None)

    def token(self):
        match = TOKEN.match(self.text, self.at)
        self.at = match.end()
        return match.group(1), match.start(1)

    def peek(self):
        return TOKEN.match(self.text, self.at).group(1)

    def value(self, pointer, key_begin):
        first, begin = self.token()
        if first in "{[":
            close, index = "}" if first == "{" else "]", 0
            while self.peek() != close:
                if index > 0:
                    self.token()
                key, place = str(index), None
                if first == "{":
                    key, place = self.token()
                    key = key[1:-1]
                    self.token()
                self.value(pointer + "/" + key, place)
                index += 1
            self.token()
        self.spans[pointer] = begin, self.at, key_begin

    def changed(self, edits):
        """The text after the edits, a list of (pointer, operator, text)."""
        changes = []
        for pointer, operator, text in edits:
            begin, end, key_begin = self.spans[pointer]
            if operator == "=":
                changes.append((begin, end, text))
            elif operator == "+":
                behind = len(self.text[:end - 1].rstrip())
                separator = "" if self.text[behind - 1] in "{[" else ", "
                changes.append((behind, behind, separator + text))
            else:
                begin = begin if key_begin is None else key_begin
                before, after = self.text[:begin].rstrip(), re.match(r"\s*,\s*", self.text[end:])
                if after:
                    end += after.end()
                elif before.endswith(","):
                    begin = len(before) - 1
                changes.append((begin, end, ""))
        text = self.text
        for begin, end, new in sorted(changes, reverse=True):
            text = text[:begin] + new + text[end:]
        return text


def make(folder, name, model, code, messages, args=None):
    path = os.path.join(folder, name)
    os.mkdir(path)
    for file, text in (("model.json", model), ("expect", code + "\n" + messages), ("args", args and args + "\n")):
        if text is not None:
            with open(os.path.join(path, file), "w", encoding="utf-8", newline="") as out:
                out.write(text)


def pattern(pointer):
    """The pointer with names and numbers of entries as *: entries of one kind have one pattern."""
    pointer = re.sub(r"^/(materials|families|joints|groups|members|cases|combinations)/[^/]+", r"/\1/*", pointer)
    pointer = re.sub(r"/(sections|joints|settlements|members|sum|moments|rotations|mass)/[^/]+", r"/\1/*", pointer)
    return re.sub(r"/\d+", "/*", pointer)


def first_of_each_pattern(base, known=None):
    """One pointer of each kind; those of the base `known` are left out."""
    seen = {pattern(pointer) for pointer in known.spans} if known else set()
    for pointer in base.spans:
        if pattern(pointer) not in seen:
            seen.add(pattern(pointer))
            yield pointer


def rows(name, columns):
    """The rows of a table: tab-separated; lines with # and empty ones are left out. first columns -> list of the last"""
    table = {}
    for line in read(name).split("\n"):
        if line and not line.startswith("#"):
            fields = line.split("\t")
            assert len(fields) == columns + 1, line
            table.setdefault(tuple(fields[:columns]), []).append(fields[columns])
    return table


def expected(messages):
    """Exit code and standard error from the last column: messages, or `exit CODE` and messages."""
    code = "3"
    if messages[0].startswith("exit "):
        code, messages = messages[0][5:], messages[1:]
    return code, "".join("model.json:" + message + "\n" for message in messages)


def slug(pointer):
    return re.sub(r"\W+", "-", pointer).strip("-") or "whole"


def make_missing(folder, base, prefix="", known=None):
    table = rows(prefix + "missing.txt", 1)
    for pointer in first_of_each_pattern(base, known):
        if base.spans[pointer][2] is None:
            continue  # not the value of a key
        messages = table.pop((pointer,), None)
        if messages is None:
            raise SystemExit(prefix + "missing.txt has no row for " + pointer)
        if messages != ["right"]:
            make(folder, "S01-" + prefix + "no-" + slug(pointer), base.changed([(pointer, "-", "")]), *expected(messages))
    assert not table, prefix + "missing.txt has rows for nothing: %s" % list(table)


TYPES = {"number": ("7", "a number"), "string": ('"?"', "a string"), "array": ("[]", "an array"),
         "object": ("{}", "an object"), "true": ("true", "true"), "null": ("null", "null")}


def make_types(folder, base, prefix="", known=None):
    """Types without a row of their own are told in the words of the row `*`: found WHAT; expected the rest. Of these only
    null is tried, and all where SCT_TEST_FULL is set."""
    table = rows(prefix + "types.txt", 2)
    for pointer in first_of_each_pattern(base, known):
        general = table.pop((pointer, "*"), None)
        if general is None:
            raise SystemExit(prefix + "types.txt has no row for " + pointer)
        begin = base.spans[pointer][0]
        line, column = base.text.count("\n", 0, begin) + 1, begin - base.text.rfind("\n", 0, begin)
        for name, (text, words) in TYPES.items():
            messages = table.pop((pointer, name), None)
            if messages is None and name != "null" and not os.environ.get("SCT_TEST_FULL"):
                continue  # told by the same line of code
            if messages is None:
                messages = ["%d:%d: error: %sfound %s; %s" % (line, column, pointer and pointer + ": ", words, general[0])]
            if messages != ["right"]:
                make(folder, "S03-%s%s-for-%s" % (prefix, name, slug(pointer)), base.changed([(pointer, "=", text)]),
                     *expected(messages))
    assert not table, prefix + "types.txt has rows for nothing: %s" % list(table)


def make_edits(folder, base, prefix=""):
    for block in read(prefix + "edits.txt").split("\n\n"):
        lines = [line for line in block.strip("\n").split("\n") if line and not line.startswith("#")]
        if not lines:
            continue
        edits, args, at = [], None, 1
        while not re.fullmatch(r"\d+", lines[at]):
            change = re.fullmatch(r"(/\S*)? ?([=+-]) ?(.*)", lines[at])
            if lines[at].startswith("args "):
                args = lines[at][5:]
            else:
                edits.append((change.group(1) or "", change.group(2), change.group(3)))
            at += 1
        messages = "".join(line + "\n" for line in lines[at + 1:])
        make(folder, lines[0], base.changed(edits), lines[at], messages, args)


def entries(form, n):
    return ", ".join(form % i for i in range(n))


def make_large(folder, base):
    """Depth, size and number."""
    many_keys = 'model.json:1:%d: error: nested deeper than 64 levels; that is the most that is read\n'
    make(folder, "J08-64-arrays", "[" * 64 + "]" * 64, "3",
         "model.json:1:1: error: found an array; expected an object: a model\n")
    for n in (65, 1000, 100000):
        make(folder, "J08-%d-arrays" % n, "[" * n + "]" * n, "3", many_keys % 65)
        make(folder, "J08-%d-objects" % n, '{"a":' * n + "1" + "}" * n, "3", many_keys % 321)
    make(folder, "J08-100000-arrays-never-closed", "[" * 100000, "3", many_keys % 65)
    too_large = "error: the file is larger than 67108864 bytes, the most that is read\n"
    make(folder, "T07-file-of-100-MB", " " * 100000000, "7", "model.json: " + too_large)
    make(folder, "T07-standard-input-of-100-MB", "{}", "7", "<stdin>: " + too_large,
         "size - < ../T07-file-of-100-MB/model.json")
    make(folder, "T07-file-of-60-MB-of-blanks", " " * 60000000, "3",
         "model.json:1:1: error: the file is empty; expected a model, which is a JSON object { ... }\n")
    too_long = "model.json:4:12: error: a string of more than 1048576 bytes; that is the most that is read\n"
    make(folder, "T07-string-of-2-MB", base.changed([("/title", "=", '"' + "x" * 2000000 + '"')]), "3", too_long)
    make(folder, "I08-title-of-1-MB-and-one", base.changed([("/title", "=", '"' + "x" * 1048577 + '"')]), "3", too_long)
    make(folder, "I08-title-of-1-MB", base.changed([("/title", "=", '"' + "x" * 1048576 + '"')]), "0", "")
    make(folder, "T07-number-of-20-MB", base.changed([("/joints/A/at/1", "=", "0." + "1" * 20000000)]), "3",
         "model.json:26:22: error: a number of 20000002 characters; at most 64 are read\n")
    for n in (17, 30, 60):
        make(folder, "N08-%d-digits" % n, base.changed([("/joints/C/at/1", "=", "1." + ("1234567890" * 6)[:n - 1])]),
             "0", "")
    form = '"m%d": { "from": "A", "to": "nowhere", "group": "tie" }'
    members = base.text[:base.spans["/members"][1] - 1].rstrip()
    messages, column = "", len(members) - members.rfind("\n") + 2
    for i in range(20):
        messages += 'model.json:50:%d: error: /members/m%d/to: no joint "nowhere"; expected one of "A", "B", "C"\n' % (
            column + (form % i).index('"nowhere"'), i)
        column += len(form % i) + 2
    make(folder, "S12-100000-members-with-a-fault-each", base.changed([("/members", "+", entries(form, 100000))]), "3",
         messages + "scantling: 99980 more errors not shown\n")
    form = '"c%d": { "joints": { "C": [0, -1] } }'
    make(folder, "L08-10001-load-cases", base.changed([("/cases", "+", entries(form, 9998))]), "7",
         "model.json:52:12: error: /cases: found 10001 entries; at most 10000 are read\n")
    sums = '"k%d": { "for": "allowable", "sum": { "dead": 1, "odd": 1 } }'
    make(folder, "L08-10000-combinations", base.changed([("/combinations", "+", entries(sums, 9998))]), "0", "")
    make(folder, "J06-key-100000-times", base.changed([("/joints", "+", entries('"D": { "at": [0, %d] }', 100000))]), "3",
         "".join('model.json:28:%d: error: /joints/D: the key "D" stands twice in one object; the first is at 28:30\n'
                 % (30 + len(entries('"D": { "at": [0, %d] }', i)) + 2) for i in range(1, 21)) +
         "scantling: 99979 more errors not shown\n")


def all_tied(n):
    """A model of n joints on a spiral, every one tied to every other: its stiffness matrix has no zero."""
    joints = ",".join('"%d":{"at":[%.4f,%.4f]%s}' % (
        i, i * math.cos(i), i * math.sin(i), ',"support":["x","y"]' if i in (0, n // 2) else "") for i in range(n))
    members = ",".join('"%d-%d":{"from":"%d","to":"%d","group":"all"}' % (i, j, i, j)
                       for j in range(n) for i in range(j))
    return ('{"scantling":1,"dimensions":2,"units":{"length":"m","force":"kN","stress":"MPa"},\n"materials":{"steel":'
            '{"E":210000,"density":"7850 kg/m3","allowable":{"tension":140,"compression":140}}},\n"joints":{%s},\n'
            '"groups":{"all":{"material":"steel","area":{"at_least":"1 mm2","at_most":"5000 mm2"}}},\n"members":{%s},\n'
            '"cases":{"push":{"joints":{"%d":[10,-20]}}},"combinations":{"S":{"for":"allowable","sum":{"push":1}}},\n'
            '"limits":{"buckling":{"by":"none"}}}\n' % (joints, members, n - 1))


def make_all_tied(folder):
    make(folder, "R06-250-joints-all-tied", all_tied(250), "0",
         "model.json:7:28: warning: /limits/buckling/by: buckling is not checked; compression is held by the allowable "
         "stress alone\n")
    if os.environ.get("SCT_TEST_FULL"):
        make(folder, "R06-1500-joints-all-tied", all_tied(1500), "7",
             "model.json:7:28: warning: /limits/buckling/by: buckling is not checked; compression is held by the "
             "allowable stress alone\nmodel.json:5:11: error: /members: found 1124250 entries; at most 1000000 are read\n")


def main():
    base = Base(read("base.json"))
    make_large(sys.argv[1], base)
    make_all_tied(sys.argv[1])
    make_missing(sys.argv[1], base)
    make_types(sys.argv[1], base)
    make_edits(sys.argv[1], base)
    frame = Base(read("frame.json"))
    make_missing(sys.argv[1], frame, "frame_", base)
    make_types(sys.argv[1], frame, "frame_", base)
    make_edits(sys.argv[1], frame, "frame_")
    make_edits(sys.argv[1], Base(read("space.json")), "space_")


if __name__ == "__main__":
    main()
