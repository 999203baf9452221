"""Compile time of each public header: headers.py FOLDER [COMPILER...].

Each header alone, at -O0, against Boost.Units' SI header with <string> <vector> <variant> <memory>;
the two alternate, and the ratio is that of the quickest of each. At most 1.25 passes.
"""

import resource
import subprocess
import sys
import tempfile
from pathlib import Path

MOST = 1.25
PAIRS = 5
BASELINE = "boost/units/systems/si.hpp string vector variant memory".split()


def spent():
    """Processor seconds of all commands so far: what else the machine does counts little there."""
    usage = resource.getrusage(resource.RUSAGE_CHILDREN)
    return usage.ru_utime + usage.ru_stime


def seconds(compiler, root, source):
    start = spent()
    subprocess.run([compiler, "-std=c++20", "-O0", "-c", "-I", str(root / "include"), str(source),
                    "-o", "/dev/null"], check=True)
    return spent() - start


def write_source(folder, name, headers):
    source = Path(folder) / f"{name}.cpp"
    source.write_text("".join(f"#include <{header}>\n" for header in headers), encoding="utf-8")
    return source


def ratios(compiler, root, folder):
    """(ratio, smallest and largest ratio of a pair, header), for each public header."""
    baseline = write_source(folder, "baseline", BASELINE)
    for header in sorted((root / "include/chromacore").glob("*.hpp")):
        source = write_source(folder, header.stem, [f"chromacore/{header.name}"])
        pairs = [(seconds(compiler, root, source), seconds(compiler, root, baseline))
                 for _ in range(PAIRS)]
        each = [ours / theirs for ours, theirs in pairs]
        ratio = min(ours for ours, _ in pairs) / min(theirs for _, theirs in pairs)
        yield ratio, min(each), max(each), header.name


def main():
    root = Path(sys.argv[1]).resolve()
    worst = 0.0
    for compiler in sys.argv[2:] or ["g++"]:
        with tempfile.TemporaryDirectory() as folder:
            for ratio, low, high, name in ratios(compiler, root, folder):
                print(f"{compiler} {name} / Boost.Units SI: ratio {ratio:.2f} "
                      f"({low:.2f} to {high:.2f}, {PAIRS} pairs)", flush=True)
                worst = max(worst, ratio)
    print(f"largest ratio {worst:.2f}, at most {MOST}: {'pass' if worst <= MOST else 'FAIL'}")
    return 0 if worst <= MOST else 1


if __name__ == "__main__":
    sys.exit(main())
