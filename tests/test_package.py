"""The house as a whole: imports run one way, start-up is light, the top level is fixed, the wheel is complete."""

import ast
import re
import subprocess
import sys
import tomllib
import zipfile
from pathlib import Path

import pytest

import skychart

REPOSITORY = Path(__file__).parents[1]
PACKAGE = Path(skychart.__file__).parent
RANKS = (
    ("errors", "library"),
    ("config",),
    ("data",),
    ("sky",),
    ("colour",),
    ("checks", "charts"),
    ("plots", "export"),
    ("pages",),
    ("arguments", "terminal"),
    ("cli",),
    ("__main__",),
)
RANK = {name: rank for rank, names in enumerate(RANKS) for name in names}
MODULES = sorted(path for path in PACKAGE.rglob("*.py") if path != PACKAGE / "__init__.py")
TOP_LEVEL = {"README.md", "DEVELOPERS.md", "pyproject.toml", "skychart", "templates", "tests", "site"}


def imported_modules(path: Path) -> list[str]:
    """Every module that the file imports, at the top or inside a function."""
    names = []
    for node in ast.walk(ast.parse(path.read_text(encoding="utf-8"))):
        if isinstance(node, ast.Import):
            names += [alias.name for alias in node.names]
        elif isinstance(node, ast.ImportFrom):
            assert node.level == 0, f"{path} imports relatively"
            names += [f"{node.module}.{alias.name}" for alias in node.names] if node.module == "skychart" else []
            names += [node.module] if node.module != "skychart" else []
    return names


def part_of(path: Path) -> str:
    """First name below the package: `sky` for `skychart/sky/sun.py`."""
    return path.relative_to(PACKAGE).parts[0].removesuffix(".py")


def test_every_part_of_the_package_has_its_place_in_the_order() -> None:
    assert {part_of(path) for path in MODULES} == set(RANK)


@pytest.mark.parametrize("path", MODULES, ids=lambda path: str(path.relative_to(PACKAGE)))
def test_imports_run_one_way(path: Path) -> None:
    own = [name for name in imported_modules(path) if name.partition(".")[0] == "skychart"]
    assert "skychart" not in own, "a module never imports the package root"
    for part in {name.split(".")[1] for name in own}:
        assert part == part_of(path) or RANK[part] < RANK[part_of(path)] or _renders_checks(path, part)


def _renders_checks(path: Path, part: str) -> bool:
    """`charts/checks.py` shows what `checks` found; nothing else joins the two neighbours."""
    return (part_of(path), path.name, part) == ("charts", "checks.py", "checks")


def loaded_by(statement: str) -> set[str]:
    """Top-level names of all modules that a fresh interpreter has loaded after the statement."""
    program = f"{statement}\nimport sys\nprint(*{{name.partition('.')[0] for name in sys.modules}})"
    done = subprocess.run([sys.executable, "-c", program], capture_output=True, text=True, check=True)
    assert done.stderr == ""
    return set(done.stdout.splitlines()[-1].split())


HELP = """
import contextlib, io
from skychart.cli import main
with contextlib.suppress(SystemExit), contextlib.redirect_stdout(io.StringIO()):
    main(["--help"])
"""


@pytest.mark.parametrize("statement", ["import skychart", HELP], ids=["import", "help"])
def test_start_up_imports_nothing_heavy(statement: str) -> None:
    assert loaded_by(statement) & {"numpy", "colour", "matplotlib", "jinja2", "PIL", "scipy", "OpenEXR"} == set()


def test_the_physics_imports_neither_colour_nor_pictures() -> None:
    loaded = loaded_by("import skychart.sky")
    assert "numpy" in loaded
    assert loaded & {"colour", "matplotlib", "jinja2", "PIL", "scipy"} == set()


def test_only_declared_dependencies_are_imported() -> None:
    """Those of the package and the extra `exr`, and each of them is used."""
    project = tomllib.loads((REPOSITORY / "pyproject.toml").read_text(encoding="utf-8"))["project"]
    declared = {re.split(r"[^\w-]", requirement)[0] for requirement in project["dependencies"]}
    roots = {name.partition(".")[0] for path in MODULES for name in imported_modules(path)}
    foreign = roots - set(sys.stdlib_module_names) - {"skychart"}
    extras = {re.split(r"[^\w-]", requirement)[0] for requirement in project["optional-dependencies"]["exr"]}
    assert {"colour-science" if name == "colour" else name for name in foreign} == declared | extras


def test_the_top_level_holds_only_the_agreed_names() -> None:
    tracked = subprocess.run(
        ["git", "ls-files"], cwd=REPOSITORY, capture_output=True, text=True, check=False
    ).stdout.splitlines()
    if not tracked:
        pytest.skip("not a git checkout")
    names = {name.partition("/")[0] for name in tracked}
    assert {name for name in names if not name.startswith(".")} - TOP_LEVEL == set()
    assert {"README.md", "DEVELOPERS.md", "pyproject.toml"} <= names


def test_the_wheel_holds_code_tables_and_templates_and_nothing_else(tmp_path: Path) -> None:
    pytest.importorskip("hatchling", reason="the wheel is built with hatchling, of the test extra")
    subprocess.run(
        [sys.executable, "-m", "hatchling", "build", "-t", "wheel", "-d", str(tmp_path)],
        cwd=REPOSITORY,
        capture_output=True,
        check=True,
    )
    (wheel,) = tmp_path.glob("sky_colour_charts-*.whl")
    packed = {name for name in zipfile.ZipFile(wheel).namelist() if ".dist-info/" not in name}
    wanted = {
        path.relative_to(folder.parent)
        for folder in (REPOSITORY / "skychart", REPOSITORY / "templates")
        for path in folder.rglob("*")
        if path.is_file() and "__pycache__" not in path.parts
    }
    expected = {str(path) if path.parts[0] == "skychart" else f"skychart/{path}" for path in wanted}
    assert packed == expected
    assert {Path(name).suffix for name in packed} >= {".py", ".csv", ".html", ".css"}


def test_the_readme_gives_the_two_commands_that_work_alone() -> None:
    lines = (REPOSITORY / "README.md").read_text(encoding="utf-8").splitlines()
    commands = [line.strip() for line in lines if line.startswith("    python3 -m venv")]
    first, second = commands
    assert first == "python3 -m venv .venv && .venv/bin/pip install -q '.[exr]' && .venv/bin/skychart build"
    assert second in (REPOSITORY / ".ci" / "run").read_text(encoding="utf-8")
