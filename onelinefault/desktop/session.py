"""What one open plant is at this moment: the plant, its history, the selection, the fault that stands, its file.

The only way to change the plant is ``apply``. Widgets listen to a few signals and read the rest from here; nothing
here knows a widget.
"""

from dataclasses import dataclass, replace
from pathlib import Path

from PySide6.QtCore import QObject, Signal

from onelinefault.engine.case import Case
from onelinefault.errors import EditError
from onelinefault.model.edits import Edit
from onelinefault.model.fault import Fault, FaultKind
from onelinefault.model.history import History
from onelinefault.model.plant import Plant


@dataclass(frozen=True)
class Choices:
    """What the top line holds: method, kind of fault, phases, level, arrangement, depth of detail (1 to 3)."""

    kind: FaultKind = FaultKind.THREE_PHASE
    phases: str = ""
    method: str = "classical"
    level: str = "max"
    arrangement: str | None = None
    detail: int = 2

    @property
    def case(self) -> Case:
        """The case for the engine."""
        return Case(method=self.method, level=self.level)


class Session(QObject):
    """One open plant.

    plant_changed carries (before, after): the plant has another value. sheet_changed, selection_changed,
    fault_changed, choices_changed, file_changed: read the new state from the session. said: a sentence for the
    status line.
    """

    plant_changed = Signal(object, object)
    sheet_changed = Signal()
    selection_changed = Signal()
    fault_changed = Signal()
    choices_changed = Signal()
    file_changed = Signal()
    said = Signal(str)

    def __init__(self, plant: Plant, path: Path | None = None) -> None:
        super().__init__()
        self.history = History(plant)
        self.path = path
        self.saved_plant = plant
        self.selection: frozenset[str] = frozenset()
        self.sheet_id = plant.sheets[0].id
        self.fault: Fault | None = None
        self.choices = Choices()

    @property
    def plant(self) -> Plant:
        """The plant as it stands."""
        return self.history.plant

    @property
    def edited(self) -> bool:
        """Whether the plant differs from its file."""
        return self.plant is not self.saved_plant and self.plant != self.saved_plant

    @property
    def arrangement_name(self) -> str:
        """The running arrangement for title blocks."""
        chosen = (a.name for a in self.plant.arrangements if a.id == self.choices.arrangement)
        return next(chosen, "as drawn")

    def apply(self, edit: Edit) -> bool:
        """Do one step. False, with a sentence in the status line, when the plant refuses it; nothing changes then."""
        if edit.empty:
            return False
        before = self.plant
        try:
            self.history.apply(edit)
        except EditError as error:
            self.said.emit(str(error))
            return False
        self._announce(before)
        self.said.emit(edit.sentence)
        return True

    def undo(self) -> None:
        """Take the last step back, if any."""
        self._step(self.history.undo, "Undid")

    def redo(self) -> None:
        """Do the step again that was taken back last, if any."""
        self._step(self.history.redo, "Did again")

    def _step(self, move: object, word: str) -> None:
        before = self.plant
        sentence = move()  # type: ignore[operator]
        if sentence is not None:
            self._announce(before)
            self.said.emit(f"{word}: {sentence}")

    def _announce(self, before: Plant) -> None:
        if self.plant.sheet(self.sheet_id) is None:
            self.sheet_id = self.plant.sheets[0].id
            self.sheet_changed.emit()
        if self.fault is not None and self.fault.place.part not in self.plant.parts:
            self.set_fault(None)
        self.plant_changed.emit(before, self.plant)
        known = self.selection & (self.plant.parts.keys() | self.plant.wires.keys())
        if known != self.selection:
            self.select(known)

    def open(self, plant: Plant, path: Path | None) -> None:
        """Put another plant on the desk; history, selection and fault start anew."""
        before = self.plant
        self.history = History(plant)
        self.path, self.saved_plant = path, plant
        self.selection, self.fault = frozenset(), None
        self.sheet_id = plant.sheets[0].id
        self.choices = replace(self.choices, arrangement=None)
        self.plant_changed.emit(before, plant)
        for signal in (self.sheet_changed, self.selection_changed, self.fault_changed, self.choices_changed):
            signal.emit()
        self.file_changed.emit()

    def mark_saved(self, path: Path) -> None:
        """The plant now equals its file."""
        self.path, self.saved_plant = path, self.plant
        self.file_changed.emit()

    def select(self, ids: frozenset[str]) -> None:
        """Select parts and wires by id."""
        if ids != self.selection:
            self.selection = frozenset(ids)
            self.selection_changed.emit()

    def show_sheet(self, sheet_id: str) -> None:
        """Turn to a sheet."""
        if sheet_id != self.sheet_id and self.plant.sheet(sheet_id) is not None:
            self.sheet_id = sheet_id
            self.sheet_changed.emit()

    def set_fault(self, fault: Fault | None) -> None:
        """Put the fault pin, or clear it."""
        if fault != self.fault:
            self.fault = fault
            self.fault_changed.emit()

    def choose(self, **changes: object) -> None:
        """Change what the top line holds; a standing fault follows its kind and phases."""
        choices = replace(self.choices, **changes)  # type: ignore[arg-type]
        if choices == self.choices:
            return
        self.choices = choices
        self.choices_changed.emit()
        if self.fault is not None:
            self.set_fault(replace(self.fault, kind=choices.kind, phases=choices.phases))
