"""The reader in a real browser: right numbers, every way to use it, and nothing asked from outside."""

import csv
import re

import numpy as np
import pytest

from skychart.charts.reading import reading

from .conftest import numbers, settle

STATES = 20
SPACE_LINE = {"srgb": "sRGB", "display-p3": "Display P3", "bt2020": "BT.2020", "acescg": "ACEScg"}


def value(text):
    """A number as it is printed, `1.23 × 10⁻⁵` included."""
    digits = str.maketrans("⁻⁰¹²³⁴⁵⁶⁷⁸⁹", "-0123456789")
    mantissa, _, power = text.replace("\u202f", "").partition("×10")
    return float(mantissa) * 10.0 ** int(power.translate(digits) or 0)


def table(page):
    """Cells of the list of pins."""
    return page.evaluate(
        "[...document.querySelectorAll('#pins tr')].map((row) => [...row.cells].map((c) => c.innerText))"
    )


def address(page):
    """What the address carries."""
    return dict(part.split("=") for part in page.evaluate("location.hash.slice(1)").split("&"))


def test_twenty_random_states_are_what_read_says(watch, molecular_site, default_sky):
    """Luminance within 1 % and u'v' within 0.001 by day, 3 % and 0.002 in twilight, and the printed digits."""
    rng = np.random.default_rng(7)
    suns = np.round(rng.uniform(-8, 90, STATES), 1)
    view = np.round(rng.uniform(0, 90, STATES), 1)
    azimuth = np.round(rng.uniform(-180, 180, STATES), 1)
    expected = reading(default_sky, suns, view, np.abs(azimuth))
    page = watch(molecular_site / "reader.html").page
    for i, space in zip(range(STATES), list(SPACE_LINE) * STATES, strict=False):
        place = f"sun={suns[i]}&elevation={view[i]}&azimuth={azimuth[i]}"
        page.evaluate("hash => { location.hash = hash; }", f"#air=molecular&{place}&space={space}")
        settle(page)
        found = numbers(page)
        most, shift, codes = (0.01, 0.001, 2) if suns[i] >= 0 else (0.03, 0.002, 3)
        digit = 0.005
        assert value(found["Luminance cd/m²"][0]) == pytest.approx(
            float(expected.luminance_cd_m2[i]), rel=most + digit
        ), place
        uv = np.array([value(text) for text in found["u′ v′"]])
        assert np.hypot(*(uv - expected.uv_prime[i])) <= shift + 1e-4, place
        linear = np.array([value(text) for text in found[f"{SPACE_LINE[space]} linear"]])
        scale = float(expected.rgb[space][i].max())
        np.testing.assert_allclose(linear / scale, expected.rgb[space][i] / scale, atol=2 * most + digit)
        code, wanted = (
            np.array([int(c[k : k + 2], 16) for k in (1, 3, 5)])
            for c in (found["sRGB code card white"][0], str(expected.srgb_hex[i]))
        )
        assert np.abs(code - wanted).max() <= codes, place
        assert value(found["Polarisation degree"][0]) == pytest.approx(
            float(expected.polarisation_degree[i]), abs=0.01
        ), place
        has_temperature = found["CCT K"] != ["—"]
        if has_temperature and np.isfinite(expected.cct_k[i]):
            assert 1e6 / value(found["CCT K"][0]) == pytest.approx(1e6 / float(expected.cct_k[i]), abs=5), place


def test_pins_are_compared_copied_and_linked(watch, site):
    """Three pins; stops and ΔE from the first; the list as CSV; the link opens the same page again."""
    watched = watch(
        site / "reader.html", "#sun=20&elevation=45&azimuth=90", permissions=["clipboard-read", "clipboard-write"]
    )
    page = watched.page
    settle(page)
    assert page.is_visible("#no-pins")
    page.click("#pin")
    page.fill("#elevation", "5")
    page.click("#pin")
    page.select_option("#air", "thin")
    page.click("#pin")
    settle(page)
    rows = table(page)
    assert [row[1:5] for row in rows] == [
        ["molecular", "20", "45", "90"],
        ["molecular", "20", "5", "90"],
        ["thin", "20", "5", "90"],
    ]
    assert rows[0][6:8] == ["0.00", "0.0"]
    stops = np.log2(value(rows[1][5].replace("\u2009", "")) / value(rows[0][5].replace("\u2009", "")))
    assert float(rows[1][6].replace("\u2212", "-")) == pytest.approx(stops, abs=0.02)
    page.click("#copy-list")
    settle(page)
    assert page.inner_text("#list-said") == "Copied."
    text = page.evaluate("navigator.clipboard.readText()")
    body = list(csv.DictReader(line for line in text.splitlines() if not line.startswith("#")))
    assert [row["view_elevation_deg"] for row in body] == ["45", "5", "5"]
    assert body[2]["atmosphere"] == "thin"
    assert any("200 Dobson units" in line for line in text.splitlines() if line.startswith("#"))
    page.click("#copy-link")
    settle(page)
    link = page.evaluate("navigator.clipboard.readText()")
    again = watch(site / "reader.html", "#" + link.partition("#")[2]).page
    settle(again)
    assert table(again) == rows
    assert numbers(again) == numbers(page)
    again.click("button[aria-label='Unpin reading 1']")
    settle(again)
    assert [row[1:5] for row in table(again)] == [row[1:5] for row in rows[1:]]
    assert table(again)[0][6:8] == ["0.00", "0.0"], "the first of the list is the reference"
    again.click("#clear-pins")
    settle(again)
    assert again.is_visible("#no-pins")
    assert "pins" not in address(again)


def test_one_value_and_a_row_are_copied(watch, site):
    """A number is copied as plain text; a row as CSV with its head."""
    page = watch(site / "reader.html", "#sun=20", permissions=["clipboard-read", "clipboard-write"]).page
    settle(page)
    page.click("#numbers button[aria-label^='Luminance']")
    settle(page)
    plain = page.evaluate("navigator.clipboard.readText()")
    assert float(plain) == value(numbers(page)["Luminance cd/m²"][0])
    page.click("#copy-row")
    settle(page)
    (row,) = csv.DictReader(page.evaluate("navigator.clipboard.readText()").splitlines())
    assert row["luminance_cd_m2"] == plain
    assert row["srgb_hex"] == numbers(page)["sRGB code card white"][0]


def test_everything_can_be_done_from_the_keyboard(watch, site):
    """Every control is reached with Tab; arrow keys move the sun and the pointer; Enter pins."""
    page = watch(site / "reader.html", "#sun=20&elevation=45&azimuth=90").page
    settle(page)
    reached = []
    for _ in range(80):
        page.keyboard.press("Tab")
        name = page.evaluate("document.activeElement.id || document.activeElement.getAttribute('aria-label')")
        reached.append(name)
        if name == "sun-slider":
            page.keyboard.press("ArrowRight")
            page.keyboard.press("PageUp")
        if name == "scope":
            for key in ("ArrowUp", "Shift+ArrowUp", "ArrowLeft", "Shift+ArrowRight"):
                page.keyboard.press(key)
        if name == "pin":
            page.keyboard.press("Enter")
            break
        visible = page.evaluate(
            "(() => { const s = getComputedStyle(document.activeElement); return parseFloat(s.outlineWidth) > 0; })()"
        )
        assert visible, f"no focus to be seen on {name}"
    for control in (
        "air",
        "sun",
        "sun-slider",
        "placed",
        "picture",
        "exposure",
        "stops",
        "space",
        "scope",
        "elevation",
        "azimuth",
    ):
        assert control in reached, control
    assert any(str(name).startswith("Luminance") for name in reached), "values can be copied"
    settle(page)
    assert address(page)["sun"] == "25.5"
    assert (address(page)["elevation"], address(page)["azimuth"]) == ("56", "99")
    assert address(page)["pins"] == "molecular,25.5,56,99"
    page.wait_for_function("document.querySelector('#spoken').textContent.startsWith('56° up, 99° from the sun')")
    assert "candela per square metre" in page.inner_text("#spoken")


def test_the_pointer_passes_behind_and_stops_at_zenith_and_horizon(watch, site):
    """Azimuth goes on from 180 to −179; elevation stays within 0 and 90."""
    page = watch(site / "reader.html", "#elevation=85&azimuth=175").page
    settle(page)
    page.focus("#scope")
    page.keyboard.press("Shift+ArrowUp")
    page.keyboard.press("Shift+ArrowRight")
    settle(page)
    assert (address(page)["elevation"], address(page)["azimuth"]) == ("90", "-175")
    for _ in range(10):
        page.keyboard.press("Shift+ArrowDown")
    settle(page)
    assert address(page)["elevation"] == "0"


@pytest.mark.parametrize("picture", ["all-sky", "panorama"])
def test_a_tap_chooses_the_direction_under_it(watch, site, picture):
    """Touch, on a telephone's width: the place tapped is the direction read, within a pixel."""
    page = watch(
        site / "reader.html",
        f"#picture={picture}",
        viewport={"width": 390, "height": 844},
        has_touch=True,
        is_mobile=True,
    ).page
    settle(page)
    page.locator("#canvas").scroll_into_view_if_needed()
    box = page.locator("#canvas").bounding_box()
    x, y = 0.6, 0.7
    page.touchscreen.tap(box["x"] + x * box["width"], box["y"] + y * box["height"])
    settle(page)
    right, down = 2 * x - 1, 2 * y - 1
    wanted = (
        (90 * (1 - np.hypot(right, down)), np.degrees(np.arctan2(right, down)))
        if picture == "all-sky"
        else (90 * (1 - y), 180 * right)
    )
    found = address(page)
    assert float(found["elevation"]) == pytest.approx(wanted[0], abs=1.0)
    assert float(found["azimuth"]) == pytest.approx(wanted[1], abs=2.5)


def test_a_mouse_reads_where_it_points_and_chooses_where_it_clicks(watch, site):
    """The number under the pointer is shown and goes when the pointer leaves; a click stays."""
    page = watch(site / "reader.html", "#elevation=45&azimuth=90").page
    settle(page)
    box = page.locator("#canvas").bounding_box()
    page.mouse.move(box["x"] + box["width"] / 2, box["y"] + 0.75 * box["height"])
    assert page.inner_text("#read-title").endswith("under the pointer")
    page.mouse.move(5, 5)
    assert page.inner_text("#read-title") == "45° up, 90° from the sun"
    page.mouse.click(box["x"] + box["width"] / 2, box["y"] + 0.75 * box["height"])
    settle(page)
    assert float(address(page)["elevation"]) == pytest.approx(45, abs=0.5)
    assert float(address(page)["azimuth"]) == pytest.approx(0, abs=0.5)


def test_the_picture_shows_what_the_numbers_say(watch, site):
    """The canvas pixel under the ring has the sRGB code as shown, to two steps."""
    page = watch(site / "reader.html", "#sun=20&elevation=45&azimuth=90&stops=1").page
    settle(page)
    pixel, outside = page.evaluate(
        """() => { const c = document.querySelector('#canvas');
             const { data } = c.getContext('2d').getImageData(0, 0, c.width, c.height);
             const at = (x, y) => [...data.slice(4 * (y * c.width + x), 4 * (y * c.width + x) + 4)];
             return [at(0.75 * c.width, 0.5 * c.height), at(2, 2)]; }"""
    )
    code = numbers(page)["sRGB code as shown"][0]
    assert np.abs(np.array(pixel[:3]) - [int(code[k : k + 2], 16) for k in (1, 3, 5)]).max() <= 2
    assert outside[3] == 0


def test_exposure_moves_what_is_shown_and_not_what_is_read(watch, site):
    """Stops and a fixed white change the code as shown and the relative RGB; luminance and card code stay."""
    page = watch(site / "reader.html", "#sun=20").page
    settle(page)
    before = numbers(page)
    page.fill("#stops", "-2")
    settle(page)
    darker = numbers(page)
    relative = "sRGB, display white 1"
    assert value(darker[relative][1]) == pytest.approx(value(before[relative][1]) / 4, rel=0.01)
    page.select_option("#exposure", "fixed")
    page.fill("#white", "500")
    settle(page)
    fixed = numbers(page)
    assert value(fixed[relative][1]) == pytest.approx(value(before["sRGB linear"][1]) / 500, rel=0.01)
    assert "500 cd/m²" in page.inner_text("#scope-said")
    for same in ("Luminance cd/m²", "sRGB code card white", "x y"):
        assert before[same] == darker[same] == fixed[same]
    assert len({tuple(found["sRGB code as shown"]) for found in (before, darker, fixed)}) == 3


def test_the_sun_comes_from_place_and_time(watch, site):
    """NREL/TP-560-34302's worked example without refraction: 39.872° up, 194.34° from north; a moved slider ends it."""
    page = watch(
        site / "reader.html",
        "#latitude=39.742476&longitude=-105.1786&date=2003-10-17&time=12:30:30&utc=-7&elevation=30&azimuth=10",
    ).page
    settle(page)
    said = page.inner_text("#place-said")
    elevation, azimuth = map(float, re.findall(r"\d+\.\d+", said))
    assert elevation == pytest.approx(90 - 50.11162 - 0.016, abs=0.03), "the example's refraction is 0.016°"
    assert azimuth == pytest.approx(194.34, abs=0.06)
    assert value(numbers(page)["Bearing of the view ° from north"][0]) == pytest.approx(204.34, abs=0.06)
    assert float(page.input_value("#sun")) == pytest.approx(elevation)
    page.fill("#time", "23:00")
    settle(page)
    assert "below the horizon" in page.inner_text("#place-said")
    page.focus("#sun-slider")
    page.keyboard.press("ArrowRight")
    settle(page)
    assert not page.is_checked("#placed")
    assert "latitude" not in address(page)


def test_a_wrong_number_is_refused_and_a_wrong_address_told(watch, site):
    """The field is marked and the sky stays; the parts of an address that mean nothing are named."""
    page = watch(site / "reader.html", "#sun=99&air=smog&elevation=30").page
    settle(page)
    assert page.inner_text("#fault") == "Not understood in the address, and left out: sun=99, air=smog."
    before = address(page)
    page.fill("#sun", "91")
    settle(page)
    assert page.evaluate("document.querySelector('#sun').matches(':invalid')")
    assert address(page) == before


def test_the_address_is_followed_back(watch, site):
    """A link in the same page, or the back button, brings its state."""
    page = watch(site / "reader.html", "#sun=20&elevation=45").page
    settle(page)
    page.evaluate("location.hash = '#sun=-8&elevation=10'")
    settle(page)
    assert page.input_value("#sun") == "-8"
    assert page.is_visible("#twilight")
    page.go_back()
    settle(page)
    assert page.input_value("#sun") == "20"
    assert not page.is_visible("#twilight")


def test_without_script_the_charts_are_named_instead(watch, site):
    """The note leads to a sheet; no dead control is shown."""
    page = watch(site / "reader.html", java_script_enabled=False).page
    assert page.is_visible("noscript .caution a")
    assert not page.is_visible("#reader")


def test_a_missing_data_file_is_told(watch, site, tmp_path):
    """An atmosphere whose numbers are gone is no silent blank."""
    for path in ("reader.html", "static"):
        (tmp_path / path).symlink_to(site / path)
    watched = watch(tmp_path / "reader.html")
    watched.page.wait_for_timeout(500)
    assert "the numbers of molecular are missing" in watched.page.inner_text("#fault")
    assert all("ERR_FILE_NOT_FOUND" in message for message in watched.messages)
    watched.messages.clear()
