"""A handful of checks, one of them missed, for pages that show checks."""

from skychart.checks.check import Check


def fake_checks() -> tuple[Check, ...]:
    """Two topics; relative and absolute tolerances; one check missed."""
    return (
        _check("air-1", "Air", 0.0973, 0.09731, 0.0001, False),
        _check("air-2", "Air", 100.0, 101.5, 0.02, True),
        _check("sun-1", "Sun", -3.2, -3.9, 0.1, False),
    )


def _check(key: str, topic: str, published: float, computed: float, tolerance: float, relative: bool) -> Check:
    return Check(
        key, topic, "Some quantity", "some conditions", "Someone 1999, Table 1", published, computed, tolerance,
        "printed digits", "1", relative,
    )  # fmt: skip


def no_checks(sky: object) -> tuple[Check, ...]:
    """Nothing is compared with a fake sky."""
    return ()
