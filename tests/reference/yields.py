"""Yields by plain Monte Carlo: independent random draws, the stack worked out for all parts at once.

Airy's recursion from the last face to the first (M. Born, E. Wolf, Principles of Optics, 1.6); a
thick plate by the geometric sum of powers.  Distributions as JCGM 101:2008 has them (6.4.2
rectangular, 6.4.7 normal, cut at four standard deviations); draws add.  No Sobol points, no
samples of bands: every promise is made at single wavelengths.
"""

import numpy

from common import document

TOLERANCE = 1e-9

PARTS = 400_000


def normal(rng, shape):
    draws = rng.standard_normal(shape)
    while True:
        far = numpy.abs(draws) > 4
        if not far.any():
            return draws
        draws[far] = rng.standard_normal(int(far.sum()))


def flat(rng, shape):
    return rng.uniform(-1.0, 1.0, shape)


def coating(indices, thicknesses, wavelength, angle, mode):
    """R, T of films between indices[0] and indices[-1], all arrays over parts; angle in vacuum."""
    alpha = numpy.sin(angle)
    cosines = [numpy.sqrt(1 - (alpha / n) ** 2) for n in indices]
    y = [n * c if mode == "s" else n / c for n, c in zip(indices, cosines)]
    r = (y[-2] - y[-1]) / (y[-2] + y[-1]) + 0j
    for at in range(len(indices) - 2, 0, -1):
        turn = numpy.exp(4j * numpy.pi * indices[at] * cosines[at] * thicknesses[at - 1] / wavelength)
        face = (y[at - 1] - y[at]) / (y[at - 1] + y[at])
        r = (face + r * turn) / (1 + face * r * turn)
    reflectance = abs(r) ** 2
    return reflectance, 1 - reflectance


MATERIALS = """material high { source "x" index 2.35 }
material low { source "x" index 1.46 }
material crown { source "x" index 1.52 }
"""

CHAMBER = """chamber c {
    deposit high {
        rate 1 nm/s
        thickness varies sigma 1.5 % each layer
        thickness varies ± 2 % each run
        index varies ± 0.03 each run
    }
    deposit low {
        rate 1 nm/s
        thickness varies ± 1.5 nm each layer
        thickness varies sigma 1 % each part
    }
    angle varies ± 2 deg each part
}
"""


def drawn(rng, written, kinds, part):
    run, bend = flat(rng, PARTS), 0.03 * flat(rng, PARTS)
    thicknesses, indices = [], []
    for nm, kind in zip(written, kinds):
        if kind == "high":
            thicknesses.append(nm * (1 + 0.015 * normal(rng, PARTS) + 0.02 * run))
            indices.append(2.35 + bend)
        else:
            thicknesses.append(nm * (1 + 0.01 * part) + 1.5 * flat(rng, PARTS))
            indices.append(numpy.full(PARTS, 1.46))
    return thicknesses, indices


def one_side(rng):
    """Four films on a half-space, three wavelengths, and one at 40 deg in p light."""
    written, kinds = [88.0, 110.0, 35.0, 13.0], ["low", "high", "low", "high"]
    part, tilt = normal(rng, PARTS), numpy.radians(2.0) * flat(rng, PARTS)
    thicknesses, indices = drawn(rng, written, kinds, part)
    ends = [numpy.ones(PARTS), *indices, numpy.full(PARTS, 1.52)]

    def reflectance(nm, angle, mode):
        return coating(ends, thicknesses, nm, abs(angle + tilt), mode)[0]

    def both(nm, angle):
        return (reflectance(nm, angle, "s") + reflectance(nm, angle, "p")) / 2

    straight = numpy.max([both(nm, 0.0) for nm in (480, 550, 620)], axis=0)
    leaning = reflectance(550, numpy.radians(40.0), "p")
    stack = "incident air " + " ".join(f"layer {k} {nm} nm" for nm, k in zip(written, kinds)) + " substrate crown"
    promises = ["reflectance <= 0.55 % at 480, 550, 620 nm", "reflectance <= 0.4 % at 550 nm at 40 deg polarised p"]
    return stack, promises, [straight, leaning], [straight <= 0.0055, leaning <= 0.004]


def both_sides(rng):
    """A plate with two films on either side: two runs, one place in the chamber."""
    written, kinds = [90.0, 30.0], ["low", "high"]
    part = normal(rng, PARTS)
    tilt = numpy.radians(2.0) * flat(rng, PARTS)
    air, crown = numpy.ones(PARTS), numpy.full(PARTS, 1.52)
    sides = [drawn(rng, written, kinds, part), drawn(rng, written, kinds, part)]
    total = 0
    for mode in "sp":
        faces = [
            coating([air, *indices, crown], thicknesses, 560, abs(tilt), mode)[0] for thicknesses, indices in sides
        ]
        total = total + (1 - faces[0]) * (1 - faces[1]) / (1 - faces[0] * faces[1]) / 2
    layers = " ".join(f"layer {k} {nm} nm" for nm, k in zip(written, kinds))
    back = " ".join(f"layer {k} {nm} nm" for nm, k in zip(written[::-1], kinds[::-1]))
    stack = f"incident air {layers} substrate crown 2 mm {back} exit air"
    return stack, ["transmittance >= 87.5 % at 560 nm"], [total], [total >= 0.875]


def make():
    rows = []
    for number, case in enumerate([one_side, both_sides]):
        rng = numpy.random.Generator(numpy.random.PCG64(20_261_201 + number))
        stack, promises, values, met = case(rng)
        sentences = " ".join(f"require {promise}" for promise in promises)
        text = f"{MATERIALS}{CHAMBER}recipe r {{ chamber c stack {{ {stack} }} {sentences} }}\n"
        rows.append(
            {
                "coat": text,
                "parts": PARTS,
                "yield": float(numpy.mean(numpy.all(met, axis=0))),
                "met": [float(numpy.mean(one)) for one in met],
                "quantiles": [[float(q) for q in numpy.quantile(one, [0.05, 0.5, 0.95])] for one in values],
            }
        )
    content = {
        "about": "yields, and the 5, 50 and 95 % quantiles of every promised value",
        "source": "Monte Carlo with numpy's PCG64, JCGM 101:2008; Airy's recursion",
        "recipes": rows,
    }
    return {"yields.json": document(content)}
