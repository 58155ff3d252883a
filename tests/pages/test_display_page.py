"""The display page, and the gradient stops of a sheet, as they stand in a built site."""

import csv
import io
import json
import zipfile

import html5lib
import pytest

XHTML = "{http://www.w3.org/1999/xhtml}"


@pytest.fixture(scope="module")
def tree(site):
    """The page of the first atmosphere, parsed strictly."""
    return html5lib.HTMLParser(strict=True).parse((site / "molecular/display.html").read_text(encoding="utf-8"))


def texts(tree, name):
    """The text of every element of a name."""
    return ["".join(element.itertext()).strip() for element in tree.iter(f"{XHTML}{name}")]


def rows_of(data):
    """Column names and rows of a CSV, without its remarks."""
    lines = [line for line in data.splitlines() if not line.startswith("#")]
    return list(csv.DictReader(io.StringIO("\n".join(lines))))


def test_it_is_in_the_menu_and_leads_to_each_sun(site, tree):
    """Its menu line is the present one; every row's head is a link to the sheet of that sun."""
    current = [link for link in tree.iter(f"{XHTML}a") if link.get("aria-current") == "page"]
    assert [link.text for link in current] == ["Display", "molecular"]
    heads = [head for head in tree.iter(f"{XHTML}th") if head.get("scope") == "row"]
    links = [head.find(f"{XHTML}a").get("href") for head in heads]
    assert links == ["sun-08.html", "sun+20.html"] * 6
    assert 'href="display.html"' in (site / "molecular/sun+20.html").read_text(encoding="utf-8")


def test_rules_and_caution_are_on_the_page(tree):
    """What white is, how the bits are judged, and that bright pictures can dazzle."""
    said = " ".join("".join(tree.itertext()).split())
    for words in (
        "203 cd/m²",
        "100 cd/m²",
        "ITU-R BT.2124",
        "ITU-R BT.2408",
        "can dazzle",
        "18.42 %",
        "60° of the sky over 1080",
    ):
        assert words in said
    assert len(texts(tree, "caption")) == 6
    assert all(texts(tree, "caption"))


def test_files_say_what_the_page_says(site, tree):
    """CSV and JSON have a row for each sun and the cells of the tables."""
    rows = rows_of((site / "molecular/display.csv").read_text(encoding="utf-8"))
    columns = json.loads((site / "molecular/display.json").read_text(encoding="utf-8"))["columns"]
    assert [float(row["solar_elevation_deg"]) for row in rows] == columns["solar_elevation_deg"] == [-8, 20]
    for key, values in columns.items():
        assert [float(row[key]) if row[key] else None for row in rows] == values
    cells = texts(tree, "td")
    assert rows[1]["srgb_beyond_delta_uv"].replace("-", "−") in cells
    assert rows[1]["plane_hlg_10_bits_largest_delta_e_itp"] in cells


def test_the_page_with_its_files_is_small(site):
    """At most 150 kB."""
    files = [path for path in (site / "molecular").iterdir() if path.name.startswith("display")]
    assert len(files) == 7
    assert sum(path.stat().st_size for path in files) <= 150_000


def test_a_sheet_has_its_stops_in_page_and_file(site):
    """Three sets on each of two lines, their codes those of the CSV; the section is at most 5.5 kB."""
    page = (site / "molecular/sun+20.html").read_text(encoding="utf-8")
    start = page.index('aria-labelledby="stops-title"')
    section = page[start : page.index("</section>", start)]
    with zipfile.ZipFile(site / "molecular/sun+20-files.zip") as archive:
        rows = rows_of(archive.read("stops.csv").decode("utf-8"))
    assert len(rows) == 32
    assert [row["shown_hex"] for row in rows] == [line[-7:] for line in section.splitlines() if "style=" in line]
    assert section.count('scope="rowgroup"') == 6
    assert len(section.encode("utf-8")) <= 5_500
