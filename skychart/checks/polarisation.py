"""Maximum polarisation and neutral points of the flat molecular sky.

Source: derived from the tables of Natraj, Li & Yung 2009.
"""

import numpy as np
from numpy.typing import NDArray

from skychart.checks.check import Check
from skychart.checks.flat import CASES, MU0, FlatSky, elevation_deg
from skychart.checks.natraj import polarisation
from skychart.data.tables import load_table

TOPIC = "Polarisation of the flat molecular sky"

NEUTRAL_POINT_LIMIT_DEG = 0.5
MAXIMUM_LIMIT = 0.01

_SOURCE = "Natraj, Li & Yung 2009, Astrophys. J. 691, 1909 ({} derived here from their tables of I, Q, U)"
_MAXIMA = (  # optical depth, albedo, mu0
    (0.02, 0.0, 0.6), (0.1, 0.0, 0.2), (0.25, 0.0, 0.6), (1.0, 0.0, 1.0), (0.25, 0.8, 0.4),
)  # fmt: skip
_POINTS = (  # optical depth, mu0, name
    (0.1, 0.2, "babinet"), (0.1, 0.2, "arago"), (0.1, 0.6, "brewster"), (0.25, 0.4, "babinet"), (0.25, 0.1, "arago"),
    (1.0, 0.6, "brewster"),
)  # fmt: skip
_ARC_STEP_DEG = 1.0
_POINT_TITLES = {
    "babinet": "Babinet point, distance above the sun",
    "brewster": "Brewster point, distance below the sun",
    "arago": "Arago point, distance above the antisolar point",
}

Maxima = dict[tuple[float, float, float], float]
Points = dict[tuple[float, float, str], float]


def checks(flat: FlatSky) -> tuple[Check, ...]:
    """Worst difference over each derived table, and some of its entries one by one."""
    maximum, maximum_computed = maxima(flat)
    point, point_computed = neutral_points(flat)
    maximum_worst = float(np.max([abs(maximum_computed[key] - value) for key, value in maximum.items()]))
    point_worst = float(np.max([abs(point_computed[key] - value) for key, value in point.items()]))
    return (
        _maximum("all", f"greatest difference, all {len(maximum)} entries", 0.0, maximum_worst),
        *(
            _maximum(
                f"tau{tau:g}-albedo{albedo:g}-sun{elevation_deg(mu0):.1f}",
                f"optical depth {tau:g}, ground albedo {albedo:g}, sun {elevation_deg(mu0):.1f}° up",
                maximum[tau, albedo, mu0],
                maximum_computed[tau, albedo, mu0],
            )
            for tau, albedo, mu0 in _MAXIMA
        ),
        _neutral_point("all", "Neutral points", f"greatest difference, all {len(point)} entries", 0.0, point_worst),
        *(
            _neutral_point(
                f"{name}-tau{tau:g}-sun{elevation_deg(mu0):.1f}",
                _POINT_TITLES[name],
                f"optical depth {tau:g}, black ground, sun {elevation_deg(mu0):.1f}° up",
                point[tau, mu0, name],
                point_computed[tau, mu0, name],
            )
            for tau, mu0, name in _POINTS
        ),
    )


def maxima(flat: FlatSky) -> tuple[Maxima, Maxima]:
    """Published and computed greatest polarisation over the published directions, by (tau, albedo, mu0)."""
    columns = load_table("checks/published_natraj2009_maximum_polarisation").columns
    published = {
        (float(tau), float(albedo), float(mu0)): float(value)
        for tau, albedo, mu0, value in zip(*columns.values(), strict=True)
        if (tau, albedo) in CASES
    }
    degree = polarisation(np.moveaxis(flat.grid, 3, -1)).max(axis=(1, 2))
    computed = {
        (tau, albedo, float(mu0)): float(degree[sun, case])
        for case, (tau, albedo) in enumerate(CASES)
        for sun, mu0 in enumerate(MU0)
    }
    return published, computed


def neutral_points(flat: FlatSky) -> tuple[Points, Points]:
    """Published and computed distances [degrees] of the neutral points, by (tau, mu0, name); nan where none."""
    columns = load_table("checks/published_natraj2009_neutral_points").columns
    published = {
        (float(tau), float(mu0), str(name)): float(distance)
        for tau, mu0, name, distance in zip(*columns.values(), strict=True)
    }
    # Along the principal plane: 0 is the horizon below the sun, 90 the zenith, 180 the horizon opposite.
    arc_deg = np.arange(_ARC_STEP_DEG, 180.0, _ARC_STEP_DEG)
    mu = np.sin(np.radians(arc_deg))
    computed: Points = {}
    for mu0 in sorted({mu0 for _, mu0, _ in published}):
        second = flat.stokes(mu0, mu, np.where(arc_deg <= 90, 0.0, 180.0))[:, 1]
        sun = float(elevation_deg(mu0))
        for tau in sorted({tau for tau, _, _ in published}):
            ratio = second[:, CASES.index((tau, 0.0))]
            above, below = arc_deg > sun, (arc_deg < sun)[::-1]
            computed[tau, mu0, "babinet"] = _first_rise(arc_deg[above], ratio[above]) - sun
            computed[tau, mu0, "brewster"] = sun - _first_rise(arc_deg[::-1][below], ratio[::-1][below])
            computed[tau, mu0, "arago"] = 180 + sun - _first_rise(arc_deg[::-1], ratio[::-1])
    return published, computed


def _first_rise(place: NDArray[np.float64], value: NDArray[np.float64]) -> float:
    """Place where ``value`` first goes from negative to positive, by linear interpolation; nan if it never does."""
    rises = np.flatnonzero((value[:-1] < 0) & (value[1:] >= 0))
    if len(rises) == 0:
        return float("nan")
    i = rises[0]
    return float(place[i] + (place[i + 1] - place[i]) * value[i] / (value[i] - value[i + 1]))


def _maximum(key: str, conditions: str, published: float, computed: float) -> Check:
    return Check(
        key=f"maximum-polarisation-{key}",
        topic=TOPIC,
        quantity="Greatest degree of linear polarisation in the sky",
        conditions=conditions,
        source=_SOURCE.format("maximum over the published directions"),
        published=published,
        computed=computed,
        tolerance=MAXIMUM_LIMIT,
        tolerance_reason="limit set for the default grid before it was measured; the derived digits are finer",
        unit="1",
        relative=False,
    )


def _neutral_point(key: str, quantity: str, conditions: str, published: float, computed: float) -> Check:
    return Check(
        key=f"neutral-point-{key}",
        topic=TOPIC,
        quantity=quantity,
        conditions=conditions,
        source=_SOURCE.format("zeros of Q by a spline in elevation"),
        published=published,
        computed=computed,
        tolerance=NEUTRAL_POINT_LIMIT_DEG,
        tolerance_reason="the derivation is good to 0.1° typically, coarser where the published directions lie apart",
        unit="°",
        relative=False,
    )
