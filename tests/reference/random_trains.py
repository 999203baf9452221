"""Random but legal train files, as text; every draw comes from one seeded generator."""
import math
import random

VISIBLE = [["F", "d", "C"], ["g", "F", "d", "C"], ["h", "g", "F", "e", "C", "r"],
           [0.4, "F", "e", "C", 0.75], [0.38, 0.48, 0.6, 0.72, 0.9]]
INFRARED = [[0.9, 1.2, 1.5, 1.8], [3, 3.5, 4, 4.5, 5], [2.5, 4, 5.5], [8, 10, 12],
            [7.5, 9, 10.5, 12.5]]
BANDS = [("d", ["F", "d", "C"]), ("e", ["F'", "e", "C'"]), ("d", ["g", "F", "e", "d", "C", "r"]),
         (0.55, [0.45, 0.5, 0.55, 0.6, 0.65]), ("d", ["C", "d", "F", "g"]),
         ("e", ["F'", "d", "C'", "r"]), (4.0, [3.0, 4.0, 5.0]), (10, [8, 9, 10, 11, 12]),
         (1.5, [1.0, 1.3, 1.5, 1.7]), ("d", {"ends_um": [0.435, 0.707], "samples": 5})]
WEIGHTS_OF_BANDS = [5, 3, 4, 3, 2, 2, 2, 2, 1, 1]
AIR_UM = {"h": 0.4046561, "g": 0.4358343, "F'": 0.4799914, "F": 0.4861327, "e": 0.546074,
          "d": 0.5875618, "C'": 0.6438469, "C": 0.6562725, "r": 0.7065188}


def um(w):
    return AIR_UM[w] if isinstance(w, str) else w


def listed(values):
    return "[" + ", ".join(f'"{v}"' if isinstance(v, str) and v[0].isalpha() else str(v)
                           for v in values) + "]"


class Draw:
    """One random train. Only random() is called, whose sequence is the same in every Python."""

    def __init__(self, seed):
        self.random = random.Random(seed).random

    def between(self, low, high):
        return low + (high - low) * self.random()

    def text(self, low, high, decimals):
        return f"{self.between(low, high):.{decimals}f}"

    def chance(self, p):
        return self.random() < p

    def pick(self, things, weights=None):
        weights = weights or [1] * len(things)
        at = self.random() * sum(weights)
        for thing, weight in zip(things, weights):
            at -= weight
            if at < 0:
                return thing
        return things[-1]

    def sign(self):
        return self.pick([1, -1])

    # --------------------------------------------------------------------------------- materials
    def material(self, name, band):
        ends = [um(w) for w in (band["ends_um"] if isinstance(band, dict) else band)]
        fitting = [s for s in VISIBLE + INFRARED
                   if min(map(um, s)) <= min(ends) and max(ends) <= max(map(um, s))]
        lines = self.pick(fitting)
        long = max(ends)
        if long < 2:
            a, b = self.between(1.05, 2.3), self.between(0.006, 0.035)
            k = self.between(2e-3, 1.2e-2)
        else:
            a, b = self.between(4.5, 14), self.between(0.1, 0.5)
            k = self.between(5, 60) * 1e-3 * (5 if long < 6 else 1) / long
        indices = [f"{math.sqrt(1 + a * um(w)**2 / (um(w)**2 - b) - k * um(w)**2):.7f}"
                   for w in lines]
        if self.chance(0.04):                                        # no dispersion at all
            same, one = (lines, indices[:1] * len(lines)), (lines[:1], indices[:1])
            lines, indices = self.pick([same, one])
        return f'[[material]]\nname = "{name}"\nlines_um = {listed(lines)}\n' \
               f"indices = {listed(indices)}\n"

    # ---------------------------------------------------------------------------------- elements
    def element(self, previous, size):
        """One element's text, and what the next needs to know of it."""
        if previous.get("joins"):
            kind = "thick"
        else:
            kind = self.pick(["thin", "thick", "diffractive"], [45, 47, 8])
        name = f"medium {self.pick('ABCDE')}"
        if kind == "thick":
            return self.thick(name, previous, size)
        if kind == "thin":
            power = self.sign() / self.between(0.6, 3) / size
            return f'material = "{name}"\npower_per_mm = {power:.6f}\n', {}
        power = self.sign() / self.between(8, 25) / size
        return f'kind = "diffractive"\npower_per_mm = {power:.7f}\n', {}

    def thick(self, name, previous, size):
        front = previous.get("radius") if previous.get("joins") else self.radius(size)
        back = self.radius(size)
        text = f'material = "{name}"\n'
        if "inf" not in (front, back) and not previous.get("joins") and self.chance(0.1):
            front, back = f"{1 / float(front):.7f}", f"{1 / float(back):.7f}"
            text += f"curvatures_per_mm = [{front}, {back}]\n"
            joins = False
        else:
            text += f"radii_mm = [{front}, {back}]\n"
            joins = back != "inf" and self.chance(0.35)
        text += f"thickness_mm = {self.text(0.02 * size, 0.09 * size, 2)}\n"
        if self.chance(0.2):
            text += f"clear_diameter_mm = {self.text(0.2 * size, 0.6 * size, 1)}\n"
        return text, {"joins": joins, "radius": back}

    def radius(self, size):
        return "inf" if self.chance(0.12) else \
            f"{self.sign() * self.between(0.35, 3) * size:.2f}"

    def elements(self):
        count = self.pick([2, 3, 4, 5, 6])
        size = self.pick([60, 100, 150, 240])
        texts, gaps, known = [], [], {}
        for k in range(count):
            text, known = self.element(known, size)
            if k == count - 1:
                known["joins"] = False
            if known.get("joins"):
                gap, text = "0", text + "cemented = true\n"
            else:
                gap = "0" if self.chance(0.2) else self.text(0.005 * size, 0.3 * size, 2)
            if gap != "0" and k < count - 1:
                text += f"gap_after_mm = {gap}\n"
            texts.append("[[element]]\n" + text)
            gaps.append(gap)
        return texts, gaps, size

    # ------------------------------------------------------------------------------ where and what
    def stop(self, gaps, size):
        if self.chance(0.12):
            return ""
        element, side = int(self.random() * len(gaps)), self.pick(["front", "back"])
        ahead = float(gaps[element - 1]) if element else 0.5 * size
        behind = float(gaps[element]) if element < len(gaps) - 1 else 0.4 * size
        room = -ahead if side == "front" else behind
        offset = 0.0 if self.chance(0.35) else round(room * self.between(0.05, 0.95), 2)
        text = f'[stop]\nelement = {element + 1}\nside = "{side}"\n'
        return text + (f"offset_mm = {offset}\n" if offset else "")

    def band(self):
        reference, band = self.pick(BANDS, WEIGHTS_OF_BANDS)
        text = f"[band]\nreference_um = {listed([reference])[1:-1]}\n"
        if isinstance(band, dict):
            text += f"ends_um = {listed(band['ends_um'])}\n"
            return band, text + f"samples = {band['samples']}\n"
        text += f"wavelengths_um = {listed(band)}\n"
        if self.chance(0.3):
            text += f"weights = {listed([self.text(0.2, 2, 2) for _ in band])}\n"
        return band, text

    def field(self, finite):
        kinds = ["half_angle_deg", "image_height_mm"] + ["object_height_mm"] * finite
        kind = self.pick(kinds)
        low, high = (0.5, 12) if kind == "half_angle_deg" else (2, 25)
        sign = -1 if self.chance(0.3) else 1
        return f"[field]\n{kind} = {sign * self.between(low, high):.2f}\n"

    def train(self, name):
        """The file's text with {aperture} left open, whether the object is finite, and its band."""
        band, band_text = self.band()
        elements, gaps, size = self.elements()
        finite = self.chance(0.5)
        distance = self.text(1.2 * size, 14 * size, 1)
        parts = [f'format = 1\nname = "{name}"\n', band_text, "{aperture}", self.field(finite),
                 f"[object]\ndistance_mm = {distance if finite else 'inf'}\n"
                 if finite or self.chance(0.5) else "",
                 self.stop(gaps, size)]
        if self.chance(0.25):
            parts.append(f"[detector]\npixel_um = {self.text(1.5, 12, 2)}\n")
        parts += elements
        used = sorted({t.split('"')[1] for t in elements if "material" in t})
        parts += [self.material(m, band) for m in used]
        return "".join(parts), finite
