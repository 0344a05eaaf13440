"""Depth of cure of a one-part sealant that hardens by moisture from the air.

Units: mm, days (24 h), degC, J/mol. A sharp front moves in from the open face as the root of time; real beads run the same
at first and somewhat faster later, so depths here are on the slow side.
"""

from __future__ import annotations

from math import exp, inf, sqrt

from ._refusal import refusal
from .humidity import vapour_pressure_pa

REFERENCE_C = 23.0
REFERENCE_HUMIDITY_FRACTION = 0.5
GAS_CONSTANT_J_MOL_K = 8.314462618
ICE_POINT_K = 273.15

# Limits of the climate scaling: ice below, the range of the vapour formula above
LEAST_C = 0.0
MOST_C = 60.0

_REFERENCE_PA = vapour_pressure_pa(REFERENCE_C, REFERENCE_HUMIDITY_FRACTION)
_REFERENCE_PER_K = 1.0 / (REFERENCE_C + ICE_POINT_K)


def front_depth_mm(k_mm: float, days: float) -> float:
    """Depth of the cured layer below one open face in an unchanging climate.

    Parameters
    ----------
    k_mm : float
        Depth cured in the first 24 hours in this climate, greater than 0. [mm]
    days : float
        Time since the bead was placed, 0 or more. [d]

    Returns
    -------
    depth_mm : float
        Depth of the front. [mm]

    Raises
    ------
    ValueError
        When an argument is not finite or outside its range.

    Notes
    -----
    [1]_ ``z = sqrt(2 V P p t)``, written as ``z = k sqrt(t)`` with t in days, so that k is the first day's depth.
    Proportional to the root of time only at first; later the slope increases [2]_.

    References
    ----------
    .. [1] Comyn, "Moisture cure of adhesives and sealants", Int. J. Adhesion & Adhesives, 1998 (abstract read; form of the
       law from memory, derived again).
    .. [2] De Buyl, Comyn, Shephard, Subramaniam, "Kinetics of cure, cross link density and adhesion of water-reactive
       alkoxysilicone sealants" (abstract read).

    Examples
    --------
    >>> round(front_depth_mm(2.5, 7.0), 2)
    6.61
    """
    if not 0.0 < k_mm < inf:
        raise refusal("k_mm", k_mm, "a finite number greater than 0")
    if not 0.0 <= days < inf:
        raise refusal("days", days, "a finite number, 0 or more")
    return k_mm * sqrt(days)


def days_to_depth(depth_mm: float, k_mm: float) -> float:
    """Time for the front to reach a depth below one open face in an unchanging climate.

    Parameters
    ----------
    depth_mm : float
        Depth to cure, 0 or more; for a slab open on both faces give half its depth. [mm]
    k_mm : float
        Depth cured in the first 24 hours in this climate, greater than 0. [mm]

    Returns
    -------
    days : float
        Time since the bead was placed. [d]

    Raises
    ------
    ValueError
        When an argument is not finite or outside its range.

    Notes
    -----
    [1]_ turned round: ``t = (z / k)^2``. In a real section the last point to cure may lie farther from the open face than
    the throat does.

    References
    ----------
    .. [1] Comyn, "Moisture cure of adhesives and sealants", Int. J. Adhesion & Adhesives, 1998 (abstract read; form of the
       law from memory, derived again).

    Examples
    --------
    >>> days_to_depth(10.0, 2.5)
    16.0
    """
    if not 0.0 <= depth_mm < inf:
        raise refusal("depth_mm", depth_mm, "a finite number, 0 or more")
    if not 0.0 < k_mm < inf:
        raise refusal("k_mm", k_mm, "a finite number greater than 0")
    ratio = depth_mm / k_mm
    return ratio * ratio


def rate_factor(temp_c: float, humidity_fraction: float, permeation_j_mol: float) -> float:
    """How the first day's depth changes with the climate, against 23 degC and 50 % relative humidity.

    Parameters
    ----------
    temp_c : float
        Air temperature, 0 to 60: below freezing the reaction may stop, so it is refused. [degC]
    humidity_fraction : float
        Relative humidity, 0 to 1; dry air gives 0. [1]
    permeation_j_mol : float
        Heat of permeation of the cured sealant, either sign: 0 is 'vapour pressure only'; for silicones it is negative
        (sign read), about -12000 (from memory). [J/mol]

    Returns
    -------
    factor : float
        Multiplies k, the first day's depth. Times go with ``1 / factor**2``. [1]

    Raises
    ------
    ValueError
        When an argument is not finite or outside its range.

    Notes
    -----
    ``sqrt(p / p_ref * exp(-(E / R) (1 / T - 1 / 296.15)))``: the front law of [1]_ with the permeability falling as the
    temperature rises [2]_ when E is negative. Vapour pressures by the Magnus formula in both places; against steam tables
    the factor differs by at most 0.16 %.

    References
    ----------
    .. [1] Comyn, "Moisture cure of adhesives and sealants", Int. J. Adhesion & Adhesives, 1998 (abstract read; form of the
       law from memory, derived again).
    .. [2] De Buyl, Comyn, Shephard, Subramaniam, "Kinetics of cure, cross link density and adhesion of water-reactive
       alkoxysilicone sealants" (abstract read).

    Examples
    --------
    >>> rate_factor(23.0, 0.5, -12000.0)
    1.0
    >>> round(rate_factor(10.0, 0.5, 0.0), 2)
    0.66
    """
    if not LEAST_C <= temp_c <= MOST_C:
        raise refusal("temp_c", temp_c, "a temperature from 0 to 60 degC")
    if not -inf < permeation_j_mol < inf:
        raise refusal("permeation_j_mol", permeation_j_mol, "a finite number")
    vapour = vapour_pressure_pa(temp_c, humidity_fraction) / _REFERENCE_PA
    per_k = 1.0 / (temp_c + ICE_POINT_K) - _REFERENCE_PER_K
    return sqrt(vapour * exp(-permeation_j_mol / GAS_CONSTANT_J_MOL_K * per_k))
