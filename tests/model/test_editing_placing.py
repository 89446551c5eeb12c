"""Placing and shifting parts. Expected places are worked out by hand on the module grid."""

from collections.abc import Callable, Iterable

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from onelinefault.errors import EditError, EntryError
from onelinefault.model import editing
from onelinefault.model.consumers import Bus
from onelinefault.model.edits import Edit, apply
from onelinefault.model.parts import PART_CLASSES, terminal_place
from onelinefault.model.plant import End, Plant, Point


def wire_points(plant: Plant, wire_id: str) -> tuple[Point, ...]:
    wire = plant.wires[wire_id]
    a, b = (terminal_place(plant.parts[e.part], e.terminal, e.at) for e in wire.ends)
    return (a, *wire.corners, b)


@pytest.mark.parametrize("kind", [c.kind for c in PART_CLASSES])
def test_every_kind_can_be_placed(kind: str) -> None:
    plant = apply(Plant(), editing.place(Plant(), kind, "s1", 10, 20, 1))
    (part,) = plant.parts.values()
    assert (part.kind, part.x, part.y, part.turn, part.sheet) == (kind, 10, 20, 1, "s1")
    assert plant.next_number == 2


def test_names_follow_the_letter() -> None:
    plant = Plant()
    for kind in ("transformer", "transformer", "bus", "note", "supply", "breaker"):
        plant = apply(plant, editing.place(plant, kind, "s1", 0, 0))
    plant = apply(plant, editing.place(plant, "bus", "s1", 0, 0, length=0))
    assert [p.name for p in plant.parts.values()] == ["T1", "T2", "Bus 1", "", "Q1", "Q2", ""]


def test_presets_are_ratings_and_drawn_properties() -> None:
    edit = editing.place(Plant(), "cable", "s1", 0, 0, length="500 ft", size="2x240", name="Feeder", mirrored=True)
    (part,) = apply(Plant(), edit).parts.values()
    assert part is not None and (part.text("length"), part.name, part.mirrored) == ("500 ft", "Feeder", True)
    (bus,) = apply(
        Plant(), editing.place(Plant(), "bus", "s1", 0, 0, length=30, nominal_voltage="11 kV")
    ).parts.values()
    assert isinstance(bus, Bus) and bus.length == 30 and bus.text("nominal_voltage") == "11 kV"


@pytest.mark.parametrize(
    ("kind", "sheet", "presets", "error"),
    [
        ("piano", "s1", {}, EntryError),
        ("bus", "s9", {}, EditError),
        ("load", "s1", {"length": 3}, EditError),
        ("bus", "s1", {"length": "3"}, EditError),
        ("transformer", "s1", {"impedance": "ten"}, EntryError),
        ("transformer", "s1", {"colour": "red"}, EntryError),
    ],
)
def test_what_cannot_be_placed(kind: str, sheet: str, presets: dict[str, object], error: type[Exception]) -> None:
    with pytest.raises(error):
        editing.place(Plant(), kind, sheet, 0, 0, **presets)


def test_moving_keeps_every_joint_and_corners_that_were_set(plant: Plant) -> None:
    after = apply(plant, editing.move(plant, ["p6", "p7"], 3, 1))
    assert (after.parts["p7"].x, after.parts["p7"].y) == (17, 27)
    assert after.wires["w16"].corners == ((17, 21),)  # both ends moved: the corner goes along
    alone = apply(plant, editing.move(plant, ["p7"], 3, 0))
    assert alone.wires["w16"].corners == ((14, 20),)  # one end moved: the corner stays where a person set it
    assert alone.wires.keys() == plant.wires.keys()


def test_a_corner_that_has_become_pointless_goes(plant: Plant) -> None:
    after = apply(plant, editing.move(plant, ["p7"], -5, 0))  # straight below the joint now
    assert wire_points(after, "w16") == ((9, 20), (14, 20), (9, 23))
    level = apply(after, editing.move(after, ["p7"], 10, -3))  # beside the joint: the corner is on the way
    assert wire_points(level, "w16") == ((9, 20), (19, 20))


def test_moving_nothing_or_by_nothing_is_no_step(plant: Plant) -> None:
    assert editing.move(plant, [], 1, 1).empty and editing.move(plant, ["p1"], 0, 0).empty
    assert editing.move(plant, ["w11"], 5, 5).empty  # a wire by itself stands between its ends


SUBSETS = st.sets(st.sampled_from(["p1", "p2", "p3", "p4", "p5", "p6", "p7"]), min_size=1)


@pytest.mark.parametrize(("change", "times"), [(editing.turn, 4), (editing.mirror, 2)])
def test_turning_and_mirroring_come_back_to_the_start(
    plant: Plant, change: Callable[[Plant, Iterable[str]], Edit], times: int
) -> None:
    @given(SUBSETS)
    @settings(max_examples=40)
    def check(ids: set[str]) -> None:
        after = plant
        for _ in range(times):
            after = apply(after, change(after, ids))
        assert after.parts == plant.parts
        inner = {w.id for w in plant.wires.values() if {w.a.part, w.b.part} <= ids}
        assert all(after.wires[key] == plant.wires[key] for key in inner)

    check()


def distances(plant: Plant, ids: set[str]) -> list[int]:
    """Squared distances between all terminals of some parts: a rigid figure keeps them all."""
    places = [terminal_place(plant.parts[k], t.name) for k in sorted(ids) for t in plant.parts[k].terminals]
    return [(a[0] - b[0]) ** 2 + (a[1] - b[1]) ** 2 for a in places for b in places]


@pytest.mark.parametrize("change", [editing.turn, editing.mirror])
def test_several_parts_turn_as_one_figure(plant: Plant, change: Callable[[Plant, Iterable[str]], Edit]) -> None:
    @given(SUBSETS)
    @settings(max_examples=40)
    def check(ids: set[str]) -> None:
        after = apply(plant, change(plant, ids))
        assert distances(after, ids) == distances(plant, ids)
        for wire in (w for w in plant.wires.values() if w.corners and {w.a.part, w.b.part} <= ids):
            before_points, points = wire_points(plant, wire.id), wire_points(after, wire.id)
            steps = [[abs(a[0] - b[0]) + abs(a[1] - b[1]) for a in p for b in p] for p in (before_points, points)]
            assert steps[0] == steps[1]

    check()


def test_one_part_turns_clockwise_on_its_own_place(plant: Plant) -> None:
    turned = apply(plant, editing.turn(plant, ["p2"])).parts["p2"]
    assert (turned.x, turned.y) == (5, 4) and terminal_place(turned, "a") == (7, 4)
    bus = apply(plant, editing.turn(plant, ["p1"])).parts["p1"]
    assert terminal_place(bus, "bar", 10) == (10, 0) and terminal_place(bus, "bar", 0) == (10, -10)


def test_mirroring_a_lying_part_swaps_its_ends(plant: Plant) -> None:
    lying = apply(plant, editing.turn(plant, ["p2"]))
    mirrored = apply(lying, editing.mirror(lying, ["p2"])).parts["p2"]
    assert terminal_place(mirrored, "a") == (3, 4) and terminal_place(mirrored, "b") == (7, 4)


@pytest.mark.parametrize("quarter", range(4))
@given(end=st.sampled_from(["start", "far"]), to=st.integers(-30, 30))
@settings(max_examples=40)
def test_stretching_a_bus_leaves_its_wires_in_their_places(quarter: int, end: str, to: int) -> None:
    plant = Plant()
    plant = apply(plant, editing.place(plant, "bus", "s1", 4, 6, quarter, length=12))
    plant = apply(plant, editing.place(plant, "load", "s1", 40, 40))
    plant = apply(plant, editing.place(plant, "load", "s1", 50, 40))
    for load, at in (("p2", 3), ("p3", 7)):
        plant = apply(plant, editing.connect(plant, End("p1", "bar", at), End(load, "line")))
    after = apply(plant, editing.stretch_bus(plant, "p1", end, to))
    bus = after.parts["p1"]
    assert isinstance(bus, Bus) and bus.length >= 4  # not cut shorter than between its wires
    for wire in plant.wires:
        assert wire_points(after, wire) == wire_points(plant, wire)
        assert 0 <= (after.wires[wire].a.at or 0) <= bus.length
    if end == "far":
        assert bus.length == max(to, 7)
        assert (bus.x, bus.y) == (4, 6)
    else:
        assert bus.length == 12 - min(to, 3)
        assert terminal_place(bus, "bar", bus.length) == terminal_place(plant.parts["p1"], "bar", 12)


def test_stretching_by_a_place_on_the_sheet(plant: Plant) -> None:
    far = apply(plant, editing.stretch_bus(plant, "p4", "far", (25, 40))).parts["p4"]
    assert isinstance(far, Bus) and far.length == 25
    start = apply(plant, editing.stretch_bus(plant, "p4", "start", (-6, 3))).parts["p4"]
    assert isinstance(start, Bus) and (start.x, start.y, start.length) == (-6, 18, 18)
    with pytest.raises(EditError, match="a bus has start and far"):
        editing.stretch_bus(plant, "p2", "far", 3)


def test_labels_and_tags(plant: Plant) -> None:
    moved = apply(plant, editing.move_label(plant, "p2", 2, -1)).parts["p2"]
    assert (moved.label_dx, moved.label_dy) == (2, -1)
    tagged = apply(plant, editing.set_tag(plant, "p4", (3, 4)))
    tagged = apply(tagged, editing.set_tag(tagged, "p7", (0, 1)))
    assert tagged.tags == {"p4": (3, 4), "p7": (0, 1)}
    assert editing.set_tag(tagged, "p4", (3, 4)).empty
    assert apply(tagged, editing.clear_tag(tagged, "p4")).tags == {"p7": (0, 1)}
    assert apply(tagged, editing.clear_tags(tagged)).tags == {}
    assert editing.clear_tag(tagged, "p5").empty
