"""The materials and stacks of `parts.py`, as figures and as the text of a recipe."""

import numpy
from scipy.interpolate import PchipInterpolator

# h c / e in eV nm, exact in the SI of 2019.
EV_NM = 6.62607015e-34 * 299792458.0 / 1.602176634e-19 * 1e9


def root(permittivity):
    found = numpy.sqrt(permittivity + 0j)
    return numpy.where(found.imag < 0, -found, found)


def constant(n, k=0.0):
    return {"coat": f"index {n} k {k:.10f}", "of": lambda w: numpy.full(len(w), complex(n, k))}


def cauchy(a, b, tail=None):
    coat = f"index cauchy {a}, {b} um^2"
    if tail is None:
        return {"coat": coat, "of": lambda w: a + b / (w / 1000) ** 2 + 0j}
    k, nm, ev = tail
    return {
        "coat": f"{coat} k urbach {k} at {nm} nm width {ev} eV",
        "of": lambda w: a + b / (w / 1000) ** 2 + 1j * k * numpy.exp((EV_NM / w - EV_NM / nm) / ev),
    }


def sellmeier(strength, um, k):
    square = lambda w: (w / 1000) ** 2
    return {
        "coat": f"index sellmeier {strength} at {um} um k {k:.10f}",
        "of": lambda w: numpy.sqrt(1 + strength * square(w) / (square(w) - um**2)) + 1j * k,
    }


def drude(background, plasma, width):
    energy = lambda w: EV_NM / w
    return {
        "coat": f"index oscillators {background} {{ drude {plasma} eV width {width} eV }}",
        "of": lambda w: root(background - plasma**2 / (energy(w) ** 2 + 1j * width * energy(w))),
    }


def lorentz(background, strength, at, width):
    energy = lambda w: EV_NM / w
    return {
        "coat": f"index oscillators {background} {{ lorentz {strength} at {at} eV width {width} eV }}",
        "of": lambda w: root(
            background + strength * at**2 / (at**2 - energy(w) ** 2 - 1j * width * energy(w))
        ),
    }


def table(rows):
    nm, n, k = (numpy.array(column, float) for column in zip(*rows))
    lines = ", ".join(f"{w} nm {a} {b}" for w, a, b in rows)
    return {
        "coat": f"index table {{ {lines} }}",
        "of": lambda w: PchipInterpolator(nm, n)(w) + 1j * PchipInterpolator(nm, k)(w),
        "rows": nm,
    }


# Invented figures of the kind that such materials have.
MATERIALS = {
    "air": {"of": lambda w: numpy.ones(len(w), complex), "rows": numpy.array([])},
    "glass": sellmeier(1.2835, 0.0968, 1.8e-7),
    "tinted": sellmeier(1.2835, 0.0968, 1.4e-6),
    "oxide": cauchy(1.4535, 0.00345),
    "nitride": cauchy(1.998, 0.0205, (0.02, 380, 0.35)),
    "high": cauchy(2.231, 0.0296, (0.002, 400, 0.25)),
    "conductor": drude(3.9, 1.6, 0.15),
    "metal": drude(4.0, 9.0, 0.05),
    "crystal": lorentz(1.8, 8.9, 3.6, 0.45),
    "film_cell": lorentz(2.4, 4.6, 2.9, 0.8),
    "wafer_rod": constant(3.42, 2.1e-5),
    "ink": constant(1.9, 0.9),
    "pane": table([
        (5000, 1.27, 0.004), (7000, 1.06, 0.031), (8500, 0.52, 0.42), (9200, 0.71, 1.32), (10000, 1.98, 1.41),
        (12000, 1.72, 0.31), (15000, 1.46, 0.36), (20000, 1.62, 0.74), (23000, 2.35, 1.17), (30000, 2.44, 0.66),
        (50000, 2.61, 0.48),
    ]),
}


def index(name, wavelength):
    return MATERIALS[name]["of"](wavelength)


NANOMETRES = {"mm": 1e6, "um": 1e3}


def layer(material, nm, name=None):
    return ("layer", material, float(nm), name)


def body(kind, material, size, unit):
    return (kind, material, size * NANOMETRES[unit], f"{size} {unit}")


MIRROR = [layer(m, nm) for _ in range(16) for m, nm in [("high", 68), ("oxide", 108)]]
# name: elements in the light's order, what lies behind, and whether that is the substrate itself.
STACKS = {
    "module": ([
        body("slab", "glass", 3.2, "mm"), layer("oxide", 25), layer("conductor", 310, "front_contact"),
        layer("nitride", 45, "buffer"), layer("film_cell", 420, "absorber"), layer("conductor", 70),
        layer("metal", 160, "mirror"), body("substrate", "glass", 2, "mm"),
    ], "air", False),
    # The mirror is behind the piece: much of the light passes the layers twice, once from each side.
    "twice": ([
        body("slab", "glass", 3, "mm"), layer("conductor", 210, "front_contact"), layer("film_cell", 55, "absorber"),
        layer("conductor", 150, "rear_contact"), body("substrate", "glass", 4, "mm"), layer("metal", 85),
    ], "air", False),
    "covered": ([
        layer("oxide", 98), body("slab", "glass", 4, "mm"), layer("nitride", 61), layer("crystal", 24, "seed"),
        layer("oxide", 9),
    ], "crystal", True),
    "bare": ([layer("oxide", 84), layer("nitride", 52), layer("crystal", 40), layer("oxide", 12)], "crystal", True),
    "low": ([
        layer("conductor", 40), layer("metal", 9), layer("conductor", 32), body("substrate", "pane", 4, "mm"),
    ], "air", False),
    "wafer": ([
        layer("conductor", 55), body("substrate", "wafer_rod", 2, "mm"), layer("pane", 900),
    ], "air", False),
    "sun": ([
        body("substrate", "tinted", 6, "mm"), layer("nitride", 38), layer("metal", 11), layer("conductor", 90),
        layer("metal", 13), layer("nitride", 34),
    ], "air", False),
    "double": ([
        body("substrate", "tinted", 6, "mm"), layer("nitride", 38), layer("metal", 12), layer("nitride", 34),
        body("slab", "air", 14, "mm"), body("slab", "glass", 4, "mm"),
    ], "air", False),
    "notch": (MIRROR + [body("substrate", "glass", 3, "mm")], "air", False),
    "block": ([
        layer("oxide", 70), layer("metal", 90), layer("oxide", 110), layer("metal", 130), layer("ink", 240),
        body("substrate", "glass", 2, "mm"), layer("oxide", 95),
    ], "air", False),
    "blind": ([layer("ink", 620), body("substrate", "tinted", 6, "mm"), layer("ink", 320), layer("metal", 60)], "air", False),
}


def text(name):
    elements, last, ends = STACKS[name]
    used = dict.fromkeys(one[1] for one in elements)
    used[last] = None
    lines = [
        f'material {one} {{ source "invented" {MATERIALS[one]["coat"]} }}' for one in used if one != "air"
    ]
    stack = ["incident air"]
    for kind, material, nm, word in elements:
        if kind == "layer":
            stack.append(f"layer {material} {nm:g} nm" + (f" as {word}" if word else ""))
        else:
            stack.append(f"{kind} {material} {word}")
    stack.append(f"substrate {last}" if ends else f"exit {last}")
    lines.append(f"recipe r {{ stack {{ {' '.join(stack)} }} require PROMISE }}")
    return "\n".join(lines) + "\n"
