"""How numbers are rounded and written: plain for files and copying, spaced for reading."""

import math
from collections.abc import Iterable

MISSING = "—"
_THIN_SPACE = "\u2009"
_MINUS = "\u2212"
_SUPERSCRIPT = str.maketrans("-0123456789", "⁻⁰¹²³⁴⁵⁶⁷⁸⁹")


def fixed(value: float, decimals: int) -> str:
    """`value` with a fixed number of decimals; empty where it is nan, and never a negative zero."""
    if math.isnan(value):
        return ""
    text = f"{value:.{decimals}f}"
    return text.removeprefix("-") if float(text) == 0 else text


def short_xy(xy: Iterable[float]) -> str:
    """A chromaticity x y of 3 decimals without the zeros before the point, as on a block of colour."""
    return " ".join(fixed(float(value), 3).removeprefix("0") for value in xy)


def significant(value: float, digits: int) -> str:
    """`value` with `digits` significant digits, scientific below 1e-4 only; empty where it is nan."""
    if math.isnan(value):
        return ""
    if value == 0:
        return "0"
    rounded = float(f"{value:.{digits - 1}e}")
    exponent = math.floor(math.log10(abs(rounded)))
    if exponent < -4:
        return f"{rounded:.{digits - 1}e}"
    return f"{rounded:.{max(digits - 1 - exponent, 0)}f}"


def kelvin(value: float) -> str:
    """A colour temperature with the digits that are true: a step in chromaticity is ever more kelvins up there."""
    return significant(value, 2 if value >= 30_000 else 3 if value >= 10_000 else 4)


def rounded(value: float, digits: int) -> float | None:
    """`value` rounded to `digits` significant digits for JSON; None where it is nan."""
    return None if math.isnan(value) else float(f"{value:.{digits}g}")


def spaced(text: str) -> str:
    """A plain number as it is read on a page: true minus, thin spaces from five digits on, powers, dash for none."""
    if not text:
        return MISSING
    mantissa, power, exponent = text.partition("e")
    if power:
        return f"{spaced(mantissa)}\u202f×\u202f10{str(int(exponent)).translate(_SUPERSCRIPT)}"
    sign, body = (_MINUS, text[1:]) if text.startswith("-") else ("", text)
    whole, point, decimals = body.partition(".")
    if whole.isdigit() and len(whole) > 4:
        first = len(whole) % 3 or 3
        whole = _THIN_SPACE.join([whole[:first], *(whole[i : i + 3] for i in range(first, len(whole), 3))])
    return f"{sign}{whole}{point}{decimals}"


def degrees(value: float) -> str:
    """An angle as a label: `−12°`, `2°`, `12.5°`."""
    return spaced(f"{value:g}") + "°"


def signed_stem(prefix: str, value: float) -> str:
    """File stem that carries an elevation: `sun+02`, `sun-12`, `sun+12.5`."""
    whole, point, decimals = f"{abs(value):g}".partition(".")
    sign = "-" if value < 0 else "+"
    return f"{prefix}{sign}{whole.zfill(2)}{point}{decimals}"
