"""The light of `parts.py`: the sun, two lamps and the eye, and the standards' short tables."""

import contextlib
import io
import warnings

with warnings.catch_warnings(), contextlib.redirect_stderr(io.StringIO()):
    warnings.simplefilter("ignore")
    import colour
    import pvlib

import numpy
from scipy import integrate

from common import handbook_rows

# Exact in the SI of 2019.
PLANCK, LIGHT, CHARGE, BOLTZMANN = 6.62607015e-34, 299792458.0, 1.602176634e-19, 1.380649e-23


def planck(kelvin):
    """M. Planck, Ann. Phys. 309, 553 (1901): power per wavelength, relative; wavelengths in nm."""
    c2 = PLANCK * LIGHT / BOLTZMANN * 1e9
    return lambda w: (10000 / w) ** 5 / numpy.expm1(c2 / (w * kelvin))


_TABLE = pvlib.spectrum.get_reference_spectra(standard="ASTM G173-03")
_PLACES = numpy.array(_TABLE.index, float)


def _joined(rows, values):
    return rows, lambda w: numpy.interp(w, rows, values)


# ASTM G173-03, straight between its rows.
SUNS = {
    name: _joined(_PLACES, numpy.array(_TABLE[column], float))
    for name, column in {"am15g": "global", "am15d": "direct", "am0": "extraterrestrial"}.items()
}

_VISIBLE = colour.MSDS_CMFS["CIE 1931 2 Degree Standard Observer"]
EYE_ROWS = numpy.array(_VISIBLE.wavelengths, float)
_EYE = numpy.array(_VISIBLE.values[:, 1], float)
_D65 = colour.SDS_ILLUMINANTS["D65"]
# Illuminant A is defined by a formula; its rows here are the handbook's, which spectra.py compares with it.
_A = numpy.array(handbook_rows("spectra/illuminant_a"))


def _seen(rows, values):
    return lambda w: numpy.interp(w, rows, values) * numpy.interp(w, EYE_ROWS, _EYE)


LAMPS = {
    "d65": _seen(numpy.array(_D65.wavelengths, float), numpy.array(_D65.values, float)),
    "illuminant_a": _seen(_A[:, 0], _A[:, 1]),
}

# EN 410:2011, table 1: D65 V(lambda), 380 to 780 nm in steps of 10 nm, in per cent of the whole; from memory.
EN_410 = [
    0.0000, 0.0005, 0.0030, 0.0103, 0.0352, 0.0948, 0.2274, 0.4192, 0.6663, 0.9850, 1.5189, 2.1336, 3.3491, 5.1393,
    7.0523, 8.7990, 9.4427, 9.8077, 9.4306, 8.6891, 7.8994, 6.3306, 5.3542, 4.2491, 3.1502, 2.0812, 1.3810, 0.8070,
    0.4612, 0.2485, 0.1255, 0.0536, 0.0276, 0.0146, 0.0057, 0.0035, 0.0021, 0.0008, 0.0001, 0.0000, 0.0000,
]

# EN 12898:2019, the 30 wavelengths for 283 K in um, each for a thirtieth of the radiation; from memory.
EN_12898 = [
    5.5, 6.7, 7.4, 8.1, 8.6, 9.2, 9.7, 10.2, 10.7, 11.3, 11.8, 12.4, 12.9, 13.5, 14.2, 14.8, 15.6, 16.3, 17.2, 18.1,
    19.2, 20.3, 21.7, 23.3, 25.2, 27.7, 30.9, 35.7, 43.9, 50.0,
]


def luminous_ordinates():
    """EN 410's wavelengths in nm and weights; an error when they are not those of D65 V(lambda)."""
    places = numpy.arange(380.0, 781.0, 10.0)
    weights = numpy.array(EN_410)
    own = LAMPS["d65"](places)
    own *= 100 / own.sum()
    off = abs(weights - own).max()
    if abs(weights.sum() - 100) > 0.001 or off > 0.03:
        raise ValueError(f"EN 410: the table sums to {weights.sum()} and is off by {off}")
    return places, weights


def radiant_ordinates():
    """EN 12898's wavelengths in nm; an error when they do not halve the thirtieths of the radiation."""
    law = planck(283.0)
    whole = integrate.quad(law, 500, 2e6, limit=2000, points=[5e3, 1e4, 2e4, 5e4, 2e5])[0]
    # The last stands for all beyond 47 um and is the end of the usual range; 0.1 um is up to 0.004 of the whole.
    for at, um in enumerate(EN_12898[:-1]):
        share = integrate.quad(law, 500, um * 1000, limit=500, points=[3000])[0] / whole
        if abs(share - (at + 0.5) / 30) > 0.004:
            raise ValueError(f"EN 12898: {um} um is at {share} of the radiation")
    return numpy.array(EN_12898) * 1000
