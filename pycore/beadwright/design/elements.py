"""The element on each side of a joint: how hot and cold it gets, how it moves per kelvin.

Temperatures follow one of three ways, and the working says which: the tabulated method of the
movement guide (air plus absorption times heat constant), the sol-air balance, or surface
temperatures that the user entered.
"""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

from attrs import frozen

from .. import catalogue
from ..physics import thermal
from ..working import DEFINITION, ENTERED, MEMORY, READ, Step, Value, weakest
from .inputs import JointInput, Project

SHARE_BY_FIXITY = {"middle": 0.5, "far-end": 1.0, "near-end": 0.0}
_MASS_WORD = {"low": "light", "high": "massive"}


@frozen
class Element:
    """One side, ready for the movement budget."""

    key: str
    label: str
    substrate: catalogue.Substrate
    expansion_per_k: float
    effective_mm: float
    along_mm: float
    hot_c: float
    cold_c: float
    reversible_fraction: float
    irreversible_fraction: float
    reversible_source: tuple[str, str]
    irreversible_source: tuple[str, str]
    lacks_moisture_figure: bool
    steps: tuple[Step, ...]

    @property
    def rate_mm_per_k(self) -> float:
        """Movement toward the joint per kelvin."""
        return self.expansion_per_k * self.effective_mm

    @property
    def along_rate_mm_per_k(self) -> float:
        """Movement along the joint per kelvin."""
        return self.expansion_per_k * self.along_mm


def read_element(key: str, joint: JointInput, project: Project) -> Element | None:
    """The element of one side, or None while something that it needs is missing."""
    values = joint.side_a if key == "side_a" else joint.side_b
    mark = "A" if key == "side_a" else "B"
    substrate = project.tables["substrates"].get(values["substrate"]) if values["substrate"] else None
    if substrate is None or values["length"] is None:
        return None
    share = values["moving_share"] if values["fixity"] == "share" else SHARE_BY_FIXITY.get(values["fixity"] or "middle")
    if share is None:
        return None
    steps: list[Step] = []
    hot = _hot(values, mark, substrate, project, steps)
    cold = _cold(values, mark, project, steps)
    if hot is None or cold is None:
        return None
    if hot < cold:
        return None
    expansion = values["expansion"]
    if expansion is None:
        expansion, source = substrate.expansion_per_k, substrate.source_of("expansion_per_k")
        status = substrate.status_of("expansion_per_k")
    else:
        source, status = "entered by the user", ENTERED
    effective = values["length"] * share
    steps.append(Step(
        f"length-{mark}", f"Side {mark}: length that moves here", f"L_{mark}", "L_element × share", "{L} × {f}",
        {"L": Value(values["length"], "length"), "f": Value(share, "number")},
        Value(effective, "length"), "Definition: the share of the element on the joint's side of where it is held", DEFINITION,
    ))  # fmt: skip
    steps.append(Step(
        f"expansion-{mark}", f"Side {mark}: expansion of {substrate.label}", f"α_{mark}", "table", "",
        {}, Value(expansion, "expansion"), source, status,
    ))  # fmt: skip
    reversible, reversible_source = _moisture(values, substrate, "moisture_reversible")
    irreversible, irreversible_source = _moisture(values, substrate, "moisture_irreversible")
    lacks = reversible is None or irreversible is None
    remaining = (irreversible or 0.0) * (1.0 - (values["moisture_done"] or 0.0))
    return Element(
        key, f"Side {mark}", substrate, expansion, effective, values["length_along"] or 0.0, hot, cold,
        reversible or 0.0, remaining, reversible_source, irreversible_source, lacks, tuple(steps),
    )  # fmt: skip


def _moisture(values: Mapping[str, Any], substrate: catalogue.Substrate, key: str) -> tuple[float | None, tuple[str, str]]:
    """A moisture strain with its source and status; None where neither user nor table gives one."""
    if values[key] is not None:
        return values[key], ("entered by the user", ENTERED)
    column = f"{key}_fraction"
    return getattr(substrate, column), (substrate.source_of(column), substrate.status_of(column))


def absorption(values: Mapping[str, Any], substrate: catalogue.Substrate) -> tuple[float, str, str]:
    """Absorption fraction of a side with its source and status."""
    if values["absorption"] is not None:
        return values["absorption"], "entered by the user", ENTERED
    finishes = {item.id: item for item in substrate.finishes}
    chosen = finishes.get(values["finish"] or substrate.default_finish) or next(iter(finishes.values()))
    return chosen.absorption_fraction, f"{chosen.label}: {chosen.source}", chosen.status


def _hot(values: Mapping[str, Any], mark: str, substrate: catalogue.Substrate, project: Project, steps: list[Step]) -> float | None:
    title, symbol = f"Side {mark}: hottest", f"T_hot,{mark}"
    if values["summer_surface"] is not None:
        hot: float = values["summer_surface"]
        steps.append(Step(f"hot-{mark}", title, symbol, "entered", "", {}, Value(hot, "temperature"), "entered by the user", ENTERED))
        return hot
    air = project.site["summer_air"]
    if air is None:
        return None
    if values["sun"] == "shaded":
        steps.append(Step(f"hot-{mark}", f"{title}, in shade", symbol, "T_air", "{T}", {"T": Value(air, "temperature")}, Value(air, "temperature"), "Definition: no sun reaches it", DEFINITION))
        return float(air)
    share, source, status = absorption(values, substrate)
    if project.site["temperature_method"] == "sol-air":
        return _hot_sol_air(air, share, source, status, mark, project, steps)
    mass = substrate.heat_group if values["mass"] in (None, "auto") else values["mass"]
    row = catalogue.heat_constants()[f"{mass}-{'reflected' if values['sun'] == 'reflected' else 'open'}"]
    hot = thermal.summer_surface_c(air, share, row.heat_rise_k)
    steps.append(Step(
        f"hot-{mark}", title, symbol, "T_air + A · H", "{T} + {A} × {H}",
        {"T": Value(air, "temperature"), "A": Value(share, "number"), "H": Value(row.heat_rise_k, "temperature_difference")},
        Value(hot, "temperature"), f"Tabulated sun method, {_MASS_WORD[mass]} material: {row.source}. A: {source}", weakest(row.status, status),
    ))  # fmt: skip
    return hot


def _hot_sol_air(air: float, share: float, source: str, status: str, mark: str, project: Project, steps: list[Step]) -> float | None:
    site = project.site
    if site["irradiance"] is None or site["film"] is None or site["longwave"] is None:
        return None
    hot = thermal.sol_air_c(air, share, site["irradiance"], site["film"], site["longwave"])
    steps.append(Step(
        f"hot-{mark}", f"Side {mark}: hottest, sol-air", f"T_hot,{mark}", "T_air + A · I / h_o − ΔT_sky", "{T} + {A} × {I} / {h} − {k}",
        {"T": Value(air, "temperature"), "A": Value(share, "number"), "I": Value(site["irradiance"], "irradiance"),
         "h": Value(site["film"], "film"), "k": Value(site["longwave"], "temperature_difference")},
        Value(hot, "temperature"), f"Sol-air balance, from a secondary page citing ASHRAE. A: {source}", weakest(READ, status),
    ))  # fmt: skip
    return hot


def _cold(values: Mapping[str, Any], mark: str, project: Project, steps: list[Step]) -> float | None:
    title, symbol = f"Side {mark}: coldest", f"T_cold,{mark}"
    if values["winter_surface"] is not None:
        cold: float = values["winter_surface"]
        steps.append(Step(f"cold-{mark}", title, symbol, "entered", "", {}, Value(cold, "temperature"), "entered by the user", ENTERED))
        return cold
    air, sky = project.site["winter_air"], project.site["night_sky"] or 0.0
    if air is None:
        return None
    if values["sun"] == "shaded":
        sky = 0.0
    cold = thermal.winter_surface_c(air, sky)
    steps.append(Step(
        f"cold-{mark}", title, symbol, "T_win − ΔT_sky", "{T} − {k}",
        {"T": Value(air, "temperature"), "k": Value(sky, "temperature_difference")},
        Value(cold, "temperature"), "Tabulated method: design winter air, less night-sky cooling where asked; from memory of the movement guide", MEMORY,
    ))  # fmt: skip
    return cold
