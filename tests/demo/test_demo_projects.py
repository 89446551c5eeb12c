"""The demo plants as files and as drawings: they open clean, and nothing on their sheets lies on anything else."""

import json
from collections.abc import Iterator
from itertools import combinations
from pathlib import Path

import jsonschema
import pytest

from onelinefault.drawing.overlay_picture import overlay_picture
from onelinefault.drawing.page import Stamp, frame_box, page_shapes, title_block_box
from onelinefault.drawing.shapes import MODULE_DU, Box, Text, bounds
from onelinefault.drawing.sheet import SheetPicture, sheet_picture
from onelinefault.drawing.symbols_marks import fault_pin
from onelinefault.drawing.wire_picture import WIRE_DU, WirePicture, segments
from onelinefault.engine.case import Case
from onelinefault.model.consumers import Bus
from onelinefault.model.fault import Fault, FaultKind, Place
from onelinefault.model.findings import Severity
from onelinefault.model.plant import Plant
from onelinefault.report.overlay_data import overlay_data, roles_of
from onelinefault.store.file_format import plant_text
from onelinefault.store.plant_file import read_plant
from onelinefault.studies import all_findings, study_of

ROOT = Path(__file__).parents[2]
FILES = sorted(ROOT.glob("demo_projects/*/*.plant.json"))
PLANTS = {path.name.removesuffix(".plant.json"): read_plant(path).plant for path in FILES}
SHEETS = [(name, sheet.id) for name, plant in PLANTS.items() for sheet in plant.sheets]
STAMP = Stamp("classical method", "two lines to earth bc, Board A, largest")
TOUCH_DU = 0.5  # what may share an edge may share half a line's breadth

Named = tuple[str, Box]


def pictured(name: str, sheet_id: str) -> SheetPicture:
    """A sheet as drawn, plain."""
    return sheet_picture(PLANTS[name], sheet_id, {})


def bodies(picture: SheetPicture) -> list[Named]:
    """Symbols without leads, bars and notes."""
    return [(part_id, part.body) for part_id, part in picture.parts.items()]


def words(picture: SheetPicture) -> list[Named]:
    """Every line of text beside a symbol."""
    return [(part_id, word.box()) for part_id, part in picture.parts.items() for word in part.words]


def links(picture: SheetPicture) -> list[Named]:
    """The signs by which wires go on on another sheet."""
    return [(key, bounds(wire.shapes[1:])) for key, wire in picture.wires.items() if len(wire.shapes) > 1]


def wire_boxes(wire: WirePicture) -> Iterator[Box]:
    """The straight pieces of a wire as thin boxes."""
    for (ax, ay), (bx, by) in segments(wire.path):
        plain = Box(min(ax, bx) * MODULE_DU, min(ay, by) * MODULE_DU, max(ax, bx) * MODULE_DU, max(ay, by) * MODULE_DU)
        yield plain.grown(WIRE_DU / 2)


def wires(picture: SheetPicture) -> list[Named]:
    """All pieces of all wires."""
    return [(key, box) for key, wire in picture.wires.items() for box in wire_boxes(wire)]


def lying_on(things: list[Named], others: list[Named]) -> list[tuple[str, str]]:
    """Pairs of things that lie on each other."""
    return [(a, b) for a, one in things for b, other in others if one.grown(-TOUCH_DU).overlaps(other)]


def inside(box: Box, outer: Box) -> bool:
    """Whether a box lies wholly in another."""
    return outer.holds(box.left, box.top) and outer.holds(box.right, box.bottom)


def test_there_are_two_of_them_each_with_words_and_figures() -> None:
    assert len(FILES) == 2
    for path in FILES:
        assert path.parent.name == path.name.removesuffix(".plant.json")
        assert {entry.name for entry in path.parent.iterdir()} >= {"README.md", "expected.json", path.name}


@pytest.mark.parametrize("path", FILES, ids=lambda p: p.parent.name)
def test_the_file_opens_whole_and_is_written_back_byte_for_byte(path: Path) -> None:
    opened = read_plant(path)
    assert opened.findings == () and opened.aside == {}
    assert plant_text(opened.plant).encode() == path.read_bytes()


@pytest.mark.parametrize("path", FILES, ids=lambda p: p.parent.name)
def test_the_file_keeps_to_the_published_schema(path: Path) -> None:
    schema = json.loads((ROOT / "resources" / "schema" / "plant.schema.json").read_text(encoding="utf-8"))
    jsonschema.Draft202012Validator(schema).validate(json.loads(path.read_text(encoding="utf-8")))


@pytest.mark.parametrize("name", PLANTS)
def test_the_plant_is_of_a_size_to_look_round_in(name: str) -> None:
    plant = PLANTS[name]
    assert 25 <= len(plant.parts) <= 60
    assert 2 <= len(plant.arrangements) <= 3
    assert all(getattr(plant.document, field) for field in ("name", "customer", "drawn_by", "revision", "date"))
    assert all(plant.on_sheet(sheet.id) for sheet in plant.sheets)
    crossing = [w for w in plant.wires.values() if plant.parts[w.a.part].sheet != plant.parts[w.b.part].sheet]
    assert len(crossing) >= 3
    assert len({mark for part in plant.parts.values() for mark in part.basis.values()}) >= 4


@pytest.mark.parametrize("level", ["max", "min"])
@pytest.mark.parametrize("name", PLANTS)
def test_the_data_give_no_errors_and_no_warnings(name: str, level: str) -> None:
    for arrangement in (None, *(a.id for a in PLANTS[name].arrangements)):
        found = all_findings(PLANTS[name], Case(level=level), arrangement)
        assert [f.message for f in found if f.severity is not Severity.HINT] == []


@pytest.mark.parametrize(("name", "sheet_id"), SHEETS)
def test_no_symbol_lies_on_another(name: str, sheet_id: str) -> None:
    found = bodies(pictured(name, sheet_id)) + links(pictured(name, sheet_id))
    assert [(a, b) for (a, one), (b, other) in combinations(found, 2) if one.grown(-TOUCH_DU).overlaps(other)] == []


@pytest.mark.parametrize(("name", "sheet_id"), SHEETS)
def test_no_words_lie_on_symbols_wires_or_other_words(name: str, sheet_id: str) -> None:
    picture = pictured(name, sheet_id)
    texts = words(picture)
    assert lying_on(texts, bodies(picture) + links(picture)) == []
    assert lying_on(texts, wires(picture)) == []
    assert [(a, b) for (a, one), (b, other) in combinations(texts, 2) if one.grown(-TOUCH_DU).overlaps(other)] == []


@pytest.mark.parametrize(("name", "sheet_id"), SHEETS)
def test_no_wire_runs_through_a_symbol_or_along_another_wire(name: str, sheet_id: str) -> None:
    picture, plant = pictured(name, sheet_id), PLANTS[name]
    ends = {key: {end.part: end.terminal for end in plant.wires[key].ends} for key in picture.wires}
    for key, piece in wires(picture):
        for part_id, body in bodies(picture):
            room = -2 * WIRE_DU if part_id in ends[key] else -TOUCH_DU  # a wire's end touches its own symbol
            if ends[key].get(part_id) != "bar":
                assert not piece.overlaps(body.grown(room)), (key, part_id)
    for (a, one), (b, other) in combinations(picture.wires.items(), 2):
        crossed = [1 for p in wire_boxes(one) for q in wire_boxes(other) if p.grown(-WIRE_DU).overlaps(q)]
        assert crossed == [], (a, b)


@pytest.mark.parametrize(("name", "sheet_id"), SHEETS)
def test_wires_are_straight_but_for_the_ties(name: str, sheet_id: str) -> None:
    picture, plant = pictured(name, sheet_id), PLANTS[name]
    for key, wire in picture.wires.items():
        lying = any(plant.parts[end.part].turn % 2 for end in plant.wires[key].ends)
        assert len(wire.path) <= (3 if lying else 2), key


@pytest.mark.parametrize(("name", "sheet_id"), SHEETS)
def test_all_stands_within_the_border_clear_of_what_the_page_says(name: str, sheet_id: str) -> None:
    picture, plant = pictured(name, sheet_id), PLANTS[name]
    frame = frame_box(picture.sheet)
    page = page_shapes(plant, picture.sheet, STAMP)
    said = [("page", shape.box()) for shape in page if isinstance(shape, Text) and inside(shape.box(), frame)]
    said.append(("title block", title_block_box(picture.sheet)))
    drawn = bodies(picture) + words(picture) + links(picture) + wires(picture)
    assert [key for key, box in drawn if not inside(box, frame)] == []
    assert lying_on(drawn, said) == []


@pytest.mark.parametrize(("name", "sheet_id"), SHEETS)
def test_a_pin_in_the_middle_of_a_bus_hides_nothing(name: str, sheet_id: str) -> None:
    picture, plant = pictured(name, sheet_id), PLANTS[name]
    pin = bounds(fault_pin("three-phase"))
    for part_id in picture.parts:
        bus = plant.parts[part_id]
        if isinstance(bus, Bus):
            here = [(part_id, pin.moved((bus.x + bus.length / 2) * MODULE_DU, bus.y * MODULE_DU))]
            others = [thing for thing in bodies(picture) if thing[0] != part_id]
            above = [(key, box) for key, box in wires(picture) if box.top < bus.y * MODULE_DU - 2 * WIRE_DU]
            assert lying_on(here, others + words(picture) + above) == [], bus.name


@pytest.mark.parametrize("detail", [2, 3])
@pytest.mark.parametrize("kind", FaultKind)
@pytest.mark.parametrize("name", PLANTS)
def test_tags_find_free_places_for_every_bus(name: str, kind: FaultKind, detail: int) -> None:
    plant = PLANTS[name]
    study = study_of(plant, Case())
    pictures = [sheet_picture(plant, sheet.id, roles_of(study.network)) for sheet in plant.sheets]
    for bus in [part for part in plant.parts.values() if isinstance(part, Bus)]:
        result = study.fault(Fault(Place(bus.id), kind))
        for picture in pictures:
            data = overlay_data(plant, result, detail)
            tags = [*overlay_picture(plant, picture, data).boxes.items()]
            assert lying_on(tags, bodies(picture) + words(picture) + links(picture)) == [], bus.name
            assert [pair for pair in combinations(tags, 2) if pair[0][1].overlaps(pair[1][1])] == [], bus.name
            assert [key for key, box in tags if not inside(box, frame_box(picture.sheet))] == [], bus.name


def test_the_plants_are_not_the_same_plant() -> None:
    mill, quarry = (PLANTS[name] for name in ("lindermoor_mill", "sorrel_gap_quarry"))
    assert (mill.document.frequency_hz, quarry.document.frequency_hz) == (50, 60)
    assert levels_kv(mill) == {33, 11, 0.42}
    assert levels_kv(quarry) == {69, 4.16, 0.48}


def levels_kv(plant: Plant) -> set[float]:
    """Nominal voltages of the buses."""
    found = (bus.nominal_voltage for bus in plant.parts.values() if isinstance(bus, Bus))
    return {voltage.to("kV") for voltage in found if voltage is not None}
