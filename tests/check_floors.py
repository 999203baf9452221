"""Proves the floors: check_floors.py FOLDER.

An include runs to a lower floor, to the left within a floor, or stays within its unit; public
headers show the standard library and Boost.Units only; bindings see public headers only; each
third-party library stays in its place; each public header has its source and its test; and the lists
in CMake name every source and test. Prints one line per fault, and exits 1 if there is any.
"""

import re
import sys
from pathlib import Path

# From the ground up; within a floor from left to right. Each is include/chromacore/NAME.hpp.
FLOORS = [
    ["version", "units", "error"],
    ["air", "band", "material", "catalog"],
    ["train"],
    ["paraxial"],
    ["color"],
    ["closed_form", "solve"],
    [],
    ["catalog_file", "train_file", "result_json"],
    ["chromacore"],
]
HEADER_ONLY = {"version", "units", "chromacore"}
NO_TEST = {"chromacore"}  # tests/outside compiles it

# src/NAME.hpp and src/NAME.cpp that are no unit: the unit which they serve.
INTERNAL = {
    "text": "error",
    "catalog_data": "catalog",
    "catalog_contents": "catalog",
    "moist_air": "air",
    "dispersion": "material",
    "material_record": "material",
    "train_check": "train",
    "surfaces": "train",
    "model": "train",
    "trace": "paraxial",
    "trace_batch": "paraxial",
    "first_order": "paraxial",
    "first_order_result": "paraxial",
    "evaluate": "color",
    "requirement": "color",
    "vary": "solve",
    "bounded_step": "solve",
    "least_squares": "solve",
    "solve_variables": "solve",
    "solve_problem": "solve",
    "infeasible": "solve",
    "diagnosis": "solve",
    "text_file": "catalog_file",
    "csv_input": "catalog_file",
    "toml_input": "catalog_file",
    "table_view": "catalog_file",
    "material_table": "catalog_file",
    "material_csv": "catalog_file",
    "material_input": "catalog_file",
    "index_fit": "catalog_file",
    "band_table": "train_file",
    "element_table": "train_file",
    "train_tables": "train_file",
    "task_tables": "train_file",
    "surface_list": "train_file",
    "toml_text": "train_file",
    "material_text": "train_file",
    "train_writer": "train_file",
    "output_file": "train_file",
    "json_text": "result_json",
    "materials_json": "result_json",
}

# Third-party headers: where they may be included.
TEXT_FLOOR = 7
LIBRARIES = {
    "boost/units/": lambda place: True,
    "fmt/": lambda place: place.folder != "include",
    "Eigen/": lambda place: place.folder == "src",
    "ceres/jet.h": lambda place: place.folder == "src",
    "ceres/tiny_solver": lambda place: place.folder == "src",
    "hwy/": lambda place: place.folder == "src",
    "toml++/": lambda place: place.name == "toml_input.cpp",
    "nlohmann/": lambda place: place.folder == "src" and place.floor == TEXT_FLOOR,
    "CLI/": lambda place: place.path.startswith("bindings/cli/"),
}
STANDARD = re.compile(r"[a-z_0-9]+")
SYSTEM = re.compile(r"(sys/)?[a-z_0-9]+\.h")

RANK = {unit: (floor, place) for floor, units in enumerate(FLOORS)
        for place, unit in enumerate(units)}
INCLUDE = re.compile(r'^\s*#\s*include\s*[<"]([^>"]+)[>"]', re.M)


class Place:
    """A source file: where it is and which unit it serves (None: not known, or a binding)."""

    def __init__(self, root, file):
        self.path = file.relative_to(root).as_posix()
        self.folder = self.path.split("/")[0]
        self.name = file.name
        self.unit = None if self.folder == "bindings" else unit_of(file.stem)
        self.floor = RANK[self.unit][0] if self.unit else None


def unit_of(stem):
    """The unit that a header or source serves; None where no list names it."""
    return stem if stem in RANK else INTERNAL.get(stem)


def source_files(root):
    for folder in ("include", "src", "bindings"):
        for file in sorted((root / folder).rglob("*")):
            if file.suffix in (".hpp", ".cpp", ".inl", ".h", ".c"):
                yield file


def project_header(root, file, name):
    """The project's own file that an include means, or None."""
    for folder in (root / "include", root / "src", file.parent):
        if (folder / name).is_file():
            return folder / name
    return None


def fault_of_own(place, header):
    if place.folder == "include" and header.folder != "include":
        return "a public header includes an internal one"
    if place.folder == "bindings":
        return None if header.folder in ("include", "bindings") else "not a public header"
    if header.unit is None or header.unit == place.unit:
        return None  # an unknown header is a fault of its own
    if RANK[header.unit] >= RANK[place.unit]:
        return f"{header.unit} is not below {place.unit}, nor to its left"
    return None


def fault_of_other(place, name):
    for prefix, allowed in LIBRARIES.items():
        if name.startswith(prefix):
            return None if allowed(place) else "this library has no place here"
    if STANDARD.fullmatch(name):
        return None
    if SYSTEM.fullmatch(name) and place.folder != "include":
        return None
    return "neither the project's nor a library that it may use"


def faults_of_file(root, file):
    place = Place(root, file)
    if place.folder != "bindings" and place.unit is None:
        yield f"{place.path}: on no floor; add its name to tests/check_floors.py"
        return
    text = file.read_text(encoding="utf-8")
    for match in INCLUDE.finditer(text):
        name = match[1]
        own = project_header(root, file, name)
        fault = fault_of_own(place, Place(root, own)) if own else fault_of_other(place, name)
        if fault:
            line = text.count("\n", 0, match.start(1)) + 1
            yield f"{place.path}:{line}: includes {name}: {fault}"


def faults_of_units(root):
    """Each public header has its source and its test under the same name."""
    for header in sorted((root / "include/chromacore").glob("*.hpp")):
        name = header.stem
        if name not in HEADER_ONLY and not (root / f"src/{name}.cpp").is_file():
            yield f"include/chromacore/{header.name}: no src/{name}.cpp"
        if name not in NO_TEST and not (root / f"tests/{name}.cpp").is_file():
            yield f"include/chromacore/{header.name}: no tests/{name}.cpp"


def faults_of_lists(root):
    """Each source and each test is named in its list: a test that is not never runs."""
    for folder, list_file, words in (("src", "CMakeLists.txt", "unit|internal"),
                                     ("tests", "tests/CMakeLists.txt", "test")):
        listed = re.findall(rf"chromacore_(?:{words})\((\w+)",
                            (root / list_file).read_text(encoding="utf-8"))
        for file in sorted((root / folder).glob("*.cpp")):
            if file.stem not in listed and file.name != "main.cpp":
                yield f"{folder}/{file.name}: not listed in {list_file}"


def faults(root):
    for file in source_files(root):
        yield from faults_of_file(root, file)
    yield from faults_of_units(root)
    yield from faults_of_lists(root)


def main():
    root = Path(sys.argv[1]).resolve()
    found = list(faults(root))
    print("\n".join(found) or f"{len(list(source_files(root)))} files keep to the floors")
    return 1 if found else 0


if __name__ == "__main__":
    sys.exit(main())
