"""Settings of a build: which air, which sun elevations, which standard observer; their defaults and their TOML form.

The configuration file is TOML 1.0 in UTF-8 (https://toml.io/en/v1.0.0). Keys are the field names below; each
`[[atmosphere]]` table is one `AirSettings`. Every fault of a file is reported, not only the first.
"""

import math
import re
import textwrap
import tomllib
from collections import Counter
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass, field
from numbers import Real
from pathlib import Path
from typing import Any, NamedTuple

from skychart.errors import ConfigError, InputError

OBSERVERS = ("cie-1931-2", "cie-1964-10", "cie-2015-2", "cie-2015-10")
NO_HAZE = "none"
HAZES = ("clean", "average", "hazy", "maritime", "dusty")
"""Kinds of haze that the physics knows, `skychart.sky.haze_types.HAZE_TYPES`."""

GROUNDS = (
    *("grass", "lawn", "loam", "sand", "stubble", "concrete-dry", "concrete-wet"),
    *("snow-2cm", "snow-dry-fresh", "snow-model", "water"),
)
"""Grounds that the physics knows by name, `skychart.sky.ground.ground_names()`."""


class Quantity(NamedTuple):
    """A number that can be set: what it means, its accepted range (both ends included), its unit or nothing."""

    meaning: str
    low: float
    high: float
    unit: str = ""

    def __str__(self) -> str:
        return f"{self.low:g} to {self.high:g}{self.unit and ' '}{self.unit}"


SOLAR_ELEVATION_DEG = Quantity("geometric elevation of the sun above the horizon", -12, 90, "degrees")
AIR_QUANTITIES: Mapping[str, Quantity] = {
    "haze_depth_550": Quantity("optical depth of the haze at 550 nm", 0, 2),
    "haze_scale_height_km": Quantity("height over which the haze thins to 1/e", 0.3, 10, "km"),
    "ozone_du": Quantity("ozone column", 100, 600, "Dobson units"),
    "water_cm": Quantity("water vapour, as the depth of rain it would make", 0, 10, "cm"),
    "no2_du": Quantity("nitrogen dioxide column", 0, 2, "Dobson units"),
    "pressure_hpa": Quantity("pressure at sea level", 500, 1080, "hPa"),
    "ground_albedo": Quantity("share of the light that the ground returns", 0, 1),
    "altitude_km": Quantity("height of the observer above sea level", 0, 20, "km"),
}
_HAZE_QUANTITIES = ("haze_depth_550", "haze_scale_height_km")

_DEFAULT_ELEVATIONS_DEG = (
    *(-12.0, -10.0, -8.0, -6.0, -5.0, -4.0, -3.0, -2.0, -1.0, 0.0, 1.0, 2.0, 3.0, 4.0, 5.0, 6.0, 8.0, 10.0),
    *(12.0, 15.0, 20.0, 25.0, 30.0, 40.0, 50.0, 60.0, 75.0, 90.0),
)
_DEFAULT_AIRS = ("molecular", "clear", "hazy")
_MOST_ELEVATIONS = 181
_STEPS_PER_DEGREE = 10
_NAME = re.compile(r"[a-z0-9-]{1,24}")
_RESERVED_NAMES = frozenset({"static", "compare"})  # folders of a site that belong to no atmosphere
_NAME_RULE = "1 to 24 of the characters a-z, 0-9 and -, not 'static' or 'compare'"
_MOST_BYTES = 1_000_000
_LONGEST_VALUE_SHOWN = 40
_TOP_KEYS = ("observer", "solar_elevations_deg", "atmosphere")
_TEMPLATE = """\
# Settings of a skychart build. Whatever is left out takes the value shown here.

# Standard colorimetric observer: {observers}.
observer = "{observer}"

# Geometric elevations of the sun above the horizon, {elevation_range} in steps of 0.1;
# 1 to {most_elevations} different values. Each becomes a sheet of every atmosphere.
solar_elevations_deg = [
{elevations}
]

# One table for each atmosphere. Its name is part of the addresses of its pages:
# {name_rule}.
# haze is one of: {hazes}. Depth and scale height go with a haze only;
# left out, they are those of its kind.
# ground_albedo is a grey share of light or one of:
{grounds}.

{atmospheres}"""


@dataclass(frozen=True)
class AirSettings:
    """One atmosphere; checked when made, ConfigError naming every fault.

    name: appears in addresses of pages, 1 to 24 of a-z, 0-9 and "-".
    haze: its kind, one of `HAZES`, or "none".
    haze_depth_550: optical depth at 550 nm from sea level up, 0 to 2; None: that of the kind, or no haze.
    haze_scale_height_km: over which haze thins to 1/e [km], 0.3 to 10; None: that of the kind, or no haze.
    ozone_du: ozone column [Dobson units], 100 to 600.
    water_cm: column of water vapour, as liquid [cm], 0 to 10.
    no2_du: column of nitrogen dioxide [Dobson units], 0 to 2.
    pressure_hpa: at sea level [hPa], 500 to 1080.
    ground_albedo: share of light that the ground returns, 0 to 1 at all wavelengths, or one of `GROUNDS`.
    altitude_km: of the observer above sea level [km], 0 to 20.
    """

    name: str = "molecular"
    haze: str = NO_HAZE
    haze_depth_550: float | None = None
    haze_scale_height_km: float | None = None
    ozone_du: float = 300.0
    water_cm: float = 1.42
    no2_du: float = 0.0
    pressure_hpa: float = 1013.25
    ground_albedo: float | str = 0.18
    altitude_km: float = 0.0

    def __post_init__(self) -> None:
        faults = _air_faults(vars(self))
        if faults:
            raise ConfigError(faults)
        for key in AIR_QUANTITIES:
            value = getattr(self, key)
            if value is not None and not isinstance(value, str):
                object.__setattr__(self, key, _plain_float(value))


@dataclass(frozen=True)
class Settings:
    """What a build computes; checked when made, ConfigError naming every fault.

    atmospheres: at least one, names all different.
    solar_elevations_deg: geometric elevation of the sun [degrees], 1 to 181 different values from -12 to 90 in
        steps of 0.1; kept in ascending order.
    observer: standard colorimetric observer, one of `OBSERVERS`.
    """

    atmospheres: tuple[AirSettings, ...] = field(default_factory=lambda: tuple(map(named_air, _DEFAULT_AIRS)))
    solar_elevations_deg: tuple[float, ...] = _DEFAULT_ELEVATIONS_DEG
    observer: str = OBSERVERS[0]

    def __post_init__(self) -> None:
        faults = [
            *_observer_faults(self.observer),
            *_elevation_faults(self.solar_elevations_deg),
            *_atmosphere_count_faults(self.atmospheres),
            *_repeated_name_faults(air.name for air in self.atmospheres),
        ]
        if faults:
            raise ConfigError(faults)
        ascending = tuple(sorted(_plain_float(value) for value in self.solar_elevations_deg))
        object.__setattr__(self, "solar_elevations_deg", ascending)


def named_air(name: str) -> AirSettings:
    """The atmosphere of `NAMED_AIRS` that has this name; InputError lists the known ones."""
    if name not in NAMED_AIRS:
        raise InputError(f"unknown atmosphere {shown(name)}; known: {', '.join(NAMED_AIRS)}")
    return NAMED_AIRS[name]


def load_settings(path: Path) -> Settings:
    """Settings from a TOML file; whatever it leaves out takes the default.

    Raises ConfigError with one fault a line, each starting with the file's name: a file that cannot be read, is
    not UTF-8 or not TOML; otherwise all unknown keys, wrong types, values out of range and duplicates together.
    """
    document = _parse(_read_text(path), path)
    try:
        return _settings_from(document)
    except ConfigError as error:
        raise ConfigError(f"{path}: {fault}" for fault in error.faults) from None


def default_toml() -> str:
    """A commented configuration file, ASCII only, that loads back to `DEFAULT_SETTINGS`."""
    return _TEMPLATE.format(
        observers=", ".join(OBSERVERS),
        observer=DEFAULT_SETTINGS.observer,
        elevation_range=SOLAR_ELEVATION_DEG,
        most_elevations=_MOST_ELEVATIONS,
        elevations=_wrapped(f"{value:g}," for value in DEFAULT_SETTINGS.solar_elevations_deg),
        name_rule=_NAME_RULE,
        hazes=", ".join((NO_HAZE, *HAZES)),
        grounds=_wrapped((", ".join(GROUNDS),), "# "),
        atmospheres="\n".join(_air_toml(air) for air in DEFAULT_SETTINGS.atmospheres),
    )


def number_fault(value: Any, quantity: Quantity) -> str | None:
    """What is wrong with a number, as "is 95, accepted is -12 to 90 degrees"; None where nothing is."""
    is_number = isinstance(value, Real) and not isinstance(value, bool)
    if is_number and quantity.low <= value <= quantity.high:
        return None
    return f"is {shown(value)}, accepted is {quantity}"


def shown(value: object) -> str:
    """A value as an error message shows it: on one line, TOML words, cut when long."""
    if isinstance(value, bool):
        return str(value).lower()
    if isinstance(value, int) and abs(value) >= 2**63:
        return "an integer of more than 64 bits"
    if isinstance(value, float) and math.isfinite(value):
        return f"{value:.12g}"
    if isinstance(value, list | tuple):
        return f"a list of {len(value)}"
    if isinstance(value, Mapping):
        return "a table"
    text = repr(value) if isinstance(value, str) else " ".join(str(value).split())
    return text if len(text) <= _LONGEST_VALUE_SHOWN else f"{text[:_LONGEST_VALUE_SHOWN]}..."


def _read_text(path: Path) -> str:
    try:
        with path.open("rb") as file:
            data = file.read(_MOST_BYTES + 1)
    except OSError as error:
        raise ConfigError(f"cannot read the configuration {path}: {error.strerror or error}") from None
    if len(data) > _MOST_BYTES:
        raise ConfigError(f"{path} is longer than {_MOST_BYTES} bytes, so it is no configuration")
    try:
        return data.decode("utf-8-sig")
    except UnicodeDecodeError as error:
        raise ConfigError(f"{path} is not UTF-8: byte {error.start} is 0x{data[error.start]:02x}") from None


def _parse(text: str, path: Path) -> dict[str, Any]:
    try:
        return tomllib.loads(text)
    except ValueError as error:  # also a number of more digits than Python reads
        raise ConfigError(f"{path} is not TOML: {' '.join(str(error).split())}") from None
    except RecursionError:
        raise ConfigError(f"{path} is not TOML of any use: too many brackets within brackets") from None


def _settings_from(document: Mapping[str, Any]) -> Settings:
    """Settings from a parsed file; the faults of all its parts come together."""
    values: dict[str, Any] = {key: document[key] for key in _TOP_KEYS if key in document}
    tables = values.pop("atmosphere", None)
    faults = [
        *_unknown_key_faults(document, _TOP_KEYS),
        *(_observer_faults(values["observer"]) if "observer" in values else ()),
        *(_elevation_faults(values["solar_elevations_deg"]) if "solar_elevations_deg" in values else ()),
        *(_table_faults(tables) if tables is not None else ()),
    ]
    if faults:
        raise ConfigError(faults)
    if tables is not None:
        values["atmospheres"] = tuple(AirSettings(**table) for table in tables)
    return Settings(**values)


def _table_faults(tables: object) -> list[str]:
    """All faults of the value of `atmosphere`, which should be a list of tables."""
    if not isinstance(tables, list) or not all(isinstance(table, dict) for table in tables):
        return [f"atmosphere is {shown(tables)}, accepted are tables that are each headed [[atmosphere]]"]
    faults = _atmosphere_count_faults(tables)
    for number, table in enumerate(tables, start=1):
        missing = [] if "name" in table else [f"name is missing, accepted is {_NAME_RULE}"]
        own = [*_unknown_key_faults(table, ("name", "haze", *AIR_QUANTITIES)), *missing, *_air_faults(table)]
        faults += [f"atmosphere {number}: {fault}" for fault in own]
    return faults + _repeated_name_faults(table["name"] for table in tables if _is_name(table.get("name")))


def _air_faults(values: Mapping[str, Any]) -> list[str]:
    faults = []
    if "name" in values and not _is_name(values["name"]):
        faults.append(f"name is {shown(values['name'])}, accepted is {_NAME_RULE}")
    haze = values.get("haze", NO_HAZE)
    if haze != NO_HAZE and haze not in HAZES:
        faults.append(f"haze is {shown(haze)}, accepted is {_either((NO_HAZE, *HAZES))}")
    for key, quantity in AIR_QUANTITIES.items():
        fault = _quantity_fault(key, values.get(key), quantity)
        if fault:
            faults.append(f"{key} {fault}")
        elif key in _HAZE_QUANTITIES and values.get(key) is not None and haze == NO_HAZE:
            faults.append(f"{key} is {shown(values[key])}, accepted is a value only with a haze")
    return faults


def _quantity_fault(key: str, value: Any, quantity: Quantity) -> str | None:
    """What is wrong with a quantity of an atmosphere; None, where it was not given, is not."""
    if value is None or (key == "ground_albedo" and value in GROUNDS):
        return None
    fault = number_fault(value, quantity)
    return f"{fault}, or {_either(GROUNDS)}" if fault and key == "ground_albedo" else fault


def _is_name(value: object) -> bool:
    return isinstance(value, str) and bool(_NAME.fullmatch(value)) and value not in _RESERVED_NAMES


def _atmosphere_count_faults(atmospheres: Sequence[object]) -> list[str]:
    return [] if atmospheres else ["there is no atmosphere, accepted is at least one"]


def _repeated_name_faults(names: Iterable[str]) -> list[str]:
    repeated = [name for name, count in Counter(names).items() if count > 1]
    return [f"atmosphere name {shown(name)} is given more than once" for name in repeated]


def _observer_faults(observer: object) -> list[str]:
    return [] if observer in OBSERVERS else [f"observer is {shown(observer)}, accepted is {_either(OBSERVERS)}"]


def _elevation_faults(elevations: object) -> list[str]:
    key = "solar_elevations_deg"
    if not isinstance(elevations, list | tuple):
        return [f"{key} is {shown(elevations)}, accepted is a list of numbers"]
    if not 1 <= len(elevations) <= _MOST_ELEVATIONS:
        return [f"{key} holds {len(elevations)} values, accepted is 1 to {_MOST_ELEVATIONS}"]
    accepted = f"accepted is {SOLAR_ELEVATION_DEG} in steps of 0.1"
    sound = [_is_elevation(value) for value in elevations]
    wrong = [value for value, fine in zip(elevations, sound, strict=True) if not fine]
    counts = Counter(_plain_float(value) for value, fine in zip(elevations, sound, strict=True) if fine)
    repeated = [value for value, count in counts.items() if count > 1]
    return [
        *(f"{key} holds {shown(value)}, {accepted}" for value in wrong),
        *(f"{key} holds {shown(value)} more than once" for value in repeated),
    ]


def _is_elevation(value: Any) -> bool:
    return number_fault(value, SOLAR_ELEVATION_DEG) is None and round(value, 1) == value


def _unknown_key_faults(table: Mapping[str, Any], known: Sequence[str]) -> list[str]:
    return [f"unknown key {shown(key)}; known: {', '.join(known)}" for key in table if key not in known]


def _either(words: Sequence[str]) -> str:
    return f"{', '.join(words[:-1])} or {words[-1]}"


def _plain_float(value: float) -> float:
    """The number as a Python float, zero without a sign."""
    return float(value) + 0.0


def _wrapped(words: Iterable[str], indent: str = "    ") -> str:
    text = " ".join(words)
    return textwrap.fill(text, width=80, initial_indent=indent, subsequent_indent=indent, break_on_hyphens=False)


def _air_toml(air: AirSettings) -> str:
    lines = ["[[atmosphere]]", f'name = "{air.name}"', _toml_line("haze", f'"{air.haze}"', "its kind")]
    for key, quantity in AIR_QUANTITIES.items():
        value, about = getattr(air, key), f"{quantity.meaning}, {quantity}"
        unset = value is None
        example = getattr(NAMED_AIRS["clear"], key) if unset else value
        lines.append("# " * unset + _toml_line(key, format(example, ".8g"), about))
    return "\n".join(lines) + "\n"


def _toml_line(key: str, value: str, about: str) -> str:
    return f"{f'{key} = {value}':<28}# {about}"


# At the end, for the checks above must exist when these are made.
NAMED_AIRS: Mapping[str, AirSettings] = {
    air.name: air
    for air in (
        AirSettings(),
        AirSettings("clear", "clean", 0.05, 2),
        AirSettings("average", "average", 0.15, 2),
        AirSettings("hazy", "hazy", 0.4, 2),
        AirSettings("maritime", "maritime", 0.1, 1),
        AirSettings("dusty", "dusty", 0.4, 2),
    )
}
"""The atmospheres that have a name of their own; those of a site by default are among them."""

DEFAULT_SETTINGS = Settings()
