"""Light of the sky on level ground, a peak about the sun included."""

import numpy as np
import pytest

from skychart.sky.hemisphere import over_hemisphere, peak_missed


def phase(asymmetry):
    """The phase function of Henyey & Greenstein 1941."""
    return lambda cosine: ((1 - asymmetry**2) / (1 + asymmetry**2 - 2 * asymmetry * cosine) ** 1.5)[..., None]


def met(sun, view, azimuth):
    """What the phase function multiplies: more toward the horizon and toward the sun's side, as in thick air."""
    sun, view, azimuth = np.radians(np.broadcast_arrays(sun, view, azimuth))
    return ((1.2 + np.cos(azimuth) * np.cos(view)) / (np.sin(view) + 0.1))[..., None]


def peaked(asymmetry):
    """A sky whose radiance is that times a phase function of the angle from the sun, I alone."""

    def stokes(sun, view, azimuth):
        height, up, around = np.radians(np.broadcast_arrays(sun, view, azimuth))
        cosine = np.sin(height) * np.sin(up) + np.cos(height) * np.cos(up) * np.cos(around)
        light = met(sun, view, azimuth) * phase(asymmetry)(cosine)
        return np.stack([light, 0 * light, 0 * light], axis=-2)

    return stokes


def dense(stokes, sun_deg):
    """The same sum on 400 by 400 directions about the sun, closest near it."""
    node, weight = np.polynomial.legendre.leggauss(400)
    place = 0.5 * (node + 1)[:, None]
    distance, turn, sun = np.pi * place**2, (np.arange(400) + 0.5) * np.pi / 400, np.radians(sun_deg)
    sine = np.sin(sun) * np.cos(distance) + np.cos(sun) * np.sin(distance) * np.cos(turn)
    ahead = np.cos(sun) * np.cos(distance) - np.sin(sun) * np.sin(distance) * np.cos(turn)
    azimuth = np.arctan2(np.sin(distance) * np.sin(turn), ahead)
    up = np.maximum(sine, 0)
    light = stokes(sun_deg, np.degrees(np.arcsin(np.minimum(up, 1))), np.degrees(azimuth))[..., 0, 0]
    return float((light * up * np.sin(distance) * np.pi * place * weight[:, None] * 2 * np.pi / 400).sum())


@pytest.mark.parametrize("sun", [2.0, 10.0, 20.0, 45.0, 75.0, 90.0])
@pytest.mark.parametrize(("asymmetry", "within"), [(0.0, 1e-3), (0.7, 1e-3), (0.8, 2e-3), (0.9, 2e-3), (0.95, 2e-3)])
def test_a_peaked_sky_lights_the_ground_as_a_dense_sum_says(sun, asymmetry, within):
    """An even sky and haze 0.1 %, and peaks narrower than most haze has 0.2 %."""
    stokes = peaked(asymmetry)
    found = over_hemisphere(stokes, sun) + peak_missed(met, phase(asymmetry), sun, sun)
    assert float(found[0]) == pytest.approx(dense(stokes, sun), rel=within)


def test_without_the_sums_about_the_sun_a_peak_would_be_missed():
    """By more than 3 % for an asymmetry of 0.9 at some suns: what is added is no trifle."""
    stokes, suns = peaked(0.9), np.array([10.0, 20.0, 45.0, 75.0])
    assert np.abs(peak_missed(met, phase(0.9), suns, suns) / over_hemisphere(stokes, suns)).max() > 0.03


def test_many_suns_are_as_one_after_another():
    """Any shape of suns, in its order."""
    suns = np.linspace(-5, 90, 14).reshape(2, 7)
    found = peak_missed(met, phase(0.7), suns, suns + 0.1)
    assert found.shape == (2, 7, 1)
    each = [[peak_missed(met, phase(0.7), sun, sun + 0.1)[0] for sun in row] for row in suns]
    np.testing.assert_allclose(found[..., 0], each, rtol=1e-12)
