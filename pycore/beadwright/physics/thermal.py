"""Surface temperatures of building elements and the change of length that follows.

Units: degC for readings, K for differences, mm. Sources stand in each function.
"""

from __future__ import annotations

from math import inf

from ._refusal import refusal

ABSOLUTE_ZERO_C = -273.15


def summer_surface_c(air_c: float, absorption_fraction: float, heat_rise_k: float) -> float:
    """Hottest surface temperature of a sunlit element, by the tabulated rise.

    Parameters
    ----------
    air_c : float
        Design summer air temperature. [degC]
    absorption_fraction : float
        Solar absorption coefficient of the surface, 0 to 1. [1]
    heat_rise_k : float
        Rise for a fully absorbing surface of the element's heat-capacity group, 0 or more. [K]

    Returns
    -------
    surface_c : float
        Surface temperature. [degC]

    Raises
    ------
    ValueError
        When an argument is not finite or outside its range.

    Notes
    -----
    [1]_ ``T_S = T_A + A H``. H is 56 K for light and 42 K for massive elements, 72 K and 56 K with reflected sun [1]_
    (from memory). It is an envelope of extremes, so it exceeds a sol-air balance at the same sun.

    References
    ----------
    .. [1] ASTM C1472, surface temperatures, after NRC Canadian Building Digest 47, 1963 (from memory; of the digest only
       the opening was read).

    Examples
    --------
    >>> summer_surface_c(35.0, 0.75, 56.0)
    77.0
    """
    _require_air(air_c)
    if not 0.0 <= absorption_fraction <= 1.0:
        raise refusal("absorption_fraction", absorption_fraction, "a number from 0 to 1")
    if not 0.0 <= heat_rise_k < inf:
        raise refusal("heat_rise_k", heat_rise_k, "a finite number, 0 or more")
    return air_c + absorption_fraction * heat_rise_k


def winter_surface_c(air_c: float, night_sky_k: float) -> float:
    """Coldest surface temperature of an element.

    Parameters
    ----------
    air_c : float
        Design winter air temperature. [degC]
    night_sky_k : float
        How far the surface falls below the air under a clear night sky, 0 or more; 0 for walls. [K]

    Returns
    -------
    surface_c : float
        Surface temperature. [degC]

    Raises
    ------
    ValueError
        When an argument is not finite, or `night_sky_k` is negative.

    Notes
    -----
    [1]_ takes the design air temperature for walls; surfaces that face the sky fall below it, in the order of 5 to 10 K
    (from memory).

    References
    ----------
    .. [1] ASTM C1472 and NRC Canadian Building Digest 47 (from memory, medium confidence on the allowance).

    Examples
    --------
    >>> winter_surface_c(-20.0, 5.0)
    -25.0
    """
    _require_air(air_c)
    if not 0.0 <= night_sky_k < inf:
        raise refusal("night_sky_k", night_sky_k, "a finite number, 0 or more")
    return air_c - night_sky_k


def sol_air_c(
    air_c: float, absorption_fraction: float, irradiance_w_m2: float, film_w_m2k: float, longwave_k: float
) -> float:
    """Sol-air temperature: the air temperature that would give the same heat flow without sun and sky.

    Parameters
    ----------
    air_c : float
        Outdoor air temperature. [degC]
    absorption_fraction : float
        Solar absorption coefficient of the surface, 0 to 1. [1]
    irradiance_w_m2 : float
        Solar irradiance on the surface, 0 or more. [W/m2]
    film_w_m2k : float
        Outside film coefficient, greater than 0. [W/m2K]
    longwave_k : float
        Loss to the sky as a temperature, 0 or more: 0 for vertical faces, about 4 for horizontal ones. [K]

    Returns
    -------
    surface_c : float
        Sol-air temperature. [degC]

    Raises
    ------
    ValueError
        When an argument is not finite or outside its range.

    Notes
    -----
    [1]_ ``t_e = t_o + alpha I / h_o - eps dR / h_o``; `longwave_k` is the last term. The air temperature stands outside
    the fraction.

    References
    ----------
    .. [1] Sol-air temperature as used by ASHRAE; formula and constants h_o = 17 W/m2K, 4 K, read in secondary pages only.

    Examples
    --------
    >>> round(sol_air_c(35.0, 0.9, 600.0, 17.0, 0.0), 1)
    66.8
    """
    _require_air(air_c)
    if not 0.0 <= absorption_fraction <= 1.0:
        raise refusal("absorption_fraction", absorption_fraction, "a number from 0 to 1")
    if not 0.0 <= irradiance_w_m2 < inf:
        raise refusal("irradiance_w_m2", irradiance_w_m2, "a finite number, 0 or more")
    if not 0.0 < film_w_m2k < inf:
        raise refusal("film_w_m2k", film_w_m2k, "a finite number greater than 0")
    if not 0.0 <= longwave_k < inf:
        raise refusal("longwave_k", longwave_k, "a finite number, 0 or more")
    return air_c + absorption_fraction * irradiance_w_m2 / film_w_m2k - longwave_k


def length_change_mm(length_mm: float, expansion_per_k: float, delta_temp_k: float) -> float:
    """Free change of length of an element with temperature.

    Parameters
    ----------
    length_mm : float
        Length that moves toward the joint, 0 or more. [mm]
    expansion_per_k : float
        Coefficient of linear expansion, 0 or more. [1/K]
    delta_temp_k : float
        Temperature difference, positive when the element warms. [K]

    Returns
    -------
    change_mm : float
        Change of length, positive when the element grows (and so closes the joint). [mm]

    Raises
    ------
    ValueError
        When an argument is not finite, or a length or coefficient is negative.

    Notes
    -----
    Definition of the coefficient: ``dL = alpha L dT`` [1]_.

    References
    ----------
    .. [1] The same form in ASTM C1472 (from memory) and in the textbook form read at Cornell ARCH 262.

    Examples
    --------
    >>> round(length_change_mm(7300.0, 6.5e-6, 86.5), 6)
    4.104425
    """
    if not 0.0 <= length_mm < inf:
        raise refusal("length_mm", length_mm, "a finite number, 0 or more")
    if not 0.0 <= expansion_per_k < inf:
        raise refusal("expansion_per_k", expansion_per_k, "a finite number, 0 or more")
    if not -inf < delta_temp_k < inf:
        raise refusal("delta_temp_k", delta_temp_k, "a finite number")
    return expansion_per_k * length_mm * delta_temp_k


def moisture_change_mm(length_mm: float, strain_fraction: float) -> float:
    """Change of length of an element for a given strain, such as moisture growth or shrinkage.

    Parameters
    ----------
    length_mm : float
        Length that moves toward the joint, 0 or more. [mm]
    strain_fraction : float
        Strain, positive when the element grows: clay brick grows, concrete and block shrink. [1]

    Returns
    -------
    change_mm : float
        Change of length, positive when the element grows (and so closes the joint). [mm]

    Raises
    ------
    ValueError
        When an argument is not finite, or `length_mm` is negative.

    Notes
    -----
    [1]_ ``dL = (R / 100) L`` with R in percent; here the strain is a fraction.

    References
    ----------
    .. [1] ASTM C1472, reversible and irreversible moisture movement (from memory).

    Examples
    --------
    >>> moisture_change_mm(7300.0, 0.0005)
    3.65
    """
    if not 0.0 <= length_mm < inf:
        raise refusal("length_mm", length_mm, "a finite number, 0 or more")
    if not -inf < strain_fraction < inf:
        raise refusal("strain_fraction", strain_fraction, "a finite number")
    return strain_fraction * length_mm


def restrained_change_mm(
    length_mm: float,
    expansion_per_k: float,
    delta_temp_k: float,
    shrinkage_fraction: float,
    friction_fraction: float,
) -> float:
    """Opening of a joint between slabs on the ground as they cool and shrink, held back by the ground.

    Parameters
    ----------
    length_mm : float
        Slab length between joints, 0 or more. [mm]
    expansion_per_k : float
        Coefficient of linear expansion, 0 or more. [1/K]
    delta_temp_k : float
        Fall of temperature, positive when the slab cools: the other way round from `length_change_mm`. [K]
    shrinkage_fraction : float
        Drying shrinkage of the slab, 0 or more. [1]
    friction_fraction : float
        Share of the free movement that the ground lets through, 0 to 1: 0.80 on granular base (read), 0.65 on stabilised
        base (from memory). [1]

    Returns
    -------
    opening_mm : float
        Opening of the joint, positive when the gap grows. [mm]

    Raises
    ------
    ValueError
        When an argument is not finite or outside its range.

    Notes
    -----
    [1]_ ``dL = C L (alpha dT + eps)``.

    References
    ----------
    .. [1] FHWA pavement notebook, chapter 3 (rigid), compression-seal sample calculations, p. 3.3.7 (read).

    Examples
    --------
    >>> inch = 25.4
    >>> round(restrained_change_mm(720.0 * inch, 5.5e-6 * 1.8, 76.0 / 1.8, 1.0e-4, 0.8) / inch, 6)
    0.298368
    """
    if not 0.0 <= length_mm < inf:
        raise refusal("length_mm", length_mm, "a finite number, 0 or more")
    if not 0.0 <= expansion_per_k < inf:
        raise refusal("expansion_per_k", expansion_per_k, "a finite number, 0 or more")
    if not -inf < delta_temp_k < inf:
        raise refusal("delta_temp_k", delta_temp_k, "a finite number")
    if not 0.0 <= shrinkage_fraction < inf:
        raise refusal("shrinkage_fraction", shrinkage_fraction, "a finite number, 0 or more")
    if not 0.0 <= friction_fraction <= 1.0:
        raise refusal("friction_fraction", friction_fraction, "a number from 0 to 1")
    return friction_fraction * length_mm * (expansion_per_k * delta_temp_k + shrinkage_fraction)


def _require_air(air_c: float) -> None:
    if not ABSOLUTE_ZERO_C < air_c < inf:
        raise refusal("air_c", air_c, "a finite temperature above absolute zero")
