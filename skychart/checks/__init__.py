"""Published values beside the values of this package: one source for the tests, `verify` and the methods page."""

from skychart.checks.check import Check, all_passed

__all__ = ["Check", "all_passed"]
