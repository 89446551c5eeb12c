"""Page setup: the paper of a sheet, which belongs to the plant, and how it is put on the printer's paper."""

from __future__ import annotations

from typing import TYPE_CHECKING

from PySide6.QtCore import Qt
from PySide6.QtWidgets import QCheckBox, QDialog, QDialogButtonBox, QFormLayout, QLabel, QWidget

from onelinefault.desktop.combo import Combo
from onelinefault.desktop.settings import FITTED, OWN_PAPER, TRUE_SCALE
from onelinefault.model.editing import in_turn, set_paper
from onelinefault.model.plant import PAPER_MM

if TYPE_CHECKING:
    from collections.abc import Callable

    from onelinefault.desktop.session import Session
    from onelinefault.desktop.settings import Settings
    from onelinefault.model.edits import Edit
    from onelinefault.model.plant import Plant


class PageSetup(QDialog):
    """Changes nothing before OK; the sheet's paper is one step that can be undone."""

    def __init__(self, session: Session, settings: Settings, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self._session, self._settings = session, settings
        sheet = session.plant.sheet(session.sheet_id)
        assert sheet is not None
        self.setWindowTitle(self.tr("Page setup"))
        self.paper = self._combo([(name, paper_words(name)) for name in PAPER_MM], sheet.paper)
        self.upright = QCheckBox(self.tr("upright"))
        self.upright.setChecked(sheet.upright)
        self.all_sheets = QCheckBox(self.tr("all sheets of the plant"))
        self.all_sheets.setVisible(len(session.plant.sheets) > 1)
        own = [(OWN_PAPER, self.tr("the sheet's own paper"))]
        self.printer = self._combo([*own, *((name, paper_words(name)) for name in PAPER_MM)], settings.print_paper)
        scales = [(FITTED, self.tr("fitted to the printer's paper")), (TRUE_SCALE, self.tr("true scale, tiled"))]
        self.scale = self._combo(scales, settings.print_scale)
        self._lay_out(sheet.title)
        self.accepted.connect(self._take)

    def _lay_out(self, title: str) -> None:
        form = QFormLayout(self)
        form.setHorizontalSpacing(18)
        form.setVerticalSpacing(9)
        form.setFieldGrowthPolicy(QFormLayout.FieldGrowthPolicy.AllNonFixedFieldsGrow)
        form.addRow(_heading(self.tr("Sheet: {0}").format(title)))
        form.addRow(self.tr("Paper"), self.paper)
        form.addRow("", self.upright)
        if self.all_sheets.isVisibleTo(self):
            form.addRow("", self.all_sheets)
        form.addRow(_heading(self.tr("Printer and PDF")))
        form.addRow(self.tr("Print on"), self.printer)
        form.addRow(self.tr("Scale"), self.scale)
        buttons = QDialogButtonBox(QDialogButtonBox.StandardButton.Ok | QDialogButtonBox.StandardButton.Cancel)
        buttons.accepted.connect(self.accept)
        buttons.rejected.connect(self.reject)
        form.addRow(buttons)
        names = (self.tr("Paper"), self.tr("Print on"), self.tr("Scale"))
        for widget, name in zip((self.paper, self.printer, self.scale), names, strict=True):
            widget.setAccessibleName(name)

    def _combo(self, choices: list[tuple[str, str]], chosen: str) -> Combo:
        combo = Combo()
        for key, words in choices:
            combo.addItem(words, key)
        combo.setCurrentIndex(max(combo.findData(chosen), 0))
        combo.setMinimumWidth(220)
        return combo

    def _take(self) -> None:
        self._settings.print_paper = str(self.printer.currentData())
        self._settings.print_scale = str(self.scale.currentData())
        paper, upright = str(self.paper.currentData()), self.upright.checkState() == Qt.CheckState.Checked
        plant = self._session.plant
        ids = [s.id for s in plant.sheets] if self.all_sheets.isChecked() else [self._session.sheet_id]
        steps = [_paper_step(sheet_id, paper, upright) for sheet_id in ids if plant.sheet(sheet_id) is not None]
        sentence = f"Set paper to {paper}{' upright' if upright else ''}"
        self._session.apply(in_turn(plant, steps, sentence))


def paper_words(name: str) -> str:
    """A paper with its size: "A3, 420 × 297 mm"."""
    width, height = PAPER_MM[name]
    return f"{name}, {width:g} × {height:g} mm"


def _paper_step(sheet_id: str, paper: str, upright: bool) -> Callable[[Plant], Edit]:
    def step(plant: Plant) -> Edit:
        return set_paper(plant, sheet_id, paper, upright)

    return step


def _heading(words: str) -> QLabel:
    label = QLabel(words)
    label.setProperty("part", "heading")
    return label
