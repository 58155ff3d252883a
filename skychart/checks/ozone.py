"""Ozone in the visible: cross-sections against independent measurements, and the column.

Sources: Burrows et al. 1999, Bogumil et al. 2003, Voigt et al. 2001, Brion et al. 1998, laser values; see the table.
The set used, Serdyuchenko, Gorshelev et al. 2014, lies within 0.3 % of the laser values, and 1 to 5 % below the older
sets: less than the stated uncertainties together for two of them. What the other two (Burrows, Voigt) state of their
absolute scale was not found, so only the shape of their band is compared.
"""

import functools
import math

import numpy as np

from skychart.checks.check import Check
from skychart.data.tables import load_table
from skychart.sky.air import standard_air
from skychart.sky.gases import ozone_cross_section, ozone_layers

TOPIC = "Ozone"

OWN_UNCERTAINTY = 0.03  # Gorshelev et al. 2014, abstract: better than three per cent

_SETS = {  # column of the table: source, its own uncertainty, wavelengths compared
    "bogumil2003_223K": (
        "Bogumil et al. 2003, J. Photochem. Photobiol. A 157, 167, 223 K",
        0.031,
        (500, 550, 602, 650),
    ),
    "brion1998_295K": ("Brion et al. 1998, J. Atmos. Chem. 30, 291, 295 K", 0.015, (525, 602)),
}
_SHAPES = {  # sets of which only the shape of the band is compared
    "burrows1999_221K": "Burrows et al. 1999, JQSRT 61, 509, 221 K",
    "voigt2001_223K": "Voigt et al. 2001, J. Photochem. Photobiol. A 143, 1, 223 K",
}
_READ = "(machine-readable copy, averaged over 1 nm here)"
_LASER_CM2 = {576: 4.70e-21, 604: 5.10e-21, 632: 3.36e-21}
_PEAKS_NM = {  # middle and half width of the published range, searched from, to
    "first": (574.45, 0.15, 560, 590),
    "second": (602.4, 0.3, 592, 615),
}


def checks() -> tuple[Check, ...]:
    """Cross-sections at single wavelengths, places of the two peaks, amount and optical depth of a column."""
    return (*_measured_sets(), *_shapes(), *_laser_values(), *_peaks(), *_column())


def _measured_sets() -> list[Check]:
    columns = load_table("checks/published_ozone").columns
    found = []
    for name, (source, uncertainty, wavelengths) in _SETS.items():
        published = dict(zip(columns["wavelength_nm"], columns[name], strict=True))
        found += [
            _cross_section(
                f"ozone-{name.split('_')[0]}-{nm}",
                nm,
                f"{source} {_READ}",
                float(published[nm]) * 1e-21,
                math.hypot(uncertainty, OWN_UNCERTAINTY),
                f"stated: {uncertainty:.1%} by these authors (from memory), 3 % for the set used; in quadrature",
            )
            for nm in wavelengths
        ]
    return found


def _shapes() -> list[Check]:
    columns = load_table("checks/published_ozone").columns
    found = []
    for name, source in _SHAPES.items():
        published = dict(zip(columns["wavelength_nm"], columns[name], strict=True))
        found += [
            Check(
                key=f"ozone-{name.split('_')[0]}-{nm}-602",
                topic=TOPIC,
                quantity=f"Absorption of ozone at {nm} nm over that at 602 nm",
                conditions="computed with the table for 223 K; in absolute terms this set lies 4 to 5 % above it",
                source=f"{source} {_READ}",
                published=float(published[nm] / published[602]),
                computed=float(ozone_cross_section(nm) / ozone_cross_section(602)),
                tolerance=0.02,
                tolerance_reason="the ratio scatters by 2 % among the independent sets",
                unit="1",
                relative=True,
            )
            for nm in (550,)
        ]
    return found


def _laser_values() -> list[Check]:
    return [
        _cross_section(
            f"ozone-laser-{nm}",
            nm,
            "absolute laser measurements at 295 K (collected values, authors not recorded)",
            published,
            OWN_UNCERTAINTY,
            "3 % stated by the authors of the set used; the uncertainty of the laser values is not known here",
        )
        for nm, published in _LASER_CM2.items()
    ]


def _cross_section(key: str, wavelength_nm: int, source: str, published: float, tolerance: float, reason: str) -> Check:
    return Check(
        key=key,
        topic=TOPIC,
        quantity="Absorption cross-section of ozone",
        conditions=f"{wavelength_nm} nm, computed with the table for 223 K",
        source=source,
        published=published,
        computed=float(ozone_cross_section(wavelength_nm)) * 1e4,
        tolerance=tolerance,
        tolerance_reason=reason,
        unit="cm²",
        relative=True,
    )


def _peaks() -> list[Check]:
    found = []
    for name, (middle, half_width, low, high) in _PEAKS_NM.items():
        wavelength = np.arange(low, high + 1.0)
        found.append(
            Check(
                key=f"ozone-peak-{name}",
                topic=TOPIC,
                quantity=f"Wavelength of the {name} peak of the Chappuis band",
                conditions="of the mean over 1 nm",
                source="Burrows, Bogumil, Voigt and Brion (derived here from their measurements: middle of the range)",
                published=middle,
                computed=float(wavelength[np.argmax(ozone_cross_section(wavelength))]),
                tolerance=half_width + 0.5,
                tolerance_reason=f"the sets spread by ± {half_width} nm, and the table here has steps of 1 nm",
                unit="nm",
                relative=False,
            )
        )
    return found


def _column() -> list[Check]:
    altitude_km, _ = standard_air()
    column = float(ozone_layers(altitude_km, 300).sum())
    entry = functools.partial(Check, topic=TOPIC, conditions="300 Dobson units", relative=True)
    return [
        entry(
            key="ozone-column",
            quantity="Molecules of ozone above a square centimetre",
            source="definition of the Dobson unit, 2.6867e16 molecules per cm²",
            published=300 * 2.6867e16,
            computed=column / 1e4,
            tolerance=5e-5,
            tolerance_reason="five printed digits",
            unit="cm⁻²",
        ),
        entry(
            key="ozone-depth-602",
            quantity="Vertical optical depth of ozone at 602 nm",
            source="5.30e-21 cm² per molecule, the middle of the measured sets (derived here)",
            published=0.0427,
            computed=column * float(ozone_cross_section(602)),
            tolerance=math.hypot(0.031, OWN_UNCERTAINTY),
            tolerance_reason="3.1 % of the older sets (from memory) and 3 % of the set used, in quadrature",
            unit="1",
        ),
    ]
