"""The last point of a bead to cure: the equation -div grad psi = 1 solved on the true section, and the front on its way there.

Units: mm and mm2. The section is mapped onto a structured grid of four-cornered elements; the lines of the grid make a block
tridiagonal system that is solved line by line. numpy is imported inside the functions: it may come later than the rest, and
everything else in this room works without it.
"""

from __future__ import annotations

from functools import lru_cache
from math import hypot, inf, pi, sqrt
from typing import Any, NamedTuple

from ._refusal import refusal

FRONT, BACK, SIDE_A, SIDE_B = "front", "back", "side-a", "side-b"
FACES = (FRONT, BACK, SIDE_A, SIDE_B)

# Lines and nodes a line; half the section is solved where both sides are alike
LINES, NODES = 48, 28
PICTURE_LINES, PICTURE_NODES = 16, 12
LEVELS = 8
# A corner where all lines of the grid would meet is left out to this share of the way
_CORNER_SHARE = 0.004
_MOST_ROUNDS = 40
# Shrinking of the error from grid to grid that is believed; else that of smooth sections, a quarter, is taken
_LEAST_RATIO, _MOST_RATIO = 0.15, 0.65


class Solved(NamedTuple):
    """Answer for one section: `reach_mm2` is psi at the last point, which lies at `x_mm` across and `y_mm` down from the front."""

    reach_mm2: float
    x_mm: float
    y_mm: float
    area_mm2: float


class Picture(NamedTuple):
    """Arrival of the front: `x_mm`, `y_mm` and `reach_mm2` on a grid, as lists of lines, and the cured share at each level.

    A point cures at the time ``2 reach / k^2``. `levels_mm2` rise to the last point's; `cured_fraction` is the share of the
    section behind the front at each of them.
    """

    x_mm: list[list[float]]
    y_mm: list[list[float]]
    reach_mm2: list[list[float]]
    levels_mm2: list[float]
    cured_fraction: list[float]


def hourglass_reach(width_mm: float, neck_mm: float, tool_sag_mm: float, rod_sag_mm: float, open_faces: str) -> Solved:
    """Psi at the last point to cure of a bead between two parallel faces.

    Parameters
    ----------
    width_mm : float
        Distance of the faces, greater than 0. [mm]
    neck_mm : float
        Depth at mid-width, greater than 0. [mm]
    tool_sag_mm : float
        Hollow of the tooled front, 0 to half the width. [mm]
    rod_sag_mm : float
        Crown of the rod at the back, 0 to half the width. [mm]
    open_faces : str
        Faces that let vapour in, joined by "+": "front", "back", "side-a", "side-b". [word]

    Returns
    -------
    solved : Solved
        Psi there, its place and the section's area; the time is ``2 psi / k^2``. [record]

    Raises
    ------
    ValueError
        When an argument is outside its range, or no face is open.

    Notes
    -----
    Quasi-steady sharp front [1]_ integrated over time (the Baiocchi transform): ``-div grad psi = 1``, psi = 0 on open faces,
    no flux on sealed ones, last point at ``t = 2 psi_max / k^2``. Derived; no publication gives it for these sections. Both
    arcs are circular.

    References
    ----------
    .. [1] Comyn, "Moisture cure of adhesives and sealants", Int. J. Adhesion & Adhesives, 1998 (abstract read).

    Examples
    --------
    >>> round(hourglass_reach(10.0, 10.0, 0.0, 0.0, "front").reach_mm2, 3)
    50.0
    """
    faces = _faces(open_faces)
    _require_hourglass(width_mm, neck_mm, tool_sag_mm, rod_sag_mm)
    return _solved(("hourglass", width_mm, neck_mm, tool_sag_mm, rod_sag_mm), faces)


def fillet_reach(leg_a_mm: float, leg_b_mm: float, bulge_mm: float, open_faces: str) -> Solved:
    """Psi at the last point to cure of a bead in a square inside corner.

    Parameters
    ----------
    leg_a_mm : float
        Length of bond on one side, greater than 0. [mm]
    leg_b_mm : float
        Length of bond on the other side, greater than 0. [mm]
    bulge_mm : float
        Height of the face's arc over the straight line between its ends: positive bulges out, negative is hollow. [mm]
    open_faces : str
        Faces that let vapour in, joined by "+": "front", "side-a", "side-b". [word]

    Returns
    -------
    solved : Solved
        Psi there, its place from the corner and the section's area; the time is ``2 psi / k^2``. [record]

    Raises
    ------
    ValueError
        When an argument is outside its range, or no face is open.

    Notes
    -----
    As `hourglass_reach` [1]_. A flat fillet of equal legs is half a square: psi is 0.147343 times the leg squared.

    References
    ----------
    .. [1] Comyn, "Moisture cure of adhesives and sealants", Int. J. Adhesion & Adhesives, 1998 (abstract read).

    Examples
    --------
    >>> round(fillet_reach(6.0, 6.0, 0.0, "front").reach_mm2, 2)
    5.3
    """
    faces = _faces(open_faces)
    _require_fillet(leg_a_mm, leg_b_mm, bulge_mm)
    return _solved(("fillet", leg_a_mm, leg_b_mm, bulge_mm, 0.0), faces)


def hourglass_picture(width_mm: float, neck_mm: float, tool_sag_mm: float, rod_sag_mm: float, open_faces: str) -> Picture:
    """When the front arrives at each place of a bead between two parallel faces.

    Parameters
    ----------
    width_mm : float
        Distance of the faces, greater than 0. [mm]
    neck_mm : float
        Depth at mid-width, greater than 0. [mm]
    tool_sag_mm : float
        Hollow of the tooled front, 0 to half the width. [mm]
    rod_sag_mm : float
        Crown of the rod at the back, 0 to half the width. [mm]
    open_faces : str
        Faces that let vapour in, joined by "+": "front", "back", "side-a", "side-b". [word]

    Returns
    -------
    picture : Picture
        Arrival on a grid and the cured share. [record]

    Raises
    ------
    ValueError
        When an argument is outside its range, or no face is open.

    Notes
    -----
    The front of [1]_ at any moment bounds the contact set of an obstacle problem for the time integral of the vapour pressure:
    psi_t solves ``-div grad psi_t = 1`` where it is below ``k^2 t / 2`` and equals that bound ahead of the front. Solved for
    several times at once by a primal-dual active set.

    References
    ----------
    .. [1] Comyn, "Moisture cure of adhesives and sealants", Int. J. Adhesion & Adhesives, 1998 (abstract read).

    Examples
    --------
    >>> [round(share, 2) for share in hourglass_picture(10.0, 10.0, 0.0, 0.0, "front").cured_fraction][3::4]
    [0.5, 1.0]
    """
    faces = _faces(open_faces)
    _require_hourglass(width_mm, neck_mm, tool_sag_mm, rod_sag_mm)
    return _pictured(("hourglass", width_mm, neck_mm, tool_sag_mm, rod_sag_mm), faces)


def fillet_picture(leg_a_mm: float, leg_b_mm: float, bulge_mm: float, open_faces: str) -> Picture:
    """When the front arrives at each place of a bead in a square inside corner.

    Parameters
    ----------
    leg_a_mm : float
        Length of bond on one side, greater than 0. [mm]
    leg_b_mm : float
        Length of bond on the other side, greater than 0. [mm]
    bulge_mm : float
        Height of the face's arc over the straight line between its ends: positive bulges out, negative is hollow. [mm]
    open_faces : str
        Faces that let vapour in, joined by "+": "front", "side-a", "side-b". [word]

    Returns
    -------
    picture : Picture
        Arrival on a grid and the cured share. [record]

    Raises
    ------
    ValueError
        When an argument is outside its range, or no face is open.

    Notes
    -----
    As `hourglass_picture` [1]_.

    References
    ----------
    .. [1] Comyn, "Moisture cure of adhesives and sealants", Int. J. Adhesion & Adhesives, 1998 (abstract read).

    Examples
    --------
    >>> round(fillet_picture(6.0, 6.0, 0.0, "front").cured_fraction[-1], 2)
    1.0
    """
    faces = _faces(open_faces)
    _require_fillet(leg_a_mm, leg_b_mm, bulge_mm)
    return _pictured(("fillet", leg_a_mm, leg_b_mm, bulge_mm, 0.0), faces)


# ---- the grid -----------------------------------------------------------------------------------


def _faces(open_faces: str) -> frozenset[str]:
    faces = frozenset(open_faces.split("+")) if open_faces else frozenset()
    if not faces or not faces <= frozenset(FACES):
        raise refusal("open_faces", open_faces, f"one or more of {', '.join(FACES)} joined by +")
    return faces


def _require_hourglass(width_mm: float, neck_mm: float, tool_sag_mm: float, rod_sag_mm: float) -> None:
    for name, value in (("width_mm", width_mm), ("neck_mm", neck_mm)):
        if not 0.0 < value < inf:
            raise refusal(name, value, "a finite number greater than 0")
    for name, value in (("tool_sag_mm", tool_sag_mm), ("rod_sag_mm", rod_sag_mm)):
        if not 0.0 <= value <= 0.5 * width_mm * (1.0 + 1e-12):
            raise refusal(name, value, "a number from 0 to half the width")


def _require_fillet(leg_a_mm: float, leg_b_mm: float, bulge_mm: float) -> None:
    for name, value in (("leg_a_mm", leg_a_mm), ("leg_b_mm", leg_b_mm)):
        if not 0.0 < value < inf:
            raise refusal(name, value, "a finite number greater than 0")
    chord = hypot(leg_a_mm, leg_b_mm)
    # hollow: the arc must leave both legs outwards, so its slope at the ends stays below the chord's own angle
    deepest = 0.5 * chord * (min(leg_a_mm, leg_b_mm) / (chord + max(leg_a_mm, leg_b_mm)))
    if not -deepest * 0.98 <= bulge_mm <= 0.5 * chord:
        raise refusal("bulge_mm", bulge_mm, "an arc that neither cuts into a leg nor passes half a circle")


def _height(np: Any, x: Any, chord: float, sag: float) -> Any:
    """Height of a circular arc over its chord at the distance x from the middle."""
    if sag < 1e-6 * chord:
        return sag * (1.0 - 4.0 * x * x / (chord * chord))
    radius = (0.25 * chord * chord + sag * sag) / (2.0 * sag)
    return np.sqrt(np.maximum(radius * radius - x * x, 0.0)) - (radius - sag)


def _grid(np: Any, shape: tuple[Any, ...], *, halved: bool, lines: int, nodes: int) -> tuple[Any, Any]:
    """Coordinates of the nodes, lines by (nodes + 1)."""
    if shape[0] == "hourglass":
        x, y = _hourglass_half(np, shape, lines, nodes)
        return (x, y) if halved else (np.concatenate((-x[:0:-1], x)), np.concatenate((y[:0:-1], y)))
    _, a, b, c, _ = shape
    chord = hypot(a, b)
    along = np.linspace(0.0, 0.5 if halved else 1.0, (lines if halved else 2 * lines) + 1)
    rise = _height(np, (along - 0.5) * chord, chord, abs(c)) * (1.0 if c >= 0 else -1.0)
    face_x, face_y = a * (1.0 - along) + rise * b / chord, b * along + rise * a / chord
    out = _CORNER_SHARE + (1.0 - _CORNER_SHARE) * np.linspace(1.0, 0.0, nodes + 1)
    return face_x[:, None] * out[None, :], face_y[:, None] * out[None, :]


def _hourglass_half(np: Any, shape: tuple[Any, ...], lines: int, nodes: int) -> tuple[Any, Any]:
    """Straight lines from front to back, closer together towards the bond face where the rod stands steeper."""
    _, width, neck, tool, rod = shape
    even = np.linspace(0.0, 1.0, lines + 1)
    steep = min(1.0, 3.0 * max(tool, rod) / width)
    x = 0.5 * width * (steep * np.sin(0.5 * pi * even) + (1.0 - steep) * even)
    front, back = _height(np, x, width, tool), neck + tool + rod - _height(np, x, width, rod)
    return np.repeat(x[:, None], nodes + 1, 1), front[:, None] + (back - front)[:, None] * np.linspace(0.0, 1.0, nodes + 1)[None, :]


def _is_halved(shape: tuple[Any, ...], faces: frozenset[str]) -> bool:
    even = (SIDE_A in faces) == (SIDE_B in faces)
    return even and (shape[0] == "hourglass" or shape[1] == shape[2])


def _assembled(np: Any, x: Any, y: Any) -> tuple[Any, Any, Any]:
    """Blocks on and beside the diagonal of the stiffness, and the load of a unit source (bilinear elements, 2 by 2 points)."""
    corners = ((x[:-1, :-1], y[:-1, :-1]), (x[:-1, 1:], y[:-1, 1:]), (x[1:, :-1], y[1:, :-1]), (x[1:, 1:], y[1:, 1:]))
    lines, nodes = x.shape
    stiff = [[0.0] * 4 for _ in range(4)]
    load: list[Any] = [0.0] * 4
    point = 0.5 / sqrt(3.0)
    for s in (0.5 - point, 0.5 + point):
        for t in (0.5 - point, 0.5 + point):
            value = ((1 - s) * (1 - t), (1 - s) * t, s * (1 - t), s * t)
            by_s = (-(1 - t), -t, 1 - t, t)
            by_t = (-(1 - s), 1 - s, -s, s)
            xs, ys = (sum(g * corner[k] for g, corner in zip(by_s, corners, strict=True)) for k in (0, 1))
            xt, yt = (sum(g * corner[k] for g, corner in zip(by_t, corners, strict=True)) for k in (0, 1))
            jacobian = np.abs(xs * yt - xt * ys)
            grad = [(yt * gs - ys * gt, xs * gt - xt * gs) for gs, gt in zip(by_s, by_t, strict=True)]
            for p in range(4):
                load[p] = load[p] + 0.25 * value[p] * jacobian
                for q in range(p, 4):
                    stiff[p][q] = stiff[p][q] + 0.25 * (grad[p][0] * grad[q][0] + grad[p][1] * grad[q][1]) / jacobian
    diagonal, beside = np.zeros((lines, nodes, nodes)), np.zeros((lines - 1, nodes, nodes))
    low, high = np.arange(nodes - 1), np.arange(1, nodes)
    diagonal[:-1, low, low] += stiff[0][0]
    diagonal[:-1, high, high] += stiff[1][1]
    diagonal[:-1, low, high] += stiff[0][1]
    diagonal[:-1, high, low] += stiff[0][1]
    diagonal[1:, low, low] += stiff[2][2]
    diagonal[1:, high, high] += stiff[3][3]
    diagonal[1:, low, high] += stiff[2][3]
    diagonal[1:, high, low] += stiff[2][3]
    beside[:, low, low] += stiff[0][2]
    beside[:, high, high] += stiff[1][3]
    beside[:, low, high] += stiff[0][3]
    beside[:, high, low] += stiff[1][2]
    loads = np.zeros((lines, nodes))
    loads[:-1, :-1] += load[0]
    loads[:-1, 1:] += load[1]
    loads[1:, :-1] += load[2]
    loads[1:, 1:] += load[3]
    return diagonal, beside, loads


def _open_nodes(np: Any, shape: tuple[Any, ...], faces: frozenset[str], size: tuple[int, int], *, halved: bool) -> Any:
    held = np.zeros(size, dtype=bool)
    held[:, 0] = FRONT in faces
    if shape[0] == "hourglass":
        held[:, -1] = BACK in faces
        # of a halved hourglass side B remains, of a halved fillet side A
        held[-1, :] |= SIDE_B in faces
        held[0, :] |= SIDE_A in faces and not halved
    else:
        held[0, :] |= SIDE_A in faces
        held[-1, :] |= SIDE_B in faces and not halved
    if not held.any():
        raise refusal("open_faces", "+".join(sorted(faces)), "a face that this section has")
    return held


def _lines_solved(np: Any, diagonal: Any, beside: Any, right: Any) -> Any:
    """Block elimination line by line; leading axes of the arrays are separate systems."""
    count = right.shape[-2]
    kept: list[Any] = []
    pivot, value = diagonal[..., 0, :, :], right[..., 0, :]
    for line in range(count):
        last = line == count - 1
        columns = value[..., None] if last else np.concatenate((beside[..., line, :, :], value[..., None]), -1)
        done = np.linalg.solve(pivot, columns)
        kept.append(done)
        if not last:
            step = np.swapaxes(beside[..., line, :, :], -1, -2) @ done
            pivot = diagonal[..., line + 1, :, :] - step[..., :-1]
            value = right[..., line + 1, :] - step[..., -1]
    found = np.empty_like(right)
    found[..., -1, :] = kept[-1][..., 0]
    for line in range(count - 2, -1, -1):
        found[..., line, :] = kept[line][..., -1] - (kept[line][..., :-1] @ found[..., line + 1, :, None])[..., 0]
    return found


def _times(np: Any, diagonal: Any, beside: Any, vector: Any) -> Any:
    """Stiffness times a field, for each of the leading systems."""
    out = (diagonal @ vector[..., None])[..., 0]
    out[..., :-1, :] += (beside @ vector[..., 1:, :, None])[..., 0]
    out[..., 1:, :] += (np.swapaxes(beside, -1, -2) @ vector[..., :-1, :, None])[..., 0]
    return out


def _held_solution(np: Any, diagonal: Any, beside: Any, loads: Any, held: Any, values: Any) -> Any:
    """The field with some nodes held at given values."""
    free = ~held
    right = np.where(held, values, loads - _times(np, diagonal, beside, np.where(held, values, 0.0)))
    size = diagonal.shape[-1]
    both = free[..., :, None] & free[..., None, :]
    own = np.where(both, diagonal, 0.0)
    own[..., np.arange(size), np.arange(size)] += held
    across = np.where(free[..., :-1, :, None] & free[..., 1:, None, :], beside, 0.0)
    return _lines_solved(np, own, across, right)


def _peak(values: list[float]) -> tuple[float, float]:
    """Shift in steps, and rise, of the top of a parabola through three values round the largest."""
    before, top, after = values
    bend = before - 2.0 * top + after
    if bend >= 0.0:
        return 0.0, 0.0
    shift = 0.5 * (before - after) / bend
    return (shift, -0.25 * (before - after) * shift) if abs(shift) <= 1.0 else (0.0, 0.0)


@lru_cache(maxsize=512)
def _solved(shape: tuple[Any, ...], faces: frozenset[str]) -> Solved:
    """Three grids, each twice as fine, carried on to a grid without end (Aitken): a steep rod leaves a cusp that one grid blurs."""
    first, second, third = (_solved_on(shape, faces, LINES // part, NODES // part) for part in (4, 2, 1))
    before, after = second.reach_mm2 - first.reach_mm2, third.reach_mm2 - second.reach_mm2
    ratio = after / before if before else 0.0
    rest = after * ratio / (1.0 - ratio) if _LEAST_RATIO <= ratio <= _MOST_RATIO else after / 3.0
    return third._replace(reach_mm2=_steady(third.reach_mm2 + rest), area_mm2=_steady(third.area_mm2))


def _steady(value: float) -> float:
    """Eight digits, far finer than the grid: the last binary ones differ with the machine's arithmetic, and an answer must not."""
    return float(f"{value:.8g}")


def _solved_on(shape: tuple[Any, ...], faces: frozenset[str], lines: int, nodes: int) -> Solved:
    import numpy as np

    halved = _is_halved(shape, faces)
    x, y = _grid(np, shape, halved=halved, lines=lines, nodes=nodes)
    diagonal, beside, loads = _assembled(np, x, y)
    held = _open_nodes(np, shape, faces, x.shape, halved=halved)
    psi = _held_solution(np, diagonal, beside, loads, held, np.zeros(x.shape))
    i, j = (int(item) for item in np.unravel_index(int(np.argmax(psi)), psi.shape))
    best = float(psi[i, j])
    if 0 < i < psi.shape[0] - 1:
        best += _peak([float(item) for item in psi[i - 1 : i + 2, j]])[1]
    if 0 < j < psi.shape[1] - 1:
        best += _peak([float(item) for item in psi[i, j - 1 : j + 2]])[1]
    area = float(loads.sum()) * (2.0 if halved else 1.0)
    return Solved(best, float(x[i, j]), float(y[i, j]), area)


@lru_cache(maxsize=64)
def _pictured(shape: tuple[Any, ...], faces: frozenset[str]) -> Picture:
    import numpy as np

    halved = _is_halved(shape, faces)
    x, y = _grid(np, shape, halved=halved, lines=PICTURE_LINES, nodes=PICTURE_NODES)
    diagonal, beside, loads = _assembled(np, x, y)
    held = _open_nodes(np, shape, faces, x.shape, halved=halved)
    psi = _held_solution(np, diagonal, beside, loads, held, np.zeros(x.shape))
    top = float(psi.max())
    # levels at even steps of the root, as the front of a slab moves
    levels = top * (np.arange(1, LEVELS) / LEVELS) ** 2
    bound = np.broadcast_to(levels[:, None, None], (levels.size, *x.shape))
    ahead = (psi[None] > bound) & ~held
    for _ in range(_MOST_ROUNDS):
        field = _held_solution(np, diagonal[None], beside[None], loads[None], held | ahead, np.where(ahead, bound, 0.0))
        push = loads[None] - _times(np, diagonal[None], beside[None], field)
        now = np.where(ahead, push > 0.0, field > bound * (1.0 + 1e-12)) & ~held
        if (now == ahead).all():
            break
        ahead = now
    total = float(loads.sum())
    uncured = np.where(ahead, push, 0.0).sum(axis=(1, 2)) / total
    arrival = _arrival(np, field, psi, levels, top, held)
    shares = [min(1.0, max(0.0, 1.0 - float(item))) for item in uncured]
    # the picture's grid is coarse; its scale is that of the finer answer
    scale = _solved(shape, faces).reach_mm2 / top
    reach = [[_steady(scale * value) for value in line] for line in arrival.tolist()]
    return Picture(x.tolist(), y.tolist(), reach, [_steady(scale * float(item)) for item in (*levels, top)], [*map(_steady, shares), 1.0])


def _arrival(np: Any, field: Any, psi: Any, levels: Any, top: float, held: Any) -> Any:
    """Level at which the front passes each node, drawn back from how far the field lies below its bound some time afterwards.

    The root of the shortfall grows in step with the root of the level, exactly so in a slab. Each level has its say with a
    weight that vanishes at the front itself, where the grid blurs, and far behind it.
    """
    bounds = np.append(levels, top)
    roots = np.sqrt(bounds)[:, None, None]
    step = float(roots[1, 0, 0] - roots[0, 0, 0])
    short = np.sqrt(np.maximum(bounds[:, None, None] - np.concatenate((field, psi[None])), 0.0))
    slope = np.ones_like(short)
    slope[:-1] = np.where(short[:-1] > 0.0, (short[1:] - short[:-1]) / step, 1.0)
    slope[-1] = np.where(short[-2] > 0.0, slope[-2], 1.0)
    steps_behind = short / step
    weight = steps_behind**2 * np.exp(-1.5 * steps_behind)
    total = weight.sum(axis=0)
    drawn = (weight * (roots - short / np.maximum(slope, 0.3))).sum(axis=0)
    arrival = np.where(total > 1e-12, np.clip(drawn / np.maximum(total, 1e-300), 0.0, roots[-1]), roots[-1]) ** 2
    return np.where(held, 0.0, arrival)
