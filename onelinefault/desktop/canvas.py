"""The canvas: the view of the sheet, the gesture or mode in hand, and the fault's overlay on it."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from PySide6.QtCore import QPoint, QPointF, QRectF, Qt, QTimer, Signal
from PySide6.QtGui import QKeyEvent, QMouseEvent
from PySide6.QtWidgets import QVBoxLayout, QWidget

from onelinefault.desktop.drop import PartDrops
from onelinefault.desktop.fault_places import fault_place, fault_place_under
from onelinefault.desktop.gestures import (
    DragSegment,
    Gesture,
    MoveLabel,
    MoveParts,
    MoveTag,
    RubberBand,
    SlidePin,
    StretchBus,
)
from onelinefault.desktop.hit import end_at, hit_at
from onelinefault.desktop.modes import Faulting, Mode, Placing, Wiring
from onelinefault.desktop.name_editor import NameEditor
from onelinefault.desktop.scene import SheetScene
from onelinefault.desktop.view import SheetView
from onelinefault.model.consumers import Bus
from onelinefault.model.edits import Edit, apply
from onelinefault.model.fault import Fault, Place

if TYPE_CHECKING:
    from onelinefault.desktop.session import Session
    from onelinefault.desktop.solver import Solver

_ADDITIVE = Qt.KeyboardModifier.ShiftModifier | Qt.KeyboardModifier.ControlModifier


class Canvas(PartDrops):
    """The sheet with everything a hand can do on it. menu_wanted: (hit, place on the screen); mode_changed."""

    menu_wanted = Signal(object, QPoint)
    mode_changed = Signal()

    def __init__(self, session: Session, solver: Solver, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self.session, self.solver = session, solver
        self.scene = SheetScene(session.plant)
        self.view = SheetView(self.scene)
        self.mode: Mode | None = None
        self._gesture: Gesture | None = None
        self._editor: NameEditor | None = None
        layout = QVBoxLayout(self)
        layout.setContentsMargins(0, 0, 0, 0)
        layout.addWidget(self.view)
        self.setFocusProxy(self.view)
        self.view.viewport().setAcceptDrops(False)  # drops of parts come to the canvas itself
        self._connect()

    def _connect(self) -> None:
        self.view.pressed.connect(self._press)
        self.view.moved.connect(self._move)
        self.view.released.connect(self._release)
        self.view.doubled.connect(self._double)
        self.view.menu_wanted.connect(self._ask_menu)
        self.view.scaled.connect(self.scene.show_scale)
        self.session.plant_changed.connect(self._plant_changed)
        self.session.sheet_changed.connect(self._sheet_changed)
        self.session.selection_changed.connect(self._selection_changed)
        self.session.fault_changed.connect(self.show_answer)
        self.session.choices_changed.connect(self.show_answer)
        self.solver.changed.connect(self.show_answer)

    # what the window asks for

    def start_placing(self, kind: str, presets: dict[str, Any] | None = None) -> None:
        """Let a new part hang at the pointer."""
        self._begin(Placing(self, kind, dict(presets or {})))

    def start_wire(self) -> None:
        """Draw a wire click by click, from what is under the pointer if that can start one."""
        point = self.view.last_point
        self._begin(Wiring(self, end_at(self.scene, point.x(), point.y())))

    def start_faulting(self) -> None:
        """Every click puts the fault pin, until Escape."""
        self._begin(Faulting(self))

    def fault_here(self) -> None:
        """Fault what is under the pointer; else the selected bus; else the next click."""
        chosen = [key for key in self.session.selection if key in self.scene.picture.parts]
        if not self.fault_under(self.view.last_point) and not (len(chosen) == 1 and self.fault_part(chosen[0])):
            self.start_faulting()

    def rename_selected(self) -> None:
        """Rename the one selected part in place."""
        chosen = [key for key in self.session.selection if key in self.scene.picture.parts]
        if len(chosen) == 1:
            self._rename(chosen[0])

    def fit(self) -> None:
        """Show the whole sheet."""
        self.view.fit()

    def fit_selection(self) -> None:
        """Show what is selected, or the whole sheet."""
        items = [*self.scene.part_items.items(), *self.scene.wire_items.items()]
        rect = QRectF()
        for key, item in items:
            if key in self.session.selection:
                rect = rect.united(item.boundingRect())
        self.view.fit(rect.adjusted(-80, -80, 80, 80) if not rect.isEmpty() else None)

    def zoom_in(self) -> None:
        """Nearer."""
        self.view.zoom(1.25)

    def zoom_out(self) -> None:
        """Farther."""
        self.view.zoom(0.8)

    def centre_on(self, part_id: str) -> None:
        """Turn to a part's sheet and bring it into view."""
        part = self.session.plant.parts.get(part_id)
        if part is not None:
            self.session.show_sheet(part.sheet)
            self.view.ensureVisible(self.scene.part_items[part_id].boundingRect(), 60, 60)

    def escape(self) -> None:
        """Leave what is under way: a gesture, a mode, then the fault, then the selection."""
        if self._gesture is not None:
            self._gesture.cancel()
            self._gesture = None
        elif self.mode is not None:
            self.end_mode()
        elif self.session.fault is not None:
            self.session.set_fault(None)
        else:
            self.session.select(frozenset())

    def end_mode(self) -> None:
        """Back to selecting."""
        if self.mode is not None:
            self.mode.end()
            self.mode = None
            self.view.viewport().unsetCursor()
            self.mode_changed.emit()

    # what gestures and modes ask for

    def preview(self, edit: Edit | None) -> None:
        """Show the plant as it would be after an edit; None shows it as it is."""
        plant = self.session.plant
        self.scene.show_plant(plant if edit is None else apply(plant, edit))

    def select(self, key: str, additive: bool) -> None:
        """Select one thing, or add or take it away."""
        before = self.session.selection
        self.session.select(before ^ {key} if additive else frozenset({key}))

    def clicked_part(self, key: str, point: QPointF, additive: bool) -> None:
        """A click on a part: select it; a bus is faulted too, that is the program's one gesture to an answer."""
        self.select(key, additive)
        part = self.session.plant.parts.get(key)
        if isinstance(part, Bus) and not additive:
            self.fault_at(key, point)

    def clicked_wire(self, key: str, additive: bool) -> None:
        """A click on a wire selects it."""
        self.select(key, additive)

    def fault_under(self, point: QPointF) -> bool:
        """Put the pin on what lies at a point; whether there was anything to fault."""
        return self._put(fault_place_under(self.scene, point))

    def fault_at(self, key: str, point: QPointF) -> bool:
        """Fault a part at the place nearest to a point; whether that can be."""
        return self._put(fault_place(self.session.plant, key, point))

    def fault_part(self, key: str) -> bool:
        """Fault a part at its first terminal; whether it has one."""
        return self._put(fault_place(self.session.plant, key, None))

    def _put(self, place: Place | None) -> bool:
        if place is not None:
            choices = self.session.choices
            self.session.set_fault(Fault(place, choices.kind, choices.phases))
        return place is not None

    # the mouse

    def _press(self, point: QPointF, event: QMouseEvent) -> None:
        self.view.setFocus()
        if self.mode is not None:
            self.mode.press(point, event)
        elif event.button() == Qt.MouseButton.LeftButton:
            self._gesture = self._gesture_for(point, event)

    def _gesture_for(self, point: QPointF, event: QMouseEvent) -> Gesture | None:
        additive = bool(event.modifiers() & _ADDITIVE)
        hit = hit_at(self.scene, point.x(), point.y(), min(max(1.0, 1 / self.view.scale_factor), 2.5))
        if self.session.fault is not None and self.scene.pin_rect().contains(point):
            return SlidePin(self, self.session.fault.place.part)
        if hit.kind == "terminal" and hit.end is not None and not additive:
            self._begin(Wiring(self, hit.end, point))
            return None
        chosen = hit.key in self.session.selection
        if hit.kind == "bar-end" and hit.end is not None and chosen:
            return StretchBus(self, hit.key, hit.end.terminal)
        match hit.kind:
            case "tag":
                gesture: Gesture = MoveTag(self, hit.key, point)
            case "wire":
                gesture = DragSegment(self, hit.key, hit.segment, point, additive)
            case "words":
                gesture = MoveLabel(self, hit.key, point, additive)
            case "nothing":
                gesture = RubberBand(self, point, additive)
            case _:
                gesture = self._grab(hit.key, point, additive)
        return gesture

    def _grab(self, key: str, point: QPointF, additive: bool) -> Gesture:
        if key not in self.session.selection and not additive:
            self.session.select(frozenset({key}))
        return MoveParts(self, point, key, additive)

    def _move(self, point: QPointF, event: QMouseEvent) -> None:
        if self.mode is not None:
            self.mode.move(point, event)
        elif self._gesture is not None:
            self._gesture.move(point, event)

    def _release(self, point: QPointF, event: QMouseEvent) -> None:
        if self.mode is not None:
            self.mode.release(point, event)
        elif self._gesture is not None:
            gesture, self._gesture = self._gesture, None
            gesture.release(point, event)

    def _double(self, point: QPointF, event: QMouseEvent) -> None:
        hit = hit_at(self.scene, point.x(), point.y())
        if self.mode is None and hit.kind in ("part", "words", "bar-end"):
            self._rename(hit.key)
        elif self.mode is None and hit.kind == "wire":
            self._follow(hit.key)

    def _follow(self, wire_id: str) -> None:
        """Turn to the sheet on which a wire goes on, with its other end in view."""
        wire, plant = self.session.plant.wires[wire_id], self.session.plant
        away = [end.part for end in wire.ends if plant.parts[end.part].sheet != self.session.sheet_id]
        if away:
            self.centre_on(away[0])

    def _ask_menu(self, point: QPointF, screen: QPoint) -> None:
        if self.mode is not None:
            self.end_mode()
            return
        hit = hit_at(self.scene, point.x(), point.y())
        if hit.key and hit.kind != "tag" and hit.key not in self.session.selection:
            self.session.select(frozenset({hit.key}))
        self.menu_wanted.emit(hit, screen)

    def _begin(self, mode: Mode) -> None:
        self.end_mode()
        self.mode = mode
        self.view.viewport().setCursor(Qt.CursorShape.CrossCursor)
        self.session.said.emit(mode.sentence)
        self.mode_changed.emit()
        self.view.setFocus()

    def _rename(self, key: str) -> None:
        self._editor = NameEditor(self, key)

    # keys that belong to what is under way

    def keyPressEvent(self, event: QKeyEvent) -> None:
        """R turns what hangs at the pointer."""
        if isinstance(self.mode, Placing) and event.key() == Qt.Key.Key_R:
            self.mode.turn()
            return
        event.ignore()

    # parts dragged from the shelf (see PartDrops)

    def drag_entered(self, kind: str, presets: dict[str, Any]) -> None:
        """A part from the shelf hangs at the pointer."""
        self._begin(Placing(self, kind, presets))

    def dragged(self, point: QPointF) -> None:
        """It follows the pointer."""
        if self.mode is not None:
            self.mode.move(self._scene_point(point), None)

    def drag_left(self) -> None:
        """It has gone again."""
        self.end_mode()

    def dropped(self, point: QPointF) -> None:
        """It is placed."""
        if isinstance(self.mode, Placing):
            self.mode.place_at(self._scene_point(point))
            self.end_mode()
            self.view.setFocus()

    def _scene_point(self, position: QPointF) -> QPointF:
        return self.view.mapToScene(self.view.mapFrom(self, position.toPoint()))

    # what the session and the solver say

    def _plant_changed(self, before: object, after: object) -> None:
        if self.session.plant.sheet(self.scene.picture.sheet.id) is None:
            return  # the sheet is gone; sheet_changed follows
        self.scene.show_plant(self.session.plant)

    def _sheet_changed(self) -> None:
        self.scene.turn_to(self.session.plant, self.session.sheet_id)
        self.scene.show_selection(frozenset())
        self.scene.show_selection(self.session.selection)
        QTimer.singleShot(0, self.view.fit)

    def _selection_changed(self) -> None:
        self.scene.show_selection(self.session.selection)

    def show_answer(self) -> None:
        """Show the present answer: colours by voltage, and the fault's figures, greyed while they are stale."""
        answer, session = self.solver.answer, self.session
        if answer is None:
            return
        from onelinefault.report.drawing import stamp_of  # noqa: PLC0415 - numpy is loaded by now, in the worker
        from onelinefault.report.overlay_data import overlay_data, roles_of  # noqa: PLC0415

        if answer.network is not None and not self.solver.stale:
            self.scene.show_roles(roles_of(answer.network))
        result = answer.result
        fits = result is not None and session.fault is not None and result.fault.place.part in session.plant.parts
        if result is None or not fits:
            self.scene.show_overlay(None, stamp_of(session.plant, None, session.arrangement_name))
            return
        overlay = overlay_data(session.plant, result, session.choices.detail, stale=self.solver.stale)
        stamp = stamp_of(session.plant, result, session.arrangement_name, stale=self.solver.stale)
        self.scene.show_overlay(overlay, stamp)
