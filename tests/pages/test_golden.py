"""Pages keep their structure; a change on purpose is accepted with SKYCHART_ACCEPT=1 and shows in the diff.

Numbers and colours are scrubbed, and repeated lines folded, since other tests look after values.
"""

import os
import re
from itertools import groupby
from pathlib import Path

import pytest

GOLDEN = Path(__file__).parent / "golden"
PAGES = ("index", "methods", "molecular/sun+20", "molecular/view-45-beside", "compare/sun+20")


def scrubbed(text):
    """Structure of a page: versions, colours and numbers replaced, a run of equal lines as one."""
    text = re.sub(r"#[0-9a-f]{6}\b", "COLOUR", text)
    text = re.sub(r";background:color\([^)]*\)", "", text)
    text = re.sub(r"[−-]?\d[\d\u2009]*(\.\d+)?(e-\d+)?|(?<=[ >])\.\d{3}", "N", text)
    text = re.sub(r'class="(dark|light)"', 'class="INK"', text).replace("<td>—", "<td>N")
    text = re.sub(r"(<t[dr][^>]*>N)(<td>(N|yes|no|COLOUR))+", r"\1…", text)
    lines = re.sub(r'id="e\w+"', 'id="ROW"', text).splitlines()
    return "\n".join(line for line, _ in groupby(lines)) + "\n"


@pytest.mark.parametrize("page", PAGES)
def test_structure_is_the_accepted_one(site, page):
    """Equal to the file of the same name in `golden`."""
    found = scrubbed((site / f"{page}.html").read_text(encoding="utf-8"))
    golden = GOLDEN / f"{page.replace('/', '-').replace('+', '')}.html"
    if os.environ.get("SKYCHART_ACCEPT"):
        golden.write_text(found, encoding="utf-8", newline="\n")
    assert found == golden.read_text(encoding="utf-8")
