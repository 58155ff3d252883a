"""The template environment: escaping on, undefined names are errors, links relative through one filter."""

import posixpath
from collections.abc import Mapping
from pathlib import Path
from typing import Any

from jinja2 import Environment, FileSystemLoader, StrictUndefined, pass_context
from jinja2.runtime import Context

from skychart.charts.numbers import spaced

_PACKAGE = Path(__file__).resolve().parents[1]


def templates_folder() -> Path:
    """The folder of templates: inside an installed package, beside it in a checkout."""
    installed = _PACKAGE / "templates"
    return installed if installed.is_dir() else _PACKAGE.parent / "templates"


def static_files() -> dict[str, bytes]:
    """Stylesheet and script, by path in the site."""
    folder = templates_folder() / "static"
    return {f"static/{path.name}": path.read_bytes() for path in sorted(folder.iterdir())}


def environment() -> Environment:
    """Environment of all pages; `link` makes a path within the site relative to the page being written."""
    made = Environment(
        loader=FileSystemLoader(templates_folder()),
        autoescape=True,
        undefined=StrictUndefined,
        trim_blocks=True,
        lstrip_blocks=True,
        keep_trailing_newline=True,
    )
    made.filters["link"] = _link
    made.filters["spaced"] = spaced
    return made


def render(made: Environment, template: str, context: Mapping[str, Any]) -> bytes:
    """One page as bytes; `context` holds `page` and what the template names."""
    return made.get_template(template).render(context).encode("utf-8")


@pass_context
def _link(context: Context, target: str) -> str:
    path, mark, fragment = target.partition("#")
    folder = posixpath.dirname(context["page"].path)
    return posixpath.relpath(path, folder or ".") + mark + fragment
