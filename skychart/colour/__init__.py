"""Colorimetry: from spectra per unit of solar irradiance to the numbers and colours of the charts."""

from skychart.colour.describe import Colours, describe
from skychart.colour.integrate import tristimulus_matrix

__all__ = ["Colours", "describe", "tristimulus_matrix"]
