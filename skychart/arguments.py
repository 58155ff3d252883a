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
_ACCEPTED: Mapping[str, str] = {
    **{option: str(quantity) for option, quantity in READ_ANGLES.items()},
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
    faults = [fault for option in READ_ANGLES if (fault := _angle_fault(option, _text_of(options, option)))]
    try:
        air = named_air(options.atmosphere)
    except InputError as error:
        faults.append(str(error))
    if faults:
        raise InputError("\n".join(faults))
    sun, view, azimuth = (float(_text_of(options, option)) for option in READ_ANGLES)
    return ReadRequest(air, sun, view, folded_azimuth(azimuth))


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
    if not (text.isascii() and text.isdigit()) or number_fault(float(text), JOBS):
        raise InputError(f"--jobs is {shown(text)}, accepted is {_ACCEPTED['--jobs']}")
    return int(text)


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


def _describe_verify(command: argparse.ArgumentParser) -> None:
    command.add_argument("--json", action="store_true", help="print a JSON list instead of the table")
    command.epilog = "The exit code is 0 if all values are met and 1 if not.\n\nexample: skychart verify"


def _describe_config(command: argparse.ArgumentParser) -> None:
    command.epilog = "example: skychart config > my-skies.toml"


COMMANDS: Mapping[str, tuple[str, Callable[[argparse.ArgumentParser], None]]] = {
    "build": ("Compute all charts and write them as a folder of pages.", _describe_build),
    "read": ("Print the colour of the sky in one direction.", _describe_read),
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
    return getattr(options, option.removeprefix("--"))


def _angle_fault(option: str, text: str | None) -> str | None:
    quantity = READ_ANGLES[option]
    if text is None:
        return f"{option} is missing, accepted is {quantity}"
    try:
        fault = number_fault(float(text), quantity)
    except ValueError:
        fault = number_fault(text, quantity)
    return fault and f"{option} {fault}"


def _usable_processors() -> int:
    return len(os.sched_getaffinity(0)) if hasattr(os, "sched_getaffinity") else os.cpu_count() or 1
