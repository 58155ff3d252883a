"""The files of an elevation sheet for other programs, in one archive."""

from dataclasses import dataclass

from skychart.charts.ramps import ramps
from skychart.charts.sheet import Sheet
from skychart.config import DEFAULT_SETTINGS, NAMED_AIRS
from skychart.export.archive import zip_bytes
from skychart.export.cgats import table_cgats
from skychart.export.openexr import HOW_TO_GET_IT, has_openexr
from skychart.export.patches import patches_exr
from skychart.export.ramps import ramp_pngs
from skychart.export.spectral import spectra_tm27
from skychart.export.tables import table_csv
from skychart.pages.site import Atlas

OPENEXR_LEFT_OUT = f"OpenEXR is not installed, so patch pictures are left out; get it with: {HOW_TO_GET_IT}"
_CONTENTS = "contents.txt"
_STOPS_REMARK = "linear RGB over the luminance of the white card; largest differences of the line"


@dataclass(frozen=True)
class Archive:
    """An archive: path in the site, bytes, whether it holds the OpenEXR picture, and how to get the sky as a map."""

    path: str
    data: bytes
    has_exr: bool
    map_command: str | None


def sheet_archive(atlas: Atlas, chart: Sheet) -> Archive:
    """Colour table, spectra, patches and test ramps of a sheet."""
    software = f"skychart {atlas.version}"
    source = f"{chart.atmosphere}, sun {chart.solar_elevation_deg:g} deg"
    files = {
        "stops.csv": table_csv(chart.stops.table, (f"Gradient stops, {source}. {software}", _STOPS_REMARK)),
        "colours.cgats.txt": table_cgats(chart, software, f"Sky colours, {source}"),
        **{f"spectrum-{key}.spdx": data for key, data in spectra_tm27(chart.spectra, software, source).items()},
        **ramp_pngs(ramps(chart.sky), chart.ground.card_luminance_cd_m2, software, source),
    }
    has_exr = has_openexr()
    if has_exr:
        files["patches.exr"] = patches_exr(chart, software)
    files[_CONTENTS] = _contents(software, source, atlas.air(chart.atmosphere), has_exr)
    path = f"{chart.atmosphere}/{chart.stem}-files.zip"
    return Archive(path, zip_bytes(files), has_exr, _map_command(atlas, chart))


def _map_command(atlas: Atlas, chart: Sheet) -> str | None:
    """The command that writes the map of this very sky; None where its settings have no name to ask for."""
    air = next(air for air in atlas.settings.atmospheres if air.name == chart.atmosphere)
    if air != NAMED_AIRS.get(air.name) or atlas.settings.observer != DEFAULT_SETTINGS.observer:
        return None
    return f"skychart map --sun {chart.solar_elevation_deg:g} dome.exr --atmosphere {air.name}"


def _contents(software: str, source: str, air: str, has_exr: bool) -> bytes:
    lines = [
        f"Sky colours, {source}. {software}",
        air,
        "",
        "colours.cgats.txt   CGATS.17: absolute XYZ and xyY of every direction of the sheet, Y in cd/m2",
        "spectrum-*.spdx     IES TM-27 XML: spectral radiance of five directions; irradiance by the sun while it is up",
        *(["patches.exr         OpenEXR: the blocks of the sheet, linear BT.709, 1.0 is 1 cd/m2"] if has_exr else []),
        "stops.csv           gradient stops of the sheet, linear RGB over the luminance of the white card",
        "ramp-beside-*.png   16 bits: horizon to zenith, 90 degrees from the sun",
        "ramp-plane-*.png    16 bits: horizon below the sun, zenith, horizon opposite",
        "  *-srgb.png        code white is a level white card in this light",
        "  *-pq.png          PQ with BT.2020 primaries (cICP chunk); the card is at 203 cd/m2 (ITU-R BT.2408)",
        "",
        "Caution: test pictures that fill a bright display can dazzle. Dates in the files are fixed at 1980-01-01.",
    ]
    return "".join(f"{line}\n" for line in lines).encode("utf-8")
