"""Everything together: enough published values, each with its source, and all of them met."""

import dataclasses
import itertools
from collections import Counter

import pytest

from skychart.checks import Check, all_passed, rayleigh, run, run_checks
from skychart.config import NAMED_AIRS


@pytest.fixture(scope="module")
def checks() -> tuple[Check, ...]:
    """Every check, run once."""
    return run_checks()


def test_every_published_value_is_met(checks: tuple[Check, ...]) -> None:
    """No tolerance is passed; the report names those that are."""
    missed = [f"{check.key}: {check.published:g}, computed {check.computed:g}" for check in checks if not check.passed]
    assert missed == []
    assert all_passed(checks)


def test_there_are_far_more_than_sixty_under_unique_keys(checks: tuple[Check, ...]) -> None:
    """At least 60 were asked for; a key names one comparison only."""
    assert len(checks) >= 200
    assert [key for key, count in Counter(check.key for check in checks).items() if count > 1] == []


def test_topics_follow_each_other_in_one_piece_each(checks: tuple[Check, ...]) -> None:
    """Eighteen topics, so that a page can set a heading where the topic changes."""
    headings = [topic for topic, _ in itertools.groupby(check.topic for check in checks)]
    assert len(headings) == len(set(headings)) == 18


def test_numbers_are_plain_floats_for_json(checks: tuple[Check, ...]) -> None:
    """No array scalars leave this package."""
    for check in checks:
        assert {type(number) for number in (check.published, check.computed, check.tolerance)} == {float}, check.key
        assert type(check.passed) is bool, check.key


def test_what_was_not_read_in_the_source_says_so(checks: tuple[Check, ...]) -> None:
    """Values worked out from published ones, remembered or without a source are marked in plain words."""
    sources = " ".join(check.source for check in checks)
    for mark in ("derived here", "from memory", "no source", "one secondary copy", "not published"):
        assert mark in sources, mark
    assert all(len(check.source) > 15 for check in checks)


def test_a_wrong_value_is_noticed(monkeypatch: pytest.MonkeyPatch) -> None:
    """One published cross-section put 1 % off on purpose: that one fails, so the whole does."""
    assert all_passed(rayleigh.checks())
    monkeypatch.setitem(rayleigh._FULL_METHOD_CM2, 550, 1.01 * rayleigh._FULL_METHOD_CM2[550])
    broken = rayleigh.checks()
    assert [check.key for check in broken if not check.passed] == ["rayleigh-bodhaine1999-550"]
    assert not all_passed(broken)


def test_only_the_skies_that_publications_are_about_are_compared() -> None:
    """Another atmosphere of a build may not slip into the comparison, be it called the same."""

    class Solved:
        settings = dataclasses.replace(NAMED_AIRS["clear"], ozone_du=200)

    assert run.sky_checks(Solved()) == ()  # type: ignore[arg-type]
