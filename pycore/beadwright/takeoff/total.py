"""The whole take-off: orders by sealant, colour and phase, everything else, labour, sums, cost."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Mapping, Sequence
from fractions import Fraction
from math import ceil, fsum
from typing import Any, TypeVar

from attrs import evolve, field, frozen

from ..design.inputs import Project, rows
from ..fields import Reads
from ..working import Issue
from . import packs as packing
from .inputs import MAX_RUNS, JointSection, PackInput, RateInput, TakeoffInput, fold, read_takeoff
from .money import hundredths
from .runs import Run, read_run

# Float noise that must not buy a whole piece.
_PIECE_EPSILON = 1e-9
T = TypeVar("T")


@frozen
class Sum:
    """Runs added up under one heading."""

    key: str
    label: str
    run_count: int
    length_m: float
    net_ml: float
    gross_ml: float


@frozen
class PackLine:
    """So many of one package in an order; `cost` is None without a price."""

    pack: PackInput
    usable_ml: Fraction
    boxes: int
    singles: int
    pack_count: int
    cost: Fraction | None
    mixes_per_pack: int = 1


@frozen
class OneMore:
    """What one more box (or package) would add."""

    label: str
    usable_ml: float
    length_m: float
    cost: Fraction | None


@frozen
class Order:
    """What one sealant in one colour for one phase takes, and the packages chosen for it."""

    key: str
    sealant: str
    sealant_name: str
    colour: str
    phase: str
    run_count: int
    length_m: float
    net_ml: float
    net_least_ml: float
    net_most_ml: float
    gross_ml: float
    lines: tuple[PackLine, ...] = ()
    bought_ml: float = 0.0
    usable_ml: float = 0.0
    left_ml: float = 0.0
    left_m: float = 0.0
    cost: Fraction | None = None
    proof: str = ""
    lower_bound: Fraction | None = None
    search_steps: int = 0
    one_more: tuple[OneMore, ...] = ()
    mix_limit_ml: float | None = None
    notes: tuple[str, ...] = ()

    @property
    def is_proven(self) -> bool:
        """Whether no cheaper mix of the packages offered exists."""
        return self.proof in (packing.SEARCHED, packing.BOUND)


@frozen
class Need:
    """One other item: how much of it, what it is sold by and what that costs."""

    item: str
    label: str
    amount: float
    unit: str
    diameter_mm: float | None = None
    piece_size: float | None = None
    piece_count: int | None = None
    price: Fraction | None = None
    cost: Fraction | None = None


@frozen
class Labour:
    """Hours of one stage at one pace."""

    stage: str
    access: str
    pace_m_h: float
    basis: str
    length_m: float
    hours: Fraction
    cost: Fraction | None


@frozen
class Takeoff:
    """Everything that is known about the take-off."""

    source: TakeoffInput
    runs: tuple[Run, ...]
    left_out: tuple[Run, ...]
    damaged: int
    orders: tuple[Order, ...]
    needs: tuple[Need, ...]
    labour: tuple[Labour, ...]
    unrated_m: float
    sums: Mapping[str, tuple[Sum, ...]]
    length_m: float
    net_ml: float
    net_least_ml: float
    net_most_ml: float
    rectangle_ml: float
    gross_ml: float
    cost: Fraction | None
    unpriced: tuple[str, ...]
    issues: tuple[Issue, ...] = field(repr=False)
    readings: Mapping[str, dict[str, object]] = field(repr=False)


def total(raw: Mapping[str, Any], project: Project, joints: Mapping[str, JointSection]) -> Takeoff:
    """Read and add up the take-off of a job.

    Parameters
    ----------
    raw : Mapping
        The job's `takeoff` part.
    project : Project
        What the whole job shares.
    joints : Mapping
        Sections of the joints that runs point to, by id.

    Returns
    -------
    Takeoff
        A run with an error is left out, named, and told at its cell; the rest is added up.
    """
    source = read_takeoff(raw, project)
    reads = Reads(project.system)
    counted: list[Run] = []
    left_out: list[Run] = []
    issues: list[Issue] = []
    readings: dict[str, dict[str, object]] = dict(source.reads.readings)
    for index, row in rows(raw.get("runs"), "/takeoff/runs", "run", reads, limit=MAX_RUNS):
        one = read_run(row, index, source.settings, joints)
        (left_out if one.run.left_out else counted).append(one.run)
        issues += one.issues
        readings.update(one.readings)
    # A row that is no row, and all rows beyond the limit.
    listed = raw.get("runs")
    damaged = len(listed) - len(counted) - len(left_out) if isinstance(listed, list) else 0
    orders = tuple(_orders(counted, source, project))
    needs = tuple(_needs(counted, orders, source))
    labour, unrated = _labour(counted, source.rates)
    cost, unpriced = _cost(orders, needs, labour)
    return Takeoff(
        source, tuple(counted), tuple(left_out), damaged, orders, needs, labour, unrated, _sums(counted, project),
        fsum(run.length_m for run in counted), fsum(run.net_ml for run in counted), fsum(run.area_least_mm2 * run.length_m for run in counted),
        fsum(run.area_most_mm2 * run.length_m for run in counted), fsum(run.rectangle_mm2 * run.length_m for run in counted), fsum(run.gross_ml for run in counted),
        cost, unpriced, (*source.reads.issues, *reads.issues, *issues), readings,
    )  # fmt: skip


# ---- sums -------------------------------------------------------------------------------------


def _grouped(parts: Iterable[T], key_of: Callable[[T], Any]) -> dict[Any, list[T]]:
    found: dict[Any, list[T]] = {}
    for part in parts:
        found.setdefault(key_of(part), []).append(part)
    return found


def _spelled(names: Iterable[str]) -> str:
    """One spelling out of several that differ in capitals only; the order of rows does not choose."""
    return min(names)


def _sealant_name(project: Project, name: str) -> str:
    sealant = project.sealants.get(name)
    return sealant.name if sealant is not None else name


def _sums(runs: Sequence[Run], project: Project) -> dict[str, tuple[Sum, ...]]:
    def by(key_of: Callable[[Run], str], label_of: Callable[[list[Run]], str]) -> tuple[Sum, ...]:
        found = [
            Sum(key, label_of(part), len(part), fsum(run.length_m for run in part), fsum(run.net_ml for run in part), fsum(run.gross_ml for run in part))
            for key, part in _grouped(runs, key_of).items()
        ]
        return tuple(sorted(found, key=lambda item: (item.label.casefold(), item.key)))

    return {
        "colour": by(lambda run: fold(run.colour), lambda part: _spelled(run.colour for run in part)),
        "sealant": by(lambda run: run.sealant, lambda part: _sealant_name(project, part[0].sealant)),
        "phase": by(lambda run: fold(run.phase), lambda part: _spelled(run.phase for run in part)),
        "zone": by(lambda run: fold(run.zone), lambda part: _spelled(run.zone for run in part)),
        "section": by(lambda run: run.section, lambda part: part[0].section),
    }


# ---- orders -----------------------------------------------------------------------------------


def _orders(runs: Sequence[Run], source: TakeoffInput, project: Project) -> list[Order]:
    found = []
    for (sealant, colour, phase), part in _grouped(runs, lambda run: (run.sealant, fold(run.colour), fold(run.phase))).items():
        order = Order(
            f"{sealant}|{colour}|{phase}", sealant, _sealant_name(project, sealant), _spelled(run.colour for run in part), _spelled(run.phase for run in part), len(part),
            fsum(run.length_m for run in part), fsum(run.net_ml for run in part), fsum(run.area_least_mm2 * run.length_m for run in part),
            fsum(run.area_most_mm2 * run.length_m for run in part), fsum(run.gross_ml for run in part),
        )  # fmt: skip
        found.append(_filled(order, source))
    return sorted(found, key=lambda item: (item.sealant_name.casefold(), item.colour.casefold(), item.phase.casefold(), item.key))


@frozen
class _Offer:
    """A package as it serves one order."""

    pack: PackInput
    usable_ml: Fraction
    mixes: int
    single: Fraction | None
    box: Fraction | None


def _filled(order: Order, source: TakeoffInput) -> Order:
    """An order with the packages of least cost; without any price, of least left-over."""
    notes: list[str] = []
    fits = [pack for pack in source.packs if pack.sealant in (None, order.sealant) and pack.colour in ("", fold(order.colour))]
    if not fits:
        return evolve(order, notes=("No package of the list fits this sealant and colour.",))
    mean_ml_m = order.net_ml / order.length_m
    limits: list[float] = []
    offers = []
    for pack in fits:
        usable, mixes, limit, note = _usable(pack, mean_ml_m, source.settings.mix_pace_m_h)
        notes += [note] if note else []
        limits += [limit] if limit is not None else []
        if usable > 0:
            offers.append(_offer(pack, usable, mixes))
    is_priced = any(offer.single is not None or offer.box is not None for offer in offers)
    if is_priced:
        without = [offer.pack.name for offer in offers if offer.single is None and offer.box is None]
        if without:
            notes.append(f"Without a price, so not compared: {', '.join(sorted(without))}.")
        offers = [offer for offer in offers if offer.single is not None or offer.box is not None]
    by_key = {offer.pack.id: offer for offer in offers}
    mix = packing.best_mix(packing.demand(order.gross_ml), _items(offers, is_priced=is_priced))
    if mix is None:
        return evolve(order, notes=(*notes, "Nothing that can be used is offered for it."))
    lines = _lines(mix, by_key, is_priced=is_priced)
    usable_ml = float(mix.usable_ml)
    left = max(0.0, usable_ml - order.gross_ml)
    gross_ml_m = order.gross_ml / order.length_m
    if any(line.pack.sort == "kit" and line.pack.pot_life_h is None for line in lines):
        notes.append("No pot life is given for the kit: nothing limits what is mixed at once.")
    elif any(line.pack.sort == "kit" for line in lines) and source.settings.mix_pace_m_h is None:
        notes.append("Enter how much bead is placed from one mix; until then the pot life limits nothing.")
    return evolve(
        order, lines=lines, bought_ml=float(sum((line.pack.volume_ml * line.pack_count for line in lines), Fraction(0))), usable_ml=usable_ml, left_ml=left, left_m=left / gross_ml_m,
        cost=sum((line.cost or Fraction(0) for line in lines), Fraction(0)) if is_priced else None, proof=mix.proof, lower_bound=mix.lower_bound if is_priced else None, search_steps=mix.nodes,
        one_more=tuple(_one_more(line, gross_ml_m, by_key[line.pack.id]) for line in lines), mix_limit_ml=min(limits) if limits else None, notes=tuple(dict.fromkeys(notes)),
    )  # fmt: skip


def _usable(pack: PackInput, mean_ml_m: float, pace_m_h: float | None) -> tuple[Fraction, int, float | None, str]:
    """Usable volume of a package, mixes made of it, the most for one mix, and a remark.

    A kit holds no more than the crew places within its pot life (length an hour × hours × ml for each
    metre); mixed whole the rest is lost, mixed in parts each mix leaves its own residue.
    """
    usable = pack.volume_ml - pack.residue_ml
    if pack.sort != "kit" or pack.pot_life_h is None or pace_m_h is None:
        return usable, 1, None, ""
    limit = packing.demand(mean_ml_m * pace_m_h * pack.pot_life_h)
    if limit >= usable:
        return usable, 1, float(limit), ""
    if limit <= 0:
        return Fraction(0), 1, 0.0, f"{pack.name}: nothing can be placed within its pot life."
    if pack.mixing == "part":
        mixes = -(-usable // limit)
        kept = pack.volume_ml - pack.residue_ml * mixes
        return kept, int(mixes), float(limit), f"{pack.name}: pot life allows {mixes} mixes from each kit, each with its own residue."
    return limit, 1, float(limit), f"{pack.name}: pot life and pace let only part of a kit be placed; the rest of each whole mix is lost."


def _offer(pack: PackInput, usable: Fraction, mixes: int) -> _Offer:
    boxed = pack.box_price if pack.box_price is not None else pack.price * pack.per_box if pack.price is not None else None
    single = pack.price if pack.price is not None else boxed if pack.per_box == 1 else None
    return _Offer(pack, usable, mixes, None if pack.sold == "box" else single, None if pack.sold == "single" else boxed)


def _items(offers: Sequence[_Offer], *, is_priced: bool) -> list[packing.Item]:
    """What can be bought; without any price the volume itself is what is kept least."""
    items = []
    for offer in offers:
        pack = offer.pack
        # The content, not what is usable: residue is bought too.
        single = offer.single if is_priced else pack.volume_ml if pack.sold != "box" else None
        box = offer.box if is_priced else pack.volume_ml * pack.per_box if pack.sold == "box" else None
        if single is not None:
            items.append(packing.Item(f"{pack.id}", offer.usable_ml, single))
        if box is not None and (pack.per_box > 1 or single is None):
            items.append(packing.Item(f"{pack.id}#box", offer.usable_ml * pack.per_box, box, pack.per_box))
    return items


def _lines(mix: packing.Mix, offers: Mapping[str, _Offer], *, is_priced: bool) -> tuple[PackLine, ...]:
    counts: dict[str, list[int]] = {}
    for key, count in mix.counts:
        is_box = key.endswith("#box")
        counts.setdefault(key.removesuffix("#box") if is_box else key, [0, 0])[0 if is_box else 1] += count
    lines = []
    for key, (boxes, singles) in counts.items():
        offer = offers[key]
        pack, cost = offer.pack, Fraction(0)
        if pack.sold == "either" and pack.per_box > 1 and (not is_priced or (offer.box is not None and offer.single is not None and offer.box <= offer.single * pack.per_box)):
            more, singles = divmod(singles, pack.per_box)
            boxes += more
        if is_priced:
            cost = (offer.box or Fraction(0)) * boxes + (offer.single or Fraction(0)) * singles
        lines.append(PackLine(pack, offer.usable_ml, boxes, singles, boxes * pack.per_box + singles, cost if is_priced else None, offer.mixes))
    return tuple(sorted(lines, key=lambda line: (-line.pack.volume_ml, line.pack.name, line.pack.id)))


def _one_more(line: PackLine, gross_ml_m: float, offer: _Offer) -> OneMore:
    pack = line.pack
    # By the box where boxes are bought, else by the package.
    is_box = pack.per_box > 1 and (line.boxes > 0 or pack.sold == "box")
    usable = float(line.usable_ml * (pack.per_box if is_box else 1))
    cost = (offer.box if offer.box is not None else offer.single * pack.per_box if offer.single is not None else None) if is_box else offer.single if offer.single is not None else offer.box
    return OneMore(f"One more box of {pack.per_box}: {pack.name}" if is_box else f"One more: {pack.name}", usable, usable / gross_ml_m, cost)


# ---- everything else --------------------------------------------------------------------------


def _needs(runs: Sequence[Run], orders: Sequence[Order], source: TakeoffInput) -> list[Need]:
    settings = source.settings
    found: list[Need] = []
    rods = _grouped((part for run in runs for part in run.rods), lambda part: (part.diameter_mm, part.label))
    for (diameter, label), parts in sorted(rods.items()):
        found.append(_sold(source, "rod", f"Rod {label}", fsum(part.length_m for part in parts), "m", diameter))
    tapes = _grouped((run for run in runs if run.tape_m), lambda run: round(run.tape_mm or 0.0, 1))
    for width, taped in sorted(tapes.items()):
        found.append(_sold(source, "tape", "Bond-breaker tape", fsum(run.tape_m for run in taped), "m", width))
    prime, clean = fsum(run.prime_m2 for run in runs), fsum(run.clean_m2 for run in runs)
    if prime:
        found.append(Need("primed", "Faces to prime", prime, "m2"))
        found.append(_sold(source, "primer", "Primer", prime / settings.primer_coverage * 1000.0, "ml"))
    if clean:
        found.append(_sold(source, "cleaner", "Cleaner", clean / settings.cleaner_coverage * 1000.0, "ml"))
    if masking := fsum(run.masking_m for run in runs):
        found.append(_sold(source, "masking", "Masking tape", masking, "m"))
    gunned = sum(line.pack_count for order in orders for line in order.lines if line.pack.sort in ("cartridge", "sausage"))
    if gunned:
        found.append(_sold(source, "tip", "Tips", float(ceil(gunned / settings.packs_per_tip)), "pieces"))
    if old := fsum(run.old_ml for run in runs):
        found.append(_sold(source, "disposal", "Old sealant to dispose of", old, "ml"))
    return found


def _sold(source: TakeoffInput, item: str, label: str, amount: float, unit: str, size_mm: float | None = None) -> Need:
    """An amount with what it is sold by: the row for its own diameter, else the row for any."""
    offered = [row for row in source.extras if row.item == item]
    row = next((row for row in offered if row.diameter_mm is not None and size_mm is not None and abs(row.diameter_mm - size_mm) < 0.05), None)
    row = row or next((row for row in offered if row.diameter_mm is None), None)
    if row is None or row.size is None:
        return Need(item, label, amount, unit, size_mm)
    size = row.size / 1000.0 if unit == "m" else row.size
    pieces = ceil(amount / size - _PIECE_EPSILON)
    return Need(item, label, amount, unit, size_mm, size, pieces, row.price, row.price * pieces if row.price is not None else None)


def _labour(runs: Sequence[Run], rates: Sequence[RateInput]) -> tuple[tuple[Labour, ...], float]:
    """Hours by stage and access, and the length that no rate speaks of."""
    stages = _grouped_rates(rates)
    lengths: dict[int, list[float]] = {}
    rated: set[int] = set()
    for position, run in enumerate(runs):
        for choices in stages.values():
            own = [row for row in choices if row.access == run.access and _done_on(row, run)]
            chosen = own or [row for row in choices if row.access == "any" and _done_on(row, run)]
            for row in chosen[:1]:
                lengths.setdefault(id(row), []).append(run.length_m)
                rated.add(position)
    found = []
    for row in rates:
        length = fsum(lengths.get(id(row), ()))
        if length:
            hours = hundredths(length / row.pace_m_h)
            found.append(Labour(row.stage, row.access, row.pace_m_h, row.basis, length, hours, hours * row.hour_price if row.hour_price is not None else None))
    unrated = fsum(run.length_m for position, run in enumerate(runs) if position not in rated) if rates else 0.0
    return tuple(found), unrated


def _grouped_rates(rates: Iterable[RateInput]) -> dict[str, list[RateInput]]:
    found: dict[str, list[RateInput]] = {}
    for row in rates:
        found.setdefault(fold(row.stage), []).append(row)
    return found


def _done_on(rate: RateInput, run: Run) -> bool:
    return {"all": True, "removal": run.removal, "new": not run.removal, "backed": run.backed}[rate.on]


def _cost(orders: Sequence[Order], needs: Sequence[Need], labour: Sequence[Labour]) -> tuple[Fraction | None, tuple[str, ...]]:
    """The sum of all that has a price, and what has none."""
    known: list[Fraction] = []
    unpriced: list[str] = []
    for order in orders:
        if order.cost is not None:
            known.append(order.cost)
        else:
            unpriced.append(" ".join(part for part in (order.sealant_name, order.colour, order.phase) if part))
    for need in needs:
        if need.cost is not None:
            known.append(need.cost)
        elif need.item != "primed":
            unpriced.append(need.label)
    for row in labour:
        if row.cost is not None:
            known.append(row.cost)
        else:
            unpriced.append(f"{row.stage} (hours)")
    return (sum(known, Fraction(0)) if known else None), tuple(dict.fromkeys(unpriced))

