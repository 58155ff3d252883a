"""Published values beside the values of this package: one source for the tests, `verify` and the methods page."""

from skychart.checks.check import Check, all_passed
from skychart.checks.run import run_checks

__all__ = ["Check", "all_passed", "run_checks"]
