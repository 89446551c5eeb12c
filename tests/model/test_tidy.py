"""The tidy placing of parts that nobody has placed."""

from itertools import pairwise

from hypothesis import given, settings
from hypothesis import strategies as st

from onelinefault.model.building import PlantBuilder
from onelinefault.model.part import Part
from onelinefault.model.parts import terminal_place
from onelinefault.model.plant import Plant


def body(part: Part) -> tuple[int, int, int, int]:
    """The box of a part's terminals (or bar) in modules, a little wider than its line."""
    places = [terminal_place(part, t.name) for t in part.terminals] or [(part.x, part.y)]
    xs, ys = [x for x, _ in places], [y for _, y in places]
    if part.kind == "bus":
        return part.x, part.y, part.x + getattr(part, "length", 0), part.y
    return min([*xs, part.x - 2]), min([*ys, part.y - 1]), max([*xs, part.x + 2]), max([*ys, part.y + 1])


def overlaps(plant: Plant) -> list[tuple[str, str]]:
    boxes = [(p.name, body(p)) for p in plant.parts.values()]
    return [
        (one, two)
        for i, (one, a) in enumerate(boxes)
        for two, b in boxes[i + 1 :]
        if a[0] <= b[2] and b[0] <= a[2] and a[1] <= b[3] and b[1] <= a[3]
    ]


def double_ended() -> Plant:
    b = PlantBuilder("Two intakes")
    for side in "AB":
        b.add("supply", f"Grid {side}", nominal_voltage="33 kV", fault_level_max="900 MVA")
        b.add("transformer", f"T{side}", high_voltage="33 kV", low_voltage="11 kV", rated_power="20 MVA")
        b.add("bus", f"Board {side}")
        b.join(f"Grid {side}", f"T{side}.high")
        b.join(f"T{side}.low", f"Board {side}")
        b.add("induction_motor", f"M{side}", rated_power="1 MW", rated_voltage="11 kV")
        b.join(f"Board {side}", f"M{side}")
    b.add("breaker", "Tie")
    b.chain("Board A", "Tie", "Board B")
    return b.plant()


def by_name(plant: Plant) -> dict[str, Part]:
    return {part.name: part for part in plant.parts.values()}


def test_a_feeder_runs_straight_down_from_its_supply() -> None:
    parts = by_name(double_ended())
    for side in "AB":
        rows = [parts[f"{name}{side}"] for name in ("Grid ", "T", "Board ", "M")]
        assert all(upper.y < lower.y for upper, lower in pairwise(rows))
        assert rows[0].x == rows[1].x
        assert rows[2].x <= rows[1].x <= rows[2].x + rows[2].length  # type: ignore[attr-defined]


def test_a_tie_hangs_between_the_ends_of_its_buses() -> None:
    plant = double_ended()
    parts = by_name(plant)
    a, b, tie = parts["Board A"], parts["Board B"], parts["Tie"]
    assert a.y == b.y < tie.y
    assert a.x + a.length < tie.x < b.x  # type: ignore[attr-defined]
    left, right = terminal_place(tie, "a"), terminal_place(tie, "b")
    assert left[0] < right[0] and left[1] == right[1]


def test_a_supply_at_a_lower_voltage_stands_above_its_bus() -> None:
    b = PlantBuilder("Two voltages")
    b.add("supply", "Grid", nominal_voltage="33 kV", fault_level_max="900 MVA")
    b.add("bus", "Intake")
    b.add("transformer", "T1", high_voltage="33 kV", low_voltage="0.4 kV")
    b.add("bus", "Low")
    b.add("supply", "Town", nominal_voltage="0.4 kV", fault_level_max="20 MVA")
    b.add("fuse", "F1")
    b.chain("Grid", "Intake", "T1.high")
    b.join("T1.low", "Low")
    b.chain("Town", "F1", "Low")
    parts = by_name(b.plant())
    assert parts["Intake"].y < parts["T1"].y < parts["Low"].y
    assert parts["Town"].y < parts["F1"].y < parts["Low"].y
    assert parts["Town"].x == parts["F1"].x != parts["T1"].x


def test_a_part_wired_the_other_way_round_is_turned() -> None:
    b = PlantBuilder("Step up")
    b.add("supply", "Grid", nominal_voltage="11 kV", fault_level_max="900 MVA")
    b.add("transformer", "T1", high_voltage="33 kV", low_voltage="11 kV")
    b.add("bus", "High")
    b.join("Grid", "T1.low")
    b.join("T1.high", "High")
    plant = b.plant()
    t1 = by_name(plant)["T1"]
    assert terminal_place(t1, "low")[1] < terminal_place(t1, "high")[1]


SERIES = ("breaker", "cable", "fuse", "reactor")
LEAVES = ("induction_motor", "load", "capacitor", "synchronous_generator", "supply")


@st.composite
def trees(draw: st.DrawFn) -> PlantBuilder:
    """Buses fed from buses through chains of series parts, with consumers, further supplies and ties."""
    b = PlantBuilder("Random")
    b.add("supply", "Grid", nominal_voltage="33 kV", fault_level_max="900 MVA")
    b.add("bus", "Bus 0")
    b.join("Grid", "Bus 0")
    buses = ["Bus 0"]
    for number in range(1, draw(st.integers(1, 12))):
        upper = draw(st.sampled_from(buses))
        if draw(st.booleans()):
            names = [upper]
            for k in range(draw(st.integers(1, 3))):
                names.append(f"X{number}.{k}")
                b.add(draw(st.sampled_from(SERIES)), names[-1])
            buses.append(f"Bus {number}")
            b.add("bus", buses[-1])
            b.chain(*names, buses[-1])
        else:
            voltage = {"nominal_voltage": draw(st.sampled_from(["33 kV", "11 kV"]))}
            kind = draw(st.sampled_from(LEAVES))
            b.add(kind, f"L{number}", **voltage if kind == "supply" else {})
            b.join(upper, f"L{number}")
    if len(buses) > 1 and draw(st.booleans()):
        b.add("breaker", "Tie")
        b.chain(buses[-1], "Tie", draw(st.sampled_from(buses[:-1])))
    return b


@settings(max_examples=60, deadline=None)
@given(builder=trees())
def test_nothing_lies_on_anything_else(builder: PlantBuilder) -> None:
    plant = builder.plant()
    assert overlaps(plant) == []


@settings(max_examples=20, deadline=None)
@given(builder=trees())
def test_the_sheet_is_large_enough_and_no_two_wires_share_a_place(builder: PlantBuilder) -> None:
    plant = builder.plant()
    width, height = plant.sheets[0].size
    for part in plant.parts.values():
        left, top, right, bottom = body(part)
        assert left > 0 and right < width and top > 0 and bottom < height
    places = [(end.part, end.at, wire.id) for wire in plant.wires.values() for end in wire.ends if end.at is not None]
    on_bars = {(part, at) for part, at, _ in places}
    # opposite sides of a bar may share a place: at most two wires each
    assert all(sum((p, a) == spot for p, a, _ in places) <= 2 for spot in on_bars)


def test_loose_parts_stand_below() -> None:
    b = PlantBuilder("Loose")
    b.add("supply", "Grid", nominal_voltage="33 kV", fault_level_max="1 GVA")
    b.add("bus", "Intake")
    b.join("Grid", "Intake")
    b.add("note", "Remark", note="words", width=20)
    b.add("load", "Spare")
    plant = b.plant()
    parts = by_name(plant)
    assert parts["Remark"].y == parts["Spare"].y > parts["Intake"].y
    assert parts["Spare"].x > parts["Remark"].x + 20
    assert overlaps(plant) == []
