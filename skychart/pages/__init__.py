"""The HTML pages: from finished chart data to a folder of files that opens from disk.

`build_site` and `BuildReport` are fetched when first asked for: figures take seconds to import, which nobody who
only writes or checks a folder should wait for.
"""

from typing import Any

__all__ = ["BuildReport", "build_site"]


def __getattr__(name: str) -> Any:
    if name not in __all__:
        raise AttributeError(f"module {__name__!r} has no attribute {name!r}")
    from skychart.pages import build

    return getattr(build, name)
