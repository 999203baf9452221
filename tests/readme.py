"""What README.md shows is what happens: readme.py PROGRAM.

Each `console` block is run in one folder that has the examples: a line after `$ ` is a command, the
lines below are what it prints. Each `sh` block names scripts that exist. The `cpp` block is the
program that tests/outside builds, word for word; links lead somewhere.
"""

import os
import re
import subprocess
import sys
import tempfile
from pathlib import Path

ROOT = Path(__file__).resolve().parent.parent
README = (ROOT / "README.md").read_text(encoding="utf-8")


def blocks(language):
    return re.findall(rf"^```{language}\n(.*?)^```$", README, re.M | re.S)


def printed_by(command, folder, program):
    path = f"{Path(program).resolve().parent}:{os.environ['PATH']}"
    return subprocess.run(["bash", "-c", command], cwd=folder, capture_output=True, text=True,
                          env={**os.environ, "PATH": path}).stdout


def console_faults(program):
    with tempfile.TemporaryDirectory() as folder:
        (Path(folder) / "examples").symlink_to(ROOT / "examples")
        for block in blocks("console"):
            for part in re.split(r"^\$ ", block, flags=re.M)[1:]:
                command, _, expected = part.partition("\n")
                got = printed_by(command, folder, program)
                # How many steps the solver takes may differ between compilers.
                steps = re.compile(r"after \d+ iterations")
                if steps.sub("", got).strip() != steps.sub("", expected).strip():
                    yield f"$ {command}\nprints:\n{got}\nREADME.md has:\n{expected}"


def script_faults():
    for block in blocks("sh"):
        for script in re.findall(r"^bash (\S+)", block, re.M):
            if not os.access(ROOT / script, os.X_OK):
                yield f"bash {script}: no such script"


def program_faults():
    if blocks("cpp") != [(ROOT / "tests/outside/first_hour.cpp").read_text(encoding="utf-8")]:
        yield "the cpp block is not tests/outside/first_hour.cpp"


def link_faults():
    for name in ["README.md", "DEVELOPERS.md"]:
        text = (ROOT / name).read_text(encoding="utf-8")
        for link in re.findall(r"\]\(([^)#:]+)\)", text):
            if not (ROOT / link).exists():
                yield f"{name}: the link to {link} leads nowhere"


def main():
    faults = [*console_faults(sys.argv[-1]), *script_faults(), *program_faults(), *link_faults()]
    print("\n\n".join(faults) or "README.md is right")
    return 1 if faults else 0


if __name__ == "__main__":
    sys.exit(main())
