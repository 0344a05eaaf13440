"""When a caution speaks: the conditions of its row against the facts of a joint.

Every condition in a row must hold. A list under `region`, `use`, `kind` or `family` holds when the
fact is one of them; under `substrate_tags`, `family_tags` or `flags` when any of them is present;
`substrate_tags_all` and `flags_all` want every one, `not_flags` and `not_substrate_tags` none.
`year_from` and `year_to` want a known year of building, `year_unknown` wants none.
"""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

_ONE_OF = frozenset({"region", "use", "kind", "family"})
_ANY = {"substrate_tags": "substrate_tags", "family_tags": "family_tags", "flags": "flags"}
_ALL = {"substrate_tags_all": "substrate_tags", "flags_all": "flags"}
_NONE = {"not_flags": "flags", "not_substrate_tags": "substrate_tags"}
_YEAR = frozenset({"year_from", "year_to", "year_unknown"})
KEYS = frozenset({*_ONE_OF, *_ANY, *_ALL, *_NONE, *_YEAR})

Test = tuple[str, str, Any]


def compile_when(name: str, when: Mapping[str, Any]) -> tuple[Test, ...]:
    """Turn a row's conditions into (sort, fact, wanted); an unknown condition is refused."""
    tests: list[Test] = []
    for key, wanted in when.items():
        if key in _ONE_OF:
            tests.append(("one-of", key, frozenset(wanted)))
        elif key in _ANY:
            tests.append(("any", _ANY[key], frozenset(wanted)))
        elif key in _ALL:
            tests.append(("all", _ALL[key], frozenset(wanted)))
        elif key in _NONE:
            tests.append(("none", _NONE[key], frozenset(wanted)))
        elif key in _YEAR:
            tests.append((key, "year", wanted))
        else:
            raise ValueError(f"caution {name}: unknown condition {key!r}")
    return tuple(tests)


def matches(tests: tuple[Test, ...], context: Mapping[str, Any]) -> bool:
    """Whether every condition holds."""
    return all(_holds(sort, context[fact], wanted) for sort, fact, wanted in tests)


def _holds(sort: str, fact: Any, wanted: Any) -> bool:
    if sort == "one-of":
        return fact in wanted
    if sort == "any":
        return not wanted.isdisjoint(fact)
    if sort == "all":
        return bool(wanted <= fact)
    if sort == "none":
        return bool(wanted.isdisjoint(fact))
    if sort == "year_unknown":
        return (fact is None) is bool(wanted)
    if fact is None:
        return False
    return bool(fact >= wanted) if sort == "year_from" else bool(fact <= wanted)
