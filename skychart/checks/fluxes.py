"""Fluxes through the flat molecular sky over black ground, and their balance.

Source: integrated from the tables of Natraj, Li & Yung 2009.
"""

import numpy as np

from skychart.checks.check import Check
from skychart.checks.flat import CASES, FlatSky, elevation_deg
from skychart.data.tables import load_table

TOPIC = "Fluxes of the flat molecular sky"

_SOURCE = (
    "Natraj, Li & Yung 2009, Astrophys. J. 691, 1909 (fluxes derived here from their tables of radiance, "
    "better than 1e-4)"
)
_DIFFUSE_DEPTHS = (0.1, 0.5, 1.0)
_TOP_MU0 = 0.6  # where the flux at the top, and the balance, are compared


def checks(flat: FlatSky) -> tuple[Check, ...]:
    """Diffuse flux at the ground, flux leaving at the top, and the balance of these with the direct flux."""
    columns = load_table("checks/published_natraj2009_fluxes").columns
    suns = np.unique(columns["mu0"])
    all_diffuse, all_direct = flat.down_fluxes(suns)
    all_up = flat.up_flux(_TOP_MU0)
    found = []
    for tau, mu0, up, diffuse, _ in zip(*columns.values(), strict=True):
        place = np.searchsorted(suns, mu0), CASES.index((tau, 0.0))
        our_diffuse, our_direct = float(all_diffuse[place]), float(all_direct[place])
        sun = elevation_deg(mu0)
        key = f"tau{tau:g}-sun{sun:.1f}"
        where = f"optical depth {tau:g}, black ground, sun {sun:.1f}° up (μ₀ {mu0:g}), incident normal flux π"
        if tau in _DIFFUSE_DEPTHS:
            found.append(_flux(f"flux-diffuse-{key}", "Diffuse flux reaching the ground", where, diffuse, our_diffuse))
        if mu0 == _TOP_MU0:
            our_up = float(all_up[place[1]])
            found.append(_flux(f"flux-up-{key}", "Flux leaving at the top", where, up, our_up))
            found.append(
                _balance(f"flux-balance-{key}", where, float((our_up + our_diffuse + our_direct) / (np.pi * mu0)))
            )
    return tuple(found)


def _balance(key: str, conditions: str, computed: float) -> Check:
    return Check(
        key=key,
        topic=TOPIC,
        quantity="Flux up + diffuse down + direct down over incident flux",
        conditions=conditions,
        source="conservation of energy",
        published=1.0,
        computed=computed,
        tolerance=0.001,
        tolerance_reason="exact law; 0.1 % is the limit set for the default grid before it was measured",
        unit="1",
        relative=False,
    )


def _flux(key: str, quantity: str, conditions: str, published: float, computed: float) -> Check:
    return Check(
        key=key,
        topic=TOPIC,
        quantity=quantity,
        conditions=conditions,
        source=_SOURCE,
        published=float(published),
        computed=computed,
        tolerance=0.003,
        tolerance_reason="0.3 %: limit set for the default grid; the published digits are finer",
        unit="1",
        relative=True,
    )
