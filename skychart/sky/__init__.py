"""The physics of the sky: radiance and direct light per unit solar irradiance."""

from skychart.sky.atmosphere import Atmosphere
from skychart.sky.sky import solve

__all__ = ["Atmosphere", "solve"]
