"""Reflection and transmission of films and thick bodies, by summing waves.

Written apart from the project's own engine on purpose: no characteristic
matrix and no admittance occurs here.  Amplitudes of the electric field are
carried by Fresnel's coefficients and Airy's sum from the far interface to the
near one (M. Born, E. Wolf, Principles of Optics, 7th ed., Cambridge 1999,
1.5.2 and 1.6.4; the recursion for many films is P. Rouard, Annales de Physique
11, vol. 7, 291 (1937)).  Thick bodies exchange powers, and the sum over their
reflections is done with the adding formulas of G. G. Stokes, Proceedings of
the Royal Society of London 11, 545 (1862).

Arithmetic is mpmath's at the caller's precision.  Indices are n + i k with
k >= 0 (time factor exp(-i omega t)), lengths in nm, angles in radians.
"""

from mpmath import mp, mpc, mpf


def cosine(index, incident_index, sine):
    """cos of the complex angle in a medium: the wave decays, or runs, forward."""
    root = mp.sqrt(1 - (incident_index * sine / index) ** 2)
    forward = index * root
    if forward.imag < 0 or (forward.imag == 0 and forward.real < 0):
        root = -root
    return root


def fresnel(index_1, cosine_1, index_2, cosine_2, polarisation):
    """Amplitude coefficients (r, t) of the electric field at one interface."""
    if polarisation == "s":
        total = index_1 * cosine_1 + index_2 * cosine_2
        return (
            (index_1 * cosine_1 - index_2 * cosine_2) / total,
            2 * index_1 * cosine_1 / total,
        )
    total = index_2 * cosine_1 + index_1 * cosine_2
    return (
        (index_2 * cosine_1 - index_1 * cosine_2) / total,
        2 * index_1 * cosine_1 / total,
    )


def flux(index, cos, forward, backward, polarisation):
    """Power through a plane where the two amplitudes are given, per |E|^2 = 1 in free space."""
    if polarisation == "s":
        electric = forward + backward
        magnetic = index * cos * (forward - backward)
    else:
        electric = cos * (forward - backward)
        magnetic = index * (forward + backward)
    return (electric * mp.conj(magnetic)).real


class Films:
    """Films between two media, seen from the first: R, T and what each film takes."""

    def __init__(self, before, films, after, incident_index, sine, wavelength, polarisation):
        indices = [before] + [index for index, _ in films] + [after]
        cosines = [cosine(index, incident_index, sine) for index in indices]
        phases = [mpc(1)] + [
            mp.exp(2j * mp.pi * index * cos * thickness / wavelength)
            for (index, thickness), cos in zip(films, cosines[1:])
        ]
        steps = [
            fresnel(indices[j], cosines[j], indices[j + 1], cosines[j + 1], polarisation)
            for j in range(len(indices) - 1)
        ]
        # below[j]: everything reflected at and behind interface j, seen from medium j.
        below = [mpc(0)] * len(steps)
        below[-1] = steps[-1][0]
        for j in range(len(steps) - 2, -1, -1):
            r = steps[j][0]
            echo = below[j + 1] * phases[j + 1] ** 2
            below[j] = (r + echo) / (1 + r * echo)

        forward = mpc(1)
        incoming = flux(before, cosines[0], mpc(1), mpc(0), polarisation)
        through = []
        for j in range(len(steps)):
            arriving = forward * phases[j] if j else forward
            r, t = steps[j]
            if j + 1 < len(steps):
                echo = below[j + 1] * phases[j + 1] ** 2
                forward = arriving * t / (1 + r * echo)
                through.append(
                    flux(indices[j + 1], cosines[j + 1], forward, forward * echo, polarisation)
                )
            else:
                forward = arriving * t
                through.append(
                    flux(indices[j + 1], cosines[j + 1], forward, mpc(0), polarisation)
                )
        self.amplitude = below[0]
        self.reflectance = abs(below[0]) ** 2
        if incoming == 0:
            # A wave that only decays in a clear body carries nothing to the far side of it.
            self.transmittance = mpf(0)
            self.absorptances = [mpf(0)] * len(films)
            return
        self.transmittance = through[-1] / incoming
        self.absorptances = [
            (through[j] - through[j + 1]) / incoming for j in range(len(through) - 1)
        ]


def evaluate(incident, stack, exit_medium, wavelength, angle, polarisation):
    """(R, T, absorptance of every film in the order of the stack).

    `stack` holds ("film", index, thickness) and ("body", index, thickness).
    """
    sine = mp.sin(angle)
    media = [incident]
    groups = [[]]
    bodies = []
    for kind, index, thickness in stack:
        if kind == "film":
            groups[-1].append((index, thickness))
        else:
            bodies.append((index, thickness))
            media.append(index)
            groups.append([])
    media.append(exit_medium)

    ahead, behind = [], []
    for j, films in enumerate(groups):
        common = (incident, sine, wavelength, polarisation)
        ahead.append(Films(media[j], films, media[j + 1], *common))
        behind.append(Films(media[j + 1], films[::-1], media[j], *common))
    passes = [
        mp.exp(-4 * mp.pi * (index * cosine(index, incident, sine)).imag * thickness / wavelength)
        for index, thickness in bodies
    ]

    # Power reflected by everything from group j on, seen from the medium before it.
    rest = [mpf(0)] * len(groups)
    rest[-1] = ahead[-1].reflectance
    for j in range(len(groups) - 2, -1, -1):
        echo = passes[j] ** 2 * rest[j + 1]
        rest[j] = ahead[j].reflectance + ahead[j].transmittance * echo * behind[
            j
        ].transmittance / (1 - behind[j].reflectance * echo)

    absorbed = []
    arriving = mpf(1)
    for j, films in enumerate(groups):
        returning = mpf(0)
        if j < len(bodies):
            echo = passes[j] ** 2 * rest[j + 1]
            leaving = arriving * ahead[j].transmittance / (1 - behind[j].reflectance * echo)
            returning = leaving * echo
        else:
            leaving = arriving * ahead[j].transmittance
        backward = behind[j].absorptances[::-1]
        absorbed += [
            arriving * front + returning * back
            for front, back in zip(ahead[j].absorptances, backward)
        ]
        arriving = leaving * passes[j] if j < len(bodies) else leaving
    return rest[0], arriving, absorbed
