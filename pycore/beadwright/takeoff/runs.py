"""One run: its length, its section at the mean width and over the range, and what goes with it."""

from __future__ import annotations

import json
from collections.abc import Mapping
from functools import lru_cache
from math import hypot
from typing import Any

from attrs import frozen

from .. import catalogue
from ..design import backing, depth
from ..fields import RUN, Reads, read_group
from ..quantity import show_length
from ..working import Issue
from . import volume
from .inputs import JointSection, Settings, fold, shown_only, unknown_colour

SECTION_WORDS = {"butt": "Butt", "lap": "Lap", "fillet": "Fillet", "bridge": "Bridge", "bed": "Bed", "round": "Round bead"}


@frozen
class RodPart:
    """Rod of one size that a run takes."""

    label: str
    diameter_mm: float
    length_m: float


@frozen
class Run:
    """One run as counted. `left_out` says why when it is not; figures are then 0."""

    path: str
    index: int
    id: str
    name: str
    zone: str
    drawing: str
    joint: str
    sealant: str
    colour: str
    phase: str
    access: str
    removal: bool
    left_out: str = ""
    section: str = ""
    one_length_m: float = 0.0
    count: int = 0
    lines: int = 0
    length_m: float = 0.0
    width_mm: float | None = None
    width_least_mm: float | None = None
    width_most_mm: float | None = None
    depth_mm: float | None = None
    depth_from: str = ""
    leg_a_mm: float | None = None
    leg_b_mm: float | None = None
    area_mm2: float = 0.0
    area_least_mm2: float = 0.0
    area_most_mm2: float = 0.0
    rectangle_mm2: float = 0.0
    rectangle_text: str = ""
    waste_fraction: float = 0.0
    net_ml: float = 0.0
    gross_ml: float = 0.0
    rods: tuple[RodPart, ...] = ()
    tape_mm: float | None = None
    tape_m: float = 0.0
    prime_m2: float = 0.0
    clean_m2: float = 0.0
    masking_m: float = 0.0
    old_ml: float = 0.0
    backed: bool = False


@frozen
class RunRead:
    """A run with what was found while reading it."""

    run: Run
    issues: tuple[Issue, ...]
    readings: tuple[tuple[str, dict[str, object]], ...]


def read_run(row: Mapping[str, Any], index: int, settings: Settings, joints: Mapping[str, JointSection]) -> RunRead:
    """One run from its raw row; an unchanged row is not read again."""
    pointed = row.get("joint")
    joint = joints.get(pointed) if isinstance(pointed, str) else None
    return _read_run(json.dumps(row, ensure_ascii=False, default=str), index, settings, joint)


@lru_cache(maxsize=8192)
def _read_run(text: str, index: int, settings: Settings, joint: JointSection | None) -> RunRead:
    row = json.loads(text)
    path, label = f"/takeoff/runs/{index}", f"Run {index + 1}"
    reads = Reads(settings.system)
    known: dict[str, Any] = {"sealants": dict.fromkeys(settings.sealants), "joints": {joint.id: joint} if joint else {}}
    seen = shown_only(RUN, row)
    pointed = seen.pop("joint", None)
    values = read_group(RUN, seen, path, reads, known, label=label)
    if pointed is not None and str(pointed).strip() and joint is None:
        reads.add(Issue(f"{path}/joint", "not-a-choice", "error", f"{label}: “{str(pointed)[:40]}” is not a joint of this job.", value=str(pointed)[:40]))
    builder = _Builder(values, path, label, reads, settings, joint)
    run = builder.run(index, row)
    return RunRead(run, tuple(reads.issues), tuple(reads.readings.items()))


class _Builder:
    """Works one run out of its values; every fault is told at the cell that can mend it."""

    def __init__(self, values: dict[str, Any], path: str, label: str, reads: Reads, settings: Settings, joint: JointSection | None) -> None:
        self.values, self.path, self.label, self.reads, self.settings, self.joint = values, path, label, reads, settings, joint
        self.section = values["section"] if values["section"] not in (None, "auto") else "lap" if joint and joint.kind == "lap" else "butt"
        self.uses_joint = values["section"] in (None, "auto") and joint is not None

    def fault(self, key: str, code: str, message: str, severity: str = "error", **more: Any) -> None:
        if f"{self.path}/{key}" not in self.reads.places or severity != "error":
            self.reads.add(Issue(f"{self.path}/{key}", code, severity, f"{self.label}: {message}", **more))

    def has_errors(self) -> bool:
        return any(issue.severity == "error" for issue in self.reads.issues)

    def run(self, index: int, row: Mapping[str, Any]) -> Run:
        values, settings = self.values, self.settings
        head: dict[str, Any] = {
            "path": self.path, "index": index, "id": str(row.get("id") or f"run-{index}"), "name": values["name"] or f"Run {index + 1}", "zone": " ".join((values["zone"] or "").split()),
            "drawing": values["drawing"] or "", "joint": self.joint.name if self.joint else "", "sealant": values["sealant"] or (self.joint.sealant if self.joint else None) or "",
            "colour": self._colour(), "phase": " ".join((values["phase"] or "").split()), "access": values["access"] or "ground", "removal": bool(values["removal"]),
        }  # fmt: skip
        if values["length"] is None:
            self.fault("length", "missing", "the length is not given yet.")
        if not head["sealant"]:
            self.fault("sealant", "missing", "no sealant is chosen, and no joint gives one.")
        shapes = self._shapes()
        if shapes is None or self.has_errors():
            first = next((issue.message for issue in self.reads.issues if issue.severity == "error"), "It cannot be worked out.")
            return Run(**head, left_out=first)
        mean, least, most = shapes
        # Beyond the largest stock rod a wider place has no crown, so the widest need not take the most.
        least, most = min(least, mean.area_mm2, most), max(least, mean.area_mm2, most)
        count, lines = values["count"] or 1, values["lines"] or 1
        length_m = values["length"] * count * lines / 1000.0
        waste = values["waste"] if values["waste"] is not None else settings.waste_fraction
        net = mean.area_mm2 * length_m
        bead = mean
        tape, rods = self._backing(bead, length_m)
        return Run(
            **head, section=self.section, one_length_m=values["length"] / 1000.0, count=count, lines=lines, length_m=length_m,
            width_mm=self.width, width_least_mm=self.least, width_most_mm=self.most, depth_mm=self.depth, depth_from=self.depth_from,
            leg_a_mm=self.leg_a, leg_b_mm=self.leg_b, area_mm2=mean.area_mm2, area_least_mm2=least, area_most_mm2=most,
            rectangle_mm2=mean.rectangle_mm2, rectangle_text=mean.rectangle_text, waste_fraction=waste, net_ml=net,
            gross_ml=volume.with_waste(net, waste, settings.waste_by), rods=rods, tape_mm=tape, tape_m=length_m * (1 + settings.tape_waste_fraction) if tape is not None else 0.0,
            prime_m2=volume.bond_area_m2(bead.face_mm, length_m, settings.primer_overlap_mm) if settings.primes else 0.0,
            clean_m2=volume.bond_area_m2(bead.face_mm, length_m, settings.primer_overlap_mm) if settings.cleans else 0.0,
            masking_m=min(bead.masked_lines, settings.masked_sides) * length_m * (1 + settings.masking_waste_fraction),
            old_ml=net * (1 + settings.disposal_bulking_fraction) if values["removal"] else 0.0, backed=bool(rods) or tape is not None,
        )  # fmt: skip

    def _colour(self) -> str:
        colour = " ".join((self.values["colour"] or "").split())
        colours = self.settings.colours
        if not colours:
            return colour
        if not colour:
            self.fault("colour", "missing", f"no colour is given; this job has {', '.join(colours)[:200]}.")
            return ""
        for name in colours:
            if fold(name) == fold(colour):
                return name
        self.reads.add(unknown_colour(f"{self.path}/colour", self.label, colour, colours))
        return colour

    # ---- section ------------------------------------------------------------------------------

    width: float | None = None
    least: float | None = None
    most: float | None = None
    depth: float | None = None
    depth_from: str = ""
    leg_a: float | None = None
    leg_b: float | None = None

    def _shapes(self) -> tuple[volume.Bead, float, float] | None:
        """The bead at the mean width, and its area at the narrowest and the widest."""
        if self.section == "fillet":
            return self._fillet()
        if self.uses_joint and self.joint is not None and self.joint.width_mm is None and self.values["width"] is None:
            self.fault("joint", "no-section", f"the joint “{self.joint.name}” has no section yet. {self.joint.reason} Give width and depth here, or mend the joint.")
            return None
        if not self._read_width() or self.width is None or self.least is None or self.most is None:
            return None
        if self.section == "round":
            return volume.round_bead(self.width), volume.round_bead(self.least).area_mm2, volume.round_bead(self.most).area_mm2
        if not self._read_depth() or self.depth is None:
            return None
        deep = self.depth
        if self.section == "butt":
            for key in ("tool_sag", "rod_sag"):
                sag = self.values[key]
                if sag is not None and sag > self.width / 2:
                    self.fault(key, "too-large", f"{RUN[key].label.lower()} must be at most half the width.", value=sag, limit=self.width / 2, unit="mm")
                    return None
            mean = self._butt(self.width, deep)
            return mean, self._butt(self.least, deep).area_mm2, self._butt(self.most, deep).area_mm2
        plain = {"lap": volume.lap, "bridge": volume.bridge, "bed": volume.bed}[self.section]
        return plain(self.width, deep), plain(self.least, deep).area_mm2, plain(self.most, deep).area_mm2

    def _read_width(self) -> bool:
        values, joint, settings = self.values, self.joint, self.settings
        if any(f"{self.path}/{key}" in self.reads.places and values[key] is None for key in ("width", "width_least", "width_most")):
            return False
        width, least, most = values["width"], values["width_least"], values["width_most"]
        if least is not None and most is not None and least > most:
            self.fault("width_least", "contradiction", "the narrowest is wider than the widest.")
            return False
        spread = settings.width_tolerance_mm
        if width is None and least is not None and most is not None:
            width = (least + most) / 2
        elif width is None and joint is not None and joint.width_mm is not None and self.section in ("butt", "lap"):
            width = joint.width_mm + (settings.width_shift_mm if joint.is_drawn else 0.0)
            spread = joint.tolerance_mm if joint.is_drawn else spread
        if width is None:
            self.fault("width", "missing", "the width is not given yet: the mean as built, or narrowest and widest.")
            return False
        if width <= 0:
            self.fault("width", "too-small", "nothing is left of the width once the shift of the take-off is off.")
            return False
        self.least = least if least is not None else max(width - spread, 0.25 * width) if most is None else width
        self.most = most if most is not None else width + spread if least is None else width
        if not self.least - 1e-9 <= width <= self.most + 1e-9:
            low, high = show_length(self.least, settings.system), show_length(self.most, settings.system)
            self.fault("width", "contradiction", f"the mean width, {show_length(width, settings.system)}, is not between the narrowest ({low}) and the widest ({high}).")
            return False
        self.width = width
        return True

    def _read_depth(self) -> bool:
        joint = self.joint
        if f"{self.path}/depth" in self.reads.places and self.values["depth"] is None:
            return False
        if self.values["depth"] is not None:
            self.depth, self.depth_from = self.values["depth"], "entered"
        elif self.section in ("butt", "lap") and joint is not None and joint.neck_mm is not None and (joint.kind == "lap") == (self.section == "lap"):
            self.depth, self.depth_from = joint.neck_mm, "joint"
        elif self.section == "butt" and self.width is not None:
            rule = catalogue.depth_rules().get(self.settings.depth_rule) or next(iter(catalogue.depth_rules().values()))
            found = depth.depth_by_rule(rule, self.width, is_porous=False)
            self.depth, self.depth_from = (found.target_mm, "rule") if found is not None else (self.width / 2, "half")
        else:
            what = {"lap": "the bonded cover", "bridge": "the thickness of the band", "bed": "the thickness of the bed"}[self.section]
            self.fault("depth", "missing", f"{what} is not given yet.")
            return False
        return True

    def _butt(self, width_mm: float, deep_mm: float) -> volume.Bead:
        joint = self.joint if self.uses_joint else None
        tool = joint.tool_sag_mm if joint else self.values["tool_sag"]
        crown = joint.rod_sag_mm if joint else self.values["rod_sag"]
        concave = joint.is_concave if joint else self.values["tooling"] != "flush"
        kind = self._backing_kind()
        rod_mm = None
        if kind in catalogue.rod_types() and kind != backing.TAPE:
            rod_mm = _one_rod(kind, self.settings.rod_series, width_mm)
        else:
            crown = 0.0
        return volume.butt(width_mm, deep_mm, tool_sag_mm=tool, rod_sag_mm=crown, rod_mm=rod_mm, is_concave=concave)

    def _fillet(self) -> tuple[volume.Bead, float, float] | None:
        values = self.values
        if values["leg_a"] is None:
            self.fault("leg_a", "missing", "the leg of the fillet is not given yet.")
            return None
        self.leg_a, self.leg_b = values["leg_a"], values["leg_b"] if values["leg_b"] is not None else values["leg_a"]
        face = values["face"] or "flat"
        sag = values["sagitta"] if values["sagitta"] is not None else volume.FACE_OF_CHORD * hypot(self.leg_a, self.leg_b)
        try:
            bead = volume.fillet(self.leg_a, self.leg_b, 0.0 if face == "flat" else sag, face)
        except ValueError:
            what = "the hollow is so deep that it cuts into a leg" if face == "concave" else "the bulge is more than half a circle"
            self.fault("sagitta", "too-large", f"{what}; check legs and face.", value=sag, unit="mm")
            return None
        return bead, bead.area_mm2, bead.area_mm2

    # ---- backing ------------------------------------------------------------------------------

    def _backing_kind(self) -> str:
        chosen = self.values["backing"] or "auto"
        if chosen != "auto":
            return str(chosen)
        if self.section == "butt":
            return self.joint.rod_type if self.joint is not None else "closed-cell"
        return backing.TAPE if self.section in ("fillet", "bridge") else "none"

    def _backing(self, bead: volume.Bead, length_m: float) -> tuple[float | None, tuple[RodPart, ...]]:
        """Width of tape or None, and the rods by size."""
        kind = self._backing_kind()
        if kind == "none" or self.section in ("lap", "bed", "round"):
            return None, ()
        if kind == backing.TAPE or self.section != "butt":
            return bead.tape_mm, ()
        assert self.least is not None and self.most is not None
        parts = _rod_shares(kind, self.settings.rod_series, self.least, self.most)
        if not parts:
            self.fault("backing", "no-rod", "no standard rod is large enough for the widest place; none is counted. Two rods or another backing.", severity="warning")
        total = length_m * (1 + self.settings.rod_waste_fraction)
        return None, tuple(RodPart(label, diameter, share * total) for label, diameter, share in parts)


@lru_cache(maxsize=1024)
def _one_rod(kind: str, series: str, width_mm: float) -> float | None:
    return backing.choose(catalogue.rod_types()[kind], series, width_mm, width_mm).diameter_mm


@lru_cache(maxsize=1024)
def _rod_shares(kind: str, series: str, least_mm: float, most_mm: float) -> tuple[tuple[str, float, float], ...]:
    """Sizes with the share of length that takes each, widths spread evenly over the range; empty when the largest is too thin."""
    bands = backing.size_bands(catalogue.rod_types()[kind], series, least_mm, most_mm)
    if not bands or bands[-1].width_to_mm < most_mm - 1e-9:
        return ()
    if most_mm - least_mm < 1e-9:
        return ((bands[-1].size_label, bands[-1].diameter_mm, 1.0),)
    found, low = [], least_mm
    for band in bands:
        high = min(band.width_to_mm, most_mm)
        if high > low + 1e-9:
            found.append((band.size_label, band.diameter_mm, (high - low) / (most_mm - least_mm)))
            low = high
    return tuple(found)
