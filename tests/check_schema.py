"""Trains and results are valid under the schemas: check_schema.py PROGRAM.

Each train in examples/ (and the one that tests/train_file.cpp writes) under train.schema.json, and
what PROGRAM prints or writes for it under the schema of that answer. The other way round: what
is wrong in the ways below is refused by the schema and by PROGRAM alike.
"""

import copy
import json
import subprocess
import sys
import tempfile
import tomllib
from pathlib import Path

import jsonschema

ROOT = Path(__file__).resolve().parent.parent
SCHEMAS = {path.name.split(".")[0]: json.loads(path.read_text())
           for path in (ROOT / "src/schema").glob("*.json")}
VALIDATORS = {name: jsonschema.Draft202012Validator(schema) for name, schema in SCHEMAS.items()}
faults = []


def check_schemas():
    """Each is a schema and stands alone; a solution is an analysis and one key more."""
    for schema in SCHEMAS.values():
        jsonschema.Draft202012Validator.check_schema(schema)
    solution = dict(SCHEMAS["solution"]["properties"])
    solution.pop("solution")
    if solution != SCHEMAS["analysis"]["properties"]:
        faults.append("solution.schema.json and analysis.schema.json say different things")


def check(what, schema, document):
    for error in VALIDATORS[schema].iter_errors(document):
        faults.append(f"{what}: {'/'.join(map(str, error.absolute_path))}: {error.message[:200]}")


def run(program, *arguments):
    return subprocess.run([program, *map(str, arguments)], capture_output=True, text=True)


def answer(program, what, schema, *arguments):
    """JSON of a run, under its schema; 0 is done, 1 a requirement that is not met."""
    done = run(program, *arguments, "--json")
    if done.returncode not in (0, 1) or done.stderr:
        faults.append(f"{what}: exit {done.returncode}, {done.stderr.strip()}")
        return
    check(what, schema, json.loads(done.stdout, parse_constant=lambda c: faults.append(
        f"{what}: {c} is no JSON")))


def train(path):
    return tomllib.loads(path.read_text())


def check_examples(program, folder):
    for path in sorted((ROOT / "examples").glob("*.toml")):
        document = train(path)
        if "element" not in document:
            continue  # no train
        check(path.name, "train", document)
        answer(program, f"analyze {path.name}", "analysis", "analyze", path)
        if not document.get("vary"):
            continue
        out = folder / path.name
        answer(program, f"solve {path.name}", "solution", "solve", path, "--out", out)
        check(f"solve {path.name} --out", "train", train(out))
        answer(program, f"analyze solved {path.name}", "analysis", "analyze", out)


def check_others(program, folder):
    check("written_train.toml", "train", train(ROOT / "tests/written_train.toml"))
    answer(program, "materials", "materials", "materials")
    answer(program, "materials, infrared", "materials", "materials", "--band", "8,10,12")
    answer(program, "materials N-BK7", "materials", "materials", "N-BK7")
    out = folder / "imported.toml"
    answer(program, "import", "analysis", "import", ROOT / "examples/surfaces.csv", "--out", out)
    check("import --out", "train", train(out))


GOOD = {"format": 1, "band": {"reference_um": "d", "wavelengths_um": ["F", "C"]},
        "aperture": {"f_number": 8.0}, "field": {"half_angle_deg": 1.0},
        "element": [{"material": "N-BK7", "power_per_mm": 0.01}]}


def changed(**changes):
    """GOOD with other tables; None takes one away."""
    document = {**copy.deepcopy(GOOD), **changes}
    return {key: value for key, value in document.items() if value is not None}


def with_element(**keys):
    return changed(element=[{"material": "N-BK7", **keys}])


BAD = {
    "another format": changed(format=2),
    "an unknown key": changed(bnad=1),
    "no band": changed(band=None),
    "no element": changed(element=[]),
    "two apertures": changed(aperture={"f_number": 8.0, "object_na": 0.1}),
    "a band of two kinds": changed(band={**GOOD["band"], "ends_um": [0.4, 0.7], "samples": 3}),
    "an unknown line": changed(band={"reference_um": "x", "wavelengths_um": ["F", "C"]}),
    "radius 0": with_element(radii_mm=[0, 50], thickness_mm=3),
    "three radii": with_element(radii_mm=[20, 50, 50], thickness_mm=3),
    "negative thickness": with_element(radii_mm=[20, 50], thickness_mm=-3),
    "thin and thick": with_element(radii_mm=[20, 50], thickness_mm=3, power_per_mm=0.1),
    "a text for a number": with_element(power_per_mm="0,01"),
    "an unknown parameter": changed(vary=[{"element": 1, "parameter": "radius_mm"}]),
    "a target and a limit": changed(require=[{"quantity": "strength", "target": 1, "at_most": 2,
                                              "budget": 1}]),
    "pressure and altitude": changed(surroundings={"pressure_Pa": 1e5, "altitude_m": 10}),
}


def toml(value):
    """A value as TOML; JSON's texts and numbers are TOML's."""
    if isinstance(value, dict):
        return "{" + ", ".join(f"{key} = {toml(item)}" for key, item in value.items()) + "}"
    if isinstance(value, list):
        return "[" + ", ".join(map(toml, value)) + "]"
    return json.dumps(value)


def check_bad(program, folder):
    path = folder / "train.toml"
    for what, document in {"nothing wrong": GOOD, **BAD}.items():
        path.write_text("".join(f"{key} = {toml(value)}\n" for key, value in document.items()))
        valid = VALIDATORS["train"].is_valid(train(path))
        done = run(program, "analyze", path, "--json")
        if valid != (document is GOOD):
            faults.append(f"{what}: the schema says {'valid' if valid else 'not valid'}")
        if (done.returncode == 0) != (document is GOOD):
            faults.append(f"{what}: the program says {done.returncode}: {done.stderr.strip()}")
        if document is not GOOD and (done.stdout or done.stderr.count("\n") != 1
                                     or done.returncode != 2):
            faults.append(f"{what}: expected exit 2 and one line on stderr only")


def main():
    program = sys.argv[-1]
    check_schemas()
    with tempfile.TemporaryDirectory() as folder:
        check_examples(program, Path(folder))
        check_others(program, Path(folder))
        check_bad(program, Path(folder))
    print("\n".join(faults) or "all valid")
    return 1 if faults else 0


if __name__ == "__main__":
    sys.exit(main())
