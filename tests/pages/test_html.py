"""Pages are valid, whole, neutral and tell themselves apart."""

import posixpath
import re
from itertools import pairwise
from urllib.parse import unquote, urlsplit

import html5lib
import pytest

from skychart.charts.direction import direction_sheet
from skychart.charts.survey import DIRECTIONS, survey
from skychart.config import Settings
from skychart.pages.render import direction_files
from skychart.pages.site import make_atlas
from tests.charts.fake_sky import FakeSky

XHTML = "{http://www.w3.org/1999/xhtml}"
SVG = "{http://www.w3.org/2000/svg}"


@pytest.fixture(scope="module")
def pages(site):
    """Every page as a tree, by path; parsed strictly, so that any parse error fails here."""
    parser = html5lib.HTMLParser(strict=True)
    paths = sorted(site.rglob("*.html"))
    assert len(paths) > 20
    return {path.relative_to(site).as_posix(): parser.parse(path.read_text(encoding="utf-8")) for path in paths}


def elements(tree, *names):
    """All elements of these names, HTML or SVG."""
    wanted = {space + name for name in names for space in (XHTML, SVG)}
    return [element for element in tree.iter() if element.tag in wanted]


def references(tree):
    """Everything a page points to."""
    for element in tree.iter():
        for name in ("href", "src", "{http://www.w3.org/1999/xlink}href"):
            if element.get(name) is not None:
                yield element.get(name)


def test_every_link_and_fragment_resolves(site, pages):
    """Within the folder, to a file that is there, and to an id that is on its page."""
    ids = {path: {element.get("id") for element in tree.iter()} for path, tree in pages.items()}
    seen = 0
    for path, tree in pages.items():
        for reference in references(tree):
            parts = urlsplit(reference)
            if parts.scheme == "data":
                continue
            assert not parts.scheme, f"{path} asks for {reference}"
            assert not parts.netloc, f"{path} asks for {reference}"
            target = (
                posixpath.normpath(posixpath.join(posixpath.dirname(path), unquote(parts.path))) if parts.path else path
            )
            assert (site / target).is_file(), f"{path} links to {reference}"
            assert not parts.fragment or parts.fragment in ids[target], f"{path} links to {reference}"
            seen += 1
    assert seen > 500


def test_nothing_is_asked_from_outside(site):
    """No address of another host in any page, style or script but the namespaces of SVG."""
    for path in site.rglob("*"):
        if path.suffix in (".html", ".css", ".js", ".svg"):
            found = re.findall(r"(?:https?:)?//[\w.]+[^\s\"')]*", path.read_text(encoding="utf-8"))
            outside = [address for address in found if "www.w3.org" not in address]
            assert not [address for address in outside if path.suffix != ".js" or "http" in address], path.name


def test_ids_are_unique(pages):
    """On each page."""
    for path, tree in pages.items():
        ids = [element.get("id") for element in tree.iter() if element.get("id")]
        assert len(ids) == len(set(ids)), path


def test_labels_point_to_ids(pages):
    """Every aria-labelledby names an element of its page."""
    for path, tree in pages.items():
        ids = {element.get("id") for element in tree.iter()}
        named = [element.get("aria-labelledby") for element in tree.iter() if element.get("aria-labelledby")]
        assert named
        assert set(named) <= ids, path


def test_titles_differ(pages):
    """So that tabs and bookmarks can be told apart; descriptions too."""
    titles = [elements(tree, "title")[0].text for tree in pages.values()]
    assert len(set(titles)) == len(titles)


def test_headings_descend_in_order(pages):
    """One h1, and no level is skipped."""
    for path, tree in pages.items():
        levels = [int(element.tag[-1]) for element in elements(tree, "h1", "h2", "h3", "h4")]
        assert levels.count(1) == 1, path
        assert levels[0] == 1, path
        assert all(after - before <= 1 for before, after in pairwise(levels)), path


def test_pictures_have_words_and_sizes(pages):
    """Every img has alt text and its size; every inline SVG picture has a title."""
    count = 0
    for tree in pages.values():
        for image in elements(tree, "img"):
            count += 1
            assert image.get("alt")
            assert int(image.get("width")) > 0
            assert int(image.get("height")) > 0
        for picture in [svg for svg in tree.iter(f"{SVG}svg") if svg.get("role") == "img"]:
            assert picture.find(f"{SVG}title").text
    assert count > 20


def test_tables_have_scoped_heads(pages):
    """Every header cell says what it heads, every table has a name."""
    for path, tree in pages.items():
        assert all(cell.get("scope") for cell in elements(tree, "th")), path


def test_one_place_is_the_present_one(pages):
    """A sheet marks itself in the ruler, the switch and the menu, and knows its neighbours."""
    sheet = pages["molecular/sun-08.html"]
    current = [link.get("href") for link in elements(sheet, "a") if link.get("aria-current") == "page"]
    assert current.count("sun-08.html") == 2
    assert [link.get("href") for link in elements(sheet, "a") if link.get("rel") == "next"] == ["sun+20.html"]
    assert not [link for link in elements(sheet, "a") if link.get("rel") == "prev"]


def test_each_atmosphere_leads_to_the_other(pages):
    """The switch keeps the sun, the direction, and the start page."""
    for page, other in (
        ("molecular/sun+20.html", "../thin/sun+20.html"),
        ("thin/view-zenith.html", "../molecular/view-zenith.html"),
        ("index.html", "thin/index.html"),
        ("thin/index.html", "../index.html"),
    ):
        assert other in [link.get("href") for link in elements(pages[page], "a")]


def test_a_direction_sheet_has_a_block_for_every_sun_and_exposure():
    """Seventeen suns make tables of fourteen and of three columns, with three blocks below each sun."""
    suns = tuple(float(sun) for sun in range(17))
    settings = Settings(solar_elevations_deg=suns)
    chart = direction_sheet(survey(FakeSky(settings.atmospheres[0]), suns, settings.observer), DIRECTIONS[0])
    page = direction_files(make_atlas(settings), chart)["molecular/view-zenith.html"].decode("utf-8")
    found = []
    for table in elements(html5lib.HTMLParser(strict=True).parse(page), "table")[:-1]:
        heads = [head for head in elements(table, "th") if head.get("scope") == "col"]
        links = [elements(cell, "a")[0].get("href") for cell in elements(table, "td") if cell.get("style")]
        stems = [elements(head, "a")[0].get("href").removesuffix(".html") for head in heads]
        assert links == 3 * [f"#{stem}" for stem in stems]
        found.append(len(heads))
    assert found == [14, 3]


def test_every_block_leads_to_its_numbers(pages):
    """Without script the link of a block ends at its row of the full table."""
    sheet = pages["molecular/sun+20.html"]
    rows = {row.get("id") for row in elements(sheet, "tr") if row.get("id")}
    cells = [cell for cell in elements(sheet, "td") if cell.get("style")]
    blocks = [link.get("href")[1:] for cell in cells for link in elements(cell, "a")]
    assert set(blocks) == rows
    assert len(blocks) == len(rows) > 50


def test_only_swatches_have_styles(pages):
    """No style in a tag but the colour of a block."""
    for path, tree in pages.items():
        for element in tree.iter():
            if element.get("style"):
                assert element.tag == f"{XHTML}td", path
                assert re.fullmatch(
                    r"background:#[0-9a-f]{6}(;background:color\(display-p3( [01]?\.?\d+){3}\))?", element.get("style")
                )


def test_deep_twilight_is_told_where_it_belongs(site):
    """On the sheet at −8° and on no sheet of the day."""
    note = "the eye in that dark would see them nearly grey"
    assert note in (site / "molecular/sun-08.html").read_text(encoding="utf-8")
    assert note not in (site / "molecular/sun+20.html").read_text(encoding="utf-8")


def test_a_missed_check_is_shown_as_missed(site):
    """The methods page does not hide it."""
    text = (site / "methods.html").read_text(encoding="utf-8")
    assert "2 of 3 published values are met" in text
    assert 'class="missed"' in text
