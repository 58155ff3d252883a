"""One published value beside the computed one."""

import math
from collections.abc import Sequence
from dataclasses import dataclass, fields


@dataclass(frozen=True)
class Check:
    """A published value, the value computed here, and how far apart the two may lie.

    ``key`` is unique and never changes; ``source`` names the publication and, in plain words, how far it can be
    trusted; ``tolerance_reason`` says what the tolerance follows (printed digits, stated uncertainty, or a difference
    of conditions). ``published`` and ``computed`` are in ``unit`` ("1" for a pure number). ``tolerance`` is a share of
    the published value if ``relative``, else in ``unit`` too.
    """

    key: str
    topic: str
    quantity: str
    conditions: str
    source: str
    published: float
    computed: float
    tolerance: float
    tolerance_reason: str
    unit: str
    relative: bool

    def __post_init__(self) -> None:
        empty = [field.name for field in fields(self) if getattr(self, field.name) == ""]
        if empty:
            raise ValueError(f"check {self.key!r} leaves empty: {', '.join(empty)}")
        if not (math.isfinite(self.published) and math.isfinite(self.tolerance) and self.tolerance > 0):
            raise ValueError(f"check {self.key!r} needs a finite published value and a positive tolerance")
        if self.relative and self.published == 0:
            raise ValueError(f"check {self.key!r} is relative to a published value of 0")

    @property
    def difference(self) -> float:
        """Computed minus published: a share of the published value if ``relative``, else in ``unit``."""
        difference = self.computed - self.published
        return difference / self.published if self.relative else difference

    @property
    def passed(self) -> bool:
        """Whether the difference lies within the tolerance; a computed value that is not a number fails."""
        return abs(self.difference) <= self.tolerance


def all_passed(checks: Sequence[Check]) -> bool:
    """Whether there are checks at all and none of them failed."""
    return len(checks) > 0 and all(check.passed for check in checks)
