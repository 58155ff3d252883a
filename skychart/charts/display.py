"""Display sheet: what screens lose of the skies of one atmosphere, by the elevation of the sun.

Gradients are taken along the vertical through the sun and along the one beside it. For sRGB and BT.1886 the sky is
exposed as on the sheets, "metered for the sky": the mean sky has 18.42 % of the display white of 100 cd/m², and what is
brighter than that white is cut off, each channel for itself. For PQ and HLG a level white card in the light of the
sheet has 203 cd/m² (ITU-R BT.2408); beyond the peak of the coding channels are cut off as well. Colours are
unadapted, against D65.
"""

from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np

from skychart.charts.bands import DEPTHS, Banding, banding
from skychart.charts.columns import GAMUTS, SPACE_TITLES, Column, NumberTable, Row
from skychart.charts.dome import light_at
from skychart.charts.exposure import exposures
from skychart.charts.lines import LINES, Line
from skychart.charts.numbers import degrees, fixed, significant, spaced
from skychart.charts.reach import PEAKS_CD_M2, Place, Range, Reach, reach
from skychart.charts.survey import Survey
from skychart.colour.coding import BT1886, CODINGS, SRGB, Coding
from skychart.colour.spaces import rgb

FIELD_DEG = 60.0
PICTURE_PX = 1080

_SAMPLE_DEG = 0.1
_SUN = Column("solar_elevation_deg", "Sun elevation", "°", "")
_Cells = tuple[Column, list[str]]


@dataclass(frozen=True)
class CodedLine:
    """A gradient in one coding at every sun: its steps, and the share of its length that the coding cuts off."""

    line: Line
    coding: Coding
    bandings: tuple[Banding, ...]
    over_range: tuple[float, ...]


@dataclass(frozen=True)
class DisplaySheet:
    """Everything a display page shows. `table` joins the others, which are what the page prints one by one."""

    atmosphere: str
    solar_elevation_deg: np.ndarray
    reaches: tuple[Reach, ...]
    coded: tuple[CodedLine, ...]
    findings: tuple[str, ...]
    gamut_table: NumberTable
    luminance_table: NumberTable
    step_tables: tuple[tuple[Line, NumberTable], ...]
    band_tables: tuple[tuple[Line, NumberTable], ...]
    table: NumberTable

    def least_bits(self, coding: Coding) -> np.ndarray:
        """By sun, the fewest bits that keep every step of both gradients invisible; nan where 16 do not suffice."""
        own = [coded.bandings for coded in self.coded if coded.coding == coding]
        return np.array([_most([found.least_bits for found in both]) for both in zip(*own, strict=True)])

    def largest_step(self, coding: Coding, bits: int) -> np.ndarray:
        """By sun, the largest step [ΔE_ITP] of both gradients with one of the `DEPTHS`."""
        own = [coded.bandings for coded in self.coded if coded.coding == coding]
        steps = [[found.largest[DEPTHS.index(bits)] for found in line] for line in own]
        return np.fmax.reduce(np.array(steps))


def display_sheet(survey: Survey) -> DisplaySheet:
    """The sheet of a survey, all its suns."""
    suns = range(len(survey.solar_elevation_deg))
    reaches = tuple(reach(survey, sun, GAMUTS) for sun in suns)
    coded = tuple(_coded(survey, line) for line in LINES)
    gamut, luminance = _gamut_columns(reaches), _luminance_columns([found.luminance for found in reaches])
    steps = [[column for one in line for column in _step_columns(one)] for line in coded]
    bands = [[column for one in line for column in _band_columns(one)] for line in coded]
    joined = [column for columns in (gamut, luminance, *steps, *bands) for column in columns]
    return DisplaySheet(
        atmosphere=survey.air.name,
        solar_elevation_deg=survey.solar_elevation_deg,
        reaches=reaches,
        coded=tuple(one for line in coded for one in line),
        findings=_findings(survey, reaches),
        gamut_table=_table(survey, gamut),
        luminance_table=_table(survey, luminance),
        step_tables=tuple((line, _table(survey, own)) for line, own in zip(LINES, steps, strict=True)),
        band_tables=tuple((line, _table(survey, own)) for line, own in zip(LINES, bands, strict=True)),
        table=_table(survey, joined),
    )


def shown(XYZ: np.ndarray, coding: Coding, own_white_cd_m2: float, card_cd_m2: float) -> np.ndarray:
    """Signal, above 1 where it would be cut off, that `coding` gives light `XYZ` [cd m⁻²] of a scene, (..., 3).

    `own_white_cd_m2`: the luminance that is white when the scene is metered for the sky; `card_cd_m2`: a level card's.
    """
    white = own_white_cd_m2 if coding in (SRGB, BT1886) else card_cd_m2
    return coding.signal(rgb(XYZ, coding.space) * (coding.white_cd_m2 / white))


def _coded(survey: Survey, line: Line) -> tuple[CodedLine, ...]:
    """A line in every coding at every sun."""
    position = np.arange(round(line.end_deg / _SAMPLE_DEG) + 1) * _SAMPLE_DEG
    directions = line.directions(position)
    found: dict[Coding, list[tuple[Banding, float]]] = {coding: [] for coding in CODINGS}
    for sun in range(len(survey.solar_elevation_deg)):
        XYZ = light_at(survey.sky_view(sun), *directions)
        own = exposures(survey.sky_XYZ[sun], survey.card_XYZ[sun])[0].display_white_cd_m2
        for coding, results in found.items():
            signal = shown(XYZ, coding, own, float(survey.card_XYZ[sun, 1]))
            over = float((signal.max(axis=-1) > 1).mean())
            results.append((banding(position, signal, coding), over))
    return tuple(CodedLine(line, coding, *zip(*results, strict=True)) for coding, results in found.items())


def _table(survey: Survey, columns: list[_Cells]) -> NumberTable:
    heads, cells = zip(*columns, strict=True)
    labels = [f"{sun:g}" for sun in survey.solar_elevation_deg]
    rows = zip(labels, zip(*cells, strict=True), strict=True)
    return NumberTable((_SUN,), heads, tuple(Row("", (label,), row) for label, row in rows))


def _gamut_columns(reaches: tuple[Reach, ...]) -> list[_Cells]:
    columns: list[_Cells] = []
    for own in zip(*(found.outside for found in reaches), strict=True):
        space, group = own[0].space, SPACE_TITLES[own[0].space]
        columns += [
            (
                Column(f"{space}_share_outside_percent", "outside", "%", group),
                [fixed(100 * found.share, 1) for found in own],
            ),
            (Column(f"{space}_beyond_delta_uv", "beyond", "Δu′v′", group), [fixed(o.beyond_uv, 4) for o in own]),
            (Column(f"{space}_lowest_over_luminance", "lowest : Y", "", group), [fixed(o.lowest, 3) for o in own]),
            *_place_columns(space, group, [found.place for found in own]),
        ]
    return columns


def _luminance_columns(ranges: list[Range]) -> list[_Cells]:
    darkest, brightest = ([getattr(found, name) for found in ranges] for name in ("darkest_cd_m2", "brightest_cd_m2"))
    card = [found.card_cd_m2 for found in ranges]
    above = "Sky above, 1 : 1"
    columns: list[_Cells] = [
        (Column("darkest_cd_m2", "luminance", "cd/m²", "Darkest sky"), [significant(value, 3) for value in darkest]),
        *_place_columns("darkest", "Darkest sky", [found.darkest for found in ranges]),
        (Column("brightest_cd_m2", "luminance", "cd/m²", "Brightest sky"), [significant(v, 3) for v in brightest]),
        *_place_columns("brightest", "Brightest sky", [found.brightest for found in ranges]),
        (
            Column("range_stops", "range", "stops", "Brightest sky"),
            [_stops(high, low) for high, low in zip(brightest, darkest, strict=True)],
        ),
        (Column("white_card_cd_m2", "luminance", "cd/m²", "White card"), [significant(value, 3) for value in card]),
    ]
    for i, peak in enumerate(PEAKS_CD_M2):
        shares = [fixed(100 * found.share_above[i], 1) for found in ranges]
        columns.append((Column(f"share_above_{peak:g}_percent", spaced(f"{peak:g}"), "%", above), shares))
    for values, key, group in ((brightest, "brightest", "Brightest over peak"), (card, "white_card", "Card over peak")):
        for peak in PEAKS_CD_M2:
            head = Column(f"{key}_over_{peak:g}_stops", spaced(f"{peak:g}"), "stops", group)
            columns.append((head, [_stops(value, peak) for value in values]))
    return columns


def _step_columns(coded: CodedLine) -> Iterator[_Cells]:
    prefix, group = f"{coded.line.key}_{coded.coding.key}", coded.coding.title
    for i, bits in enumerate(DEPTHS):
        steps = [fixed(found.largest[i], 2) for found in coded.bandings]
        yield Column(f"{prefix}_{bits}_bits_largest_delta_e_itp", f"{bits} bits", "ΔE_ITP", group), steps
    least = ["" if found.least_bits is None else str(found.least_bits) for found in coded.bandings]
    yield Column(f"{prefix}_least_bits", "least", "bits", group), least
    over = [fixed(100 * share, 1) for share in coded.over_range]
    yield Column(f"{prefix}_cut_off_percent", "cut off", "%", group), over


def _band_columns(coded: CodedLine) -> Iterator[_Cells]:
    prefix, group = f"{coded.line.key}_{coded.coding.key}", coded.coding.title
    for i, bits in enumerate(DEPTHS):
        widths = [fixed(found.widest[i] * PICTURE_PX / FIELD_DEG, 0) for found in coded.bandings]
        yield Column(f"{prefix}_{bits}_bits_widest_px_of_{PICTURE_PX}", f"{bits} bits", "px", group), widths


def _place_columns(key: str, group: str, places: list[Place]) -> list[_Cells]:
    """Where something is; the zenith has no azimuth."""
    up = [f"{round(place.view_elevation_deg, 1):g}" for place in places]
    around = ["" if place.view_elevation_deg == 90 else fixed(place.relative_azimuth_deg, 0) for place in places]
    return [
        (Column(f"{key}_at_view_elevation_deg", "elevation", "°", group), up),
        (Column(f"{key}_at_azimuth_deg", "azimuth", "°", group), around),
    ]


def _findings(survey: Survey, reaches: tuple[Reach, ...]) -> tuple[str, ...]:
    """A sentence for each space."""
    labels = [degrees(float(sun)) for sun in survey.solar_elevation_deg]
    texts = []
    for own in zip(*(found.outside for found in reaches), strict=True):
        most = max(range(len(own)), key=lambda sun: (own[sun].share, own[sun].beyond_uv))
        far = max(range(len(own)), key=lambda sun: own[sun].beyond_uv)
        size = fixed(abs(own[far].beyond_uv), 4)
        if own[far].beyond_uv > 0:
            some = f"at most {fixed(100 * own[most].share, 1)}" if own[most].share >= 0.0005 else "less than 0.1"
            said = f"{some} % of a sky lies outside, with the sun at {labels[most]}; "
            said += f"the farthest by {size} in u′v′, with the sun at {labels[far]}"
        else:
            said = (
                f"every sky lies inside; the nearest comes to {size} of the edge in u′v′, with the sun at {labels[far]}"
            )
        texts.append(f"{SPACE_TITLES[own[0].space]}: {said}.")
    return tuple(texts)


def _stops(value: float, reference: float) -> str:
    return fixed(float(np.log2(value / reference)), 1)


def _most(bits: list[int | None]) -> float:
    return float("nan") if None in bits else float(max(bit for bit in bits if bit is not None))
