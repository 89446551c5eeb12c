"""Gestures with real mouse events: each is one step, previews nothing into the plant, and undoes."""

import pytest
from PySide6.QtCore import QPointF, Qt
from PySide6.QtGui import QDragEnterEvent, QDropEvent
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QApplication

from onelinefault.desktop.drop import part_mime
from onelinefault.drawing.sheet import sheet_picture
from onelinefault.model.consumers import Bus
from onelinefault.model.editing import add_sheet, move_to_sheet
from onelinefault.model.plant import End
from tests.desktop.conftest import Desk

SHIFT = Qt.KeyboardModifier.ShiftModifier


def shows_what_the_plant_holds(desk: Desk) -> bool:
    fresh = sheet_picture(desk.session.plant, desk.session.sheet_id, {})
    parts = {key: item.picture for key, item in desk.canvas.scene.part_items.items()}
    wires = {key: item.picture for key, item in desk.canvas.scene.wire_items.items()}
    return parts == dict(fresh.parts) and wires == dict(fresh.wires)


def test_dragging_a_part_moves_it_on_the_module_and_keeps_its_joints(desk: Desk) -> None:
    before = desk.session.plant
    desk.hand.drag((20, 46), (27.3, 49.8))
    generator = desk.session.plant.parts[desk.ids["g1"]]
    assert (generator.x, generator.y) == (27, 50)
    assert desk.session.plant.wires.keys() == before.wires.keys()
    assert desk.session.history.sentences[-1].startswith("Move")
    assert shows_what_the_plant_holds(desk)
    desk.session.undo()
    assert desk.session.plant is before
    assert shows_what_the_plant_holds(desk)


def test_escape_in_the_middle_of_a_drag_leaves_everything(desk: Desk) -> None:
    before = desk.session.plant
    viewport = desk.canvas.view.viewport()
    QTest.mousePress(viewport, Qt.MouseButton.LeftButton, Qt.KeyboardModifier.NoModifier, desk.hand.at(20, 46))
    desk.hand.move(26, 50)
    desk.hand.move(30, 50)
    assert desk.canvas.scene.plant is not before
    desk.canvas.escape()
    QTest.mouseRelease(viewport, Qt.MouseButton.LeftButton, Qt.KeyboardModifier.NoModifier, desk.hand.at(30, 50))
    assert desk.session.plant is before
    assert shows_what_the_plant_holds(desk)


def test_a_click_on_a_bus_selects_and_faults_it_there(desk: Desk) -> None:
    desk.hand.click(24, 34)
    assert desk.session.selection == {desk.ids["board"]}
    assert desk.session.fault is not None
    assert (desk.session.fault.place.part, desk.session.fault.place.at) == (desk.ids["board"], 8)
    desk.canvas.escape()
    assert desk.session.fault is None


def test_rubber_band_and_additive_selection(desk: Desk) -> None:
    desk.hand.drag((14, 41), (60, 60))
    assert {desk.ids["g1"], desk.ids["m1"]} <= desk.session.selection
    assert desk.ids["board"] not in desk.session.selection
    desk.hand.click(30, 23.5, SHIFT)
    assert desk.ids["t1"] in desk.session.selection
    desk.hand.click(30, 23.5, SHIFT)
    assert desk.ids["t1"] not in desk.session.selection


def test_a_wire_by_drag_from_a_terminal_to_a_bus(desk: Desk) -> None:
    desk.canvas.start_placing("load", {})
    desk.hand.move(60, 50)
    desk.hand.click(60, 50)
    load = next(p for p in desk.session.plant.parts.values() if p.kind == "load")
    assert (load.x, load.y) == (60, 50)
    desk.hand.drag((60, 48), (48, 34))
    wire = list(desk.session.plant.wires.values())[-1]
    assert wire.a == End(load.id, "line") and wire.b == End(desk.ids["board"], "bar", 32)
    assert shows_what_the_plant_holds(desk)


def test_a_wire_click_by_click_with_a_corner_of_ones_own(desk: Desk) -> None:
    desk.canvas.start_placing("load", {})
    desk.hand.click(60, 50)
    load = next(p for p in desk.session.plant.parts.values() if p.kind == "load")
    desk.hand.click(60, 48)
    desk.hand.click(66, 44)
    desk.hand.click(50, 34)
    wire = list(desk.session.plant.wires.values())[-1]
    assert {wire.a.part, wire.b.part} == {load.id, desk.ids["board"]}
    assert (66, 44) in wire.corners
    assert (66, 44) in desk.canvas.scene.picture.wires[wire.id].path


def test_a_wire_to_nowhere_is_refused_in_words(desk: Desk, qtbot: object) -> None:
    said: list[str] = []
    desk.session.said.connect(said.append)
    before = desk.session.plant
    desk.hand.drag((20, 43), (70, 60))
    assert desk.session.plant is before or desk.session.plant == before
    assert any("wire ends at a terminal" in s for s in said)


def test_a_breaker_placed_on_a_wire_is_inserted(desk: Desk) -> None:
    desk.canvas.start_placing("breaker", {})
    desk.hand.move(20, 39)
    desk.hand.click(20, 39)
    plant = desk.session.plant
    breaker = next(p for p in plant.parts.values() if p.kind == "breaker" and p.id != desk.ids["q1"])
    assert len(plant.wires_of(breaker.id)) == 2
    neighbours = {e.part for w in plant.wires_of(breaker.id) for e in w.ends} - {breaker.id}
    assert neighbours == {desk.ids["board"], desk.ids["g1"]}
    assert len(desk.session.history.done) == 1


def test_turning_what_hangs_at_the_pointer(desk: Desk) -> None:
    desk.canvas.start_placing("fuse", {})
    desk.hand.move(70, 50)
    QTest.keyClick(desk.canvas.view, Qt.Key.Key_R)
    desk.hand.click(70, 50)
    fuse = next(p for p in desk.session.plant.parts.values() if p.kind == "fuse")
    assert fuse.turn == 1


def test_stretching_a_bus_keeps_wires_where_they_are(desk: Desk) -> None:
    places = {w.id: e.at for w in desk.session.plant.wires.values() for e in w.ends if e.part == desk.ids["board"]}
    desk.session.select(frozenset({desk.ids["board"]}))
    desk.hand.drag((52, 34), (60, 34))
    board = desk.session.plant.parts[desk.ids["board"]]
    assert isinstance(board, Bus) and board.length == 44
    after = {w.id: e.at for w in desk.session.plant.wires.values() for e in w.ends if e.part == desk.ids["board"]}
    assert after == places


def test_dragging_a_piece_of_wire_keeps_the_corners(desk: Desk) -> None:
    wire = desk.ids["to_pumps"]
    path = desk.canvas.scene.picture.wires[wire].path
    middle = next(i for i in range(len(path) - 1) if path[i][1] == path[i + 1][1])
    x, y = (path[middle][0] + path[middle + 1][0]) / 2, path[middle][1]
    desk.hand.drag((x, y), (x, y + 2))
    corners = desk.session.plant.wires[wire].corners
    assert corners and all(cy == y + 2 for _, cy in corners)
    assert shows_what_the_plant_holds(desk)


def test_double_click_renames_in_place(desk: Desk) -> None:
    desk.hand.double(20, 46)
    line = QApplication.focusWidget()
    assert line is not None
    QTest.keyClicks(line, "Turbine")
    QTest.keyClick(line, Qt.Key.Key_Return)
    assert desk.session.plant.parts[desk.ids["g1"]].name == "Turbine"


def test_a_part_dropped_from_the_shelf(desk: Desk) -> None:
    canvas = desk.canvas
    place = QPointF(canvas.view.mapTo(canvas, desk.hand.at(66, 46)))
    data = part_mime("capacitor", {"rated_power": "2 Mvar"})
    copy, left, none = Qt.DropAction.CopyAction, Qt.MouseButton.LeftButton, Qt.KeyboardModifier.NoModifier
    QApplication.sendEvent(canvas, QDragEnterEvent(place.toPoint(), copy, data, left, none))
    QApplication.sendEvent(canvas, QDropEvent(place, copy, data, left, none))
    capacitor = next(p for p in desk.session.plant.parts.values() if p.kind == "capacitor")
    assert (capacitor.x, capacitor.y) == (66, 46)
    assert capacitor.text("rated_power") == "2 Mvar"
    assert canvas.mode is None


def test_zoom_keeps_what_is_under_the_pointer(desk: Desk) -> None:
    view = desk.canvas.view
    spot = desk.hand.at(30, 22)
    before = view.mapToScene(spot)
    view.zoom(1.7, spot)
    after = view.mapToScene(spot)
    assert abs(after.x() - before.x()) < 1.5 and abs(after.y() - before.y()) < 1.5


def test_moving_a_label(desk: Desk) -> None:
    word = desk.canvas.scene.picture.parts[desk.ids["g1"]].words[0].box()
    x, y = (word.left + word.right) / 20, (word.top + word.bottom) / 20
    desk.hand.drag((x, y), (x + 3, y - 1))
    part = desk.session.plant.parts[desk.ids["g1"]]
    assert (part.label_dx, part.label_dy) == (3, -1)


@pytest.mark.parametrize("name", ["grid", "t1", "m1"])
def test_faulting_any_part_by_the_fault_key(desk: Desk, name: str) -> None:
    part = desk.session.plant.parts[desk.ids[name]]
    desk.hand.move(part.x, part.y)
    desk.canvas.fault_here()
    assert desk.session.fault is not None
    assert desk.session.fault.place.part == part.id


def test_the_pin_on_a_cable_stands_at_a_fraction_and_slides(desk: Desk) -> None:
    desk.hand.move(40, 42)
    desk.canvas.fault_here()
    fault = desk.session.fault
    assert fault is not None and fault.place.fraction == 0.5
    desk.canvas.fault_at(desk.ids["w1"], QPointF(400, 390))
    assert desk.session.fault is not None and desk.session.fault.place.fraction == 0.0


def test_double_click_on_a_link_follows_the_wire_to_its_other_sheet(desk: Desk) -> None:
    session = desk.session
    session.apply(add_sheet(session.plant, "Pumps"))
    other = session.plant.sheets[-1].id
    session.apply(move_to_sheet(session.plant, [desk.ids["m1"]], other))
    link = desk.canvas.scene.picture.wires[desk.ids["to_pumps"]].link
    assert link is not None
    x, y = link.centre
    desk.hand.double(x / 10, y / 10)
    assert session.sheet_id == other
