"""The solver with its default grid against everything published, row by row.

Flat: Natraj V., Li K.-F., Yung Y. L. 2009, Astrophys. J. 691, 1909, doi:10.1088/0004-637X/691/2/1909, recomputing
Coulson, Dave & Sekera 1960; every row of `checks/rayleigh_sky_natraj2009` (tau 0.02 to 1, albedo 0, 0.25, 0.8), and
what was derived from the same tables. Sphere: every row of `checks/molecular_sphere_mc`, an independent Monte Carlo.
The limits are those agreed before anything was measured.
"""

import numpy as np
import pytest

from skychart.checks.flat import CASES, MU, MU0, PHI_DEG, RMS_LIMIT, FlatSky
from skychart.checks.natraj import polarisation, rms
from skychart.checks.polarisation import maxima, neutral_points
from skychart.checks.sphere import RMS_LIMIT as SPHERE_RMS_LIMIT
from skychart.checks.sphere import SphereRows, rms_beyond_noise, sphere_rows
from skychart.data.tables import load_table


@pytest.fixture(scope="module")
def flat() -> FlatSky:
    """The thirteen published cases, solved together."""
    return FlatSky()


@pytest.fixture(scope="module")
def sphere() -> SphereRows:
    """The benchmark air on the round earth beside the Monte Carlo."""
    return sphere_rows()


def test_all_rows_of_natraj_li_and_yung_2009_are_compared(flat: FlatSky) -> None:
    """5410 rows, each of its thirteen cases among them."""
    columns, published, computed = flat.table_rows()
    assert published.shape == computed.shape == (5410, 3)
    assert set(zip(columns["tau"], columns["albedo"], strict=True)) == set(CASES)


@pytest.mark.parametrize("tau", RMS_LIMIT)
def test_radiance_in_all_rows_of_natraj_li_and_yung_2009(flat: FlatSky, tau: float) -> None:
    """RMS of I within 0.2 % to tau 0.1, 0.3 % to 0.25, 0.7 % at 0.5, 1.3 % at 1; Q and U within the same share of I."""
    columns, published, computed = flat.table_rows()
    rows = columns["tau"] == tau
    error = ((computed - published) / published[:, :1])[rows]
    assert np.all([rms(error[:, component]) <= RMS_LIMIT[tau] for component in range(3)])


def test_polarisation_in_all_rows_of_natraj_li_and_yung_2009(flat: FlatSky) -> None:
    """Degree of linear polarisation within 0.01 everywhere."""
    _, published, computed = flat.table_rows()
    np.testing.assert_allclose(polarisation(computed), polarisation(published), rtol=0, atol=0.01)


@pytest.mark.parametrize("mu0", [0.2, 0.6, 1.0])
def test_fluxes_integrated_from_natraj_li_and_yung_2009(flat: FlatSky, mu0: float) -> None:
    """All twelve entries: each flux within 0.3 %, up + down + direct within 0.1 % of what falls in."""
    table = load_table("checks/published_natraj2009_fluxes").columns
    rows = table["mu0"] == mu0
    cases = [CASES.index((tau, 0.0)) for tau in table["tau"][rows]]
    assert len(cases) == 4
    diffuse, direct = (flux[0, cases] for flux in flat.down_fluxes(np.array([mu0])))
    up = flat.up_flux(mu0)[cases]
    np.testing.assert_allclose((up + diffuse + direct) / (np.pi * mu0), 1, rtol=0.001)
    np.testing.assert_allclose(up, table["flux_up_top"][rows], rtol=0.003)
    np.testing.assert_allclose(diffuse, table["flux_down_diffuse"][rows], rtol=0.003)
    np.testing.assert_allclose(direct, table["flux_down_direct"][rows], rtol=0.003, atol=5e-6)


def test_maximum_polarisation_derived_from_natraj_li_and_yung_2009(flat: FlatSky) -> None:
    """Greatest polarisation over the published directions within 0.01 in all 78 entries of the thirteen cases."""
    published, computed = maxima(flat)
    assert len(published) == 78
    assert {key: computed[key] for key in published} == pytest.approx(published, abs=0.01)


def test_neutral_points_derived_from_natraj_li_and_yung_2009(flat: FlatSky) -> None:
    """Babinet, Brewster and Arago points within 0.5 degrees in all 83 entries over black ground."""
    published, computed = neutral_points(flat)
    assert len(published) == 83
    assert {name for _, _, name in published} == {"babinet", "brewster", "arago"}
    assert {key: computed[key] for key in published} == pytest.approx(published, abs=0.5)


def test_neutral_points_close_up_on_the_sun_as_the_air_thins(flat: FlatSky) -> None:
    """Babinet's distance falls steadily from tau 1 to 0.02, roughly with the cube root below 0.25."""
    _, computed = neutral_points(flat)
    distance = np.array([computed[tau, 0.6, "babinet"] for tau in (0.02, 0.05, 0.1, 0.15, 0.25, 0.5, 1.0)])
    assert np.all(np.diff(distance) > 0)
    assert distance[0] / distance[2] == pytest.approx((0.02 / 0.1) ** (1 / 3), rel=0.05)


@pytest.mark.parametrize("tau", RMS_LIMIT)
def test_sun_and_eye_may_change_places(flat: FlatSky, tau: float) -> None:
    """Reciprocity over black ground: mu I(mu, mu0) = mu0 I(mu0, mu), as exact in the tables, within the RMS limit."""
    common = [0.1, 0.2, 0.4, 0.92, 1.0]
    suns, views = np.searchsorted(MU0, common), np.searchsorted(MU, common)
    intensity = flat.grid[np.ix_(suns, views)][..., 0, CASES.index((tau, 0.0))]
    weighted = intensity * np.array(common)[:, None]
    assert rms(weighted / np.swapaxes(weighted, 0, 1) - 1) <= RMS_LIMIT[tau]


def test_light_scattered_once_follows_the_closed_formula(flat: FlatSky) -> None:
    """I = p/4 mu0/(mu0 - mu) (exp(-tau/mu0) - exp(-tau/mu)), p = 3/4 (1 + cos²), within 0.1 %.

    On paths of up to five optical depths: on longer ones even a planet of a thousand earth radii is round.
    """
    mu0, mu, phi = np.meshgrid(MU0[MU0 < 1], MU[MU >= 0.06], np.radians([0.0, 60.0, 180.0]), indexing="ij")
    mu0 = np.where(mu0 == mu, mu0 * (1 + 1e-9), mu0)
    cosine = mu0 * mu + np.sqrt((1 - mu0**2) * (1 - mu**2)) * np.cos(phi)
    tau = np.array([case[0] for case in CASES[:7]])
    elevations = [np.degrees(np.arcsin(value)) for value in (mu0, mu)]
    computed = np.pi * flat.sky.single(*elevations, np.degrees(phi))[..., 0, :7]
    mu0, mu, phase = mu0[..., None], mu[..., None], 0.75 * (1 + cosine[..., None] ** 2)
    expected = phase / 4 * mu0 / (mu0 - mu) * (np.exp(-tau / mu0) - np.exp(-tau / mu))
    short = np.broadcast_to(tau / np.minimum(mu0, mu) <= 5, expected.shape)
    assert short.sum() > 1500
    np.testing.assert_allclose(computed[short], expected[short], rtol=1e-3)


def test_the_other_side_of_the_sun_is_its_mirror_image(flat: FlatSky) -> None:
    """Turning the sign of the azimuth changes nothing but the sign of U."""
    right, left = (flat.stokes(0.6, MU[:, None], sign * PHI_DEG) for sign in (1, -1))
    np.testing.assert_allclose(left * np.array([1, 1, -1])[:, None], right, rtol=1e-9, atol=1e-12)
    assert np.abs(right[..., 2, :]).max() > 0.01


@pytest.mark.parametrize("sun", SPHERE_RMS_LIMIT)
def test_radiance_on_the_sphere_in_all_rows_of_the_monte_carlo(sphere: SphereRows, sun: float) -> None:
    """RMS of I, noise taken out: 0.4 % at 30 and 5 degrees, 0.6 % at 0, 1.2 % at -4, 3 % at -8; 18 rows each."""
    rows = sphere.solar_elevation_deg == sun
    assert rows.sum() == 18
    assert rms_beyond_noise(sphere.error()[rows, 0], sphere.noise()[rows, 0]) <= SPHERE_RMS_LIMIT[sun]


def test_polarisation_on_the_sphere_in_all_rows_of_the_monte_carlo(sphere: SphereRows) -> None:
    """Q and U within 1 % of I, three standard errors aside."""
    assert len(sphere.expected) == 90
    assert np.all(np.abs(sphere.error()[:, 1:]) <= 0.01 + 3 * sphere.noise()[:, 1:])
