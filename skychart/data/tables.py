"""Reads the CSV tables of this folder; where each of them comes from stands in its header and in `README.md`."""

import csv
import functools
from collections.abc import Iterator
from dataclasses import dataclass
from importlib.resources import files
from importlib.resources.abc import Traversable

import numpy as np

from skychart.errors import InputError


@dataclass(frozen=True)
class Table:
    """One table as read from its file.

    `name` is the file name without its ending, behind the folder if it lies in one. `header` holds the
    provenance lines without their leading '# '. `columns` maps a column name, which ends in its unit, to a
    read-only array of shape (row,): floats, or strings if one entry or more is not a number.
    """

    name: str
    header: tuple[str, ...]
    columns: dict[str, np.ndarray]


@functools.cache
def load_table(name: str) -> Table:
    """Table called `name`, for example "us76_density_profile" or "checks/rayleigh_sky_natraj2009".

    Raises InputError if there is no such table. The file is read once; later calls return the same object.
    """
    if name not in table_names():
        raise InputError(f"unknown table {name!r}; known: {', '.join(table_names())}")
    lines = files(__package__).joinpath(*f"{name}.csv".split("/")).read_text(encoding="utf-8").splitlines()
    header = tuple(line.removeprefix("#").strip() for line in lines if line.startswith("#"))
    labels, *rows = csv.reader(line for line in lines if line and not line.startswith("#"))
    columns = {label: _column(entries) for label, entries in zip(labels, zip(*rows, strict=True), strict=True)}
    return Table(name, header, columns)


@functools.cache
def table_names() -> tuple[str, ...]:
    """Names of all tables, sorted; those below "checks/" are published values to compare with."""
    return tuple(sorted(_csv_stems(files(__package__), "")))


def _csv_stems(folder: Traversable, prefix: str) -> Iterator[str]:
    for entry in folder.iterdir():
        if entry.is_dir():
            yield from _csv_stems(entry, f"{prefix}{entry.name}/")
        elif entry.name.endswith(".csv"):
            yield prefix + entry.name.removesuffix(".csv")


def _column(entries: tuple[str, ...]) -> np.ndarray:
    try:
        values = np.array([float(entry) for entry in entries])
    except ValueError:
        values = np.array(entries)
    values.setflags(write=False)
    return values
