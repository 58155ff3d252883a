"""Published curves that pages draw: their values where the sources, or tables made from them, give some."""

import numpy as np
import pytest

from skychart.checks.chromaticity import daylight_locus_y
from skychart.checks.illuminance import usno1987_illuminance
from skychart.checks.shape import cie_clear_sky
from skychart.checks.twilight import koomen1952_zenith_luminance


@pytest.mark.parametrize(
    ("solar_elevation_deg", "lux"),
    [(90, 1.288e5), (60, 1.031e5), (20, 2.738e4), (10, 1.112e4), (5, 4538), (0, 758.6), (-0.8, 462.4), (-3, 79.07),
     (-6, 3.412), (-8, 0.3481), (-10, 0.04211), (-12, 0.008056)],
)  # fmt: skip
def test_illuminance_by_circular_171(solar_elevation_deg: float, lux: float) -> None:
    """Four digits of an evaluation made elsewhere; 1 % where two pieces of the curve meet."""
    joint = solar_elevation_deg in (20, 5, -0.8)
    assert usno1987_illuminance(solar_elevation_deg) == pytest.approx(lux, rel=0.02 if joint else 2e-4)


def test_illuminance_is_nan_where_the_curve_is_not_given() -> None:
    """Above the zenith there is nothing, below -12 degrees the night takes part."""
    assert np.isnan(usno1987_illuminance([-12.01, 90.1])).all()


@pytest.mark.parametrize("shape", [(), (3,), (2, 2)])
def test_illuminance_keeps_the_shape_of_the_suns(shape: tuple[int, ...]) -> None:
    """Scalar, vector and grid."""
    assert usno1987_illuminance(np.full(shape, 30.0)).shape == shape


def test_koomen_1952_in_candela_per_square_metre() -> None:
    """8.0 and 15.0 candela per square foot at sunset are 86.1 and 161 cd/m²."""
    for site, luminance in (("sacramento_peak", 86.1), ("maryland", 161.0)):
        elevation, measured = koomen1952_zenith_luminance(site)
        assert measured[elevation == 0][0] == pytest.approx(luminance, rel=0.005)
        assert np.all(np.diff(measured) < 0)


@pytest.mark.parametrize(
    ("solar_elevation_deg", "arc_deg", "relative"),
    [(60, 30, 1.726149), (60, 150, 0.518914), (30, 120, 0.775409), (30, 10, 10.175422)],
)
def test_standard_clear_sky_of_type_12(solar_elevation_deg: float, arc_deg: float, relative: float) -> None:
    """Luminance over that of the zenith, evaluated elsewhere from the same coefficients, all six decimals."""
    assert cie_clear_sky(solar_elevation_deg, arc_deg) == pytest.approx(relative, abs=5.1e-7)


def test_standard_clear_sky_is_one_at_the_zenith() -> None:
    """By definition, for any sun."""
    assert [float(cie_clear_sky(sun, 90.0)) for sun in (5, 30, 80)] == pytest.approx([1, 1, 1])


@pytest.mark.parametrize(("x", "y"), [(0.34574, 0.35867), (0.31278, 0.32918), (0.27880, 0.29197), (0.24985, 0.25480)])
def test_daylight_locus_passes_through_the_daylight_illuminants(x: float, y: float) -> None:
    """5000, 6500, 10 000 and 25 000 K, to the printed digits of x."""
    assert daylight_locus_y(x) == pytest.approx(y, abs=2e-5)
