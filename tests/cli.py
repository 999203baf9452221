"""The program from end to end: cli.py PROGRAM.

Verbs, exit codes, what is printed where, files written or left alone. A test is a function whose
name begins with test_; it fails by an assertion.
"""

import json
import os
import pty
import re
import shlex
import signal
import subprocess
import sys
import tempfile
from pathlib import Path

ROOT = Path(__file__).resolve().parent.parent
EXAMPLES = sorted((ROOT / "examples").glob("*.toml"))
PROGRAM = sys.argv[-1]
MET = [path for path in EXAMPLES if path.stem != "two-are-not-enough"]


def run(*arguments, folder=None, **environment):
    """Exit code, standard output and standard error of the program."""
    done = subprocess.run([PROGRAM, *map(str, arguments)], capture_output=True, text=True,
                          cwd=folder or ROOT, env={**os.environ, **environment})
    return done.returncode, done.stdout, done.stderr


def answer(*arguments, code=0, **environment):
    """What the program prints, where nothing went wrong."""
    got, printed, complaint = run(*arguments, **environment)
    assert (got, complaint) == (code, ""), (arguments, got, complaint)
    return printed


def refuse(arguments, line):
    """Exit 2, this one line, nothing on standard output; with --json too."""
    for more in ([], ["--json"]) if arguments and arguments[0] in VERBS else ([],):
        with tempfile.TemporaryDirectory() as folder:
            out = Path(folder) / "out"
            asked = [*arguments, *more, *(["--out", out] if more else [])]
            code, printed, complaint = run(*asked)
            assert (code, printed) == (2, ""), (asked, code, printed)
            assert complaint == line + "\n", (asked, complaint)
            assert len(line) <= 400 and not out.exists(), asked


VERBS = ["materials", "import", "analyze", "solve"]
ACHROMAT = ROOT / "examples/achromat.toml"
NO_FOCUS = ("no focus: the train's total power is 0 per mm; it needs a power other than 0 at the "
            "reference wavelength, from power_per_mm of its elements")


def changed(folder, *replacements, of=ACHROMAT):
    """A copy of an example with some of its text replaced."""
    text = of.read_text()
    for old, new in replacements:
        assert old in text, old
        text = text.replace(old, new, 1)
    file = Path(folder) / "train.toml"
    file.write_text(text)
    return file


def without_tables(folder, *names):
    """The achromat without its tables of these names."""
    blocks = ACHROMAT.read_text().split("\n\n")
    kept = [block for block in blocks if not any(block.startswith(f"[[{name}]]") for name in names)]
    file = Path(folder) / "train.toml"
    file.write_text("\n\n".join(kept) + "\n")
    return file


# ------------------------------------------------------------------------------------- the verbs
def test_version_names_the_program_and_its_data():
    lines = answer("--version").splitlines()
    assert re.fullmatch(r"chromacore \d+\.\d+\.\d+", lines[0]), lines
    assert re.fullmatch(r"materials: .*refractiveindex\.info.*CC0 1\.0.*", lines[1]), lines


def test_help_lists_the_verbs_and_each_has_examples_that_work():
    assert all(re.search(rf"^  {verb} ", answer("--help"), re.M) for verb in VERBS)
    with tempfile.TemporaryDirectory() as folder:
        (Path(folder) / "examples").symlink_to(ROOT / "examples")
        for verb in VERBS:
            commands = re.findall(r"^  chromacore (.*)$", answer(verb, "--help"), re.M)
            assert commands, verb
            for command in commands:
                code, printed, complaint = run(*shlex.split(command), folder=folder)
                assert (code, complaint) == (0, ""), (command, complaint)
                assert printed or "--out" in command, command


def test_materials_are_filtered_and_sorted():
    every = json.loads(answer("materials", "--json"))["materials"]
    schott = json.loads(answer("materials", "--json", "--maker", "schott", "--status", "current",
                               "--sort", "v", "--descending"))["materials"]
    assert 0 < len(schott) < len(every)
    assert {material["maker"] for material in schott} == {"SCHOTT"}
    v = [material["v"] for material in schott if material["v"] is not None]
    assert len(v) > 100 and v == sorted(v, reverse=True)
    infrared = json.loads(answer("materials", "--json", "--band", "3,4,5"))["materials"]
    assert {"Si", "Ge", "ZnSe"} <= {material["name"] for material in infrared}
    assert "N-BK7" not in {material["name"] for material in infrared}
    assert len(json.loads(answer("materials", "--json", "--limit", "3"))["materials"]) == 3


def test_a_list_has_units_and_says_how_many():
    lines = answer("materials", "--maker", "SCHOTT", "--covers", "0.4:1.0", "--limit", "4"
                   ).splitlines()
    assert len(lines) == 2 + 4 + 1 and lines[1].split()[-2:] == ["um", "um"], lines
    assert re.match(r"\d+ of \d+ materials, the first 4 shown", lines[-1]), lines
    assert len({len(line) for line in lines[2:6] if "caution" not in line}) == 1, lines


def test_a_material_is_shown_in_full():
    # SCHOTT data sheet N-BK7 (517642): n_d = 1.51680, V_d = 64.17.
    page = answer("materials", "n-bk7")
    for text in ["SCHOTT/N-BK7", "517642", "1.516800", "64.167", "1.03961212", "n^2 - 1 =", "2510"]:
        assert text in page, text
    assert answer("materials", "SCHOTT/N-BK7") == page
    toxic = answer("materials", "ZnSe")
    assert "caution: toxic" in toxic and toxic.endswith(
        "Follow the maker's safety sheet and the local rules.\n")


def test_an_account_names_the_worst_element_and_ends_with_what_to_try():
    text = answer("analyze", "examples/achromat.toml")
    assert re.search(r"^  2 +SCHOTT/F2 .*<- most axial$", text, re.M), text
    assert re.search(r"^  axial_color_mm F - C .*<- over budget$", text, re.M), text
    assert text.splitlines()[-1].startswith("Next: 1 requirement is over budget: chromacore solve")


def test_strict_is_about_the_requirements():
    answer("analyze", "examples/achromat.toml")
    answer("analyze", "examples/achromat.toml", "--strict", code=1)
    with tempfile.TemporaryDirectory() as folder:
        answer("solve", "examples/achromat.toml", "--out", f"{folder}/solved.toml")
        answer("analyze", f"{folder}/solved.toml", "--strict")


def close(got, want):
    """Within 1e-9, relative; where the value is what is left of a difference, of 1e-9 mm."""
    if isinstance(want, dict):
        return got.keys() == want.keys() and all(close(got[key], want[key]) for key in want)
    if isinstance(want, list):
        return len(got) == len(want) and all(map(close, got, want))
    if isinstance(want, float):
        return abs(got - want) <= 1e-9 * max(1, abs(want))
    return got == want


def test_each_example_starts_over_budget_and_is_solved():
    for path in MET:
        answer("analyze", path, "--strict", code=1)
        with tempfile.TemporaryDirectory() as folder:
            out = Path(folder) / "solved.toml"
            solved = json.loads(answer("solve", path, "--json", "--out", out))
            assert solved.pop("solution")["status"] == "met", path
            assert all(row["spent"] <= 1 for row in solved["requirements"]), path
            assert close(json.loads(answer("analyze", out, "--json", "--strict")), solved), path


def test_an_ordinary_pair_leaves_about_a_2000th():
    # Secondary spectrum of N-BK7 + F2, thin: focal length/2003 between d and the common focus of
    # F and C; "about f/2000" is the usual statement for an ordinary pair (common practice).
    solved = json.loads(answer("solve", "examples/achromat.toml", "--json"))
    left = -solved["totals"]["secondary_axial_mm"]
    assert abs(500 / left - 2003) < 2, 500 / left
    assert left > solved["requirements"][1]["budget"]
    three = json.loads(answer("solve", "examples/apochromat.toml", "--json"))
    assert abs(three["totals"]["secondary_axial_mm"]) < solved["requirements"][1]["budget"]


def test_a_compromise_exits_1_and_is_written():
    with tempfile.TemporaryDirectory() as folder:
        out = Path(folder) / "best.toml"
        text = answer("solve", "examples/two-are-not-enough.toml", "--out", out, code=1)
        assert "\ncompromise: secondary_axial_mm blocks" in text, text
        answer("analyze", out, "--strict", code=1)


def test_closed_forms_start_the_solver():
    for example, form in [("achromat", "achromat"), ("apochromat", "apochromat")]:
        solved = json.loads(answer("solve", f"examples/{example}.toml", "--start", form, "--json"))
        assert solved["solution"]["status"] == "met", form
    with tempfile.TemporaryDirectory() as folder:
        apart = changed(folder, ("power_per_mm = 0.001", "power_per_mm = 0.0\ngap_after_mm = 30"),
                        ("power_per_mm = 0.001", "power_per_mm = 0.0"))
        refuse(["solve", apart], f"{apart}: {NO_FOCUS}")
        solved = json.loads(answer("solve", apart, "--start", "dialyte", "--json"))
        assert solved["solution"]["status"] == "met"


def test_a_surface_list_becomes_a_train():
    text = answer("import", "examples/surfaces.csv")
    assert text.count("# assumed") >= 3 and text.count("[[element]]") == 3, text
    with tempfile.TemporaryDirectory() as folder:
        out = Path(folder) / "old.toml"
        said = answer("import", "examples/surfaces.csv", "--out", out)
        assert out.read_text() == text
        assert said.splitlines()[-1] == f"Next: chromacore analyze {out}"
        analysis = json.loads(answer("analyze", out, "--json"))
        imported = json.loads(answer("import", "examples/surfaces.csv", "--json"))
        assert close(analysis, imported)


def test_a_catalogue_of_ones_own_is_read():
    with tempfile.TemporaryDirectory() as folder:
        own = Path(folder) / "own.csv"
        own.write_text("name,n_ref,v,p_ref_long\nisland sand glass,1.5200,60.0,0.3060\n")
        train = changed(folder, ('"N-BK7"', '"island sand glass"'))
        first = json.loads(answer("analyze", train, "--catalog", own, "--json"))["elements"][0]
        assert abs(first["v"] - 60) < 0.01, first
        assert run("analyze", train)[0] == 2


# ----------------------------------------------------------------------------------- what is wrong
def test_the_command_line_is_refused_in_one_line():
    help_of = "; see chromacore {} --help".format
    for arguments, line in [
        ([], "chromacore: a verb was expected; one of: materials, import, analyze, solve"),
        (["analyse", "x"], "chromacore: no verb analyse; nearest: analyze"),
        (["analyze"], "chromacore analyze: TRAIN is required" + help_of("analyze")),
        (["analyze", "a", "--jsno"], "chromacore analyze: no option --jsno; nearest: --json"),
        (["analyze", "a", "b"], "chromacore analyze: b is one argument too many"),
        (["materials", "N-BK7", "--limit", "3"],
         "chromacore materials: NAME excludes --limit" + help_of("materials")),
        (["materials", "--limit", "1.5"],
         "chromacore materials: --limit 1.5: a whole number above 0 was expected"),
        (["materials", "--sort", "abbe"], "chromacore materials: --sort abbe is not known; one of: "
         "name, n, v, p, deviation"),
        (["materials", "--maker", "SCHOT"],
         "chromacore materials: no maker SCHOT; nearest: SCHOTT"),
        (["materials", "--covers", "0.4"], "chromacore materials: --covers 0.4: two ends in um or "
         "as letters were expected, as in 0.4:1.0"),
        (["materials", "NBK7"], 'no material "NBK7"; nearest: N-BK7, N-BK7HT, N-ZK7'),
        (["materials", "F2"],
         'several materials are "F2"; say which: SCHOTT/F2, HIKARI/F2, CDGM/F2'),
        (["solve", ACHROMAT, "--start", "acromat"],
         "chromacore solve: --start acromat is not known; nearest: achromat, apochromat"),
        (["solve", ACHROMAT, "--start", "apochromat"], f"{ACHROMAT}: --start apochromat needs "
         "exactly 3 thin elements (material and power_per_mm); the train has 2 elements"),
        (["analyze", "absent.toml"], "absent.toml: cannot read the file: no such file"),
        (["analyze", "examples"], "examples: cannot read the file: it is a folder"),
        (["import", "absent.csv"], "absent.csv: cannot read the file: no such file"),
        (["materials", "--catalog", "absent.csv"],
         "absent.csv: cannot read the file: no such file"),
    ]:
        refuse(arguments, line)


def test_a_bad_train_is_refused_in_one_line():
    # The whole list, message by message, is in bad_input.cpp; here is the way through the program.
    with tempfile.TemporaryDirectory() as folder:
        file = Path(folder) / "train.toml"
        for old, new, line in [
            ("half_angle_deg", "half_angel_deg",
             '19:18: unknown key "half_angel_deg" in [field]; nearest: half_angle_deg'),
            ('"C"]', "4.2]", "13:34: element 1: material N-BK7: no index at 4.2 um; its source "
             "covers 0.3 to 2.5 um"),
            ("= 0.001", "= 0,001", "23:17: a decimal comma; numbers have a decimal point"),
            ("= 0.001", "= nan", "23:16: element 1: power_per_mm is nan; expected a finite number"),
            ("= 0.001", "= -0.001", " " + NO_FOCUS),
        ]:
            refuse(["analyze", changed(folder, (old, new))], f"{file}:{line}")
        file.write_text(".".join(["a"] * 200_000) + " = 1\n")
        refuse(["analyze", file], f"{file}:1:34: nested too deeply; at most 16 levels")
        with open(file, "w") as large:
            large.truncate(100 << 20)
        refuse(["analyze", file],
               f"{file}: the file has {100 << 20} bytes; at most {4 << 20} are read")


def test_a_train_without_blocks_is_told_where_to_find_them():
    with tempfile.TemporaryDirectory() as folder:
        train = without_tables(folder, "vary")
        refuse(["solve", train], f"{train}: nothing may vary; [[vary]] blocks to paste are in: "
               "chromacore solve --help")
        train = without_tables(folder, "require")
        refuse(["solve", train], f"{train}: nothing is required; [[require]] blocks to paste are "
               "in: chromacore solve --help")
        train.write_text(without_tables(folder, "vary").read_text().replace("N-BK7", "NBK7"))
        refuse(["solve", train], f'{train}:22:16: element 1: no material "NBK7"; nearest: N-BK7, '
               "N-BK7HT, N-ZK7")


def test_the_blocks_of_the_help_page_work_when_pasted():
    page = answer("solve", "--help")
    blocks = re.findall(r"^  \[\[(?:vary|require)\]\]\n(?:    ?.*\n|  \w.*\n| +#.*\n)+", page, re.M)
    assert len(blocks) == 3, blocks
    with tempfile.TemporaryDirectory() as folder:
        train = without_tables(folder, "vary", "require")
        pasted = "".join(blocks) + blocks[0].replace("= 1 ", "= 2 ")
        train.write_text(train.read_text() + "\n" + pasted)
        assert json.loads(answer("solve", train, "--json"))["solution"]["status"] == "met"


def test_equal_materials_make_no_achromat():
    with tempfile.TemporaryDirectory() as folder:
        twins = changed(folder, ('"SCHOTT/F2"', '"N-BK7"'))
        refuse(["solve", twins, "--start", "achromat"], f"{twins}: the two materials have equal V, "
               "64.1673 and 64.1673: no powers of theirs cancel their colour; take materials of "
               "different V")
        solved = json.loads(answer("solve", twins, "--json", code=1))
        assert solved["solution"]["status"] == "infeasible"


# ------------------------------------------------------------------------------ files and streams
def test_an_old_file_is_replaced_whole_or_left_alone():
    with tempfile.TemporaryDirectory() as folder:
        out = Path(folder) / "out.toml"
        out.write_text("old")
        assert run("solve", "examples/achromat.toml", "--start", "dialite", "--out", out)[0] == 2
        assert run("analyze", "absent.toml", "--out", out)[0] == 2
        assert out.read_text() == "old"
        assert answer("analyze", "examples/achromat.toml", "--json", "--out", out) == ""
        assert out.read_text() == answer("analyze", "examples/achromat.toml", "--json")
        assert os.listdir(folder) == ["out.toml"]


def test_a_file_that_cannot_be_written_leaves_standard_output_empty():
    refuse_path = "/absent-folder/out.toml"
    code, printed, complaint = run("solve", "examples/achromat.toml", "--out", refuse_path)
    assert (code, printed) == (2, "")
    assert complaint == f"{refuse_path}: cannot write the file: its folder does not exist\n"


def test_a_full_disk_and_a_closed_pipe_are_said():
    with open("/dev/full", "w") as full:
        done = subprocess.run([PROGRAM, "materials"], stdout=full, stderr=subprocess.PIPE,
                              text=True)
    assert done.returncode == 2
    assert done.stderr == "standard output: cannot be written: No space left on device\n"
    read_end, write_end = os.pipe()
    os.close(read_end)
    done = subprocess.run([PROGRAM, "materials"], stdout=write_end, stderr=subprocess.PIPE,
                          text=True, restore_signals=True)
    os.close(write_end)
    assert done.returncode == 2, signal.Signals(-done.returncode)
    assert done.stderr == "standard output: cannot be written: Broken pipe\n"


def on_a_terminal(*arguments, **environment):
    """What the program prints where its standard output is a terminal."""
    main, terminal = pty.openpty()
    process = subprocess.Popen([PROGRAM, *arguments], stdout=terminal, cwd=ROOT,
                               env={**os.environ, "TERM": "xterm", "NO_COLOR": "", **environment})
    os.close(terminal)
    printed = b""
    while True:
        try:
            part = os.read(main, 65536)
        except OSError:  # the other end is closed
            break
        if not part:
            break
        printed += part
    os.close(main)
    assert process.wait() == 0
    return printed.decode().replace("\r\n", "\n")


def test_colour_is_for_terminals_alone():
    asked = ["analyze", "examples/achromat.toml"]
    plain = answer(*asked)
    assert "\x1b" not in plain
    coloured = on_a_terminal(*asked)
    assert "\x1b[1;31m" in coloured and re.sub(r"\x1b\[[0-9;]*m", "", coloured) == plain
    assert on_a_terminal(*asked, NO_COLOR="1") == plain
    assert on_a_terminal(*asked, TERM="dumb") == plain


def test_the_same_bytes_in_every_locale():
    for asked in [["materials", "--maker", "SCHOTT", "--covers", "0.4:1.5"],
                  ["materials", "--json", "--band", "0.45,0.55,0.65"], ["materials", "N-BK7"],
                  ["analyze", "examples/wide-field.toml"],
                  ["solve", "examples/wide-field.toml", "--json"],
                  ["import", "examples/surfaces.csv"]]:
        assert answer(*asked, LC_ALL="C") == answer(*asked, LC_ALL="de_DE.UTF-8"), asked


def main():
    failed = 0
    for name, test in list(globals().items()):
        if not name.startswith("test_"):
            continue
        try:
            test()
        except AssertionError as fault:
            failed += 1
            line = fault.__traceback__.tb_next.tb_lineno
            print(f"FAILED {name} (line {line} of cli.py): {fault}")
        else:
            print(f"passed {name}")
    return 1 if failed else 0


if __name__ == "__main__":
    sys.exit(main())
