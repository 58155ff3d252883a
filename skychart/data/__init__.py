"""The tables that everything is computed from, each with its provenance, and the one loader."""

from skychart.data.tables import Table, load_table, table_names

__all__ = ["Table", "load_table", "table_names"]
