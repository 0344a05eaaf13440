"""A value from a publication, and the width of agreement that its print allows."""

from __future__ import annotations

from dataclasses import dataclass, field

INCH_MM = 25.4
FOOT_MM = 12 * INCH_MM

# What stands behind an expected value. None of them is our own code.
READ = "read"  # the number was read in the source
COMPUTED = "computed"  # inputs and formula were read, the result was worked out by hand from them
DERIVED = "derived"  # geometry or arithmetic only
LIBRARY = "library"  # made with a general-purpose library
MEMORY = "value from memory"  # recalled, not read: a lead, not evidence


@dataclass(frozen=True)
class Case:
    """Where the value stands, what goes in, what is printed and to which step."""

    locator: str
    inputs: dict[str, object]
    expected: float
    printed_step: float
    status: str = READ
    tolerance: float | None = None
    reason: str = ""
    notes: dict[str, object] = field(default_factory=dict)

    def __post_init__(self) -> None:
        if self.status not in (READ, COMPUTED, DERIVED, LIBRARY, MEMORY):
            raise ValueError(f"unknown status {self.status!r}")
        if self.tolerance is not None and self.tolerance > 0.5 * self.printed_step and not self.reason:
            raise ValueError(f"{self.locator}: a tolerance wider than half the printed step needs its reason")

    @property
    def allowed(self) -> float:
        """Half the last printed digit unless a reason is given, with room for the last binary digit."""
        allowed = 0.5 * self.printed_step if self.tolerance is None else self.tolerance
        return allowed + 1e-12 * abs(self.expected)

    def check(self, found: float) -> None:
        """Fail when the found value lies outside the print."""
        off = abs(found - self.expected)
        assert off <= self.allowed, (
            f"{self.locator} ({self.status}): found {found!r}, printed {self.expected!r}, off by {off:.3g}, allowed {self.allowed:.3g}"
        )


def locator(case: Case) -> str:
    """Name of a case in the test report."""
    return case.locator
