"""A real browser, and small sites for it to open from disk."""

import os
import shutil
from pathlib import Path

import pytest

from skychart.config import AirSettings, Settings
from skychart.pages.environment import static_files
from skychart.pages.reader_page import reader_data_files, reader_files
from skychart.pages.site import make_atlas
from tests.pages.conftest import fake_physics, site

__all__ = ["fake_physics", "site"]

WIDE = {"width": 1440, "height": 1000}


@pytest.fixture(scope="session")
def chromium():
    """The system's Chromium, headless; a skip in one line where there is none, but a failure where CI is set."""
    path = shutil.which("chromium")
    if path is None and not os.environ.get("CI"):
        pytest.skip("no program named chromium: pages are not tested in a browser")
    assert path, "no program named chromium, and CI may not skip the browser's tests"
    from playwright.sync_api import sync_playwright

    with sync_playwright() as driver:
        browser = driver.chromium.launch(executable_path=path, args=["--no-sandbox"])
        yield browser
        browser.close()


class Watched:
    """A page that notes all that it asks for and all that it complains of."""

    def __init__(self, context):
        self.requests, self.messages = [], []
        context.on("request", lambda request: self.requests.append(request.url))
        self.page = context.new_page()
        self.page.on("console", lambda message: self.messages.append(message.text))
        self.page.on("pageerror", lambda error: self.messages.append(str(error)))


@pytest.fixture
def watch(chromium):
    """Open a file in a fresh context: `watch(path, fragment, **context options)`; messages must not come at all."""
    contexts, watched = [], []

    def open_page(path: Path, fragment: str = "", **options) -> Watched:
        context = chromium.new_context(**{"viewport": WIDE} | options)
        contexts.append(context)
        found = Watched(context)
        watched.append(found)
        found.page.goto(path.as_uri() + fragment)
        return found

    yield open_page
    for context in contexts:
        context.close()
    assert [message for found in watched for message in found.messages] == []


@pytest.fixture(scope="session")
def molecular_site(default_reader, tmp_path_factory):
    """Folder with the reader of the default sky, which is a real one."""
    atlas = make_atlas(Settings(atmospheres=(AirSettings(),)))
    out = tmp_path_factory.mktemp("molecular")
    for path, content in (static_files() | reader_files(atlas) | reader_data_files(default_reader)).items():
        (out / path).parent.mkdir(parents=True, exist_ok=True)
        (out / path).write_bytes(content)
    return out


def settle(page):
    """Wait until what was asked of the reader is drawn and the address is written."""
    page.wait_for_timeout(300)
    page.wait_for_function("document.querySelector('#numbers dd')")


def numbers(page):
    """The numbers of the chosen direction by their names, as plain texts."""
    found = page.evaluate(
        """() => [...document.querySelectorAll('#numbers > div')].map((pair) => [
             pair.querySelector('dt').textContent,
             [...pair.querySelectorAll('dd button')].map((button) => button.textContent)])"""
    )
    plain = str.maketrans({"\u2009": None, "\u2212": "-"})
    return {name.strip(): [text.translate(plain) for text in texts] for name, texts in found}
