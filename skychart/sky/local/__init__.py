"""Local solver: all orders of scattering by molecules and haze, each place taken as flat under its true beam."""

from skychart.sky.local.air import FlatAir, through_peak
from skychart.sky.local.field import FlatField, solve_closure, solve_flat
from skychart.sky.local.light import FlatLight, one_scattering
from skychart.sky.local.streams import Streams

__all__ = [
    "FlatAir", "FlatField", "FlatLight", "Streams",
    "one_scattering", "solve_closure", "solve_flat", "through_peak",
]  # fmt: skip
