"""Questions to the reader's scripts, with the answers of the Python side and of publications."""

import numpy as np

from skychart.charts.exposure import Exposure
from skychart.charts.numbers import fixed, kelvin, significant, spaced
from skychart.charts.reader import READER_SUNS_DEG, reader_constants, reader_sky
from skychart.charts.reading import polarisation
from skychart.charts.splines import spline
from skychart.charts.survey import survey
from skychart.colour.chromaticity import xyz_of_xy
from skychart.colour.describe import describe
from skychart.colour.differences import delta_e_2000
from skychart.colour.integrate import tristimulus_matrix
from skychart.colour.observers import D65_XY
from skychart.config import AirSettings
from skychart.export.reader_data import pack, reader_script, varints
from tests.charts.peaked_sky import PeakedSky

OBSERVER = "cie-1931-2"

# Sharma, Wu & Dalal 2005, Color Res. Appl. 30, 21-30, Table 1, pairs 1, 17, 21 and 34: L* a* b* twice, CIEDE2000.
SHARMA = (
    ((50, 2.6772, -79.7751), (50, 0, -82.7485), 2.0425),
    ((50, 2.5, 0), (73, 25, -18), 27.1492),
    ((22.7233, 20.0904, -46.6940), (23.0331, 14.9730, -42.5619), 2.0373),
    ((2.0776, 0.0795, -1.1350), (0.9033, -0.0636, -0.5514), 0.9082),
)


def all_cases() -> dict:
    """Everything as plain lists and numbers; nan as None."""
    rng = np.random.default_rng(20)
    return _plain(
        {
            "constants": reader_constants(OBSERVER),
            "numbers": _numbers(rng),
            "colours": _colours(rng),
            "differences": {"published": SHARMA, "computed": _differences(rng)},
            "painted": _painted(rng),
            "polarisation": _polarisation(rng),
            "splines": _splines(rng),
            "packed": _packed(rng),
            "sky": _sky(rng),
        }
    )


def _numbers(rng):
    values = [0.0, -0.0004, 1e-5, 9.99951, 99995.4, 12345.678, 0.00012345, -27.5001, *(10 ** rng.uniform(-8, 8, 200))]
    return [
        [value, fixed(value, 3), significant(value, 4), kelvin(value), spaced(significant(value, 3))]
        for value in map(float, values)
    ]


def _some_colours(rng, count):
    """Colours of skies, lamps and of no light at all, over nine decades of luminance."""
    xy = np.stack([rng.uniform(0.15, 0.6, count), rng.uniform(0.1, 0.45, count)], axis=-1)
    return xyz_of_xy(xy) * 10 ** rng.uniform(-4, 5, (count, 1))


def _colours(rng):
    XYZ = _some_colours(rng, 300)
    white = 10 ** rng.uniform(-4, 5, 300)
    found = describe(XYZ, white)
    assert 50 < np.isfinite(found.cct_k).sum() < 250, "both kinds are tested"
    keys = ("XYZ", "xy", "uv_prime", "cct_k", "duv", "rgb", "in_gamut", "ev100", "srgb_hex")
    return {"white": white, **{key: getattr(found, key) for key in keys}}


def _differences(rng):
    first = _some_colours(rng, 100)
    second = first * rng.uniform(0.7, 1.4, (100, 3))
    white = xyz_of_xy(D65_XY) * 50_000
    return {"first": first, "second": second, "white": white, "delta": delta_e_2000(first, second, white)}


def _painted(rng):
    XYZ = _some_colours(rng, 400)
    shown = Exposure("fixed", "", 2000.0).screen(XYZ)
    return {"XYZ": XYZ, "white": 2000.0, "bytes": np.rint(255 * shown).astype(int)}


def _polarisation(rng):
    stokes = np.stack([np.ones(50), *rng.uniform(-0.7, 0.7, (2, 50))], axis=-1)
    degree, angle = polarisation(stokes)
    return {"ratios": stokes[:, 1:], "degree": degree, "angle": angle}


def _splines(rng):
    nodes = np.array([0, 0.5, 2, 3, 7, 7.5, 20.0])
    points = np.append(rng.uniform(0, 20, 40), nodes)
    return [
        {"nodes": nodes, "flat": flat, "points": points, "weights": spline(nodes, points, flat_ends=flat)}
        for flat in (False, True)
    ]


def _packed(rng):
    whole = np.array([0, -1, 1, 63, -64, 64, 8191, -8192, 8192, 2**33 - 1, -(2**33)])
    array = np.cumsum(rng.normal(size=(4, 5, 6, 3)), axis=1)
    return {"integers": whole, "varints": list(varints(whole)), "array": array, "bytes": list(pack(array, 0.01))}


def directions_about(suns, apparent, rng):
    """Directions above the horizon, two of five within 15° of the sun: view elevation and relative azimuth [deg]."""
    view = np.degrees(np.arcsin(rng.random(len(suns))))
    azimuth = rng.uniform(0, 180, len(suns))
    sun, distance, turn = (
        np.radians(apparent),
        np.radians(15 * rng.random(len(suns))),
        2 * np.pi * rng.random(len(suns)),
    )
    upward = np.sin(sun) * np.cos(distance) + np.cos(sun) * np.sin(distance) * np.cos(turn)
    around = np.arctan2(np.sin(turn) * np.sin(distance) * np.cos(sun), np.cos(distance) - np.sin(sun) * upward)
    near = (rng.random(len(suns)) < 0.4) & (upward >= 0)
    return (
        np.where(near, np.degrees(np.arcsin(np.clip(upward, 0, 1))), view),
        np.where(near, np.abs(np.degrees(around)), azimuth),
        near,
    )


def exact_answers(sky, suns, view, azimuth):
    """What the reader should say, asked from the sky itself: XYZ, Q/I and U/I, card and beam, for each direction."""
    matrix = tristimulus_matrix(sky.wavelength_nm, OBSERVER)
    stokes = sky.stokes(suns, view, azimuth) @ matrix
    diffuse, direct = sky.ground_irradiance(suns)
    return {
        "asked": np.stack([suns, view, azimuth], axis=-1),
        "XYZ": stokes[:, 0],
        "polarised": stokes[:, 1:, 1] / stokes[:, :1, 1],
        "card": (diffuse + direct) @ matrix / np.pi,
        "beam": sky.beam(suns) @ matrix,
        "apparent": sky.apparent_elevation_deg(suns),
    }


def _sky(rng):
    sky = PeakedSky(AirSettings(name="peaked"))
    suns = np.round(rng.uniform(-12, 90, 300), 2)
    view, azimuth, near = directions_about(suns, sky.apparent_elevation_deg(suns), rng)
    assert near.sum() > 60
    script = reader_script(reader_sky(sky, survey(sky, READER_SUNS_DEG, OBSERVER))).decode("ascii")
    radiance = sky.stokes(30.0, 45.0, 90.0)[0]
    return {"script": script, "spectrum_wavelengths": sky.wavelength_nm, "spectrum": radiance} | exact_answers(
        sky, suns, view, azimuth
    )


def _plain(value):
    if isinstance(value, dict):
        return {key: _plain(entry) for key, entry in value.items()}
    if isinstance(value, np.ndarray):
        return _plain(value.tolist())
    if isinstance(value, (list, tuple)):
        return [_plain(entry) for entry in value]
    if isinstance(value, np.generic):
        return _plain(value.item())
    return None if isinstance(value, float) and np.isnan(value) else value
