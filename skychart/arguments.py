"""What may be typed after `skychart`: the grammar of the commands, and their values checked and converted.

argparse splits the line and writes the help; values stay text until they are checked here, so that all faults of
a line are told together and in the same words as those of a configuration file.
"""

import argparse
import os
from collections.abc import Callable, Mapping, Sequence
from pathlib import Path
from typing import Any, NamedTuple

from skychart.config import (
    NAMED_AIRS,
    SOLAR_ELEVATION_DEG,
    AirSettings,
    Quantity,
    named_air,
    number_fault,
    shown,
)
from skychart.errors import InputError

DEFAULT_OUT = "site"
JOBS = Quantity("processes at work at the same time", 1, 64)
READ_ANGLES: Mapping[str, Quantity] = {
    "--sun": SOLAR_ELEVATION_DEG,
    "--elevation": Quantity("elevation of the view above the horizon", 0, 90, "degrees"),
    "--azimuth": Quantity("azimuth of the view from that of the sun, 0 toward it", -360, 360, "degrees"),
}
MAP_ANGLES: Mapping[str, Quantity] = {
    "--sun": SOLAR_ELEVATION_DEG,
    "--sun-azimuth": Quantity("azimuth of the sun, clockwise from the middle of the picture", -360, 360, "degrees"),
}
MAP_WIDTH = Quantity("width of the picture, twice its height", 64, 4096, "pixels")
MAP_SPACES = ("srgb", "display-p3", "bt2020", "acescg")
"""Working spaces that the colorimetry knows, `skychart.colour.spaces.SPACES`."""

_DEFAULT_WIDTH = 1024
_ACCEPTED: Mapping[str, str] = {
    **{option: str(quantity) for option, quantity in {**READ_ANGLES, **MAP_ANGLES}.items()},
    "--width": f"a whole number divisible by 4, {MAP_WIDTH}",
    "--space": f"one of {', '.join(MAP_SPACES)}",
    "--atmosphere": "the name of an atmosphere",
    "--out": "the name of a folder",
    "--jobs": f"a whole number, {JOBS}",
}


class ReadRequest(NamedTuple):
    """One direction of one sky; angles in degrees, the azimuth from 0 to 180."""

    air: AirSettings
    solar_elevation_deg: float
    view_elevation_deg: float
    relative_azimuth_deg: float


class MapRequest(NamedTuple):
    """One map of one sky; angles in degrees."""

    out: Path
    air: AirSettings
    solar_elevation_deg: float
    width: int
    space: str
    sun_azimuth_deg: float
    disc: bool
    half: bool


def parse(arguments: Sequence[str]) -> argparse.Namespace:
    """The command line in parts, `command` among them; InputError for what is no command or no option of it.

    Prints the help and raises SystemExit where help is asked for.
    """
    if not arguments:
        raise InputError(f"no command given; known: {', '.join(COMMANDS)}")
    if arguments[0] not in (*COMMANDS, "-h", "--help"):
        raise InputError(f"unknown command {shown(arguments[0])}; known: {', '.join(COMMANDS)}")
    try:
        options, rest = _parser().parse_known_args(_values_joined(arguments))
    except argparse.ArgumentError as error:
        raise InputError(_option_fault(str(error.argument_name))) from None
    if rest:
        raise InputError(f"unknown argument {shown(rest[0])}; 'skychart {arguments[0]} --help' lists the known ones")
    return options


def read_request(options: argparse.Namespace) -> ReadRequest:
    """What `read` is asked for; InputError with a line for each option that is missing or wrong."""
    faults = _angle_faults(options, READ_ANGLES)
    air = _air(options, faults)
    sun, view, azimuth = (float(_text_of(options, option)) for option in READ_ANGLES)
    return ReadRequest(air, sun, view, folded_azimuth(azimuth))


def map_request(options: argparse.Namespace) -> MapRequest:
    """What `map` is asked for; InputError with a line for each option that is missing or wrong."""
    faults = _angle_faults(options, MAP_ANGLES)
    width = _whole_number(options.width)
    if width is None or width % 4 or number_fault(float(width), MAP_WIDTH):
        faults.append(f"--width is {shown(options.width)}, accepted is {_ACCEPTED['--width']}")
    if options.space not in MAP_SPACES:
        faults.append(f"--space is {shown(options.space)}, accepted is {_ACCEPTED['--space']}")
    if not (options.out or "").lower().endswith(".exr"):
        seen = "is missing" if options.out is None else f"is {shown(options.out)}"
        faults.append(f"OUT.exr {seen}, accepted is the name of a file that ends in .exr")
    air = _air(options, faults)
    sun, azimuth = (float(_text_of(options, option)) for option in MAP_ANGLES)
    return MapRequest(Path(options.out), air, sun, width or 0, options.space, azimuth, options.disc, options.half)


def folded_azimuth(relative_azimuth_deg: float) -> float:
    """The azimuth from 0 to 180 [degrees] that is the same direction or its mirror image in the sun's vertical.

    The two have the same colour; only the angle of polarisation changes its sign.
    """
    turned = abs(relative_azimuth_deg) % 360
    return min(turned, 360 - turned)


def out_folder(options: argparse.Namespace) -> Path:
    """The folder that `build` writes to."""
    if not options.out:
        raise InputError(f"--out is '', accepted is {_ACCEPTED['--out']}")
    return Path(options.out)


def job_count(options: argparse.Namespace) -> int:
    """How many processes `build` uses; without the option, one for each processor it may use."""
    text = options.jobs
    if text is None:
        return min(_usable_processors(), int(JOBS.high))
    number = _whole_number(text)
    if number is None or number_fault(float(number), JOBS):
        raise InputError(f"--jobs is {shown(text)}, accepted is {_ACCEPTED['--jobs']}")
    return number


def _describe_build(command: argparse.ArgumentParser) -> None:
    command.add_argument(
        "config", metavar="CONFIG.toml", nargs="?", help="settings; default: those of 'skychart config'"
    )
    command.add_argument("--out", metavar="DIR", default=DEFAULT_OUT, help=f"folder to write; default: {DEFAULT_OUT}")
    command.add_argument("--jobs", metavar="N", help=f"{JOBS.meaning}, {JOBS}; default: as many as processors")
    command.epilog = (
        "The folder is replaced as a whole once everything is computed. A folder that skychart did not write is\n"
        "never replaced, nor one that somebody added files to.\n\n"
        "example: skychart build my-skies.toml --out charts"
    )


def _describe_read(command: argparse.ArgumentParser) -> None:
    for option, quantity in READ_ANGLES.items():
        command.add_argument(option, metavar="DEGREES", help=f"{quantity.meaning}, {quantity}; needed")
    names, first = ", ".join(NAMED_AIRS), next(iter(NAMED_AIRS))
    command.add_argument("--atmosphere", metavar="NAME", default=first, help=f"one of: {names}; default: {first}")
    command.add_argument("--json", action="store_true", help="print one JSON object instead of the list")
    needed = " ".join(f"{option} DEGREES" for option in READ_ANGLES)
    command.usage = f"skychart read [-h] {needed} [--atmosphere NAME] [--json]"
    command.epilog = (
        "An azimuth and its mirror image in the sun's vertical have the same colour, so the azimuth is folded into\n"
        "0 to 180 degrees first: 270, -90 and 90 are read as 90.\n\n"
        "example: skychart read --sun 12 --elevation 45 --azimuth 90"
    )


def _describe_map(command: argparse.ArgumentParser) -> None:
    sun, azimuth = MAP_ANGLES.values()
    names, first = ", ".join(NAMED_AIRS), next(iter(NAMED_AIRS))
    command.add_argument(
        "out", metavar="OUT.exr", nargs="?", help="file to write, in place of one of that name; needed"
    )
    command.add_argument("--sun", metavar="DEGREES", help=f"{sun.meaning}, {sun}; needed")
    command.add_argument("--atmosphere", metavar="NAME", default=first, help=f"one of: {names}; default: {first}")
    width = f"{MAP_WIDTH.meaning}, divisible by 4, {MAP_WIDTH}; default: {_DEFAULT_WIDTH}"
    command.add_argument("--width", metavar="N", default=str(_DEFAULT_WIDTH), help=width)
    space = f"working space, one of: {', '.join(MAP_SPACES)}; default: {MAP_SPACES[0]}"
    command.add_argument("--space", metavar="SPACE", default=MAP_SPACES[0], help=space)
    command.add_argument(
        "--sun-azimuth", metavar="DEGREES", default="0", help=f"{azimuth.meaning}, {azimuth}; default: 0"
    )
    command.add_argument("--disc", action="store_true", help="draw the sun's disc; without it the sky alone is there")
    command.add_argument("--half", action="store_true", help="16-bit float channels instead of 32-bit ones")
    command.usage = (
        "skychart map [-h] --sun DEGREES OUT.exr [--atmosphere NAME] [--width N] [--space SPACE]\n"
        "                    [--sun-azimuth DEGREES] [--disc] [--half]"
    )
    command.epilog = (
        "Everything around an observer as an OpenEXR latitude-longitude map: sky above, lit ground below, in cd/m2.\n"
        "The sun stands over the middle of the picture unless --sun-azimuth turns it: 90 is a quarter of the width\n"
        "to the right. Needs OpenEXR: pip install 'sky-colour-charts[exr]'\n\n"
        "example: skychart map --sun 12 dome.exr --atmosphere clear --space acescg"
    )


def _describe_verify(command: argparse.ArgumentParser) -> None:
    command.add_argument("--json", action="store_true", help="print a JSON list instead of the table")
    command.epilog = "The exit code is 0 if all values are met and 1 if not.\n\nexample: skychart verify"


def _describe_config(command: argparse.ArgumentParser) -> None:
    command.epilog = "example: skychart config > my-skies.toml"


COMMANDS: Mapping[str, tuple[str, Callable[[argparse.ArgumentParser], None]]] = {
    "build": ("Compute all charts and write them as a folder of pages.", _describe_build),
    "read": ("Print the colour of the sky in one direction.", _describe_read),
    "map": ("Write the sky all around as one picture, for lighting a scene.", _describe_map),
    "verify": ("Print published values beside the computed ones.", _describe_verify),
    "config": ("Print the default settings as a commented file.", _describe_config),
}


def _parser() -> argparse.ArgumentParser:
    quiet: dict[str, Any] = {"allow_abbrev": False, "exit_on_error": False}
    parser = argparse.ArgumentParser(
        prog="skychart",
        description="Reference charts of the colour of the sky for every height of the sun.",
        epilog="'skychart COMMAND --help' explains a command. A fault in what is typed gives exit code 2.",
        **quiet,
    )
    commands = parser.add_subparsers(title="commands", metavar="COMMAND", dest="command")
    layout = argparse.RawDescriptionHelpFormatter
    for name, (summary, describe) in COMMANDS.items():
        describe(commands.add_parser(name, help=summary, description=summary, formatter_class=layout, **quiet))
    return parser


def _values_joined(arguments: Sequence[str]) -> list[str]:
    """`--sun -1e1` as `--sun=-1e1`: a value that starts with a minus sign must not be taken for an option."""
    joined: list[str] = []
    for argument in arguments:
        is_value = argument.startswith("-") and not argument.startswith("--") and argument != "-h"
        if is_value and joined and joined[-1] in _ACCEPTED:
            joined[-1] += f"={argument}"
        else:
            joined.append(argument)
    return joined


def _option_fault(option: str) -> str:
    if option in _ACCEPTED:
        return f"{option} has no value, accepted is {_ACCEPTED[option]}"
    return f"{option} takes no value"


def _text_of(options: argparse.Namespace, option: str) -> Any:
    return getattr(options, option.removeprefix("--").replace("-", "_"))


def _air(options: argparse.Namespace, faults: list[str]) -> AirSettings:
    """The atmosphere of a name; InputError if there is a fault in it or before it."""
    try:
        air = named_air(options.atmosphere)
    except InputError as error:
        raise InputError("\n".join([*faults, str(error)])) from None
    if faults:
        raise InputError("\n".join(faults))
    return air


def _whole_number(text: str) -> int | None:
    """A number of decimal digits alone, if not too many for any use."""
    return int(text) if text.isascii() and text.isdigit() and len(text) < 10 else None


def _angle_faults(options: argparse.Namespace, angles: Mapping[str, Quantity]) -> list[str]:
    found = (_angle_fault(option, quantity, _text_of(options, option)) for option, quantity in angles.items())
    return [fault for fault in found if fault]


def _angle_fault(option: str, quantity: Quantity, text: str | None) -> str | None:
    if text is None:
        return f"{option} is missing, accepted is {quantity}"
    try:
        fault = number_fault(float(text), quantity)
    except ValueError:
        fault = number_fault(text, quantity)
    return fault and f"{option} {fault}"


def _usable_processors() -> int:
    return len(os.sched_getaffinity(0)) if hasattr(os, "sched_getaffinity") else os.cpu_count() or 1
