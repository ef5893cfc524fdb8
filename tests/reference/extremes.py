"""Greatest and least reflectances over bands and ranges of angles.

Closed forms where there is one (quarter waves, Brewster's angle, the cavity's
centre); elsewhere dense sampling of Airy's sum, many points to the narrowest
line, then a bracketed search about the best sample.  The cavity's half-width is
the root of T = 1/2 with 40 digits.
"""

import math

import numpy
from mpmath import mp, mpc, mpf
from scipy.optimize import minimize, minimize_scalar

from common import document, double
from optics import evaluate
from waves import reflectance

TOLERANCE = 1e-9


def cauchy(a, b, c=0.0):
    return {"cauchy": [a, b, c]}


def value_of(index):
    """A plain index, or A + B/L^2 + C/L^4 with L in um."""
    if isinstance(index, dict):
        a, b, c = index["cauchy"]
        return lambda w: a + b / (w / 1000) ** 2 + c / (w / 1000) ** 4
    return complex(*index)


H, L = [2.35, 0.0], [1.46, 0.0]


def quarter(index, wavelength):
    return wavelength / 4 / index[0]


def cavity(pairs, wavelength, spacer=L):
    mirror = [(H, quarter(H, wavelength)), (L, quarter(L, wavelength))] * pairs
    mirror.append((H, quarter(H, wavelength)))
    return mirror + [(spacer, wavelength / 2 / spacer[0])] + mirror[::-1]


CASES = [
    # name, incident, films, exit, polarisation, wavelengths, angles, samples
    ("quarter-wave film", 1.0, [([1.38, 0.0], 550 / 4 / 1.38)], [1.52, 0.0], "s", (420, 680), 0),
    ("bare glass, p", 1.0, [], [1.5168, 0.0], "p", 550, (0, 80)),
    ("two-film coat", 1.0, [([1.38, 0.0], 129.08), ([2.3, 0.0], 12.54)], [1.52, 0.0], "s",
     (420, 700), 0),
    ("four films, dispersive", 1.0,
     [(cauchy(1.4484, 0.00354), 86.0), (cauchy(2.2230, 0.02660, 0.0021), 106.0),
      (cauchy(1.4484, 0.00354), 32.5), (cauchy(2.2230, 0.02660, 0.0021), 11.5)],
     [1.52, 0.0], "mean", (430, 660), 0),
    ("four films, dispersive, at 35 deg", 1.0,
     [(cauchy(1.4484, 0.00354), 86.0), (cauchy(2.2230, 0.02660, 0.0021), 106.0),
      (cauchy(1.4484, 0.00354), 32.5), (cauchy(2.2230, 0.02660, 0.0021), 11.5)],
     [1.52, 0.0], "p", (430, 660), 35),
    ("mirror", 1.0, [(H, quarter(H, 633)), (L, quarter(L, 633))] * 8 + [(H, quarter(H, 633))],
     [1.52, 0.0], "s", (600, 670), 0),
    ("mirror outside its band", 1.0,
     [(H, quarter(H, 633)), (L, quarter(L, 633))] * 8 + [(H, quarter(H, 633))],
     [1.52, 0.0], "p", (400, 520), 20),
    ("thick film, many fringes", 1.0, [(cauchy(1.45, 0.01), 30000.0)], [3.5, 0.0], "s",
     (400, 900), 0),
    ("cavity between glasses", 1.52, cavity(10, 575.313), [1.52, 0.0], "s", (540, 610), 0),
    ("cavity with a lossy spacer", 1.0, cavity(9, 573.907, [1.46, 2e-6]), [1.52, 0.0], "s",
     (540, 610), 0),
    ("cavity against the angle", 1.0, cavity(8, 580.0), [1.52, 0.0], "s", 570.0, (0, 30)),
    ("silver under glass", 1.5168, [([0.06, 3.6], 50.0)], [1.0, 0.0], "p", 550, (38, 60)),
    ("four films over band and angles", 1.0,
     [([1.46, 0.0], 86.0), ([2.33, 0.0], 106.0), ([1.46, 0.0], 32.5), ([2.33, 0.0], 11.5)],
     [1.52, 0.0], "mean", (450, 640), (0, 40)),
]


def function(case):
    _, incident, films, exit_index, polarisation, _, _ = case
    films = [(value_of(n), d) for n, d in films]
    far = value_of(exit_index)

    def r(wavelength, angle_deg):
        sine = numpy.sin(numpy.radians(angle_deg))
        wavelength = numpy.asarray(wavelength, dtype=float)
        parts = [
            reflectance(incident, films, far, wavelength, sine, kind == "s")
            for kind in ("sp" if polarisation == "mean" else polarisation[0])
        ]
        return sum(parts) / len(parts)

    return r


def search(case, sign):
    """Least (sign 1) or greatest (sign -1) value and where it is."""
    r = function(case)
    wavelengths, angles = case[5], case[6]
    both = isinstance(wavelengths, tuple) and isinstance(angles, tuple)
    if both:
        w = numpy.linspace(*wavelengths, 1901)
        a = numpy.linspace(*angles, 401)
        grid = sign * r(w[:, None], a[None, :])
        i, j = numpy.unravel_index(int(numpy.argmin(grid)), grid.shape)
        found = minimize(
            lambda x: sign * float(r(x[0], x[1])),
            (w[i], a[j]),
            method="Nelder-Mead",
            bounds=[wavelengths, angles],
            options={"xatol": 1e-10, "fatol": 1e-16, "maxiter": 4000},
        )
        return sign * float(found.fun), float(found.x[0]), float(found.x[1])
    over_angles = isinstance(angles, tuple)
    low, high = angles if over_angles else wavelengths

    def along(x):
        return sign * (r(wavelengths, x) if over_angles else r(x, angles))

    count = 700001
    samples = along(numpy.linspace(low, high, count))
    best = int(numpy.argmin(samples))
    step = (high - low) / (count - 1)
    place, value = low + best * step, float(samples[best])
    if 0 < best < count - 1:
        found = minimize_scalar(
            lambda x: float(along(x)),
            bounds=(place - step, place + step),
            method="bounded",
            options={"xatol": 1e-12},
        )
        if found.fun <= value:
            place, value = float(found.x), float(found.fun)
    if over_angles:
        return sign * value, float(wavelengths), place
    return sign * value, place, float(angles)


def half_width(pairs, wavelength, incident):
    """Full width at half maximum of the cavity's line, both edges by roots of T = 1/2."""

    def t(w):
        films = [("film", mpc(*n), mpf(d)) for n, d in cavity(pairs, wavelength)]
        return evaluate(mpc(incident), films, mpc(incident), w, mpf(0), "s")[1] - mpf(1) / 2

    centre = mpf(wavelength)
    step = mpf("1e-4")
    while t(centre + step) > 0:
        step *= 2
    high = mp.findroot(t, (centre, centre + step), solver="anderson", tol=1e-25)
    low = mp.findroot(t, (centre - step, centre), solver="anderson", tol=1e-25)
    return double(low), double(high)


def make():
    mp.dps = 40
    rows = []
    for case in CASES:
        name, incident, films, exit_index, polarisation, wavelengths, angles = case
        row = {
            "name": name,
            "incident": incident,
            "films": films,
            "exit": exit_index,
            "polarisation": polarisation,
            "wavelengths_nm": list(wavelengths) if isinstance(wavelengths, tuple) else wavelengths,
            "angles_deg": list(angles) if isinstance(angles, tuple) else angles,
        }
        for key, sign in (("least", 1), ("greatest", -1)):
            value, w, a = search(case, sign)
            # An extreme is flat: a place is only as good as the root of a rounding error.
            row[key] = {
                "value": round(value, 11),
                "wavelength_nm": round(w, 3),
                "angle_deg": round(a, 3),
            }
        rows.append(row)
    by_name = {row["name"]: row for row in rows}

    # What has a closed form must come out of the search too.
    q = by_name["quarter-wave film"]["least"]
    assert abs(q["value"] - ((1.52 - 1.38**2) / (1.52 + 1.38**2)) ** 2) < 1e-10
    assert abs(q["wavelength_nm"] - 550) < 0.01
    b = by_name["bare glass, p"]["least"]
    assert b["value"] < 1e-10 and abs(b["angle_deg"] - math.degrees(math.atan(1.5168))) < 0.01
    c = by_name["cavity between glasses"]["least"]
    assert c["value"] < 1e-6 and abs(c["wavelength_nm"] - 575.313) < 0.01
    y = (2.35 / 1.46) ** 16 * 2.35**2 / 1.52
    m = by_name["mirror"]["greatest"]
    assert abs(m["value"] - ((1 - y) / (1 + y)) ** 2) < 1e-10
    low, high = half_width(10, 575.313, 1.52)
    assert 0.005 < high - low < 0.02
    return {
        "extremes.json": document(
            {
                "about": "least and greatest reflectance over a band, a range of angles or both; "
                "an index is [n, k] or Cauchy's A, B um^2, C um^4; pairs are ranges",
                "source": "M. Born, E. Wolf, Principles of Optics, 7th ed. (1999), 1.5.3, 1.6.4, "
                "1.6.5 and 7.6 for the closed forms; dense sampling of Airy's sum and a "
                "bracketed search (scipy 1.17.1) for the rest",
                "cavity_half_maxima_nm": [low, high],
                "cases": rows,
            }
        )
    }
