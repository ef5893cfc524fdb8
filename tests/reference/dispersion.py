"""Indices from published dispersion formulas, in 40-digit arithmetic."""

from mpmath import mp, mpc, mpf

from common import document, double

TOLERANCE = 0.0



def sellmeier(terms, wavelength):
    """W. Sellmeier, Ann. Phys. 219, 272 (1871); wavelengths in um."""
    square = mpf(wavelength) ** 2
    return mp.sqrt(
        1 + sum(mpf(b) * square / (square - c) for b, c in terms)
    )


def index(epsilon):
    root = mp.sqrt(epsilon)
    return root if root.imag >= 0 else -root


def row(model, source, wavelength_nm, value, k_too=True):
    """A point; where the formula is for n alone and k is measured apart, k is left open."""
    value = mpc(value)
    return {
        "model": model,
        "source": source,
        "wavelength_nm": double(mpf(wavelength_nm)),
        "n": double(value.real),
        "k": double(value.imag) if k_too else None,
    }


def make():
    mp.dps = 40
    # h c / e, exact in the SI of 2019.
    ev_nm = mpf("6.62607015e-34") * 299792458 / mpf("1.602176634e-19") * mpf(10) ** 9
    rows = []
    malitson = [
        (b, mpf(c) ** 2)
        for b, c in (
            ("0.6961663", "0.0684043"),
            ("0.4079426", "0.1162414"),
            ("0.8974794", "9.896161"),
        )
    ]
    catalogue = [
        (b, mpf(c))
        for b, c in (
            ("1.03961212", "0.00600069867"),
            ("0.231792344", "0.0200179144"),
            ("1.01046945", "103.560653"),
        )
    ]
    for wavelength in ("0.4861327", "0.5875618", "0.6562725", "0.25", "1.064", "2.2"):
        nm = mpf(wavelength) * 1000
        rows.append(
            row("fused_silica", "I. H. Malitson, J. Opt. Soc. Am. 55, 1205 (1965)", nm,
                sellmeier(malitson, wavelength))
        )
        if mpf(wavelength) >= mpf("0.3"):
            rows.append(
                row("crown_517642", "optical glass catalogue, issue of 20 January 2017, glass 517642", nm,
                    sellmeier(catalogue, wavelength), k_too=False)
            )
    for wavelength in ("400", "550", "1000"):
        um = mpf(wavelength) / 1000
        rows.append(
            row("cauchy 1.45, 3.5e-3 um^2, 1.1e-4 um^4", "A. L. Cauchy (1836)", wavelength,
                mpf("1.45") + mpf("3.5e-3") / um**2 + mpf("1.1e-4") / um**4)
        )
    for wavelength in ("350", "620", "1200"):
        energy = ev_nm / mpf(wavelength)
        drude = mpf("3.7") - mpf(81) / (energy**2 + 1j * mpf("0.02") * energy)
        rows.append(
            row("drude 9 eV width 0.02 eV on 3.7", "P. Drude, Ann. Phys. 306, 566 (1900)",
                wavelength, index(drude))
        )
        lorentz = mpf("1.2") + mpf("2.1") * mpf("7.3") ** 2 / (
            mpf("7.3") ** 2 - energy**2 - 1j * mpf("0.4") * energy
        )
        rows.append(
            row("lorentz 2.1 at 7.3 eV width 0.4 eV on 1.2",
                "H. A. Lorentz; M. Born, E. Wolf, 7th ed. (1999), 2.3.4", wavelength,
                index(lorentz))
        )
        urbach = mpf("0.02") * mp.exp((energy - ev_nm / 300) / mpf("0.25"))
        rows.append(
            row("1.5 with k urbach 0.02 at 300 nm width 0.25 eV",
                "F. Urbach, Phys. Rev. 92, 1324 (1953)", wavelength, mpc(mpf("1.5"), urbach))
        )
    return {
        "dispersion.json": document(
            {
                "about": "n and k by published dispersion formulas",
                "source": "named beside each",
                "ev_nm": double(ev_nm),
                "points": rows,
            }
        )
    }
