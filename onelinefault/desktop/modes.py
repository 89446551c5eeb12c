"""Modes last over several clicks: placing parts from the shelf, wiring point by point, faulting."""

from __future__ import annotations

from collections.abc import Sequence
from typing import TYPE_CHECKING, Any, Protocol

from PySide6.QtCore import QPointF, Qt

from onelinefault.desktop.hit import end_at, hit_at
from onelinefault.drawing.part_picture import part_picture
from onelinefault.drawing.shapes import MODULE_DU, Circle, Polyline, Shape, Stroke
from onelinefault.drawing.wire_picture import Obstacles, obstacle, wire_path
from onelinefault.errors import OneLineFaultError
from onelinefault.model.editing import WirePoint, connect, insert_into_wire, place
from onelinefault.model.edits import Edit, apply
from onelinefault.model.parts import part_class, terminal_place
from onelinefault.model.plant import End, Plant, Point, Wire

if TYPE_CHECKING:
    from PySide6.QtGui import QMouseEvent

    from onelinefault.desktop.canvas import Canvas

_SERIES_TERMINALS = 2
_WIRING = Stroke("selection", 1.8)


class Mode(Protocol):
    """Takes every click until it ends."""

    sentence: str

    def press(self, point: QPointF, event: QMouseEvent) -> None:
        """A click."""

    def move(self, point: QPointF, event: QMouseEvent | None) -> None:
        """The pointer has moved."""

    def release(self, point: QPointF, event: QMouseEvent) -> None:
        """The button was let go."""

    def end(self) -> None:
        """The mode is over: take away what it showed."""


class Placing:
    """A new part hangs at the pointer; a click places it, on a wire it is inserted; Shift keeps the mode."""

    sentence = "Click to place; on a wire it is inserted. R turns it, Shift keeps placing, Escape ends."

    def __init__(self, canvas: Canvas, kind: str, presets: dict[str, Any]) -> None:
        self._canvas, self._kind, self._presets = canvas, kind, presets
        self._turn = 0
        self._last: QPointF | None = None

    def press(self, point: QPointF, event: QMouseEvent) -> None:
        """Place it here."""
        if self.place_at(point) and not event.modifiers() & Qt.KeyboardModifier.ShiftModifier:
            self._canvas.end_mode()

    def move(self, point: QPointF, event: QMouseEvent | None) -> None:
        """The ghost follows on the module."""
        self._last = point
        self._canvas.scene.show_guides(self._ghost(point))

    def release(self, point: QPointF, event: QMouseEvent) -> None:
        """Nothing: the press has done it."""

    def turn(self) -> None:
        """Turn what hangs at the pointer by a quarter."""
        self._turn = (self._turn + 1) % 4
        if self._last is not None:
            self.move(self._last, None)

    def end(self) -> None:
        """Take the ghost away."""
        self._canvas.scene.show_guides(())

    def place_at(self, point: QPointF) -> bool:
        """Place the part at a point of the scene, into the wire that lies there if it can; whether it was done."""
        edit = self._edit_at(point)
        if edit is None or not self._canvas.session.apply(edit):
            return False
        self._canvas.session.select(
            frozenset(k for k, part in edit.parts.items() if part is not None and k not in self._old)
        )
        return True

    def _edit_at(self, point: QPointF) -> Edit | None:
        session = self._canvas.session
        self._old = session.plant.parts.keys()
        x, y = round(point.x() / MODULE_DU), round(point.y() / MODULE_DU)
        try:
            hit = hit_at(self._canvas.scene, point.x(), point.y())
            if hit.kind == "wire" and len(part_class(self._kind).terminals) == _SERIES_TERMINALS:
                path = self._canvas.scene.picture.wires[hit.key].path
                return insert_into_wire(session.plant, hit.key, self._kind, x, y, path, **self._presets)
            return place(session.plant, self._kind, session.sheet_id, x, y, self._turn, **self._presets)
        except OneLineFaultError as error:
            session.said.emit(str(error))
            return None

    def _ghost(self, point: QPointF) -> tuple[Shape, ...]:
        edit = self._quiet_edit(point)
        if edit is None:
            return ()
        old = self._canvas.session.plant.parts
        fresh = [part for key, part in edit.parts.items() if part is not None and key not in old]
        return tuple(shape for part in fresh for shape in part_picture(part, {}).shapes)

    def _quiet_edit(self, point: QPointF) -> Edit | None:
        x, y = round(point.x() / MODULE_DU), round(point.y() / MODULE_DU)
        session = self._canvas.session
        try:
            return place(session.plant, self._kind, session.sheet_id, x, y, self._turn, **self._presets)
        except OneLineFaultError:
            return None


class Wiring:
    """Draw a wire: by drag from a terminal, or click by click; clicks on empty paper set corners."""

    sentence = "Click a terminal, a bus or a wire to end the wire; clicks on paper set corners. Escape ends."

    def __init__(self, canvas: Canvas, start: End | None, at: QPointF | None = None) -> None:
        self._canvas, self._start = canvas, start
        self._corners: list[Point] = []
        self._pressed_at = at
        self._dragging = at is not None
        self._obstacles: Obstacles | None = None

    def press(self, point: QPointF, event: QMouseEvent) -> None:
        """Start, set a corner, or end."""
        end = end_at(self._canvas.scene, point.x(), point.y())
        if self._start is None:
            self._start = end
            if end is None:
                self._canvas.session.said.emit("A wire starts at a terminal or on a bus.")
        elif not self._finish(point, end):
            self._corners.append((round(point.x() / MODULE_DU), round(point.y() / MODULE_DU)))

    def move(self, point: QPointF, event: QMouseEvent | None) -> None:
        """Show the wire as it would run."""
        self._canvas.scene.show_guides(self._preview(point))

    def release(self, point: QPointF, event: QMouseEvent) -> None:
        """The end of a drag; a press without a drag goes on click by click."""
        if not self._dragging or self._pressed_at is None:
            return
        self._dragging = False
        if (point - self._pressed_at).manhattanLength() < MODULE_DU / 2:
            return
        if not self._finish(point, end_at(self._canvas.scene, point.x(), point.y())):
            self._canvas.session.said.emit("A wire ends at a terminal, on a bus or on another wire.")
            self._canvas.end_mode()

    def end(self) -> None:
        """Take the preview away."""
        self._canvas.scene.show_guides(())

    def _finish(self, point: QPointF, end: End | None) -> bool:
        assert self._start is not None
        session = self._canvas.session
        try:
            edit = self._edit_to(point, end)
        except OneLineFaultError as error:
            session.said.emit(str(error))
            return True
        if edit is None:
            return False
        session.apply(edit)
        self._canvas.end_mode()
        return True

    def _edit_to(self, point: QPointF, end: End | None) -> Edit | None:
        assert self._start is not None
        plant = self._canvas.session.plant
        if end is not None:
            return connect(plant, self._start, end, tuple(self._corners))
        hit = hit_at(self._canvas.scene, point.x(), point.y())
        if hit.kind == "wire":
            x, y = nearest_on_path(self._canvas.scene.picture.wires[hit.key].path, hit.segment, point)
            return connect(plant, self._start, WirePoint(hit.key, x, y), tuple(self._corners))
        return None

    def _preview(self, point: QPointF) -> tuple[Shape, ...]:
        target = end_at(self._canvas.scene, point.x(), point.y())
        marks: list[Shape] = []
        if target is not None:
            marks.append(_ring(self._canvas.scene.plant, target))
        if self._start is None:
            return tuple(marks)
        here = round(point.x() / MODULE_DU), round(point.y() / MODULE_DU)
        try:
            path = self._path(target, here)
        except OneLineFaultError:
            path = (here, here)
        return (Polyline(tuple((x * MODULE_DU, y * MODULE_DU) for x, y in path), _WIRING), *marks)

    def _path(self, target: End | None, here: Point) -> tuple[Point, ...]:
        """The route to a terminal, or to the bare pointer by way of a joint that is never placed."""
        assert self._start is not None
        plant = self._canvas.scene.plant
        if self._obstacles is None:
            self._obstacles = Obstacles()
            for key, picture in self._canvas.scene.picture.parts.items():
                self._obstacles.put(key, obstacle(picture))
        if target is None:
            edit = place(plant, "bus", self._canvas.session.sheet_id, *here, length=0)
            plant = apply(plant, edit)
            target = End(next(iter(edit.parts)), "bar", 0)
        return wire_path(plant, Wire("new", self._start, target, tuple(self._corners)), self._obstacles)


class Faulting:
    """Every click puts the pin: on a bus, along a cable, at a terminal."""

    sentence = "Click a bus, or along a cable, to fault it. Keys 1 to 4 choose the kind, Escape ends."

    def __init__(self, canvas: Canvas) -> None:
        self._canvas = canvas
        self._down = False

    def press(self, point: QPointF, event: QMouseEvent) -> None:
        """Put the pin here."""
        self._down = self._canvas.fault_under(point)

    def move(self, point: QPointF, event: QMouseEvent | None) -> None:
        """With the button down the pin slides."""
        fault = self._canvas.session.fault
        if self._down and fault is not None:
            self._canvas.fault_at(fault.place.part, point)

    def release(self, point: QPointF, event: QMouseEvent) -> None:
        """It stays."""
        self._down = False

    def end(self) -> None:
        """Nothing was shown."""


def nearest_on_path(path: Sequence[Point], segment: int, point: QPointF) -> Point:
    """The module on one straight piece of a wire that is nearest to a point (du)."""
    (ax, ay), (bx, by) = path[segment], path[segment + 1]
    x, y = round(point.x() / MODULE_DU), round(point.y() / MODULE_DU)
    return min(max(x, min(ax, bx)), max(ax, bx)), min(max(y, min(ay, by)), max(ay, by))


def _ring(plant: Plant, end: End) -> Circle:
    x, y = terminal_place(plant.parts[end.part], end.terminal, end.at)
    return Circle(x * MODULE_DU, y * MODULE_DU, 5, Stroke("selection", 1.6))
