"""Published values beside the values of this package: one source for the tests, `verify` and the methods page."""

from skychart.checks.check import Check, all_passed
from skychart.checks.run import COMPARED_AIRS, PIECES, by_topic, run_checks, sky_checks

__all__ = ["COMPARED_AIRS", "PIECES", "Check", "all_passed", "by_topic", "run_checks", "sky_checks"]
