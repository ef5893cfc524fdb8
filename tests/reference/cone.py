"""Reflectance of a converging beam, ray by ray with explicit vectors.

A beam of uniform radiance fills a cone about an axis; what falls on the surface
from a direction goes as cos(theta) d(omega) (projected solid angle; ISO 80000-7,
radiance).  A polarised beam's field is turned from the axis to each ray by the
least rotation, as a focusing lens does (B. Richards, E. Wolf, Proc. R. Soc. A 253,
358 (1959)), here with Rodrigues' formula, and then projected on the ray's own s
and p, which are cross products with the surface normal.
"""

import math

import numpy
from mpmath import mp, mpc, mpf

from common import document
from optics import evaluate
from waves import reflectance

TOLERANCE = 1e-11

PARTS = {
    "bare crown glass": (1.0, [], [1.52, 0.0]),
    "one quarter-wave film": (1.0, [([1.38, 0.0], 99.6)], [1.52, 0.0]),
    "narrow filter": (
        1.0,
        [([2.35, 0.0], 58.5), ([1.46, 0.0], 94.2)] * 3
        + [([2.35, 0.0], 117.0)]
        + [([1.46, 0.0], 94.2), ([2.35, 0.0], 58.5)] * 3,
        [1.52, 0.0],
    ),
    "silver": (1.0, [([1.46, 0.0], 80.0)], [0.06, 3.6]),
}
BEAMS = [(0, 12), (0, 30), (20, 5), (45, 12), (60, 15)]
WAVELENGTHS = [500, 550, 570]


def reflectances(part, wavelength, sines, s):
    incident, films, exit_index = part
    films = [(complex(*n), d) for n, d in films]
    return reflectance(incident, films, complex(*exit_index), wavelength, sines, s)


def beam(part, wavelength, axis_deg, half_deg, radial=120, around=400):
    """Reflectance of the beam polarised across and in the axis' plane, and unpolarised."""
    axis = math.radians(axis_deg)
    low = math.cos(math.radians(half_deg))
    nodes, weights = numpy.polynomial.legendre.leggauss(radial)
    # d(omega) = d(cos psi) d(phi) about the axis; the turn about it is periodic, so
    # equal steps converge faster than any power.
    cos_psi = low + (1 - low) * (nodes + 1) / 2
    sin_psi = numpy.sqrt(1 - cos_psi**2)
    phi = 2 * math.pi * (numpy.arange(around) + 0.5) / around
    along = numpy.array([math.sin(axis), 0.0, math.cos(axis)])
    across = numpy.array([math.cos(axis), 0.0, -math.sin(axis)])
    aside = numpy.array([0.0, 1.0, 0.0])
    normal = numpy.array([0.0, 0.0, 1.0])

    rays = (
        cos_psi[:, None, None] * along
        + sin_psi[:, None, None] * numpy.cos(phi)[None, :, None] * across
        + sin_psi[:, None, None] * numpy.sin(phi)[None, :, None] * aside
    )
    cosine = rays @ normal
    s_direction = numpy.cross(rays, normal)
    length = numpy.linalg.norm(s_direction, axis=2)
    s_direction /= length[..., None]
    p_direction = numpy.cross(s_direction, rays)

    share = weights[:, None] * cosine * (cosine > 0)
    share = share / share.sum()
    r_s = reflectances(part, wavelength, length, True)
    r_p = reflectances(part, wavelength, length, False)

    # Rodrigues: v + w x v + w x (w x v)/(1 + c), with w = axis x ray and c their cosine.
    turn = numpy.cross(numpy.broadcast_to(along, rays.shape), rays)
    shrink = (1 + rays @ along)[..., None]
    values = []
    for field in (aside, across):
        once = numpy.cross(turn, numpy.broadcast_to(field, rays.shape))
        turned = field + once + numpy.cross(turn, once) / shrink
        on_s = (turned * s_direction).sum(axis=2) ** 2
        on_p = (turned * p_direction).sum(axis=2) ** 2
        assert abs(on_s + on_p - 1).max() < 1e-12
        values.append(float((share * (on_s * r_s + on_p * r_p)).sum()))
    unpolarised = float((share * (r_s + r_p) / 2).sum())
    return [*values, unpolarised]


def make():
    mp.dps = 30
    rows = []
    for name, part in PARTS.items():
        incident, films, exit_index = part
        # The rays' reflectance answers to the oracle of the stacks.
        sine = numpy.array([math.sin(0.7)])
        for s in (True, False):
            oracle = evaluate(
                mpc(incident),
                [("film", mpc(*n), mpf(d)) for n, d in films],
                mpc(*exit_index),
                mpf(550),
                mpf(0.7),
                "s" if s else "p",
            )[0]
            assert abs(reflectances(part, 550, sine, s)[0] - float(oracle)) < 1e-13
        for axis, half in BEAMS:
            for wavelength in WAVELENGTHS:
                values = beam(part, wavelength, axis, half)
                finer = beam(part, wavelength, axis, half, 160, 600)
                assert max(abs(a - b) for a, b in zip(values, finer)) < 1e-12, name
                assert abs(values[2] - (values[0] + values[1]) / 2) < 1e-13
                rows.append(
                    {
                        "part": name,
                        "wavelength_nm": wavelength,
                        "axis_deg": axis,
                        "half_angle_deg": half,
                        "s": float(f"{values[0]:.13g}"),
                        "p": float(f"{values[1]:.13g}"),
                        "mean": float(f"{values[2]:.13g}"),
                    }
                )
    return {
        "cone.json": document(
            {
                "about": "reflectance of beams of uniform radiance that fill a cone; s and p are "
                "the beam's, about the plane of incidence of its axis",
                "source": "projected solid angle, ISO 80000-7:2019; B. Richards, E. Wolf, "
                "Proc. R. Soc. A 253, 358 (1959); summed ray by ray with explicit vectors",
                "parts": [
                    {"name": name, "incident": i, "films": f, "exit": e}
                    for name, (i, f, e) in PARTS.items()
                ],
                "beams": rows,
            }
        )
    }
