"""What must hold for every train of the table; each broken law raises with the train's name.

`by_ray_trace` computes in plain doubles and in another way (rays, A y D(dn/n), trial chief rays),
so it both judges model.py and shows that a program in doubles can reach 1e-9.
"""
import copy

from mpmath import mpf

from model import Analysis, System, at

PM = mpf("1e-6")          # um


def check(holds, train, law, *figures):
    if not holds:
        raise AssertionError(f"{train.name}: {law}: " + ", ".join(str(f) for f in figures))


def near(a, b, rel):
    return abs(a - b) <= rel * max(abs(a), abs(b)) + mpf("1e-35")


# ------------------------------------------------------------------------- the train, changed
def changed(train, **attributes):
    other = copy.copy(train)
    other.elements = copy.deepcopy(train.elements)
    other.__dict__.update(attributes)
    return other


def reversed_train(train, distance, height):
    """Light the other way; the object where the image was."""
    other = changed(train, object_distance=distance, field=("object_height_mm", height))
    gaps = [e.gap for e in other.elements[:-1]][::-1] + [mpf(0)]
    other.elements.reverse()
    for e, gap in zip(other.elements, gaps):
        e.gap = gap
        if e.kind == "thick":
            e.curvatures = [-e.curvatures[1], -e.curvatures[0]]
    element, side, offset = train.stop
    other_side = "back" if side == "front" else "front"
    other.stop = len(train.elements) - 1 - element, other_side, -offset
    return other


def scaled_train(train, s):
    other = changed(train)
    for e in other.elements:
        e.gap *= s
        if e.kind == "thick":
            e.thickness *= s
            e.curvatures = [c / s for c in e.curvatures]
        else:
            e.power /= s
    element, side, offset = train.stop
    other.stop = element, side, offset * s
    if train.object_distance is not None:
        other.object_distance = train.object_distance * s
    if train.aperture[0] == "entrance_pupil_diameter_mm":
        other.aperture = train.aperture[0], train.aperture[1] * s
    if train.field[0] != "half_angle_deg":
        other.field = train.field[0], train.field[1] * s
    return other


def split_train(train, i):
    """Element i in two: half the power each, or cut by a sphere inside the glass."""
    other = changed(train)
    first, second = copy.copy(other.elements[i]), copy.copy(other.elements[i])
    first.gap = mpf(0)
    if first.kind == "thick":
        cut = mpf("0.0123")
        first.curvatures = [first.curvatures[0], cut]
        second.curvatures = [cut, second.curvatures[1]]
        first.thickness = first.thickness * 3 / 8
        second.thickness -= first.thickness
    else:
        first.power, second.power = first.power * 3 / 8, second.power * 5 / 8
    other.elements[i:i + 1] = [first, second]
    element, side, offset = train.stop
    other.stop = (element + (element > i or (element == i and side == "back")), side, offset)
    return other


# -------------------------------------------------------------------------------------- the laws
def reversal(train):
    t = train if train.object_distance is not None else changed(
        train, object_distance=mpf(1234), field=("object_height_mm", mpf(20)))
    t = changed(t, aperture=("object_na", mpf("0.01")))
    a = Analysis(t)
    back = reversed_train(t, a.system.image_distance, a.lateral(t.reference))
    back.aperture = "object_na", -a.image_slope
    b = Analysis(back)
    check(near(a.system.focal_length, b.system.focal_length, 1e-25), train, "reversal, f")
    check(near(b.system.image_distance, t.object_distance, 1e-25), train, "reversal, image")
    check(near(a.system.magnification * b.system.magnification, 1, 1e-25), train, "reversal, m")
    check(near(a.petzval, b.petzval, 1e-25), train, "reversal, Petzval")
    pupils = a.system.entrance_pupil, b.system.exit_pupil
    check(pupils == (None, None) or near(pupils[0], -pupils[1], 1e-25), train, "reversal, pupil")
    pair = t.short, t.long
    for one, two in zip(a.element_sums(*pair), b.element_sums(*pair)[::-1]):
        check(near(one[0], two[0], 1e-25), train, "reversal, C_I", *one, *two)
        check(near(one[1], two[1], 1e-25), train, "reversal, C_II", *one, *two)


def scaling(train, a, s=mpf("2.5")):
    b = Analysis(scaled_train(train, s))
    pair = train.short, train.long
    check(near(b.system.focal_length, s * a.system.focal_length, 1e-25), train, "scaling, f")
    check(near(b.system.image_distance, s * a.system.image_distance, 1e-25), train, "scaling, s'")
    for one, two in zip(a.totals(*pair), b.totals(*pair)):
        check(near(one * s, two, 1e-25), train, "scaling, sums", one, two)
    check(near(b.lateral_color(*pair), s * a.lateral_color(*pair), 1e-20), train, "scaling, curve")


def splitting(train, a):
    pair = train.short, train.long
    for i in range(len(train.elements)):
        b = Analysis(split_train(train, i))
        check(near(a.system.focal_length, b.system.focal_length, 1e-25), train, "splitting, f")
        check(near(a.petzval, b.petzval, 1e-25), train, "splitting, Petzval")
        for one, two in zip(a.totals(*pair), b.totals(*pair)):
            check(near(one, two, 1e-25), train, "splitting, sums", one, two)


def lagrange(train, a):
    y, u = at(a.system.back[-1], a.marginal)
    ybar, ubar = at(a.system.back[-1], a.chief)
    check(near(u * ybar - ubar * y, a.lagrange, 1e-25), train, "Lagrange invariant")


def sums_are_derivatives(train, a):
    """C_I and C_II of every element from what its dispersion does to image and chief ray."""
    pair = train.short, train.long
    step, u = mpf("1e-18"), a.image_slope
    for i, (axial, lateral) in enumerate(a.element_sums(*pair)):
        e = train.elements[i]
        change = step * (train.response(e, pair[0]) - train.response(e, pair[1]))
        sides = []
        for sign in (1, -1):
            responses = list(a.system.responses)
            responses[i] += sign * change
            system = System(train, responses)
            sides.append((system.image_distance, a.lateral_of(system)))
        axial_by_slope = -(sides[0][0] - sides[1][0]) / (2 * step) * u * u
        lateral_by_slope = (sides[0][1] - sides[1][1]) / (2 * step) * u
        check(near(axial, axial_by_slope, 1e-20), train, "C_I, derivative", axial, axial_by_slope)
        check(near(lateral, lateral_by_slope, 1e-20), train, "C_II, derivative", lateral,
              lateral_by_slope)


def narrow_band(train, a):
    """The worst relative difference between sums and exact curves for a band of 2 pm."""
    pair = train.reference - PM, train.reference + PM
    axial, lateral = a.totals(*pair)
    u, worst = a.image_slope, mpf(0)
    for exact, summed in ((a.axial_color(*pair), -axial / (u * u)),
                          (a.lateral_color(*pair), lateral / u)):
        if abs(exact) > mpf("1e-35"):
            worst = max(worst, abs(summed / exact - 1))
    check(worst < 1e-10, train, "sums against curves, 2 pm", worst)
    return worst


def stop_shift(train, a):
    """A stop moved in its own space: C_II changes by a multiple of C_I, the same for all."""
    if train.object_distance is None and train.field[0] == "half_angle_deg":
        element, side, offset = train.stop
        moved = changed(train, stop=(element, side, offset + mpf("0.5")))
        b, pair = Analysis(moved), (train.short, train.long)
        if train.aperture[0] == "f_number" or train.aperture[0] == "entrance_pupil_diameter_mm":
            ratio = (b.chief[0] - a.chief[0]) / a.marginal[0]
            for one, two in zip(a.element_sums(*pair), b.element_sums(*pair)):
                check(near(two[1], one[1] + ratio * one[0], 1e-25), train, "stop shift", *one, *two)


def all_laws(train):
    """Checks every law; gives the 2 pm figure."""
    a = Analysis(train)
    reversal(train)
    scaling(train, a)
    splitting(train, a)
    lagrange(train, a)
    sums_are_derivatives(train, a)
    stop_shift(train, a)
    return narrow_band(train, a)


# ------------------------------------------------------------------ the same, by rays, in doubles
def path(train, responses):
    """[(element, t before, c or None, n, n', power)] of every plane."""
    gap = 0.0
    for i, (e, r) in enumerate(zip(train.elements, responses)):
        r = float(r)
        if e.kind == "thick":
            c1, c2 = (float(c) for c in e.curvatures)
            yield i, gap, c1, 1.0, r
            yield i, float(e.thickness), c2, r, 1.0
        else:
            yield i, gap, float(e.power) * r, None, None
        gap = float(e.gap)


def trace(planes, y, u):
    """[(y, u before)] at every plane, and (y, u) after the last."""
    seen, n_now = [], 1.0
    for _, t, c, n, n_after in planes:
        y += t * u
        seen.append((y, u))
        u = u - y * c if n is None else (n * u - y * c * (n_after - n)) / n_after
    return seen, (y, u)


def stop_height(train, planes, y, u):
    element, side, offset = train.stop
    seen, last = trace(planes, y, u)
    mine = [k for k, p in enumerate(planes) if p[0] == element]
    if side == "front":
        height, slope = seen[mine[0]]
    else:
        height, slope = trace(planes[:mine[-1] + 1], y, u)[1]
    return height + float(offset) * slope


def chief_ray(train, planes, point):
    """From two trial rays of the object point, the one through the stop's centre."""
    if train.object_distance is None:
        first, second = (0.0, point), (1.0, point)
    else:
        distance = float(train.object_distance)
        first, second = (point, 0.0), (point + distance, 1.0)
    low, high = (stop_height(train, planes, *ray) for ray in (first, second))
    part = low / (low - high)
    return tuple(a + part * (b - a) for a, b in zip(first, second))


def by_ray_trace(train, a):
    """{name: (figure in doubles, scale for figures that are 0)}; start values come from `a`."""
    point, marginal = float(a.point), tuple(float(v) for v in a.marginal)
    reference = list(path(train, a.system.responses))
    seen, (y, u) = trace(reference, *marginal)
    image = -y / u
    out = {"image_distance_mm": (image, image)}
    ybar, ubar = chief_ray(train, reference, point)
    chief_seen, _ = trace(reference, ybar, ubar)
    out["lagrange_invariant_mm"] = (marginal[1] * ybar - ubar * marginal[0], 0)
    _, (y1, u1) = trace(reference, 1.0, 0.0)
    out["focal_length_mm"], out["back_focal_distance_mm"] = (-1 / u1, 0), (-y1 / u1, abs(1 / u1))
    pairs = {"": (train.short, train.long), "secondary ": (train.reference, train.long)}
    for name, pair in pairs.items():
        out.update(sums_by_rays(train, reference, seen, chief_seen, pair, name))
    for k, w in enumerate(train.wavelengths):
        planes = list(path(train, train.responses(w)))
        start = marginal if train.object_distance is None else (float(train.object_distance), 1.0)
        _, (y, u) = trace(planes, *start)
        out[f"focus {k}"] = (-y / u, 0)
        _, (y, u) = trace(planes, *chief_ray(train, planes, point))
        out[f"lateral {k}"] = (y + u * image, abs(y))
    return out


def sums_by_rays(train, planes, seen, chief_seen, pair, name):
    axial, lateral = [0.0] * len(train.elements), [0.0] * len(train.elements)
    changes = [float(train.response(e, pair[0]) - train.response(e, pair[1]))
               for e in train.elements]
    for (i, _, c, n, n_after), (y, u), (ybar, ubar) in zip(planes, seen, chief_seen):
        if n is None:
            axial[i], lateral[i] = y * y * changes[i] * c, y * ybar * changes[i] * c
        else:
            jump = changes[i] / n_after if n == 1.0 else -changes[i] / n
            axial[i] += n * (u + y * c) * y * jump
            lateral[i] += n * (ubar + ybar * c) * y * jump
    size = sum(abs(v) for v in axial + lateral)
    out = {f"{name}axial total": (sum(axial), size), f"{name}lateral total": (sum(lateral), size)}
    for i, (one, two) in enumerate(zip(axial, lateral)):
        out[f"{name}axial {i}"], out[f"{name}lateral sum {i}"] = (one, size), (two, size)
    return out
