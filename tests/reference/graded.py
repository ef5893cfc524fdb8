"""Films whose permittivity runs through them, without cutting them into films.

Where the permittivity is linear in the depth, the equation for s polarisation is Airy's and the
fields are sums of Ai and Bi (G. B. Airy 1838; NIST Digital Library of Mathematical Functions,
9.2): with 40 digits.  Elsewhere the two first-order equations for the tangential fields (M. Born,
E. Wolf, Principles of Optics, 1.6) are integrated with an error of some 1e-12 a step
(J. R. Dormand, P. J. Prince's method of order 8 in scipy).
"""

import numpy as np
from mpmath import airyai, airybi, cos, exp, matrix, mp, mpc, mpf, pi, sin, sqrt
from scipy.integrate import solve_ivp

from common import document

TOLERANCE = 1e-9

mp.dps = 40


def roots(eps, alpha):
    q = sqrt(eps - alpha**2)
    return -q if q.imag < 0 else q


def powers(b, c, first, last):
    """R and T from the fields at the front, the admittances of the half-spaces."""
    denominator = first * b + c
    r = (first * b - c) / denominator
    return float(abs(r) ** 2), float(4 * first.real * last.real / abs(denominator) ** 2)


def linear_s(case):
    """s polarisation, the permittivity linear in the depth: Airy functions."""
    wave = 2 * pi / mpf(case["wavelength_nm"])
    front, back, thickness = (mpc(*case[key]) for key in ("front", "back", "thickness"))
    front, back = front**2, back**2
    alpha = mpf(case["incident"]) * sin(mpf(case["angle_rad"]))
    first = mpf(case["incident"]) * cos(mpf(case["angle_rad"]))
    last = roots(mpc(*case["exit"]) ** 2, alpha)
    slope = (back - front) / thickness
    scale = -((wave**2 * slope) ** (mpf(1) / 3))
    # B'' = -k^2 (eps(z) - alpha^2) B; with x = scale (z - z0) it is B'' = x B.
    zero = (alpha**2 - front) / slope

    def pair(z):
        x = scale * (z - zero)
        return [airyai(x), airybi(x)], [scale * airyai(x, derivative=1), scale * airybi(x, derivative=1)]

    values, slopes = pair(thickness)
    # B' = i k C.
    m = matrix([[values[0], values[1]], slopes])
    solution = m**-1 * matrix([mpc(1), mpc(0, 1) * wave * last])
    values, slopes = pair(mpf(0))
    b = values[0] * solution[0] + values[1] * solution[1]
    c = (slopes[0] * solution[0] + slopes[1] * solution[1]) / (mpc(0, 1) * wave)
    return powers(b, c, mpc(first), last)


def bruggeman(one, other, share):
    """The root with Im >= 0, Re > 0 of the quadratic equation for two parts."""
    h = (3 * share - 1) * other + (2 - 3 * share) * one
    root = np.sqrt(h * h + 8 * one * other + 0j)
    found = (h + root) / 4
    return found if found.imag >= -1e-15 and found.real > 0 else (h - root) / 4


def lorentz_lorenz(one, other, share):
    p = (1 - share) * (one - 1) / (one + 2) + share * (other - 1) / (other + 2)
    return (1 + 2 * p) / (1 - p)


RULES = {
    "volume": lambda one, other, share: (1 - share) * one + share * other,
    "bruggeman": bruggeman,
    "lorentz_lorenz": lorentz_lorenz,
}


def integrated(case):
    wave = 2 * np.pi / case["wavelength_nm"]
    front, back = (complex(*case[key]) ** 2 for key in ("front", "back"))
    alpha = case["incident"] * np.sin(case["angle_rad"])
    thickness = case["thickness"][0]
    mix = RULES[case["rule"]]
    p = case["polarised"] == "p"

    def change(z, y):
        eps = mix(front, back, z / thickness)
        u, v = (1 - alpha**2 / eps, eps) if p else (1.0, eps - alpha**2)
        return [1j * wave * u * y[1], 1j * wave * v * y[0]]

    eps = complex(*case["exit"]) ** 2
    q = complex(roots(mpc(eps), alpha))
    last = eps / q if p else q
    start = np.array([1.0, last], dtype=complex)
    run = solve_ivp(change, (thickness, 0.0), start, method="DOP853", rtol=1e-13, atol=1e-15)
    b, c = run.y[0, -1], run.y[1, -1]
    q = case["incident"] * np.cos(case["angle_rad"])
    first = case["incident"] ** 2 / q if p else q
    return powers(b, c, complex(first), last)


def cases():
    films = [
        ([2.4, 0.0], [1.46, 0.0], 120.0),
        ([1.0, 0.0], [1.52, 0.0], 900.0),
        ([3.9, 0.02], [2.0, 0.0], 260.0),
        ([1.38, 0.0], [2.6, 0.3], 75.0),
        ([1.46, 0.0], [2.35, 0.0], 2500.0),
    ]
    beams = [(550.0, 0.0, "s"), (410.0, 1.0, "s"), (633.0, 0.9, "p"), (1550.0, 1.3, "p")]
    exits = [[1.52, 0.0], [3.6, 0.1]]
    for at, (front, back, thickness) in enumerate(films):
        for wavelength, angle, polarised in beams:
            for rule in RULES:
                yield {
                    "incident": 1.0,
                    "front": front,
                    "back": back,
                    "thickness": [thickness],
                    "rule": rule,
                    "exit": exits[at % 2],
                    "wavelength_nm": wavelength,
                    "angle_rad": angle,
                    "polarised": polarised,
                }


def make():
    mp.dps = 40
    rows = []
    for case in cases():
        closed = case["rule"] == "volume" and case["polarised"] == "s"
        reflectance, transmittance = linear_s(case) if closed else integrated(case)
        if closed:
            again = integrated(case)
            assert abs(again[0] - reflectance) < 1e-10 and abs(again[1] - transmittance) < 1e-10, case
        found = {"closed": closed, "reflectance": reflectance, "transmittance": transmittance}
        rows.append({**case, "thickness": case["thickness"][0], **found})
    content = {
        "about": "R and T of one graded film: composition linear in the depth, mixed by the rule",
        "source": "Airy functions with 40 digits (DLMF 9.2) or the fields' equations integrated (scipy)",
        "films": rows,
    }
    return {"graded.json": document(content)}
