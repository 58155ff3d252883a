"""Every kind of page in a real browser: quiet, self-contained, accessible, and as wide as the window."""

import json
import re

import pytest

from .conftest import settle

PAGES = (
    *("index.html", "molecular/sun+20.html", "molecular/view-45-beside.html", "compare/sun+20.html"),
    *("molecular/light.html", "molecular/display.html", "methods.html", "reader.html"),
)
WIDTHS = (390, 720, 1024, 1440, 2560)
SHEETS = ("molecular/sun+20.html", "molecular/sun-08.html")
SWATCHES = (*SHEETS, "molecular/view-45-beside.html", "compare/sun+20.html", "molecular/light.html")
LONGEST_LUMINANCE = "0.000932"


def ready(page, path):
    """Wait for what a page fills in by script."""
    if path == "reader.html":
        settle(page)


@pytest.mark.parametrize("path", PAGES)
def test_nothing_is_asked_from_outside_the_folder(watch, site, path):
    """Every request is counted, and each is for a file of the site; the browser has nothing to say."""
    watched = watch(site / path)
    ready(watched.page, path)
    folder = site.as_uri() + "/"
    assert len(watched.requests) >= 3
    assert [url for url in watched.requests if not url.startswith((folder, "data:"))] == []


@pytest.mark.parametrize("path", PAGES)
def test_no_page_is_wider_than_its_window(watch, site, path):
    """From a telephone's 390 px to 2560 px, and 720 px, which is a 1440 px window at 200 %."""
    page = watch(site / path).page
    ready(page, path)
    for width in WIDTHS:
        page.set_viewport_size({"width": width, "height": 900})
        page.wait_for_timeout(50)
        assert page.evaluate("document.documentElement.scrollWidth") <= width, f"at {width} px"


@pytest.mark.parametrize("scheme", ["light", "dark"])
@pytest.mark.parametrize("path", PAGES)
def test_the_accessibility_engine_finds_nothing(watch, site, path, scheme):
    """axe-core with all its rules, in the light and in the dark room."""
    from axe_playwright_python.sync_playwright import Axe

    fragment = "#pins=molecular,20,45,90;molecular,20,5,-30" if path == "reader.html" else ""
    page = watch(site / path, fragment, color_scheme=scheme).page
    ready(page, path)
    found = Axe().run(page, options={"preload": False}).response  # a page from disk cannot read its style sheet
    assert len(found["passes"]) > 10
    told = [
        (rule["id"], rule["help"], [node["html"][:160] for node in rule["nodes"][:4]]) for rule in found["violations"]
    ]
    assert not told, json.dumps(told, indent=1)


def printed_pages(page):
    """How many pages of paper a browser prints, from the page objects of its PDF and from the count in their tree."""
    document = page.pdf(prefer_css_page_size=True)
    pages = re.findall(rb"/Type\s*/Page\b", document)
    counts = [int(count) for count in re.findall(rb"/Count\s+(\d+)", document)]
    assert len(pages) == max(counts), "the PDF is written in a way that this test cannot count"
    return len(pages)


@pytest.mark.parametrize("path", SHEETS)
def test_an_elevation_sheet_prints_on_two_pages(watch, site, path):
    """A4 at the style sheet's own margins, with the sun up and down; a third page, forced, is counted."""
    page = watch(site / path).page
    assert printed_pages(page) <= 2
    page.evaluate("document.querySelector('footer').style.breakBefore = 'page'")
    assert printed_pages(page) == 3


@pytest.mark.parametrize("path", SHEETS)
def test_a_telephone_shows_the_swatch_tables_whole(watch, site, path):
    """At 390 px nothing scrolls sideways and each text stays in its block, even the longest luminance of all sheets."""
    page = watch(site / path, viewport={"width": 390, "height": 844}).page
    blocks = page.locator(".bench .blocks td a")
    assert blocks.count() > 40
    blocks.locator("b").evaluate_all(f"texts => texts.forEach(text => {{ text.textContent = '{LONGEST_LUMINANCE}'; }})")
    assert page.evaluate("document.documentElement.scrollWidth") <= 390
    scroll, width = page.locator(".bench .scroll").evaluate("region => [region.scrollWidth, region.clientWidth]")
    assert scroll <= width
    spare = blocks.evaluate_all(
        """links => links.map((link) => {
             const text = document.createRange();
             text.selectNodeContents(link);
             return link.parentElement.getBoundingClientRect().width - text.getBoundingClientRect().width;
           })"""
    )
    assert min(spare) >= 0


@pytest.mark.parametrize("path", SHEETS)
def test_a_telephone_shows_three_numbers_beside_the_labels(watch, site, path):
    """At 390 px the full table's labels, which stay in sight, leave room for three columns."""
    page = watch(site / path, viewport={"width": 390, "height": 844}).page
    whole = page.locator(".scroll.tall").evaluate(
        """region => {
             const edge = region.getBoundingClientRect().left + region.clientWidth;
             const cells = [...region.querySelectorAll("tbody tr:first-child td")];
             return cells.filter((cell) => cell.getBoundingClientRect().right <= edge).length;
           }"""
    )
    assert whole >= 3


@pytest.mark.parametrize("path", SWATCHES)
def test_the_dark_changes_no_swatch(watch, site, path):
    """Blocks, their ink and their surround have the same colours in the light and in the dark room."""
    seen = [
        watch(site / path, color_scheme=scheme).page.evaluate(
            """() => [getComputedStyle(document.body).backgroundColor, [...document.querySelectorAll(
                 ".panel, .panel td, .panel td a, .panel th, .panel figcaption")].map((part) => {
               const { backgroundColor, color } = getComputedStyle(part);
               return [backgroundColor, color];
             })]"""
        )
        for scheme in ("light", "dark")
    ]
    assert len(seen[0][1]) > 20
    assert seen[0][0] != seen[1][0], "the frame does change"
    assert seen[0][1] == seen[1][1]
