"""Reading back what pages and files print: numbers with the digits they claim, and the tables of a page."""

import csv

import html5lib
import numpy as np

XHTML = "{http://www.w3.org/1999/xhtml}"
SAME = 1e-7
"""Two looks at one sky agree to this part: both find angles by cosines, which the size of an array may round anew."""

_READABLE = {
    **{"\u2212": "-", "\u2009": None, "\u202f": None, "×10": "e"},
    **dict(zip("⁻⁰¹²³⁴⁵⁶⁷⁸⁹", "-0123456789", strict=True)),
}


def plain(text: str) -> str:
    """A number as a page spaces it, as a program writes it; empty for a dash."""
    for seen, meant in _READABLE.items():
        text = text.replace(seen, meant or "")
    return "" if text == "—" else text


def assert_says(texts, values, digits: int = 4) -> None:
    """Every text is its value, rounded where the text ends: at its last decimal, or else after `digits`.

    An empty text, a dash or None says that there is no value, nan.
    """
    values = np.ravel(values)
    assert len(texts) == len(values) > 0
    for text, value in zip(texts, values, strict=True):
        written = plain("" if text is None else str(text))
        if not written or np.isnan(value):
            assert not written, f"{text} stands for no value"
            assert np.isnan(value), f"nothing stands for {value}"
            continue
        decimals = written.partition("e")[0].partition(".")[2] if isinstance(text, str) and "e" not in written else ""
        unit = 10.0 ** -len(decimals) if decimals else 10.0 ** (np.floor(np.log10(abs(value) or 1)) + 1 - digits)
        assert abs(float(written) - value) <= 0.5 * unit + SAME * abs(value), f"{text} stands for {value}"


def rows_of(data: bytes) -> list[dict[str, str]]:
    """Rows of a CSV file below its remarks, by column name."""
    return list(csv.DictReader(line for line in data.decode("utf-8").splitlines() if not line.startswith("#")))


def opened(page: bytes):
    """A page as a tree; parsed strictly."""
    return html5lib.HTMLParser(strict=True).parse(page.decode("utf-8"))


def all_of(tree, name: str, kind: str = "") -> list:
    """Elements of a name, and of a class where one is given."""
    found = tree.iter(f"{XHTML}{name}")
    return [element for element in found if not kind or kind in (element.get("class") or "").split()]


def text_of(element) -> str:
    """All text inside an element, without the white space around it."""
    return "".join(element.itertext()).strip()


def words_of(element) -> list[str]:
    """Texts inside an element, between plain spaces; thin spaces belong to numbers."""
    return [word for word in text_of(element).replace("\n", " ").split(" ") if word]


def body_of(table) -> list[list[str]]:
    """Texts of all cells of the rows of a table, heads of rows included, without its own head."""
    rows = [row for body in table.iter(f"{XHTML}tbody") for row in body.iter(f"{XHTML}tr")]
    return [[text_of(cell) for cell in row] for row in rows]
