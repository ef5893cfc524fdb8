"""Mixtures of two materials, in 40-digit arithmetic.

Bruggeman's root is not chosen by a rule about signs here but followed: it starts
at the pure second material and is carried by Newton's method in small steps of
the share, so that it stays on the branch that joins the two pure materials.
"""

import random

from mpmath import mp, mpc, mpf

from common import document, double

TOLERANCE = 0.0


def bruggeman(a, b, share):
    """D. A. G. Bruggeman, Ann. Phys. 416, 636 (1935): spheres, followed from share 0."""
    steps = 400
    value = b
    for i in range(1, steps + 1):
        f = share * i / steps
        for _ in range(60):
            g = f * (a - value) / (a + 2 * value) + (1 - f) * (b - value) / (b + 2 * value)
            slope = -3 * (f * a / (a + 2 * value) ** 2 + (1 - f) * b / (b + 2 * value) ** 2)
            step = g / slope
            value -= step
            if abs(step) < abs(value) * mpf(10) ** (-30 if i == steps else -12):
                break
        else:
            raise ArithmeticError("the root was lost")
    return value


def maxwell_garnett(host, inclusion, share):
    """J. C. Maxwell Garnett, Phil. Trans. R. Soc. A 203, 385 (1904): the equation as printed."""
    x = share * (inclusion - host) / (inclusion + 2 * host)
    return host * (1 + 2 * x) / (1 - x)


def lorentz_lorenz(a, b, share):
    """H. A. Lorentz, L. Lorenz (1880); M. Born, E. Wolf, 7th ed., 2.3.3."""
    x = share * (a - 1) / (a + 2) + (1 - share) * (b - 1) / (b + 2)
    return (1 + 2 * x) / (1 - x)


def index(epsilon):
    root = mp.sqrt(epsilon)
    return root if root.imag >= 0 and (root.imag > 0 or root.real > 0) else -root


def pair(value):
    return [double(value.real), double(abs(value.imag) if value.imag == 0 else value.imag)]


def make():
    mp.dps = 40
    rng = random.Random(1935)

    def draw(low, high):
        return round(low + (high - low) * rng.random(), 4)

    kinds = {
        "dielectric": lambda: [draw(1.3, 2.6), 0.0],
        "void": lambda: [1.0, 0.0],
        "absorber": lambda: [draw(1.5, 4.5), draw(0.001, 1.5)],
        "metal": lambda: [draw(0.05, 1.5), draw(1.5, 7)],
    }
    combinations = [
        ("dielectric", "dielectric"),
        ("dielectric", "void"),
        ("absorber", "dielectric"),
        ("absorber", "void"),
        ("metal", "dielectric"),
        ("metal", "absorber"),
    ]
    # The first two are the textbook mixtures that a reader can work by hand.
    cases = [([2.35, 0.0], [1.46, 0.0], 0.3), ([1.46, 0.0], [1.0, 0.0], 0.85)]
    for number in range(40):
        first, second = combinations[number % len(combinations)]
        cases.append((kinds[first](), kinds[second](), round(0.02 + 0.96 * rng.random(), 3)))
    rows = []
    for first, second, share in cases:
        a, b = mpc(*map(mpf, first)) ** 2, mpc(*map(mpf, second)) ** 2
        f = mpf(share)
        rows.append(
            {
                "first": first,
                "second": second,
                "share_of_first": share,
                "bruggeman": pair(index(bruggeman(a, b, f))),
                "maxwell_garnett_first_is_host": pair(index(maxwell_garnett(a, b, 1 - f))),
                "lorentz_lorenz": pair(index(lorentz_lorenz(a, b, f))),
                "volume": pair(index(f * a + (1 - f) * b)),
            }
        )
    return {
        "mixtures.json": document(
            {
                "about": "n and k of mixtures of two materials by volume",
                "source": "Bruggeman, Ann. Phys. 416, 636 (1935); Maxwell Garnett, Phil. Trans. "
                "R. Soc. A 203, 385 (1904); M. Born, E. Wolf, Principles of Optics, 7th ed. "
                "(1999), 2.3.3; computed with 40 digits",
                "mixtures": rows,
            }
        )
    }
