"""Weighted means of reflectance and transmittance over bands.

The weights are the standard spectra, straight between their rows as the standards
have them; silicon's n and k go by scipy's monotone cubics.  Every piece between
two rows of any table is integrated by Gauss and Legendre's rule, so that no
corner falls inside a piece.
"""

import math

import numpy
from mpmath import mp, mpf
from scipy.interpolate import PchipInterpolator

from common import document, handbook_rows
from waves import reflectance

TOLERANCE = 1e-11

NODES, WEIGHTS = numpy.polynomial.legendre.leggauss(16)


def measured(name):
    rows = numpy.array(handbook_rows(name))
    n, k = (PchipInterpolator(rows[:, 0], rows[:, c]) for c in (1, 2))
    return (lambda w: n(w) + 1j * k(w)), rows[:, 0]


def spectrum(name):
    rows = numpy.array(handbook_rows(f"spectra/{name}"))
    return (lambda w: numpy.interp(w, rows[:, 0], rows[:, 1])), rows[:, 0]


def planck(kelvin):
    """M. Planck (1901); the constants are exact in the SI of 2019; a relative power."""
    c2 = 6.62607015e-34 * 299792458 / 1.380649e-23 * 1e9
    return (lambda w: (560 / w) ** 5 / numpy.expm1(c2 / (w * kelvin))), numpy.array([])


SI, SI_ROWS = measured("silicon")
GLASS, GLASS_ROWS = measured("float_glass")
CRYSTAL = {"handbook": "silicon"}

PARTS = {
    "bare silicon": ([], CRYSTAL),
    "nitride on silicon": ([([2.05, 0.0], 75.0)], CRYSTAL),
    "quarter wave on glass": ([([1.38, 0.0], 99.6)], [1.52, 0.0]),
    "high film on glass": ([([2.35, 0.0], 180.0)], [1.52, 0.0]),
    "thick film on glass": ([([1.6, 0.0], 12000.0)], [1.52, 0.0]),
}

MEANS = [
    # part, band in nm, angle in degrees, spectra multiplied, photons counted
    ("bare silicon", (300, 1100), 0, ["am15g"], True),
    ("bare silicon", (300, 1100), 0, ["am15g"], False),
    ("nitride on silicon", (300, 1100), 0, ["am15g"], True),
    ("nitride on silicon", (300, 1200), 30, ["am15g"], True),
    ("nitride on silicon", (300, 1100), 0, ["am15d"], True),
    ("nitride on silicon", (300, 1100), 60, ["am0"], False),
    ("bare silicon", (400, 700), 0, [], False),
    ("quarter wave on glass", (400, 700), 0, [], False),
    ("quarter wave on glass", (400, 700), 45, [], False),
    ("quarter wave on glass", (380, 780), 0, ["d65"], False),
    ("quarter wave on glass", (380, 780), 0, ["d65", "photopic"], False),
    ("quarter wave on glass", (380, 780), 0, ["illuminant_a", "photopic"], False),
    ("quarter wave on glass", (380, 780), 0, ["equal_energy", "photopic"], False),
    ("high film on glass", (380, 780), 0, ["d65", "photopic"], False),
    ("high film on glass", (300, 2500), 0, ["am15g"], False),
    ("high film on glass", (400, 900), 0, ["blackbody 2856 K"], False),
    ("high film on glass", (400, 900), 0, ["blackbody 2856 K"], True),
    ("thick film on glass", (400, 700), 0, [], False),
    ("thick film on glass", (380, 780), 20, ["d65", "photopic"], False),
]


def mean(films, exit_index, band, angle, names, photons):
    knots = [numpy.array(band, dtype=float)]
    weights = []
    for name in names:
        if name.startswith("blackbody"):
            f, rows = planck(float(name.split()[1]))
        else:
            f, rows = spectrum(name)
        weights.append(f)
        knots.append(rows)
    if exit_index is CRYSTAL:
        knots.append(SI_ROWS)
    thickest = max((n[0] * d for n, d in films), default=0)
    fringes = 4 * thickest / band[0] + 8
    knots.append(1 / numpy.linspace(1 / band[0], 1 / band[1], int(2 * fringes)))
    edges = numpy.unique(numpy.concatenate(knots))
    edges = edges[(edges >= band[0]) & (edges <= band[1])]
    half = numpy.diff(edges)[:, None] / 2
    w = edges[:-1, None] + half * (NODES + 1)
    weight = half * WEIGHTS
    for f in weights:
        weight = weight * f(w)
    if photons:
        weight = weight * w
    far = SI if exit_index is CRYSTAL else complex(*exit_index)
    sine = math.sin(math.radians(angle))
    films = [(complex(*n), d) for n, d in films]
    r = [reflectance(1.0, films, far, w, sine, s) for s in (True, False)]
    value = (r[0] + r[1]) / 2
    return float(math.fsum((weight * value).ravel()) / math.fsum(weight.ravel()))


PLATES = [
    # thickness of float glass in nm, band in nm, spectra multiplied
    (4e6, (310, 2500), ["am15g"]),
    (4e6, (310, 4000), ["am15g"]),
    (4e6, (380, 780), ["d65", "photopic"]),
    (10e6, (380, 780), ["d65", "photopic"]),
]


def plate(thickness, band, names):
    """(R, T) of a bare plate: G. G. Stokes, Proc. R. Soc. London 11, 545 (1862)."""
    parts = [spectrum(name) for name in names]
    edges = numpy.unique(
        numpy.concatenate([GLASS_ROWS, numpy.array(band, dtype=float)] + [rows for _, rows in parts])
    )
    edges = edges[(edges >= band[0]) & (edges <= band[1])]
    half = numpy.diff(edges)[:, None] / 2
    w = edges[:-1, None] + half * (NODES + 1)
    weight = half * WEIGHTS
    for f, _ in parts:
        weight = weight * f(w)
    index = GLASS(w)
    face = abs((1 - index) / (1 + index)) ** 2
    # What crosses a face, in either direction, is 4 n/|1 + N|^2 there and back alike.
    across = 4 * index.real / abs(1 + index) ** 2
    left = numpy.exp(-4 * math.pi * index.imag * thickness / w)
    many = 1 - (face * left) ** 2
    t = across**2 * left / many
    r = face + across**2 * face * left**2 / many
    whole = math.fsum(weight.ravel())
    return [float(math.fsum((weight * value).ravel()) / whole) for value in (r, t)]


def quarter_wave_by_mpmath():
    """The plain mean of one film once more, by mpmath's own quadrature of the closed form."""
    mp.dps = 25
    r1, r2 = (1 - mpf("1.38")) / (1 + mpf("1.38")), (mpf("1.38") - mpf("1.52")) / (
        mpf("1.38") + mpf("1.52")
    )

    def r(w):
        c = mp.cos(4 * mp.pi * mpf("1.38") * mpf("99.6") / w)
        return (r1**2 + r2**2 + 2 * r1 * r2 * c) / (1 + r1**2 * r2**2 + 2 * r1 * r2 * c)

    return mp.quad(r, [400, 500, 600, 700]) / 300


def make():
    rows = []
    for name, band, angle, names, photons in MEANS:
        films, exit_index = PARTS[name]
        value = mean(films, exit_index, band, angle, names, photons)
        if (name, band, angle, names) == ("quarter wave on glass", (400, 700), 0, []):
            assert abs(value - float(quarter_wave_by_mpmath())) < 1e-14
        rows.append(
            {
                "part": name,
                "films": films,
                "exit": exit_index,
                "band_nm": list(band),
                "angle_deg": angle,
                "under": names,
                "photons": photons,
                "mean_reflectance": float(f"{value:.13g}"),
            }
        )
    return {
        "means.json": document(
            {
                "about": "mean reflectance from air, the mean of s and p, weighted by the product "
                "of the spectra (and by the wavelength where photons are counted)",
                "source": "ASTM G173-03; CIE 015:2018, CIE 018; M. A. Green, Sol. Energy Mater. "
                "Sol. Cells 92, 1305 (2008); M. Rubin, Sol. Energy Mater. 12, 275 (1985); "
                "G. G. Stokes, Proc. R. Soc. London 11, 545 (1862); M. Born, E. Wolf, Principles of Optics, 7th ed. "
                "(1999), 1.6.4; quadrature with numpy 2.4.6 and scipy 1.17.1",
                "means": rows,
                "plates": [
                    {
                        "float_glass_nm": thickness,
                        "band_nm": list(band),
                        "under": names,
                        "mean_reflectance": float(f"{r:.13g}"),
                        "mean_transmittance": float(f"{t:.13g}"),
                    }
                    for thickness, band, names in PLATES
                    for r, t in [plate(thickness, band, names)]
                ],
            }
        )
    }
