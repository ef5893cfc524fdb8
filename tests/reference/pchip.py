"""Monotone piecewise cubics by scipy, on awkward data and on silicon's rows.

scipy's PchipInterpolator: F. N. Fritsch, J. Butland, SIAM J. Sci. Stat. Comput. 5,
300 (1984), with the three-point end slopes of C. Moler, Numerical Computing with
MATLAB (2004).
"""

import numpy
from scipy.interpolate import PchipInterpolator

from common import document, handbook_rows

TOLERANCE = 1e-12

AWKWARD = {
    "step": ([0, 1, 2, 3, 4, 5], [0, 0, 0, 1, 1, 1]),
    "zigzag": ([0, 1, 2, 3, 4, 5, 6], [0, 2, -1, 3, -2, 4, 0]),
    "uneven": ([300, 301, 350, 351, 900, 2000], [1, 4, 4.1, 0.2, 0.1, 7]),
    "two rows": ([400, 700], [1.46, 1.44]),
    "three rows": ([400, 550, 700], [2.5, 2.3, 2.25]),
    "flat": ([1, 2, 3, 4], [5, 5, 5, 5]),
    "steep end": ([0, 1, 1.5, 4], [0, 10, 10.5, 10.6]),
    "end slope of the wrong sign": ([0, 1, 3, 4], [0, 1, 10, 9.9]),
    "decades": ([1, 2, 3, 4, 5], [1e-12, 1e-9, 1e-5, 1e-1, 10]),
}


def curve(name, x, y, source):
    x = numpy.array(x, dtype=float)
    y = numpy.array(y, dtype=float)
    shares = [0.0, 0.05, 0.31, 0.5, 0.77, 0.999]
    steps = range(len(x) - 1)
    if len(x) > 20:
        steps = range(0, len(x) - 1, 3)
    queries = [float(x[i] + s * (x[i + 1] - x[i])) for i in steps for s in shares]
    queries.append(float(x[-1]))
    values = PchipInterpolator(x, y)(numpy.array(queries))
    return {
        "name": name,
        "source": source,
        "x": [float(v) for v in x],
        "y": [float(v) for v in y],
        "queries": queries,
        "values": [float(f"{v:.14g}") for v in values],
    }


def make():
    curves = [curve(name, x, y, "invented") for name, (x, y) in AWKWARD.items()]
    silicon = handbook_rows("silicon")
    green = "M. A. Green, Sol. Energy Mater. Sol. Cells 92, 1305 (2008)"
    wavelengths = [row[0] for row in silicon]
    curves.append(curve("silicon n", wavelengths, [row[1] for row in silicon], green))
    curves.append(curve("silicon k", wavelengths, [row[2] for row in silicon], green))
    return {
        "pchip.json": document(
            {
                "about": "values of scipy's PchipInterpolator at the queries",
                "source": "scipy 1.17.1; F. N. Fritsch, J. Butland, SIAM J. Sci. Stat. Comput. 5, "
                "300 (1984)",
                "curves": curves,
            }
        )
    }
