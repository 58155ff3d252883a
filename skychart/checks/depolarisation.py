"""Depolarisation of light scattered by air, and what it does to the phase function.

Sources: Bates 1984, Bucholtz 1995; see the tables.
"""

import functools

from skychart.checks.check import Check
from skychart.checks.flat import FlatSky
from skychart.data.tables import load_table
from skychart.sky.air import depolarisation_ratio

TOPIC = "Depolarisation and phase function"

_BATES = "Bates 1984, Planet. Space Sci. 32, 785 (derived here from the published formulas, 360 ppm CO2)"
_BUCHOLTZ = "Bucholtz 1995, Appl. Opt. 34, 2765, Table 1 (machine-readable copy, cross-checked)"


def checks(flat: FlatSky) -> tuple[Check, ...]:
    """Depolarisation ratio, King factor, and forward-to-sideways ratio of the scattered light."""
    return (*_bates(), *_bucholtz(), *_forward_to_sideways(flat))


def _bates() -> list[Check]:
    columns = load_table("checks/published_king_factor_bates1984").columns
    rows = {nm: (factor, ratio) for nm, factor, ratio in zip(*columns.values(), strict=True)}
    found = []
    for nm in (400, 700):
        entry = functools.partial(
            Check, topic=TOPIC, conditions=f"{nm} nm", source=_BATES, tolerance=1e-5,
            tolerance_reason="five printed decimals", unit="1", relative=False,
        )  # fmt: skip
        factor, ratio = rows[nm]
        computed = float(depolarisation_ratio(nm))
        computed_factor = (6 + 3 * computed) / (6 - 7 * computed)
        found += [
            entry(key=f"depolarisation-bates1984-{nm}", quantity="Depolarisation ratio of air for natural light",
                  published=float(ratio), computed=computed),
            entry(key=f"king-factor-bates1984-{nm}", quantity="King factor of air",
                  published=float(factor), computed=computed_factor),
        ]  # fmt: skip
    return found


def _bucholtz() -> list[Check]:
    columns = load_table("checks/published_depolarisation_bucholtz1995").columns
    published = dict(zip(columns["wavelength_nm"], columns["depolarisation_percent"], strict=True))
    return [
        Check(
            key=f"depolarisation-bucholtz1995-{nm}",
            topic=TOPIC,
            quantity="Depolarisation ratio of air for natural light",
            conditions=f"{nm} nm",
            source=_BUCHOLTZ,
            published=float(published[nm]) / 100,
            computed=float(depolarisation_ratio(nm)),
            tolerance=3e-4,
            tolerance_reason="the paper derives it from a King factor of three decimals: ± 0.0005 there, ± 0.0003 here",
            unit="1",
            relative=False,
        )
        for nm in (450, 550)
    ]


def _forward_to_sideways(flat: FlatSky) -> list[Check]:
    columns = load_table("checks/published_depolarisation_bucholtz1995").columns
    gamma = float(columns["gamma_percent"][columns["wavelength_nm"] == 550][0]) / 100
    dipole, air = flat.forward_to_sideways()
    entry = functools.partial(
        Check, topic=TOPIC, quantity="Light scattered forward over light scattered at 90°",
        unit="1", relative=True,
    )  # fmt: skip
    return [
        entry(
            key="phase-forward-sideways-dipole",
            conditions="light scattered once, flat sky, sun 45° up, no depolarisation",
            source="common practice, no source: 1 + cos² is 2 forward and 1 sideways",
            published=2.0,
            computed=dipole,
            tolerance=1e-4,
            tolerance_reason="exact law",
        ),
        entry(
            key="phase-forward-sideways-air",
            conditions="light scattered once, flat sky, sun 45° up, depolarisation at 550 nm",
            source=f"{_BUCHOLTZ}: (2 + 2γ) / (1 + 3γ)",
            published=(2 + 2 * gamma) / (1 + 3 * gamma),
            computed=air,
            tolerance=2e-4,
            tolerance_reason="four printed digits of the depolarisation ratio",
        ),
    ]
