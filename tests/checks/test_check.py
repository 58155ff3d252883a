"""A single comparison: its difference, its verdict, and what it refuses."""

import dataclasses
import math

import pytest

from skychart.checks import Check, all_passed

CHECK = Check(
    key="example",
    topic="Examples",
    quantity="Length",
    conditions="none",
    source="nobody 1900",
    published=2.0,
    computed=2.1,
    tolerance=0.1,
    tolerance_reason="one printed decimal",
    unit="m",
    relative=False,
)


def test_difference_is_computed_minus_published_in_the_unit() -> None:
    """Absolute: 2.1 m against 2.0 m differ by 0.1 m."""
    assert CHECK.difference == pytest.approx(0.1)


def test_relative_difference_is_a_share_of_the_published_value() -> None:
    """Relative: 2.1 against 2.0 differ by 5 %, also when both are negative."""
    assert dataclasses.replace(CHECK, relative=True).difference == pytest.approx(0.05)
    negative = dataclasses.replace(CHECK, published=-2.0, computed=-2.1, relative=True)
    assert negative.difference == pytest.approx(0.05)


@pytest.mark.parametrize(
    ("computed", "passed"),
    [(2.0, True), (2.09, True), (1.91, True), (2.11, False), (1.89, False), (math.nan, False), (math.inf, False)],
)
def test_a_value_passes_within_the_tolerance_on_either_side(computed: float, passed: bool) -> None:
    """A value that is not a number fails."""
    assert dataclasses.replace(CHECK, computed=computed).passed is passed


def test_all_passed_wants_every_check_and_at_least_one() -> None:
    """One failure is enough; nothing compared is no success."""
    good, bad = dataclasses.replace(CHECK, computed=2.0), dataclasses.replace(CHECK, computed=3.0)
    assert all_passed((good, good))
    assert not all_passed((good, bad))
    assert not all_passed(())


@pytest.mark.parametrize("field", ["key", "topic", "quantity", "conditions", "source", "tolerance_reason", "unit"])
def test_empty_texts_are_refused(field: str) -> None:
    """A comparison without a source, a condition or a reason is none."""
    with pytest.raises(ValueError, match=f"leaves empty: {field}"):
        dataclasses.replace(CHECK, **{field: ""})


@pytest.mark.parametrize(
    "wrong",
    [
        {"published": math.nan},
        {"published": math.inf},
        {"tolerance": 0.0},
        {"tolerance": -1.0},
        {"tolerance": math.nan},
    ],
)
def test_unusable_numbers_are_refused(wrong: dict[str, float]) -> None:
    """A tolerance of infinity or less than nothing cannot fail, or cannot pass."""
    with pytest.raises(ValueError, match="needs a finite published value and a positive tolerance"):
        dataclasses.replace(CHECK, **wrong)


def test_relative_to_zero_is_refused() -> None:
    """A share of 0 has no meaning."""
    with pytest.raises(ValueError, match="relative to a published value of 0"):
        dataclasses.replace(CHECK, published=0.0, relative=True)
