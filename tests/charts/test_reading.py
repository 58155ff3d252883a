"""A reading has the fixed fields, the shape of its angles, and polarisation by the stated convention."""

from dataclasses import fields

import numpy as np
import pytest

from skychart.charts.reading import Reading, polarisation, reading

KEYS = [
    *("atmosphere", "solar_elevation_deg", "view_elevation_deg", "relative_azimuth_deg", "luminance_cd_m2", "XYZ"),
    *("xy", "uv_prime", "cct_k", "duv", "rgb", "srgb_hex", "in_gamut", "polarisation_degree"),
    "polarisation_angle_deg",
]


def test_fields_are_the_fixed_keys():
    """Commands, sheets and files hand out these names in this order."""
    assert [field.name for field in fields(Reading)] == KEYS


@pytest.mark.parametrize("shape", [(), (4,), (2, 3)])
def test_shape_follows_the_angles(sky, shape):
    """Scalars, vectors and grids of angles come back in their shape."""
    result = reading(sky, 10.0, np.full(shape, 45.0), 90.0)
    assert result.luminance_cd_m2.shape == result.srgb_hex.shape == result.polarisation_degree.shape == shape
    assert result.XYZ.shape == result.rgb["acescg"].shape == (*shape, 3)
    assert result.in_gamut["srgb"].shape == shape


def test_luminance_is_the_second_tristimulus_value(sky):
    """Y in cd/m² and chromaticity follow from the same numbers."""
    result = reading(sky, 30.0, [5.0, 60.0], 90.0)
    np.testing.assert_allclose(result.luminance_cd_m2, result.XYZ[:, 1])
    np.testing.assert_allclose(result.xy, result.XYZ[:, :2] / result.XYZ.sum(axis=1, keepdims=True))


@pytest.mark.parametrize(
    ("stokes", "degree", "angle"),
    [((2, 1, 0), 0.5, 0), ((2, -1, 0), 0.5, 90), ((1, 0, 1), 1, 45), ((1, 0, -1), 1, -45)],
)
def test_polarisation_of_plain_states(stokes, degree, angle):
    """Q > 0 is horizontal; the angle is counted from there."""
    found = polarisation(np.array(stokes, float))
    assert found[0] == pytest.approx(degree)
    assert abs(found[1]) == pytest.approx(abs(angle))
    assert angle in (0, 90) or np.sign(found[1]) == np.sign(angle)


def test_what_rounding_leaves_is_not_told():
    """In the sun's vertical U is 0 by symmetry: the vector is level or upright, not turned by 1e-15 to either side."""
    degree, angle = polarisation(np.array([[1, 0.2, 3e-17], [1, -0.2, -3e-17], [1, 4e-16, 1e-17]]))
    assert angle[:2].tolist() == [0, 90]
    assert degree[2] == 0
    assert np.isnan(angle[2])


def test_unpolarised_light_has_no_angle():
    """The angle is nan, the degree 0, also where there is no light."""
    degree, angle = polarisation(np.array([[1.0, 0, 0], [0, 0, 0]]))
    assert (degree == 0).all()
    assert np.isnan(angle).all()
