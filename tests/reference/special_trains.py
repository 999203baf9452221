"""Trains that no random draw meets: telecentric ones, a stop at a joint, surroundings, flats."""
GLASSES = """[[material]]
name = "crown"
lines_um = ["g", "F", "d", "C", "r"]
indices = [1.52668, 1.52238, 1.51680, 1.51432, 1.51289]
[[material]]
name = "flint"
lines_um = ["h", "g", "F", "e", "d", "C", "r"]
indices = [1.65064, 1.64202, 1.63208, 1.62408, 1.62004, 1.61503, 1.61227]
"""
VISIBLE = '[band]\nreference_um = "d"\nwavelengths_um = ["F", "d", "C"]\n'
PAIR = """[[element]]
material = "crown"
power_per_mm = 0.015625
[[element]]
material = "flint"
power_per_mm = -0.0078125
"""
CEMENTED = """[[element]]
material = "crown"
radii_mm = [310, -230]
thickness_mm = 8
cemented = true
[[element]]
material = "flint"
radii_mm = [-230, -900]
thickness_mm = 5
"""


def train(name, *parts):
    return "".join([f'format = 1\nname = "{name}"\n', *parts, GLASSES])


def require(quantity, rest):
    return f'[[require]]\nquantity = "{quantity}"\n{rest}\n'


IN_IMAGE_SPACE = train(
    "telecentric in image space, stop ahead", VISIBLE,
    "[aperture]\nf_number = 8\n[field]\nhalf_angle_deg = 5\n",
    '[stop]\nelement = 1\nside = "front"\noffset_mm = -128\n', PAIR,
    require("entrance_pupil_position_mm", "target = -120\nbudget = 4"))

IN_IMAGE_SPACE_BETWEEN = train(
    "telecentric in image space, stop between", VISIBLE,
    "[aperture]\nentrance_pupil_diameter_mm = 10\n[field]\nimage_height_mm = 6\n",
    "[object]\ndistance_mm = 400\n",
    '[stop]\nelement = 2\nside = "front"\noffset_mm = -64\n',
    '[[element]]\nmaterial = "flint"\npower_per_mm = -0.004\ngap_after_mm = 80\n',
    '[[element]]\nmaterial = "crown"\npower_per_mm = 0.015625\n')

OBJECT_SPACE = ("[aperture]\nobject_na = 0.0625\n", "[object]\ndistance_mm = 96\n",
                '[stop]\nelement = 1\nside = "back"\noffset_mm = 64\n',
                '[[element]]\nmaterial = "crown"\npower_per_mm = 0.015625\ngap_after_mm = 96\n',
                '[[element]]\nmaterial = "flint"\npower_per_mm = 0.0078125\n')

IN_OBJECT_SPACE = train("telecentric in object space", VISIBLE, "[field]\nobject_height_mm = 8\n",
                        *OBJECT_SPACE,
                        require("exit_pupil_position_mm", "at_most = -40\nbudget = 2"))

IN_OBJECT_SPACE_BY_IMAGE = train("telecentric in object space, field by image", VISIBLE,
                                 "[field]\nimage_height_mm = -4.5\n", *OBJECT_SPACE,
                                 require("magnification", "at_least = -0.5\nbudget = 0.01"))

STOP_AT_JOINT = train(
    "stop at a cemented joint", VISIBLE,
    "[aperture]\nentrance_pupil_diameter_mm = 50\n[field]\nhalf_angle_deg = 1\n",
    '[stop]\nelement = 1\nside = "back"\n', CEMENTED,
    require("secondary_lateral_mm", "target = 0\nbudget = 0.002"))

STOP_AT_NEXT = train(
    "stop where the next element begins", VISIBLE,
    "[aperture]\nf_number = 6\n[field]\nhalf_angle_deg = 4\n",
    '[stop]\nelement = 1\nside = "back"\noffset_mm = 25\n',
    '[[element]]\nmaterial = "crown"\nradii_mm = [90, inf]\nthickness_mm = 6\ngap_after_mm = 25\n',
    '[[element]]\nmaterial = "flint"\nradii_mm = [inf, 160]\nthickness_mm = 3\n',
    require("strength", "at_most = 1.5\nbudget = 0.1"))

HYBRID = train(
    "refractive with a diffractive surface", '[band]\nreference_um = "d"\n'
    'wavelengths_um = ["g", "F", "d", "C", "r"]\nweights = [0.4, 1, 1, 1, 0.5]\n',
    "[aperture]\nf_number = 4\n[field]\nhalf_angle_deg = 3\n[detector]\npixel_um = 3.45\n",
    '[[element]]\nmaterial = "crown"\nradii_mm = [52, inf]\nthickness_mm = 5\n',
    '[[element]]\nkind = "diffractive"\npower_per_mm = 0.0005\n',
    require("secondary_axial_mm", "target = 0"),
    require("lateral_color_mm", "target = 0"))


def in_surroundings(name, surroundings):
    return train(name, VISIBLE, "[aperture]\nentrance_pupil_diameter_mm = 40\n",
                 "[field]\nhalf_angle_deg = 2\n[surroundings]\n", surroundings,
                 '[stop]\nelement = 1\nside = "front"\noffset_mm = -30\n',
                 CEMENTED.replace("cemented = true\n", "gap_after_mm = 2.5\n"),
                 '[[element]]\nkind = "diffractive"\npower_per_mm = 0.0002\n')


SPECIAL = [
    IN_IMAGE_SPACE, IN_IMAGE_SPACE_BETWEEN, IN_OBJECT_SPACE, IN_OBJECT_SPACE_BY_IMAGE,
    STOP_AT_JOINT, STOP_AT_NEXT, HYBRID,
    in_surroundings("in standard air", "temperature_C = 20\npressure_Pa = 101325\n"),
    in_surroundings("in a vacuum", "temperature_C = 20\npressure_Pa = 0\n"),
    in_surroundings("in moist air, high up",
                    "temperature_C = 20\npressure_Pa = 62000\nhumidity = 0.6\nco2_ppm = 420\n"),
]
