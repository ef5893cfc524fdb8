"""Textbook formulas for particular stacks, in 40-digit arithmetic.

Each entry is a stack and what its own closed formula says of it; no general
method is used.  Sources are named beside each; section numbers are from memory.
"""

from mpmath import mp, mpc, mpf

from common import document, double, handbook_rows

TOLERANCE = 0.0

BORN_WOLF = "M. Born, E. Wolf, Principles of Optics, 7th ed. (1999), "
HEAVENS = "O. S. Heavens, Optical Properties of Thin Solid Films, Butterworths (1955)"
STOKES = "G. G. Stokes, Proc. R. Soc. London 11, 545 (1862)"


def m(value):
    return mpf(str(value))


class Entries:
    """Collects stacks with what is expected of them."""

    def __init__(self):
        self.rows = []

    def add(self, name, source, elements, exit_index, r=None, t=None, *, incident="1",
            wavelength="550", angle="0", polarisation="mean", tolerance=1e-12):
        self.rows.append(
            {
                "name": name,
                "source": source,
                "incident": float(incident),
                "elements": [
                    {"kind": kind, "index": [double(m(n)), double(m(k))],
                     "thickness_nm": double(m(d))}
                    for kind, n, k, d in elements
                ],
                "exit": [double(m(exit_index[0])), double(m(exit_index[1]))],
                "wavelength_nm": double(m(wavelength)),
                "angle_deg": double(m(angle)),
                "polarisation": polarisation,
                "reflectance": None if r is None else double(r),
                "transmittance": None if t is None else double(t),
                "tolerance": tolerance,
            }
        )


def bare(index):
    return abs((1 - index) / (1 + index)) ** 2


def surfaces(entries):
    n = m("1.5168")
    entries.add("bare surface", BORN_WOLF + "1.5.3", [], ("1.5168", 0), bare(n),
                4 * n / (n + 1) ** 2)
    n = m("1.5")
    for angle in ("45", "60"):
        a = mp.radians(m(angle))
        b = mp.asin(mp.sin(a) / n)
        rs = (mp.sin(a - b) / mp.sin(a + b)) ** 2
        rp = (mp.tan(a - b) / mp.tan(a + b)) ** 2
        for kind, value in (("s", rs), ("p", rp), ("mean", (rs + rp) / 2)):
            entries.add(f"Fresnel, {kind}", BORN_WOLF + "1.5.2", [], ("1.5", 0), value,
                        1 - value, angle=angle, polarisation=kind)
    n = m("1.5168")
    brewster = mp.degrees(mp.atan(n))
    entries.add("Brewster's angle, p", BORN_WOLF + "1.5.3", [], ("1.5168", 0), mpf(0), mpf(1),
                angle=brewster, polarisation="p")
    entries.add("Brewster's angle, s", BORN_WOLF + "1.5.3", [], ("1.5168", 0),
                ((n**2 - 1) / (n**2 + 1)) ** 2, angle=brewster, polarisation="s")
    for kind in "sp":
        entries.add("total reflection", BORN_WOLF + "1.5.4", [], ("1", 0), mpf(1), mpf(0),
                    incident="1.5168", angle="45", polarisation=kind)
    for name, wavelength, nk, source in (
        ("silver", "548.6", ("0.06", "3.586"), "P. B. Johnson, R. W. Christy, Phys. Rev. B 6, 4370 (1972)"),
        ("aluminium", "563.57", ("1.0728", "6.7839"), "A. D. Rakic, Appl. Opt. 34, 4755 (1995)"),
        ("silicon", "600", ("3.94", "0.019934"), "M. A. Green, Sol. Energy Mater. Sol. Cells 92, 1305 (2008)"),
    ):
        index = mpc(m(nk[0]), m(nk[1]))
        entries.add(f"bare {name}", BORN_WOLF + "14.2; " + source, [], nk, bare(index),
                    wavelength=wavelength)
        # At 45 degrees R_p is the square of R_s for every medium.
        c = mp.sqrt(mpf(1) / 2)
        inside = mp.sqrt(index**2 - mpf(1) / 2)
        rs = abs((c - inside) / (c + inside)) ** 2
        for kind, value in (("s", rs), ("p", rs**2)):
            entries.add(f"{name} at 45 deg, {kind}", BORN_WOLF + "14.2; " + source, [], nk, value,
                        wavelength=wavelength, angle="45", polarisation=kind)


def plates(entries):
    n = m("1.5168")
    r = bare(n)
    plate = ("body", "1.5168", 0, "3e6")
    entries.add("clear plate", STOKES, [plate], (1, 0), 2 * r / (1 + r), 2 * n / (n**2 + 1))
    for count in (2, 3, 5):
        pile = [plate]
        for _ in range(count - 1):
            pile += [("body", "1", 0, "1e6"), plate]
        t = (1 - r) / (1 + (2 * count - 1) * r)
        entries.add(f"pile of {count} plates", STOKES, pile, (1, 0), 1 - t, t)
    row = next(x for x in handbook_rows("silicon") if x[0] == 1100)
    index = mpc(m(row[1]), m(row[2]))
    # The formula takes 1 - R for what crosses a face, which k of 3e-5 makes true to 1e-10.
    r = bare(index)
    e = mp.exp(-4 * mp.pi * index.imag * 180000 / 1100)
    t = (1 - r) ** 2 * e / (1 - r**2 * e**2)
    entries.add("wafer near its band edge", "J. I. Pankove, Optical Processes in Semiconductors, "
                "Prentice-Hall (1971), chapter 4", [("body", row[1], row[2], "180000")], (1, 0),
                r * (1 + e * t), t, wavelength="1100", tolerance=1e-9)


def one_film(entries):
    for ns in ("1.5168", "1.52"):
        n1, n = m("1.38"), m(ns)
        entries.add("quarter-wave film of 1.38", BORN_WOLF + "1.6.4",
                    [("film", "1.38", 0, 550 / (4 * n1))], (ns, 0),
                    ((n - n1**2) / (n + n1**2)) ** 2)
    n1, n = m("2.35"), m("1.5168")
    entries.add("quarter-wave film of 2.35", BORN_WOLF + "1.6.4",
                [("film", "2.35", 0, 550 / (4 * n1))], ("1.5168", 0),
                ((n - n1**2) / (n + n1**2)) ** 2)
    entries.add("half-wave film is absent", BORN_WOLF + "1.6.4",
                [("film", "2.35", 0, 550 / (2 * n1))], ("1.5168", 0), bare(n))
    ideal = mp.sqrt(m("3.5"))
    entries.add("ideal film on 3.5", BORN_WOLF + "1.6.4", [("film", ideal, 0, 550 / (4 * ideal))],
                ("3.5", 0), mpf(0), mpf(1))
    # Off its wavelength and angle: Airy's formula with real Fresnel coefficients.
    n1, n = m("1.38"), m("1.5168")
    d = 550 / (4 * n1)
    for wavelength, angle, kinds in (("400", "0", "s"), ("700", "0", "s"), ("550", "45", "sp")):
        a = mp.radians(m(angle))
        c0 = mp.cos(a)
        c1 = mp.sqrt(1 - (mp.sin(a) / n1) ** 2)
        c2 = mp.sqrt(1 - (mp.sin(a) / n) ** 2)
        for kind in kinds:
            if kind == "s":
                r1 = (c0 - n1 * c1) / (c0 + n1 * c1)
                r2 = (n1 * c1 - n * c2) / (n1 * c1 + n * c2)
            else:
                r1 = (n1 * c0 - c1) / (n1 * c0 + c1)
                r2 = (n * c1 - n1 * c2) / (n * c1 + n1 * c2)
            phase = mp.cos(4 * mp.pi * n1 * c1 * d / m(wavelength))
            top = r1**2 + r2**2 + 2 * r1 * r2 * phase
            value = top / (1 + (r1 * r2) ** 2 + 2 * r1 * r2 * phase)
            entries.add("quarter-wave film off its place", BORN_WOLF + "1.6.4",
                        [("film", "1.38", 0, d)], ("1.5168", 0), value, 1 - value,
                        wavelength=wavelength, angle=angle, polarisation=kind)
    for name, nk, d, wavelength in (
        ("weakly absorbing film", ("2.3", "0.01"), "100", "500"),
        ("10 nm of metal", ("0.06", "3.6"), "10", "550"),
        ("20 nm of metal", ("0.06", "3.6"), "20", "550"),
        ("50 nm of metal", ("0.06", "3.6"), "50", "550"),
    ):
        n1, n = mpc(m(nk[0]), m(nk[1])), m("1.5168")
        r1, r2 = (1 - n1) / (1 + n1), (n1 - n) / (n1 + n)
        t1, t2 = 2 / (1 + n1), 2 * n1 / (n1 + n)
        e = mp.exp(2j * mp.pi * n1 * m(d) / m(wavelength))
        r = abs((r1 + r2 * e**2) / (1 + r1 * r2 * e**2)) ** 2
        t = n * abs(t1 * t2 * e / (1 + r1 * r2 * e**2)) ** 2
        entries.add(name, BORN_WOLF + "14.4", [("film", *nk, d)], ("1.5168", 0), r, t,
                    wavelength=wavelength)
    # The envelope of fringes on a plate, both ends of it.
    n, s = m("2.3"), m("1.5168")
    plate = ("body", "1.5168", 0, "2e6")
    swanepoel = "R. Swanepoel, J. Phys. E 16, 1214 (1983)"
    entries.add("fringe maximum on a plate", swanepoel, [("film", "2.3", 0, 550 / (2 * n)), plate],
                (1, 0), None, 2 * s / (s**2 + 1))
    entries.add("fringe minimum on a plate", swanepoel, [("film", "2.3", 0, 550 / (4 * n)), plate],
                (1, 0), None, 4 * n**2 * s / (n**4 + n**2 * (s**2 + 1) + s**2))


def quarters(entries):
    n1, n2, n = m("1.38"), m("1.7"), m("1.52")
    entries.add("two quarter-waves", HEAVENS,
                [("film", n1, 0, 550 / (4 * n1)), ("film", n2, 0, 550 / (4 * n2))], (n, 0),
                ((n2**2 - n * n1**2) / (n2**2 + n * n1**2)) ** 2)
    n1, n2, n3, n = m("1.38"), m("2"), m("1.7"), m("1.5168")
    y = n1**2 * n3**2 / (n2**2 * n)
    entries.add("three quarter-waves", HEAVENS,
                [("film", i, 0, 550 / (4 * i)) for i in (n1, n2, n3)], (n, 0),
                ((1 - y) / (1 + y)) ** 2)
    # Both thicknesses of a coat of two given films: no reflection at all.
    n1, n2, n = m("1.38"), m("2.3"), m("1.5168")
    bottom = n1**2 * n - n2**2
    d1 = mp.atan(mp.sqrt((n - 1) * (n2**2 - n) * n1**2 / (bottom * (n - n1**2))))
    d2 = mp.atan(mp.sqrt((n - 1) * (n - n1**2) * n2**2 / (bottom * (n2**2 - n))))
    for one, two in ((d1, mp.pi - d2), (mp.pi - d1, d2)):
        entries.add("coat of two given films", "J. F. Catalan, J. Opt. Soc. Am. 52, 437 (1962)",
                    [("film", n1, 0, one * 550 / (2 * mp.pi * n1)),
                     ("film", n2, 0, two * 550 / (2 * mp.pi * n2))], (n, 0), mpf(0), mpf(1))
    h, l, n = m("2.35"), m("1.38"), m("1.5168")
    high, low = ("film", h, 0, 550 / (4 * h)), ("film", l, 0, 550 / (4 * l))
    for pairs in (1, 4, 8, 19):
        y = (h / l) ** (2 * pairs) * h**2 / n
        entries.add(f"mirror of {pairs} pairs and one", BORN_WOLF + "1.6.5",
                    [high, low] * pairs + [high], (n, 0), ((1 - y) / (1 + y)) ** 2,
                    4 * y / (1 + y) ** 2)
        y = (h / l) ** (2 * pairs) * n
        entries.add(f"mirror of {pairs} pairs", BORN_WOLF + "1.6.5", [high, low] * pairs, (n, 0),
                    ((1 - y) / (1 + y)) ** 2)
    # Matched to 30 degrees: tilted admittances in the same formula.
    a = mp.radians(30)
    ch, cl, cg = (mp.sqrt(1 - (mp.sin(a) / i) ** 2) for i in (h, l, n))
    tilted = [("film", h, 0, 550 / (4 * h * ch)), ("film", l, 0, 550 / (4 * l * cl))]
    for kind in "sp":
        eh, el, eg, e0 = (
            i * c if kind == "s" else i / c
            for i, c in ((h, ch), (l, cl), (n, cg), (mpf(1), mp.cos(a)))
        )
        y = (eh / el) ** 8 * eh**2 / eg
        entries.add("mirror matched to 30 deg", BORN_WOLF + "1.6.3", tilted * 4 + tilted[:1],
                    (n, 0), ((e0 - y) / (e0 + y)) ** 2, angle="30", polarisation=kind)
    # Between equal glasses every film pairs off into half-waves.
    cavity = [high, low, high, low, low, high, low, high]
    entries.add("cavity of absentees", BORN_WOLF + "1.6.4 and 7.6", cavity, (n, 0), mpf(0), mpf(1),
                incident="1.5168")


def periodic(entries):
    """F. Abeles, Ann. Phys. (Paris) 5, 596 (1950): powers of a period by Chebyshev polynomials."""
    h, l, n = m("2.35"), m("1.38"), m("1.5168")
    films = [("film", h, 0, 550 / (4 * h)), ("film", l, 0, 550 / (4 * l))]
    for share in ("0.7", "0.85", "1.3"):
        phase = mp.pi / 2 * m(share)
        c, s = mp.cos(phase), mp.sin(phase)
        # The period's matrix [[a, i b], [i c, d]] written out; a, b, c, d are real.
        a11, b12 = c * c - s * s * l / h, -(c * s / l + s * c / h)
        c21, d22 = -(h * s * c + l * c * s), c * c - s * s * h / l
        half = (a11 + d22) / 2
        u9, u8 = mp.chebyu(9, half), mp.chebyu(8, half)
        m11, m22 = a11 * u9 - u8, d22 * u9 - u8
        m12, m21 = b12 * u9, c21 * u9
        b = mpc(m11, m12 * n)
        cc = mpc(m22 * n, m21)
        entries.add("ten periods", "F. Abeles, Ann. Phys. (Paris) 5, 596 (1950)", films * 10,
                    (n, 0), abs((b - cc) / (b + cc)) ** 2, wavelength=550 / m(share))


def tunnelling(entries):
    n, a = m("1.5168"), mp.radians(45)
    zhu = "S. Zhu, A. W. Yu, D. Hawley, R. Roy, Am. J. Phys. 54, 601 (1986)"
    x = n**2 * mp.sin(a) ** 2 - 1
    for gap in ("0.1", "0.25", "0.5", "1", "3"):
        y = 2 * mp.pi * m(gap) * mp.sqrt(x)
        strength = (n**2 - 1) ** 2 / (4 * n**2 * mp.cos(a) ** 2 * x)
        for kind in "sp":
            if kind == "p":
                strength *= ((n**2 + 1) * mp.sin(a) ** 2 - 1) ** 2
            t = 1 / (1 + strength * mp.sinh(y) ** 2)
            entries.add("frustrated total reflection", zhu, [("film", 1, 0, m(gap) * 550)],
                        ("1.5168", 0), 1 - t, t, incident="1.5168", angle="45",
                        polarisation=kind)
    # A polarising cube: p goes through unreflected at the films' own Brewster angle.
    h, l = m("2.35"), m("1.38")
    glass = mp.sqrt(2 * h**2 * l**2 / (h**2 + l**2))
    glass = mpf(double(glass))
    ch, cl = (mp.sqrt(1 - (glass * mp.sin(a) / i) ** 2) for i in (h, l))
    films = [("film", h, 0, 550 / (4 * h * ch)), ("film", l, 0, 550 / (4 * l * cl))]
    y = (h * ch / (l * cl)) ** 10 * glass * mp.cos(a)
    e0 = glass * mp.cos(a)
    entries.add("polarising cube, s", "S. M. MacNeille, US patent 2 403 731 (1946)", films * 5,
                (glass, 0), None, 4 * e0 * y / (e0 + y) ** 2, incident=glass, angle="45",
                polarisation="s")


def make():
    mp.dps = 40
    entries = Entries()
    for part in (surfaces, plates, one_film, quarters, periodic, tunnelling):
        part(entries)
    return {
        "closed_forms.json": document(
            {
                "about": "stacks and what their own closed formula says; null where it says nothing",
                "source": "named beside each",
                "stacks": entries.rows,
            }
        )
    }
