"""Parts of several films and thick bodies, from the recipe's text to one number, worked out apart.

The fields of a coating are the solution of one linear system, the boundary conditions of all its
faces at once; a film's absorptance is the heat made in it, omega eps'' |E|^2 / 2 integrated over its
depth, and not a difference of powers (M. Born, E. Wolf, Principles of Optics, 1.1.4 and 1.6; from
memory).  The powers between thick bodies solve a linear system too (G. G. Stokes, 1862).

- photocurrent: q lambda / h c for each watt absorbed; ASTM G173-03 from pvlib, global, direct and AM0
- emittance: Kirchhoff's law, Planck's law; the hemisphere by Gauss and Legendre's rule in the angle
- luminous and solar: EN 410:2011, ISO 9050:2003 (from memory): D65 and V(lambda) from colour-science
- `procedures`: what the standards' own short tables give, EN 410:2011 (D65 V(lambda), 10 nm) and
  EN 12898 (30 wavelengths at 283 K).  Both tables are from memory, so the script fails unless they
  are the integrals that they stand for.
"""

import numpy

from common import document
from parts_light import CHARGE, EYE_ROWS, LAMPS, LIGHT, PLANCK, SUNS, luminous_ordinates, planck, radiant_ordinates
from parts_stacks import MATERIALS, STACKS, index, text

TOLERANCE = 1e-9


def fields(first, films, last, wavelength, alpha, polarised):
    """R, T and every film's absorptance between two media; films are (index, thickness)."""
    indices = [first, *(film[0] for film in films), last]
    q = []
    for value in indices:
        normal = numpy.sqrt(value**2 - alpha**2 + 0j)
        q.append(numpy.where(normal.imag < 0, -normal, normal))
    y = q if polarised == "s" else [normal / value**2 for normal, value in zip(q, indices)]
    k0 = 2 * numpy.pi / wavelength
    delay = [numpy.exp(1j * k0 * q[j + 1] * films[j][1]) for j in range(len(films))]
    # Unknown: r, then in each film the wave down at its top and the wave up at its bottom, then t.
    size = 2 * len(films) + 2
    system = numpy.zeros((len(wavelength), size, size), complex)
    known = numpy.zeros((len(wavelength), size), complex)
    known[:, 0], known[:, 1] = 1, y[0]
    system[:, 0, 0], system[:, 1, 0] = -1, y[0]
    for j in range(len(films)):
        down, up, above, below = 2 * j + 1, 2 * j + 2, 2 * j, 2 * j + 2
        system[:, above, down], system[:, above, up] = 1, delay[j]
        system[:, above + 1, down], system[:, above + 1, up] = y[j + 1], -y[j + 1] * delay[j]
        system[:, below, down], system[:, below, up] = -delay[j], -1
        system[:, below + 1, down], system[:, below + 1, up] = -y[j + 1] * delay[j], y[j + 1]
    system[:, size - 2, size - 1], system[:, size - 1, size - 1] = 1, y[-1]
    found = numpy.linalg.solve(system, known[:, :, None])[:, :, 0]
    heat = []
    for j, (value, thickness) in enumerate(films):
        down, up = found[:, 2 * j + 1], found[:, 2 * j + 2]
        decay = 2 * k0 * q[j + 1].imag * thickness
        mean = numpy.where(decay > 0, -numpy.expm1(-decay) / numpy.where(decay > 0, decay, 1), 1.0)
        own = (abs(down) ** 2 + abs(up) ** 2) * mean * thickness
        beat = numpy.sinc(k0 * q[j + 1].real * thickness / numpy.pi)
        mixed = 2 * (down * up.conj()).real * numpy.exp(-decay / 2) * beat * thickness
        permittivity = value**2 + 0j
        if polarised == "s":
            square = own + mixed
        else:
            along, across = abs(q[j + 1] / permittivity) ** 2, abs(alpha / permittivity) ** 2
            square = along * (own - mixed) + across * (own + mixed)
        heat.append(k0 * permittivity.imag * square / y[0].real)
    return abs(found[:, 0]) ** 2, y[-1].real / y[0].real * abs(found[:, -1]) ** 2, heat


def one_light(elements, last, wavelength, angle, polarised):
    """R, T and each film's absorptance, light in air from the first element's side."""
    alpha = numpy.sin(angle)
    media, groups, bodies = [numpy.ones(len(wavelength), complex)], [[]], []
    for kind, material, thickness, _ in elements:
        value = index(material, wavelength)
        if kind == "layer":
            groups[-1].append((value, thickness))
        else:
            bodies.append(thickness)
            media.append(value)
            groups.append([])
    media.append(index(last, wavelength))
    ahead = [fields(a, g, b, wavelength, alpha, polarised) for a, g, b in zip(media, groups, media[1:])]
    behind = [
        fields(b, g[::-1], a, wavelength, alpha, polarised) for a, g, b in zip(media, groups, media[1:])
    ]
    passed = []
    for value, thickness in zip(media[1:], bodies):
        normal = numpy.sqrt(value**2 - alpha**2).imag
        passed.append(numpy.exp(-4 * numpy.pi * normal * thickness / wavelength))
    # Unknown in each body: the power down at its top, the power up at its bottom.
    size = 2 * len(bodies)
    down = [numpy.ones(len(wavelength))]
    up = []
    if bodies:
        system = numpy.zeros((len(wavelength), size, size))
        known = numpy.zeros((len(wavelength), size))
        known[:, 0] = ahead[0][1]
        for j in range(len(bodies)):
            system[:, 2 * j, 2 * j] = system[:, 2 * j + 1, 2 * j + 1] = 1
            system[:, 2 * j, 2 * j + 1] = -behind[j][0] * passed[j]
            system[:, 2 * j + 1, 2 * j] = -ahead[j + 1][0] * passed[j]
            if j > 0:
                system[:, 2 * j, 2 * j - 2] = -ahead[j][1] * passed[j - 1]
            if j + 1 < len(bodies):
                system[:, 2 * j + 1, 2 * j + 3] = -behind[j + 1][1] * passed[j + 1]
        found = numpy.linalg.solve(system, known[:, :, None])[:, :, 0]
        down += [found[:, 2 * j] * passed[j] for j in range(len(bodies))]
        up = [found[:, 2 * j + 1] * passed[j] for j in range(len(bodies))]
    up.append(numpy.zeros(len(wavelength)))
    absorbed = []
    for j in range(len(groups)):
        pairs = zip(ahead[j][2], behind[j][2][::-1])
        absorbed += [down[j] * front + up[j] * back for front, back in pairs]
    return ahead[0][0] + behind[0][1] * up[0], down[-1] * ahead[-1][1], absorbed


class Part:
    """A stack by its name; `turned` lights it from the exit."""

    def __init__(self, name, turned=False):
        self.elements, self.last, self.ends = STACKS[name]
        self.coat = text(name)
        if turned:
            self.elements = self.elements[::-1]

    def shares(self, wavelength, degrees=0.0, polarised="mean"):
        modes = "sp" if polarised == "mean" else polarised
        found = [one_light(self.elements, self.last, wavelength, numpy.radians(degrees), m) for m in modes]
        mean = lambda at: sum(one[at] for one in found) / len(found)
        films = [sum(one[2][j] for one in found) / len(found) for j in range(len(found[0][2]))]
        return mean(0), mean(1), films

    def inside(self, name, wavelength, **light):
        """The absorptance in what bears the name: a film, or all films and the half-space of a material."""
        _, through, films = self.shares(wavelength, **light)
        layers = [one for one in self.elements if one[0] == "layer"]
        marked = [heat for one, heat in zip(layers, films) if one[3] == name]
        if marked:
            return sum(marked)
        total = sum(heat for one, heat in zip(layers, films) if one[1] == name)
        return total + through if self.ends and self.last == name else total


def spans(rows, low, high):
    """Places and shares of Gauss and Legendre's rule with six nodes between all rows."""
    nodes, weights = numpy.polynomial.legendre.leggauss(6)
    ends = numpy.array([low, *(w for w in rows if low < w < high), high])
    middle, half = (ends[1:] + ends[:-1]) / 2, (ends[1:] - ends[:-1]) / 2
    return (middle[:, None] + half[:, None] * nodes).ravel(), (half[:, None] * weights).ravel()


def integral(value, rows, weight, bands):
    pieces = [spans(rows, *band) for band in bands]
    places = numpy.concatenate([piece[0] for piece in pieces])
    shares = numpy.concatenate([piece[1] for piece in pieces]) * weight(places)
    return float(numpy.sum(shares * value(places))), float(numpy.sum(shares))


def mean(value, rows, weight, *bands):
    top, bottom = integral(value, rows, weight, bands)
    return top / bottom


def photocurrents():
    whole, split = [(350.0, 1100.0)], [(380.0, 500.0), (620.0, 900.0)]
    for stack, name, sun, bands, degrees, polarised in [
        ("module", "absorber", "am15g", whole, 0, "mean"),
        ("module", "front_contact", "am15g", whole, 0, "mean"),
        ("module", "conductor", "am15g", whole, 0, "mean"),
        ("module", "buffer", "am15d", split, 0, "mean"),
        ("module", "absorber", "am15g", whole, 50, "p"),
        ("module", "mirror", "am0", whole, 50, "s"),
        ("twice", "absorber", "am15g", whole, 0, "mean"),
        ("twice", "front_contact", "am15g", whole, 40, "s"),
        ("twice", "rear_contact", "am15d", whole, 40, "p"),
        ("covered", "crystal", "am15g", whole, 0, "mean"),
        ("covered", "crystal", "am0", split, 35, "mean"),
        ("covered", "seed", "am15g", whole, 0, "mean"),
        ("bare", "crystal", "am15d", whole, 60, "p"),
    ]:
        part = Part(stack)
        rows, power = SUNS[sun]
        value = lambda w: part.inside(name, w, degrees=degrees, polarised=polarised)
        got, every = integral(value, rows, lambda w: power(w) * w, bands)
        scale = 1e-9 * CHARGE / (PLANCK * LIGHT) / 10
        over = " and ".join(f"{low:.0f} .. {high:.0f} nm" for low, high in bands)
        clauses = f"over {over} under {sun}" + (f" at {degrees} deg" if degrees else "")
        clauses += "" if polarised == "mean" else f" polarised {polarised}"
        yield part.coat, f"photocurrent in {name} >= 0.001 mA/cm2 {clauses}", got * scale
        yield part.coat, f"photocurrent_loss in {name} <= 60 mA/cm2 {clauses}", (every - got) * scale


def infrared(part, kelvin, low, high, **light):
    # The glass turns fast below 12 um, where its n passes through that of air; the steps are settled to 1e-12.
    steps = [*numpy.arange(low, 13e3, 50.0), *numpy.arange(13e3, high, 500.0)]
    rows = numpy.union1d(steps, MATERIALS["pane"]["rows"])
    taken = lambda w: 1 - sum(part.shares(w, **light)[:2])
    return mean(taken, rows, planck(kelvin), (low, high))


def emittances():
    bend = numpy.radians([0, 40, 65, 78, 85, 88, 89.3, 89.9, 90])
    nodes, weights = numpy.polynomial.legendre.leggauss(10)
    for stack, turned, kelvin in [
        ("low", False, 283), ("low", True, 283), ("wafer", False, 350), ("wafer", True, 900)
    ]:
        part = Part(stack, turned)
        end = " from exit" if turned else ""
        clauses = f"over 5 .. 50 um at {kelvin} K{end}"
        yield part.coat, f"emittance <= 99 % {clauses}", infrared(part, kelvin, 5e3, 50e3)
        slanted = infrared(part, kelvin, 5e3, 50e3, degrees=70.0, polarised="p")
        yield part.coat, f"emittance <= 99 % {clauses} at 70 deg polarised p", slanted
        total = 0.0
        for left, right in zip(bend, bend[1:]):
            for node, weight in zip(nodes, weights):
                angle = (left + right) / 2 + (right - left) / 2 * node
                share = weight * (right - left) / 2 * numpy.sin(2 * angle)
                total += share * infrared(part, kelvin, 5e3, 50e3, degrees=numpy.degrees(angle))
        yield part.coat, f"emittance <= 99 % {clauses} hemispherical", float(total)


def panes():
    at = {
        "reflectance": lambda s: s[0],
        "transmittance": lambda s: s[1],
        "absorptance": lambda s: 1 - s[0] - s[1],
    }
    for stack, turned, degrees in [("sun", False, 0), ("sun", True, 0), ("sun", False, 55), ("double", False, 0)]:
        part = Part(stack, turned)
        clauses = (f" at {degrees} deg" if degrees else "") + (" from exit" if turned else "")
        for word, pick in at.items():
            value = lambda w: pick(part.shares(w, degrees=degrees))
            rows, power = SUNS["am15g"]
            yield part.coat, f"solar {word} <= 99 %{clauses}", mean(value, rows, power, (300.0, 2500.0))
            if word == "absorptance":
                continue
            for lamp in ["d65", "illuminant_a"]:
                seen = mean(value, EYE_ROWS, LAMPS[lamp], (380.0, 780.0))
                yield part.coat, f"luminous {word} <= 99 % under {lamp}{clauses}", seen


def densities():
    for stack, degrees, polarised, wavelength in [
        ("notch", 0, "mean", 633.0), ("notch", 45, "s", 580.0), ("notch", 45, "p", 580.0),
        ("block", 0, "mean", 550.0), ("block", 60, "mean", 550.0), ("block", 0, "mean", 900.0),
        ("blind", 0, "mean", 532.0), ("blind", 30, "p", 700.0),
    ]:
        part = Part(stack)
        through = part.shares(numpy.array([wavelength]), degrees=degrees, polarised=polarised)[1][0]
        clauses = f"at {wavelength:.0f} nm" + (f" at {degrees} deg" if degrees else "")
        clauses += "" if polarised == "mean" else f" polarised {polarised}"
        yield part.coat, f"optical_density >= 0.01 {clauses}", float(-numpy.log10(through))


def procedures():
    """The standards' short sums beside which a full integral must lie."""
    places, weights = luminous_ordinates()
    for stack in ["sun", "double"]:
        part = Part(stack)
        shares = part.shares(places)
        for word, values in zip(["reflectance", "transmittance"], shares):
            yield part.coat, f"luminous {word} <= 99 %", float(numpy.sum(weights * values) / numpy.sum(weights))
    places = radiant_ordinates()
    for stack, turned in [("low", False), ("low", True)]:
        part = Part(stack, turned)
        shares = part.shares(places)
        end = " from exit" if turned else ""
        yield part.coat, f"emittance <= 99 % over 5 .. 50 um at 283 K{end}", float(numpy.mean(1 - shares[0] - shares[1]))


def rows(parts):
    return [
        {"coat": coat.replace("PROMISE", promise), "promise": promise, "value": value}
        for part in parts
        for coat, promise, value in part()
    ]


def make():
    content = {
        "about": "recipes of several films and bodies with one requirement each, and its value",
        "source": "linear systems of fields and of powers; ASTM G173-03 (pvlib), CIE (colour-science), Planck's law",
        "promises": rows([photocurrents, emittances, panes, densities]),
        "procedures": rows([procedures]),
    }
    return {"parts.json": document(content)}
