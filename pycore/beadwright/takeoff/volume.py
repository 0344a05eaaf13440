"""The true section of a run's bead, and what goes with each metre of it.

Areas are in mm², which is the same number as ml for each metre of bead.
"""

from __future__ import annotations

from attrs import frozen

from ..design.bead import make_bead
from ..physics import section

# A hollow or bulge of a fillet that is not given, as a share of the straight face.
FACE_OF_CHORD = 0.1
_ROUND_MM2 = 0.7853981633974483  # π/4


@frozen
class Bead:
    """Section of a bead as ordered: its true area, the rectangle that a short cut would take, its faces."""

    area_mm2: float
    rectangle_mm2: float
    rectangle_text: str
    face_mm: tuple[float, ...]
    masked_lines: int = 2
    tape_mm: float | None = None


def butt(width_mm: float, neck_mm: float, *, tool_sag_mm: float | None, rod_sag_mm: float | None, rod_mm: float | None, is_concave: bool) -> Bead:
    """A butt bead: tooled face, crown of the rod behind; two bond faces."""
    half = width_mm / 2
    tool = None if tool_sag_mm is None else min(tool_sag_mm, half)
    crown = None if rod_sag_mm is None else min(rod_sag_mm, half)
    shape = make_bead(width_mm, neck_mm, tool_sag_mm=tool, rod_sag_mm=crown, rod_mm=rod_mm, is_concave=is_concave)
    return Bead(shape.area_mm2, width_mm * neck_mm, "width × depth", (shape.bond_mm, shape.bond_mm), tape_mm=width_mm)


def lap(thickness_mm: float, cover_mm: float) -> Bead:
    """A lap: thickness times bonded cover; bonded on both faces."""
    return Bead(thickness_mm * cover_mm, thickness_mm * cover_mm, "thickness × cover", (cover_mm, cover_mm))


def fillet(leg_a_mm: float, leg_b_mm: float, sagitta_mm: float, face: str) -> Bead:
    """A bead in a square corner. A short cut takes it for a butt of both legs, twice too much.

    Raises
    ------
    ValueError
        When a hollow cuts into a leg or a bulge is more than half a circle.
    """
    area = section.fillet_area_mm2(leg_a_mm, leg_b_mm, sagitta_mm, face)
    return Bead(area, leg_a_mm * leg_b_mm, "leg × leg, as if a butt", (leg_a_mm, leg_b_mm), tape_mm=min(leg_a_mm, leg_b_mm) / 2)


def bridge(width_mm: float, thickness_mm: float) -> Bead:
    """A band over a failed joint; primed over its whole width, which is on the safe side."""
    return Bead(width_mm * thickness_mm, width_mm * thickness_mm, "width × thickness", (width_mm,), tape_mm=width_mm / 2)


def bed(width_mm: float, thickness_mm: float) -> Bead:
    """A bed under a part, bonded above and below."""
    return Bead(width_mm * thickness_mm, width_mm * thickness_mm, "width × thickness", (width_mm, width_mm), masked_lines=0)


def round_bead(diameter_mm: float) -> Bead:
    """A round bead as it leaves the tip; no bond face is counted before it is pressed."""
    return Bead(_ROUND_MM2 * diameter_mm * diameter_mm, diameter_mm * diameter_mm, "diameter × diameter", (), masked_lines=0)


def metres_per_package(package_ml: float, area_mm2: float) -> float:
    """Definition: what one package fills, before waste; ml over ml for each metre. [m]"""
    return package_ml / area_mm2


US_GALLON_ML = 3785.411784  # 231 in³
FOOT_M = 0.3048


def feet_per_gallon(area_mm2: float) -> float:
    """Definition: feet that a US gallon fills, before waste; 231 / (12 w d) with w and d in inches. [ft]"""
    return US_GALLON_ML / area_mm2 / FOOT_M


def with_waste(net_ml: float, waste_fraction: float, waste_by: str) -> float:
    """What must be bought: net × (1 + p), or net ÷ (1 − p) when waste is a share of what is bought. [ml]"""
    return net_ml / (1.0 - waste_fraction) if waste_by == "divide" else net_ml * (1.0 + waste_fraction)


def bond_area_m2(face_mm: tuple[float, ...], length_m: float, overlap_mm: float) -> float:
    """Faces to prime: each face with its overlap times the length. [m²]"""
    return sum(face + overlap_mm for face in face_mm) * length_m / 1000.0
