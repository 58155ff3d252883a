"""Levels of codings: all met, and a wrong one is noticed."""

import pytest

from skychart.checks import coding
from skychart.colour.coding import HLG


def test_every_level_is_met_and_all_codings_of_video_are_there() -> None:
    """At least four levels of PQ and HLG and two of BT.1886, each under a key of its own."""
    found = coding.checks()
    assert all(check.passed for check in found)
    assert len({check.key for check in found}) == len(found) >= 15
    count = {key: sum(check.key.startswith(f"coding-{key}-") for check in found) for key in ("pq", "hlg", "bt1886")}
    assert count["pq"] >= 4
    assert count["hlg"] >= 4
    assert count["bt1886"] >= 2


def test_another_peak_is_noticed(monkeypatch: pytest.MonkeyPatch) -> None:
    """With a nominal peak of 1010 cd/m² in the place of 1000, reference white, the half and the peak are missed."""
    monkeypatch.setattr(coding, "CODINGS", tuple(_brighter(one) for one in coding.CODINGS))
    missed = {check.key for check in coding.checks() if not check.passed}
    assert {"coding-hlg-signal-0.75-light", "coding-hlg-signal-0.5-light", "coding-hlg-signal-1-light"} <= missed


def _brighter(one):
    return type(one)(**(vars(one) | {"peak_cd_m2": 1010.0})) if one == HLG else one
