"""What the decision floors share: one step of working, one issue for the user, one note.

Nothing here knows a joint; the sheet turns these records into text.
"""

from __future__ import annotations

from attrs import field, frozen

READ = "read"
MEMORY = "memory"
COMMON_PRACTICE = "common practice"
DEFINITION = "definition"
DERIVED = "derived"
ENTERED = "entered"


# From the best-founded to the least: a result is founded no better than its weakest part.
_WEAKNESS = {READ: 0, DEFINITION: 0, "derived": 0, ENTERED: 1, COMMON_PRACTICE: 2, MEMORY: 3}


def weakest(*statuses: str) -> str:
    """The status of a result that rests on parts with these; the first of equals."""
    return max(statuses, key=lambda status: _WEAKNESS.get(status, 3))


class InputError(ValueError):
    """Something the user can put right; `code` is stable, the text is for people."""

    def __init__(self, code: str, message: str) -> None:
        super().__init__(message)
        self.code = code
        self.message = message


@frozen
class Issue:
    """A finding about one place of the input, with its JSON Pointer."""

    path: str
    code: str
    severity: str
    message: str
    value: object = None
    limit: object = None
    unit: str | None = None

    def as_dict(self) -> dict[str, object]:
        """Plain form for the answer; empty parts are left out."""
        answer: dict[str, object] = {
            "path": self.path,
            "code": self.code,
            "severity": self.severity,
            "message": self.message,
        }
        for key in ("value", "limit", "unit"):
            part = getattr(self, key)
            if part is not None:
                answer[key] = part
        return answer


@frozen
class Value:
    """A number with the kind that tells how to print it (see `quantity.KINDS`)."""

    number: float | None
    kind: str
    unit: str | None = None


@frozen
class Step:
    """One line of working: formula, the numbers put in, the result and where it comes from.

    `template` holds the formula with `{name}` where a number goes in; `inputs` gives these numbers.
    """

    key: str
    title: str
    symbol: str
    formula: str
    template: str
    inputs: dict[str, Value] = field(factory=dict)
    result: Value | None = None
    source: str = "Definition"
    status: str = DEFINITION
    remark: str = ""


@frozen
class Note:
    """A plain sentence that stands beside an answer."""

    severity: str
    text: str
