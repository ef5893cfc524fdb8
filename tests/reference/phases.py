"""Phases and their derivatives in the frequency, by numerical differentiation with 50 digits.

The amplitudes are summed by the recursive formula of Airy, from the exit to the light, in
the tangential electric field; no matrix is formed.  Fields go as exp(-i w t), w in rad/fs.
Source: G. B. Airy, Phil. Mag. 2, 20 (1833); M. Born, E. Wolf, Principles of Optics, 1.6.
"""

from mpmath import arg, diff, exp, log, mp, mpc, mpf, pi, sin, sqrt

from common import document, double

TOLERANCE = 0

# Set here and not in make() alone: a constant has the digits of the moment at which it is read.
mp.dps = 50

LIGHT = mpf("299.792458")  # nm/fs


def constant(n, k="0"):
    return {"constant": [n, k]}


MATERIALS = {
    "air": constant("1"),
    "glass": {"sellmeier": [["0.6961663", "0.0684043"], ["0.4079426", "0.1162414"], ["0.8974794", "9.896161"]]},
    "high": {"cauchy": ["2.2230", "0.02660", "0.00210"]},
    "lossy": constant("2.3", "0.01"),
    "metal": {"drude": ["3.7", "9.0", "0.02"]},
    "mirror": constant("0.06", "3.6"),
}


def index(name, omega):
    model = MATERIALS[name]
    micrometres = 2 * pi * LIGHT / omega / 1000
    if "constant" in model:
        n, k = model["constant"]
        return mpc(mpf(n), mpf(k))
    if "sellmeier" in model:
        square = micrometres**2
        terms = ((mpf(b), mpf(c)) for b, c in model["sellmeier"])
        return sqrt(1 + sum(b * square / (square - c**2) for b, c in terms))
    if "cauchy" in model:
        return sum(mpf(c) / micrometres ** (2 * power) for power, c in enumerate(model["cauchy"]))
    background, plasma, width = (mpf(value) for value in model["drude"])
    planck = mpf("6.62607015e-34") * mpf(299792458) / mpf("1.602176634e-19") * 10**6
    energy = planck / micrometres
    return sqrt(background - plasma**2 / (energy**2 + mpc(0, 1) * width * energy))


def amplitudes(stack, omega):
    """r and t of the tangential electric field."""
    names = [stack["incident"], *(film[0] for film in stack["films"]), stack["exit"]]
    indices = [index(name, omega) for name in names]
    alpha = indices[0] * sin(mpf(stack["angle_rad"]))
    normals = []
    for value in indices:
        normal = sqrt(value**2 - alpha**2)
        normals.append(-normal if normal.imag < 0 else normal)
    p = stack["polarised"] == "p"
    admittances = [n**2 / q if p else q for n, q in zip(indices, normals)]
    r, t = mpc(0), mpc(1)
    for at in range(len(names) - 2, -1, -1):
        front, back = admittances[at], admittances[at + 1]
        face = (front - back) / (front + back)
        through = 1 + face
        if at + 1 == len(names) - 1:
            r, t = face, through
            continue
        delay = exp(mpc(0, 1) * normals[at + 1] * mpf(stack["films"][at][1]) * omega / LIGHT)
        below = 1 + face * r * delay**2
        r, t = (face + r * delay**2) / below, through * t * delay / below
    return r, t


def derivative(stack, which, order, omega):
    """Of the phase: the imaginary part of the logarithm, whose branch does not matter to it."""
    if order == 0:
        return arg(amplitudes(stack, omega)[which])
    base = amplitudes(stack, omega)[which]
    return diff(lambda w: log(amplitudes(stack, w)[which] / base), omega, order).imag


def stacks():
    quarter = ["118.3", "183.5"]
    mirror = [["high", quarter[0]], ["glass", quarter[1]]] * 8 + [["high", quarter[0]]]
    cavity = mirror[:7] + [["high", "236.6"]] + mirror[6::-1]
    mixed = [["glass", "140"], ["lossy", "62"], ["high", "210"], ["metal", "9"], ["glass", "75"]]
    for films, leaving in [(mirror, "glass"), (cavity, "glass"), (mixed, "glass"), (mixed, "mirror")]:
        for angle, polarised in [("0", "s"), ("0.6", "s"), ("0.6", "p"), ("1.2", "p")]:
            for wavelength in ["640.5", "1061.25"]:
                yield {
                    "incident": "air",
                    "films": films,
                    "exit": leaving,
                    "angle_rad": angle,
                    "polarised": polarised,
                    "wavelength_nm": wavelength,
                }


def make():
    mp.dps = 50
    rows = []
    for stack in stacks():
        omega = 2 * pi * LIGHT / mpf(stack["wavelength_nm"])
        row = dict(stack)
        for which, name in enumerate(["reflected", "transmitted"]):
            row[name] = [double(derivative(stack, which, order, omega)) for order in range(3)]
        rows.append(row)
    content = {
        "about": "phase (rad), group delay (fs) and group-delay dispersion (fs^2) of tangential fields",
        "source": "recursive Airy sums, differentiated numerically with 50 digits (mpmath)",
        "materials": [{"name": name, "model": model} for name, model in MATERIALS.items()],
        "stacks": rows,
    }
    return {"phases.json": document(content)}
