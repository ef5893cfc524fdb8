"""Airy's sum in double precision for many wavelengths or rays at once.

The fast twin of optics.py, for dense sampling; scripts that use it first hold it
against optics.py.  Indices are numbers or functions of the wavelength in nm.
"""

import math

import numpy


def fresnel(index_1, cosine_1, index_2, cosine_2, s):
    if s:
        return (index_1 * cosine_1 - index_2 * cosine_2) / (
            index_1 * cosine_1 + index_2 * cosine_2
        )
    return (index_2 * cosine_1 - index_1 * cosine_2) / (index_2 * cosine_1 + index_1 * cosine_2)


def cosine(index, sine):
    root = numpy.sqrt(1 - (sine / index) ** 2 + 0j)
    forward = index * root
    wrong = (forward.imag < 0) | ((forward.imag == 0) & (forward.real < 0))
    return numpy.where(wrong, -root, root)


def reflectance(incident, films, exit_index, wavelength, sine, s):
    """|r|^2 of films [(index, thickness in nm), ...] between two half-spaces."""

    def at(index):
        value = index(wavelength) if callable(index) else index
        return numpy.asarray(value, dtype=complex)

    indices = [at(incident)] + [at(n) for n, _ in films] + [at(exit_index)]
    conserved = incident * sine
    cosines = [cosine(n, conserved) for n in indices]
    whole = fresnel(indices[-2], cosines[-2], indices[-1], cosines[-1], s)
    for j in range(len(films) - 1, -1, -1):
        r = fresnel(indices[j], cosines[j], indices[j + 1], cosines[j + 1], s)
        phase = 4j * math.pi * indices[j + 1] * cosines[j + 1] * films[j][1] / wavelength
        echo = whole * numpy.exp(phase)
        whole = (r + echo) / (1 + r * echo)
    return abs(whole) ** 2
