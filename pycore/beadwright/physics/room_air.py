"""What a curing bead leaves in the air of a room: a well-mixed balance of release and air change.

Units: m3, hours, air changes per hour, g released, mg/m3 in the air. A screening estimate: nothing is taken up by walls, and all
that is set free leaves the bead at once, so the figures are on the high side.
"""

from __future__ import annotations

from math import exp, expm1, inf, pi, sqrt

from ._refusal import refusal

# Litres of gas in a mol at 25 degC and one atmosphere, as occupational limits are turned (convention, 24.45)
MOLAR_VOLUME_L = 24.45
# Place and height of the Dawson function's maximum
PEAK_ARGUMENT = 0.9241388730045916
PEAK_VALUE = 0.5410442246351816

_STEP = 0.3
_WEIGHTS = tuple(exp(-(((2 * index + 1) * _STEP) ** 2)) for index in range(10))


def dawson(argument: float) -> float:
    """Dawson's integral, the response of a ventilated room to a release that goes with the root of time.

    Parameters
    ----------
    argument : float
        Any finite number, 0 or more. [1]

    Returns
    -------
    value : float
        ``exp(-x^2)`` times the integral of ``exp(u^2)`` from 0 to x. [1]

    Raises
    ------
    ValueError
        When `argument` is not finite or below 0.

    Notes
    -----
    [1]_ sampling formula with step 0.3 and 10 pairs of terms, power series below 0.2, asymptotic series above 12; good to 1e-9.

    References
    ----------
    .. [1] Rybicki, "Dawson's integral and the sampling theorem", Computers in Physics 3, 1989 (from memory, derived again).

    Examples
    --------
    >>> round(dawson(1.0), 6)
    0.53808
    """
    if not 0.0 <= argument < inf:
        raise refusal("argument", argument, "a finite number, 0 or more")
    x = argument
    square = x * x
    if x < 0.2:
        return x * (1.0 - square * (2.0 / 3.0) * (1.0 - square * 0.4 * (1.0 - square * (2.0 / 7.0) * (1.0 - square * (2.0 / 9.0)))))
    if x > 12.0:
        inverse = 0.5 / square
        return 0.5 / x * (1.0 + inverse * (1.0 + inverse * (3.0 + inverse * (15.0 + inverse * 105.0))))
    even = 2 * int(0.5 * x / _STEP + 0.5)
    rest = x - even * _STEP
    grow = exp(2.0 * rest * _STEP)
    square_grow = grow * grow
    up, down, total = even + 1, even - 1, 0.0
    for weight in _WEIGHTS:
        total += weight * (grow / up + 1.0 / (down * grow))
        up += 2
        down -= 2
        grow *= square_grow
    return exp(-rest * rest) * total / sqrt(pi)


def ppm_from_mg(amount_mg_m3: float, molar_g_mol: float) -> float:
    """Share of the air by volume from a mass in the air.

    Parameters
    ----------
    amount_mg_m3 : float
        Mass in a cubic metre of air, 0 or more. [mg/m3]
    molar_g_mol : float
        Molar mass of the vapour, greater than 0. [g/mol]

    Returns
    -------
    share_ppm : float
        Parts in a million by volume, at 25 degC and one atmosphere. [ppm]

    Raises
    ------
    ValueError
        When an argument is not finite or outside its range.

    Notes
    -----
    Definition with the molar volume of 24.45 litres that occupational limits use.

    Examples
    --------
    >>> round(ppm_from_mg(25.0, 60.052), 1)
    10.2
    """
    _require("amount_mg_m3", amount_mg_m3, zero=True)
    _require("molar_g_mol", molar_g_mol)
    return amount_mg_m3 * MOLAR_VOLUME_L / molar_g_mol


def mg_from_ppm(share_ppm: float, molar_g_mol: float) -> float:
    """Mass in the air from its share by volume.

    Parameters
    ----------
    share_ppm : float
        Parts in a million by volume, 0 or more. [ppm]
    molar_g_mol : float
        Molar mass of the vapour, greater than 0. [g/mol]

    Returns
    -------
    amount_mg_m3 : float
        Mass in a cubic metre of air, at 25 degC and one atmosphere. [mg/m3]

    Raises
    ------
    ValueError
        When an argument is not finite or outside its range.

    Notes
    -----
    Definition with the molar volume of 24.45 litres that occupational limits use.

    Examples
    --------
    >>> round(mg_from_ppm(10.0, 60.052), 2)
    24.56
    """
    _require("share_ppm", share_ppm, zero=True)
    _require("molar_g_mol", molar_g_mol)
    return share_ppm * molar_g_mol / MOLAR_VOLUME_L


def released_g(sealant_ml: float, density_g_ml: float, share_fraction: float, crosslinker_g_mol: float, released_per_mol: float, vapour_g_mol: float) -> float:
    """Mass of by-product that a sealant sets free over its whole cure.

    Parameters
    ----------
    sealant_ml : float
        Volume of sealant, 0 or more. [ml]
    density_g_ml : float
        Density of the sealant, greater than 0. [g/ml]
    share_fraction : float
        Share of crosslinker (or of free reactive groups) by mass, 0 to 1. [1]
    crosslinker_g_mol : float
        Molar mass of the crosslinker (or of one group). [g/mol]
    released_per_mol : float
        Molecules set free by one of it: 3 of a silane with three groups, 0.5 carbon dioxide of an isocyanate group. [1]
    vapour_g_mol : float
        Molar mass of what is set free. [g/mol]

    Returns
    -------
    mass_g : float
        Mass set free. [g]

    Raises
    ------
    ValueError
        When an argument is not finite or outside its range.

    Notes
    -----
    Definition: stoichiometry, with every group used up.

    Examples
    --------
    >>> round(released_g(300.0, 1.02, 0.05, 220.252, 3.0, 60.052), 3)
    12.515
    """
    _require("sealant_ml", sealant_ml, zero=True)
    _require("density_g_ml", density_g_ml)
    _require("crosslinker_g_mol", crosslinker_g_mol)
    _require("released_per_mol", released_per_mol)
    _require("vapour_g_mol", vapour_g_mol)
    if not 0.0 <= share_fraction <= 1.0:
        raise refusal("share_fraction", share_fraction, "a number from 0 to 1")
    return sealant_ml * density_g_ml * share_fraction / crosslinker_g_mol * released_per_mol * vapour_g_mol


def released_share_fraction(time_h: float, through_h: float) -> float:
    """Share of the by-product that is set free by a time, following the front.

    Parameters
    ----------
    time_h : float
        Time since the bead was placed; before that nothing is free. [h]
    through_h : float
        Time to cure through, greater than 0. [h]

    Returns
    -------
    share_fraction : float
        ``sqrt(t / t_f)``, held between 0 and 1. [1]

    Raises
    ------
    ValueError
        When an argument is not finite or `through_h` is not positive.

    Notes
    -----
    Definition: the front of a slab goes with the root of time, and each layer gives off its share as it cures.

    Examples
    --------
    >>> released_share_fraction(25.0, 100.0)
    0.5
    """
    _require("through_h", through_h)
    if not -inf < time_h < inf:
        raise refusal("time_h", time_h, "a finite number")
    return sqrt(min(1.0, max(0.0, time_h / through_h)))


def constant_source_mg_m3(time_h: float, room_m3: float, changes_per_h: float, source_mg_h: float, start_mg_m3: float) -> float:
    """Concentration in a well-mixed room with a steady source.

    Parameters
    ----------
    time_h : float
        Time, 0 or more. [h]
    room_m3 : float
        Volume of the room, greater than 0. [m3]
    changes_per_h : float
        Air changes with clean air, 0 or more. [1/h]
    source_mg_h : float
        Release, 0 or more. [mg/h]
    start_mg_m3 : float
        Concentration at the beginning, 0 or more. [mg/m3]

    Returns
    -------
    amount_mg_m3 : float
        Concentration at that time. [mg/m3]

    Raises
    ------
    ValueError
        When an argument is not finite or outside its range.

    Notes
    -----
    [1]_ ``C = C_0 e^(-n t) + G / (n V) (1 - e^(-n t))``; without air change it rises in step with time.

    References
    ----------
    .. [1] "Pollution Concentration in Rooms", generic equation and table (read); the same decay as in ASTM E741.

    Examples
    --------
    >>> round(constant_source_mg_m3(20.0 / 60.0, 1.0, 0.5, 1.0, 0.0), 4)
    0.307
    """
    _require("time_h", time_h, zero=True)
    _require("room_m3", room_m3)
    _require("changes_per_h", changes_per_h, zero=True)
    _require("source_mg_h", source_mg_h, zero=True)
    _require("start_mg_m3", start_mg_m3, zero=True)
    n, t = changes_per_h, time_h
    grown = t if n * t < 1e-12 else -expm1(-n * t) / n
    return start_mg_m3 * exp(-n * t) + source_mg_h / room_m3 * grown


def curing_source_mg_m3(time_h: float, room_m3: float, changes_per_h: float, mass_g: float, through_h: float) -> float:
    """Concentration in a well-mixed room while a bead cures in it, all placed at time 0.

    Parameters
    ----------
    time_h : float
        Time since the bead was placed; 0 before. [h]
    room_m3 : float
        Volume of the room, greater than 0. [m3]
    changes_per_h : float
        Air changes with clean air, 0 or more. [1/h]
    mass_g : float
        By-product set free over the whole cure, 0 or more. [g]
    through_h : float
        Time to cure through, greater than 0. [h]

    Returns
    -------
    amount_mg_m3 : float
        Concentration at that time. [mg/m3]

    Raises
    ------
    ValueError
        When an argument is not finite or outside its range.

    Notes
    -----
    Release ``m sqrt(t / t_f)`` after [1]_ into the balance ``V dC/dt = dM/dt - n V C`` gives
    ``C = m / (V sqrt(n t_f)) D(sqrt(n t))`` up to t_f, D Dawson's integral, and plain decay afterwards. Derived; its maximum
    is 0.541044 m / (V sqrt(n t_f)) at t = 0.854033 / n where that comes before t_f.

    References
    ----------
    .. [1] Comyn, "Moisture cure of adhesives and sealants", Int. J. Adhesion & Adhesives, 1998 (abstract read).

    Examples
    --------
    >>> round(curing_source_mg_m3(1.0, 30.0, 0.5, 12.5147, 138.24), 2)
    25.72
    """
    _require("room_m3", room_m3)
    _require("changes_per_h", changes_per_h, zero=True)
    _require("mass_g", mass_g, zero=True)
    _require("through_h", through_h)
    if not -inf < time_h < inf:
        raise refusal("time_h", time_h, "a finite number")
    if time_h <= 0.0:
        return 0.0
    t = min(time_h, through_h)
    root = sqrt(changes_per_h * t)
    # D(x) / x, which is 1 without any air change
    lag = dawson(root) / root if root > 1e-9 else 1.0
    level = 1000.0 * mass_g / room_m3 * sqrt(t / through_h) * lag
    return level * exp(-changes_per_h * (time_h - t))


def mean_mg_m3(from_h: float, to_h: float, room_m3: float, changes_per_h: float, mass_g: float, through_h: float) -> float:
    """Average concentration over a span of time while a bead cures in a well-mixed room.

    Parameters
    ----------
    from_h : float
        Begin of the span, 0 or more. [h]
    to_h : float
        End of the span, after its begin. [h]
    room_m3 : float
        Volume of the room, greater than 0. [m3]
    changes_per_h : float
        Air changes with clean air, greater than 0. [1/h]
    mass_g : float
        By-product set free over the whole cure, 0 or more. [g]
    through_h : float
        Time to cure through, greater than 0. [h]

    Returns
    -------
    amount_mg_m3 : float
        Time-weighted average. [mg/m3]

    Raises
    ------
    ValueError
        When an argument is not finite or outside its range.

    Notes
    -----
    Definition by mass balance: what was released and is no longer in the room has left with the air, ``n V`` times the
    integral of C. The source of `curing_source_mg_m3`.

    Examples
    --------
    >>> round(mean_mg_m3(0.0, 8.0, 30.0, 0.5, 12.5147, 138.24), 2)
    21.31
    """
    _require("from_h", from_h, zero=True)
    _require("changes_per_h", changes_per_h)
    if not from_h < to_h < inf:
        raise refusal("to_h", to_h, "a finite number above from_h")
    freed = 1000.0 * mass_g * (released_share_fraction(to_h, through_h) - released_share_fraction(from_h, through_h))
    ends = [curing_source_mg_m3(time, room_m3, changes_per_h, mass_g, through_h) for time in (from_h, to_h)]
    return (freed - room_m3 * (ends[1] - ends[0])) / (changes_per_h * room_m3 * (to_h - from_h))


def _require(name: str, value: float, *, zero: bool = False) -> None:
    if not (0.0 <= value < inf if zero else 0.0 < value < inf):
        raise refusal(name, value, "a finite number, 0 or more" if zero else "a finite number greater than 0")
