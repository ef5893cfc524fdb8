"""Promises that are integrals, from the recipe's text to one number, worked out apart.

A layer on a half-space, or below a thick sheet: Airy's sum for the layer, Fresnel's coefficients
for the faces, the geometric sum for the sheet (M. Born, E. Wolf, Principles of Optics, 1.5, 1.6;
G. G. Stokes 1862).  The integrals are Gauss and Legendre's between every two rows of the spectra.

- photocurrent: q times the photons absorbed, E lambda / h c each watt; ASTM G173-03 from pvlib
- emittance: 1 - R - T weighted with Planck's law, over the hemisphere with 2 cos(theta) d cos(theta)
  (EN 12898:2019 for the weighting; Kirchhoff's law)
- luminous and solar: EN 410:2011; D65 and V(lambda) from colour-science, G173 from pvlib
- optical density: -log10 T, with 60 digits
"""

import contextlib
import io
import warnings

with warnings.catch_warnings(), contextlib.redirect_stderr(io.StringIO()):
    warnings.simplefilter("ignore")
    import colour
    import pvlib

import numpy
from mpmath import cos, exp, log10, mp, mpc, mpf, pi, sin

from common import document, handbook_rows

TOLERANCE = 1e-9

mp.dps = 60

PLANCK, LIGHT, CHARGE, BOLTZMANN = 6.62607015e-34, 299792458.0, 1.602176634e-19, 1.380649e-23
NODES, WEIGHTS = numpy.polynomial.legendre.leggauss(6)


def root(q2):
    q = numpy.sqrt(q2 + 0j)
    return numpy.where(q.imag < 0, -q, q)


def layer(first, film, thickness, last, wavelength, angle, polarised):
    """R and T of one layer between two media, and R from behind; angle in the incident medium, index 1."""
    alpha = numpy.sin(angle)
    q = [first * numpy.cos(angle)] + [root(n * n - alpha**2) for n in (film, last)]
    y = q if polarised == "s" else [n * n / k for n, k in zip((first, film, last), q)]
    one, two = (y[0] - y[1]) / (y[0] + y[1]), (y[1] - y[2]) / (y[1] + y[2])
    turn = numpy.exp(2j * numpy.pi * q[1] * thickness / wavelength)
    under = 1 + one * two * turn**2
    r = (one + two * turn**2) / under
    back = -(two + one * turn**2) / under
    t = (1 + one) * (1 + two) * turn / under
    return abs(r) ** 2, (y[2].real / y[0].real) * abs(t) ** 2, abs(back) ** 2


def below_a_sheet(sheet, millimetres, film, thickness, last, wavelength):
    """R and T into the last medium, at normal incidence, of a sheet on a coated half-space."""
    index = sheet.real + 0j
    face = abs((1 - index) / (1 + index)) ** 2
    passed = numpy.exp(-4 * numpy.pi * sheet.imag * millimetres * 1e6 / wavelength)
    r, t, _ = layer(index, film, thickness, last, wavelength, 0.0, "s")
    gain = 1 / (1 - face * r * passed**2)
    return face + (1 - face) ** 2 * r * passed**2 * gain, (1 - face) * passed * t * gain


def spans(rows, low, high):
    inside = [w for w in rows if low < w < high]
    ends = numpy.array([low, *inside, high])
    middle, half = (ends[1:] + ends[:-1]) / 2, (ends[1:] - ends[:-1]) / 2
    places = (middle[:, None] + half[:, None] * NODES).ravel()
    return places, (half[:, None] * WEIGHTS).ravel()


def weighed(value, rows, weight, low, high):
    places, shares = spans(rows, low, high)
    shares = shares * weight(places)
    return float(numpy.sum(shares * value(places)) / numpy.sum(shares)), float(numpy.sum(shares))


def both(value):
    return lambda w, angle: (value(w, angle, "s") + value(w, angle, "p")) / 2


def planck(kelvin):
    c2 = PLANCK * LIGHT / BOLTZMANN * 1e9
    return lambda w: (10000 / w) ** 5 / numpy.expm1(c2 / (w * kelvin))


def sun():
    table = pvlib.spectrum.get_reference_spectra(standard="ASTM G173-03")["global"]
    rows, values = numpy.array(table.index, float), numpy.array(table, float)
    return rows, lambda w: numpy.interp(w, rows, values)


MATERIALS = {
    "nitride": 2.02 + 0.004j,
    "absorber": 3.7 + 0.03j,
    "sheet": 1.5 + 2e-7j,
    "metal": 12.0 + 45.0j,
    "oxide": 1.6 + 0.05j,
    "crown": 1.52 + 0j,
    "tin": 2.35 + 0j,
    "black": 2.2 + 2.9j,
}


def recipe(stack, promise):
    lines = []
    for name, index in MATERIALS.items():
        lines.append(f'material {name} {{ source "x" index {index.real!r} k {index.imag:.10f} }}')
    lines.append(f"recipe r {{ stack {{ {stack} }} require {promise} }}")
    return "\n".join(lines) + "\n"


def photocurrents():
    rows, power = sun()
    nitride, absorber, sheet = (MATERIALS[n] + 0j for n in ("nitride", "absorber", "sheet"))
    photons = lambda w: power(w) * w
    to_current = 1e-9 * CHARGE / (PLANCK * LIGHT) / 10
    bare = lambda w: layer(1 + 0j, nitride, 75.0, absorber, w, 0.0, "s")
    covered = lambda w: below_a_sheet(sheet, 3.0, nitride, 75.0, absorber, w)
    cell = "incident air layer nitride 75 nm substrate absorber"
    module = "incident air slab sheet 3 mm layer nitride 75 nm substrate absorber"
    clause = "over 350 .. 1100 nm under am15g"
    for stack, into in [(cell, lambda w: bare(w)[1]), (module, lambda w: covered(w)[1])]:
        mean, all_photons = weighed(into, rows, photons, 350.0, 1100.0)
        yield stack, f"photocurrent in absorber >= 1 mA/cm2 {clause}", mean * all_photons * to_current
        lost = (1 - mean) * all_photons * to_current
        yield stack, f"photocurrent_loss in absorber <= 40 mA/cm2 {clause}", lost
    taken, all_photons = weighed(lambda w: 1 - bare(w)[0] - bare(w)[1], rows, photons, 350.0, 1100.0)
    yield cell, f"photocurrent in nitride <= 40 mA/cm2 {clause}", taken * all_photons * to_current


def emittances():
    metal, oxide = MATERIALS["metal"], MATERIALS["oxide"]
    places = numpy.linspace(5000, 25000, 41)[1:-1]
    body = "incident air layer oxide 400 nm substrate metal 1 mm exit air"
    absorbed = both(lambda w, angle, mode: 1 - layer(1 + 0j, oxide + 0j, 400.0, metal + 0j, w, angle, mode)[0])
    for kelvin, angle in [(300, 0.0), (300, 60.0), (600, 0.0)]:
        mean, _ = weighed(lambda w: absorbed(w, numpy.radians(angle)), places, planck(kelvin), 5000.0, 25000.0)
        yield body, f"emittance <= 90 % over 5 .. 25 um at {kelvin} K at {angle:.0f} deg", mean
    x, shares = numpy.polynomial.legendre.leggauss(60)
    total = 0.0
    # cos(theta) = t^3 gives the crest of p light near grazing its room.
    for t, share in zip((x + 1) / 2, shares / 2):
        angle = numpy.arccos(t**3)
        mean, _ = weighed(lambda w: absorbed(w, angle), places, planck(300), 5000.0, 25000.0)
        total += share * 6 * t**5 * mean
    yield body, "emittance <= 90 % over 5 .. 25 um at 300 K hemispherical", float(total)


def panes():
    tin, crown = MATERIALS["tin"] + 0j, MATERIALS["crown"] + 0j
    stack = "incident air layer tin 55 nm substrate crown 4 mm exit air"

    def pane(w):
        r, t, back = layer(1 + 0j, tin, 55.0, crown, w, 0.0, "s")
        face = abs((1 - crown) / (1 + crown)) ** 2
        gain = 1 / (1 - back * face)
        return r + t * t * face * gain, t * (1 - face) * gain

    visible = colour.MSDS_CMFS["CIE 1931 2 Degree Standard Observer"]
    eye_rows, eye = numpy.array(visible.wavelengths, float), numpy.array(visible.values[:, 1], float)
    lamp = numpy.array(handbook_rows("spectra/d65"))
    d65 = lambda w: numpy.interp(w, lamp[:, 0], lamp[:, 1]) * numpy.interp(w, eye_rows, eye)
    rows = numpy.union1d(eye_rows, lamp[:, 0])
    sun_rows, power = sun()
    for at, word in enumerate(["reflectance", "transmittance"]):
        seen, _ = weighed(lambda w: pane(w)[at], rows, d65, 380.0, 780.0)
        yield stack, f"luminous {word} <= 99 %", seen
        heat, _ = weighed(lambda w: pane(w)[at], sun_rows, power, 300.0, 2500.0)
        yield stack, f"solar {word} <= 99 %", heat


def densities():
    black, crown, wavelength = mpc("2.2", "2.9"), mpf("1.52"), mpf(532)
    for thickness in [60, 300, 500, 4000]:
        one, two = (1 - black) / (1 + black), (black - crown) / (black + crown)
        turn = exp(mpc(0, 1) * 2 * pi * black * thickness / wavelength)
        t = (1 + one) * (1 + two) * turn / (1 + one * two * turn**2)
        density = -log10(crown * abs(t) ** 2)
        stack = f"incident air layer black {thickness} nm substrate crown"
        yield stack, "optical_density >= 0.5 at 532 nm", float(density)


def make():
    mp.dps = 60
    rows = []
    for part in (photocurrents, emittances, panes, densities):
        for stack, promise, value in part():
            rows.append({"coat": recipe(stack, promise), "promise": promise, "value": value})
    content = {
        "about": "recipes with one requirement each, and its value",
        "source": "Airy's and Stokes's sums; ASTM G173-03 (pvlib), CIE (colour-science), Planck's law",
        "promises": rows,
    }
    return {"promises.json": document(content)}
