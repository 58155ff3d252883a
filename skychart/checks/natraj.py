"""The polarised light of the flat molecular sky against the tables of Natraj, Li & Yung 2009.

RMS over all rows of the table, the worst degree of polarisation, and some rows one by one.
"""

import numpy as np
from numpy.typing import NDArray

from skychart.checks.check import Check
from skychart.checks.flat import RMS_LIMIT, FlatSky, elevation_deg

TOPIC = "Flat molecular sky, all orders, polarised"
SOURCE = (
    "Natraj, Li & Yung 2009, Astrophys. J. 691, 1909, recomputing Coulson, Dave & Sekera 1960 "
    "(machine-readable copy, checked by conservation and an independent calculation)"
)

POLARISATION_LIMIT = 0.01

_ROWS = (  # Stokes component, optical depth, albedo, mu0, mu, azimuth
    ("I", 0.02, 0.0, 0.1, 1.0, 0),
    ("I", 0.05, 0.0, 0.2, 0.02, 0),
    ("I", 0.1, 0.0, 0.1, 0.1, 180),
    ("I", 0.1, 0.0, 0.6, 0.64, 0),
    ("I", 0.25, 0.0, 0.2, 1.0, 0),
    ("I", 0.25, 0.8, 0.8, 0.4, 90),
    ("I", 0.5, 0.0, 0.1, 1.0, 0),
    ("I", 0.5, 0.0, 0.92, 0.52, 180),
    ("I", 1.0, 0.0, 0.6, 0.84, 60),
    ("Q", 0.1, 0.0, 0.2, 1.0, 0),
    ("Q", 0.5, 0.0, 0.4, 0.2, 90),
    ("U", 0.1, 0.0, 0.6, 0.64, 60),
    ("U", 0.5, 0.0, 0.8, 0.4, 120),
)


def rms(values: NDArray[np.float64]) -> float:
    """Root of the mean square of all entries."""
    return float(np.sqrt(np.mean(np.square(values))))


def polarisation(stokes: NDArray[np.float64]) -> NDArray[np.float64]:
    """Degree of linear polarisation of Stokes vectors, shape (..., 3) to (...)."""
    return np.hypot(stokes[..., 1], stokes[..., 2]) / stokes[..., 0]


def checks(flat: FlatSky) -> tuple[Check, ...]:
    """RMS of I over the rows of each optical depth, of Q and U and worst polarisation over all, and single rows."""
    columns, published, computed = flat.table_rows()
    error = (computed - published) / published[:, :1]
    intensity = []
    for tau, limit in RMS_LIMIT.items():
        rows = columns["tau"] == tau
        conditions = f"all {rows.sum()} rows of optical depth {tau:g}"
        intensity.append(
            _aggregate(
                f"rms-I-tau{tau:g}", "RMS difference of I, as a share of I", conditions, rms(error[rows, 0]), limit
            )
        )
    conditions = f"all {len(published)} rows"
    worst = float(np.abs(polarisation(computed) - polarisation(published)).max())
    return (
        *intensity,
        *(
            _aggregate(
                f"rms-{name}",
                f"RMS difference of {name}, as a share of I",
                conditions,
                rms(error[:, component]),
                min(RMS_LIMIT.values()),
            )
            for component, name in ((1, "Q"), (2, "U"))
        ),
        _aggregate(
            "polarisation", "Greatest difference of the degree of polarisation", conditions, worst, POLARISATION_LIMIT
        ),
        *(_row(flat, *row) for row in _ROWS),
    )


def _aggregate(key: str, quantity: str, conditions: str, computed: float, tolerance: float) -> Check:
    return Check(
        key=f"natraj2009-{key}",
        topic=TOPIC,
        quantity=quantity,
        conditions=conditions,
        source=SOURCE,
        published=0.0,
        computed=computed,
        tolerance=tolerance,
        tolerance_reason="the tables print eight decimals; limit set for the default grid before it was measured",
        unit="1",
        relative=False,
    )


def _row(flat: FlatSky, component: str, tau: float, albedo: float, mu0: float, mu: float, phi_deg: int) -> Check:
    columns, published, computed = flat.table_rows()
    wanted = {"tau": tau, "albedo": albedo, "mu0": mu0, "mu": mu, "phi_deg": phi_deg}
    (row,) = np.flatnonzero(np.all([columns[name] == value for name, value in wanted.items()], axis=0))
    place = "IQU".index(component)
    sun, view = elevation_deg(mu0), elevation_deg(mu)
    return Check(
        key=f"natraj2009-{component}-tau{tau:g}-albedo{albedo:g}-sun{sun:.1f}-view{view:.1f}-azimuth{phi_deg}",
        topic=TOPIC,
        quantity=f"{component}, as π × radiance over irradiance",
        conditions=(
            f"optical depth {tau:g}, ground albedo {albedo:g}, sun {sun:.1f}° up (μ₀ {mu0:g}), "
            f"view {view:.1f}° up (μ {mu:g}), {phi_deg}° from the sun's azimuth"
        ),
        source=SOURCE,
        published=float(published[row, place]),
        computed=float(computed[row, place]),
        tolerance=3 * RMS_LIMIT[tau] * float(published[row, 0]),
        tolerance_reason=f"three times the RMS limit of {RMS_LIMIT[tau]:.1%} of I for this optical depth",
        unit="1",
        relative=False,
    )
