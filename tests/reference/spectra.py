"""The handbook's spectra against the tables that pvlib and colour-science carry.

Every row of the handbook must equal the package's row; the integrals written here
come from the packages' own tables, by the trapezoidal rule on their rows.
"""

import contextlib
import io
import warnings

with warnings.catch_warnings(), contextlib.redirect_stderr(io.StringIO()):
    warnings.simplefilter("ignore")
    import colour
    import pvlib

from mpmath import mp, mpf

from common import document, double, handbook_rows

TOLERANCE = 1e-12

# Exact in the SI of 2019.
PLANCK, LIGHT, CHARGE = mpf("6.62607015e-34"), mpf(299792458), mpf("1.602176634e-19")

SUN = {"am15g": "global", "am15d": "direct", "am0": "extraterrestrial"}


def trapezoid(rows, low, high, weight=lambda w: 1):
    total = mpf(0)
    for (w1, v1), (w2, v2) in zip(rows, rows[1:]):
        if w1 >= low and w2 <= high:
            total += (mpf(v1) * weight(mpf(w1)) + mpf(v2) * weight(mpf(w2))) * (
                mpf(w2) - mpf(w1)
            ) / 2
    return total


def same(name, own, packaged, places=None):
    own = [(w, v) for w, v in own]
    if len(own) != len(packaged):
        raise ValueError(f"{name}: {len(own)} rows, the package has {len(packaged)}")
    for (w1, v1), (w2, v2) in zip(own, packaged):
        close = abs(v1 - v2) <= (places if places else 0)
        if w1 != w2 or not close:
            raise ValueError(f"{name}: {w1} nm {v1} here, {w2} nm {v2} in the package")


def make():
    mp.dps = 30
    spectra = []
    table = pvlib.spectrum.get_reference_spectra(standard="ASTM G173-03")
    for name, column in SUN.items():
        packaged = [(float(w), float(v)) for w, v in table[column].items()]
        same(name, handbook_rows(name_path(name)), packaged)
        photons = LIGHT * PLANCK
        spectra.append(
            {
                "name": name,
                "source": "ASTM G173-03, as pvlib 0.16.1 carries it",
                "rows": packaged[::90],
                "row_count": len(packaged),
                "integral": double(trapezoid(packaged, 280, 4000)),
                "photocurrent_ma_per_cm2": [
                    [low, high, double(
                        trapezoid(
                            packaged, low, high, lambda w: CHARGE * w * mpf("1e-9") / photons
                        ) / 10
                    )]
                    for low, high in ((300, 1100), (300, 1200))
                ],
            }
        )

    d65 = colour.SDS_ILLUMINANTS["D65"]
    packaged = [(float(w), float(v)) for w, v in zip(d65.wavelengths, d65.values)]
    own = handbook_rows(name_path("d65"))
    same("d65", own[: len(packaged)], packaged)
    parts = colour.colorimetry.SDS_BASIS_FUNCTIONS_CIE_ILLUMINANT_D_SERIES
    for w, v in own[len(packaged):]:
        # Beyond the package's last row: the daylight components, CIE 015:2018.
        daylight = parts["S0"][w] - 0.295 * parts["S1"][w] - 0.689 * parts["S2"][w]
        assert abs(daylight - v) <= 5.1e-5, w
    spectra.append(entry("d65", "CIE 015:2018, as colour-science 0.4.7 carries it", packaged, 8))

    lamp = colour.SDS_ILLUMINANTS["A"]
    packaged = [(float(w), float(v)) for w, v in zip(lamp.wavelengths, lamp.values)]
    own = handbook_rows(name_path("illuminant_a"))
    for (w1, v1), (w2, v2) in zip(own, packaged):
        # The package prints six digits.
        assert w1 == w2 and abs(v1 / v2 - 1) < 6e-6, (w1, v1, v2)
    spectra.append(
        entry(
            "illuminant_a",
            "CIE 015:2018, the defining formula",
            [(w, double(illuminant_a(w))) for w, _ in own],
            8,
        )
    )
    for (w, v) in own:
        assert abs(v / double(illuminant_a(w)) - 1) < 1e-9, w

    eye = colour.colorimetry.SDS_LEFS_PHOTOPIC["CIE 1924 Photopic Standard Observer"]
    packaged = [(float(w), float(v)) for w, v in zip(eye.wavelengths, eye.values)]
    same("photopic", handbook_rows(name_path("photopic")), packaged)
    spectra.append(entry("photopic", "CIE 018, as colour-science 0.4.7 carries it", packaged, 20))

    observer = "CIE 1931 2 Degree Standard Observer"
    return {
        "spectra.json": document(
            {
                "about": "rows and trapezoidal integrals of standard spectra",
                "source": "ASTM G173-03 (pvlib 0.16.1); CIE 015:2018, CIE 018 "
                "(colour-science 0.4.7)",
                "white_points_xy": [
                    [name, [round(float(v), 5) for v in colour.CCS_ILLUMINANTS[observer][key]]]
                    for name, key in (("d65", "D65"), ("illuminant_a", "A"))
                ],
                "spectra": spectra,
            }
        )
    }


def name_path(name):
    return f"spectra/{name}"


def illuminant_a(w):
    c = mpf("1.435e7")
    return (
        100
        * (560 / mpf(w)) ** 5
        * mp.expm1(c / (2848 * 560))
        / mp.expm1(c / (2848 * mpf(w)))
    )


def entry(name, source, rows, every):
    return {
        "name": name,
        "source": source,
        "rows": rows[::every],
        "row_count": len(rows),
        "integral": double(trapezoid(rows, rows[0][0], rows[-1][0])),
        "photocurrent_ma_per_cm2": [],
    }
