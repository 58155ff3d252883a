"""Every kind of page in a real browser: quiet, self-contained, accessible, and as wide as the window."""

import json

import pytest

from .conftest import settle

PAGES = (
    *("index.html", "molecular/sun+20.html", "molecular/view-45-beside.html", "compare/sun+20.html"),
    *("molecular/light.html", "molecular/display.html", "methods.html", "reader.html"),
)
WIDTHS = (390, 720, 1024, 1440, 2560)


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
