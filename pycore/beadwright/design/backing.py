"""The rod behind the bead, from the range of width, and what to do where none fits."""

from __future__ import annotations

from attrs import frozen

from .. import catalogue
from ..physics import section
from ..working import COMMON_PRACTICE, Step, Value

TAPE = "tape"


@frozen
class Backing:
    """The backing chosen for a range of widths."""

    type_id: str
    label: str
    diameter_mm: float | None
    size_label: str
    compression_least_fraction: float | None
    compression_most_fraction: float | None
    fits: bool
    advice: str


def choose(rod_type: catalogue.RodType, series: str, width_least_mm: float, width_most_mm: float) -> Backing:
    """The smallest standard rod that is oversize enough at the widest place.

    Parameters
    ----------
    rod_type : RodType
        Closed cell, open cell, bicellular, or tape.
    series : str
        `metric` or `inch`.
    width_least_mm, width_most_mm : float
        Narrowest and widest place. [mm]

    Returns
    -------
    Backing
        `fits` is False when one size cannot serve the whole range; `advice` says what can.

    Notes
    -----
    Oversize is of the joint, compression is of the rod: 25 % oversize is 20 % compression
    (1 − 1/1.25). The ranges are trade custom, not a standard.
    """
    if rod_type.id == TAPE:
        return Backing(TAPE, rod_type.label, None, rod_type.label, None, None, fits=True, advice="Bond-breaker tape over the whole back; no rod.")
    wanted = width_most_mm * (1.0 + rod_type.oversize_low_fraction)
    sizes = catalogue.rod_series(series)
    size = next((item for item in sizes if item.diameter_mm >= wanted - 1e-9), None)
    if size is None:
        return Backing(rod_type.id, rod_type.label, None, "none", None, None, fits=False, advice="No standard rod is large enough: use two rods, a backing plate or a pre-formed section.")
    least = section.rod_compression_fraction(width_most_mm, size.diameter_mm)
    most = section.rod_compression_fraction(width_least_mm, size.diameter_mm)
    smaller = next(item for item in sizes if item.diameter_mm >= width_least_mm * (1.0 + rod_type.oversize_low_fraction) - 1e-9)
    fits = smaller is size or most <= rod_type.compression_high_fraction + 1e-9
    advice = "" if fits else "One size cannot serve the whole range of width: use a smaller rod at the narrow places."
    return Backing(rod_type.id, rod_type.label, size.diameter_mm, size.label, least, most, fits, advice)


def backing_step(chosen: Backing, rod_type: catalogue.RodType, width_most_mm: float) -> Step | None:
    """Working of the rod size; None for tape."""
    if chosen.diameter_mm is None:
        return None
    return Step(
        "rod", f"Rod, {chosen.label}", "D", "next standard size at or above w_most × (1 + oversize)", "{w} × (1 + {p})",
        {"w": Value(width_most_mm, "length"), "p": Value(rod_type.oversize_low_fraction, "number")}, Value(chosen.diameter_mm, "length"),
        rod_type.source, COMMON_PRACTICE,
    )  # fmt: skip
