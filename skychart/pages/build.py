"""Build the site: solve the atmospheres side by side, make all chart data, render sheets, write once at the end."""

from collections.abc import Callable, Sequence
from concurrent.futures import Executor, Future, as_completed
from dataclasses import dataclass, replace
from pathlib import Path

from skychart.charts.checks import methods
from skychart.charts.comparison import comparison
from skychart.charts.direction import direction_sheet
from skychart.charts.light import light_sheet
from skychart.charts.overview import overview
from skychart.charts.sheet import elevation_sheet
from skychart.charts.survey import DIRECTIONS, Survey, survey
from skychart.checks import run_checks
from skychart.config import NAMED_AIRS, AirSettings, Settings
from skychart.pages.environment import static_files
from skychart.pages.light_page import light_files
from skychart.pages.render import comparison_files, direction_files, methods_files, sheet_files, start_files
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


def build_site(settings: Settings, out: Path, jobs: int, progress: Callable[[str], None]) -> BuildReport:
    """Write the site of `settings` to the folder `out` with `jobs` processes; nothing is written before all is ready.

    `progress` is called with a line for each step. Raises OutputError if `out` may not be replaced.
    """
    settings = replace(settings, solar_elevations_deg=tuple(sorted(settings.solar_elevations_deg)))
    atlas = make_atlas(settings)
    files = static_files()
    with workers(jobs) as pool:
        solving = [_submit_air(pool, air, settings, progress) for air in settings.atmospheres]
        skies, surveys = zip(*(done.result() for done in solving), strict=True)
        checking = pool.submit(run_checks, [sky for sky in skies if sky is not None])
        rendering = [work for found in surveys for work in _submit_pages(pool, atlas, found)]
        rendering += _submit_comparisons(pool, atlas, surveys)
        for count, done in enumerate(as_completed(rendering), start=1):
            files |= done.result()
            progress(f"page {count} of {len(rendering)}")
        progress("comparing with published values")
        checks = checking.result()
    files |= methods_files(atlas, methods(checks, _measured_alike(surveys)))
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
) -> Future[tuple[SpectralSky | None, Survey]]:
    """One atmosphere, solved and looked at in every direction, as work for the pool."""
    progress(f"{air.name}: solving")
    return pool.submit(_solved, solve_spectral, air, settings)


def _solved(
    solve: Callable[[AirSettings], SpectralSky], air: AirSettings, settings: Settings
) -> tuple[SpectralSky | None, Survey]:
    """The survey, and the sky itself where there is no haze: a hazy one is too large to be handed about."""
    sky = solve(air)
    found = survey(sky, settings.solar_elevations_deg, settings.observer)
    return (sky if air.haze == "none" else None), found


def _submit_pages(pool: Executor, atlas: Atlas, found: Survey) -> list[Future[dict[str, bytes]]]:
    """Every page of one atmosphere as work for the pool."""
    suns = range(len(found.solar_elevation_deg))
    light = light_sheet(found)
    return [
        pool.submit(start_files, atlas, overview(found)),
        pool.submit(light_files, atlas, light),
        *(pool.submit(sheet_files, atlas, elevation_sheet(found, sun), light.suns[sun]) for sun in suns),
        *(pool.submit(direction_files, atlas, direction_sheet(found, view)) for view in DIRECTIONS),
    ]


def _submit_comparisons(pool: Executor, atlas: Atlas, surveys: Sequence[Survey]) -> list[Future[dict[str, bytes]]]:
    """A page for each sun where there are several atmospheres."""
    suns = range(len(surveys[0].solar_elevation_deg)) if atlas.compares else ()
    return [pool.submit(comparison_files, atlas, comparison(surveys, sun)) for sun in suns]
