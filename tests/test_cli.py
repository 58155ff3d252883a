"""The command line: results on standard output, one line for each fault, exit codes, and nothing half written."""

import dataclasses
import json
import math
import os
import signal
import subprocess
import sys
import textwrap
import time
from collections.abc import Callable, Iterator
from contextlib import contextmanager
from pathlib import Path

import numpy as np
import pytest
from hypothesis import HealthCheck, example, given, settings
from hypothesis import strategies as st

import skychart.checks
import skychart.pages
import skychart.sky.spectral
from skychart import cli
from skychart.arguments import COMMANDS, MAP_ANGLES, READ_ANGLES, folded_azimuth
from skychart.charts.reading import reading
from skychart.checks.check import Check
from skychart.config import DEFAULT_SETTINGS, AirSettings, Settings, default_toml
from skychart.pages.write import MARKER, swap_in
from skychart.sky.spectral import SpectralSky, solve_spectral
from skychart.terminal import reading_text

READ_KEYS = [
    *("atmosphere", "solar_elevation_deg", "view_elevation_deg", "relative_azimuth_deg", "luminance_cd_m2", "XYZ"),
    *("xy", "uv_prime", "cct_k", "duv", "rgb", "srgb_hex", "in_gamut", "polarisation_degree"),
    "polarisation_angle_deg",
]
SPACES = ["srgb", "display-p3", "bt2020", "acescg"]
READ = ["read", "--sun", "12", "--elevation", "45", "--azimuth", "90"]
REPOSITORY = Path(__file__).parents[1]


class PlainSky:
    """A sky of single scattering by thin flat air: quick, blue, polarised at right angles to the sun."""

    wavelength_nm = np.arange(360.0, 831.0, 10.0)

    def __init__(self, air: AirSettings) -> None:
        self.settings = air
        self.depth = 0.1 * (550 / self.wavelength_nm) ** 4

    def stokes(self, solar_elevation_deg, view_elevation_deg, relative_azimuth_deg, altitude_km=0.0):
        sun, view, azimuth = np.radians(
            np.broadcast_arrays(solar_elevation_deg, view_elevation_deg, relative_azimuth_deg)
        )
        cosine = np.sin(sun) * np.sin(view) + np.cos(sun) * np.cos(view) * np.cos(azimuth)
        intensity = (1 + cosine**2)[..., None] * self.depth / (np.sin(view)[..., None] + 0.02)
        u = 0.1 * np.sin(azimuth)[..., None] * intensity
        return np.stack([intensity, (1 - cosine**2)[..., None] * self.depth, u], axis=-2)

    def beam(self, solar_elevation_deg, altitude_km=0.0):
        sun = np.sin(np.radians(np.asarray(solar_elevation_deg, float)))[..., None]
        return np.where(sun > 0, np.exp(-self.depth / np.maximum(sun, 0.02)), 0.0)

    def ground_irradiance(self, solar_elevation_deg):
        sun = np.sin(np.radians(np.asarray(solar_elevation_deg, float)))[..., None]
        return 0.1 * self.depth + 0 * sun, self.beam(solar_elevation_deg) * np.maximum(sun, 0.0)


@pytest.fixture
def plain_sky(monkeypatch: pytest.MonkeyPatch) -> None:
    """Let `read` see the quick sky."""
    monkeypatch.setattr(skychart.sky.spectral, "solve_spectral", PlainSky)


@dataclasses.dataclass
class Outcome:
    """What a run of the command gave."""

    code: int
    out: str
    err: str

    @property
    def faults(self) -> list[str]:
        """The lines of standard error without the name of the command, which each must carry."""
        lines = self.err.splitlines()
        assert all(line.startswith("skychart: ") for line in lines), self.err
        return [line.removeprefix("skychart: ") for line in lines]


@pytest.fixture
def skychart_command(capsys: pytest.CaptureFixture[str]) -> Callable[..., Outcome]:
    """Run the command in this process."""

    def run(*arguments: str) -> Outcome:
        try:
            code = cli.main(arguments)
        except SystemExit as asked_for_help:
            code = int(asked_for_help.code or 0)
        return Outcome(code, *capsys.readouterr())

    return run


# read


@pytest.mark.usefixtures("plain_sky")
def test_read_json_has_the_fixed_keys_in_their_order(skychart_command) -> None:
    outcome = skychart_command(*READ, "--json")
    values = json.loads(outcome.out)
    assert (outcome.code, outcome.err) == (0, "")
    assert list(values) == READ_KEYS
    assert list(values["rgb"]) == list(values["in_gamut"]) == SPACES
    assert [len(values[key]) for key in ("XYZ", "xy", "uv_prime")] == [3, 2, 2]
    assert all(len(numbers) == 3 for numbers in values["rgb"].values())
    assert {type(flag) for flag in values["in_gamut"].values()} == {bool}
    assert [values[key] for key in READ_KEYS[:4]] == ["molecular", 12, 45, 90]
    assert values["luminance_cd_m2"] == values["XYZ"][1]
    assert values["srgb_hex"].startswith("#")


@pytest.mark.usefixtures("plain_sky")
def test_a_colour_temperature_that_does_not_exist_is_null_in_json_and_none_in_words(skychart_command) -> None:
    values = json.loads(skychart_command(*READ, "--json").out)
    assert (values["cct_k"], values["duv"]) == (None, None)
    assert "colour temperature  none (" in skychart_command(*READ).out


@pytest.mark.parametrize(
    ("cct_k", "text"), [(6504.4, "6504 K"), (12345.0, "12300 K"), (94321.0, "94000 K"), (99999.0, "100000 K")]
)
def test_a_colour_temperature_has_as_many_digits_as_are_true(cct_k: float, text: str) -> None:
    blue = reading(PlainSky(AirSettings()), 12.0, 45.0, 90.0)
    warmer = dataclasses.replace(blue, cct_k=np.asarray(cct_k), duv=np.asarray(-0.001))
    assert f"colour temperature  {text}, Duv -0.0010\n" in reading_text(warmer)


@pytest.mark.usefixtures("plain_sky")
def test_read_lists_every_number_with_its_unit_in_one_column(skychart_command) -> None:
    outcome = skychart_command(*READ)
    values = json.loads(skychart_command(*READ, "--json").out)
    lines = dict(line.split("  ", 1) for line in outcome.out.splitlines())
    lines = {head: value.strip() for head, value in lines.items()}
    assert lines["sun"] == "12° above the horizon, geometric"
    assert lines["view"] == "45° up, 90° from the sun's azimuth"
    luminance, unit = lines["luminance"].split()
    assert (float(luminance), unit) == (pytest.approx(values["luminance_cd_m2"], rel=5e-4), "cd/m²")
    assert [float(number) for number in lines["x, y"].split()] == pytest.approx(values["xy"], abs=5e-5)
    rgb = [float(number) for number in lines["linear BT.2020"].split()[:3]]
    assert rgb == pytest.approx(values["rgb"]["bt2020"], rel=5e-4)
    assert lines["sRGB code"].startswith(values["srgb_hex"])
    starts = {len(line) - len(line.split("  ", 1)[1].lstrip()) for line in outcome.out.splitlines()}
    assert len(starts) == 1


@pytest.mark.usefixtures("plain_sky")
@pytest.mark.parametrize("azimuth", ["270", "-90", "-270", "+90.0", "9e1"])
def test_azimuths_fold_by_symmetry(skychart_command, azimuth: str) -> None:
    folded = skychart_command("read", "--sun", "12", "--elevation", "45", "--azimuth", azimuth, "--json")
    assert folded.out == skychart_command(*READ, "--json").out


@given(azimuth=st.floats(-360, 360))
def test_a_folded_azimuth_has_the_same_cosine(azimuth: float) -> None:
    folded = folded_azimuth(azimuth)
    assert 0 <= folded <= 180
    assert math.cos(math.radians(folded)) == pytest.approx(math.cos(math.radians(azimuth)), abs=1e-12)


@pytest.mark.usefixtures("plain_sky")
@pytest.mark.parametrize("sun", ["-12", "-1.2e1", "90", "-0"])
def test_read_takes_the_ends_of_the_range(skychart_command, sun: str) -> None:
    outcome = skychart_command("read", "--sun", sun, "--elevation", "0", "--azimuth", "-360", "--json")
    assert outcome.code == 0
    assert json.loads(outcome.out)["solar_elevation_deg"] == float(sun)


SUN, VIEW, AZIMUTH = (f"accepted is {quantity}" for quantity in READ_ANGLES.values())
OUT = "accepted is the name of a file that ends in .exr"
WIDTH = "accepted is a whole number divisible by 4, 64 to 4096 pixels"
SUN_AZIMUTH = f"accepted is {MAP_ANGLES['--sun-azimuth']}"
FAULTY_LINES = [
    ("", ["no command given; known: build, read, map, verify, config"]),
    ("chart", ["unknown command 'chart'; known: build, read, map, verify, config"]),
    ("--version", ["unknown command '--version'; known: build, read, map, verify, config"]),
    ("read --sun 95 --elevation 45 --azimuth 90", [f"--sun is 95, {SUN}"]),
    ("read --sun nan --elevation 45 --azimuth 90", [f"--sun is nan, {SUN}"]),
    ("read --sun -inf --elevation 45 --azimuth 90", [f"--sun is -inf, {SUN}"]),
    ("read --sun abc --elevation 45 --azimuth 90", [f"--sun is 'abc', {SUN}"]),
    ("read --sun= --elevation 45 --azimuth 90", [f"--sun is '', {SUN}"]),
    ("read --sun --elevation 45 --azimuth 90", [f"--sun has no value, {SUN}"]),
    ("read --sun 12 --elevation -0.1 --azimuth 90", [f"--elevation is -0.1, {VIEW}"]),
    ("read --sun 12 --elevation 45 --azimuth 361", [f"--azimuth is 361, {AZIMUTH}"]),
    ("read --sun 12 --azimuth 90", [f"--elevation is missing, {VIEW}"]),
    (
        "read --sun -13 --elevation 91 --atmosphere fog",
        [
            f"--sun is -13, {SUN}",
            f"--elevation is 91, {VIEW}",
            f"--azimuth is missing, {AZIMUTH}",
            "unknown atmosphere 'fog'; known: molecular, clear, average, hazy, maritime, dusty",
        ],
    ),
    ("read --json=yes", ["--json takes no value"]),
    ("read --elev 3", ["unknown argument '--elev'; 'skychart read --help' lists the known ones"]),
    ("map", [f"--sun is missing, {SUN}", f"OUT.exr is missing, {OUT}"]),
    ("map --sun 12 --sun-azimuth 400 a.exr", [f"--sun-azimuth is 400, {SUN_AZIMUTH}"]),
    ("map --sun 12 --sun-azimuth -9e2 a.exr", [f"--sun-azimuth is -900, {SUN_AZIMUTH}"]),
    ("map --sun 12 a.png", [f"OUT.exr is 'a.png', {OUT}"]),
    ("map --sun 12 a.exr --width 1022", [f"--width is '1022', {WIDTH}"]),
    ("map --sun 12 a.exr --width 60", [f"--width is '60', {WIDTH}"]),
    ("map --sun 12 a.exr --width -64", [f"--width is '-64', {WIDTH}"]),
    ("map --sun 12 a.exr --space rec709", ["--space is 'rec709', accepted is one of srgb, display-p3, bt2020, acescg"]),
    ("map --sun 12 absent/a.exr", [f"cannot write absent/a.exr: there is no folder {Path.cwd()}/absent"]),
    ("map --sun 12 a.exr b.exr", ["unknown argument 'b.exr'; 'skychart map --help' lists the known ones"]),
    ("verify now", ["unknown argument 'now'; 'skychart verify --help' lists the known ones"]),
    ("build --jobs 0", ["--jobs is '0', accepted is a whole number, 1 to 64"]),
    ("build --jobs 65", ["--jobs is '65', accepted is a whole number, 1 to 64"]),
    ("build --jobs -1", ["--jobs is '-1', accepted is a whole number, 1 to 64"]),
    ("build --jobs 2.5", ["--jobs is '2.5', accepted is a whole number, 1 to 64"]),
    ("build --jobs ²", ["--jobs is '²', accepted is a whole number, 1 to 64"]),
    (f"build --jobs {'9' * 5000}", [f"--jobs is '{'9' * 39}..., accepted is a whole number, 1 to 64"]),
    ("build --jobs", ["--jobs has no value, accepted is a whole number, 1 to 64"]),
    ("build --out=", ["--out is '', accepted is the name of a folder"]),
    ("build absent.toml", ["cannot read the configuration absent.toml: No such file or directory"]),
    ("build --out absent/site", [f"cannot write absent/site: there is no folder {Path.cwd()}/absent"]),
]


@pytest.mark.parametrize(("line", "faults"), FAULTY_LINES)
def test_a_fault_is_one_clear_line_and_exit_code_2(skychart_command, line: str, faults: list[str]) -> None:
    outcome = skychart_command(*line.split())
    assert outcome.faults == faults
    assert (outcome.code, outcome.out) == (2, "")


def test_every_fault_of_a_configuration_is_a_line(skychart_command, tmp_path: Path) -> None:
    config = tmp_path / "ten.toml"
    config.write_text("".join(f"fault{n} = {n}\n" for n in range(10)))
    outcome = skychart_command("build", str(config), "--out", str(tmp_path / "site"))
    assert (outcome.code, len(outcome.faults)) == (2, 10)
    assert outcome.faults[9].startswith(f"{config}: unknown key 'fault9'; known: ")
    assert not (tmp_path / "site").exists()


words = st.sampled_from([*COMMANDS, *READ_ANGLES, "--json", "--jobs", "--atmosphere", "--", "-", "-x", "--=", "12", ""])
without_null = st.text(max_size=8).filter(lambda text: "\0" not in text)
quickly = settings(suppress_health_check=[HealthCheck.function_scoped_fixture], deadline=None)


@quickly
@given(line=st.lists(words | without_null, max_size=8).filter(lambda line: not {"-h", "--help", "build"} & set(line)))
@pytest.mark.usefixtures("plain_sky")
def test_whatever_is_typed_there_is_no_traceback(skychart_command, line: list[str]) -> None:
    if line[:1] == ["verify"]:
        line = ["verify", "surplus", *line]
    outcome = skychart_command(*line)
    assert outcome.code in (0, 2)
    assert bool(outcome.faults) == (outcome.code == 2)
    assert bool(outcome.out) == (outcome.code == 0)


angles = st.floats(-400, 400) | st.sampled_from([0.0, 90.0, -12.0, 180.0, math.nan, math.inf, 5e-324])


@quickly
@given(sun=angles, view=angles, azimuth=angles)
@pytest.mark.usefixtures("plain_sky")
def test_angles_give_finite_numbers_or_a_clear_fault(skychart_command, sun: float, view: float, azimuth: float) -> None:
    outcome = skychart_command("read", "--sun", str(sun), "--elevation", str(view), "--azimuth", str(azimuth), "--json")
    wrong = [not -12 <= sun <= 90, not 0 <= view <= 90, not -360 <= azimuth <= 360]
    assert [fault.split()[0] for fault in outcome.faults] == [
        option for option, is_wrong in zip(READ_ANGLES, wrong, strict=True) if is_wrong
    ]
    assert outcome.code == (2 if any(wrong) else 0)
    if not any(wrong):
        values = json.loads(outcome.out, parse_constant=pytest.fail)
        assert values["luminance_cd_m2"] > 0


# verify


def a_check(computed: float, **changes: object) -> Check:
    """A check of 2 within 1 %."""
    check = Check(
        *("two", "Numbers", "twice one", "in base ten", "arithmetic", 2.0),
        *(computed, 0.01, "stated uncertainty", "1", True),
    )
    return dataclasses.replace(check, **changes)


@pytest.mark.parametrize(
    ("computed", "code", "cells", "count"),
    [
        (2.0, 0, "met 2.000 2.000 +0.0 % ±1.0 %", "1 met, 0 missed"),
        (2.1, 1, "MISSED 2.000 2.100 +5.0 % ±1.0 %", "0 met, 1 missed"),
        (math.nan, 1, "MISSED 2.000 none none ±1.0 %", "0 met, 1 missed"),
    ],
)
def test_verify_tells_by_word_and_exit_code(
    skychart_command, monkeypatch: pytest.MonkeyPatch, computed: float, code: int, cells: str, count: str
) -> None:
    """Numbers are written to a tenth of the tolerance."""
    monkeypatch.setattr(skychart.checks, "run_checks", lambda: (a_check(computed),))
    outcome = skychart_command("verify")
    assert (outcome.code, outcome.err) == (code, "")
    row = next(line for line in outcome.out.splitlines() if "twice one" in line)
    assert " ".join(row.split()) == f"{cells} twice one, in base ten [arithmetic]"
    assert outcome.out.splitlines()[-1] == f"1 published values, {count}"


def test_verify_json_has_every_field_of_a_check(skychart_command, monkeypatch: pytest.MonkeyPatch) -> None:
    checks = (a_check(2.001), a_check(np.float64(math.nan), key="nan", unit="m", relative=False))
    monkeypatch.setattr(skychart.checks, "run_checks", lambda: checks)
    outcome = skychart_command("verify", "--json")
    first, second = json.loads(outcome.out, parse_constant=pytest.fail)
    assert outcome.code == 1
    assert list(first) == [*(field.name for field in dataclasses.fields(Check)), "difference", "passed"]
    assert (first["computed"], first["difference"], first["passed"]) == (2.001, pytest.approx(0.0005), True)
    assert (second["computed"], second["difference"], second["passed"]) == (None, None, False)


# config and help


def test_config_prints_the_default_file(skychart_command) -> None:
    outcome = skychart_command("config")
    assert (outcome.code, outcome.out, outcome.err) == (0, default_toml(), "")


@pytest.mark.parametrize("flag", ["-h", "--help"])
def test_help_names_every_command(skychart_command, flag: str) -> None:
    outcome = skychart_command(flag)
    assert outcome.code == 0
    assert COMMANDS
    for summary, _ in COMMANDS.values():
        assert summary in " ".join(outcome.out.split())


@pytest.mark.parametrize("name", COMMANDS)
def test_help_of_a_command_explains_every_option_and_gives_an_example_that_runs(
    skychart_command, monkeypatch: pytest.MonkeyPatch, name: str
) -> None:
    outcome = skychart_command(name, "--help")
    options = [line.split("  ")[0] for line in outcome.out.splitlines() if line.startswith("  -")]
    assert options
    assert all(option.strip() in outcome.out.split("options:")[1] for option in options)
    example = next(line for line in outcome.out.splitlines() if line.startswith("example: "))
    words = example.removeprefix("example: ").split(">")[0].split()
    called = []
    monkeypatch.setitem(cli._COMMANDS, name, lambda options: called.append(options) or 0)
    assert words[0] == "skychart"
    assert skychart_command(*words[1:]).code == 0
    assert [options.command for options in called] == [name]


def test_help_gives_range_and_default_of_every_value(skychart_command) -> None:
    text = " ".join(skychart_command("read", "--help").out.split())
    for quantity in READ_ANGLES.values():
        assert f"{quantity.meaning}, {quantity}; needed" in text
    assert "one of: molecular, clear, average, hazy, maritime, dusty; default: molecular" in text
    assert "1 to 64; default: as many as processors" in " ".join(skychart_command("build", "--help").out.split())


def test_the_documents_name_every_command() -> None:
    readme = (REPOSITORY / "README.md").read_text(encoding="utf-8")
    assert [name for name in COMMANDS if f"skychart {name}" not in readme] == []


# build


@pytest.fixture
def builds(monkeypatch: pytest.MonkeyPatch) -> list[tuple[Settings, Path, int]]:
    """What `build` was asked to build; in place of the pages one file is written."""
    asked: list[tuple[Settings, Path, int]] = []

    def build_site(wanted: Settings, out: Path, jobs: int, progress: Callable[[str], None]) -> str:
        asked.append((wanted, out, jobs))
        progress("half way")
        swap_in({"index.html": b"a page"}, out)
        return "done"

    monkeypatch.setattr(skychart.pages, "build_site", build_site)
    return asked


def test_build_without_a_file_takes_the_defaults_and_writes_site(
    skychart_command, builds, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.chdir(tmp_path)
    outcome = skychart_command("build")
    assert (outcome.code, outcome.err) == (0, "half way\n")
    assert builds == [(DEFAULT_SETTINGS, Path("site"), len(os.sched_getaffinity(0)))]
    assert (tmp_path / "site" / "index.html").read_bytes() == b"a page"


def test_build_takes_a_file_a_folder_and_a_number_of_jobs(skychart_command, builds, tmp_path: Path) -> None:
    config = tmp_path / "skies.toml"
    config.write_text("solar_elevations_deg = [5]\n")
    outcome = skychart_command("build", str(config), "--out", str(tmp_path / "charts"), "--jobs", "64")
    assert outcome.code == 0
    assert builds == [(Settings(solar_elevations_deg=(5.0,)), tmp_path / "charts", 64)]


def test_build_refuses_a_foreign_folder_before_it_computes(skychart_command, builds, tmp_path: Path) -> None:
    (tmp_path / "notes.txt").write_text("mine")
    outcome = skychart_command("build", "--out", str(tmp_path))
    assert outcome.code == 2
    assert outcome.faults == [f"will not replace {tmp_path}: skychart did not make it; choose another folder"]
    assert builds == []


# signals and broken outputs, in a process of their own


@contextmanager
def ctrl_c(handler: object) -> Iterator[None]:
    """New processes heed Ctrl-C, or ignore it with SIG_IGN, whatever these tests were told when they were started.

    What runs in the background is often told to ignore it, and hands that down.
    """
    former = signal.signal(signal.SIGINT, handler)
    try:
        yield
    finally:
        signal.signal(signal.SIGINT, former)


def run_program(program: str, *arguments: str) -> subprocess.Popen[str]:
    """Start Python on a program text."""
    command = [sys.executable, "-c", textwrap.dedent(program), *arguments]
    return subprocess.Popen(command, stdout=subprocess.PIPE, stderr=subprocess.PIPE, text=True)


STOPPED_BUILD = """
    import os, signal, sys
    from pathlib import Path
    import skychart.pages
    from skychart import cli
    from skychart.pages.write import swap_in
    def build_site(settings, out, jobs, progress):
        progress("half way")
        write_bytes = Path.write_bytes
        def strike(path, data):
            write_bytes(path, data)
            os.kill(os.getpid(), int(sys.argv[2]))
        Path.write_bytes = strike
        swap_in({"index.html": b"new", "other.html": b"new"}, out)
        return "done"
    skychart.pages.build_site = build_site
    sys.exit(cli.main(["build", "--out", sys.argv[1]]))
"""


@pytest.mark.parametrize(
    ("number", "code", "line"),
    [(signal.SIGINT, 130, "skychart: interrupted"), (signal.SIGTERM, 143, "skychart: stopped by the system")],
)
def test_a_stopped_build_says_so_in_one_line_and_leaves_the_former_site(
    tmp_path: Path, number: signal.Signals, code: int, line: str
) -> None:
    site = tmp_path / "site"
    swap_in({"index.html": b"former"}, site)
    with ctrl_c(signal.default_int_handler):
        process = run_program(STOPPED_BUILD, str(site), str(int(number)))
    out, err = process.communicate()
    assert (process.returncode, out, err.splitlines()) == (code, "", ["half way", line])
    assert sorted(path.name for path in tmp_path.rglob("*")) == [MARKER, "index.html", "site"]
    assert (site / "index.html").read_bytes() == b"former"


def test_the_former_signal_handlers_come_back(skychart_command) -> None:
    before = [signal.getsignal(number) for number in (signal.SIGINT, signal.SIGTERM)]
    skychart_command("config")
    assert [signal.getsignal(number) for number in (signal.SIGINT, signal.SIGTERM)] == before


def test_a_signal_that_is_to_be_ignored_stays_so(tmp_path: Path) -> None:
    with ctrl_c(signal.SIG_IGN):
        process = run_program(STOPPED_BUILD, str(tmp_path / "site"), str(int(signal.SIGINT)))
    out, err = process.communicate()
    assert (process.returncode, out, err) == (0, "done\n", "half way\n")


CONFIG = "import sys; from skychart.cli import main; sys.exit(main(['config']))"


def test_a_reader_that_goes_away_is_no_fault() -> None:
    read_end, write_end = os.pipe()
    os.close(read_end)
    process = subprocess.run(
        [sys.executable, "-c", CONFIG], stdout=write_end, stderr=subprocess.PIPE, text=True, check=False
    )
    os.close(write_end)
    assert (process.returncode, process.stderr) == (0, "")


def test_a_full_disk_is_one_line() -> None:
    with open("/dev/full", "w") as full:
        process = subprocess.run(
            [sys.executable, "-c", CONFIG], stdout=full, stderr=subprocess.PIPE, text=True, check=False
        )
    assert (process.returncode, process.stderr) == (
        2,
        "skychart: cannot print the result: No space left on device\n",
    )


def test_as_a_module_it_is_the_same_command() -> None:
    process = subprocess.run([sys.executable, "-m", "skychart", "config"], capture_output=True, text=True, check=False)
    assert (process.returncode, process.stdout) == (0, default_toml())


def test_ctrl_c_while_workers_start_is_one_line_and_they_end_with_the_build(tmp_path: Path) -> None:
    config = tmp_path / "one.toml"
    config.write_text('solar_elevations_deg = [30]\n[[atmosphere]]\nname = "molecular"\n')
    swap_in({"index.html": b"former"}, tmp_path / "site")
    command = [sys.executable, "-m", "skychart", "build", str(config), "--out", str(tmp_path / "site"), "--jobs", "2"]
    with (
        ctrl_c(signal.default_int_handler),
        subprocess.Popen(command, stderr=subprocess.PIPE, text=True, start_new_session=True) as process,
    ):
        assert process.stderr is not None
        assert process.stderr.readline() == "molecular: solving\n"
        time.sleep(0.5)  # by now the workers are importing
        os.killpg(process.pid, signal.SIGINT)  # what a terminal does on Ctrl-C
        rest = process.stderr.read()  # ends when the last worker has closed it
    assert (rest, process.returncode) == ("skychart: interrupted\n", 130)
    assert (tmp_path / "site" / "index.html").read_bytes() == b"former"


# the real sky: solved twice in all, for that takes seconds


@pytest.fixture(scope="module")
def bright_sky() -> SpectralSky:
    """A real sky at the far ends of its settings."""
    return solve_spectral(AirSettings("bright", ozone_du=600, ground_albedo=1))


@pytest.fixture
def reads_bright_sky(bright_sky: SpectralSky, monkeypatch: pytest.MonkeyPatch) -> None:
    """Let `read` see the sky that is solved already."""
    monkeypatch.setattr(skychart.sky.spectral, "solve_spectral", lambda air: bright_sky)


@settings(quickly, max_examples=25)
@given(sun=st.floats(-12, 90), view=st.floats(0, 90), azimuth=st.floats(-360, 360))
@example(sun=-12.0, view=0.0, azimuth=180.0)
@example(sun=90.0, view=90.0, azimuth=-0.0)
@pytest.mark.usefixtures("reads_bright_sky")
def test_every_reading_of_a_real_sky_is_finite(skychart_command, sun: float, view: float, azimuth: float) -> None:
    outcome = skychart_command(*f"read --sun={sun} --elevation={view} --azimuth={azimuth} --json".split())
    values = json.loads(outcome.out, parse_constant=pytest.fail)
    absent = {key for key, value in values.items() if value is None}
    assert (outcome.code, outcome.err) == (0, "")
    assert absent in (set(), {"cct_k", "duv"}) or values["polarisation_degree"] < 1e-6
    assert min(values["XYZ"]) > 0
    assert 0 <= values["polarisation_degree"] <= 1


READING = "    $ .venv/bin/skychart read", "`--sun`"


def readme_block(start: str, end: str) -> str:
    """The lines of the README after the one that begins with `start`, up to the one that begins with `end`."""
    lines = (REPOSITORY / "README.md").read_text(encoding="utf-8").splitlines()
    first = next(number for number, line in enumerate(lines) if line.startswith(start))
    last = next(number for number, line in enumerate(lines) if number > first and line.startswith(end))
    return textwrap.dedent("\n".join(lines[first + 1 : last])).strip() + "\n"


@pytest.mark.usefixtures("reads_bright_sky")
def test_the_python_of_the_readme_runs(capsys: pytest.CaptureFixture[str]) -> None:
    exec(readme_block("```python", "```"), {})
    assert len(capsys.readouterr().out.splitlines()) == 3


def printed_reading(encoding: str) -> str:
    """What the README's `read` prints on a terminal of an encoding."""
    process = subprocess.run(
        [sys.executable, "-m", "skychart", *READ],
        env=os.environ | {"PYTHONIOENCODING": encoding},
        capture_output=True,
        encoding=encoding,
        check=False,
    )
    assert (process.returncode, process.stderr) == (0, "")
    return process.stdout


def test_the_reading_in_the_readme_is_what_is_printed_even_on_a_terminal_without_the_characters() -> None:
    """A change on purpose is written into the README with SKYCHART_ACCEPT=1 and shows in the diff."""
    if os.environ.get("SKYCHART_ACCEPT"):
        accept_reading(printed_reading("utf-8"))
    expected = readme_block(*READING)
    assert printed_reading("ascii") == expected.encode("ascii", "replace").decode("ascii")


def accept_reading(text: str) -> None:
    """Put `text` in the place of the README's reading."""
    readme = REPOSITORY / "README.md"
    former, new = (textwrap.indent(block, "    ") for block in (readme_block(*READING), text))
    readme.write_text(readme.read_text(encoding="utf-8").replace(former, new), encoding="utf-8", newline="\n")
