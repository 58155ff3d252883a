"""One walk through all that is handed out: wherever a number stands, it is the one that `read` gives.

Air without haze is solved once and all its pages are made, with the sun up and down; each leg opens one kind of page or
file by a reader of its own and holds it against the sky itself, to the digits that are printed.
"""

import base64
import dataclasses
import io
import json
import re
import zipfile

import numpy as np
import OpenEXR
import pytest

from skychart.charts.direction import direction_sheet
from skychart.charts.display import display_sheet
from skychart.charts.dome_map import dome_map, level_XYZ
from skychart.charts.light import light_sheet
from skychart.charts.overview import overview
from skychart.charts.reading import reading
from skychart.charts.sheet import elevation_sheet
from skychart.charts.survey import DIRECTIONS, survey
from skychart.colour.integrate import LUMINOUS_EFFICACY, tristimulus_matrix
from skychart.colour.observers import colour_matching_functions
from skychart.config import AirSettings, Settings
from skychart.export.patches import PATCH_PIXELS
from skychart.library import colour_science
from skychart.pages.display_page import display_files
from skychart.pages.light_page import light_files
from skychart.pages.reader_page import reader_data_files
from skychart.pages.render import direction_files, sheet_files, start_files
from skychart.pages.site import make_atlas
from skychart.terminal import reading_json, reading_text
from tests.export.test_exchange import cgats
from tests.export.test_reader_data import unpacked
from tests.printed import all_of, assert_says, body_of, opened, plain, rows_of, text_of, words_of

SUNS_DEG = (-3.0, 30.0)
STEMS = ("sun-03", "sun+30")
UP = SUNS_DEG.index(30.0)
OBSERVER = "cie-1931-2"
PLANES = ["facing", "level", "toward", "beside", "away", "underside"]
PARTS = ["sun", "shadow", "both"]
INTERPOLATED = 2e-3
SPECTRUM = 5e-3

both_suns = pytest.mark.parametrize("sun", range(len(SUNS_DEG)), ids=STEMS)


@pytest.fixture(scope="module")
def found(default_sky):
    """The survey that all pages are made from."""
    return survey(default_sky, SUNS_DEG, OBSERVER)


@pytest.fixture(scope="module")
def sheets(found):
    """The elevation sheets."""
    return [elevation_sheet(found, sun) for sun in range(len(SUNS_DEG))]


@pytest.fixture(scope="module")
def light(found):
    """The light sheet."""
    return light_sheet(found)


@pytest.fixture(scope="module")
def files(found, sheets, light, default_reader):
    """Every page of the atmosphere with its files, by the path inside its folder."""
    atlas = make_atlas(Settings(atmospheres=(AirSettings(),), solar_elevations_deg=SUNS_DEG))
    made = start_files(atlas, overview(found)) | light_files(atlas, light)
    made |= display_files(atlas, display_sheet(found)) | reader_data_files(default_reader)
    for chart, own in zip(sheets, light.suns, strict=True):
        made |= sheet_files(atlas, chart, own)
    for view in DIRECTIONS:
        made |= direction_files(atlas, direction_sheet(found, view))
    return {path.removeprefix("molecular/"): data for path, data in made.items()}


@pytest.fixture(scope="module")
def read(default_sky, sheets):
    """What `read` gives for the directions of each sheet, asked from the sky anew."""
    angles = [(chart.readings.view_elevation_deg, chart.readings.relative_azimuth_deg) for chart in sheets]
    return [reading(default_sky, sun, *places) for sun, places in zip(SUNS_DEG, angles, strict=True)]


@pytest.fixture(scope="module")
def ground(default_sky):
    """Light on the ground, asked from the sky: sky, sun and beam [lx], each (sun, XYZ)."""
    matrix = tristimulus_matrix(default_sky.wavelength_nm, OBSERVER)
    diffuse, direct = default_sky.ground_irradiance(np.array(SUNS_DEG))
    return diffuse @ matrix, direct @ matrix, default_sky.beam(np.array(SUNS_DEG)) @ matrix


@pytest.fixture(scope="module")
def archives(files):
    """The files in the archive of each elevation sheet."""
    opened_ones = [zipfile.ZipFile(io.BytesIO(files[f"{stem}-files.zip"])) for stem in STEMS]
    return [{name: archive.read(name) for name in archive.namelist()} for archive in opened_ones]


def by_column(found):
    """A reading's numbers by the column names of a sheet's table, each with the digits it is written to."""
    columns = {"luminance_cd_m2": found.luminance_cd_m2, "cct_k": found.cct_k, "duv": found.duv}
    columns |= dict(zip("XYZ", found.XYZ.T, strict=True)) | dict(zip("xy", found.xy.T, strict=True))
    columns |= dict(zip(("u_prime", "v_prime"), found.uv_prime.T, strict=True))
    columns |= {f"{space}_{c}": values[:, i] for space, values in found.rgb.items() for i, c in enumerate("rgb")}
    return columns | {
        "ev100": np.log2(found.luminance_cd_m2 * 100 / 12.5),
        "polarisation_degree": found.polarisation_degree,
        "polarisation_angle_deg": found.polarisation_angle_deg,
    }


def kelvin_digits(value):
    """Colour temperatures have 4 digits, 3 from 10 000 K and 2 from 30 000 K."""
    return 2 if value >= 30_000 else 3 if value >= 10_000 else 4


def index_of(chart, view, azimuth):
    """The row of a direction [deg] in a sheet."""
    is_it = (chart.readings.view_elevation_deg == view) & (chart.readings.relative_azimuth_deg == azimuth)
    return int(np.flatnonzero(is_it)[0])


@both_suns
def test_json_of_a_sheet(files, read, sun):
    """Every key of every direction, blocks around the sun among them, to four digits; codes and flags as they are."""
    told, own = json.loads(files[f"{STEMS[sun]}.json"])["readings"], dataclasses.asdict(read[sun])
    assert told.keys() == own.keys()
    assert len(told["XYZ"]) == (57 if sun == UP else 49)
    assert told["atmosphere"] == "molecular"
    assert told["srgb_hex"] == own["srgb_hex"].tolist()
    assert told["in_gamut"] == {space: values.tolist() for space, values in own["in_gamut"].items()}
    assert_says(np.ravel([told["rgb"][space] for space in own["rgb"]]).tolist(), list(own["rgb"].values()))
    for key in own.keys() - {"atmosphere", "rgb", "srgb_hex", "in_gamut"}:
        assert_says(np.ravel(told[key]).tolist(), own[key])


@both_suns
def test_csv_of_a_sheet(files, read, sun):
    """Every column that `read` knows, in every row."""
    rows = rows_of(files[f"{STEMS[sun]}.csv"])
    columns = by_column(read[sun])
    assert len(columns) == 25
    for key, values in columns.items():
        for row, value in zip(rows, values, strict=True):
            assert_says([row[key]], value, kelvin_digits(value) if key == "cct_k" else 4)
    assert [row["srgb_hex"] for row in rows] == read[sun].srgb_hex.tolist()


@pytest.mark.parametrize("stem", [*STEMS, *(view.stem for view in DIRECTIONS)])
def test_page_and_csv_have_the_same_cells(files, stem):
    """Elevation and direction sheets, all rows and columns."""
    (table,) = [table for table in all_of(opened(files[f"{stem}.html"]), "table") if table.get("id") == "numbers"]
    printed = [[plain(cell) for cell in row] for row in body_of(table)]
    assert printed == [list(row.values()) for row in rows_of(files[f"{stem}.csv"])]


@both_suns
def test_blocks_of_a_sheet(files, read, sun):
    """Luminance to three digits and chromaticity to three decimals, in the order of the table."""
    tree = opened(files[f"{STEMS[sun]}.html"])
    lines = [words_of(cell) for table in all_of(tree, "table", "blocks") for cell in all_of(table, "td") if len(cell)]
    assert_says([lux for lux, _, _ in lines], read[sun].luminance_cd_m2, 3)
    assert_says([f"0{part}" for _, *xy in lines for part in xy], read[sun].xy)


@both_suns
def test_colour_table_of_the_archive(archives, read, sun):
    """CGATS.17: X, Y, Z to six digits."""
    _, fields, rows = cgats(archives[sun]["colours.cgats.txt"])
    places = [fields.index(f"XYZ_{axis}") for axis in "XYZ"]
    assert_says([row[place] for row in rows for place in places], read[sun].XYZ, 6)


@both_suns
def test_patches_of_the_archive(archives, read, sheets, tmp_path, sun):
    """The middle of each block is its linear sRGB in 32 bits, by OpenEXR's own library."""
    path = tmp_path / "patches.exr"
    path.write_bytes(archives[sun]["patches.exr"])
    pixels = (
        OpenEXR.File(str(path))
        .channels()["RGB"]
        .pixels[PATCH_PIXELS // 2 :: PATCH_PIXELS, PATCH_PIXELS // 2 :: PATCH_PIXELS]
    )
    rows = [len(row.blocks) for row in sheets[sun].block_rows + sheets[sun].aureole_rows]
    blocks = np.concatenate([pixels[i, :count] for i, count in enumerate(rows)])
    np.testing.assert_allclose(blocks, read[sun].rgb["srgb"], rtol=1e-6)


@both_suns
def test_spectra_of_the_archive(archives, files, read, sheets, tmp_path, sun):
    """TM-27 and JSON are one spectrum, and sums in 10 nm steps to the luminance that `read` gives, within 0.5 %."""
    told = json.loads(files[f"{STEMS[sun]}.json"])["spectra"]
    wavelength_nm, functions = colour_matching_functions(OBSERVER)
    kept = {view.stem: view for view in DIRECTIONS}
    assert len(told["curves"]) == (6 if sun == UP else 5)
    for curve in told["curves"]:
        path = tmp_path / "spectrum.spdx"
        path.write_bytes(archives[sun][f"spectrum-{curve['key']}.spdx"])
        spectrum = colour_science().SpectralDistribution_IESTM2714(str(path)).read()
        assert spectrum.wavelengths.tolist() == told["wavelength_nm"]
        np.testing.assert_allclose(curve["values"], spectrum.values, rtol=5.5e-4)
        if curve["key"] in kept:
            view = kept[curve["key"]]
            weights = np.interp(spectrum.wavelengths, wavelength_nm, functions[:, 1])
            own = read[sun].luminance_cd_m2[index_of(sheets[sun], view.view_elevation_deg, view.relative_azimuth_deg)]
            assert 10 * LUMINOUS_EFFICACY * weights @ spectrum.values == pytest.approx(own, rel=SPECTRUM)


@both_suns
def test_gradient_stops(archives, files, default_sky, ground, sun):
    """Page and archive have the same; times the luminance of the card they are the sky between the nodes."""
    rows = rows_of(archives[sun]["stops.csv"])
    tables = [
        table
        for panel in all_of(opened(files[f"{STEMS[sun]}.html"]), "div", "stops")
        for table in all_of(panel, "table")
    ]
    printed = [[plain(cell) for cell in row[1:]] for table in tables for row in body_of(table) if len(row) > 1]
    assert printed == [[row[key] for key in ("srgb_r", "srgb_g", "srgb_b", "shown_hex")] for row in rows]
    view, azimuth = (np.array([float(row[key]) for row in rows]) for key in ("view_elevation_deg", "azimuth_deg"))
    sky, direct, _ = ground
    for space in ("srgb", "acescg"):
        linear = np.array([[float(row[f"{space}_{c}"]) for c in "rgb"] for row in rows])
        own = reading(default_sky, SUNS_DEG[sun], view, azimuth).rgb[space]
        scale = np.abs(own).max(axis=1, keepdims=True)
        np.testing.assert_allclose(linear * (sky + direct)[sun, 1] / np.pi / scale, own / scale, atol=INTERPOLATED)


def lights(files, sun):
    """The rows of one sun in light.csv, by plane and part."""
    rows = [row for row in rows_of(files["light.csv"]) if float(row["solar_elevation_deg"]) == SUNS_DEG[sun]]
    return {(row["plane"], row["part"]): row for row in rows}


@both_suns
def test_light_on_level_ground(files, ground, sun):
    """light.csv, and what the sheet's JSON says of level ground, are the fluxes and the beam of the sky."""
    sky, direct, beam = (light[sun] for light in ground)
    rows, told = lights(files, sun), json.loads(files[f"{STEMS[sun]}.json"])["level_ground"]
    lit = sky[1] + direct[1]
    for (plane, part), lux in {
        ("level", "sun"): direct[1],
        ("level", "shadow"): sky[1],
        ("level", "both"): lit,
        ("facing", "sun"): beam[1],
    }.items():
        assert_says([rows[plane, part]["illuminance_lx"]], lux)
    assert_says([rows["level", "shadow"][c] for c in "xy"], sky[:2] / sky.sum())
    assert_says([told["sun_lx"], told["sky_lx"], told["card_luminance_cd_m2"]], [direct[1], sky[1], lit / np.pi])
    assert_says([told["lit_to_shadow_stops"], told["card_ev100"]], np.log2([lit / sky[1], lit / np.pi * 8]))


@both_suns
def test_light_files_and_sheet_files(files, light, sun):
    """light.csv, light.json and the sheet's own JSON have the same illuminances, chromaticities and linear RGB."""
    told = json.loads(files["light.json"])["suns"][sun]
    own = json.loads(files[f"{STEMS[sun]}.json"])["light"]
    assert told == {key: own[key] for key in told}
    assert (own["planes"], own["parts"]) == (PLANES, PARTS)
    for plane in range(len(PLANES)):
        for part in range(len(PARTS)):
            row, true = lights(files, sun)[PLANES[plane], PARTS[part]], light.suns[sun]
            assert float(row["illuminance_lx"]) == own["illuminance_lx"][plane][part]
            assert [float(row[f"srgb_{c}"]) for c in "rgb"] == own["rgb"]["srgb"][plane][part]
            assert_says([row["illuminance_lx"]], true.XYZ[plane, part, 1])
            assert_says([row[c] for c in "xy"], true.xy[plane, part])
            assert_says(own["xy"][plane][part], true.xy[plane, part])


@both_suns
def test_box_of_a_sheet(files, light, sun):
    """Illuminance to three digits and chromaticity to three decimals of every plane that any light falls on."""
    (table,) = all_of(opened(files[f"{STEMS[sun]}.html"]), "table", "lights")
    shown = {text_of(all_of(row, "th")[0]): all_of(row, "td") for row in all_of(table, "tr")[1:]}
    titles = ("Sun", "Sky and ground", "Sun and sky")
    assert shown.keys() == (set(titles) if sun == UP else {"Sky and ground"})
    for title, cells in shown.items():
        true = light.suns[sun].XYZ[:, titles.index(title)]
        assert len(cells) == len(true)
        for cell, XYZ in zip(cells, true, strict=True):
            lux, *xy = words_of(cell) or ("0", "", "")
            assert_says([lux], XYZ[1], 3)
            assert_says([part and f"0{part}" for part in xy], XYZ[:2] / XYZ.sum() if XYZ[1] > 0 else [np.nan] * 2)


@both_suns
def test_light_page(files, light, sun):
    """Its table of illuminances has three digits of each plane, with the sun only where it ever shines."""
    (table,) = [t for t in all_of(opened(files["light.html"]), "table") if t[0].get("id") == "lux-caption"]
    lit = ("facing", "level", "toward")
    columns = [(i, part) for i, plane in enumerate(PLANES) for part in (2, 1) if part == 1 or plane in lit]
    assert_says(body_of(table)[sun][1:], [light.suns[sun].XYZ[plane, part, 1] for plane, part in columns], 3)


@both_suns
def test_start_page(files, read, sheets, ground, sun):
    """Level ground, white card, zenith and the sky above the horizon are those of the sky and of its sheet."""
    (table,) = all_of(opened(files["index.html"]), "table", "main")
    cells = body_of(table)[sun][1:]
    sky, direct, _ = (light[sun] for light in ground)
    lit = sky[1] + direct[1]
    assert_says(cells[:2], [direct[1], sky[1]], 3)
    assert_says(cells[2:4], np.log2([lit / sky[1], lit / np.pi * 8]))
    level = lights(files, sun)["level", "both"]["cct_k"]
    assert plain(cells[4]) == level
    at = [index_of(sheets[sun], view, azimuth) for view, azimuth in ((90, 0), (2, 0), (2, 90), (2, 180))]
    assert_says([cells[5], *cells[8:]], read[sun].luminance_cd_m2[at], 3)
    assert_says(cells[6:8], read[sun].xy[at[0]])


@both_suns
def test_direction_sheets(files, sheets, sun):
    """The row of a sun is, cell by cell, the row of that direction on the sun's sheet."""
    for view in DIRECTIONS:
        place = index_of(sheets[sun], view.view_elevation_deg, view.relative_azimuth_deg)
        own, across = rows_of(files[f"{STEMS[sun]}.csv"])[place], rows_of(files[f"{view.stem}.csv"])[sun]
        assert float(across.pop("solar_elevation_deg")) == SUNS_DEG[sun]
        assert across == {key: own[key] for key in across}
        assert len(across) == 30


@both_suns
def test_display_page(files, ground, sun):
    """Its white card is the one that sky and sun light."""
    sky, direct, _ = (light[sun] for light in ground)
    told = json.loads(files["display.json"])["columns"]
    assert told["solar_elevation_deg"][sun] == SUNS_DEG[sun]
    assert_says([told["white_card_cd_m2"][sun]], (sky[1] + direct[1]) / np.pi, 3)


@both_suns
def test_map_of_the_sky(found, default_sky, ground, sun):
    """Pixels of the map are the sky in their middle, and all of them together its flux, within 0.5 %."""
    dome = dome_map(found, sun, 512)
    rows, columns = np.array([10, 60, 100, 120]), np.array([270, 300, 384, 500])
    view, azimuth = 90 - 180 * (rows + 0.5) / 256, 360 * (columns + 0.5) / 512 - 180
    own = reading(default_sky, SUNS_DEG[sun], view[:, None], azimuth).XYZ
    np.testing.assert_allclose(dome.XYZ[np.ix_(rows, columns)], own, rtol=5e-3)
    np.testing.assert_allclose(level_XYZ(dome), ground[0][sun], rtol=5e-3)


@both_suns
def test_data_of_the_reader(files, read, sheets, ground, sun):
    """Unpacked, the sky away from the sun and the light on level ground are the same to the step they are kept in."""
    text = files["reader.js"].decode("ascii")
    data = json.loads(text[text.index("(") + 1 : text.rindex(")")])
    whole, arrays = np.array(unpacked(base64.b64decode(data["packed"]))), {}
    for array in data["arrays"]:
        mine, whole = np.split(whole, [int(np.prod(array["shape"]))])
        values = mine.reshape(array["shape"])
        for axis in range(values.ndim - 1):
            values = values.cumsum(axis=axis)
        arrays[array["name"]] = values * array["step"]
    at = data["suns"].index(SUNS_DEG[sun])
    for view, azimuth in ((90, 0), (45, 90), (2, 180)):
        kept = np.exp(arrays["smooth_log"][at, data["views"].index(view), data["azimuths"].index(azimuth)])
        np.testing.assert_allclose(kept, read[sun].XYZ[index_of(sheets[sun], view, azimuth)], rtol=3e-4)
    np.testing.assert_allclose(np.exp(arrays["sky_log"][at]), ground[0][sun], rtol=6e-5)
    if sun == UP:
        lit = data["light_suns"].index(SUNS_DEG[sun]) - len(data["light_suns"])
        np.testing.assert_allclose(np.exp(arrays["beam_log"][lit]), ground[2][sun], rtol=6e-5)


@both_suns
def test_what_the_command_prints(files, default_sky, sheets, sun):
    """`read --json` is an entry of the sheet's JSON, key by key; the text has the same numbers."""
    found = reading(default_sky, SUNS_DEG[sun], 45.0, 90.0)
    own, told = json.loads(reading_json(found)), json.loads(files[f"{STEMS[sun]}.json"])["readings"]
    place = index_of(sheets[sun], 45, 90)

    def entry(value):
        return {key: part[place] for key, part in value.items()} if isinstance(value, dict) else value[place]

    assert own == {key: value if key == "atmosphere" else entry(value) for key, value in told.items()}
    text = reading_text(found)
    row = rows_of(files[f"{STEMS[sun]}.csv"])[place]
    for key, start in (("luminance_cd_m2", "luminance"), ("X", "X, Y, Z"), ("x", "x, y"), ("srgb_r", "linear sRGB")):
        (line,) = re.findall(rf"^{start}\s+(\S+)", text, re.MULTILINE)
        assert line == row[key]


def test_a_wall_away_from_the_sun_is_bluer(files, light):
    """With the sun at 30°: a higher colour temperature, and lower in v', than the wall toward it."""
    rows = lights(files, UP)
    away, toward = (rows[plane, "both"] for plane in ("away", "toward"))
    assert float(away["cct_k"]) > float(toward["cct_k"]) + 2000
    v_prime = light.suns[UP].uv_prime[[PLANES.index("away"), PLANES.index("toward")], PARTS.index("both"), 1]
    assert v_prime[0] < v_prime[1] - 0.02
