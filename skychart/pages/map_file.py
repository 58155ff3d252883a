"""One sky from its settings to the bytes of its map."""

from collections.abc import Callable
from importlib.metadata import version

from skychart.charts.dome_map import dome_map
from skychart.charts.survey import survey
from skychart.config import DEFAULT_SETTINGS, AirSettings
from skychart.export.dome import dome_exr, dome_line
from skychart.sky import spectral


def map_file(
    air: AirSettings,
    solar_elevation_deg: float,
    width: int,
    sun_azimuth_deg: float,
    disc: bool,
    space: str,
    half: bool,
    progress: Callable[[str], None],
) -> tuple[str, bytes]:
    """What the map holds, in one line, and its file. Raises OutputError where OpenEXR is not installed."""
    progress(f"{air.name}: solving")
    sky = spectral.solve_spectral(air)
    progress("drawing the map")
    found = survey(sky, (solar_elevation_deg,), DEFAULT_SETTINGS.observer)
    dome = dome_map(found, 0, width, sun_azimuth_deg, disc)
    return dome_line(dome, space, half), dome_exr(dome, space, half, f"skychart {version('sky-colour-charts')}")
