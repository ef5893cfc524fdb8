"""s-polarised reflectance by refnx, a neutron-reflectometry package.

Its Abeles recursion (F. Abeles, J. Phys. Radium 11, 307 (1950); A. R. J. Nelson,
S. W. Prescott, J. Appl. Cryst. 52, 193 (2019), doi 10.1107/S1600576718017296)
solves the same equation as s-polarised light: with q = 4 pi n0 cos(theta) / lambda
and the scattering-length density rho = -pi N^2 / lambda^2 the two wave numbers
across the films are the same.  Its absorption has the other sign of time, which a
reflectance does not see.
"""

import math
import random

import numpy
from refnx.reflect import abeles

from common import document

TOLERANCE = 1e-12


def density(index, wavelength):
    """Real and imaginary scattering-length density, in refnx's 1e-6 per square length."""
    squared = complex(*index) ** 2
    scale = math.pi / wavelength**2 * 1e6
    return -squared.real * scale, squared.imag * scale


def reflectance(incident, films, exit_index, wavelength, angle):
    rows = [[0.0, *density([incident, 0.0], wavelength), 0.0]]
    rows += [[d, *density(index, wavelength), 0.0] for index, d in films]
    rows.append([0.0, *density(exit_index, wavelength), 0.0])
    q = 4 * math.pi * incident * math.cos(math.radians(angle)) / wavelength
    return float(abeles(numpy.array([q]), numpy.array(rows))[0])


def make():
    rng = random.Random(517642)

    def draw(low, high, digits=4):
        return round(low + (high - low) * rng.random(), digits)

    parts = []
    for number in range(40):
        absorbing = number % 2 == 1
        films = [
            [
                [draw(1.3, 2.6), draw(0, 0.4) if absorbing else 0.0],
                draw(5, 220, 2),
            ]
            for _ in range(1 + int(20 * rng.random() ** 1.5))
        ]
        exit_index = [draw(1.3, 4), draw(0, 0.3) if absorbing else 0.0]
        incident = [1.0, 1.0, 1.33, 1.52][number % 4]
        cases = []
        for angle in [0.0, 30.0, 45.0, 60.0, 75.0, 85.0]:
            wavelength = draw(380, 1100, 2)
            value = reflectance(incident, films, exit_index, wavelength, angle)
            cases.append([wavelength, angle, float(f"{value:.13g}")])
        parts.append({"incident": incident, "films": films, "exit": exit_index, "cases": cases})
    return {
        "abeles_refnx.json": document(
            {
                "about": "reflectance, s-polarised; films are [[n, k], thickness in nm]; "
                "cases are [wavelength in nm, angle in degrees, reflectance]",
                "source": "refnx 0.1.67, A. R. J. Nelson, S. W. Prescott, J. Appl. Cryst. 52, "
                "193 (2019); F. Abeles, J. Phys. Radium 11, 307 (1950)",
                "parts": parts,
            }
        )
    }
