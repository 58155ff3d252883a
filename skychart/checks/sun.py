"""The sun outside the atmosphere: illuminance, chromaticity, size and luminance of its disc.

Sources: Darula, Kittler & Gueymard 2005, Koomen et al. 1955, and integrals of published spectra; see the table.
"""

import numpy as np

from skychart.checks.check import Check
from skychart.colour.describe import describe
from skychart.colour.integrate import tristimulus_matrix
from skychart.data.tables import load_table
from skychart.sky.sun import SOLAR_DISC_DIAMETER_DEG, SOLAR_DISC_SOLID_ANGLE_SR, solar_irradiance

TOPIC = "The sun outside the atmosphere"

_NODES_NM = np.arange(360.0, 831.0, 10.0)
_TSIS = "TSIS-1 HSRS, Coddington et al. 2021, another copy than the one used (derived here from the published spectrum)"
_E490 = "ASTM E490-00a (derived here from the published spectrum)"


def checks() -> tuple[Check, ...]:
    """Against integrals of the same and of older spectra, the luminous solar constant, and the disc."""
    return (*_same_spectrum(), *_other_spectra(), *_samples(), *_disc())


def _sun_XYZ() -> np.ndarray:
    return np.ones(len(_NODES_NM)) @ tristimulus_matrix(_NODES_NM)


def _published(spectrum: str) -> dict[str, float]:
    columns = load_table("checks/published_solar_spectra").columns
    (row,) = np.flatnonzero(columns["spectrum"] == spectrum)
    return {name: float(values[row]) for name, values in columns.items() if name != "spectrum"}


def _same_spectrum() -> list[Check]:
    published = _published("tsis1_hsrs")
    XYZ = _sun_XYZ()
    colours = describe(XYZ, XYZ[1])
    conditions = "sun at 1 au, CIE 1931 observer, 360 to 830 nm; same spectrum, another edition and bins"
    digits = "0.05 %, 1e-4 in chromaticity: bins and edition of the same spectrum"
    rows = (  # key, quantity, published, computed, tolerance, unit, relative
        ("illuminance", "Illuminance facing the sun", published["illuminance_klx"] * 1e3, XYZ[1], 5e-4, "lx", True),
        ("x", "Chromaticity x of the sun", published["x"], colours.xy[0], 1e-4, "1", False),
        ("y", "Chromaticity y of the sun", published["y"], colours.xy[1], 1e-4, "1", False),
        ("cct", "Correlated colour temperature of the sun", published["cct_k"], float(colours.cct_k), 5.0, "K", False),
        ("duv", "Duv of the sun", published["duv"], float(colours.duv), 1e-4, "1", False),
    )
    return [
        _check(f"sun-tsis-{key}", quantity, conditions, _TSIS, value, computed, tolerance, digits, unit, relative)
        for key, quantity, value, computed, tolerance, unit, relative in rows
    ]


def _other_spectra() -> list[Check]:
    e490 = _published("astm_e490")
    XYZ = _sun_XYZ()
    x, y = XYZ[:2] / XYZ.sum()
    conditions = "sun at 1 au; another spectrum (TSIS-1 here)"
    spread = "eight published spectra range from 131.8 to 134.6 klx, and over 0.0044 in x and 0.0038 in y"
    return [
        _check("sun-darula2005", "Luminous solar constant", conditions,
               "Darula, Kittler & Gueymard 2005, Solar Energy 79, 559 (one copy; agrees with ASTM E490)",
               133_334.0, XYZ[1], 0.015, spread, "lx", True),
        _check("sun-cie85", "Luminous solar constant", conditions,
               "CIE 85 (1989) (one secondary copy)", 133_800.0, XYZ[1], 0.015, spread, "lx", True),
        _check("sun-e490-x", "Chromaticity x of the sun", conditions, _E490, e490["x"], x, 0.0044, spread, "1", False),
        _check("sun-e490-y", "Chromaticity y of the sun", conditions, _E490, e490["y"], y, 0.0038, spread, "1", False),
    ]  # fmt: skip


def _samples() -> list[Check]:
    published = _published("gueymard2018")
    return [
        _check(
            f"sun-gueymard2018-{nm}",
            "Spectral irradiance of the sun",
            f"{nm} nm, sun at 1 au; mean over 5 nm here, one sample there",
            "Gueymard 2018, Solar Energy 169, 434 (read in a public copy)",
            published[f"e{nm}"],
            float(solar_irradiance(np.arange(nm - 2.0, nm + 3.0)).mean()),
            0.03,
            "single samples of solar spectra differ by 1 to 3 % with resolution",
            "W m⁻² nm⁻¹",
            True,
        )
        for nm in (500, 600)
    ]


def _disc() -> list[Check]:
    luminance = _sun_XYZ()[1] / SOLAR_DISC_SOLID_ANGLE_SR
    conditions = "outside the atmosphere"
    return [
        _check("sun-disc-radius", "Angular radius of the sun", "at 1 au",
               "radius 6.957e8 m at 1 au (derived here)", 0.26645, SOLAR_DISC_DIAMETER_DEG / 2, 0.00025,
               "the diameter is used rounded to 0.533°", "°", False),
        _check("sun-disc-solid-angle", "Solid angle of the sun", "at 1 au",
               "radius 6.957e8 m at 1 au (derived here)", 6.794e-5, SOLAR_DISC_SOLID_ANGLE_SR, 0.001,
               "the diameter is used rounded to 0.533°", "sr", True),
        _check("sun-disc-luminance-koomen1955", "Mean luminance of the solar disc", conditions,
               "Koomen et al. 1955, J. Opt. Soc. Am. 45, 483, measured (one copy)", 1.93e9, luminance, 0.04,
               "stated: 2 % for the centre of the disc, and as much again for its mean", "cd/m²", True),
        _check("sun-disc-luminance-darula2005", "Mean luminance of the solar disc", conditions,
               "133 334 lx of Darula et al. 2005 over 6.794e-5 sr (derived here)", 1.962e9, luminance, 0.015,
               "the solar spectrum: eight published ones range from 131.8 to 134.6 klx", "cd/m²", True),
    ]  # fmt: skip


def _check(
    key: str, quantity: str, conditions: str, source: str, published: float, computed: float, tolerance: float,
    reason: str, unit: str, relative: bool,
) -> Check:  # fmt: skip
    return Check(
        key, TOPIC, quantity, conditions, source, float(published), float(computed), tolerance, reason, unit, relative
    )
