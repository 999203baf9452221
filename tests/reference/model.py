"""First-order optics and colour of a train, by 2x2 system matrices: the reference for the tests.

Written from the definitions alone, in another way than the library's ray trace: every figure is
read off a matrix (heights times reduced slopes), images and pupils come from the exact conjugate
equations, and the same code serves float, complex (for derivatives) and mpmath numbers.

State of a ray: (y, n u). Surface: n'u' = nu - y c (n' - n). Medium: y' = y + (t/n) n u.
The index outside is 1, since every index is relative to the surroundings.
"""
from functools import cached_property


def magnitude(x):
    return -x if x.real < 0 else x


# ------------------------------------------------------------------------------ one system matrix
def times(p, q):
    return [[p[0][0] * q[0][0] + p[0][1] * q[1][0], p[0][0] * q[0][1] + p[0][1] * q[1][1]],
            [p[1][0] * q[0][0] + p[1][1] * q[1][0], p[1][0] * q[0][1] + p[1][1] * q[1][1]]]


def at(matrix, ray):
    return (matrix[0][0] * ray[0] + matrix[0][1] * ray[1],
            matrix[1][0] * ray[0] + matrix[1][1] * ray[1])


def lens(power):
    return [[1, 0], [-power, 1]]


def space(reduced):
    return [[1, reduced], [0, 1]]


class System:
    """Matrices of a train for one list of responses; all from the first vertex on."""

    def __init__(self, train, responses):
        self.train, self.responses = train, responses
        self.front, self.second, self.back = [], [], []
        m = space(train.numbers.of(0))
        for e, r in zip(train.elements, responses):
            self.front.append(m)
            if e.kind == "thick":
                inside = times(space(e.thickness / r), times(lens(e.curvatures[0] * (r - 1)), m))
                self.second.append(inside)
                m = times(lens(e.curvatures[1] * (1 - r)), inside)
            else:
                self.second.append(None)
                m = times(lens(e.power * r), m)
            self.back.append(m)
            m = times(space(e.gap), m)
        (self.a, self.b), (self.c, self.d) = self.back[-1]

    @cached_property
    def to_stop(self):
        element, side, offset = self.train.stop
        start = self.front[element] if side == "front" else self.back[element]
        return times(space(offset), start)

    @cached_property
    def focal_length(self):
        return -1 / self.c

    @cached_property
    def back_focal_distance(self):
        return -self.a / self.c

    @cached_property
    def image_distance(self):
        distance = self.train.object_distance
        if distance is None:
            return self.back_focal_distance
        return -(self.a * distance + self.b) / (self.c * distance + self.d)

    @cached_property
    def magnification(self):
        distance = self.train.object_distance
        return self.c * 0 if distance is None else 1 / (self.c * distance + self.d)

    @cached_property
    def entrance_pupil(self):
        """From the first vertex; None at infinity."""
        (a, b), _ = self.to_stop
        return None if a == 0 else b / a

    @cached_property
    def exit_pupil(self):
        """From the last vertex; None at infinity."""
        (a, b), _ = self.to_stop
        y, u = at(self.back[-1], (-b, a))                 # a ray through the stop's centre
        return None if u == 0 else -y / u

    def chief(self, point):
        """(ybar, ubar) at the first vertex; `point`: object height, or slope if at infinity."""
        (a, b), _ = self.to_stop
        distance = self.train.object_distance
        if distance is None:
            return -point * b / a, point
        slope = -a * point / (a * distance + b)
        return point + distance * slope, slope

    def element_power(self, i):
        e, r = self.train.elements[i], self.responses[i]
        if e.kind != "thick":
            return e.power * r
        first, second = e.curvatures[0] * (r - 1), e.curvatures[1] * (1 - r)
        return first + second - first * second * e.thickness / r


# -------------------------------------------------------------------------------- all its figures
class Analysis:
    def __init__(self, train):
        self.train, self.of = train, train.numbers.of
        self.system = self.system_at(train.reference)
        self.known = {}

    def system_at(self, w):
        return System(self.train, self.train.responses(w))

    def colored(self, w):
        if w not in self.known:
            self.known[w] = self.system_at(w)
        return self.known[w]

    # ------------------------------------------------------------------------- aperture and field
    @cached_property
    def half_pupil(self):
        """Half the entrance pupil's diameter; None for a pupil at infinity."""
        kind, value = self.train.aperture
        pupil = self.system.entrance_pupil
        if kind == "entrance_pupil_diameter_mm":
            return value / 2
        if kind == "f_number":
            return magnitude(self.system.focal_length) / value / 2
        return None if pupil is None else value * (self.train.object_distance + pupil)

    @cached_property
    def marginal(self):
        """(y, u) at the first vertex."""
        kind, value = self.train.aperture
        distance = self.train.object_distance
        if distance is None:
            return self.half_pupil, value * 0
        slope = value if kind == "object_na" else \
            self.half_pupil / (distance + self.system.entrance_pupil)
        return distance * slope, slope

    @cached_property
    def point(self):
        """The object point, from the reference: its height, or its slope when at infinity."""
        kind, value = self.train.field
        s, distance = self.system, self.train.object_distance
        if kind == "half_angle_deg":
            slope = self.train.numbers.tan(value * self.train.numbers.pi / 180)
            return slope if distance is None else -slope * (distance + s.entrance_pupil)
        if kind == "object_height_mm":
            return value
        return value / (s.focal_length if distance is None else s.magnification)

    @cached_property
    def chief(self):
        return self.system.chief(self.point)

    @cached_property
    def image_slope(self):
        return at(self.system.back[-1], self.marginal)[1]

    # --------------------------------------------------------------------------------- exact color
    def focus(self, w):
        return self.colored(w).image_distance

    def lateral_of(self, system):
        y, u = at(system.back[-1], system.chief(self.point))
        return y + u * self.system.image_distance

    def lateral(self, w):
        return self.lateral_of(self.colored(w))

    def axial_color(self, first, second):
        return self.focus(first) - self.focus(second)

    def lateral_color(self, first, second):
        return self.lateral(first) - self.lateral(second)

    def secondary(self, curve):
        t = self.train
        return curve(t.reference) - (curve(t.short) + curve(t.long)) / 2

    @cached_property
    def rms_focus(self):
        focus = [self.focus(w) for w in self.train.wavelengths]
        mean = sum(w * f for w, f in zip(self.train.weights, focus))
        return self.train.numbers.sqrt(sum(w * (f - mean)**2
                                           for w, f in zip(self.train.weights, focus)))

    # ---------------------------------------------------------------------------------- color sums
    def surfaces(self):
        """(element, side, curvature, n, n', matrix) of the thick elements, in order."""
        for i, e in enumerate(self.train.elements):
            if e.kind == "thick":
                n = self.system.responses[i]
                yield i, 0, e.curvatures[0], 1, n, self.system.front[i]
                yield i, 1, e.curvatures[1], n, 1, self.system.second[i]

    def surface_sums(self, first, second):
        """[(element, C_I, C_II)] by A y D(dn/n) and Abar y D(dn/n)."""
        for i, side, c, n, _, matrix in self.surfaces():
            e = self.train.elements[i]
            dn = self.train.response(e, first) - self.train.response(e, second)
            jump = dn / self.system.responses[i] * (1 if side == 0 else -1)
            y, nu = at(matrix, self.marginal)
            ybar, nubar = at(matrix, self.chief)
            yield i, (nu + n * y * c) * y * jump, (nubar + n * ybar * c) * y * jump

    def element_sums(self, first, second):
        """[(C_I, C_II)] of every element."""
        sums = [[self.of(0), self.of(0)] for _ in self.train.elements]
        for i, axial, lateral in self.surface_sums(first, second):
            sums[i][0] += axial
            sums[i][1] += lateral
        for i, e in enumerate(self.train.elements):
            if e.kind != "thick":
                y, ybar = self.height(i, self.marginal), self.height(i, self.chief)
                power = e.power * (self.train.response(e, first) - self.train.response(e, second))
                sums[i] = [y * y * power, y * ybar * power]
        return sums

    def totals(self, first, second):
        sums = self.element_sums(first, second)
        return sum(s[0] for s in sums), sum(s[1] for s in sums)

    def height(self, i, ray):
        return at(self.system.front[i], ray)[0]

    # --------------------------------------------------------------------------------- first order
    @cached_property
    def length(self):
        """First to last vertex."""
        elements = self.train.elements
        return sum(getattr(e, "thickness", 0) for e in elements) + sum(e.gap for e in elements[:-1])

    @cached_property
    def track_length(self):
        return self.length + self.system.image_distance

    @cached_property
    def petzval(self):
        total = self.of(0)
        for e, n in zip(self.train.elements, self.system.responses):
            if e.kind == "thick":
                total += (e.curvatures[0] - e.curvatures[1]) * (n - 1) / n
            elif e.kind == "thin":
                total += e.power / self.train.index(e.material, self.train.reference)
        return total

    @cached_property
    def strength(self):
        powers = [self.system.element_power(i) for i in range(len(self.train.elements))]
        return sum(magnitude(p) for p in powers) * magnitude(self.system.focal_length)

    @cached_property
    def f_number(self):
        if self.half_pupil is None:
            return None
        return magnitude(self.system.focal_length) / magnitude(self.half_pupil) / 2

    @cached_property
    def working_f_number(self):
        return 1 / (2 * magnitude(self.image_slope))

    @cached_property
    def lagrange(self):
        (y, u), (ybar, ubar) = self.marginal, self.chief
        return u * ybar - ubar * y

    # -------------------------------------------------------------------------------- requirements
    def value(self, r):
        t, s = self.train, self.system
        pair = [t.wavelength(w) for w in r.get("between_um", [])] or [t.short, t.long]
        simple = {
            "focal_length_mm": lambda: s.focal_length,
            "back_focal_distance_mm": lambda: s.back_focal_distance,
            "image_distance_mm": lambda: s.image_distance,
            "track_length_mm": lambda: self.track_length,
            "magnification": lambda: s.magnification,
            "f_number": lambda: self.f_number,
            "petzval_per_mm": lambda: self.petzval,
            "strength": lambda: self.strength,
            "entrance_pupil_position_mm": lambda: s.entrance_pupil,
            "exit_pupil_position_mm": lambda: s.exit_pupil,
            "axial_color_mm": lambda: self.axial_color(*pair),
            "lateral_color_mm": lambda: self.lateral_color(*pair),
            "secondary_axial_mm": lambda: self.secondary(self.focus),
            "secondary_lateral_mm": lambda: self.secondary(self.lateral),
            "axial_sum_mm": lambda: self.element_sums(*pair)[r["element"] - 1][0],
            "lateral_sum_mm": lambda: self.element_sums(*pair)[r["element"] - 1][1]}
        return simple[r["quantity"]]()

    def budget(self, r):
        """As given, or by default: 0.1 %, a quarter wave of defocus, a pixel or the Airy radius."""
        if "budget" in r:
            return self.of(r["budget"])
        if r["quantity"] == "focal_length_mm":
            bound = next(r[k] for k in ("target", "at_least", "at_most") if k in r)
            return magnitude(self.of(bound)) / 1000
        wavelength_mm, n = self.train.reference / 1000, self.working_f_number
        if "axial" in r["quantity"]:
            return 2 * wavelength_mm * n * n
        return self.train.pixel_mm or self.of("1.22") * wavelength_mm * n

    def residual(self, r):
        value, budget = self.value(r), self.budget(r)
        if "target" in r:
            return (value - self.of(r["target"])) / budget
        low = value - self.of(r["at_least"]) if "at_least" in r else value * 0
        high = value - self.of(r["at_most"]) if "at_most" in r else value * 0
        return (low if low.real < 0 else high if high.real > 0 else value * 0) / budget
