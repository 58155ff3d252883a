"""The one door to colour-science: imported late, because that takes longer than many commands need, and quietly."""

import functools
import warnings
from types import ModuleType


@functools.cache
def colour_science() -> ModuleType:
    """The package `colour`, without the warning that it can do more when SciPy is installed.

    Nothing here uses what it does with SciPy, and any other warning comes through.
    """
    with warnings.catch_warnings():
        warnings.filterwarnings("ignore", message='"SciPy" related API features are not available')
        import colour
    return colour
