"""The package mix of least cost that covers a volume, by an exact search with its proof.

The problem: whole numbers n_i of packages and boxes with Σ n_i v_i ≥ D and Σ n_i c_i least
(v usable volume, c cost). All numbers are exact. The search is depth first over the counts,
cheapest volume first, and leaves a branch when no filling of it can be cheaper than the best
mix found: with R still to cover, the rest costs at least R × the least c/v left, and every
mix holds a multiple of the volumes' common measure, so R is first raised to that. A pair
(items left, R) reached again at no less cost is left too. When the search ends by itself the
mix is proven; when it meets its limit of steps the lower bound that it did prove is told.
"""

from __future__ import annotations

from collections.abc import Sequence
from fractions import Fraction
from functools import lru_cache
from math import gcd, lcm

from attrs import frozen

MAX_NODES = 20_000
# A volume counts to a millionth of a millilitre, so that the last binary digit of a sum orders nothing.
_ML_DECIMALS = 6


@frozen
class Item:
    """What can be bought: one package, or one box of them."""

    key: str
    usable_ml: Fraction
    cost: Fraction
    pack_count: int = 1


@frozen
class Mix:
    """How many of each item, what they hold and cost, and how far this is proven."""

    counts: tuple[tuple[str, int], ...]
    usable_ml: Fraction
    cost: Fraction
    lower_bound: Fraction
    nodes: int
    proof: str

    @property
    def is_optimal(self) -> bool:
        """Whether no cheaper mix exists."""
        return self.cost == self.lower_bound


SEARCHED = "searched"
BOUND = "bound"
LIMIT = "limit"


def demand(volume_ml: float) -> Fraction:
    """A volume as the search takes it."""
    return Fraction(round(volume_ml, _ML_DECIMALS)).limit_denominator(10**_ML_DECIMALS)


def best_mix(volume_ml: Fraction, items: Sequence[Item], max_nodes: int = MAX_NODES) -> Mix | None:
    """The cheapest mix that holds at least a volume.

    Parameters
    ----------
    volume_ml : Fraction
        Volume to cover. [ml]
    items : sequence of Item
        What can be bought; an item that holds nothing is left aside.
    max_nodes : int
        Steps after which the search stops unproven.

    Returns
    -------
    Mix or None
        None when nothing usable is offered. `proof` is `bound` when the cost equals a bound
        that no mix can beat, `searched` when every other mix was ruled out, `limit` when the
        search was cut short; then `lower_bound` says how cheap a mix could at best be.
    """
    offered = _canonical(tuple(items))
    if not offered:
        return None
    if volume_ml <= 0:
        return Mix((), Fraction(0), Fraction(0), Fraction(0), 0, BOUND)
    # Whole numbers from here on: volumes in the items' common measure, costs over their common denominator.
    scale = lcm(*(item.usable_ml.denominator for item in offered))
    whole = [int(item.usable_ml * scale) for item in offered]
    measure = gcd(*whole)
    volumes = [volume // measure for volume in whole]
    cost_scale = lcm(*(item.cost.denominator for item in offered))
    costs = [int(item.cost * cost_scale) for item in offered]
    need = -(-(volume_ml * scale / measure) // 1)
    search = _Search(volumes, costs, max_nodes)
    search.run(int(need))
    assert search.best is not None
    counts = tuple((item.key, count) for item, count in zip(offered, search.best, strict=True) if count)
    usable = sum((item.usable_ml * count for item, count in zip(offered, search.best, strict=True)), Fraction(0))
    cost = Fraction(search.best_cost, cost_scale)
    proof = BOUND if search.best_cost == search.root_bound else LIMIT if search.cut else SEARCHED
    bound = cost if proof != LIMIT else Fraction(search.root_bound, cost_scale)
    return Mix(counts, usable, cost, bound, search.nodes, proof)


@lru_cache(maxsize=256)
def _canonical(items: tuple[Item, ...]) -> list[Item]:
    """Usable items without those that others replace at no more cost; the order given changes nothing."""
    usable = sorted((item for item in items if item.usable_ml > 0), key=lambda item: (item.cost / item.usable_ml, -item.usable_ml, item.key))
    kept: list[Item] = []
    for item in usable:
        # So many of a kept item hold as much; are they as cheap?
        replaced = any(-(-item.usable_ml // other.usable_ml) * other.cost <= item.cost for other in kept)
        if not replaced:
            kept.append(item)
    return kept


class _Search:
    """Depth-first search over counts with bounds; see the module's text."""

    def __init__(self, volumes: list[int], costs: list[int], max_nodes: int) -> None:
        self.volumes, self.costs, self.max_nodes = volumes, costs, max_nodes
        self.nodes = 0
        self.cut = False
        self.best: list[int] | None = None
        self.best_cost = 0
        self.root_bound = 0
        self._seen: dict[tuple[int, int], int] = {}
        # Common measure of the volumes from each item on: what can still be added is a multiple of it.
        self._measures = [gcd(*volumes[index:]) for index in range(len(volumes))]

    def run(self, need: int) -> None:
        self.root_bound = self._rest(0, need)
        self._go(0, need, 0, [0] * len(self.volumes))

    def _rest(self, index: int, need: int) -> int:
        """The least that covering `need` with the items from `index` on can cost."""
        measure = self._measures[index]
        need = -(-need // measure) * measure
        # Items stand in order of cost for volume, so the first left is the cheapest filler.
        return -(-need * self.costs[index] // self.volumes[index])

    def _go(self, index: int, need: int, cost: int, counts: list[int]) -> None:
        volume, price = self.volumes[index], self.costs[index]
        most = -(-need // volume)
        if self.best is None or cost + most * price < self.best_cost:
            self.best_cost = cost + most * price
            self.best = [*counts[:index], most, *([0] * (len(counts) - index - 1))]
        if index == len(self.volumes) - 1:
            return
        for count in range(most - 1, -1, -1):
            self.nodes += 1
            if self.nodes > self.max_nodes:
                self.cut = True
                return
            left, spent = need - count * volume, cost + count * price
            # The bound only grows as fewer of the cheaper filler are taken.
            if spent * self.volumes[index + 1] + left * self.costs[index + 1] >= self.best_cost * self.volumes[index + 1]:
                return
            if spent + self._rest(index + 1, left) >= self.best_cost:
                continue
            if self.best_cost == self.root_bound:
                return
            place = (index + 1, left)
            if self._seen.get(place, spent + 1) <= spent:
                continue
            self._seen[place] = spent
            counts[index] = count
            self._go(index + 1, left, spent, counts)
            counts[index] = 0
            if self.cut:
                return
