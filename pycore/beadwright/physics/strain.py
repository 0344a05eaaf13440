"""Width of a joint from its movement, the inverse questions, and strain at the free face of the bead.

Units: mm and fractions. An opening is positive when the gap grows. Shear slides one face along the other, so only its
size matters. Sources stand in each function; relations that are geometry alone are marked as derived.
"""

from __future__ import annotations

from math import asinh, hypot, inf, sqrt

from ._refusal import refusal

# The two free faces of the bead touch when the gap has grown to this many times its own width (parabola, constant volume).
FACES_MEET_FRACTION = 2.0


def width_for_opening_mm(opening_mm: float, shear_mm: float, extension_fraction: float) -> float:
    """Least width that takes an opening and a shear at the same instant.

    Parameters
    ----------
    opening_mm : float
        Growth of the gap from the width when sealed, 0 or more. [mm]
    shear_mm : float
        Slide of one face along the other, either sign. [mm]
    extension_fraction : float
        Extension that the sealant takes, as a share of the width when sealed, greater than 0. [1]

    Returns
    -------
    width_mm : float
        Least width when sealed. [mm]

    Raises
    ------
    ValueError
        When an argument is not finite, `opening_mm` is negative or `extension_fraction` is not positive.

    Notes
    -----
    Symbols w, o, s, S. The line from face to face may grow to (1 + S) w, so ``(w + o)^2 + s^2 = (1 + S)^2 w^2``. With
    ``K = (1 + S)^2 - 1 = S (2 + S)`` the positive root is ``w = (o + sqrt(o^2 + K (o^2 + s^2))) / K``. No shear gives
    ``o / S`` and no opening gives ``s / sqrt(2 S + S^2)``, the two forms of [1]_. The combined form is derived from
    geometry; [1]_ is recalled to have an equal quadratic.

    References
    ----------
    .. [1] ASTM C1472, widths for extension and for shear (from memory; the standard's own examples were not read).

    Examples
    --------
    >>> width_for_opening_mm(3.0, 0.0, 0.25)
    12.0
    >>> round(width_for_opening_mm(3.0, 4.0, 0.25), 6)
    13.870832
    """
    if not 0.0 <= opening_mm < inf:
        raise refusal("opening_mm", opening_mm, "a finite number, 0 or more")
    if not -inf < shear_mm < inf:
        raise refusal("shear_mm", shear_mm, "a finite number")
    if not 0.0 < extension_fraction < inf:
        raise refusal("extension_fraction", extension_fraction, "a finite number greater than 0")
    # K: symbol of the Notes; o^2 + K (o^2 + s^2) is written as (1 + S)^2 o^2 + K s^2, which cannot overflow in hypot
    K = extension_fraction * (2.0 + extension_fraction)
    return (opening_mm + hypot((1.0 + extension_fraction) * opening_mm, sqrt(K) * shear_mm)) / K


def width_for_closing_mm(closing_mm: float, compression_fraction: float) -> float:
    """Least width that takes a closing.

    Parameters
    ----------
    closing_mm : float
        Loss of the gap from the width when sealed, 0 or more. [mm]
    compression_fraction : float
        Compression that the sealant takes, as a share of the width when sealed, greater than 0 and at most 1. [1]

    Returns
    -------
    width_mm : float
        Least width when sealed. [mm]

    Raises
    ------
    ValueError
        When an argument is not finite, `closing_mm` is negative or `compression_fraction` is not in (0, 1].

    Notes
    -----
    [1]_ ``W = dL / S`` with the sign class that matches. How much clear gap must stay open is a matter for the design.

    References
    ----------
    .. [1] ASTM C1472, width for compression (from memory).

    Examples
    --------
    >>> width_for_closing_mm(6.0, 0.5)
    12.0
    """
    if not 0.0 <= closing_mm < inf:
        raise refusal("closing_mm", closing_mm, "a finite number, 0 or more")
    if not 0.0 < compression_fraction <= 1.0:
        raise refusal("compression_fraction", compression_fraction, "a number greater than 0 and at most 1")
    return closing_mm / compression_fraction


def width_for_swing_mm(opening_mm: float, closing_mm: float, shear_mm: float, total_fraction: float) -> float:
    """Least width where the class states the total movement, from most closed to most open.

    Parameters
    ----------
    opening_mm : float
        Growth of the gap from the width when sealed, 0 or more. [mm]
    closing_mm : float
        Loss of the gap from the width when sealed, 0 or more. [mm]
    shear_mm : float
        Whole slide of one face along the other, from end to end, either sign. [mm]
    total_fraction : float
        Permissible total movement as a share of the width, greater than 0. [1]

    Returns
    -------
    width_mm : float
        Least joint width. [mm]

    Raises
    ------
    ValueError
        When an argument is not finite, a movement is negative or `total_fraction` is not positive.

    Notes
    -----
    Without shear this is [1]_ ``W = M / MAF`` with ``M = opening + closing``. Shear is joined to it by the same triangle
    as in `width_for_opening_mm`, the whole swing M standing for the opening: a definition of ours, no source, which
    gives ``s / sqrt(2 C + C^2)`` for shear alone. It agrees with an each-way class only when ``MAF = 2 S`` and opening
    equals closing.

    References
    ----------
    .. [1] Engineering Civil, "What is the purpose of using movement accommodation factor for joint sealant?", web page (read).

    Examples
    --------
    >>> round(width_for_swing_mm(1.0, 3.0, 0.0, 0.30), 1)
    13.3
    """
    if not 0.0 <= closing_mm < inf:
        raise refusal("closing_mm", closing_mm, "a finite number, 0 or more")
    if not 0.0 <= opening_mm < inf:
        raise refusal("opening_mm", opening_mm, "a finite number, 0 or more")
    if not 0.0 < total_fraction < inf:
        raise refusal("total_fraction", total_fraction, "a finite number greater than 0")
    return width_for_opening_mm(opening_mm + closing_mm, shear_mm, total_fraction)


def swing_on_closed_width_mm(total_mm: float, total_fraction: float) -> float:
    """Width where the total movement is a share of the width left after the joint has closed by it.

    Parameters
    ----------
    total_mm : float
        Total movement from most closed to most open, 0 or more. [mm]
    total_fraction : float
        Permissible total movement as a share of the closed width, greater than 0. [1]

    Returns
    -------
    width_mm : float
        Joint width before it closes. [mm]

    Raises
    ------
    ValueError
        When an argument is not finite, `total_mm` is negative or `total_fraction` is not positive.

    Notes
    -----
    [1]_ ``W = M / MAF + M``. It contradicts the plain ``W = M / MAF`` that other writers print, by M; the caller chooses.

    References
    ----------
    .. [1] BS 6093:1993, clause 5.2 (from memory, not verified).

    Examples
    --------
    >>> swing_on_closed_width_mm(4.0, 0.25)
    20.0
    """
    if not 0.0 <= total_mm < inf:
        raise refusal("total_mm", total_mm, "a finite number, 0 or more")
    if not 0.0 < total_fraction < inf:
        raise refusal("total_fraction", total_fraction, "a finite number greater than 0")
    return total_mm / total_fraction + total_mm


def stretch_fraction(width_mm: float, opening_mm: float, shear_mm: float) -> float:
    """Average strain along the line that joined the two faces squarely when sealed.

    Parameters
    ----------
    width_mm : float
        Width when sealed, greater than 0. [mm]
    opening_mm : float
        Change of the gap, positive when it grows, not below ``-width_mm``. [mm]
    shear_mm : float
        Slide of one face along the other, either sign. [mm]

    Returns
    -------
    strain_fraction : float
        Strain, negative when the line is shorter than when sealed. [1]

    Raises
    ------
    ValueError
        When an argument is not finite, `width_mm` is not positive or the gap would be less than nothing.

    Notes
    -----
    Definition: ``sqrt((w + o)^2 + s^2) / w - 1``.

    Examples
    --------
    >>> round(stretch_fraction(13.870832, 3.0, 4.0), 6)
    0.25
    """
    if not 0.0 < width_mm < inf:
        raise refusal("width_mm", width_mm, "a finite number greater than 0")
    if not -width_mm <= opening_mm < inf:
        raise refusal("opening_mm", opening_mm, f"a finite number, not below -width_mm = {-width_mm!r}")
    if not -inf < shear_mm < inf:
        raise refusal("shear_mm", shear_mm, "a finite number")
    return hypot(width_mm + opening_mm, shear_mm) / width_mm - 1.0


def allowed_opening_mm(width_mm: float, shear_mm: float, extension_fraction: float) -> float:
    """Greatest opening that a joint of a given width takes beside a given shear.

    Parameters
    ----------
    width_mm : float
        Width when sealed, greater than 0. [mm]
    shear_mm : float
        Slide of one face along the other at the same instant, either sign. [mm]
    extension_fraction : float
        Extension that the sealant takes, greater than 0. [1]

    Returns
    -------
    opening_mm : float
        Greatest opening. A negative answer means that the shear alone is too much: the gap would have to be smaller
        than when sealed. It never falls below ``-width_mm``, which then stands for 'never'. [mm]

    Raises
    ------
    ValueError
        When an argument is not finite, or `width_mm` or `extension_fraction` is not positive.

    Notes
    -----
    Derived: the inverse of `width_for_opening_mm`, ``o = sqrt((1 + S)^2 w^2 - s^2) - w``. Definition of the strain as in
    `stretch_fraction`.

    Examples
    --------
    >>> round(allowed_opening_mm(13.870832, 4.0, 0.25), 6)
    3.0
    >>> allowed_opening_mm(4.0, 9.0, 0.25)
    -4.0
    """
    if not 0.0 < width_mm < inf:
        raise refusal("width_mm", width_mm, "a finite number greater than 0")
    if not -inf < shear_mm < inf:
        raise refusal("shear_mm", shear_mm, "a finite number")
    if not 0.0 < extension_fraction < inf:
        raise refusal("extension_fraction", extension_fraction, "a finite number greater than 0")
    if shear_mm == 0.0:
        return extension_fraction * width_mm
    longest_mm = (1.0 + extension_fraction) * width_mm
    slide_mm = abs(shear_mm)
    if slide_mm >= longest_mm:
        return -width_mm
    return sqrt((longest_mm - slide_mm) * (longest_mm + slide_mm)) - width_mm


def allowed_shear_mm(width_mm: float, opening_mm: float, extension_fraction: float) -> float:
    """Greatest shear that a joint of a given width takes beside a given opening.

    Parameters
    ----------
    width_mm : float
        Width when sealed, greater than 0. [mm]
    opening_mm : float
        Change of the gap at the same instant, positive when it grows, not below ``-width_mm``. [mm]
    extension_fraction : float
        Extension that the sealant takes, greater than 0. [1]

    Returns
    -------
    shear_mm : float
        Greatest shear, 0 or more. A negative answer means 'never': the opening alone is too much, and the size of the
        number says by how far the triangle fails to close. [mm]

    Raises
    ------
    ValueError
        When an argument is not finite or outside its range.

    Notes
    -----
    Derived: ``s = sqrt((1 + S)^2 w^2 - (w + o)^2)``. Definition of the strain as in `stretch_fraction`.

    Examples
    --------
    >>> round(allowed_shear_mm(4.0, 0.0, 0.25), 9)
    3.0
    """
    if not 0.0 < width_mm < inf:
        raise refusal("width_mm", width_mm, "a finite number greater than 0")
    if not -width_mm <= opening_mm < inf:
        raise refusal("opening_mm", opening_mm, f"a finite number, not below -width_mm = {-width_mm!r}")
    if not 0.0 < extension_fraction < inf:
        raise refusal("extension_fraction", extension_fraction, "a finite number greater than 0")
    # (1 + S) w - (w + o) written as S w - o, so that nothing is lost when the two are close
    spare_mm = extension_fraction * width_mm - opening_mm
    square = spare_mm * ((2.0 + extension_fraction) * width_mm + opening_mm)
    return sqrt(square) if square >= 0.0 else -sqrt(-square)


def combined_shear_mm(*components_mm: float) -> float:
    """Size of a shear from its parts along directions square to each other.

    Parameters
    ----------
    *components_mm : float
        Shear along each direction, either sign; none gives 0. [mm]

    Returns
    -------
    shear_mm : float
        Resultant, 0 or more. [mm]

    Raises
    ------
    ValueError
        When a component is not finite.

    Notes
    -----
    Definition: root of the sum of squares, as for any vector. Parts along one direction are added before they come here.

    Examples
    --------
    >>> combined_shear_mm(3.0, -4.0)
    5.0
    """
    for component_mm in components_mm:
        if not -inf < component_mm < inf:
            raise refusal("components_mm", component_mm, "finite numbers")
    return hypot(*components_mm)


def face_sag_mm(width_mm: float, depth_mm: float, change_mm: float) -> float:
    """How far the middle of each free face moves inwards when the gap opens.

    Parameters
    ----------
    width_mm : float
        Width when sealed, greater than 0. [mm]
    depth_mm : float
        Depth of the bead when sealed, taken as even over the width, greater than 0. [mm]
    change_mm : float
        Change of the gap, positive when it grows; above ``-width_mm`` and at most ``2 * width_mm``. [mm]

    Returns
    -------
    sag_mm : float
        Sag of one face, positive inwards; negative is a bulge. [mm]

    Raises
    ------
    ValueError
        When an argument is not finite, a size is not positive or `change_mm` is outside the model.

    Notes
    -----
    Symbols W, D, d, c = W + d, h. Two equal parabolic faces and constant volume [1]_: ``W D = c D - 2 (2/3) c h``, so
    ``h = 0.75 D d / c``. Derived from these two assumptions; the printed table of [1]_ was not read. At ``d = 2 W`` the
    faces meet and the model ends.

    References
    ----------
    .. [1] Tons, "A Theoretical Approach to Design of a Road Joint Seal", HRB Bulletin 229, 1959, pp. 20-53 (citation read).

    Examples
    --------
    >>> face_sag_mm(10.0, 10.0, 10.0)
    3.75
    """
    _require_model_range(width_mm, depth_mm, change_mm)
    return 0.75 * depth_mm * change_mm / (width_mm + change_mm)


def neck_after_mm(width_mm: float, depth_mm: float, change_mm: float) -> float:
    """Depth left in the middle of the bead after the gap has changed.

    Parameters
    ----------
    width_mm : float
        Width when sealed, greater than 0. [mm]
    depth_mm : float
        Depth of the bead when sealed, taken as even over the width, greater than 0. [mm]
    change_mm : float
        Change of the gap, positive when it grows; above ``-width_mm`` and at most ``2 * width_mm``. [mm]

    Returns
    -------
    neck_mm : float
        Depth in the middle; more than `depth_mm` when the gap closes. [mm]

    Raises
    ------
    ValueError
        When an argument is not finite, a size is not positive or `change_mm` is outside the model.

    Notes
    -----
    ``D - 2 h = D (1 - 1.5 d / c)`` with the sag h of `face_sag_mm`: parabola and constant volume [1]_, derived.

    References
    ----------
    .. [1] Tons, "A Theoretical Approach to Design of a Road Joint Seal", HRB Bulletin 229, 1959, pp. 20-53 (citation read).

    Examples
    --------
    >>> neck_after_mm(10.0, 12.0, 10.0)
    3.0
    """
    _require_model_range(width_mm, depth_mm, change_mm)
    # D (1 - 1.5 d / c) = D (W - d / 2) / (W + d): exactly D at rest and 0 where the faces meet
    return depth_mm * ((width_mm - 0.5 * change_mm) / (width_mm + change_mm))


def face_strain(width_mm: float, depth_mm: float, change_mm: float) -> float:
    """Average strain along the free face of the bead after the gap has changed.

    Parameters
    ----------
    width_mm : float
        Width when sealed, greater than 0. [mm]
    depth_mm : float
        Depth of the bead when sealed, taken as even over the width, greater than 0. [mm]
    change_mm : float
        Change of the gap, positive when it grows; above ``-width_mm`` and at most ``2 * width_mm``. [mm]

    Returns
    -------
    strain_fraction : float
        Length of the curved face over its length when sealed, less 1. [1]

    Raises
    ------
    ValueError
        When an argument is not finite, a size is not positive or `change_mm` is outside the model.

    Notes
    -----
    Arc of a parabola with chord c and sag h: ``L = 0.5 sqrt(c^2 + 16 h^2) + c^2 / (8 h) asinh(4 h / c)``; the strain is
    ``L / W - 1``. It depends on D/W and d/W only. Never less than the average strain of the gap, d/W. A bead deep for its
    width may show a longer face when the gap closes too, because the face bulges. Parabola and constant volume [1]_,
    derived; a tooled bead that starts concave is taken as flat.

    References
    ----------
    .. [1] Tons, "A Theoretical Approach to Design of a Road Joint Seal", HRB Bulletin 229, 1959, pp. 20-53 (citation read).

    Examples
    --------
    >>> round(100.0 * face_strain(10.0, 20.0, 10.0), 1)
    159.9
    """
    _require_model_range(width_mm, depth_mm, change_mm)
    # c, u: gap after the change and slope of the face at the bond, 4 h / c
    c = width_mm + change_mm
    u = 3.0 * depth_mm * change_mm / (c * c)
    half = asinh(u) / u if u else 1.0
    return 0.5 * c * (sqrt(1.0 + u * u) + half) / width_mm - 1.0


def _require_model_range(width_mm: float, depth_mm: float, change_mm: float) -> None:
    if not 0.0 < width_mm < inf:
        raise refusal("width_mm", width_mm, "a finite number greater than 0")
    if not 0.0 < depth_mm < inf:
        raise refusal("depth_mm", depth_mm, "a finite number greater than 0")
    if not -width_mm < change_mm <= FACES_MEET_FRACTION * width_mm:
        raise refusal(
            "change_mm",
            change_mm,
            f"more than -width_mm = {-width_mm!r} and at most twice width_mm = {FACES_MEET_FRACTION * width_mm!r}, "
            "where the two faces of the bead meet",
        )
