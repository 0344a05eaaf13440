"""How fast the front moves in a sealant, and how far it must go in a bead."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from math import sqrt
from typing import Any

from attrs import frozen

from ..design.inputs import Sealant
from ..design.joint import Judgement
from ..physics import cure, section_solve
from ..working import DEFINITION, ENTERED, MEMORY, READ, Step, Value
from .weather import dose_rate

SILICONE_PERMEATION_J_MOL = -12000.0
# A cut test is made in weather that is only known roughly.
CUT_TEST_FLOOR = 0.08
DEEP_MM = 12.0
FRONT_SOURCE = "Front law z = k √t of Comyn (1998), abstract read, form from memory and derived again; slope grows later (De Buyl, Comyn et al., abstract read), so this is the slow side"
LAST_POINT_SOURCE = "Derived from the quasi-steady front: −∇²ψ = 1, ψ = 0 on open faces, no flux on sealed ones; solved on the section"


@frozen
class Rate:
    """Depth in the first day at 23 degC and 50 %, with its uncertainty, up and down as a fraction."""

    k_mm: float
    uncertainty_fraction: float
    source: str
    status: str
    permeation_j_mol: float
    steps: tuple[Step, ...] = ()

    @property
    def fast_mm(self) -> float:
        """The quick end."""
        return self.k_mm * (1.0 + self.uncertainty_fraction)

    @property
    def slow_mm(self) -> float:
        """The slow end."""
        return self.k_mm * (1.0 - self.uncertainty_fraction)


@frozen
class Reach:
    """How far the last point of a bead is from the air."""

    shape: str
    open_faces: tuple[str, ...]
    throat_mm: float
    reach_mm2: float
    area_mm2: float
    open_mm: float
    is_solved: bool
    last_mm: tuple[float, float] | None
    lengths_mm: tuple[float, float, float, float]

    @property
    def depth_mm(self) -> float:
        """Depth of the slab that takes as long."""
        return sqrt(2.0 * self.reach_mm2)

    @property
    def faces_text(self) -> str:
        """The open faces as the solver takes them."""
        return "+".join(self.open_faces)


def permeation_of(sealant: Sealant | None, settings: Mapping[str, Any]) -> float:
    """Heat of permeation: entered, or that of silicones, or none. [J/mol]"""
    if settings["permeation"] is not None:
        return float(settings["permeation"]) * 1000.0
    tags = sealant.family.tags if sealant is not None and sealant.family is not None else frozenset()
    return SILICONE_PERMEATION_J_MOL if "silicone" in tags else 0.0


def rate_of(sealant: Sealant, settings: Mapping[str, Any], cuts: Sequence[Mapping[str, Any]]) -> Rate | None:
    """The rate of a sealant: cut tests first, then its data sheet, then its family; None where no front runs."""
    family = sealant.family
    permeation = permeation_of(sealant, settings)
    stated = settings["uncertainty"] if settings["uncertainty"] is not None else 0.4
    if family is not None and family.cure != "moisture":
        return None
    tested = [cut for cut in cuts if cut["sealant"] == sealant.id and None not in (cut["depth"], cut["time"], cut["air"], cut["humidity"])]
    if tested:
        return _tested(tested, settings, permeation)
    own = sealant.values["cure_depth"]
    if own is not None:
        return Rate(own, stated, sealant.values["data_sheet"] or "data sheet of the sealant, entered by the user", ENTERED, permeation)
    if family is None or family.k_ref_mm is None:
        return None
    spread = max((family.k_high_mm or family.k_ref_mm) / family.k_ref_mm - 1.0, 1.0 - (family.k_low_mm or family.k_ref_mm) / family.k_ref_mm)
    return Rate(family.k_ref_mm, max(stated, spread), f"usual for {family.label}: {family.source_of('k_ref_mm')}", MEMORY, permeation)


def _tested(tested: Sequence[Mapping[str, Any]], settings: Mapping[str, Any], permeation: float) -> Rate:
    found, steps = [], []
    for number, cut in enumerate(tested, 1):
        factor = sqrt(dose_rate(cut["air"], cut["humidity"], settings["model"] or "cautious", permeation))
        k = cut["depth"] / (factor * sqrt(cut["time"] / 24.0))
        error = (cut["error"] or 0.0) / cut["depth"]
        found.append((k, error))
        steps.append(Step(
            f"cut-{number}", f"Cut test {number}: rate", "k", "z / (f · √t)", "{z} / ({f} × √({t} / 24))",
            {"z": Value(cut["depth"], "length"), "f": Value(factor, "number"), "t": Value(cut["time"], "number")}, Value(k, "length"), FRONT_SOURCE, READ,
            remark="t in hours; f turns the weather of the test to 23 °C and 50 %.",
        ))  # fmt: skip
    mean = sum(k for k, _ in found) / len(found)
    scatter = sqrt(sum((k / mean - 1.0) ** 2 for k, _ in found) / (len(found) - 1)) if len(found) > 1 else 0.0
    reading = sqrt(sum(error * error for _, error in found)) / len(found)
    # two standard deviations of the mean, and what is not known of the weather
    spread = min(0.9, sqrt((2.0 * scatter) ** 2 / len(found) + reading**2 + CUT_TEST_FLOOR**2))
    return Rate(mean, spread, f"{len(found)} cut test{'s' if len(found) > 1 else ''} of this job", ENTERED, permeation, tuple(steps))


def open_faces(front: str, back: str) -> tuple[str, ...]:
    """The faces that let vapour in, after the choices at the run."""
    faces = [] if front == "covered" else [section_solve.FRONT]
    if back in ("back", "both"):
        faces.append(section_solve.BACK)
    if back in ("sides", "both"):
        faces += [section_solve.SIDE_A, section_solve.SIDE_B]
    return tuple(faces)


def bonus_faces(judged: Judgement, shape: str) -> tuple[str, ...]:
    """Faces that rod and materials may open besides the front: a bonus, not a basis."""
    faces = []
    if shape == "hourglass" and judged.backing is not None and judged.backing.type_id == "open-cell":
        faces.append(section_solve.BACK)
    for item, face in zip(judged.elements, (section_solve.SIDE_A, section_solve.SIDE_B), strict=False):
        if item.substrate.is_porous:
            faces.append(face)
    return tuple(faces)


def reach_of(shape: str, lengths: tuple[float, float, float, float], faces: tuple[str, ...]) -> Reach:
    """The last point of a section; without numpy the throat stands in for it.

    `lengths` are width, depth at mid-width, hollow and crown of an hourglass, or leg A, leg B and
    bulge of a fillet. `faces` must hold at least one face of the section.
    """
    if shape == "fillet":
        a, b, bulge, _ = lengths
        chord = sqrt(a * a + b * b)
        # a back means nothing in a corner
        faces = tuple(face for face in faces if face != section_solve.BACK)
        throat = a * b / chord + bulge
        area = 0.5 * a * b + 2.0 / 3.0 * chord * bulge
        opened = {section_solve.FRONT: chord, section_solve.SIDE_A: a, section_solve.SIDE_B: b}
    else:
        width, neck, tool, crown = lengths
        bond = neck + tool + crown
        throat = 0.5 * neck if {section_solve.FRONT, section_solve.BACK} <= set(faces) else neck
        if not {section_solve.FRONT, section_solve.BACK} & set(faces):
            throat = 0.5 * width if {section_solve.SIDE_A, section_solve.SIDE_B} <= set(faces) else width
        area = width * bond - 2.0 / 3.0 * width * (tool + crown)
        opened = {section_solve.FRONT: width, section_solve.BACK: width, section_solve.SIDE_A: bond, section_solve.SIDE_B: bond}
    length = sum(opened[face] for face in faces)
    text = "+".join(faces)
    try:
        solved = section_solve.fillet_reach(a, b, bulge, text) if shape == "fillet" else section_solve.hourglass_reach(*lengths, text)
    except ImportError:
        return Reach(shape, faces, throat, 0.5 * throat * throat, area, length, False, None, lengths)
    return Reach(shape, faces, throat, solved.reach_mm2, solved.area_mm2, length, True, (solved.x_mm, solved.y_mm), lengths)


def reach_steps(reach: Reach, rate: Rate, dose_d: float) -> list[Step]:
    """Working of the time to the last point in equivalent days, and of the throat beside it."""
    k = Value(rate.k_mm, "length")
    throat_d = cure.days_to_depth(reach.throat_mm, rate.k_mm)
    steps = [*rate.steps, Step("rate", "Depth of the first day at 23 °C and 50 %", "k", "entered or table", "", {}, k, rate.source, rate.status,
                               remark=f"Uncertain by {rate.uncertainty_fraction * 100:.0f} % up and down.")]  # fmt: skip
    steps.append(Step("throat", "Throat alone, in days at 23 °C and 50 %", "t_d", "(d / k)²", "({d} / {k})²", {"d": Value(reach.throat_mm, "length"), "k": k}, Value(throat_d, "number"), FRONT_SOURCE, READ))
    if reach.is_solved:
        steps.append(Step("last-point", "ψ at the last point, mm²", "ψ", "−∇²ψ = 1 on the section", "", {}, Value(reach.reach_mm2, "number"), LAST_POINT_SOURCE, "derived"))
        steps.append(Step("through", "Cured through, in days at 23 °C and 50 %", "t", "2 ψ / k²", "2 × {p} / ({k})²", {"p": Value(reach.reach_mm2, "number"), "k": k}, Value(dose_d, "number"), LAST_POINT_SOURCE, DEFINITION))
    return steps
