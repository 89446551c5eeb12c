"""Gestures of the mouse. Each one lives from press to release, previews what it would do, and ends as one edit.

A gesture never changes the plant: it shows ``Canvas.preview(edit)`` while it moves and hands the edit over when done.
"""

from __future__ import annotations

from typing import TYPE_CHECKING, Protocol

from PySide6.QtCore import QPointF, Qt

from onelinefault.drawing.routing import drag_segment
from onelinefault.drawing.shapes import MODULE_DU, Box, Line, Rect, Shape, Stroke
from onelinefault.model.consumers import Bus
from onelinefault.model.editing import move, move_label, set_corners, set_tag, stretch_bus
from onelinefault.model.edits import Edit
from onelinefault.model.part import Part
from onelinefault.model.parts import terminal_place

if TYPE_CHECKING:
    from PySide6.QtGui import QMouseEvent

    from onelinefault.desktop.canvas import Canvas

_START_DU = 4.0  # the pointer has to go this far before a press becomes a drag
_GUIDE = Stroke("guide", 0.8, (4.0, 3.0))


class Gesture(Protocol):
    """From press to release."""

    def move(self, point: QPointF, event: QMouseEvent) -> None:
        """The pointer has moved."""

    def release(self, point: QPointF, event: QMouseEvent) -> None:
        """The button was let go: do it."""

    def cancel(self) -> None:
        """Escape: leave everything as it was."""


class MoveParts:
    """Drag the selection; a press without a drag is a click on the part that was pressed."""

    def __init__(self, canvas: Canvas, start: QPointF, pressed: str, additive: bool) -> None:
        self._canvas, self._start, self._pressed, self._additive = canvas, start, pressed, additive
        self._plant = canvas.session.plant
        self._edit: Edit | None = None
        self._dragging = False

    def move(self, point: QPointF, event: QMouseEvent) -> None:
        """Preview the selection where it would land, on the module, with guide lines to what it lines up with."""
        delta = point - self._start
        if not self._dragging and max(abs(delta.x()), abs(delta.y())) < _START_DU / self._canvas.view.scale_factor:
            return
        self._dragging = True
        dx, dy = round(delta.x() / MODULE_DU), round(delta.y() / MODULE_DU)
        if event.modifiers() & Qt.KeyboardModifier.AltModifier:  # keep to one direction
            dx, dy = (dx, 0) if abs(dx) >= abs(dy) else (0, dy)
        chosen = [key for key in self._canvas.session.selection if key in self._plant.parts]
        self._edit = move(self._plant, chosen, dx, dy) if dx or dy else None
        self._canvas.preview(self._edit)
        self._canvas.scene.show_guides(alignment_guides(self._canvas, frozenset(chosen)))

    def release(self, point: QPointF, event: QMouseEvent) -> None:
        """Move, or click."""
        self.cancel()
        if self._edit is not None:
            self._canvas.session.apply(self._edit)
        elif not self._dragging:
            self._canvas.clicked_part(self._pressed, self._start, self._additive)

    def cancel(self) -> None:
        """Back to where it was."""
        self._canvas.preview(None)
        self._canvas.scene.show_guides(())


class RubberBand:
    """Drag over empty paper to select what lies wholly inside; with Shift or Ctrl it adds."""

    def __init__(self, canvas: Canvas, start: QPointF, additive: bool) -> None:
        self._canvas, self._start, self._additive = canvas, start, additive
        self._before = canvas.session.selection

    def move(self, point: QPointF, event: QMouseEvent) -> None:
        """Show the band and what it holds."""
        box = _box(self._start, point)
        band = Rect(box.left, box.top, box.width, box.height, 2, Stroke("selection", 1.0, (4.0, 3.0)))
        self._canvas.scene.show_guides((band,))
        inside = self._inside(box)
        self._canvas.session.select(self._before | inside if self._additive else inside)

    def release(self, point: QPointF, event: QMouseEvent) -> None:
        """Keep the selection; a click on nothing clears it."""
        self._canvas.scene.show_guides(())
        if (point - self._start).manhattanLength() < _START_DU and not self._additive:
            self._canvas.session.select(frozenset())

    def cancel(self) -> None:
        """The selection as before."""
        self._canvas.scene.show_guides(())
        self._canvas.session.select(self._before)

    def _inside(self, box: Box) -> frozenset[str]:
        picture = self._canvas.scene.picture
        bodies = {key: p.body for key, p in picture.parts.items()}
        bodies |= {key: w.box for key, w in picture.wires.items()}
        return frozenset(k for k, b in bodies.items() if box.holds(b.left, b.top) and box.holds(b.right, b.bottom))


class StretchBus:
    """Drag one end of a bar; wires stay where they are."""

    def __init__(self, canvas: Canvas, bus_id: str, end: str) -> None:
        self._canvas, self._bus, self._end = canvas, bus_id, end
        self._edit: Edit | None = None

    def move(self, point: QPointF, event: QMouseEvent) -> None:
        """Preview the bar."""
        to = round(point.x() / MODULE_DU), round(point.y() / MODULE_DU)
        self._edit = stretch_bus(self._canvas.session.plant, self._bus, self._end, to)
        self._canvas.preview(self._edit)

    def release(self, point: QPointF, event: QMouseEvent) -> None:
        """Stretch, or click the bus."""
        self.cancel()
        if self._edit is not None:
            self._canvas.session.apply(self._edit)
        else:
            self._canvas.clicked_part(self._bus, point, additive=False)

    def cancel(self) -> None:
        """The bar as before."""
        self._canvas.preview(None)


class DragSegment:
    """Drag one straight piece of a wire sideways; its corners then stay where they were put."""

    def __init__(self, canvas: Canvas, wire_id: str, segment: int, start: QPointF, additive: bool) -> None:
        self._canvas, self._wire, self._segment, self._start = canvas, wire_id, segment, start
        self._additive = additive
        self._path = canvas.scene.picture.wires[wire_id].path
        self._edit: Edit | None = None

    def move(self, point: QPointF, event: QMouseEvent) -> None:
        """Preview the wire."""
        if self._canvas.scene.picture.wires[self._wire].link is not None:
            return  # a wire to another sheet has no corners here
        (ax, _), (bx, _) = self._path[self._segment], self._path[self._segment + 1]
        offset = point.x() - self._start.x() if ax == bx else point.y() - self._start.y()
        delta = round(offset / MODULE_DU)
        if delta == 0 and self._edit is None:
            return
        corners = drag_segment(self._path, self._segment, delta)
        self._edit = set_corners(self._canvas.session.plant, self._wire, corners)
        self._canvas.preview(self._edit)

    def release(self, point: QPointF, event: QMouseEvent) -> None:
        """Keep the corners, or select the wire."""
        self.cancel()
        if self._edit is not None and not self._edit.empty:
            self._canvas.session.apply(self._edit)
        else:
            self._canvas.clicked_wire(self._wire, self._additive)

    def cancel(self) -> None:
        """The wire as before."""
        self._canvas.preview(None)


class MoveTag:
    """Drag a callout; it stays where it was put."""

    def __init__(self, canvas: Canvas, key: str, start: QPointF) -> None:
        self._canvas, self._key, self._start = canvas, key, start
        item = canvas.scene.tag_items[key]
        self._corner, self._anchor = (item.box.left, item.box.top), item.anchor
        self._edit: Edit | None = None

    def move(self, point: QPointF, event: QMouseEvent) -> None:
        """Preview the callout with its leader."""
        delta = point - self._start
        left, top = self._corner[0] + delta.x(), self._corner[1] + delta.y()
        offset = round((left - self._anchor[0]) / MODULE_DU), round((top - self._anchor[1]) / MODULE_DU)
        self._edit = set_tag(self._canvas.session.plant, self._key, offset)
        self._canvas.preview(self._edit)

    def release(self, point: QPointF, event: QMouseEvent) -> None:
        """Leave it there."""
        self.cancel()
        if self._edit is not None and not self._edit.empty:
            self._canvas.session.apply(self._edit)

    def cancel(self) -> None:
        """The callout as before."""
        self._canvas.preview(None)


class MoveLabel:
    """Drag a part's words away from its symbol."""

    def __init__(self, canvas: Canvas, part_id: str, start: QPointF, additive: bool) -> None:
        self._canvas, self._part, self._start, self._additive = canvas, part_id, start, additive
        self._edit: Edit | None = None

    def move(self, point: QPointF, event: QMouseEvent) -> None:
        """Preview the words."""
        delta = point - self._start
        dx, dy = round(delta.x() / MODULE_DU), round(delta.y() / MODULE_DU)
        plant = self._canvas.session.plant
        part = plant.parts[self._part]
        if self._edit is None and not (dx or dy):
            return
        self._edit = move_label(plant, self._part, part.label_dx + dx, part.label_dy + dy)
        self._canvas.preview(self._edit)

    def release(self, point: QPointF, event: QMouseEvent) -> None:
        """Leave them there, or select the part."""
        self.cancel()
        if self._edit is not None and not self._edit.empty:
            self._canvas.session.apply(self._edit)
        elif self._edit is None:
            self._canvas.select(self._part, self._additive)

    def cancel(self) -> None:
        """The words as before."""
        self._canvas.preview(None)


class SlidePin:
    """Slide the fault pin along the bar or the cable it stands on."""

    def __init__(self, canvas: Canvas, part_id: str) -> None:
        self._canvas, self._part = canvas, part_id

    def move(self, point: QPointF, event: QMouseEvent) -> None:
        """The pin follows; figures follow as fast as they are solved."""
        self._canvas.fault_at(self._part, point)

    def release(self, point: QPointF, event: QMouseEvent) -> None:
        """It stays there."""

    def cancel(self) -> None:
        """The pin stays where it is now."""


def alignment_guides(canvas: Canvas, moving: frozenset[str]) -> tuple[Shape, ...]:
    """Thin lines from moving terminals to terminals of resting parts that they line up with."""
    plant, picture = canvas.scene.plant, canvas.scene.picture
    columns: dict[int, list[int]] = {}
    rows: dict[int, list[int]] = {}
    for key in picture.parts.keys() - moving:
        for x, y in _terminal_places(plant.parts[key]):
            columns.setdefault(x, []).append(y)
            rows.setdefault(y, []).append(x)
    shapes: list[Shape] = []
    for key in moving & picture.parts.keys():
        for x, y in _terminal_places(plant.parts[key]):
            if x in columns:
                nearest = min(columns[x], key=lambda other: abs(other - y))
                shapes.append(_guide(x, y, x, nearest))
            if y in rows:
                nearest = min(rows[y], key=lambda other: abs(other - x))
                shapes.append(_guide(x, y, nearest, y))
    return tuple(shapes)


def _terminal_places(part: Part) -> list[tuple[int, int]]:
    if isinstance(part, Bus):
        return [terminal_place(part, "bar", 0), terminal_place(part, "bar", part.length)]
    return [terminal_place(part, terminal.name) for terminal in part.terminals]


def _guide(x1: int, y1: int, x2: int, y2: int) -> Line:
    return Line(x1 * MODULE_DU, y1 * MODULE_DU, x2 * MODULE_DU, y2 * MODULE_DU, _GUIDE)


def _box(a: QPointF, b: QPointF) -> Box:
    return Box(min(a.x(), b.x()), min(a.y(), b.y()), max(a.x(), b.x()), max(a.y(), b.y()))
