"""Section of the bead: arcs, areas, bond depth, the crown of the rod, fillets.

Units: mm and mm2, per section; an area in mm2 is the volume in ml per metre. Sags are measured inwards from the straight
line between the ends of a face. All relations are plane geometry and marked Definition; the crown of a round rod ignores
that real foam deforms.
"""

from __future__ import annotations

from math import asinh, atan, atan2, hypot, inf, sqrt

from ._refusal import refusal

# Below this slope the closed form of the segment loses digits and its series is exact to the last one
_FLAT_SLOPE = 0.03


def segment_radius_mm(chord_mm: float, sagitta_mm: float) -> float:
    """Radius of the circle through the ends and the lowest point of an arc.

    Parameters
    ----------
    chord_mm : float
        Straight distance between the ends, greater than 0. [mm]
    sagitta_mm : float
        Height of the arc over its chord, 0 or more. [mm]

    Returns
    -------
    radius_mm : float
        Radius; infinite for a straight face. [mm]

    Raises
    ------
    ValueError
        When an argument is not finite or outside its range.

    Notes
    -----
    Definition: ``R = (c^2 / 4 + s^2) / (2 s)``.

    Examples
    --------
    >>> segment_radius_mm(20.0, 5.0)
    12.5
    """
    _require_arc(chord_mm, sagitta_mm)
    if sagitta_mm == 0.0:
        return inf
    return 0.125 * chord_mm * (chord_mm / sagitta_mm) + 0.5 * sagitta_mm


def segment_area_mm2(chord_mm: float, sagitta_mm: float) -> float:
    """Area between a circular arc and its chord.

    Parameters
    ----------
    chord_mm : float
        Straight distance between the ends, greater than 0. [mm]
    sagitta_mm : float
        Height of the arc over its chord, 0 or more; above half the chord it is the larger part of the circle. [mm]

    Returns
    -------
    area_mm2 : float
        Area of the segment. [mm2]

    Raises
    ------
    ValueError
        When an argument is not finite or outside its range.

    Notes
    -----
    Definition: ``A = R^2 / 2 (theta - sin theta)`` with ``theta = 4 atan(2 s / c)``, written so that a nearly flat arc
    keeps its digits. The usual ``2 c s / 3`` is its first term.

    Examples
    --------
    >>> round(segment_area_mm2(20.0, 2.0), 6)
    26.878797
    """
    _require_arc(chord_mm, sagitta_mm)
    # t: tangent of a quarter of the angle at the centre
    t = 2.0 * sagitta_mm / chord_mm
    square = t * t
    if t < _FLAT_SLOPE:
        return chord_mm * chord_mm * t * (1.0 / 3.0 + square * (1.0 / 15.0 + square * (-1.0 / 105.0 + square / 315.0)))
    whole = 1.0 + square
    return chord_mm * chord_mm * (whole * whole * atan(t) - t * (1.0 - square)) / (8.0 * square)


def segment_arc_mm(chord_mm: float, sagitta_mm: float) -> float:
    """Length of a circular arc.

    Parameters
    ----------
    chord_mm : float
        Straight distance between the ends, greater than 0. [mm]
    sagitta_mm : float
        Height of the arc over its chord, 0 or more. [mm]

    Returns
    -------
    arc_mm : float
        Length along the arc. [mm]

    Raises
    ------
    ValueError
        When an argument is not finite or outside its range.

    Notes
    -----
    Definition: ``R theta`` with ``theta = 4 atan(2 s / c)``.

    Examples
    --------
    >>> round(segment_arc_mm(10.0, 5.0), 6)
    15.707963
    """
    _require_arc(chord_mm, sagitta_mm)
    # t: tangent of a quarter of the angle at the centre
    t = 2.0 * sagitta_mm / chord_mm
    if t == 0.0:
        return chord_mm
    return chord_mm * (1.0 + t * t) * (atan(t) / t)


def parabola_area_mm2(chord_mm: float, sagitta_mm: float) -> float:
    """Area between a parabolic arc and its chord.

    Parameters
    ----------
    chord_mm : float
        Straight distance between the ends, greater than 0. [mm]
    sagitta_mm : float
        Height of the arc over its chord, 0 or more. [mm]

    Returns
    -------
    area_mm2 : float
        Area. [mm2]

    Raises
    ------
    ValueError
        When an argument is not finite or outside its range.

    Notes
    -----
    Definition: two thirds of chord times height.

    Examples
    --------
    >>> parabola_area_mm2(20.0, 3.0)
    40.0
    """
    _require_arc(chord_mm, sagitta_mm)
    return 2.0 * chord_mm * sagitta_mm / 3.0


def parabola_arc_mm(chord_mm: float, sagitta_mm: float) -> float:
    """Length of a parabolic arc.

    Parameters
    ----------
    chord_mm : float
        Straight distance between the ends, greater than 0. [mm]
    sagitta_mm : float
        Height of the arc over its chord, 0 or more. [mm]

    Returns
    -------
    arc_mm : float
        Length along the arc. [mm]

    Raises
    ------
    ValueError
        When an argument is not finite or outside its range.

    Notes
    -----
    Definition: ``L = 0.5 sqrt(c^2 + 16 h^2) + c^2 / (8 h) asinh(4 h / c)``.

    Examples
    --------
    >>> round(parabola_arc_mm(20.0, 7.5), 6)
    25.992844
    """
    _require_arc(chord_mm, sagitta_mm)
    # u: slope at the ends
    u = 4.0 * sagitta_mm / chord_mm
    if u == 0.0:
        return chord_mm
    return 0.5 * chord_mm * (hypot(1.0, u) + asinh(u) / u)


def bond_depth_mm(neck_mm: float, tool_sag_mm: float, rod_sag_mm: float) -> float:
    """Depth of the bead along each joint face.

    Parameters
    ----------
    neck_mm : float
        Depth in the middle, greater than 0. [mm]
    tool_sag_mm : float
        Sag of the tooled front face, 0 or more. [mm]
    rod_sag_mm : float
        How far the rod rises into the back, 0 or more. [mm]

    Returns
    -------
    bond_mm : float
        Depth at the bond. [mm]

    Raises
    ------
    ValueError
        When an argument is not finite or outside its range.

    Notes
    -----
    Definition: neck and both sags added.

    Examples
    --------
    >>> bond_depth_mm(10.0, 2.0, 4.0)
    16.0
    """
    if not 0.0 < neck_mm < inf:
        raise refusal("neck_mm", neck_mm, "a finite number greater than 0")
    if not 0.0 <= tool_sag_mm < inf:
        raise refusal("tool_sag_mm", tool_sag_mm, "a finite number, 0 or more")
    if not 0.0 <= rod_sag_mm < inf:
        raise refusal("rod_sag_mm", rod_sag_mm, "a finite number, 0 or more")
    return neck_mm + tool_sag_mm + rod_sag_mm


def hourglass_area_mm2(
    width_mm: float, neck_mm: float, tool_sag_mm: float, rod_sag_mm: float, arc: str = "circle"
) -> float:
    """Section area of a bead with a tooled front and a rod behind.

    Parameters
    ----------
    width_mm : float
        Width of the joint, greater than 0. [mm]
    neck_mm : float
        Depth in the middle, greater than 0. [mm]
    tool_sag_mm : float
        Sag of the tooled front face, 0 to half the width. [mm]
    rod_sag_mm : float
        How far the rod rises into the back, 0 to half the width. [mm]
    arc : str
        Shape of both faces: "circle" or "parabola". [word]

    Returns
    -------
    area_mm2 : float
        Area; the same number is the volume in ml for each metre. [mm2]

    Raises
    ------
    ValueError
        When an argument is not finite or outside its range, or `arc` is another word.

    Notes
    -----
    Definition: width times bond depth, less the two hollows. For a circle the sag ends at half the width, where the arc
    meets the joint face along it.

    Examples
    --------
    >>> round(hourglass_area_mm2(20.0, 10.0, 2.0, 4.0), 3)
    238.118
    """
    _require_face(width_mm, "tool_sag_mm", tool_sag_mm)
    _require_face(width_mm, "rod_sag_mm", rod_sag_mm)
    if not 0.0 < neck_mm < inf:
        raise refusal("neck_mm", neck_mm, "a finite number greater than 0")
    if arc == "circle":
        hollow_mm2 = segment_area_mm2(width_mm, tool_sag_mm) + segment_area_mm2(width_mm, rod_sag_mm)
    elif arc == "parabola":
        hollow_mm2 = 2.0 * width_mm * (tool_sag_mm + rod_sag_mm) / 3.0
    else:
        raise refusal("arc", arc, "'circle' or 'parabola'")
    return width_mm * (neck_mm + tool_sag_mm + rod_sag_mm) - hollow_mm2


def exposed_perimeter_mm(width_mm: float, tool_sag_mm: float, arc: str = "circle") -> float:
    """Length of the open front face across the joint.

    Parameters
    ----------
    width_mm : float
        Width of the joint, greater than 0. [mm]
    tool_sag_mm : float
        Sag of the tooled front face, 0 to half the width. [mm]
    arc : str
        Shape of the face: "circle" or "parabola". [word]

    Returns
    -------
    perimeter_mm : float
        Length along the face that the air can reach. [mm]

    Raises
    ------
    ValueError
        When an argument is not finite or outside its range, or `arc` is another word.

    Notes
    -----
    Definition: the arc of the front face alone; faces on the substrate and on the rod count as closed.

    Examples
    --------
    >>> exposed_perimeter_mm(20.0, 0.0)
    20.0
    """
    _require_face(width_mm, "tool_sag_mm", tool_sag_mm)
    if arc == "circle":
        return segment_arc_mm(width_mm, tool_sag_mm)
    if arc == "parabola":
        return parabola_arc_mm(width_mm, tool_sag_mm)
    raise refusal("arc", arc, "'circle' or 'parabola'")


def rod_crown_mm(width_mm: float, rod_mm: float) -> float:
    """How far a round rod rises above the line where it touches the joint faces.

    Parameters
    ----------
    width_mm : float
        Width of the joint, greater than 0. [mm]
    rod_mm : float
        Diameter of the rod before it is pressed in, at least the width. [mm]

    Returns
    -------
    crown_mm : float
        Rise of the rod into the back of the bead. [mm]

    Raises
    ------
    ValueError
        When an argument is not finite, `width_mm` is not positive or the rod is thinner than the joint.

    Notes
    -----
    Definition for a rod that keeps its round shape: ``c = D / 2 - sqrt(D^2 / 4 - w^2 / 4)``. Foam deforms, so this is an
    estimate. A rod 1.25 times the width gives a quarter of the width.

    Examples
    --------
    >>> rod_crown_mm(20.0, 25.0)
    5.0
    """
    if not 0.0 < width_mm < inf:
        raise refusal("width_mm", width_mm, "a finite number greater than 0")
    if not width_mm <= rod_mm < inf:
        raise refusal("rod_mm", rod_mm, f"a finite number, at least width_mm = {width_mm!r}")
    # w^2 / (2 (D + sqrt(D^2 - w^2))) is the formula of the Notes without the difference of near numbers
    return 0.5 * width_mm * (width_mm / (rod_mm + sqrt((rod_mm - width_mm) * (rod_mm + width_mm))))


def rod_compression_fraction(width_mm: float, rod_mm: float) -> float:
    """Share of its diameter that a rod gives up in the joint.

    Parameters
    ----------
    width_mm : float
        Width of the joint, greater than 0. [mm]
    rod_mm : float
        Diameter of the rod before it is pressed in, greater than 0. [mm]

    Returns
    -------
    compression_fraction : float
        Compression; negative when the rod is loose. [1]

    Raises
    ------
    ValueError
        When an argument is not finite or not positive.

    Notes
    -----
    Definition: ``1 - w / D``. Not the same as oversize, ``D / w - 1``: 25 % over the joint is compressed 20 %.

    Examples
    --------
    >>> round(rod_compression_fraction(20.0, 25.0), 9)
    0.2
    """
    if not 0.0 < width_mm < inf:
        raise refusal("width_mm", width_mm, "a finite number greater than 0")
    if not 0.0 < rod_mm < inf:
        raise refusal("rod_mm", rod_mm, "a finite number greater than 0")
    return (rod_mm - width_mm) / rod_mm


def fillet_area_mm2(leg_a_mm: float, leg_b_mm: float, sagitta_mm: float, face: str) -> float:
    """Section area of a bead in a square inside corner.

    Parameters
    ----------
    leg_a_mm : float
        Length of bond on one side, greater than 0. [mm]
    leg_b_mm : float
        Length of bond on the other side, greater than 0. [mm]
    sagitta_mm : float
        Height of the face's arc over the straight line between its ends, 0 or more; not used by a flat face. [mm]
    face : str
        Shape of the face: "flat", "concave" or "convex". [word]

    Returns
    -------
    area_mm2 : float
        Area; the same number is the volume in ml for each metre. [mm2]

    Raises
    ------
    ValueError
        When an argument is not finite or outside its range, `face` is another word, or the arc is too deep: a concave one
        that would cut into a leg, a convex one past half a circle.

    Notes
    -----
    Definition: ``A = a b / 2`` less or plus the circular segment on the chord ``sqrt(a^2 + b^2)``.

    Examples
    --------
    >>> round(fillet_area_mm2(6.0, 6.0, 1.0, "concave"), 5)
    12.28078
    """
    if not 0.0 < leg_a_mm < inf:
        raise refusal("leg_a_mm", leg_a_mm, "a finite number greater than 0")
    if not 0.0 < leg_b_mm < inf:
        raise refusal("leg_b_mm", leg_b_mm, "a finite number greater than 0")
    if not 0.0 <= sagitta_mm < inf:
        raise refusal("sagitta_mm", sagitta_mm, "a finite number, 0 or more")
    flat_mm2 = 0.5 * leg_a_mm * leg_b_mm
    if face == "flat":
        return flat_mm2
    chord_mm = hypot(leg_a_mm, leg_b_mm)
    if face == "concave":
        # tangent to the longer leg where the arc's end angle 2 atan(2 s / c) equals the angle between chord and leg
        if 2.0 * atan(2.0 * sagitta_mm / chord_mm) > atan2(min(leg_a_mm, leg_b_mm), max(leg_a_mm, leg_b_mm)) + 1e-12:
            raise refusal("sagitta_mm", sagitta_mm, "a hollow that does not cut into a leg of the corner")
        return flat_mm2 - segment_area_mm2(chord_mm, sagitta_mm)
    if face == "convex":
        if sagitta_mm > 0.5 * chord_mm:
            raise refusal("sagitta_mm", sagitta_mm, f"at most half the straight face, {0.5 * chord_mm!r}")
        return flat_mm2 + segment_area_mm2(chord_mm, sagitta_mm)
    raise refusal("face", face, "'flat', 'concave' or 'convex'")


def _require_arc(chord_mm: float, sagitta_mm: float) -> None:
    if not 0.0 < chord_mm < inf:
        raise refusal("chord_mm", chord_mm, "a finite number greater than 0")
    if not 0.0 <= sagitta_mm < inf:
        raise refusal("sagitta_mm", sagitta_mm, "a finite number, 0 or more")


def _require_face(width_mm: float, sag_name: str, sag_mm: float) -> None:
    if not 0.0 < width_mm < inf:
        raise refusal("width_mm", width_mm, "a finite number greater than 0")
    if not 0.0 <= sag_mm <= 0.5 * width_mm:
        raise refusal(sag_name, sag_mm, f"a number from 0 to half of width_mm = {0.5 * width_mm!r}")
