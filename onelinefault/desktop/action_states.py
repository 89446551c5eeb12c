"""Keeps actions in step with the session: what can be done now, what is chosen, what undo would take back."""

from __future__ import annotations

from collections.abc import Mapping
from typing import TYPE_CHECKING, Final

from PySide6.QtCore import QObject
from PySide6.QtGui import QAction

from onelinefault.desktop.actions import BY_KEY
from onelinefault.model.fault import PHASE_CHOICES
from onelinefault.model.fields import fields_of

if TYPE_CHECKING:
    from onelinefault.desktop.session import Session

_ANY: Final = ("cut", "delete", "reroute", "fit_selection")
_PARTS: Final = ("copy", "duplicate", "rotate", "mirror", "in_out_of_service")
_SEVERAL: Final = ("align_left", "align_centre", "align_right", "align_top", "align_middle", "align_bottom")
_MANY: Final = ("distribute_across", "distribute_down")
_SHEETS: Final = ("remove_sheet", "sheet_earlier", "sheet_later", "next_sheet", "previous_sheet")


class ActionStates(QObject):
    """Listens to the session. Rotate stays possible without a selection: it also turns what hangs at the pointer."""

    def __init__(self, session: Session, actions: Mapping[str, QAction], owner: QObject) -> None:
        super().__init__(owner)
        self._session, self._actions = session, actions
        session.plant_changed.connect(self.refresh)
        session.selection_changed.connect(self.refresh)
        session.choices_changed.connect(self.refresh)
        session.fault_changed.connect(self.refresh)
        self.refresh()

    def refresh(self, *_: object) -> None:
        """Bring all actions up to date."""
        session, plant = self._session, self._session.plant
        parts = [plant.parts[key] for key in session.selection if key in plant.parts]
        chosen = len(session.selection)
        self._enable(_ANY, chosen > 0)
        self._enable(_PARTS, bool(parts))
        self._enable(("rotate",), True)
        self._enable(("rename",), len(parts) == 1)
        self._enable(("open_close",), any("closed" in fields_of(type(part)) for part in parts))
        self._enable(_SEVERAL, len(parts) > 1)
        self._enable(_MANY, len(parts) > 2)
        self._enable(_SHEETS, len(plant.sheets) > 1)
        self._enable(("clear_fault",), session.fault is not None)
        self._enable(("next_phases",), len(PHASE_CHOICES[session.choices.kind]) > 1)
        self._show_choices()
        self._show_history()

    def _enable(self, keys: tuple[str, ...], can: bool) -> None:
        for key in keys:
            self._actions[key].setEnabled(can)

    def _show_choices(self) -> None:
        choices = self._session.choices
        kind = {"three-phase": "three_phase", "line-to-line": "line_to_line"}
        name = kind.get(choices.kind.value, choices.kind.value.replace("-", "_"))
        self._actions[name].setChecked(True)
        self._actions["largest" if choices.level == "max" else "smallest"].setChecked(True)
        self._actions[f"detail_{choices.detail}"].setChecked(True)

    def _show_history(self) -> None:
        history = self._session.history
        for key, step in (("undo", history.next_undo), ("redo", history.next_redo)):
            action, words = self._actions[key], BY_KEY[key].shown
            action.setEnabled(step is not None)
            action.setText(f"{words} {step.replace('&', '&&')}" if step else words)
            short = action.iconText()
            action.setToolTip(f"{short} {step}" if step else BY_KEY[key].sentence)
            action.setIconText(short)
