"""Tauc-Lorentz oscillators with the real part by a numerical Kramers-Kronig integral.

G. E. Jellison, F. A. Modine, Appl. Phys. Lett. 69, 371 (1996), erratum 69, 2137
(1996).  The article's closed real part is not used: the principal value is taken
by subtracting the pole, and the rest is integrated with 30 digits.
"""

from mpmath import inf, mp, mpc, mpf

from common import document

TOLERANCE = 0.0

# Strength, position, width, gap in eV, and the constant added to the real part.
OSCILLATORS = [
    ("122", "3.45", "2.54", "1.2", "1.15"),
    ("92", "9.1", "4", "2.4", "1"),
    ("250", "4.2", "1.8", "3.1", "1.6"),
    ("60", "3.6", "0.35", "1.5", "2"),
    ("40", "2.2", "4.1", "1.0", "1"),
    ("150", "12", "6.5", "5.2", "1"),
]
ENERGIES = ["0.3", "0.8", "1.1", "1.55", "2.0", "2.5", "3.0", "3.5", "4.3", "5.0", "6.2"]


def imaginary(energy, a, e0, c, gap):
    if energy <= gap:
        return mpf(0)
    return a * e0 * c * (energy - gap) ** 2 / (
        ((energy**2 - e0**2) ** 2 + c**2 * energy**2) * energy
    )


def epsilon(energy, a, e0, c, gap, infinity):
    own = energy * imaginary(energy, a, e0, c, gap)

    def integrand(x):
        return (x * imaginary(x, a, e0, c, gap) - own) / (x**2 - energy**2)

    breaks = {gap, e0, e0 - c, e0 + c, 2 * e0 + 2 * c, 10 * (e0 + c), 100 * (e0 + c)}
    breaks |= {energy} if energy > gap else set()
    points = sorted(p for p in breaks if p >= gap) + [inf]
    regular = mp.quad(integrand, points)
    # The pole itself: P int_gap^inf dx/(x^2 - E^2) = -ln|(gap - E)/(gap + E)| / (2 E).
    pole = -own * mp.log(abs((gap - energy) / (gap + energy))) / (2 * energy)
    return mpc(
        infinity + 2 / mp.pi * (regular + pole), imaginary(energy, a, e0, c, gap)
    )


def make():
    mp.dps = 45
    rows = []
    for parameters in OSCILLATORS:
        a, e0, c, gap, infinity = map(mpf, parameters)
        for text in ENERGIES:
            if mpf(text) == gap:
                continue
            value = epsilon(mpf(text), a, e0, c, gap, infinity)
            n = mp.sqrt(value)
            rows.append(
                {
                    "strength_ev": float(a),
                    "position_ev": float(e0),
                    "width_ev": float(c),
                    "gap_ev": float(gap),
                    "infinity": float(infinity),
                    "energy_ev": float(text),
                    # 15 digits: the integral is good to about 20.
                    "epsilon": [float(mp.nstr(value.real, 15)), float(mp.nstr(value.imag, 15))],
                    "index": [float(mp.nstr(n.real, 15)), float(mp.nstr(n.imag, 15))],
                }
            )
    return {
        "tauc_lorentz.json": document(
            {
                "about": "permittivity and index of single Tauc-Lorentz oscillators, the real "
                "part by a numerical Kramers-Kronig principal value",
                "source": "G. E. Jellison, F. A. Modine, Appl. Phys. Lett. 69, 371 and 2137 (1996)",
                "points": rows,
            }
        )
    }
