"""Wires: what may be joined, joints on wires, parts put into wires."""

import pytest

from onelinefault.errors import EditError
from onelinefault.model import editing
from onelinefault.model.consumers import Bus
from onelinefault.model.edits import apply
from onelinefault.model.parts import terminal_place
from onelinefault.model.plant import End, Plant, Wire


def placed(plant: Plant, kind: str, x: int, y: int, **presets: object) -> tuple[Plant, str]:
    edit = editing.place(plant, kind, "s1", x, y, **presets)
    return apply(plant, edit), editing.added_parts(plant, edit)[0]


def test_connecting(plant: Plant) -> None:
    plant, load = placed(plant, "load", 15, 10)
    edit = editing.connect(plant, End("p1", "bar", 15), End(load, "line"), [(15, 4), (18, 4), (18, 8)])
    wire = apply(plant, edit).wires[editing.new_ids(plant, "w", 1)[0]]
    assert (wire.a, wire.b) == (End("p1", "bar", 15), End(load, "line"))
    assert wire.corners == ((15, 4), (18, 4), (18, 8))
    assert edit.sentence == "Connect Intake to LD2"


def test_an_open_place_on_a_bus_is_the_nearest(plant: Plant) -> None:
    plant, load = placed(plant, "load", 15, 10)
    wire = next(w for w in editing.connect(plant, End("p1", "bar"), End(load, "line")).wires.values() if w)
    assert wire.a.at == 15
    plant, far = placed(plant, "load", 99, 10)
    wire = next(w for w in editing.connect(plant, End(far, "line", 4), End("p1", "bar")).wires.values() if w)
    assert wire.b.at == 20 and wire.a.at is None  # the end of the bar; only a bus has places


@pytest.mark.parametrize(
    ("a", "b", "says"),
    [
        (End("p2", "a"), End("p2", "a"), "both ends are at breaker Q1"),
        (End("p2", "a"), End("p2", "b"), "both ends are at breaker Q1"),
        (End("p1", "bar", 3), End("p1", "bar", 9), "both ends are at bus Intake"),
        (End("p1", "bar", 9), End("p2", "a"), "joined there already"),
        (End("p2", "a"), End("p1", "bar", 9), "joined there already"),
        (End("p1", "bar", 21), End("p5", "line"), "20 modules long"),
        (End("p1", "bar", -1), End("p5", "line"), "20 modules long"),
        (End("p1", "top"), End("p5", "line"), "has no terminal 'top'"),
        (End("p99", "a"), End("p5", "line"), "does not exist"),
        (editing.WirePoint("w99", 0, 0), End("p5", "line"), "no wire w99"),
        (editing.WirePoint("w14", 9, 19), editing.WirePoint("w14", 9, 19), "same wire"),
        (editing.WirePoint("w14", 9, 19), End("p4", "bar", 2), "joined there already"),
    ],
)
def test_nonsense_is_refused(plant: Plant, a: End, b: End, says: str) -> None:
    with pytest.raises(EditError, match=says):
        editing.connect(plant, a, b)


def test_joining_on_to_a_wire_makes_a_joint(plant: Plant) -> None:
    plant, load = placed(plant, "load", 20, 30)
    after = apply(plant, editing.connect(plant, editing.WirePoint("w16", 14, 22), End(load, "line")))
    joint = next(p for p in after.parts.values() if p.id not in plant.parts)
    assert isinstance(joint, Bus) and (joint.length, joint.name, joint.x, joint.y) == (0, "", 14, 22)
    there = End(joint.id, "bar", 0)
    pieces = sorted(after.wires_of(joint.id), key=lambda w: int(w.id[1:]))
    assert [(w.a, w.b, w.corners) for w in pieces] == [
        (End("p6", "bar", 0), there, ((14, 20),)),
        (there, End("p7", "line"), ()),
        (there, End(load, "line"), ()),
    ]
    assert pieces[0].id == "w16"


def test_two_wires_are_joined_by_two_joints(plant: Plant) -> None:
    edit = editing.connect(plant, editing.WirePoint("w11", 5, 1), editing.WirePoint("w15", 9, 22))
    after = apply(plant, edit)
    joints = [p for p in after.parts.values() if p.id not in plant.parts]
    assert len(joints) == 2 and all(len(after.wires_of(j.id)) == 3 for j in joints)
    assert edit.sentence == "Connect two wires"


def test_a_place_at_the_end_of_a_wire_is_that_end(plant: Plant) -> None:
    plant, load = placed(plant, "load", 20, 30)
    after = apply(plant, editing.connect(plant, End(load, "line"), editing.WirePoint("w16", 14, 23)))
    assert after.parts.keys() == plant.parts.keys()
    assert End("p7", "line") in next(w for w in after.wires_of(load)).ends


def test_corners_are_set_and_cleared(plant: Plant) -> None:
    shaped = apply(plant, editing.set_corners(plant, "w15", [(9, 21), (12, 21), (12, 22), (9, 22)]))
    assert shaped.wires["w15"].corners == ((9, 21), (12, 21), (12, 22), (9, 22))
    assert editing.set_corners(plant, "w15", [(9, 21)]).empty  # on the straight line between its ends
    assert apply(shaped, editing.reroute(shaped, ["p6"])).wires["w16"].corners == ()
    assert apply(shaped, editing.reroute(shaped, ["w15"])).wires["w15"] == plant.wires["w15"]
    assert editing.reroute(shaped, ["w15", "p7"]).sentence == "Route 2 wires anew"


def test_an_end_slides_along_its_bus(plant: Plant) -> None:
    after = apply(plant, editing.set_end_place(plant, "w13", "p4", 11))
    assert after.wires["w13"].b == End("p4", "bar", 11)
    with pytest.raises(EditError, match="12 modules long"):
        editing.set_end_place(plant, "w13", "p4", 13)
    with pytest.raises(EditError, match="does not end on"):
        editing.set_end_place(plant, "w13", "p1", 3)


def path_of(plant: Plant, wire: Wire) -> list[tuple[int, int]]:
    a, b = (terminal_place(plant.parts[e.part], e.terminal, e.at) for e in wire.ends)
    return [a, *wire.corners, b]


@pytest.mark.parametrize("backwards", [False, True])
def test_a_part_put_into_an_upright_wire_stands_upright(plant: Plant, backwards: bool) -> None:
    a, b = End("p1", "bar", 15), End("p4", "bar", 12)
    plant = apply(
        plant, editing.connect(plant, *((b, a) if backwards else (a, b)), [(15, 9), (12, 9)][:: -1 if backwards else 1])
    )
    wire = next(k for k, w in plant.wires.items() if a in w.ends and b in w.ends)
    after = apply(plant, editing.insert_into_wire(plant, wire, "breaker", 15, 5))
    part = next(p for p in after.parts.values() if p.id not in plant.parts)
    assert (part.turn, part.name) == (0, "Q2")
    paths = sorted(sorted(path_of(after, w)) for w in after.wires_of(part.id))
    assert paths == [[(12, 9), (12, 18), (15, 7), (15, 9)], [(15, 0), (15, 3)]]  # the upper end faces the upper piece


@pytest.mark.parametrize("backwards", [False, True])
def test_a_part_put_into_a_level_wire_lies_with_its_first_end_left(plant: Plant, backwards: bool) -> None:
    corners = [(9, 20), (14, 20)]
    ends = plant.wires["w16"].ends[:: -1 if backwards else 1]
    wire = Wire("w16", *ends, tuple(corners[1:]))
    plant = Plant(parts=plant.parts, wires={**plant.wires, "w16": wire}, next_number=plant.next_number)
    after = apply(plant, editing.insert_into_wire(plant, "w16", "cable", 12, 20))
    part = next(p for p in after.parts.values() if p.id not in plant.parts)
    assert terminal_place(part, "a") == (9, 20) and terminal_place(part, "b") == (15, 20)
    neighbours = {
        e.terminal: other.part
        for w in after.wires_of(part.id)
        for e, other in (w.ends, w.ends[::-1])
        if e.part == part.id
    }
    assert neighbours == {"a": "p6", "b": "p7"}


def test_the_drawn_path_decides_where_it_is_known(plant: Plant) -> None:
    wire = apply(plant, editing.reroute(plant, ["w16"]))  # no corner set: the route is known to the drawing only
    drawn = [(9, 20), (9, 21), (14, 21), (14, 23)]
    after = apply(wire, editing.insert_into_wire(wire, "w16", "breaker", 12, 21, path=drawn))
    part = next(p for p in after.parts.values() if p.id not in plant.parts)
    assert terminal_place(part, "a") == (10, 21)


def test_a_part_that_stands_on_the_sheet_is_put_into_a_wire(plant: Plant) -> None:
    plant, part = placed(plant, "transformer", 40, 40, rated_power="1 MVA")
    after = apply(plant, editing.insert_into_wire(plant, "w11", part, 5, 1))
    assert (after.parts[part].x, after.parts[part].y, after.parts[part].text("rated_power")) == (5, 1, "1 MVA")
    assert len(after.wires_of(part)) == 2 and len(after.wires) == len(plant.wires) + 1


def test_a_bus_put_into_a_wire_lies_across_it(plant: Plant) -> None:
    after = apply(plant, editing.insert_into_wire(plant, "w12", "bus", 5, 7, length=10))
    bus = next(p for p in after.parts.values() if p.id not in plant.parts)
    assert (bus.x, bus.y, bus.turn, bus.name) == (0, 7, 0, "Bus 1")
    assert {e for w in after.wires_of(bus.id) for e in w.ends if e.part == bus.id} == {End(bus.id, "bar", 5)}


@pytest.mark.parametrize(
    ("part", "says"),
    [("load", "has 1 terminal and cannot stand"), ("note", "has 0 terminals"), ("p2", "connected already")],
)
def test_what_cannot_stand_in_a_wire(plant: Plant, part: str, says: str) -> None:
    with pytest.raises(EditError, match=says):
        editing.insert_into_wire(plant, "w13", part, 5, 16)


def test_inserting_and_removing_gives_the_wire_back(plant: Plant) -> None:
    plant = apply(plant, editing.move(plant, ["p7"], 0, 20))  # room for a part below the corner
    for wire, x, y in (("w16", 14, 32), ("w16", 11, 20), ("w11", 5, 1), ("w15", 9, 21)):
        edit = editing.insert_into_wire(plant, wire, "breaker", x, y)
        after = apply(plant, edit)
        back = apply(after, editing.remove(after, editing.added_parts(plant, edit)))
        assert (back.parts, back.wires) == (plant.parts, plant.wires)
