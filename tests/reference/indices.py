#!/usr/bin/python3
"""Makes indices.json: indices of materials and of air, V and P, from the published data themselves.

    /usr/bin/python3 tests/reference/indices.py FOLDER    (of dispersion_glass.csv and so on)

Computed at 60 digits, given to 17. Wavelengths are in standard air, um, except in `air` (vacuum).
- `materials`: `source_index` is the source's own formula; `index` is relative to standard air, that
  is, the source's index unless the source is absolute. A source that counts in vacuum gets the
  vacuum wavelength. `maker` is empty where the name is that of a material with an `entry`.
- `air`: `refractivity` is n - 1. Saturation pressure by the form over water, so moist air only from
  0 C up. `vacuum`: the vacuum wavelength of a wavelength in standard air.
- `conditions`: relative to the surroundings given, at their temperature. n_abs(T0) =
  n n_air(T0, 101325 Pa, dry), T0 the source's temperature (20 C where it states none); formula A
  adds
    (n^2 - 1)/(2 n) [D0 t + D1 t^2 + D2 t^3 + (E0 t + E1 t^2)/(x^2 - lambda_TK^2)],  t = T - T0,
  with n and x as in the source's row (n relative to air); the sum is divided by the index of the
  surroundings. A constant dn/dT counts as relative: n_abs(T) = (n + dn/dT t) n_air(T, 101325 Pa,
  dry). `kind` says which; `none` is for an index used unchanged (|t| up to 5 K: the absolute one).
- `bands`: V = (n_ref - 1)/(n_short - n_long), `p_ref_long`, and P(a, b) for a pair more.
"""
import csv
import sys

sys.dont_write_bytecode = True

from pathlib import Path  # noqa: E402

from mpmath import mp, mpf  # noqa: E402

import air  # noqa: E402
import table  # noqa: E402

FILE = Path(__file__).with_suffix(".json")
GLASSES = {
    "SCHOTT": "N-BK7 F2 SF6 N-SF57 N-PK51 N-KZFS4 N-LAK21 LITHOSIL-Q LITHOTEC-CAF2 K7 BOROFLOAT33",
    "OHARA": "S-FPL53 S-TIM1 S-NSL5 S-BSL7 S-LAH79 S-FPL51 S-NPH1 S-NBM51 BAL15Y APL1 L-LAH84",
    "HOYA": "FCD1 BSC7 E-FD2 TAFD25 LAC7 FDS90 NBF1 PCD4",
    "HIKARI": "J-BK7A J-SF6 J-KZFH1 J-LASF05 NICF-V NIFS-A J-FK01A SK4 J-PSK02",
    "CDGM": "H-K9L H-FK61 H-ZF52A H-LAK52 D-ZK3 H-ZF13 F2 H-KF6",
    "SUMITA": "K-BK7 K-CaFK95 K-SFLD11 K-LaFK55 K-VC89 K-GFK68"}
MATERIALS = [
    ("fused silica", "Malitson"), ("CaF2", "Malitson"), ("CaF2", "Daimon-20"), ("BaF2", "Malitson"),
    ("MgF2", "Dodge-o"), ("MgF2", "Dodge-e"), ("NaCl", "Li"), ("KRS-5", "Rodney"), ("CsI", "Li"),
    ("AgCl", "Tilton"), ("sapphire", "Malitson-o"), ("quartz", "Ghosh-e"), ("MgO", "Stephens"),
    ("spinel", "Tropf"), ("YAG", "Zelmon"), ("YAG", "Hrabovsky"), ("ZnS", "Debenham"),
    ("ZnSe", "Connolly"), ("Ge", "Burnett"), ("Ge", "Icenogle"), ("Si", "Salzberg"),
    ("Si", "Edwards"), ("Si", "Chandler-Horowitz"), ("GaAs", "Skauli"), ("CdTe", "DeBell-300K"),
    ("Ge33As12Se55", "IRG22"), ("As40Se60", "IRG26"), ("As40S60", "Rodney"), ("ZBLAN", "Gan"),
    ("PMMA", "Beadie"), ("water", "Daimon-20.0C"), ("MgO", "Stephens-vis")]
THERMAL = [("SCHOTT", n) for n in "N-BK7 F2 SF6 N-PK51 LITHOTEC-CAF2 LITHOSIL-Q".split()] + [
    ("OHARA", "S-FPL53"), ("OHARA", "S-TIM1"), ("HOYA", "TAFD25"), ("HOYA", "BSC7"),
    ("HIKARI", "J-SF6"), ("CDGM", "H-ZF52A"), ("SUMITA", "K-BK7"), ("", "Ge33As12Se55 IRG22"),
    ("", "Ge Burnett"), ("", "CaF2 Malitson"), ("", "water Daimon-20.0C")]
STATES = [(20, 101325, 0, 450), (-40, 101325, 0, 450), (60, 101325, 0, 450), (20, 0, 0, 450),
          (35, 80000, mpf("0.7"), 420)]
BANDS = [("d", "F", "C"), ("e", "F'", "C'"), ("F", "g", "r")]
LINES = {"g": "0.4358343", "F'": "0.4799914", "F": "0.4861327", "e": "0.546074", "d": "0.5875618",
         "C'": "0.6438469", "C": "0.6562725", "r": "0.7065188"}


# -------------------------------------------------------------------- the data set's own formulas
def pairs(c, start):
    """(c[k], c[k + 1]) from `start` on, without the terms whose leading coefficient is 0."""
    return [(c[k], c[k + 1]) for k in range(start, len(c) - 1, 2) if c[k] != 0]


def sellmeier(c, x):
    return mp.sqrt(1 + c[0] + sum(b * x**2 / (x**2 - r**2) for b, r in pairs(c, 1)))


def sellmeier_squared(c, x):
    return mp.sqrt(1 + c[0] + sum(b * x**2 / (x**2 - r) for b, r in pairs(c, 1)))


def polynomial(c, x):
    return mp.sqrt(c[0] + sum(b * x**p for b, p in pairs(c, 1)))


def rational_polynomial(c, x):
    poles = sum(c[k] * x**c[k + 1] / (x**2 - c[k + 2]**c[k + 3]) for k in (1, 5) if c[k] != 0)
    return mp.sqrt(c[0] + poles + sum(b * x**p for b, p in pairs(c, 9)))


def herzberger(c, x):
    inverse = 1 / (x**2 - mpf("0.028"))
    return c[0] + c[1] * inverse + c[2] * inverse**2 + sum(c[k] * x**(2 * k - 4) for k in (3, 4, 5))


FORMULAS = {f.__name__: f for f in (sellmeier, sellmeier_squared, polynomial, rational_polynomial,
                                    herzberger)}


class Material:
    def __init__(self, row):
        self.row, self.maker = row, row.get("maker", "")
        self.name = row["name"] if self.maker else row["material"]
        self.entry = row.get("entry", "")
        written = [row.get(f"c{k}") or "0" for k in range(17)]
        self.formula, self.coefficients = row["formula"], [mpf(c) for c in written]
        self.short, self.long = mpf(row["lambda_min_um"]), mpf(row["lambda_max_um"])
        self.absolute = row["n_is_absolute"] == "true"
        self.vacuum = row["wavelength_is_vacuum"] == "true"
        self.t0 = mpf(row["temperature_C"] or 20)

    def key(self):
        entry = {"entry": self.entry} if self.entry else {}
        return {"maker": self.maker, "name": self.name, **entry}

    def argument(self, w):
        return air.to_vacuum(w) if self.vacuum else w

    def source_index(self, w):
        return FORMULAS[self.formula](self.coefficients, self.argument(w))

    def index(self, w):
        n = self.source_index(w)
        return n / air.index(air.to_vacuum(w)) if self.absolute else n

    def cell(self, name):
        suspect = name in self.row["suspect"].split()
        return mpf(0) if suspect or not self.row.get(name) else mpf(self.row[name])

    # ------------------------------------------------------------------------------- temperature
    def kind(self):
        if self.cell("D0"):
            return "formula_a"
        return "constant" if self.cell("dn_dT") else "none"

    def formula_a(self, w, t):
        n, x = self.source_index(w), self.argument(w)
        d, e = [self.cell(f"D{k}") for k in range(3)], [self.cell(f"E{k}") for k in range(2)]
        slope = (e[0] * t + e[1] * t**2) / (x**2 - self.cell("lambda_TK")**2) if e[0] or e[1] else 0
        return (n**2 - 1) / (2 * n) * (d[0] * t + d[1] * t**2 + d[2] * t**3 + slope)

    def absolute_at(self, w, temperature):
        vacuum, n, t = air.to_vacuum(w), self.source_index(w), temperature - self.t0
        if self.kind() == "constant":
            return (n + self.cell("dn_dT") * t) * air.index(vacuum, temperature=temperature)
        start = n if self.absolute else n * air.index(vacuum, temperature=self.t0)
        return start + (self.formula_a(w, t) if self.kind() == "formula_a" else 0)

    def index_in(self, w, temperature, pressure, humidity, co2):
        around = air.index(air.to_vacuum(w), temperature=temperature, pressure=pressure,
                           humidity=humidity, co2=co2)
        return self.absolute_at(w, temperature) / around

    def inside(self, count):
        """Round wavelengths within the range, evenly spread in its logarithm."""
        ratio = self.long / self.short
        return [mpf(mp.nstr(self.short * ratio**(mpf(2 * k + 1) / (2 * count)), 4))
                for k in range(count)]


# -------------------------------------------------------------------------------------- the lists
def materials(known):
    chosen = [("", f"{m} {e}") for m, e in MATERIALS]
    chosen = [(maker, n) for maker, names in GLASSES.items() for n in names.split()] + chosen
    for key in chosen:
        m = known[key]
        waves = m.inside(4)
        if m.entry == "Hrabovsky":
            waves.append(mpf(1))            # where an unused slot would give 0/0
        last = max(k for k, c in enumerate(m.coefficients) if c != 0)
        yield {**m.key(), "formula": m.formula, "coefficients": m.coefficients[:last + 1],
               "range_um": [m.short, m.long], "wavelength_um": waves,
               "source_index": [m.source_index(w) for w in waves],
               **({"index": [m.index(w) for w in waves]} if m.absolute else {})}


def air_grid():
    """A plan that pairs every temperature with every pressure, and walks through the rest."""
    waves = [mpf(w) for w in ("0.3", "0.4", "0.5875618", "0.633", "0.85", "1.064", "1.55", "1.69")]
    step = 0
    for t in (-40, -20, 0, 15, 20, 35, 50, 100):
        for p in (40000, 80000, 101325, 120000):
            step += 1
            humidity = mpf(step % 5) / 4 if 0 <= t <= 50 else mpf(0)
            co2, w = mpf((450, 0, 380, 1000)[step % 4]), waves[step * 3 % len(waves)]
            yield {"temperature_C": mpf(t), "pressure_Pa": mpf(p), "humidity": humidity,
                   "co2_ppm": co2, "vacuum_wavelength_um": w,
                   "refractivity": air.refractivity(w, mpf(t), mpf(p), humidity, co2)}
    yield {"temperature_C": mpf(20), "pressure_Pa": mpf(0), "humidity": mpf(0), "co2_ppm": mpf(450),
           "vacuum_wavelength_um": mpf("0.5875618"), "refractivity": mpf(0)}


def vacuum():
    for w in "0.2 0.3 0.3650146 0.4358343 0.5 0.5875618 0.6328 1.064 1.69 4 10.6 40".split():
        yield {"wavelength_um": mpf(w), "vacuum_wavelength_um": air.to_vacuum(mpf(w))}


def conditions(known):
    for key in THERMAL:
        m = known[key]
        waves = m.inside(2)
        for t, p, h, co2 in STATES:
            if m.kind() == "none" and abs(t - m.t0) > 5:
                continue
            yield {**m.key(), "kind": m.kind(), "temperature_C": mpf(t), "pressure_Pa": mpf(p),
                   "humidity": mpf(h), "co2_ppm": mpf(co2), "wavelength_um": waves,
                   "index": [m.index_in(w, mpf(t), mpf(p), mpf(h), mpf(co2)) for w in waves]}


def band(m, names, pair):
    reference, short, long, a, b = (mpf(LINES.get(w, w)) for w in (*names, *pair))
    n = m.index
    spread = n(short) - n(long)
    return {**m.key(), "reference_um": reference, "short_um": short, "long_um": long,
            "v": (n(reference) - 1) / spread, "p_ref_long": (n(reference) - n(long)) / spread,
            "pair_um": [a, b], "p_pair": (n(a) - n(b)) / spread}


def bands(known):
    for key in [("SCHOTT", "N-BK7"), ("SCHOTT", "F2"), ("OHARA", "S-FPL53"), ("HOYA", "FDS90"),
                ("HIKARI", "J-KZFH1"), ("CDGM", "H-K9L"), ("SUMITA", "K-LaFK55"),
                ("", "water Daimon-20.0C")]:
        for names in BANDS:
            yield band(known[key], names, ("g", "F"))
    for name in ("Ge Burnett", "Si Salzberg", "ZnSe Connolly", "ZnS Debenham"):
        yield band(known["", name], ("4", "3", "5"), ("3", "4"))
    for name in ("Ge Burnett", "ZnSe Connolly", "GaAs Skauli"):
        yield band(known["", name], ("10", "8", "12"), ("8", "9"))


def load(folder):
    known = {}
    for file in ("dispersion_glass.csv", "dispersion_material.csv"):
        with open(Path(folder) / file, encoding="utf-8", newline="") as rows:
            for row in csv.DictReader(rows):
                if row["formula"] in FORMULAS:
                    m = Material(row)
                    known[m.maker, " ".join(filter(None, (m.name, m.entry)))] = m
    return known


def compute(folder):
    known = load(folder)
    return {"materials": list(materials(known)), "air": list(air_grid()), "vacuum": list(vacuum()),
            "conditions": list(conditions(known)), "bands": list(bands(known))}


HEAD = {"made_by": "tests/reference/indices.py", "digits": table.DIGITS}

if __name__ == "__main__":
    options = [a for a in sys.argv[1:] if a.startswith("-")]
    folders = [a for a in sys.argv[1:] if not a.startswith("-")]
    if len(folders) != 1:
        sys.exit("indices.py: give the folder of dispersion_glass.csv and dispersion_material.csv")
    sys.exit(table.main(FILE, HEAD, lambda: compute(folders[0]), 1e-15, arguments=options))
