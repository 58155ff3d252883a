"""The HTML pages: from finished chart data to a folder of files that opens from disk."""

from skychart.pages.build import BuildReport, build_site

__all__ = ["BuildReport", "build_site"]
