"""The bead's section and how it strains between the coldest and the hottest."""

from __future__ import annotations

from attrs import frozen

from ..physics import section, strain
from ..working import COMMON_PRACTICE, DEFINITION, DERIVED, Step, Value

TOOL_HOLLOW_OF_WIDTH = 0.1


@frozen
class Bead:
    """Section of a bead between two parallel faces."""

    width_mm: float
    neck_mm: float
    tool_sag_mm: float
    rod_sag_mm: float
    bond_mm: float
    area_mm2: float
    rod_mm: float | None

    @property
    def rectangle_mm2(self) -> float:
        """Width times depth at mid-width, the customary short cut."""
        return self.width_mm * self.neck_mm


def make_bead(width_mm: float, neck_mm: float, *, tool_sag_mm: float | None, rod_sag_mm: float | None, rod_mm: float | None, is_concave: bool) -> Bead:
    """The section from width, depth at mid-width, tooling and rod.

    An empty tooling hollow is a tenth of the width for a concave face (common practice, no
    source), 0 for a flush one. An empty crown is that of the undeformed round rod, 0 without a rod.
    """
    tool = tool_sag_mm if tool_sag_mm is not None else TOOL_HOLLOW_OF_WIDTH * width_mm if is_concave else 0.0
    if rod_sag_mm is not None:
        crown = rod_sag_mm
    elif rod_mm is not None and rod_mm >= width_mm:
        crown = section.rod_crown_mm(width_mm, rod_mm)
    else:
        crown = 0.0
    bond = section.bond_depth_mm(neck_mm, tool, crown)
    area = section.hourglass_area_mm2(width_mm, neck_mm, tool, crown)
    return Bead(width_mm, neck_mm, tool, crown, bond, area, rod_mm)


def bead_steps(bead: Bead) -> list[Step]:
    """Working of bond depth and area."""
    width, neck = Value(bead.width_mm, "length"), Value(bead.neck_mm, "length")
    tool, crown = Value(bead.tool_sag_mm, "length"), Value(bead.rod_sag_mm, "length")
    steps = []
    if bead.rod_mm is not None and bead.rod_sag_mm:
        steps.append(Step("rod-crown", "Rod crown into the bead", "s_rod", "D/2 − √(D²/4 − w²/4)", "{D}/2 − √(({D})²/4 − ({w})²/4)", {"D": Value(bead.rod_mm, "length"), "w": width}, crown, "Geometry of an undeformed round rod; an estimate, foam flattens", DEFINITION))
    steps.append(Step("bond", "Bond depth at each face", "e", "d + s_tool + s_rod", "{d} + {t} + {r}", {"d": neck, "t": tool, "r": crown}, Value(bead.bond_mm, "length"), "Geometry of the hourglass; tooling hollow by common practice unless entered", COMMON_PRACTICE))
    steps.append(Step("area", "Section area", "A", "w · e − seg(w, s_tool) − seg(w, s_rod); seg(w, s) = R²/2 · (θ − sin θ), R = (w²/4 + s²) / 2s, θ = 2 asin(w/2R)", "{w} × {e} − seg({w}, {t}) − seg({w}, {r})",
                      {"w": width, "e": Value(bead.bond_mm, "length"), "t": tool, "r": crown}, Value(bead.area_mm2, "area"), "Geometry: circular segments", DEFINITION))  # fmt: skip
    return steps


@frozen
class StrainState:
    """The bead at one moment: average strain across it and strain at its free face."""

    change_mm: float
    average_fraction: float
    face_fraction: float
    neck_mm: float


def strained(bead: Bead, change_mm: float, shear_mm: float = 0.0) -> StrainState:
    """Strain after the gap changed by `change_mm` (opening positive) with a slip. [mm]

    The average includes the slip; the face follows the parabola at constant volume.
    """
    width, depth = bead.width_mm, bead.neck_mm
    change = max(change_mm, -0.95 * width)
    average = strain.stretch_fraction(width, change, shear_mm)
    # Beyond the geometry's own limit the neck is gone; the state is then reported at that limit.
    limit = min(change, 1.9 * width)
    return StrainState(change_mm, average, strain.face_strain(width, depth, limit), strain.neck_after_mm(width, depth, limit))


def strain_steps(bead: Bead, opened: StrainState, closed: StrainState) -> list[Step]:
    """Working of the strains at both ends."""
    source = "Parabola and constant volume, after Tons, HRB Bulletin 229 (1959), which was cited but not read; geometry derived"
    steps = []
    for key, word, state in (("cold", "coldest", opened), ("hot", "hottest", closed)):
        steps.append(Step(
            f"face-{key}", f"Face strain at the {word}", "ε_f", "arc / w − 1; arc = ½√(c² + 16h²) + c²/(8h) · asinh(4h/c), c = w + Δ, h = ¾ d Δ / c", "with w = {w}, d = {d}, Δ = {x}",
            {"w": Value(bead.width_mm, "length"), "d": Value(bead.neck_mm, "length"), "x": Value(state.change_mm, "length")},
            Value(state.face_fraction, "percent"), source, DERIVED,
        ))  # fmt: skip
    return steps
