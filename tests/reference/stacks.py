"""Random stacks in 50-digit arithmetic: R, T and the absorptance of every film.

Method: optics.py (Fresnel's coefficients, Airy's sum, Stokes' adding of powers).
"""

import random

from mpmath import mp, mpc, mpf

from common import document, double
from optics import evaluate

TOLERANCE = 0.0
SEED = 20270131


def index(pair):
    return mpc(mpf(pair[0]), mpf(pair[1]))


def draw(rng, low, high, digits):
    return round(low + (high - low) * rng.random(), digits)


def pick(rng, options):
    return options[int(rng.random() * len(options))]


def film(rng, kind):
    if kind == "lossless":
        return [draw(rng, 1.3, 2.6, 4), 0.0], draw(rng, 5, 260, 2)
    if kind == "absorbing":
        return [draw(rng, 1.3, 4.5, 4), draw(rng, 0, 0.6, 5)], draw(rng, 5, 200, 2)
    if kind == "metal":
        return [draw(rng, 0.03, 1.5, 4), draw(rng, 1.5, 9, 4)], draw(rng, 2, 60, 2)
    if kind == "opaque":
        return [draw(rng, 0.05, 0.3, 4), draw(rng, 3, 8, 4)], draw(rng, 5e3, 1e6, 1)
    # A gap of low index under a dense medium: evanescent beyond the critical angle.
    return [draw(rng, 1.0, 1.1, 4), 0.0], draw(rng, 20, 900, 2)


def stopped(near, way, far, angle):
    """Whether nothing at all gets through: total reflection at a clear half-space or thick body."""
    beyond = near.real * mp.sin(mp.radians(mpf(angle)))
    clear = [n for kind, n, _ in way if kind == "body"] + [far]
    return any(n.imag == 0 and n.real < beyond for n in clear)


PALETTES = {
    "lossless": ["lossless"],
    "absorbing": ["lossless", "absorbing"],
    "metal": ["lossless", "lossless", "metal"],
    "mixed": ["lossless", "absorbing", "metal"],
    "evanescent": ["lossless", "gap"],
    "opaque": ["lossless", "opaque"],
}


def stack(rng, number):
    """One part: what stands in the light's way, and what is asked of it."""
    palette = list(PALETTES)[number % len(PALETTES)]
    bodies = pick(rng, [0, 0, 1, 1, 2, 3])
    films = 1 + int(40 * rng.random() ** 2)
    incident = 1.0 if palette != "evanescent" and rng.random() < 0.6 else draw(rng, 1, 1.52, 4)
    if palette == "evanescent":
        incident = draw(rng, 1.45, 1.52, 4)
    elements = []
    places = sorted(int(rng.random() * (films + 1)) for _ in range(bodies))
    for position in range(films + 1):
        for _ in range(places.count(position)):
            absorbs = rng.random() < 0.5
            elements.append(
                {
                    "kind": "body",
                    "index": [
                        draw(rng, 1.33, 1.9, 4),
                        float(f"{10 ** draw(rng, -8.5, -6.3, 3):.4e}") if absorbs else 0.0,
                    ],
                    "thickness_nm": draw(rng, 1e5, 6e6, 0),
                }
            )
        if position < films:
            value, thickness = film(rng, pick(rng, PALETTES[palette]))
            elements.append({"kind": "film", "index": value, "thickness_nm": thickness})
    exit_index = pick(
        rng,
        [
            [1.0, 0.0],
            [draw(rng, 1.3, 1.9, 4), 0.0],
            [draw(rng, 3, 4.5, 4), draw(rng, 0, 0.4, 4)],
            [draw(rng, 0.05, 1, 4), draw(rng, 2, 7, 4)],
        ],
    )
    return palette, incident, elements, exit_index


def make():
    mp.dps = 50
    rng = random.Random(SEED)
    parts = []
    for number in range(66):
        palette, incident, elements, exit_index = stack(rng, number)
        sides = ["incident"] + (["exit"] if exit_index[1] == 0 else [])
        cases = []
        for angle in [0.0, draw(rng, 5, 60, 2), draw(rng, 40, 85, 2)]:
            wavelength = draw(rng, 350, 1600, 3)
            for polarisation in ["s"] if angle == 0 else ["s", "p"]:
                for side in sides:
                    way = [
                        (e["kind"], index(e["index"]), mpf(e["thickness_nm"])) for e in elements
                    ]
                    near, far = mpc(mpf(incident)), index(exit_index)
                    if side == "exit":
                        way, near, far = way[::-1], far, near
                    r, t, absorbed = evaluate(
                        near, way, far, mpf(wavelength), mp.radians(mpf(angle)), polarisation
                    )
                    if side == "exit":
                        absorbed = absorbed[::-1]
                    cases.append(
                        {
                            "from": side,
                            "wavelength_nm": wavelength,
                            "angle_deg": angle,
                            "polarisation": polarisation,
                            "reflectance": double(r),
                            "transmittance": double(t),
                            "absorptance": double(1 - r - t),
                            "optical_density": None
                            if stopped(near, way, far, angle)
                            else double(-mp.log10(t)),
                            "films": [double(a) for a in absorbed],
                        }
                    )
        parts.append(
            {
                "name": f"{palette}_{number}",
                "incident": incident,
                "elements": elements,
                "exit": exit_index,
                "cases": cases,
            }
        )
    return {
        "stacks.json": document(
            {
                "about": "R, T and the absorptance of each film, in the order of the elements; "
                "angles are in the medium that the light comes from",
                "source": "M. Born, E. Wolf, Principles of Optics, 7th ed. (1999), 1.5.2 and "
                "1.6.4; P. Rouard, Ann. Phys. 11 (7), 291 (1937); G. G. Stokes, Proc. R. Soc. "
                "London 11, 545 (1862); computed with 50 digits",
                "parts": parts,
            }
        )
    }
