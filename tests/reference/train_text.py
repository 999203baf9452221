"""A train file as numbers: band, elements, materials and their indices, stop, requirements."""
import math
import tomllib
from types import SimpleNamespace

from mpmath import mp, mpf

import air

# Air wavelengths in um: R. Paschotta, RP Photonics Encyclopedia, "Standard spectral lines",
# table 1; the line A' from OHARA's technical information, section 2.1, table 1.
LINES = {"i": "0.3650146", "h": "0.4046561", "g": "0.4358343", "F'": "0.4799914",
         "F": "0.4861327", "e": "0.546074", "d": "0.5875618", "D": "0.5892938",
         "C'": "0.6438469", "C": "0.6562725", "r": "0.7065188", "A'": "0.76819",
         "s": "0.85211", "t": "1.01398"}

EXACT = SimpleNamespace(of=mpf, sqrt=mp.sqrt, tan=mp.tan, pi=mp.pi)       # 60 digits: see air.py
DOUBLE = SimpleNamespace(of=float, sqrt=math.sqrt, tan=math.tan, pi=math.pi)


# ------------------------------------------------------------------------------- reading a train
class Train:
    """The file as numbers. `catalogue` gives index functions of wavelength by material name."""

    def __init__(self, text, numbers=EXACT, catalogue=None):
        self.numbers = numbers
        data = tomllib.loads(text, parse_float=numbers.of)
        self.name = data.get("name", "")
        self.read_band(data["band"])
        self.aperture = self.only(data["aperture"])
        self.field = self.only(data["field"])
        distance = numbers.of(data.get("object", {}).get("distance_mm", "inf"))
        self.object_distance = None if distance == numbers.of("inf") else distance
        stop = data.get("stop", {})
        self.stop = (stop.get("element", 1) - 1, stop.get("side", "front"),
                     numbers.of(stop.get("offset_mm", 0)))
        pixel = data.get("detector", {}).get("pixel_um")
        self.pixel_mm = None if pixel is None else numbers.of(pixel) / 1000
        self.surroundings = self.read_surroundings(data.get("surroundings"))
        self.elements = [self.read_element(e) for e in data["element"]]
        self.materials = {m["name"]: m for m in data.get("material", [])}
        self.catalogue = catalogue or {}
        self.vary, self.require = data.get("vary", []), data.get("require", [])
        self.known_index = {}

    def only(self, table):
        (kind, value), = table.items()
        return kind, self.numbers.of(value)

    def wavelength(self, w):
        return self.numbers.of(LINES[w] if isinstance(w, str) else w)

    def read_band(self, band):
        of = self.numbers.of
        self.reference = self.wavelength(band["reference_um"])
        if "samples" in band:
            first, last = (self.wavelength(w) for w in band["ends_um"])
            count = band["samples"]
            self.wavelengths = [first + (last - first) * i / (count - 1) for i in range(count)]
        else:
            self.wavelengths = [self.wavelength(w) for w in band["wavelengths_um"]]
        self.short, self.long = min(self.wavelengths), max(self.wavelengths)
        weights = [of(w) for w in band.get("weights", [1] * len(self.wavelengths))]
        self.weights = [w / sum(weights) for w in weights]

    def read_surroundings(self, table):
        if table is None:
            return None
        of = self.numbers.of
        return {"temperature": of(table.get("temperature_C", 20)),
                "pressure": of(table.get("pressure_Pa", 101325)),
                "humidity": of(table.get("humidity", 0)), "co2": of(table.get("co2_ppm", 450))}

    def read_element(self, e):
        of = self.numbers.of
        kind = e.get("kind", "thin" if "power_per_mm" in e else "thick")
        out = SimpleNamespace(kind=kind, material=e.get("material"),
                              gap=of(e.get("gap_after_mm", 0)),
                              cemented=e.get("cemented", False))
        if kind == "thick":
            out.thickness = of(e["thickness_mm"])
            out.curvatures = [of(c) for c in e["curvatures_per_mm"]] if "curvatures_per_mm" in e \
                else [1 / of(r) for r in e["radii_mm"]]
        else:
            out.power = of(e["power_per_mm"])
        return out

    # ---------------------------------------------------------------------------------- materials
    def index(self, material, w):
        """Relative to the surroundings."""
        key = material, w
        if key not in self.known_index:
            self.known_index[key] = self.index_in_air(material, w) * self.air_ratio(w)
        return self.known_index[key]

    def index_in_air(self, material, w):
        if material in self.catalogue:
            return self.catalogue[material](w)
        of, entry = self.numbers.of, self.materials[material]
        x = [1 / self.wavelength(v)**2 for v in entry["lines_um"]]
        squares = [of(n)**2 for n in entry["indices"]]
        total, at = of(0), 1 / w**2
        for i, square in enumerate(squares):                     # Lagrange's form of the polynomial
            for j in range(len(x)):
                if j != i:
                    square *= (at - x[j]) / (x[i] - x[j])
            total += square
        return self.numbers.sqrt(total)

    def covers(self, material, w):
        entry = self.materials.get(material)
        if entry is None or len(entry["lines_um"]) == 1:
            return True
        lines = [self.wavelength(v) for v in entry["lines_um"]]
        return min(lines) <= w <= max(lines)

    def air_ratio(self, w):
        """Standard air over the surroundings; 1 without surroundings."""
        if self.surroundings is None:
            return self.numbers.of(1)
        vacuum = air.to_vacuum(w)
        return air.index(vacuum) / air.index(vacuum, **self.surroundings)

    def wavelength_there(self, w):
        """In the surroundings: what a diffractive element sees."""
        return w * self.air_ratio(w)

    def response(self, element, w):
        """What changes with wavelength: an index, or a power relative to that at the reference."""
        if element.kind == "diffractive":
            return self.wavelength_there(w) / self.wavelength_there(self.reference)
        n = self.index(element.material, w)
        return n if element.kind == "thick" else (n - 1) / (self.index(element.material,
                                                                       self.reference) - 1)

    def responses(self, w):
        return [self.response(e, w) for e in self.elements]
