"""Writing a reference table as JSON, reading it back, and telling what differs."""
import json
import sys
from pathlib import Path

from mpmath import mp, mpf

NOTHING = mpf("1e-40")      # smaller figures are rounding of an exact 0 at 60 digits
DIGITS = 17


def as_text(value):
    if isinstance(value, mpf):
        return "0" if abs(value) < NOTHING else mp.nstr(value, DIGITS)
    if isinstance(value, dict):
        return "{" + ",".join(f"{json.dumps(k)}:{as_text(v)}" for k, v in value.items()) + "}"
    if isinstance(value, (list, tuple)):
        return "[" + ",".join(as_text(v) for v in value) + "]"
    return json.dumps(value)


def write(path, head, **lists):
    """`head`: a few plain facts. Then each list, one entry to a line."""
    parts = [f"{json.dumps(k)}: {as_text(v)}" for k, v in head.items()]
    for name, entries in lists.items():
        parts.append(f"{json.dumps(name)}: [\n" + ",\n".join(as_text(e) for e in entries) + "\n]")
    Path(path).write_text("{\n" + ",\n".join(parts) + "\n}\n", encoding="utf-8")


def read(path):
    return json.loads(Path(path).read_text(encoding="utf-8"), parse_float=mpf)


def differences(stored, fresh, rel, floor=NOTHING, at=""):
    """One line for every place where the two differ by more than `rel` of the stored value."""
    if isinstance(stored, dict) and isinstance(fresh, dict) and stored.keys() == fresh.keys():
        return [d for k in stored
                for d in differences(stored[k], fresh[k], rel, floor, f"{at}.{k}")]
    if isinstance(stored, list) and isinstance(fresh, list) and len(stored) == len(fresh):
        return [d for i, (s, f) in enumerate(zip(stored, fresh))
                for d in differences(s, f, rel, floor, f"{at}[{i}]")]
    plain = (int, float, mpf)
    if isinstance(stored, plain) and isinstance(fresh, plain) and not isinstance(stored, bool):
        same = abs(mpf(fresh) - stored) <= floor + rel * abs(mpf(stored))
    else:
        same = stored == fresh
    return [] if same else [f"{at}: stored {stored}, now {fresh}"]


def check(path, fresh, rel, floor=NOTHING):
    """Prints what differs and a closing line; the exit code."""
    stored = read(path)
    found = differences(stored, json.loads(as_text(fresh), parse_float=mpf), rel, floor)
    for line in found[:20]:
        print(line)
    count = sum(len(v) for v in fresh.values() if isinstance(v, list))
    if found:
        print(f"{Path(path).name}: {len(found)} figures differ from what is computed now")
    else:
        print(f"{Path(path).name}: {count} entries, all as computed now (relative {rel:g})")
    return 1 if found else 0


def main(path, head, compute, rel, floor=NOTHING, arguments=None):
    """`--check` compares, otherwise writes. `compute` gives {name: list of entries}."""
    fresh = compute()
    arguments = sys.argv[1:] if arguments is None else arguments
    if "--check" in arguments:
        return check(path, {**head, **fresh}, rel, floor)
    write(path, head, **fresh)
    print(f"{Path(path).name}: written, {Path(path).stat().st_size / 1000:.0f} kB")
    return 0
