"""Cautions: each hazard speaks where it should, keeps quiet where it should not, and reads plainly."""

import re

import pytest

from beadwright import catalogue
from beadwright.catalogue import _match

REGIONS = set(catalogue.regions())


def context(family=None, substrates=(), use="weather", kind="butt", region="other", year=None, flags=()):
    rows = catalogue.families()
    return {
        "region": region, "year": year, "use": use, "kind": kind, "family": family,
        "family_tags": rows[family].tags if family else frozenset(),
        "substrate_tags": frozenset(tag for name in substrates for tag in catalogue.substrates()[name].tags),
        "flags": frozenset(flags),
    }  # fmt: skip


def ids(**facts):
    return {item.id for item in catalogue.matching(context(**facts))}


# What must speak, and the nearest case in which it must not.
SPEAKS = [
    ("acetoxy-alkaline", {"family": "acetoxy-silicone", "substrates": ["concrete"]}, {"family": "alkoxy-silicone", "substrates": ["concrete"]}),
    ("acetoxy-alkaline", {"family": "acetoxy-silicone", "substrates": ["marble"]}, {"family": "acetoxy-silicone", "substrates": ["granite"]}),
    ("acetoxy-copper", {"family": "acetoxy-silicone", "substrates": ["brass"]}, {"family": "acetoxy-silicone", "substrates": ["aluminium"]}),
    ("acetoxy-zinc", {"family": "acetoxy-silicone", "substrates": ["steel-galvanised"]}, {"family": "acetoxy-silicone", "substrates": ["steel"]}),
    ("acetoxy-lead", {"family": "acetoxy-silicone", "substrates": ["lead"]}, {"family": "oxime-silicone", "substrates": ["lead"]}),
    ("acetoxy-mirror", {"family": "acetoxy-silicone", "substrates": ["mirror"]}, {"family": "alkoxy-silicone", "substrates": ["mirror"]}),
    ("acetoxy-edge-seal", {"family": "acetoxy-silicone", "substrates": ["glass-unit"]}, {"family": "acetoxy-silicone", "substrates": ["glass"]}),
    ("oxime-copper", {"family": "oxime-silicone", "substrates": ["copper"]}, {"family": "alkoxy-silicone", "substrates": ["copper"]}),
    ("oxime-polycarbonate", {"family": "oxime-silicone", "substrates": ["polycarbonate"]}, {"family": "oxime-silicone", "substrates": ["acrylic-sheet"]}),
    ("stone-stain", {"substrates": ["granite"]}, {"substrates": ["concrete"]}),
    ("primer", {"substrates": ["concrete"]}, {"substrates": ["glass"]}),
    ("weak-face", {"substrates": ["aac"]}, {"substrates": ["granite"]}),
    ("eifs", {"substrates": ["eifs"]}, {"substrates": ["render"]}),
    ("wet-or-frost", {"use": "weather"}, {"use": "interior"}),
    ("damp-polyurethane", {"family": "polyurethane-2k", "substrates": ["concrete"]}, {"family": "polyurethane-2k", "substrates": ["glass"]}),
    ("paint-silicone", {"family": "alkoxy-silicone", "flags": ["painted"]}, {"family": "alkoxy-silicone"}),
    ("paint-silicone", {"family": "polysulfide-2k", "flags": ["painted"]}, {"family": "polyurethane-1k", "flags": ["painted"]}),
    ("paint-cracks", {"family": "polyurethane-1k", "flags": ["painted"]}, {"family": "polyurethane-1k"}),
    ("bitumen-contact", {"flags": ["bitumen_contact"]}, {}),
    ("other-sealant-contact", {"flags": ["other_sealant_contact"]}, {}),
    ("old-sealant-residue", {"flags": ["old_sealant"]}, {}),
    ("old-sealant-hazard", {"flags": ["old_sealant"]}, {}),
    ("pcb-hold", {"flags": ["old_sealant"], "year": 1950}, {"flags": ["old_sealant"], "year": 1949}),
    ("pcb-hold", {"flags": ["old_sealant"], "year": 1979}, {"flags": ["old_sealant"], "year": 1980}),
    ("pcb-hold", {"flags": ["old_sealant"], "year": 1968}, {"year": 1968}),
    ("old-sealant-year", {"flags": ["old_sealant"]}, {"flags": ["old_sealant"], "year": 1968}),
    ("old-sealant-repair-era", {"flags": ["old_sealant"], "year": 1910}, {"flags": ["old_sealant"], "year": 1950}),
    ("pcb-era", {"region": "north-america", "year": 1968}, {"region": "north-america", "year": 1990}),
    ("pcb-era-elsewhere", {"region": "uk", "year": 1968}, {"region": "north-america", "year": 1968}),
    ("silica", {"flags": ["grinding"], "substrates": ["concrete"]}, {"substrates": ["concrete"]}),
    ("silica", {"flags": ["grinding"], "substrates": ["granite"]}, {"flags": ["grinding"], "substrates": ["aluminium"]}),
    ("grind-metal", {"flags": ["grinding"], "substrates": ["aluminium"]}, {"flags": ["grinding"], "substrates": ["brick-clay"]}),
    ("isocyanate", {"family": "polyurethane-1k"}, {"family": "silyl-terminated"}),
    ("isocyanate-training", {"family": "polyurethane-1k", "region": "germany"}, {"family": "polyurethane-1k", "region": "japan"}),
    ("room-acetic", {"family": "acetoxy-silicone", "flags": ["enclosed_room"]}, {"family": "acetoxy-silicone"}),
    ("room-meko", {"family": "oxime-silicone", "flags": ["enclosed_room"]}, {"family": "oxime-silicone"}),
    ("meko", {"family": "oxime-silicone"}, {"family": "oxime-silicone", "flags": ["enclosed_room"]}),
    ("room-methanol", {"family": "silyl-terminated", "flags": ["enclosed_room"]}, {"family": "polyurethane-1k", "flags": ["enclosed_room"]}),
    ("fire-tested-system", {"use": "fire"}, {}),
    ("structural-engineer", {"use": "structural-glazing"}, {}),
    ("immersed-designer", {"use": "immersed"}, {}),
    ("drinking-water-approval", {"use": "potable-water"}, {}),
    ("floor-foot-safety", {"use": "floor-foot"}, {}),
    ("floor-vehicle-edges", {"use": "floor-vehicle"}, {}),
    ("heritage-stop", {"use": "heritage-masonry"}, {}),
    ("three-sided", {}, {"flags": ["still"]}),
    ("three-sided-still", {"flags": ["still"]}, {}),
    ("brick-frame", {"substrates": ["brick-clay", "concrete"]}, {"substrates": ["brick-clay", "brick-clay"]}),
    ("brick-frame", {"substrates": ["brick-clay", "concrete"]}, {"substrates": ["tile-ceramic", "block-dense"]}),
    ("brick-closes", {"substrates": ["brick-clay"]}, {"substrates": ["tile-ceramic"]}),
    ("concrete-opens", {"substrates": ["brick-calcium-silicate"]}, {"substrates": ["limestone"]}),
    ("timber-moisture", {"substrates": ["oak-across"]}, {"substrates": ["oak-along"]}),
    ("gulf-midday", {"region": "gulf"}, {"region": "japan"}),
    ("germany-total-swing", {"region": "germany"}, {"region": "north-america"}),
]  # fmt: skip


@pytest.mark.parametrize(("caution", "speaks", "quiet"), SPEAKS)
def test_speaks_where_it_should_and_not_beside(caution, speaks, quiet):
    assert caution in ids(**speaks)
    assert caution not in ids(**quiet)


@pytest.mark.parametrize("region", sorted(REGIONS))
def test_every_region_hears_that_local_law_governs(region):
    assert {"law-governs", "work-at-height"} <= ids(region=region)


def test_a_plain_joint_hears_of_no_hazard_that_it_has_not():
    found = catalogue.matching(context(family="alkoxy-silicone", substrates=["aluminium", "glass"]))
    assert not [item.id for item in found if item.severity == "stop"]
    assert not [item.id for item in found if item.scope == "joint" and item.severity == "warning"]


def test_every_referred_use_has_a_stop():
    for use in catalogue.uses().values():
        if use.is_referred:
            assert [item for item in catalogue.matching(context(use=use.id)) if item.severity == "stop" and item.scope == "joint"], use.id


def test_every_caution_can_speak():
    """No row waits for a fact that no table or job can give.

    `fillet`, `bitumen_contact` and `other_sealant_contact` are facts that a job may bring.
    """
    family_tags = {tag for row in catalogue.families().values() for tag in row.tags}
    substrate_tags = {tag for row in catalogue.substrates().values() for tag in row.tags}
    known = {
        "region": REGIONS, "use": set(catalogue.uses()), "kind": {"butt", "lap", "mixed", "fillet"}, "family": set(catalogue.families()),
        "family_tags": family_tags, "substrate_tags": substrate_tags, "substrate_tags_all": substrate_tags,
        "flags": {"old_sealant", "enclosed_room", "grinding", "painted", "still", "bitumen_contact", "other_sealant_contact"},
    }  # fmt: skip
    known["not_flags"] = known["flags_all"] = known["flags"]
    known["not_substrate_tags"] = substrate_tags
    for item in catalogue.cautions().values():
        for key, wanted in item.when.items():
            if not key.startswith("year"):
                assert set(wanted) <= known[key], item.id


def test_job_cautions_need_only_what_the_job_knows():
    for item in catalogue.cautions().values():
        assert item.scope in {"job", "joint"}
        assert item.severity in {"note", "warning", "stop"}
        if item.scope == "job":
            assert set(item.when) <= {"region", "year_from", "year_to", "year_unknown"}, item.id


def test_a_bare_context_matches_only_the_unconditional():
    bare = catalogue.matching({})
    assert {"law-governs"} <= {item.id for item in bare}
    assert all(set(item.when) <= {"not_flags", "not_substrate_tags", "year_unknown"} for item in bare)


def test_an_unknown_condition_is_refused():
    with pytest.raises(ValueError, match="weekday"):
        _match.compile_when("x", {"weekday": ["monday"]})


def test_order_and_answer_do_not_depend_on_the_kind_of_collection():
    facts = context(family="acetoxy-silicone", substrates=["concrete"], flags=["old_sealant"])
    loose = {key: sorted(value) if isinstance(value, frozenset) else value for key, value in facts.items()}
    found = catalogue.matching(facts)
    assert [item.id for item in catalogue.matching(loose)] == [item.id for item in found]
    order = list(catalogue.cautions())
    assert [order.index(item.id) for item in found] == sorted(order.index(item.id) for item in found)
    found.clear()
    assert catalogue.matching(facts), "the caller's list is its own"


@pytest.mark.parametrize("item", catalogue.cautions().values(), ids=lambda item: item.id)
def test_reads_plainly(item):
    assert 8 <= len(item.title) <= 60
    assert 40 <= len(item.text) <= 330, "short enough to read on a scaffold"
    assert item.text.endswith(".")
    assert max(len(sentence.split()) for sentence in re.split(r"(?<=[.:;])\s", item.text)) <= 32
    assert not re.search(r"https?:|www\.|[™®©<>]", item.text + item.title + item.source)


def test_life_safety_defers_to_authority_or_licensed_people():
    for name, words in {
        "law-governs": "licensed", "pcb-hold": "Licensed", "fire-tested-system": "fire authority", "structural-engineer": "engineer",
        "immersed-designer": "designer", "drinking-water-approval": "water authority", "heritage-stop": "heritage authority",
        "silica": "law", "work-at-height": "local rules", "old-sealant-hazard": "local rules",
    }.items():  # fmt: skip
        assert words in catalogue.cautions()[name].text, name
