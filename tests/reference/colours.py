"""Colours by colour-science: CIELAB of films under two lights for both observers, and CIEDE2000.

The reflectance of one film is the closed Airy formula; the tristimulus values are sums of
colour-science's 1 nm colour-matching functions, the lights joined by straight lines between
their rows, as the daylight tables ask for.
"""

import contextlib
import io
import warnings

with warnings.catch_warnings(), contextlib.redirect_stderr(io.StringIO()):
    warnings.simplefilter("ignore")
    import colour
import numpy

from common import document, handbook_rows

TOLERANCE = 1e-9

WAVELENGTHS = numpy.arange(380.0, 781.0, 1.0)
OBSERVERS = {
    "two": "CIE 1931 2 Degree Standard Observer",
    "ten": "CIE 1964 10 Degree Standard Observer",
}
FILMS = [(1.38, 99.6), (1.46, 310.0), (2.05, 68.0), (2.35, 58.5), (2.35, 240.0), (2.35, 900.0)]


def reflectance(n, thickness, substrate):
    """O. S. Heavens, Optical Properties of Thin Solid Films (1955): one film, no absorption."""
    first, second = (1 - n) / (1 + n), (n - substrate) / (n + substrate)
    cosine = numpy.cos(4 * numpy.pi * n * thickness / WAVELENGTHS)
    top = first**2 + second**2 + 2 * first * second * cosine
    return top / (1 + first**2 * second**2 + 2 * first * second * cosine)


def lab(values, light, observer):
    functions = colour.MSDS_CMFS[OBSERVERS[observer]].copy()
    functions = functions[WAVELENGTHS]
    weights = numpy.interp(WAVELENGTHS, *numpy.transpose(handbook_rows(f"spectra/{light}")))
    # Half weight at both ends: the trapezoidal rule.
    ends = numpy.ones(len(WAVELENGTHS))
    ends[0] = ends[-1] = 0.5
    weighted = functions * (weights * ends)[:, None]
    white = weighted.sum(axis=0)
    seen = (weighted * values[:, None]).sum(axis=0)
    scale = white[1]
    xy = colour.XYZ_to_xy(white / scale)
    return [round(float(value), 9) for value in colour.XYZ_to_Lab(seen / scale, xy)]


def pairs():
    generator = numpy.random.default_rng(76)
    for _ in range(120):
        first = [generator.uniform(0, 100), *generator.uniform(-90, 90, 2)]
        spread = generator.choice([0.5, 5.0, 60.0])
        second = [min(100.0, max(0.0, first[0] + generator.normal() * spread / 2))]
        second += [value + generator.normal() * spread for value in first[1:]]
        yield first, second
    yield from [
        ([50.0, 0.0, 0.0], [50.0, 0.0, 0.0]),
        ([50.0, 0.0, 0.0], [52.0, 0.0, 0.0]),
        ([50.0, 0.0, 0.0], [50.0, -1.0, 2.0]),
        ([50.0, 2.5, 0.0], [50.0, 0.0, -2.5]),
        ([50.0, 2.49, -0.001], [50.0, -2.49, 0.0009]),
        ([50.0, 2.49, -0.001], [50.0, -2.49, 0.0011]),
        ([2.0776, 0.0795, -1.135], [0.9033, -0.0636, -0.5514]),
        ([90.8027, -2.0831, 1.441], [91.1528, -1.6435, 0.0447]),
    ]


def make():
    films = []
    for n, thickness in FILMS:
        values = reflectance(n, thickness, 1.5168)
        for light in ["d65", "illuminant_a"]:
            for observer in OBSERVERS:
                films.append(
                    {
                        "n": n,
                        "thickness_nm": thickness,
                        "light": light,
                        "observer": observer,
                        "lab": lab(values, light, observer),
                    }
                )
    differences = []
    for first, second in pairs():
        first, second = ([round(float(value), 6) for value in one] for one in (first, second))
        difference = float(colour.delta_E(first, second, method="CIE 2000"))
        differences.append({"pair": [first, second], "difference": round(difference, 9)})
    content = {
        "about": "CIELAB of one film on 1.5168 in air, and CIEDE2000 differences",
        "source": "CIE 015:2018, ISO/CIE 11664-4 and -6, by colour-science 0.4.7",
        "films": films,
        "differences": differences,
    }
    return {"colours.json": document(content)}
