"""Water vapour in air at normal pressure: saturation, dew point, humidity at a cold surface.

Units: degC, Pa, fractions. One formula throughout, Magnus over water with the WMO constants, so that forward and backward
answers agree. Below 0 degC the dew point is the one over water, not the frost point.
"""

from __future__ import annotations

from math import exp, log

from ._refusal import refusal

# Magnus over water: e_s = A exp(B t / (C + t)), t in degC
MAGNUS_A_PA = 611.2
MAGNUS_B = 17.62
MAGNUS_C_C = 243.12

LEAST_C = -100.0
MOST_C = 100.0


def saturation_pressure_pa(temp_c: float) -> float:
    """Pressure of water vapour in saturated air.

    Parameters
    ----------
    temp_c : float
        Temperature, -100 to 100. [degC]

    Returns
    -------
    pressure_pa : float
        Saturation pressure over water. [Pa]

    Raises
    ------
    ValueError
        When `temp_c` is not finite or outside its range.

    Notes
    -----
    [1]_ constants 611.2 Pa, 17.62 and 243.12 degC. Good to 0.6 % from -45 to 60 degC (stated range, from memory); up to
    0.31 % low against steam tables from 0 to 50 degC; beyond the range it stays smooth but is about 1 % high at 80 degC.

    References
    ----------
    .. [1] Magnus formula, constants of WMO-No. 8 and Sonntag 1990; the three constants were read at ing-moehn.de.

    Examples
    --------
    >>> round(saturation_pressure_pa(20.0), 2)
    2332.6
    """
    if not LEAST_C <= temp_c <= MOST_C:
        raise refusal("temp_c", temp_c, "a temperature from -100 to 100 degC")
    return MAGNUS_A_PA * exp(MAGNUS_B * temp_c / (MAGNUS_C_C + temp_c))


def vapour_pressure_pa(temp_c: float, humidity_fraction: float) -> float:
    """Pressure of the water vapour that air holds.

    Parameters
    ----------
    temp_c : float
        Air temperature, -100 to 100. [degC]
    humidity_fraction : float
        Relative humidity, 0 to 1. [1]

    Returns
    -------
    pressure_pa : float
        Vapour pressure. [Pa]

    Raises
    ------
    ValueError
        When an argument is not finite or outside its range.

    Notes
    -----
    Definition of relative humidity: vapour pressure over saturation pressure.

    Examples
    --------
    >>> round(vapour_pressure_pa(23.0, 0.5), 1)
    1401.3
    """
    if not 0.0 <= humidity_fraction <= 1.0:
        raise refusal("humidity_fraction", humidity_fraction, "a number from 0 to 1")
    return humidity_fraction * saturation_pressure_pa(temp_c)


def dew_point_c(temp_c: float, humidity_fraction: float) -> float:
    """Temperature at which the vapour in the air begins to condense.

    Parameters
    ----------
    temp_c : float
        Air temperature, -100 to 100. [degC]
    humidity_fraction : float
        Relative humidity, greater than 0 and at most 1. [1]

    Returns
    -------
    dew_c : float
        Dew point over water, at most `temp_c`. [degC]

    Raises
    ------
    ValueError
        When an argument is not finite or outside its range.

    Notes
    -----
    Inverse of `saturation_pressure_pa` [1]_: ``T_d = C g / (B - g)`` with ``g = ln(RH) + B t / (C + t)``. Good to 0.35 K
    in the range of the formula (from memory). Below 0 degC the frost point lies a little higher.

    References
    ----------
    .. [1] Magnus formula, constants of WMO-No. 8 and Sonntag 1990; the three constants were read at ing-moehn.de.

    Examples
    --------
    >>> round(dew_point_c(20.0, 0.65), 3)
    13.217
    """
    if not LEAST_C <= temp_c <= MOST_C:
        raise refusal("temp_c", temp_c, "a temperature from -100 to 100 degC")
    if not 0.0 < humidity_fraction <= 1.0:
        raise refusal("humidity_fraction", humidity_fraction, "a number greater than 0 and at most 1")
    if humidity_fraction == 1.0:
        return temp_c
    # g: symbol of the Notes
    g = log(humidity_fraction) + MAGNUS_B * temp_c / (MAGNUS_C_C + temp_c)
    return MAGNUS_C_C * g / (MAGNUS_B - g)


def surface_humidity_fraction(surface_c: float, dew_c: float) -> float:
    """Relative humidity of the air that touches a surface.

    Parameters
    ----------
    surface_c : float
        Surface temperature, -100 to 100. [degC]
    dew_c : float
        Dew point of the air, above -243.12 and at most 100. [degC]

    Returns
    -------
    humidity_fraction : float
        Relative humidity at the surface; 1 or more means that water condenses. [1]

    Raises
    ------
    ValueError
        When an argument is not finite or outside its range.

    Notes
    -----
    Definition of relative humidity, with the vapour pressure of the air carried to the surface unchanged:
    ``e_s(dew point) / e_s(surface)``, e_s after [1]_.

    References
    ----------
    .. [1] Magnus formula, constants of WMO-No. 8 and Sonntag 1990; the three constants were read at ing-moehn.de.

    Examples
    --------
    >>> round(100.0 * surface_humidity_fraction(13.0, 10.0), 1)
    82.0
    """
    if not -MAGNUS_C_C < dew_c <= MOST_C:
        raise refusal("dew_c", dew_c, "a dew point above -243.12 and at most 100 degC")
    if not LEAST_C <= surface_c <= MOST_C:
        raise refusal("surface_c", surface_c, "a temperature from -100 to 100 degC")
    # the quotient of two Magnus terms as one power, so that a very low dew point gives 0 and no overflow
    power = MAGNUS_B * (dew_c / (MAGNUS_C_C + dew_c) - surface_c / (MAGNUS_C_C + surface_c))
    return exp(power)
