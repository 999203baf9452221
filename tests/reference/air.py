"""Refractive index of air, at 40 digits, straight from the published equations.

P. E. Ciddor, "Refractive index of air: new equations for the visible and near infrared",
Applied Optics 35, 1566-1573 (1996). Saturation vapour pressure by its form over water, at every
temperature. The gas constant cancels in both density ratios, so it doesn't occur.
"""
from mpmath import mp, mpf

mp.dps = 60

K0, K1, K2, K3 = mpf("238.0185"), mpf(5792105), mpf("57.362"), mpf(167917)      # um^-2
W0, W1, W2, W3 = mpf("295.235"), mpf("2.6422"), mpf("-0.032380"), mpf("0.004028")
SVP = mpf("1.2378847e-5"), mpf("-1.9121316e-2"), mpf("33.93711047"), mpf("-6.3431645e3")
Z_A = mpf("1.58123e-6"), mpf("-2.9331e-8"), mpf("1.1043e-10")
Z_B = mpf("5.707e-6"), mpf("-2.051e-8")
Z_C = mpf("1.9898e-4"), mpf("-2.376e-6")
Z_D, Z_E = mpf("1.83e-11"), mpf("-0.765e-8")
ZERO_C = mpf("273.15")
STANDARD = {"temperature": mpf(20), "pressure": mpf(101325), "humidity": mpf(0), "co2": mpf(450)}


def compressibility(temperature, pressure, water):
    t, x, ratio = temperature, water, pressure / (temperature + ZERO_C)
    linear = Z_A[0] + Z_A[1] * t + Z_A[2] * t**2
    linear += (Z_B[0] + Z_B[1] * t) * x + (Z_C[0] + Z_C[1] * t) * x**2
    return 1 - ratio * linear + ratio**2 * (Z_D + Z_E * x**2)


def saturation_pressure(temperature):
    kelvin = temperature + ZERO_C
    return mp.exp(SVP[0] * kelvin**2 + SVP[1] * kelvin + SVP[2] + SVP[3] / kelvin)


def water_fraction(temperature, pressure, humidity):
    enhancement = mpf("1.00062") + mpf("3.14e-8") * pressure + mpf("5.6e-7") * temperature**2
    return enhancement * humidity * saturation_pressure(temperature) / pressure


def moles(temperature, pressure, water):
    """Molar density times the gas constant, in Pa/K."""
    return pressure / (compressibility(temperature, pressure, water) * (temperature + ZERO_C))


def refractivity(vacuum_um, temperature, pressure, humidity, co2):
    """n - 1 of air. Wavelength in vacuum, um; Celsius, Pa, 0 to 1, ppm."""
    if pressure == 0:
        return mpf(0)
    s = 1 / vacuum_um**2
    dry = (K1 / (K0 - s) + K3 / (K2 - s)) * mpf("1e-8")
    dry *= 1 + mpf("0.534e-6") * (co2 - 450)
    vapour = mpf("1.022e-8") * (W0 + W1 * s + W2 * s**2 + W3 * s**3)
    x = water_fraction(temperature, pressure, humidity)
    here = moles(temperature, pressure, x)
    dry_ratio = here * (1 - x) / moles(mpf(15), mpf(101325), mpf(0))
    vapour_ratio = here * x / moles(mpf(20), mpf(1333), mpf(1))
    return dry_ratio * dry + vapour_ratio * vapour


def index(vacuum_um, **state):
    return 1 + refractivity(vacuum_um, **{**STANDARD, **state})


def to_vacuum(standard_air_um):
    """lambda_vac = lambda n_std(lambda_vac); each pass gains five digits or more."""
    vacuum = standard_air_um
    for _ in range(16):
        vacuum = standard_air_um * index(vacuum)
    return vacuum
