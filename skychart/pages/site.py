"""Where every page lies, what it is called and what leads to it."""

from collections.abc import Sequence
from dataclasses import dataclass
from importlib.metadata import version

from skychart.charts.ground import air_summary
from skychart.charts.numbers import degrees
from skychart.charts.sheet import sheet_stem
from skychart.charts.survey import DIRECTIONS, Direction
from skychart.config import Settings

SITE_TITLE = "Sky-colour reference charts"
METHODS_PATH = "methods.html"
READER_PATH = "reader.html"
COMPARE_FOLDER = "compare"
OBSERVER_TITLES = {
    "cie-1931-2": "CIE 1931 2° observer",
    "cie-1964-10": "CIE 1964 10° observer",
    "cie-2015-2": "CIE 2015 2° observer",
    "cie-2015-10": "CIE 2015 10° observer",
}


@dataclass(frozen=True)
class Link:
    """A place in the site; `current` where the page itself, or one of its kind, is it."""

    title: str
    path: str
    current: bool = False
    kind: str = ""


@dataclass(frozen=True)
class Page:
    """What the frame of a page says: where it lies, its names, and its neighbours in a sequence."""

    path: str
    title: str
    description: str
    menu: tuple[Link, ...]
    site_title: str
    version: str
    observer: str
    previous: Link | None = None
    next: Link | None = None


@dataclass(frozen=True)
class Atlas:
    """The settings of a build as a map of its pages."""

    settings: Settings
    version: str

    @property
    def atmospheres(self) -> tuple[str, ...]:
        """Names, the one of the start page first."""
        return tuple(air.name for air in self.settings.atmospheres)

    def start_path(self, atmosphere: str) -> str:
        """The start page, and for each further atmosphere its own."""
        return "index.html" if atmosphere == self.atmospheres[0] else f"{atmosphere}/index.html"

    @property
    def middle_sun(self) -> float:
        """The sun that the menu leads to [deg]: the one nearest to 30."""
        return min(self.settings.solar_elevations_deg, key=lambda sun: abs(sun - 30))

    @property
    def compares(self) -> bool:
        """Whether there are several atmospheres to set side by side."""
        return len(self.atmospheres) > 1

    def compare_path(self, sun: float) -> str:
        """The page that sets all atmospheres side by side."""
        return f"{COMPARE_FOLDER}/{sheet_stem(sun)}.html"

    def menu(self, kind: str, atmosphere: str) -> tuple[Link, ...]:
        """The site's menu; kinds of sheet that are added later get their line here."""
        middle = self.middle_sun
        return (
            Link("The day", self.start_path(atmosphere), kind == "start"),
            Link("By sun elevation", f"{atmosphere}/{sheet_stem(middle)}.html", kind == "sun"),
            Link("By direction", f"{atmosphere}/{DIRECTIONS[0].stem}.html", kind == "view"),
            Link("Light", f"{atmosphere}/light.html", kind == "light"),
            *([Link("Side by side", self.compare_path(middle), kind == "compare")] if self.compares else []),
            Link("Display", f"{atmosphere}/display.html", kind == "display"),
            Link("Reader", READER_PATH, kind == "reader"),
            Link("Methods and checks", METHODS_PATH, kind == "methods"),
        )

    def page(
        self,
        kind: str,
        atmosphere: str,
        path: str,
        title: str,
        description: str,
        previous: Link | None = None,
        following: Link | None = None,
    ) -> Page:
        """The frame of one page."""
        full = title if title == SITE_TITLE else f"{title} · {SITE_TITLE}"
        menu = self.menu(kind, atmosphere)
        observer = OBSERVER_TITLES[self.settings.observer]
        return Page(path, full, description, menu, SITE_TITLE, self.version, observer, previous, following)

    def ruler(self, atmosphere: str, present: float | None) -> tuple[Link, ...]:
        """All sun elevations in ascending order; the kind tells twilight, horizon and day apart."""
        return tuple(
            Link(degrees(sun), f"{atmosphere}/{sheet_stem(sun)}.html", sun == present, _side(sun))
            for sun in sorted(self.settings.solar_elevations_deg)
        )

    def directions(self, atmosphere: str, present: Direction | None) -> tuple[Link, ...]:
        """All direction sheets."""
        return tuple(Link(view.title, f"{atmosphere}/{view.stem}.html", view == present) for view in DIRECTIONS)

    def switch(self, atmosphere: str, stem: str | None) -> tuple[Link, ...]:
        """The same page in every atmosphere: a sheet by its stem, the start page without one."""
        return tuple(
            Link(name, f"{name}/{stem}.html" if stem else self.start_path(name), name == atmosphere)
            for name in self.atmospheres
        )

    def sun_switch(self, folder: str, sun: float) -> tuple[Link, ...]:
        """The sheet of one sun in every atmosphere, and all side by side; `folder` is that of the present page."""
        beside = Link("side by side", self.compare_path(sun), folder == COMPARE_FOLDER)
        return self.switch(folder, sheet_stem(sun)) + ((beside,) if self.compares else ())

    def air(self, atmosphere: str) -> str:
        """An atmosphere's settings in one line."""
        settings = next(air for air in self.settings.atmospheres if air.name == atmosphere)
        return air_summary(settings)


def make_atlas(settings: Settings) -> Atlas:
    """The map of a build, with the version of the installed package."""
    return Atlas(settings, version("sky-colour-charts"))


def neighbours(links: Sequence[Link]) -> tuple[Link | None, Link | None]:
    """The links before and after the current one."""
    here = next(i for i, link in enumerate(links) if link.current)
    return (links[here - 1] if here > 0 else None), (links[here + 1] if here + 1 < len(links) else None)


def sun_in_words(solar_elevation_deg: float) -> str:
    """A sun elevation as a heading."""
    if solar_elevation_deg == 90:
        return "Sun at the zenith"
    if solar_elevation_deg == 0:
        return "Sun on the horizon"
    side = "above" if solar_elevation_deg > 0 else "below"
    return f"Sun {degrees(abs(solar_elevation_deg))} {side} the horizon"


def _side(sun: float) -> str:
    return "horizon" if sun == 0 else ("night" if sun < 0 else "day")
