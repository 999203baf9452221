#!/usr/bin/python3
"""Makes trains.json: random trains and what `chromacore analyze --json` must say of each.

    /usr/bin/python3 tests/reference/trains.py            write the table
    /usr/bin/python3 tests/reference/trains.py --check    compute again and compare (1e-12)

Each entry holds `toml`, a train file, and `expect`, the answer's keys as far as they follow from
the definitions (no `notes`; `why` lists the keys that are null in `first_order`). Figures are
computed at 60 digits and given to 17; what is 0 by symmetry is 0. Every train keeps the laws of
laws.py, and a ray trace in plain doubles reaches each figure to 1e-10.

How the definitions were read where they leave a choice:
- Curves stand in the order of the file's wavelengths, and at those only, also where the reference
  is not one of them. `samples` are evenly spaced in wavelength, both ends included.
- The magnification of an object at infinity is 0.
- `between_um` comes back in um, only where the file has it; without it the primary pair counts.
- A diffractive element has no material (null); its `v` and `p_ref_long` are those of its wavelengths
  in the surroundings. `abbe_number` is the material's own, in standard air (for a diffractive element
  that of the lines d, F and C); null where a material's lines don't reach from F to C, and for one
  without dispersion.
- A material of one line has that index at every wavelength.
- With surroundings, every index and `v` is relative to them; a `[[material]]` was measured at 20 C.
- A numerical aperture gives the marginal ray's slope as it stands. A pupil's diameter is positive.
- `f_number` and the pupil's diameter are null where the entrance pupil is at infinity.
- A surface belongs to one element and has the surroundings on its other side, cemented or not.
- Default budgets: 0.1 % of the target or bound; the quarter wave (axial, secondary axial) and the
  pixel or Airy radius (lateral, secondary lateral) with the working f-number of the train as it is.
"""
import sys

sys.dont_write_bytecode = True

from pathlib import Path  # noqa: E402

from mpmath import mp, mpf  # noqa: E402

import laws  # noqa: E402
import table  # noqa: E402
from model import Analysis, magnitude  # noqa: E402
from random_trains import Draw  # noqa: E402
from special_trains import SPECIAL  # noqa: E402
from train_text import LINES, Train  # noqa: E402

SEED = 20240917
COUNT = 42
FILE = Path(__file__).with_suffix(".json")
QUANTITIES = ["focal_length_mm", "axial_color_mm", "lateral_color_mm", "secondary_axial_mm",
              "back_focal_distance_mm", "image_distance_mm", "axial_sum_mm", "track_length_mm",
              "magnification", "lateral_sum_mm", "f_number", "petzval_per_mm", "strength",
              "entrance_pupil_position_mm", "exit_pupil_position_mm", "secondary_lateral_mm"]
WITH_DEFAULT_BUDGET = {"focal_length_mm", "axial_color_mm", "lateral_color_mm",
                       "secondary_axial_mm", "secondary_lateral_mm"}


# ------------------------------------------------------------------------------- what is expected
def first_order(a):
    s = a.system
    half = a.half_pupil
    return {"focal_length_mm": s.focal_length, "back_focal_distance_mm": s.back_focal_distance,
            "image_distance_mm": s.image_distance, "f_number": a.f_number,
            "working_f_number": a.working_f_number, "magnification": s.magnification,
            "entrance_pupil_position_mm": s.entrance_pupil,
            "entrance_pupil_diameter_mm": None if half is None else 2 * magnitude(half),
            "exit_pupil_position_mm": s.exit_pupil, "lagrange_invariant_mm": a.lagrange,
            "petzval_per_mm": a.petzval, "track_length_mm": a.track_length}


def dispersion(train, element, reference, short, long):
    """(V, P(ref, long)); None without dispersion."""
    def n(w):
        if element.kind == "diffractive":
            return 1 + train.wavelength_there(w)
        return train.index(element.material, w)
    spread = n(short) - n(long)
    if abs(spread) < table.NOTHING:
        return None, None
    return (n(reference) - 1) / spread, (n(reference) - n(long)) / spread


def abbe_number(train, element):
    f, d, c = (mpf(LINES[w]) for w in "FdC")
    if element.kind == "diffractive":
        return d / (f - c)
    if not all(train.covers(element.material, w) for w in (f, c)):
        return None
    n = {w: train.index_in_air(element.material, w) for w in (f, d, c)}
    return (n[d] - 1) / (n[f] - n[c]) if abs(n[f] - n[c]) >= table.NOTHING else None


def elements(a):
    t = a.train
    for i, (e, sums) in enumerate(zip(t.elements, a.element_sums(t.short, t.long))):
        v, p = dispersion(t, e, t.reference, t.short, t.long)
        yield {"element": i + 1, "material": e.material, "power_per_mm": a.system.element_power(i),
               "v": v, "p_ref_long": p, "abbe_number": abbe_number(t, e),
               "marginal_height_mm": a.height(i, a.marginal),
               "chief_height_mm": a.height(i, a.chief),
               "axial_sum_mm": sums[0], "lateral_sum_mm": sums[1]}


def surfaces(a):
    t = a.train
    for surface, (i, axial, lateral) in zip(a.surfaces(), a.surface_sums(t.short, t.long)):
        _, _, c, _, _, matrix = surface
        yield {"element": i + 1, "radius_mm": None if c == 0 else 1 / c,
               "marginal_height_mm": laws.at(matrix, a.marginal)[0],
               "chief_height_mm": laws.at(matrix, a.chief)[0],
               "axial_sum_mm": axial, "lateral_sum_mm": lateral}


def totals(a):
    t, u = a.train, a.image_slope
    axial, lateral = a.totals(t.short, t.long)
    secondary_axial, secondary_lateral = a.totals(t.reference, t.long)
    return {"axial_color_mm": a.axial_color(t.short, t.long),
            "lateral_color_mm": a.lateral_color(t.short, t.long),
            "axial_sum_mm": axial, "lateral_sum_mm": lateral,
            "secondary_axial_sum_mm": secondary_axial,
            "secondary_lateral_sum_mm": secondary_lateral,
            "axial_color_from_sums_mm": -axial / (u * u),
            "lateral_color_from_sums_mm": lateral / u,
            "secondary_axial_mm": a.secondary(a.focus),
            "secondary_lateral_mm": a.secondary(a.lateral), "rms_focus_mm": a.rms_focus}


def curves(a):
    t = a.train
    return {"wavelength_um": t.wavelengths,
            "focus_difference_mm": [a.axial_color(w, t.reference) for w in t.wavelengths],
            "lateral_difference_mm": [a.lateral_color(w, t.reference) for w in t.wavelengths],
            "focal_length_mm": [a.colored(w).focal_length for w in t.wavelengths]}


def requirement(a, r):
    out = {"quantity": r["quantity"]}
    if "between_um" in r:
        out["between_um"] = [a.train.wavelength(w) for w in r["between_um"]]
    if "element" in r:
        out["element"] = r["element"]
    out["value"] = a.value(r)
    out.update({k: mpf(r[k]) for k in ("target", "at_least", "at_most") if k in r})
    return {**out, "budget": a.budget(r), "spent": abs(a.residual(r))}


def expect(text):
    a = Analysis(Train(text))
    first = first_order(a)
    return {"format": 1, "name": a.train.name, "reference_um": a.train.reference,
            "first_order": first, "elements": list(elements(a)), "surfaces": list(surfaces(a)),
            "totals": totals(a), "curves": curves(a),
            "requirements": [requirement(a, r) for r in a.train.require],
            "why": [k for k, v in first.items() if v is None]}


# ---------------------------------------------------------------------------------- random trains
def sane(a):
    s, t = a.system, a.train
    for w in t.wavelengths:
        if not (abs(a.focus(w)) < 4000 and 15 < abs(a.colored(w).focal_length) < 2500):
            return False
    pupils = s.entrance_pupil, s.exit_pupil
    if None in pupils or max(abs(p) for p in pupils) > 3000:
        return False
    if t.object_distance is not None:
        if t.object_distance + s.entrance_pupil < 10 or not 0.02 < abs(s.magnification) < 20:
            return False
    heights = [a.height(i, ray) for i in range(len(t.elements)) for ray in (a.marginal, a.chief)]
    return max(map(abs, heights)) < 200 and abs(a.lateral(t.reference)) < 200


def in_doubles(a):
    """Does a ray trace in doubles reach every figure, and every difference, to 1e-10?"""
    t, found = a.train, laws.by_ray_trace(a.train, a)
    exact = {"image_distance_mm": a.system.image_distance, "lagrange_invariant_mm": a.lagrange,
             "focal_length_mm": a.system.focal_length,
             "back_focal_distance_mm": a.system.back_focal_distance}
    for pair, name in (((t.short, t.long), ""), ((t.reference, t.long), "secondary ")):
        exact[f"{name}axial total"], exact[f"{name}lateral total"] = a.totals(*pair)
        for i, (one, two) in enumerate(a.element_sums(*pair)):
            exact[f"{name}axial {i}"], exact[f"{name}lateral sum {i}"] = one, two
    for kind, curve in (("focus", a.focus), ("lateral", a.lateral)):
        values = [(found[f"{kind} {k}"], curve(w)) for k, w in enumerate(t.wavelengths)]
        exact.update({f"{kind} {k}": v for k, (_, v) in enumerate(values)})
        (base, size), base_exact = values[0]
        for k, ((value, _), value_exact) in enumerate(values[1:]):
            found[f"{kind} step {k}"] = value - base, max(abs(base), size)
            exact[f"{kind} step {k}"] = value_exact - base_exact
    return all(reached(found[k], v) for k, v in exact.items())


def reached(found, exact):
    value, size = found
    if abs(exact) < table.NOTHING:
        return abs(value) <= 1e-12 * abs(size)
    return abs(mpf(value) - exact) <= 1e-10 * abs(exact)


def aperture(draw, text, finite):
    """A sensible one, from the train's focal length and pupil."""
    a = Analysis(Train(text.replace("{aperture}", "[aperture]\nentrance_pupil_diameter_mm = 1\n")))
    number = draw.between(3, 18)
    diameter = abs(a.system.focal_length) / number
    kind = draw.pick(["entrance_pupil_diameter_mm", "f_number"] + ["object_na"] * 2 * finite)
    value = {"entrance_pupil_diameter_mm": f"{float(diameter):.2f}", "f_number": f"{number:.2f}"}
    if kind == "object_na":
        pupil = a.system.entrance_pupil
        slope = 0 if pupil is None else diameter / 2 / (a.train.object_distance + pupil)
        value[kind] = f"{float(slope):.4f}"
    return text.replace("{aperture}", f"[aperture]\n{kind} = {value[kind]}\n")


def require(draw, a, quantity):
    """Text of one requirement, with a target near the value but not at it."""
    r = {"quantity": quantity}
    lines = f'[[require]]\nquantity = "{quantity}"\n'
    if quantity.endswith("_sum_mm"):
        r["element"] = 1 + int(draw.random() * len(a.train.elements))
        lines += f"element = {r['element']}\n"
    if quantity in ("axial_color_mm", "lateral_color_mm") and draw.chance(0.6):
        third = (2 * a.train.short + a.train.long) / 3
        pair = [mp.nstr(third, 3), mp.nstr(a.train.long, 7)]
        r["between_um"] = [mpf(w) for w in pair]
        lines += f"between_um = [{', '.join(pair)}]\n"
    value = float(a.value(r))
    kind = draw.pick(["target", "at_least", "at_most"], [2, 1, 1])
    aim = 0.0 if "color" in quantity or "secondary" in quantity else \
        float(f"{value * draw.between(0.9, 1.1):.2g}")
    lines += f"{kind} = {aim}\n"
    if quantity not in WITH_DEFAULT_BUDGET or draw.chance(0.5):
        lines += f"budget = {max(abs(value), 1e-3) * draw.between(0.01, 0.5):.2g}\n"
    return lines


def random_trains():
    draw, kept, asked = Draw(SEED), [], 0
    while len(kept) < COUNT:
        text, finite = draw.train(f"random train {len(kept) + 1}")
        try:
            text = aperture(draw, text, finite)
            a = Analysis(Train(text))
            if not sane(a) or not in_doubles(a):
                continue
        except ZeroDivisionError:
            continue
        for _ in range(len(kept) % 3):
            text += require(draw, a, QUANTITIES[asked % len(QUANTITIES)])
            asked += 1
        kept.append(text)
    return kept


def compute():
    texts, entries, worst = random_trains() + SPECIAL, [], mpf(0)
    for text in texts:
        entries.append({"toml": text, "expect": expect(text)})
        worst = max(worst, laws.all_laws(Train(text)))
    print(f"laws hold for {len(texts)} trains; sums against curves for 2 pm: {mp.nstr(worst, 2)}")
    return {"trains": entries}


HEAD = {"made_by": "tests/reference/trains.py", "seed": SEED, "digits": table.DIGITS}

if __name__ == "__main__":
    sys.exit(table.main(FILE, HEAD, compute, rel=1e-12))
