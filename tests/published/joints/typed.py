"""Jobs as a user types them for a published case, and one number out of the answer."""

from typing import Any

from jobs import make_job, only_joint

# The far side of a case that speaks of one element only: held at the joint, so none of it moves here.
STILL = {"fixity": "near-end"}


def side(expansion: str, length: str, cold: str, hot: str, **more: str) -> dict[str, str]:
    """One side with its own coefficient and surface temperatures, free of moisture movement unless given."""
    return {"expansion": expansion, "length": length, "winter_surface": cold, "summer_surface": hot} | more


def evaluated(joint: dict[str, Any], **more: Any) -> dict[str, Any]:
    """The answer for one joint; a list of (opening, closing, shear, across) becomes its entered causes."""
    loads = joint.pop("loads", None)
    if loads:
        keys = ("opening", "closing", "shear", "shear_across")
        joint["causes"] = [{"id": f"c{index}", "label": "Published movement"} | {key: text for key, text in zip(keys, load, strict=False) if text} for index, load in enumerate(loads)]
    return only_joint(make_job(joint, **more))


def loaded(*loads: tuple[str, ...], **joint: Any) -> dict[str, Any]:
    """A joint between two sides that do not move, with entered movements only."""
    return {"side_a": dict(STILL), "side_b": dict(STILL), "loads": list(loads)} | joint


def own_class(extension: float, compression: float, total: float | None = None) -> dict[str, str]:
    """A class by its percentages."""
    shares = {"class": "own", "own_extension": f"{extension} %", "own_compression": f"{compression} %"}
    return shares if total is None else shares | {"own_total": f"{total} %"}


def at(answer: dict[str, Any], place: str) -> Any:
    """A value of the answer by its dotted place, for example `width.required_mm`."""
    for key in place.split("."):
        answer = answer[key]
    return answer


def depth_of(answer: dict[str, Any], rule: str) -> dict[str, Any]:
    """What one depth rule set says in the answer's comparison."""
    return next(row for row in answer["depth"]["by_rule"] if row["rule"] == rule)
