"""Methods page: published values beside computed ones, light through the day beside measurements, and sources."""

from collections.abc import Callable, Sequence
from dataclasses import dataclass

import numpy as np

from skychart.charts.numbers import fixed, significant, spaced
from skychart.charts.survey import RELATIVE_AZIMUTH_DEG, VIEW_ELEVATION_DEG, Survey, elevation_index
from skychart.checks.check import Check
from skychart.checks.chromaticity import chain1999_temperature
from skychart.checks.illuminance import usno1987_illuminance
from skychart.checks.twilight import koomen1952_zenith_luminance
from skychart.colour.temperature import cct_duv
from skychart.data.tables import load_table

_FIELDS = ("Quantity", "Source", "Citation", "Licence/terms", "Processing")
_RUNTIME_TABLES = (
    "solar_tsis1_hsrs_v2_1nm",
    "us76_density_profile",
    "atmosphere_profiles_afgl",
    "ozone_cross_section_serdyuchenko_1nm",
    "o4_cross_section_1nm",
    "gas_h2o_o2_k4_1nm",
    "no2_cross_section_1nm",
    "no2_mixing_ratio_afgl",
    "ground_albedo",
    "aerosol_bulk_opac_mie",
    "aerosol_phase_functions_mie",
)
_SITES = (("maryland", "measured, Maryland, 30 m"), ("sacramento_peak", "measured, Sacramento Peak, 2800 m"))
_DIGITS = 4
_SKY_SUNS_DEG = (10, 30, 60)  # as near as the build has them
_SKY_LOWEST_DEG = 10
_SKY_EVERY = 2  # view elevation of the survey
_SKY_STEP_DEG = 30  # of azimuth
_CHAIN_CD_M2 = np.geomspace(700, 20_000, 60)


@dataclass(frozen=True)
class CheckRow:
    """One check, written for reading; `verdict` is “met” or “missed”."""

    quantity: str
    conditions: str
    source: str
    published: str
    computed: str
    difference: str
    tolerance: str
    reason: str
    unit: str
    verdict: str


@dataclass(frozen=True)
class Topic:
    """Checks of one topic, with an anchor and how many are met."""

    title: str
    anchor: str
    rows: tuple[CheckRow, ...]
    met: int


@dataclass(frozen=True)
class Provenance:
    """A table this build read: its name and the lines of its header, as (field, text)."""

    name: str
    lines: tuple[tuple[str, str], ...]


@dataclass(frozen=True)
class MeasuredLight:
    """Measured points of one kind, with a name."""

    title: str
    solar_elevation_deg: np.ndarray
    values: np.ndarray


@dataclass(frozen=True)
class LightCourse:
    """Illuminance of level ground [lx] and luminance of the zenith [cd m⁻²] by sun elevation, and measurements.

    `air`: name of the atmosphere that is compared.
    """

    air: str
    solar_elevation_deg: np.ndarray
    illuminance_lx: np.ndarray
    zenith_cd_m2: np.ndarray
    published_illuminance: MeasuredLight
    measured_zenith: tuple[MeasuredLight, ...]


@dataclass(frozen=True)
class SkyPieces:
    """Pieces of the sky at one sun: luminance [cd m⁻²] and correlated colour temperature [K], where there is one."""

    title: str
    luminance_cd_m2: np.ndarray
    cct_k: np.ndarray


@dataclass(frozen=True)
class SkyTemperatures:
    """Colour temperature of pieces of sky over their luminance, and the fit to measured skies."""

    air: str
    skies: tuple[SkyPieces, ...]
    published_title: str
    published_cd_m2: np.ndarray
    published_k: np.ndarray


@dataclass(frozen=True)
class LightRow:
    """One sun of the comparison of illuminance, written for reading."""

    label: str
    computed: str
    published: str
    ratio: str


@dataclass(frozen=True)
class Methods:
    """Everything the methods page shows that is not prose."""

    topics: tuple[Topic, ...]
    total: int
    met: int
    course: LightCourse
    light_rows: tuple[LightRow, ...]
    temperatures: SkyTemperatures
    provenance: tuple[Provenance, ...]


def methods(checks: Sequence[Check], survey: Survey) -> Methods:
    """The page's data from the checks and from the survey of the atmosphere that is compared with measured light."""
    course = _course(survey)
    return Methods(
        topics=_topics(checks),
        total=len(checks),
        met=sum(check.passed for check in checks),
        course=course,
        light_rows=_light_rows(course),
        temperatures=_sky_temperatures(survey),
        provenance=tuple(_provenance(name) for name in _RUNTIME_TABLES),
    )


def check_row(check: Check, written: Callable[[str], str] = spaced) -> CheckRow:
    """One check with the digits its tolerance deserves; `written` turns a plain number into what is read.

    A number that is nan comes to `written` as an empty text.
    """
    decimals = _decimals(check)
    difference = _in_percent(check, check.difference) or _value(check.difference, decimals)
    sign = "" if difference.startswith("-") or not difference else "+"
    return CheckRow(
        quantity=check.quantity,
        conditions=check.conditions,
        source=check.source,
        published=written(_value(check.published, decimals)),
        computed=written(_value(check.computed, decimals)),
        difference=sign + written(difference),
        tolerance=written(_in_percent(check, check.tolerance) or _value(check.tolerance, decimals)),
        reason=check.tolerance_reason,
        unit="" if check.unit == "1" else check.unit,
        verdict="met" if check.passed else "missed",
    )


def _topics(checks: Sequence[Check]) -> tuple[Topic, ...]:
    """Topics in the order of their first check."""
    titles = list(dict.fromkeys(check.topic for check in checks))
    return tuple(
        Topic(title, f"topic-{number}", tuple(check_row(check) for check in own), sum(check.passed for check in own))
        for number, title in enumerate(titles, start=1)
        for own in [[check for check in checks if check.topic == title]]
    )


def _decimals(check: Check) -> int | None:
    """Decimals that show a tenth of the tolerance; None where a number is written with significant digits."""
    size = check.tolerance * abs(check.published) if check.relative else check.tolerance
    if max(abs(check.published), abs(check.computed)) >= 1e6 or size < 1e-7:
        return None
    return _decimals_of(size)


def _decimals_of(size: float) -> int:
    """Decimals that show a tenth of `size`."""
    return int(np.clip(1 - np.floor(np.log10(size)), 0, 8))


def _value(value: float, decimals: int | None) -> str:
    return significant(value, _DIGITS) if decimals is None else fixed(value, decimals)


def _in_percent(check: Check, share: float) -> str:
    """A share in per cent, to a tenth of the tolerance; nothing if the check is not relative or it is nan."""
    if not check.relative or np.isnan(share):
        return ""
    return f"{fixed(100 * share, _decimals_of(100 * check.tolerance))} %"


def _course(survey: Survey) -> LightCourse:
    suns = survey.solar_elevation_deg
    low, high = float(suns.min()), float(suns.max())
    fine = np.linspace(low, high, 205)
    measured = [(title, *koomen1952_zenith_luminance(site)) for site, title in _SITES]
    return LightCourse(
        air=survey.air.name,
        solar_elevation_deg=suns,
        illuminance_lx=np.pi * survey.card_XYZ[:, 1],
        zenith_cd_m2=survey.stokes_XYZ[:, elevation_index(90), 0, 0, 1],
        published_illuminance=MeasuredLight("published, USNO Circular 171", fine, usno1987_illuminance(fine)),
        measured_zenith=tuple(MeasuredLight(title, at[at >= low], values[at >= low]) for title, at, values in measured),
    )


def _sky_temperatures(survey: Survey) -> SkyTemperatures:
    suns = survey.solar_elevation_deg
    nearest = sorted({int(np.argmin(np.abs(suns - sun))) for sun in _SKY_SUNS_DEG})
    up = np.flatnonzero(VIEW_ELEVATION_DEG >= _SKY_LOWEST_DEG)[::_SKY_EVERY]
    across = np.flatnonzero(RELATIVE_AZIMUTH_DEG % _SKY_STEP_DEG == 0)
    skies = []
    for sun in nearest:
        XYZ = survey.stokes_XYZ[sun][np.ix_(up, across)][:, :, 0].reshape(-1, 3)
        cct, _ = cct_duv(XYZ, survey.observer)
        some = np.isfinite(cct)
        skies.append(SkyPieces(f"sun {spaced(f'{suns[sun]:g}')}° up", XYZ[some, 1], cct[some]))
    return SkyTemperatures(
        air=survey.air.name,
        skies=tuple(skies),
        published_title="measured clear skies, Chain et al. 1999",
        published_cd_m2=_CHAIN_CD_M2,
        published_k=chain1999_temperature(_CHAIN_CD_M2),
    )


def _light_rows(course: LightCourse) -> tuple[LightRow, ...]:
    published = usno1987_illuminance(course.solar_elevation_deg)
    rows = zip(course.solar_elevation_deg, course.illuminance_lx, published, strict=True)
    return tuple(
        LightRow(
            label=spaced(f"{sun:g}"),
            computed=spaced(significant(float(ours), 3)),
            published=spaced(significant(float(theirs), 3)),
            ratio=fixed(float(ours / theirs), 2),
        )
        for sun, ours, theirs in rows
    )


def _provenance(name: str) -> Provenance:
    pairs = (line.partition(":") for line in load_table(name).header)
    kept = ((field, text.strip()) for field, _, text in pairs if field.partition(",")[0] in _FIELDS)
    return Provenance(name, tuple(kept))
