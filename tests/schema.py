"""models/model.schema.json: sound, in the subset editors know, and in agreement with the models and the reader.

    python3 tests/schema.py [PROGRAM]

Every model under models/ passes the schema; every bad one fails at its pointer. With PROGRAM (build/scantling) the
reader must refuse the same bad models at the same pointers with exit code 3. Needs python3-jsonschema.
"""
import copy
import json
import pathlib
import re
import subprocess
import sys

from jsonschema import Draft202012Validator

ROOT = pathlib.Path(__file__).resolve().parent.parent
MODELS = ROOT / "models"
SCHEMA = json.loads((MODELS / "model.schema.json").read_text())
SUBSET = {"$schema", "$id", "$defs", "$ref", "title", "description", "examples", "type", "properties", "required",
          "additionalProperties", "items", "enum", "const", "anyOf", "pattern", "minItems", "maxItems", "minLength",
          "minProperties", "minimum", "maximum", "exclusiveMinimum"}
ABSENT = object()

# what is done to a sound model: (pointer that is set, value, pointer of the fault)
BAD = [
    ("/scantling", 2, "/scantling"),
    ("/dimensions", 4, "/dimensions"),
    ("/units/length", "foot", "/units/length"),
    ("/units/force", "KN", "/units/force"),
    ("/units/stress", "mPa", "/units/stress"),
    ("/units", ABSENT, ""),
    ("/colour", "red", "/colour"),
    ("/materials/material/E", "210 GPA", "/materials/material/E"),
    ("/materials/material/E", -1, "/materials/material/E"),
    ("/materials/material/density", ABSENT, "/materials/material"),
    ("/materials/material/density", "77 kN/m3", "/materials/material/density"),
    ("/joints/N1/at", [1], "/joints/N1/at"),
    ("/joints/N1/at", [0, "1"], "/joints/N1/at/1"),
    ("/joints/N1/support", ["w"], "/joints/N1/support/0"),
    ("/groups/G1/material", 7, "/groups/G1/material"),
    ("/groups/G1/area", ABSENT, "/groups/G1"),
    ("/groups/G1/area", {"at_least": 0.1}, "/groups/G1/area"),
    ("/groups/G1/buckling", {"by": "euler"}, "/groups/G1/buckling/by"),
    ("/groups/G1/buckling", {"by": "Euler", "safety": 0.5}, "/groups/G1/buckling/safety"),
    ("/groups/G1/length_factor", {"in_plane": 0}, "/groups/G1/length_factor/in_plane"),
    ("/members/B1/group", ABSENT, "/members/B1"),
    ("/members/B1/form", "N1", "/members/B1/form"),
    ("/cases/load 1/self_weight", "yes", "/cases/load 1/self_weight"),
    ("/cases/load 1/action", "rain", "/cases/load 1/action"),
    ("/cases/load 1/joints/N2", 5, "/cases/load 1/joints/N2"),
    ("/combinations/load 1/for", "strength", "/combinations/load 1/for"),
    ("/combinations/load 1/sum", {}, "/combinations/load 1/sum"),
    ("/combinations/load 1/sum/load 1", "1.35", "/combinations/load 1/sum/load 1"),
    ("/limits/deflection/0/at_most", "2 m2", "/limits/deflection/0/at_most"),
    ("/limits/deflection/0/in", "always", "/limits/deflection/0/in"),
    ("/limits/deflection/0/direction", "up", "/limits/deflection/0/direction"),
    ("/materials/material/G", -5, "/materials/material/G"),
    ("/joints/N1/support", "pinned", "/joints/N1/support"),
    ("/joints/N1/support", ["rotation w"], "/joints/N1/support/0"),
    ("/joints/N1/springs", {"y": "5 kN"}, "/joints/N1/springs/y"),
    ("/joints/N1/springs", {"up": "5 kN/m"}, "/joints/N1/springs/up"),
    ("/groups/G1/shape", {"kind": "tube"}, "/groups/G1/shape/kind"),
    ("/groups/G1/section_modulus", {"at": "5 mm2"}, "/groups/G1/section_modulus"),
    ("/groups/G1/torsion_constant", {"c": -1}, "/groups/G1/torsion_constant/c"),
    ("/members/B1/from", ABSENT, "/members/B1"),
    ("/members/B1/ends", "fixd", "/members/B1/ends"),
    ("/members/B1/ends", ["fixed"], "/members/B1/ends"),
    ("/members/B1/ends", {"in_plane": "stiff"}, "/members/B1/ends/in_plane"),
    ("/members/B1/roll", 30, "/members/B1/roll"),
    ("/members/B1/tension_only", "yes", "/members/B1/tension_only"),
    ("/members/B1", {"through": ["N1"], "group": "G1"}, "/members/B1/through"),
    ("/cases/load 1/moments", {"N2": "12 kN"}, "/cases/load 1/moments/N2"),
    ("/cases/load 1/rotations", {"N2": 0.002}, "/cases/load 1/rotations/N2"),
    ("/cases/load 1/loads", [{"line": [0, -5]}], "/cases/load 1/loads/0"),
    ("/cases/load 1/loads", [{"on": "B1"}], "/cases/load 1/loads/0"),
    ("/cases/load 1/loads", [{"on": "B1", "line": [0, -5], "axes": "global"}], "/cases/load 1/loads/0/axes"),
    ("/cases/load 1/loads", [{"on": "B1", "at": "0.5 l", "force": [0, 1]}], "/cases/load 1/loads/0/at"),
    ("/cases/load 1/notional", {"of": "load 1", "part": "5%", "direction": "x"}, "/cases/load 1/notional/part"),
    ("/limits/deflection/0/joints", ABSENT, "/limits/deflection/0"),
    ("/limits/drift", [{"along": ["N1"], "direction": "x", "at_most": "h/300"}], "/limits/drift/0/along"),
    ("/limits/bow", [{"members": ["B1"], "at_most": "h/300"}], "/limits/bow/0/at_most"),
    ("/limits/critical_factor", {"at_least": 0.5}, "/limits/critical_factor/at_least"),
    ("/limits/amplify_sway", 1, "/limits/amplify_sway"),
    ("/limits/frequency", {"at_least": 3}, "/limits/frequency/at_least"),
]


def changed(model, pointer, value):
    model = copy.deepcopy(model)
    *path, last = pointer.split("/")[1:]
    at = model
    for key in path:
        at = at[int(key)] if isinstance(at, list) else at[key]
    if value is ABSENT:
        del at[last]
    else:
        at[last] = value
    return model


def pointers(validator, model):
    """Where the schema finds faults; an unknown key is a fault of the key, as in the reader."""
    found = set()

    def add(error):
        path = "".join(f"/{key}" for key in error.absolute_path)
        found.add(path)
        if error.validator == "additionalProperties":
            found.update(f"{path}/{key}" for key in error.instance if key not in error.schema["properties"])
        for inner in error.context or ():
            add(inner)

    for error in validator.iter_errors(model):
        add(error)
    return found


def schema_faults(node, path=""):
    """Keywords outside the subset, objects left open, properties without a description."""
    for key in node:
        if key not in SUBSET:
            yield f"{path}: keyword {key}"
    if node.get("type") == "object" and "additionalProperties" not in node:
        yield f"{path}: open object"
    for name, inner in [*node.get("properties", {}).items(), *node.get("$defs", {}).items()]:
        target = SCHEMA["$defs"][inner["$ref"].split("/")[-1]] if "$ref" in inner else inner
        if "description" not in inner and "description" not in target:
            yield f"{path}/{name}: no description"
        yield from schema_faults(inner, f"{path}/{name}")
    for i, inner in enumerate(node.get("anyOf", ())):
        yield from schema_faults(inner, f"{path}/anyOf/{i}")
    for key in ("items", "additionalProperties"):
        if isinstance(node.get(key), dict):
            yield from schema_faults(node[key], f"{path}/{key}")


def example_faults(node, path=""):
    """Examples in the schema that do not pass it."""
    if isinstance(node, dict):
        for example in node.get("examples", ()):
            validator = Draft202012Validator({**node, "$defs": SCHEMA["$defs"]})
            if not validator.is_valid(example):
                yield f"{path}: example {example!r} does not pass"
    for key, inner in node.items() if isinstance(node, dict) else enumerate(node):
        if isinstance(inner, (dict, list)) and key != "examples":
            yield from example_faults(inner, f"{path}/{key}")


def shipped_families():
    """The families that come with the program: the schema offers them as examples."""
    first_lines = (path.read_text().splitlines()[0] for path in sorted((MODELS / "sections").glob("*.csv")))
    return [line.removeprefix("# family:").strip() for line in first_lines]


def reader_fault(program, model, pointer):
    run = subprocess.run([program, "check", "-"], input=json.dumps(model), capture_output=True, text=True, timeout=60)
    place = re.escape(pointer) + ": " if pointer else "[^/]"  # the whole document has no pointer to print
    if run.returncode == 3 and re.search(f"^<stdin>:[0-9]+:[0-9]+: error: {place}", run.stderr, re.MULTILINE):
        return None
    return f"the reader says (exit {run.returncode}): {run.stderr.strip()}"


def main():
    program = sys.argv[1] if len(sys.argv) > 1 else None
    held = broken = 0

    def judge(faults):
        nonlocal held, broken
        faults = list(faults)
        for fault in faults:
            print(fault)
        held, broken = held + (not faults), broken + bool(faults)

    Draft202012Validator.check_schema(SCHEMA)
    validator = Draft202012Validator(SCHEMA)
    judge(schema_faults(SCHEMA))
    judge(example_faults(SCHEMA))
    offered = SCHEMA["$defs"]["group"]["properties"]["family"]["examples"]
    judge([] if offered == shipped_families() else [f"group/family: examples are not {shipped_families()}"])
    for path in sorted(path for path in MODELS.rglob("*.json") if path.name != "model.schema.json"):
        found = pointers(validator, json.loads(path.read_text()))
        judge(f"{path.relative_to(ROOT)}: {pointer} does not pass the schema" for pointer in sorted(found))
    sound = json.loads((MODELS / "benchmarks" / "10bar_case1.json").read_text())
    for where, value, pointer in BAD:
        model = changed(sound, where, value)
        said = f"{where} left out" if value is ABSENT else f"{where} = {json.dumps(value)}"
        found = pointers(validator, model)
        judge([] if pointer in found else [f"{said}: the schema finds {sorted(found)}, not {pointer}"])
        if program:
            fault = reader_fault(program, model, pointer)
            judge([f"{said}: expected {pointer}; {fault}"] if fault else [])
    print(f"{held} held, {broken} broken")
    return 1 if broken else 0


if __name__ == "__main__":
    sys.exit(main())
