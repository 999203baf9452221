"""The solved problems' train files. Invented, but for the materials of the cemented pair."""
GLASSES = """[[material]]
name = "crown"
lines_um = ["g", "F", "d", "C", "r"]
indices = [1.52668, 1.52238, 1.51680, 1.51432, 1.51289]
[[material]]
name = "flint"
lines_um = ["g", "F", "d", "C", "r"]
indices = [1.64202, 1.63208, 1.62004, 1.61503, 1.61227]
[[material]]
name = "short flint"
lines_um = ["g", "F", "d", "C", "r"]
indices = [1.63043, 1.62309, 1.61340, 1.60924, 1.60689]
"""
INFRARED = """[[material]]
name = "silicon of the bench"
lines_um = [3, 3.5, 4, 4.5, 5]
indices = [3.43236, 3.42843, 3.42550, 3.42347, 3.42202]
[[material]]
name = "germanium of the bench"
lines_um = [3, 3.5, 4, 4.5, 5]
indices = [4.04496, 4.03340, 4.02470, 4.01963, 4.01598]
"""
VISIBLE = '[band]\nreference_um = "d"\nwavelengths_um = ["F", "d", "C"]\n'
WIDE = '[band]\nreference_um = "d"\nwavelengths_um = ["g", "F", "d", "C"]\nweights = [1, 2, 3, 1]\n'
ON_AXIS = "[aperture]\nentrance_pupil_diameter_mm = 30\n[field]\nhalf_angle_deg = 1\n"
FIELD = "[aperture]\nf_number = 6\n[field]\nhalf_angle_deg = 10\n"
AXIAL = ("axial_color_mm", "target = 0\nbudget = 0.05", 'between_um = ["F", "C"]\n')
LATERAL = ("lateral_color_mm", "target = 0\nbudget = 0.01", 'between_um = ["F", "C"]\n')


def thin(material, power, gap=0):
    return f'[[element]]\nmaterial = "{material}"\npower_per_mm = {power}\ngap_after_mm = {gap}\n'


def thick(material, radii, thickness, rest=""):
    return f'[[element]]\nmaterial = "{material}"\nradii_mm = [{radii}]\n' \
           f"thickness_mm = {thickness}\n{rest}"


def vary(element, parameter, low=None, high=None):
    return f'[[vary]]\nelement = {element}\nparameter = "{parameter}"\n' + \
        ("" if low is None else f"min = {low}\n") + ("" if high is None else f"max = {high}\n")


def require(quantity, aim, between=""):
    return f'[[require]]\nquantity = "{quantity}"\n{between}{aim}\n'


def focal_length(target, budget):
    return require("focal_length_mm", f"target = {target}\nbudget = {budget}")


def train(name, *parts, glasses=GLASSES):
    return "".join([f'format = 1\nname = "{name}"\n', *parts, glasses])


P = "power_per_mm"
CONTACT = (VISIBLE, ON_AXIS, thin("crown", 0.008), thin("flint", -0.003))
CEMENTED = (VISIBLE, "[aperture]\nentrance_pupil_diameter_mm = 50\n[field]\nhalf_angle_deg = 1\n")
FIRST_HOUR = (*CEMENTED, thick("N-BK7", "310, -230", 8, "cemented = true\n"),
              thick("SCHOTT/F2", "-230, -900", 5))

PROBLEMS = [
    train("contact pair", *CONTACT, vary(1, P), vary(2, P), focal_length(250, 0.25),
          require(*AXIAL)),
    train("three materials in contact", WIDE, ON_AXIS, thin("crown", 0.009), thin("flint", 0.001),
          thin("short flint", -0.006), vary(1, P), vary(2, P), vary(3, P), focal_length(300, 0.3),
          require(*AXIAL), require("axial_color_mm", "target = 0\nbudget = 0.05",
                                   'between_um = ["d", "C"]\n')),
    train("dialyte", VISIBLE, ON_AXIS, thin("crown", 0.006, 15), thin("flint", -0.004),
          vary(1, P), vary(2, P), focal_length(400, 0.4), require(*AXIAL)),
    train("two lenses of one material", VISIBLE, FIELD,
          '[stop]\nelement = 1\nside = "back"\noffset_mm = 20\n', thin("crown", 0.0066, 45),
          thin("crown", 0.0055), vary(1, P), vary(2, P), vary(1, "gap_after_mm", 22, 100),
          focal_length(100, 0.1), require(*LATERAL),
          require("back_focal_distance_mm", "target = 80\nbudget = 0.1")),
    train("cemented pair, the joint moves as one", *FIRST_HOUR, vary(1, "curvature_back_per_mm"),
          vary(2, "curvature_back_per_mm"), focal_length(500, 0.5), require(*AXIAL), glasses=""),
    train("cemented pair, three curvatures for two requirements", *FIRST_HOUR,
          vary(1, "curvature_front_per_mm"), vary(1, "curvature_back_per_mm"),
          vary(2, "curvature_back_per_mm"), focal_length(500, 0.5), require(*AXIAL), glasses=""),
    train("triplet with gaps", VISIBLE, "[aperture]\nf_number = 5\n[field]\nhalf_angle_deg = 12\n",
          '[stop]\nelement = 2\nside = "back"\n', thin("crown", 0.018, 14),
          thin("flint", -0.031, 13), thin("crown", 0.019),
          vary(1, P), vary(2, P), vary(3, P), vary(1, "gap_after_mm", 4, 40),
          vary(2, "gap_after_mm", 4, 40), focal_length(100, 0.1), require(*AXIAL),
          require(*LATERAL), require("petzval_per_mm", "target = 0.004\nbudget = 0.00002"),
          require("back_focal_distance_mm", "target = 84\nbudget = 0.5")),
    train("contact pair, a bound in the way", *CONTACT, vary(1, P, -0.0085, 0.0085),
          vary(2, P, -0.02, 0.02), focal_length(250, 0.25), require(*AXIAL)),
    train("contact pair, a bound within the budget", *CONTACT, vary(1, P, 0, 0.0091),
          vary(2, P, -0.02, 0), focal_length(250, 2), require(
              "axial_color_mm", "target = 0\nbudget = 0.5", 'between_um = ["F", "C"]\n')),
    train("contact pair that should have no secondary colour", WIDE, ON_AXIS,
          thin("crown", 0.008), thin("flint", -0.003), vary(1, P), vary(2, P),
          focal_length(250, 0.25), require("axial_color_mm", "target = 0\nbudget = 0.03"),
          require("secondary_axial_mm", "target = 0\nbudget = 0.02"),
          require("axial_color_mm", "target = 0\nbudget = 0.1", 'between_um = ["F", "C"]\n')),
    train("relay", VISIBLE, "[aperture]\nobject_na = 0.05\n[field]\nobject_height_mm = 12\n",
          "[object]\ndistance_mm = 150\n", '[stop]\nelement = 1\nside = "back"\noffset_mm = 10\n',
          thin("crown", 0.011, 55), thin("crown", 0.009), vary(1, P), vary(2, P),
          vary(1, "gap_after_mm", 20, 120),
          require("magnification", "target = -0.6\nbudget = 0.001"),
          require("track_length_mm", "target = 140\nbudget = 0.1"),
          require("exit_pupil_position_mm", "target = -70\nbudget = 0.5")),
    train("two groups, the least change", VISIBLE, FIELD, thin("crown", 0.012),
          thin("flint", -0.005, 20), thin("crown", 0.006), thin("flint", -0.003), vary(1, P),
          vary(2, P), vary(3, P), vary(4, P), vary(2, "gap_after_mm", 1, 60),
          focal_length(110, 0.1), require(*AXIAL), require(*LATERAL)),
    train("refractive with a diffractive surface", WIDE, ON_AXIS,
          '[stop]\nelement = 1\nside = "front"\noffset_mm = -6\n',
          thick("crown", "52, inf", 5),
          '[[element]]\nkind = "diffractive"\npower_per_mm = 0.0002\n',
          vary(1, "curvature_front_per_mm", 0, 0.1), vary(2, P), focal_length(100, 0.1),
          require("axial_color_mm", "target = 0\nbudget = 0.02")),
    train("infrared pair of thick elements",
          '[band]\nreference_um = 4\nwavelengths_um = [3, 4, 5]\n',
          "[aperture]\nf_number = 3\n[field]\nhalf_angle_deg = 3\n",
          thick("silicon of the bench", "90, 160", 6, "gap_after_mm = 2\n"),
          thick("germanium of the bench", "260, 150", 4),
          vary(1, "curvature_front_per_mm", 0.004, 0.03), vary(2, "curvature_back_per_mm"),
          focal_length(100, 0.1),
          require("axial_color_mm", "target = 0\nbudget = 0.05"), glasses=INFRARED),
    train("limits from one side", VISIBLE, ON_AXIS, thin("crown", 0.008, 12), thin("flint", -0.003),
          vary(1, P), vary(2, P), vary(1, "gap_after_mm", 2, 60), focal_length(250, 0.25),
          require(*AXIAL), require("strength", "at_most = 3.2\nbudget = 0.1"),
          require("image_distance_mm", "at_least = 225\nbudget = 1")),
    train("thicknesses and gaps, the least change", VISIBLE, FIELD,
          thick("crown", "42, -80", 7, "gap_after_mm = 5\n"),
          thick("flint", "-47, 900", 3), vary(1, "thickness_mm", 4, 14),
          vary(1, "gap_after_mm", 0.5, 20), vary(1, "curvature_front_per_mm"),
          vary(2, "curvature_front_per_mm"), focal_length(150, 0.15), require(*AXIAL)),
]
