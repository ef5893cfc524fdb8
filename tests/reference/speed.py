"""How many evaluations a second numpy and numba make of the engine's benchmark cases a and c.

A measurement, not a reference value: regenerate.py does not run it.  The cases are those of
engine/benches/engine/cases.rs, film by film.  An evaluation is one film at one wavelength for
one polarisation.  `numpy` is the characteristic matrix as an engineer writes it: complex 2x2
elements, a loop over films, arrays over wavelengths.  `numba` is the same physics tuned:
tables for each material, the fields (B, C) in real arithmetic, one sine and cosine for both
polarisations, fastmath, one thread.  (F. Abeles, Ann. Phys. (Paris) 5, 596 (1950).)

    cargo bench -p overcoat-engine -- --json > bench.json
    python speed.py --bench bench.json     # also prints the engine's ratios to both
"""

import argparse
import json
import os
import statistics
import sys
import time

# Before numpy loads what would start threads of its own.
for name in ("OMP_NUM_THREADS", "OPENBLAS_NUM_THREADS", "MKL_NUM_THREADS", "NUMBA_NUM_THREADS"):
    os.environ[name] = "1"

import numba  # noqa: E402
import numpy  # noqa: E402

ANGLE = numpy.pi / 6
INDICES = numpy.array([2.35, 1.46, 1.9])
SUBSTRATE = 1.52
# How far two ways of computing the same R, T may be apart.
ALIKE = 1e-12
# So many of the 10 000 parts of case c; evaluations a second hardly depend on it.
NUMPY_PARTS = 20
NUMBA_PARTS = 500


def design(layers):
    """The material of each film by its number, and the thicknesses in nm."""
    at = numpy.arange(layers)
    return at % 3, 60.0 + at * 37 % 61


def growths(part, layers):
    """By how many nm each film of a part is too thick."""
    return (part * 7 + numpy.arange(layers) * 13) % 101 * 0.02 - 1.0


# ---- numpy, as an engineer writes it


def numpy_powers(indices, thicknesses, substrate, wavelengths, angle, mode):
    """R and T at all wavelengths; indices[film, wavelength] are complex."""

    def cosine(n):
        return numpy.sqrt(1 - (numpy.sin(angle) / n) ** 2)

    def admittance(n):
        return n * cosine(n) if mode == "s" else n / cosine(n)

    ones = numpy.ones(len(wavelengths), dtype=complex)
    m00, m01, m10, m11 = ones, 0 * ones, 0 * ones, ones
    for n, d in zip(indices, thicknesses):
        y = admittance(n)
        phase = 2 * numpy.pi * n * d * cosine(n) / wavelengths
        c, s = numpy.cos(phase), numpy.sin(phase)
        l01, l10 = -1j * s / y, -1j * y * s
        m00, m01, m10, m11 = (
            m00 * c + m01 * l10,
            m00 * l01 + m01 * c,
            m10 * c + m11 * l10,
            m10 * l01 + m11 * c,
        )
    before, behind = admittance(ones), admittance(substrate)
    b, c = m00 + m01 * behind, m10 + m11 * behind
    reflectance = abs((before * b - c) / (before * b + c)) ** 2
    transmittance = 4 * before.real * behind.real / abs(before * b + c) ** 2
    return reflectance, transmittance


def numpy_spectrum(materials, thicknesses, wavelengths):
    flat = numpy.ones(len(wavelengths), dtype=complex)
    indices = INDICES[materials][:, None] * flat
    both = [numpy_powers(indices, thicknesses, SUBSTRATE * flat, wavelengths, ANGLE, m) for m in "sp"]
    return numpy.array(both)


def numpy_parts(count, materials, thicknesses, wavelengths):
    results = []
    for part in range(count):
        own = thicknesses + growths(part, len(thicknesses))
        r = numpy_spectrum(materials, own, wavelengths)[:, 0].mean(axis=0)
        results.append((r.mean(), r.max()))
    return numpy.array(results)


# ---- numba, tuned


def tables(wavelengths):
    """By material, the substrate last: 2 pi n cos/wavelength, and the admittances with their inverses."""
    n = numpy.append(INDICES, SUBSTRATE)[:, None] * numpy.ones(len(wavelengths))
    normal = numpy.sqrt(n**2 - numpy.sin(ANGLE) ** 2)
    return numpy.array([2 * numpy.pi * normal / wavelengths, normal, 1 / normal, n**2 / normal, normal / n**2])


@numba.njit(fastmath=True)
def numba_spectrum(table, materials, thicknesses, cosine, out):
    """R and T into out[polarisation, R or T, wavelength]."""
    phase, ys, zs, yp, zp = table[0], table[1], table[2], table[3], table[4]
    last = table.shape[1] - 1
    for w in range(table.shape[2]):
        sbr, sbi, scr, sci = 1.0, 0.0, ys[last, w], 0.0
        pbr, pbi, pcr, pci = 1.0, 0.0, yp[last, w], 0.0
        for film in range(len(thicknesses) - 1, -1, -1):
            m = materials[film]
            turn = phase[m, w] * thicknesses[film]
            s, c = numpy.sin(turn), numpy.cos(turn)
            over, times = s * zs[m, w], s * ys[m, w]
            sbr, sbi, scr, sci = (
                c * sbr + over * sci,
                c * sbi - over * scr,
                c * scr + times * sbi,
                c * sci - times * sbr,
            )
            over, times = s * zp[m, w], s * yp[m, w]
            pbr, pbi, pcr, pci = (
                c * pbr + over * pci,
                c * pbi - over * pcr,
                c * pcr + times * pbi,
                c * pci - times * pbr,
            )
        before = cosine
        whole = 1 / ((before * sbr + scr) ** 2 + (before * sbi + sci) ** 2)
        out[0, 0, w] = ((before * sbr - scr) ** 2 + (before * sbi - sci) ** 2) * whole
        out[0, 1, w] = 4 * before * ys[last, w] * whole
        before = 1 / cosine
        whole = 1 / ((before * pbr + pcr) ** 2 + (before * pbi + pci) ** 2)
        out[1, 0, w] = ((before * pbr - pcr) ** 2 + (before * pbi - pci) ** 2) * whole
        out[1, 1, w] = 4 * before * yp[last, w] * whole


@numba.njit(fastmath=True)
def numba_parts(count, table, materials, thicknesses, cosine, out, results):
    """Mean and greatest R of each part."""
    own = numpy.empty_like(thicknesses)
    for part in range(count):
        for film in range(len(thicknesses)):
            own[film] = thicknesses[film] + (part * 7 + film * 13) % 101 * 0.02 - 1.0
        numba_spectrum(table, materials, own, cosine, out)
        total, greatest = 0.0, 0.0
        for w in range(out.shape[2]):
            r = 0.5 * (out[0, 0, w] + out[1, 0, w])
            total += r
            greatest = max(greatest, r)
        results[part, 0] = total / out.shape[2]
        results[part, 1] = greatest


# ---- the cases


def case_a():
    """40 lossless films, 1001 wavelengths, s and p, R and T."""
    materials, thicknesses = design(40)
    wavelengths = 400.0 + 0.4 * numpy.arange(1001)
    table, out = tables(wavelengths), numpy.empty((2, 2, 1001))
    each = 40 * 1001 * 2

    def engineer():
        return numpy_spectrum(materials, thicknesses, wavelengths)

    def tuned():
        numba_spectrum(table, materials, thicknesses, numpy.cos(ANGLE), out)
        return out

    return {"numpy": (engineer, each), "numba": (tuned, each)}, (engineer, tuned)


def case_c():
    """Parts of 20 films, 301 wavelengths: mean and greatest R of unpolarised light."""
    materials, thicknesses = design(20)
    wavelengths = 400.0 + numpy.arange(301)
    table, out = tables(wavelengths), numpy.empty((2, 2, 301))
    each = 20 * 301 * 2

    def engineer():
        return numpy_parts(NUMPY_PARTS, materials, thicknesses, wavelengths)

    def tuned(count=NUMBA_PARTS):
        results = numpy.empty((count, 2))
        numba_parts(count, table, materials, thicknesses, numpy.cos(ANGLE), out, results)
        return results

    timed = {"numpy": (engineer, NUMPY_PARTS * each), "numba": (tuned, NUMBA_PARTS * each)}
    return timed, (engineer, lambda: tuned(NUMPY_PARTS))


def measure(variants, rounds):
    """Evaluations a second of each variant, all of them once in each round: medians."""
    found = {name: [] for name in variants}
    for _ in range(rounds):
        for name, (run, evaluations) in variants.items():
            repeats = 1 if name == "numpy" else 10
            started = time.perf_counter()
            for _ in range(repeats):
                run()
            found[name].append(repeats * evaluations / (time.perf_counter() - started))
    return {name: statistics.median(values) for name, values in found.items()}


def engine(path):
    """The engine's evaluations a second by case and variant, from its benchmark's --json."""
    text = sys.stdin.read() if path == "-" else open(path, encoding="utf-8").read()
    return {entry["case"]: entry for entry in json.loads(text)}


def main():
    options = argparse.ArgumentParser(description=__doc__.splitlines()[0])
    options.add_argument("--bench", metavar="FILE", help="the engine benchmark's --json; - reads it from stdin")
    options.add_argument("--rounds", type=int, default=15, metavar="N", help="medians of so many rounds (15)")
    given = options.parse_args()
    measured = engine(given.bench) if given.bench else {}
    print(f"Million evaluations a second, one thread; medians of {given.rounds} rounds.")
    for name, case in (("a", case_a), ("c", case_c)):
        variants, (one, other) = case()
        apart = abs(one() - other()).max()
        if not apart <= ALIKE:
            sys.exit(f"case {name}: numpy and numba differ by {apart}")
        speeds = measure(variants, given.rounds)
        print(f"{name}: " + ", ".join(f"{variant} {speed * 1e-6:.1f}" for variant, speed in speeds.items()))
        for kind in ("natural", "avx2", "widest"):
            if name in measured:
                speed = measured[name][kind]
                ratios = ", ".join(f"{speed / speeds[variant]:.1f} x {variant}" for variant in speeds)
                print(f"   engine's {kind} {speed * 1e-6:.1f}: {ratios}")


if __name__ == "__main__":
    main()
