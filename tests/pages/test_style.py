"""The stylesheet keeps its promises: neutral, legible, and swatches untouched."""

import re

import pytest

from skychart.pages.environment import templates_folder

CSS = (templates_folder() / "static" / "skychart.css").read_text(encoding="utf-8")


def expanded(code):
    """Six digits of a three or six digit colour."""
    return "".join(2 * digit for digit in code) if len(code) == 3 else code


def contrast(first, second):
    """Contrast ratio of two greys (WCAG 2.2)."""
    levels = [int(code[:2], 16) / 255 for code in (first, second)]
    low, high = sorted(level / 12.92 if level <= 0.04045 else ((level + 0.055) / 1.055) ** 2.4 for level in levels)
    return (high + 0.05) / (low + 0.05)


def variables(block):
    """Custom properties that are colours."""
    return {name: expanded(code) for name, code in re.findall(r"--(\w+): #([0-9a-f]+);", block)}


LIGHT, DARK = (variables(block) for block in re.findall(r":root \{(.*?)\}", CSS, re.DOTALL)[:2])


def test_every_colour_is_a_neutral_grey():
    """R = G = B, and no colour comes by name or function."""
    codes = [expanded(code) for code in re.findall(r"#([0-9a-f]{3,6})\b", CSS)]
    assert len(codes) > 15
    assert all(code[:2] == code[2:4] == code[4:] for code in codes)
    assert not re.search(r"\b(rgb|hsl|oklch|lab|red|blue|green|orange)\b", CSS)


@pytest.mark.parametrize("theme", [LIGHT, LIGHT | DARK], ids=["light", "dark"])
def test_text_has_contrast(theme):
    """Ink and muted text reach 4.5 on every ground they stand on, in both themes."""
    for text in ("ink", "muted"):
        for ground in ("paper", "raised"):
            assert contrast(theme[text], theme[ground]) >= 4.5
    assert contrast("000000", theme["surround"]) >= 4.5


def test_the_surround_is_the_same_everywhere():
    """L* 50, in light and dark alike."""
    assert LIGHT["surround"] == "777777"
    assert "surround" not in DARK


def test_nothing_touches_a_swatch():
    """No opacity, filter or blend anywhere; swatches are printed and shown as they are."""
    assert not re.search(r"\b(opacity|filter|mix-blend-mode|backdrop-filter)\b", CSS)
    rule = re.search(r"\.blocks tbody td \{([^}]*)\}", CSS).group(1)
    assert "print-color-adjust: exact" in rule
    assert "forced-color-adjust: none" in rule


def test_every_block_is_closed():
    """A brace lost in a merge would hide all rules behind it in a media query."""
    depth = 0
    for line in CSS.splitlines():
        depth += line.count("{") - line.count("}")
        assert depth in (0, 1, 2), line
        assert depth == 0 or not line.startswith("/*"), line
    assert depth == 0
