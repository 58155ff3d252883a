"""The command `skychart`: it parses, calls one function, prints one result.

Results go to standard output, progress and errors to standard error: one line for each fault, never a traceback
for what a user can cause. Whatever takes long to import is imported inside the command that needs it.
"""

import argparse
import os
import signal
import sys
import threading
from collections.abc import Callable, Iterator, Mapping, Sequence
from contextlib import contextmanager
from io import TextIOWrapper
from pathlib import Path
from types import FrameType
from typing import NoReturn

from skychart.arguments import job_count, map_request, out_folder, parse, read_request
from skychart.config import DEFAULT_SETTINGS, default_toml, load_settings
from skychart.errors import OutputError, SkychartError

EXIT_DONE = 0
EXIT_CHECK_MISSED = 1
EXIT_WRONG_INPUT = 2
EXIT_STOPPED = 128  # plus the number of the signal, as shells count

_STOPPED_BY = {signal.SIGINT: "interrupted", signal.SIGTERM: "stopped by the system"}


class _Stopped(BaseException):
    """A signal asked this process to end."""

    def __init__(self, number: int) -> None:
        super().__init__(number)
        self.number = signal.Signals(number)


def main(argv: Sequence[str] | None = None) -> int:
    """Run one command and return its exit code: 0 done, 1 a check missed, 2 wrong input, 130 and 143 stopped."""
    _never_fail_on_a_character(sys.stdout, sys.stderr)
    os.environ.setdefault("OPENBLAS_NUM_THREADS", "1")  # the solver's own threads share the work; its would only wait
    try:
        with _signals_raise():
            options = parse(sys.argv[1:] if argv is None else argv)
            return _COMMANDS[options.command](options)
    except SkychartError as error:
        _complain(*str(error).splitlines())
        return EXIT_WRONG_INPUT
    except _Stopped as stopped:
        _complain(_STOPPED_BY[stopped.number])
        return EXIT_STOPPED + stopped.number


def run_build(options: argparse.Namespace) -> int:
    """Compute the charts and put the site in place of the former one."""
    out, jobs = out_folder(options), job_count(options)
    settings = load_settings(Path(options.config)) if options.config is not None else DEFAULT_SETTINGS
    from skychart.pages.write import check_replaceable

    check_replaceable(out)
    from skychart.pages import build_site

    report = build_site(settings, out, jobs, _progress)
    _hand_out(f"{report}\n")
    return EXIT_DONE


def run_read(options: argparse.Namespace) -> int:
    """Print the numbers of one direction of one sky."""
    air, sun, view, azimuth = read_request(options)
    from skychart.charts.reading import reading
    from skychart.library import colour_science
    from skychart.sky.spectral import solve_spectral
    from skychart.terminal import reading_json, reading_text

    threading.Thread(target=colour_science, daemon=True).start()  # takes a second or two to import, as solving does
    result = reading(solve_spectral(air), sun, view, azimuth)
    _hand_out(reading_json(result) if options.json else reading_text(result))
    return EXIT_DONE


def run_map(options: argparse.Namespace) -> int:
    """Write the map of one sky and say what it holds."""
    out, air, sun, width, space, azimuth, disc, half = map_request(options)
    from skychart.export.files import check_writable, write_whole
    from skychart.export.openexr import openexr

    openexr()
    check_writable(out)
    from skychart.pages.map_file import map_file

    line, data = map_file(air, sun, width, azimuth, disc, space, half, _progress)
    write_whole(out, data)
    _hand_out(f"{out}: {line}\n")
    return EXIT_DONE


def run_verify(options: argparse.Namespace) -> int:
    """Print published values beside computed ones; the exit code tells whether all are met."""
    from skychart.checks import all_passed, run_checks
    from skychart.terminal import checks_json, checks_text

    checks = run_checks()
    _hand_out(checks_json(checks) if options.json else checks_text(checks))
    return EXIT_DONE if all_passed(checks) else EXIT_CHECK_MISSED


def run_config(options: argparse.Namespace) -> int:
    """Print a commented default configuration."""
    _hand_out(default_toml())
    return EXIT_DONE


_COMMANDS: Mapping[str, Callable[[argparse.Namespace], int]] = {
    "build": run_build,
    "read": run_read,
    "map": run_map,
    "verify": run_verify,
    "config": run_config,
}


def _progress(line: str) -> None:
    print(line, file=sys.stderr, flush=True)


def _complain(*lines: str) -> None:
    for line in lines:
        print(f"skychart: {line}", file=sys.stderr, flush=True)


def _hand_out(text: str) -> None:
    """Print a result; a reader that has gone (`| head`) is no fault, a full disk is."""
    try:
        print(text, end="", flush=True)
    except OSError as error:
        os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())  # nothing more to fail on at exit
        if not isinstance(error, BrokenPipeError):
            raise OutputError(f"cannot print the result: {error.strerror}") from None


def _never_fail_on_a_character(*streams: object) -> None:
    """Where a terminal's encoding lacks a character, such as that of a prime, print a question mark for it."""
    for stream in streams:
        if isinstance(stream, TextIOWrapper):
            stream.reconfigure(errors="replace")


@contextmanager
def _signals_raise() -> Iterator[None]:
    """Let Ctrl-C and SIGTERM unwind the stack alike, so that what is half done is tidied up."""

    def stop(number: int, frame: FrameType | None) -> NoReturn:
        raise _Stopped(number)

    if threading.current_thread() is not threading.main_thread():
        yield  # only the main thread may set signal handlers
        return
    former = {number: signal.getsignal(number) for number in _STOPPED_BY}
    heeded = [number for number, handler in former.items() if handler is not signal.SIG_IGN]
    try:
        for number in heeded:
            signal.signal(number, stop)
        yield
    finally:
        for number in heeded:
            signal.signal(number, former[number])
