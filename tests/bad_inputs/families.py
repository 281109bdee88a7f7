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
"""
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
    pointer = re.sub(r"/(sections|joints|settlements|members|sum)/[^/]+", r"/\1/*", pointer)
    return re.sub(r"/\d+", "/*", pointer)


def first_of_each_pattern(base):
    seen = set()
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


def make_missing(folder, base):
    table = rows("missing.txt", 1)
    for pointer in first_of_each_pattern(base):
        if base.spans[pointer][2] is None:
            continue  # not the value of a key
        messages = table.pop((pointer,), None)
        if messages is None:
            raise SystemExit("missing.txt has no row for " + pointer)
        if messages != ["right"]:
            make(folder, "S01-no-" + slug(pointer), base.changed([(pointer, "-", "")]), *expected(messages))
    assert not table, "missing.txt has rows for nothing: %s" % list(table)


TYPES = {"number": ("7", "a number"), "string": ('"?"', "a string"), "array": ("[]", "an array"),
         "object": ("{}", "an object"), "true": ("true", "true"), "null": ("null", "null")}


def make_types(folder, base):
    """Types without a row of their own are told in the words of the row `*`: found WHAT; expected the rest. Of these only
    null is tried, and all where SCT_TEST_FULL is set."""
    table = rows("types.txt", 2)
    for pointer in first_of_each_pattern(base):
        general = table.pop((pointer, "*"), None)
        if general is None:
            raise SystemExit("types.txt has no row for " + pointer)
        begin = base.spans[pointer][0]
        line, column = base.text.count("\n", 0, begin) + 1, begin - base.text.rfind("\n", 0, begin)
        for name, (text, words) in TYPES.items():
            messages = table.pop((pointer, name), None)
            if messages is None and name != "null" and not os.environ.get("SCT_TEST_FULL"):
                continue  # told by the same line of code
            if messages is None:
                messages = ["%d:%d: error: %sfound %s; %s" % (line, column, pointer and pointer + ": ", words, general[0])]
            if messages != ["right"]:
                make(folder, "S03-%s-for-%s" % (name, slug(pointer)), base.changed([(pointer, "=", text)]),
                     *expected(messages))
    assert not table, "types.txt has rows for nothing: %s" % list(table)


def make_edits(folder, base):
    for block in read("edits.txt").split("\n\n"):
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


def main():
    base = Base(read("base.json"))
    make_missing(sys.argv[1], base)
    make_types(sys.argv[1], base)
    make_edits(sys.argv[1], base)


if __name__ == "__main__":
    main()
