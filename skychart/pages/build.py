"""Build the site: solve the atmospheres side by side, make all chart data, render sheets, write once at the end."""

from collections.abc import Callable, Sequence
from concurrent.futures import Executor, Future, as_completed
from dataclasses import dataclass, replace
from pathlib import Path

from skychart.charts.checks import methods
from skychart.charts.comparison import comparison
from skychart.charts.direction import direction_sheet
from skychart.charts.display import display_sheet
from skychart.charts.light import SunLight, light_sheet
from skychart.charts.overview import overview
from skychart.charts.reader import READER_SUNS_DEG, reader_sky
from skychart.charts.sheet import elevation_sheet
from skychart.charts.survey import DIRECTIONS, Survey, at_suns, survey
from skychart.checks import COMPARED_AIRS, PIECES, Check, by_topic, sky_checks
from skychart.config import NAMED_AIRS, AirSettings, Settings
from skychart.export.openexr import has_openexr
from skychart.pages.display_page import display_files
from skychart.pages.environment import static_files
from skychart.pages.light_page import light_files
from skychart.pages.reader_page import reader_data_files, reader_files
from skychart.pages.render import comparison_files, direction_files, methods_files, sheet_files, start_files
from skychart.pages.sheet_archive import OPENEXR_LEFT_OUT
from skychart.pages.site import Atlas, make_atlas
from skychart.pages.workers import workers
from skychart.pages.write import swap_in
from skychart.sky.spectral import SpectralSky, solve_spectral


@dataclass(frozen=True)
class BuildReport:
    """What a build wrote, and how many published values it met."""

    out: Path
    pages: int
    files: int
    size_bytes: int
    checks: int
    checks_met: int

    def __str__(self) -> str:
        size = f"{self.size_bytes / 1e6:.1f} MB"
        met = f"{self.checks_met} of {self.checks} published values met"
        return f"{self.out}: {self.pages} pages, {self.files} files, {size}; {met}"


@dataclass(frozen=True)
class Solved:
    """What is kept of a solved sky, which itself is too large to be handed about: `files` are the reader's."""

    survey: Survey
    files: dict[str, bytes]
    checks: tuple[Check, ...]


def build_site(settings: Settings, out: Path, jobs: int, progress: Callable[[str], None]) -> BuildReport:
    """Write the site of `settings` to the folder `out` with `jobs` processes; nothing is written before all is ready.

    `progress` is called with a line for each step. Raises OutputError if `out` may not be replaced.
    """
    settings = replace(settings, solar_elevations_deg=tuple(sorted(settings.solar_elevations_deg)))
    atlas = make_atlas(settings)
    files = static_files()
    if not has_openexr():
        progress(OPENEXR_LEFT_OUT)
    with workers(jobs) as pool:
        solving = [_submit_air(pool, air, settings, progress) for air in settings.atmospheres]
        checking = _submit_checks(pool, settings)
        solved = [done.result() for done in solving]
        surveys = [sky.survey for sky in solved]
        rendering = [pool.submit(_display, atlas, found) for found in surveys]  # first, as it takes longest
        rendering += [work for found in surveys for work in _submit_pages(pool, atlas, found)]
        rendering += _submit_comparisons(pool, atlas, surveys)
        progress("comparing with published values")
        checks = by_topic([*(sky.checks for sky in solved), *(done.result() for done in checking)])
        rendering.append(pool.submit(methods_files, atlas, methods(checks, _measured_alike(surveys))))
        for count, done in enumerate(as_completed(rendering), start=1):
            files |= done.result()
            progress(f"page {count} of {len(rendering)}")
    for sky in solved:
        files |= sky.files
    files |= reader_files(atlas)
    progress("writing")
    swap_in(files, out)
    return BuildReport(
        out=out,
        pages=sum(path.endswith(".html") for path in files),
        files=len(files),
        size_bytes=sum(map(len, files.values())),
        checks=len(checks),
        checks_met=sum(check.passed for check in checks),
    )


def _measured_alike(surveys: Sequence[Survey]) -> Survey:
    """The sky to set beside measured ones: that of clear air, or the first where it is not among them."""
    return next((found for found in surveys if found.air == NAMED_AIRS["clear"]), surveys[0])


def _submit_air(
    pool: Executor, air: AirSettings, settings: Settings, progress: Callable[[str], None]
) -> Future[Solved]:
    """One atmosphere, solved and looked at in every direction, as work for the pool."""
    progress(f"{air.name}: solving")
    return pool.submit(_solved, solve_spectral, sky_checks, air, settings)


def _solved(
    solve: Callable[[AirSettings], SpectralSky],
    compare: Callable[[SpectralSky], tuple[Check, ...]],
    air: AirSettings,
    settings: Settings,
) -> Solved:
    """One survey serves the pages and the reader, which have suns of their own."""
    sky = solve(air)
    suns = settings.solar_elevations_deg
    found = survey(sky, tuple(sorted({*suns, *READER_SUNS_DEG})), settings.observer)
    return Solved(at_suns(found, suns), reader_data_files(reader_sky(sky, found)), compare(sky))


def _submit_checks(pool: Executor, settings: Settings) -> list[Future[tuple[Check, ...]]]:
    """All other comparisons as work for the pool, those with skies that these settings do not ask for among them."""
    missing = [air for air in COMPARED_AIRS if air not in settings.atmospheres]
    return [
        *(pool.submit(_compared, solve_spectral, sky_checks, air) for air in missing),
        *(pool.submit(piece) for piece in PIECES),
    ]


def _compared(
    solve: Callable[[AirSettings], SpectralSky],
    compare: Callable[[SpectralSky], tuple[Check, ...]],
    air: AirSettings,
) -> tuple[Check, ...]:
    return compare(solve(air))


def _submit_pages(pool: Executor, atlas: Atlas, found: Survey) -> list[Future[dict[str, bytes]]]:
    """Every page of one atmosphere but its display sheet as work for the pool."""
    suns = range(len(found.solar_elevation_deg))
    light = light_sheet(found)
    return [
        pool.submit(start_files, atlas, overview(found)),
        pool.submit(light_files, atlas, light),
        *(pool.submit(_sheet, atlas, found, sun, light.suns[sun]) for sun in suns),
        *(pool.submit(direction_files, atlas, direction_sheet(found, view)) for view in DIRECTIONS),
    ]


def _sheet(atlas: Atlas, found: Survey, sun: int, light: SunLight) -> dict[str, bytes]:
    """In a worker, for its stops take a while."""
    return sheet_files(atlas, elevation_sheet(found, sun), light)


def _display(atlas: Atlas, found: Survey) -> dict[str, bytes]:
    """In a worker, for 28 suns take seconds."""
    return display_files(atlas, display_sheet(found))


def _submit_comparisons(pool: Executor, atlas: Atlas, surveys: Sequence[Survey]) -> list[Future[dict[str, bytes]]]:
    """A page for each sun where there are several atmospheres."""
    suns = range(len(surveys[0].solar_elevation_deg)) if atlas.compares else ()
    return [pool.submit(comparison_files, atlas, comparison(surveys, sun)) for sun in suns]
