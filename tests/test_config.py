"""Settings: defaults, their TOML form, and every fault of a file in one go."""

import dataclasses
import tomllib
from pathlib import Path

import pytest
from hypothesis import HealthCheck, example, given, settings
from hypothesis import strategies as st

from skychart.config import (
    AIR_QUANTITIES,
    DEFAULT_SETTINGS,
    GROUNDS,
    HAZES,
    NAMED_AIRS,
    NO_HAZE,
    OBSERVERS,
    SOLAR_ELEVATION_DEG,
    AirSettings,
    Settings,
    default_toml,
    load_settings,
    named_air,
    shown,
)
from skychart.errors import ConfigError, InputError
from skychart.sky.ground import ground_names
from skychart.sky.haze_types import HAZE_TYPES

BOUNDS = [
    pytest.param(key, bound, id=f"{key}-{bound}")
    for key, quantity in AIR_QUANTITIES.items()
    for bound in (quantity.low, quantity.high)
]


HAZE_KEYS = {"haze_depth_550", "haze_scale_height_km"}


@pytest.fixture
def path(tmp_path: Path) -> Path:
    """Where a test writes its configuration."""
    return tmp_path / "skies.toml"


def faults_of(path: Path) -> list[str]:
    """The faults of the file, each without the file's name, which each must carry."""
    with pytest.raises(ConfigError) as caught:
        load_settings(path)
    faults = caught.value.faults
    assert str(caught.value).splitlines() == list(faults)
    assert all(str(path) in fault for fault in faults)
    return [fault.removeprefix(f"{path}: ") for fault in faults]


def test_the_defaults_are_the_28_sun_elevations_of_three_airs() -> None:
    assert [air.name for air in DEFAULT_SETTINGS.atmospheres] == ["molecular", "clear", "hazy"]
    assert DEFAULT_SETTINGS.atmospheres[0] == AirSettings(
        name="molecular", haze="none", ozone_du=300, water_cm=1.42, no2_du=0, pressure_hpa=1013.25, ground_albedo=0.18,
        altitude_km=0,
    )  # fmt: skip
    assert DEFAULT_SETTINGS.observer == "cie-1931-2"
    twilight, low = [-12, -10, -8, -6, -5, -4, -3, -2, -1], [0, 1, 2, 3, 4, 5, 6, 8, 10, 12, 15]
    assert list(DEFAULT_SETTINGS.solar_elevations_deg) == [*twilight, *low, 20, 25, 30, 40, 50, 60, 75, 90]


def test_the_default_file_loads_back_to_the_defaults(path: Path) -> None:
    path.write_text(default_toml(), encoding="ascii")
    assert load_settings(path) == DEFAULT_SETTINGS


def test_the_default_file_names_every_setting_and_its_range() -> None:
    document = tomllib.loads(default_toml())
    assert set(document) == {"observer", "solar_elevations_deg", "atmosphere"}
    fields = {field.name for field in dataclasses.fields(AirSettings)}
    plain, *hazy = document["atmosphere"]
    assert [set(table) for table in hazy] == [fields, fields]
    assert set(plain) == fields - HAZE_KEYS
    assert all(f"# {key} = " in default_toml() for key in HAZE_KEYS)
    for word in (NO_HAZE, *HAZES, *GROUNDS):
        assert word in default_toml()
    for quantity in (*AIR_QUANTITIES.values(), SOLAR_ELEVATION_DEG):
        assert str(quantity) in default_toml()
    for observer in OBSERVERS:
        assert observer in default_toml()


def test_what_a_file_leaves_out_takes_the_default(path: Path) -> None:
    path.write_text("")
    assert load_settings(path) == DEFAULT_SETTINGS
    path.write_text('[[atmosphere]]\nname = "alpine"\naltitude_km = 3\n')
    assert load_settings(path) == Settings(atmospheres=(AirSettings("alpine", altitude_km=3.0),))


def test_sun_elevations_come_back_ascending_and_zero_without_a_sign(path: Path) -> None:
    path.write_text("solar_elevations_deg = [60, -0.0, 2.5, -6]")
    elevations = load_settings(path).solar_elevations_deg
    assert [str(value) for value in elevations] == ["-6.0", "0.0", "2.5", "60.0"]


def test_all_faults_of_a_file_are_told_at_once(path: Path) -> None:
    path.write_text("""
        observr = "cie-1931-2"
        observer = "cie-1924"
        solar_elevations_deg = [1, 2, 2, true, nan, -0.0, 0, 95, 2.55, "x"]
        [[atmosphere]]
        name = "plain"
        ozone_du = 99
        fog = 1
        haze = 1
        [[atmosphere]]
        name = "plain"
        altitude_km = inf
        haze_depth_550 = 0.1
        [[atmosphere]]
        name = "static"
        ground_albedo = -0.1
        [[atmosphere]]
        ground_albedo = "gras"
    """)
    grounds = f"{', '.join(GROUNDS[:-1])} or {GROUNDS[-1]}"
    name_rule = "1 to 24 of the characters a-z, 0-9 and -, not 'static' or 'compare'"
    assert faults_of(path) == [
        "unknown key 'observr'; known: observer, solar_elevations_deg, atmosphere",
        "observer is 'cie-1924', accepted is cie-1931-2, cie-1964-10, cie-2015-2 or cie-2015-10",
        "solar_elevations_deg holds true, accepted is -12 to 90 degrees in steps of 0.1",
        "solar_elevations_deg holds nan, accepted is -12 to 90 degrees in steps of 0.1",
        "solar_elevations_deg holds 95, accepted is -12 to 90 degrees in steps of 0.1",
        "solar_elevations_deg holds 2.55, accepted is -12 to 90 degrees in steps of 0.1",
        "solar_elevations_deg holds 'x', accepted is -12 to 90 degrees in steps of 0.1",
        "solar_elevations_deg holds 2 more than once",
        "solar_elevations_deg holds 0 more than once",
        f"atmosphere 1: unknown key 'fog'; known: name, haze, {', '.join(AIR_QUANTITIES)}",
        "atmosphere 1: haze is 1, accepted is none, clean, average, hazy, maritime or dusty",
        "atmosphere 1: ozone_du is 99, accepted is 100 to 600 Dobson units",
        "atmosphere 2: haze_depth_550 is 0.1, accepted is a value only with a haze",
        "atmosphere 2: altitude_km is inf, accepted is 0 to 20 km",
        f"atmosphere 3: name is 'static', accepted is {name_rule}",
        f"atmosphere 3: ground_albedo is -0.1, accepted is 0 to 1, or {grounds}",
        f"atmosphere 4: name is missing, accepted is {name_rule}",
        f"atmosphere 4: ground_albedo is 'gras', accepted is 0 to 1, or {grounds}",
        "atmosphere name 'plain' is given more than once",
    ]


@pytest.mark.parametrize(
    ("text", "fault"),
    [
        ("atmosphere = []", "there is no atmosphere, accepted is at least one"),
        (
            "[atmosphere]\nname = 'a'",
            "atmosphere is a table, accepted are tables that are each headed [[atmosphere]]",
        ),
        ("atmosphere = [1]", "atmosphere is a list of 1, accepted are tables that are each headed [[atmosphere]]"),
        ("solar_elevations_deg = []", "solar_elevations_deg holds 0 values, accepted is 1 to 181"),
        (
            f"solar_elevations_deg = {[n / 10 for n in range(182)]}",
            "solar_elevations_deg holds 182 values, accepted is 1 to 181",
        ),
        ("solar_elevations_deg = 5", "solar_elevations_deg is 5, accepted is a list of numbers"),
        (
            f"solar_elevations_deg = [0x1{'0' * 5000}]",
            "solar_elevations_deg holds an integer of more than 64 bits, accepted is -12 to 90 degrees in steps of 0.1",
        ),
        (
            "observer = [[1]]",
            "observer is a list of 1, accepted is cie-1931-2, cie-1964-10, cie-2015-2 or cie-2015-10",
        ),
        (
            "observer = 1979-05-27",
            "observer is 1979-05-27, accepted is cie-1931-2, cie-1964-10, cie-2015-2 or cie-2015-10",
        ),
    ],
)
def test_a_fault_is_told_with_the_value_seen_and_what_is_accepted(path: Path, text: str, fault: str) -> None:
    path.write_text(text)
    assert faults_of(path) == [fault]


@pytest.mark.parametrize("name", ["", "A", "a b", "../x", "x" * 25, "é", "a\n", "static", "compare"])
def test_a_name_that_would_make_a_bad_address_is_refused(path: Path, name: str) -> None:
    path.write_text(f"[[atmosphere]]\nname = {_toml_string(name)}\n", encoding="utf-8")
    assert len(faults_of(path)) == 1
    with pytest.raises(ConfigError, match=r"^name is "):
        AirSettings(name)


@pytest.mark.parametrize(("key", "bound"), BOUNDS)
def test_a_range_includes_its_ends_and_nothing_beyond(key: str, bound: float) -> None:
    quantity = AIR_QUANTITIES[key]
    step = 0.001 if bound == quantity.high else -0.001
    assert getattr(AirSettings(haze="clean", **{key: bound}), key) == bound
    with pytest.raises(ConfigError, match=rf"^{key} is .*, accepted is {quantity}(, or grass.*)?$"):
        AirSettings(haze="clean", **{key: bound + step})


def test_made_from_python_all_faults_are_told_as_well() -> None:
    with pytest.raises(ConfigError) as caught:
        AirSettings("NO", ozone_du=float("nan"), ground_albedo=True, altitude_km=-1)
    assert [fault.split(" ")[0] for fault in caught.value.faults] == [
        "name",
        "ozone_du",
        "ground_albedo",
        "altitude_km",
    ]
    with pytest.raises(ConfigError) as caught:
        Settings(atmospheres=(), solar_elevations_deg=(91.0,), observer="me")
    assert len(caught.value.faults) == 3
    with pytest.raises(ConfigError, match="'molecular' is given more than once"):
        Settings(atmospheres=(AirSettings(), AirSettings()))


def test_whole_numbers_become_floats_so_that_pages_print_them_alike() -> None:
    assert isinstance(AirSettings(ozone_du=250).ozone_du, float)
    assert all(isinstance(value, float) for value in Settings(solar_elevations_deg=(1, 2)).solar_elevations_deg)


def test_an_atmosphere_is_known_by_its_name() -> None:
    assert named_air("molecular") == AirSettings()
    known = "molecular, clear, average, hazy, maritime, dusty"
    with pytest.raises(InputError, match=rf"^unknown atmosphere 'fog'; known: {known}$"):
        named_air("fog")


def test_kinds_of_haze_and_ground_are_those_of_the_physics() -> None:
    assert tuple(HAZE_TYPES) == HAZES
    assert ground_names() == GROUNDS


def test_named_atmospheres_state_the_depth_and_height_of_their_kind_of_haze() -> None:
    hazy = [air for air in NAMED_AIRS.values() if air.haze != NO_HAZE]
    assert [air.haze_depth_550 for air in hazy] == [0.05, 0.15, 0.40, 0.10, 0.40]
    for air in hazy:
        kind = HAZE_TYPES[air.haze]
        assert (air.haze_depth_550, air.haze_scale_height_km) == (kind.depth_550, kind.scale_height_km)


def test_the_ground_is_a_share_or_a_name(path: Path) -> None:
    path.write_text("[[atmosphere]]\nname = 'field'\nground_albedo = 'grass'\n")
    assert load_settings(path).atmospheres[0].ground_albedo == "grass"


def test_a_file_that_is_absent_is_told(path: Path) -> None:
    with pytest.raises(ConfigError, match=r"^cannot read the configuration .*skies\.toml: No such file"):
        load_settings(path)


def test_a_folder_is_no_configuration(tmp_path: Path) -> None:
    with pytest.raises(ConfigError, match=r"^cannot read the configuration .*: Is a directory$"):
        load_settings(tmp_path)


def test_a_file_in_another_encoding_is_told_with_the_byte(path: Path) -> None:
    path.write_bytes("# Höhe\n".encode("latin-1"))
    with pytest.raises(ConfigError, match=r"skies\.toml is not UTF-8: byte 3 is 0xf6$"):
        load_settings(path)


def test_a_byte_order_mark_is_accepted(path: Path) -> None:
    path.write_text(default_toml(), encoding="utf-8-sig")
    assert load_settings(path) == DEFAULT_SETTINGS


def test_broken_toml_is_told_with_its_place(path: Path) -> None:
    path.write_text("observer = \n")
    with pytest.raises(ConfigError, match=r"skies\.toml is not TOML: Invalid value \(at line 1, column 12\)$"):
        load_settings(path)


@pytest.mark.parametrize("text", ["x = " + "[" * 5000, "x = " + "1" * 5000, "a = 1\na = 2", "[[atmosphere]"])
def test_what_the_parser_chokes_on_is_one_line(path: Path, text: str) -> None:
    path.write_text(text)
    assert len(faults_of(path)) == 1


def test_a_file_without_end_is_not_read_to_its_end() -> None:
    with pytest.raises(ConfigError, match="/dev/zero is longer than 1000000 bytes"):
        load_settings(Path("/dev/zero"))


@pytest.mark.parametrize(
    ("value", "text"),
    [
        (True, "true"),
        (1e300, "1e+300"),
        (2.0, "2"),
        ("a\nb", r"'a\nb'"),
        ({}, "a table"),
        ("x" * 99, f"'{'x' * 39}..."),
    ],
)
def test_a_value_is_shown_on_one_short_line(value: object, text: str) -> None:
    assert shown(value) == text


airs = st.builds(
    AirSettings,
    name=st.text("abcdefghijklmnopqrstuvwxyz0123456789-", min_size=1, max_size=24).filter(
        lambda name: name not in ("static", "compare")
    ),
    haze=st.sampled_from(HAZES),
    **{key: st.floats(quantity.low, quantity.high) for key, quantity in AIR_QUANTITIES.items()},
)
sound_settings = st.builds(
    Settings,
    atmospheres=st.lists(airs, min_size=1, max_size=5, unique_by=lambda air: air.name).map(tuple),
    solar_elevations_deg=st.lists(st.integers(-120, 900), min_size=1, max_size=181, unique=True).map(
        lambda tenths: tuple(tenth / 10 for tenth in tenths)
    ),
    observer=st.sampled_from(OBSERVERS),
)
in_one_folder = settings(suppress_health_check=[HealthCheck.function_scoped_fixture], deadline=None)


@in_one_folder
@given(wanted=sound_settings)
def test_sound_settings_survive_a_file(path: Path, wanted: Settings) -> None:
    path.write_text(_toml(wanted), encoding="utf-8")
    assert load_settings(path) == wanted


keys = st.sampled_from(
    ["observer", "solar_elevations_deg", "atmosphere", "name", "haze", *AIR_QUANTITIES, "hue", '"ö"'],
)
scalars = st.sampled_from(
    [
        *("0", "-13", "5", "1e400", "nan", "-inf", "true", "'molecular'", "'clean'", "'grass'", "''"),
        *("1979-05-27", "07:32:00"),
    ]
)
values = st.recursive(
    scalars | st.floats(-20, 700).map(repr),
    lambda inner: (
        st.lists(inner, max_size=4).map(lambda parts: f"[{', '.join(parts)}]")
        | st.tuples(keys, inner).map(lambda pair: f"{{ {pair[0]} = {pair[1]} }}")
    ),
    max_leaves=8,
)
lines = st.one_of(st.just("[[atmosphere]]"), st.just("[atmosphere]"), st.builds("{} = {}".format, keys, values))


@in_one_folder
@given(text=st.lists(lines, max_size=12).map("\n".join))
@example(text="[[atmosphere]]\nname = 'a'\n[[atmosphere]]\nname = 'a'")
def test_any_toml_gives_sound_settings_or_one_line_for_each_fault(path: Path, text: str) -> None:
    path.write_text(text, encoding="utf-8")
    _assert_sound_or_told(path)


@in_one_folder
@given(data=st.binary(max_size=200) | st.text(max_size=200).map(lambda text: text.encode("utf-8", "surrogatepass")))
def test_any_bytes_give_sound_settings_or_one_line_for_each_fault(path: Path, data: bytes) -> None:
    path.write_bytes(data)
    _assert_sound_or_told(path)


def _assert_sound_or_told(path: Path) -> None:
    loaded, faults = _settings_or_faults(path)
    if loaded is None:
        assert len(faults) >= 1
        assert all(str(path) in fault and fault.isprintable() for fault in faults)
    else:
        assert loaded == Settings(loaded.atmospheres, loaded.solar_elevations_deg, loaded.observer)
        assert all(-12 <= value <= 90 for value in loaded.solar_elevations_deg)
        assert loaded.atmospheres


def _settings_or_faults(path: Path) -> tuple[Settings | None, tuple[str, ...]]:
    try:
        return load_settings(path), ()
    except ConfigError as error:
        return None, error.faults


def _toml(wanted: Settings) -> str:
    tables = [
        f"[[atmosphere]]\nname = {_toml_string(air.name)}\nhaze = {_toml_string(air.haze)}\n"
        + "".join(f"{key} = {getattr(air, key)!r}\n" for key in AIR_QUANTITIES)
        for air in wanted.atmospheres
    ]
    head = f"observer = '{wanted.observer}'\nsolar_elevations_deg = {list(wanted.solar_elevations_deg)}\n"
    return head + "".join(tables)


def _toml_string(text: str) -> str:
    return '"' + text.replace("\\", "\\\\").replace("\n", "\\n") + '"'
