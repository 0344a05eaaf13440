"""The rod behind the bead, from the range of width, and what to do where none fits."""

from __future__ import annotations

from attrs import frozen

from .. import catalogue
from ..physics import section
from ..working import Step, Value

TAPE = "tape"


@frozen
class RodBand:
    """One stock rod and the widest joint that it still fills tightly enough."""

    size_label: str
    diameter_mm: float
    width_to_mm: float


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
    bands: tuple[RodBand, ...] = ()


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
        `fits` is False when one size cannot serve the whole range; `bands` then names each size.

    Notes
    -----
    Oversize is of the joint, compression is of the rod: 25 % oversize is 20 % compression
    (1 − 1/1.25). The ranges are trade custom, not a standard.
    """
    if rod_type.id == TAPE:
        return Backing(TAPE, rod_type.label, None, rod_type.label, None, None, fits=True, advice="Bond-breaker tape over the whole back; no rod.")
    bands = size_bands(rod_type, series, width_least_mm, width_most_mm)
    if not bands or bands[-1].width_to_mm < width_most_mm - 1e-9:
        return Backing(rod_type.id, rod_type.label, None, "none", None, None, fits=False, advice="No standard rod is large enough: use two rods, a backing plate or a pre-formed section.")
    size = bands[-1]
    least = section.rod_compression_fraction(width_most_mm, size.diameter_mm)
    most = section.rod_compression_fraction(width_least_mm, size.diameter_mm)
    fits = len(bands) == 1 or most <= rod_type.compression_high_fraction + 1e-9
    advice = "" if fits else "One size cannot serve the whole range: choose by the width found at each place."
    if least > rod_type.compression_high_fraction + 1e-9:
        usual = f"{100 * rod_type.compression_low_fraction:.0f} to {100 * rod_type.compression_high_fraction:.0f} %"
        advice = f"{advice} No stock size is squeezed by the usual {usual} here; this is the next one up. Try it on site.".strip()
    return Backing(rod_type.id, rod_type.label, size.diameter_mm, size.size_label, least, most, fits, advice, bands)


def size_bands(rod_type: catalogue.RodType, series: str, width_least_mm: float, width_most_mm: float) -> tuple[RodBand, ...]:
    """The stock sizes that a range of widths takes, each with the widest joint it serves. [mm]

    Definition: a size serves widths up to its diameter over (1 + least oversize).
    """
    found: list[RodBand] = []
    for size in catalogue.rod_series(series):
        to_mm = size.diameter_mm / (1.0 + rod_type.oversize_low_fraction)
        if to_mm < width_least_mm - 1e-9:
            continue
        found.append(RodBand(size.label, size.diameter_mm, to_mm))
        if to_mm >= width_most_mm - 1e-9:
            break
    return tuple(found)


def backing_step(chosen: Backing, rod_type: catalogue.RodType, width_mm: float) -> Step | None:
    """Working of the rod size; None for tape."""
    if chosen.diameter_mm is None:
        return None
    return Step(
        "rod", f"Rod, {chosen.label}", "D", "next standard size at or above w × (1 + oversize)", "{w} × (1 + {p})",
        {"w": Value(width_mm, "length"), "p": Value(rod_type.oversize_low_fraction, "number")}, Value(chosen.diameter_mm, "length"),
        rod_type.source, rod_type.status,
    )  # fmt: skip
