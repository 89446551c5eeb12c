"""The rows of the inspector: basis dot, label, entry, and underneath the reason when an entry cannot be taken."""

from __future__ import annotations

from functools import lru_cache
from typing import Final

from PySide6.QtCore import QEvent, QPoint, QSize, Qt, Signal
from PySide6.QtGui import QAction, QColor, QFocusEvent, QKeyEvent, QKeySequence, QPainter, QPen
from PySide6.QtWidgets import (
    QAbstractButton,
    QCheckBox,
    QComboBox,
    QCompleter,
    QGridLayout,
    QLabel,
    QLineEdit,
    QMenu,
    QWidget,
)

from onelinefault.desktop.combo import Combo
from onelinefault.desktop.inspector_state import NO, RATING, SUGGESTIONS, YES, RowState
from onelinefault.drawing.painter import Painter
from onelinefault.drawing.palette import SHEET
from onelinefault.drawing.symbols_marks import basis_dot
from onelinefault.model.fields import Basis

# which of the four marks stands for a basis: what is on paper from others, or measured, is as sure as a letter
MARKS: Final = {
    Basis.NAMEPLATE: "nameplate", Basis.LETTER: "letter", Basis.DRAWING: "letter", Basis.MEASURED: "letter",
    Basis.TYPICAL: "typical", Basis.GUESSED: "guessed",
}  # fmt: skip
_DARK_MARKS: Final = {
    "basis-nameplate": "#ECE9E1", "basis-letter": "#62B6D4", "basis-typical": "#E0B04A", "basis-guessed": "#FF8DA8",
}  # fmt: skip
_BASIS_KEY: Final = QKeySequence("Ctrl+B")


def mark_painter(ground: QColor) -> Painter:
    """A painter of basis marks that can be told from the ground they stand on."""
    return _mark_painter(ground.lightness() < 128, ground.name())


@lru_cache(maxsize=4)
def _mark_painter(dark: bool, ground: str) -> Painter:
    return Painter({**SHEET, "paper": ground, **(_DARK_MARKS if dark else {})})


class BasisDot(QAbstractButton):
    """Shows how a value is known; a click offers the other words for it. picked: (basis word)."""

    picked = Signal(str)

    def __init__(self) -> None:
        super().__init__()
        self.basis: Basis | None = None
        self.setFixedSize(18, 18)
        self.setFocusPolicy(Qt.FocusPolicy.NoFocus)  # Tab goes from entry to entry; Ctrl+B in an entry opens the menu
        self.setCursor(Qt.CursorShape.PointingHandCursor)
        self._menu = QMenu(self)
        self._menu.triggered.connect(self._pick)
        self.clicked.connect(self.offer)

    def show_basis(self, basis: Basis | None, typed: bool, label: str) -> None:
        """Show another basis; only a typed value can be marked."""
        self.basis = basis
        self.setEnabled(typed)
        words = self.tr("{0}: {1}").format(label, basis.value if basis else self.tr("not given"))
        self.setToolTip(words if not typed else self.tr("{0}. Click, or Ctrl+B in the field, to change").format(words))
        self.setAccessibleName(self.tr("Basis of {0}").format(words))
        self.update()

    def offer(self) -> None:
        """Open the menu of words."""
        if not self.isEnabled():
            return
        self._menu.clear()
        for basis in Basis:
            action = QAction(basis.value, self._menu)
            action.setCheckable(True)
            action.setChecked(basis is self.basis)
            action.setData(basis.value)
            self._menu.addAction(action)
        self._menu.popup(self.mapToGlobal(QPoint(0, self.height())))

    def sizeHint(self) -> QSize:
        """A small square."""
        return QSize(18, 18)

    def paintEvent(self, event: object) -> None:
        """The mark, and a thin frame under the pointer."""
        painter = QPainter(self)
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        window = self.palette().window().color()
        if self.isEnabled() and self.underMouse():
            painter.setPen(QPen(self.palette().mid().color(), 1))
            painter.drawRoundedRect(self.rect().adjusted(0, 0, -1, -1), 4, 4)
        if self.basis is not None:
            painter.translate(9, 9)
            mark_painter(window).paint(painter, basis_dot(MARKS[self.basis]))

    def _pick(self, action: QAction) -> None:
        self.picked.emit(str(action.data()))


class EntryLine(QLineEdit):
    """A line that is taken on Enter and on leaving; Escape gives back what was there.

    taken: (text). left: (text) the same, but the cursor has left. basis_wanted: Ctrl+B.
    """

    taken = Signal(str)
    left = Signal(str)
    basis_wanted = Signal()

    def __init__(self) -> None:
        super().__init__()
        self.kept = ""
        self.returnPressed.connect(self._take)

    def show_text(self, text: str) -> None:
        """Show another value, unless the person is typing and the value behind has not changed."""
        if self.hasFocus() and text == self.kept and self.isModified():
            return
        self.kept = text
        self.setText(text)
        self.setCursorPosition(0)

    def take_pending(self) -> None:
        """What was typed and not yet taken is taken now."""
        if self.isModified():
            self.left.emit(self.text())

    def event(self, event: QEvent) -> bool:
        """Escape and Ctrl+B are for the line; undo only while it has something of its own to undo."""
        if event.type() == QEvent.Type.ShortcutOverride and isinstance(event, QKeyEvent):
            if event.key() == Qt.Key.Key_Escape or self._is_basis_key(event):
                event.accept()
                return True
            undo = event.matches(QKeySequence.StandardKey.Undo) and not self.isUndoAvailable()
            redo = event.matches(QKeySequence.StandardKey.Redo) and not self.isRedoAvailable()
            if undo or redo:
                event.ignore()
                return False
        return super().event(event)

    def keyPressEvent(self, event: QKeyEvent) -> None:
        """Escape and Ctrl+B."""
        if event.key() == Qt.Key.Key_Escape and self.isModified():
            self.setText(self.kept)
            self.left.emit(self.kept)
        elif self._is_basis_key(event):
            self.basis_wanted.emit()
        else:
            super().keyPressEvent(event)

    def focusOutEvent(self, event: QFocusEvent) -> None:
        """Leaving takes the text; a menu or another window in front is no leaving."""
        super().focusOutEvent(event)
        if event.reason() not in (Qt.FocusReason.PopupFocusReason, Qt.FocusReason.ActiveWindowFocusReason):
            self.left.emit(self.text())

    def _take(self) -> None:
        self.taken.emit(self.text())
        self.selectAll()

    @staticmethod
    def _is_basis_key(event: QKeyEvent) -> bool:
        return QKeySequence(event.keyCombination()).matches(_BASIS_KEY) == QKeySequence.SequenceMatch.ExactMatch


class Row(QWidget):
    """One row. entered: (row, text, whether the cursor has left); marked: (row, basis word)."""

    entered = Signal(object, str, bool)
    marked = Signal(object, str)

    def __init__(self, state: RowState) -> None:
        super().__init__()
        self.state = state
        self.dot = BasisDot()
        self.label = QLabel(state.label)
        self.label.setProperty("part", "label")
        self.label.setWordWrap(True)
        self.trouble = QLabel()
        self.trouble.setProperty("part", "trouble")
        self.trouble.setTextFormat(Qt.TextFormat.PlainText)
        self.trouble.setWordWrap(True)
        self.trouble.hide()
        self._grid = QGridLayout(self)
        self._grid.setContentsMargins(0, 0, 0, 0)
        self._grid.setHorizontalSpacing(4)
        self._grid.setVerticalSpacing(1)
        self._grid.addWidget(self.dot, 0, 0)
        self._grid.addWidget(self.label, 0, 1)
        self._grid.addWidget(self.trouble, 1, 1, 1, 2)
        self._grid.setColumnStretch(1, 10)
        self._grid.setColumnStretch(2, 11)
        self.dot.picked.connect(self._mark)
        self.editor = self._make_editor()
        self._grid.addWidget(self.editor, 0, 2)
        self.label.setBuddy(self.editor)

    def _make_editor(self) -> QWidget:
        """An empty place: each kind of row puts its own editor there."""
        return QWidget()

    def show_state(self, state: RowState) -> None:
        """Show another state of the same row; what was said about an entry is no longer said."""
        if state != self.state:
            self.say("")
        self.state = state
        self.dot.show_basis(state.basis, state.typed and state.scope == RATING, state.label)
        for widget in (self.editor, self.label):
            widget.setToolTip(state.help or state.label)
            widget.setStatusTip(f"{state.label}: {state.help}" if state.help else state.label)
        note = self.tr(", mixed") if state.mixed else self.tr(", required") if state.missing else ""
        self.editor.setAccessibleName(state.label + note)
        self.editor.setAccessibleDescription(state.help)

    def say(self, trouble: str) -> None:
        """Say under the row why an entry was not taken; nothing: all is well."""
        self.trouble.setText(trouble)
        self.trouble.setVisible(bool(trouble))
        self._flag(bool(trouble))

    def put_back(self) -> None:
        """Show again what is known, in place of an entry that was not taken."""

    def take_pending(self) -> None:
        """Hand over what was typed and not yet taken."""

    def _flag(self, fault: bool) -> None:
        if bool(self.editor.property("fault")) != fault:
            self.editor.setProperty("fault", fault)
            self.editor.style().unpolish(self.editor)
            self.editor.style().polish(self.editor)

    def _mark(self, basis: str) -> None:
        self.marked.emit(self, basis)


class LineRow(Row):
    """A row with a line to type in, with suggestions for some kinds."""

    line: EntryLine

    def _make_editor(self) -> QWidget:
        self.line = EntryLine()
        suggestions = SUGGESTIONS.get(self.state.kind, ())
        if suggestions:
            completer = QCompleter(list(suggestions), self.line)
            completer.setCaseSensitivity(Qt.CaseSensitivity.CaseInsensitive)
            self.line.setCompleter(completer)
        self._connect_line()
        return self.line

    def _connect_line(self) -> None:
        self.line.taken.connect(self._taken)
        self.line.left.connect(self._left)
        self.line.basis_wanted.connect(self.dot.offer)

    def show_state(self, state: RowState) -> None:
        """Show text and placeholder."""
        super().show_state(state)
        self.line.show_text(state.text)
        self.line.setPlaceholderText(state.placeholder)

    def put_back(self) -> None:
        """The text that is known."""
        self.line.setText(self.state.text)

    def take_pending(self) -> None:
        """What was typed."""
        self.line.take_pending()

    def _taken(self, text: str) -> None:
        self.entered.emit(self, text, False)

    def _left(self, text: str) -> None:
        self.entered.emit(self, text, True)


class ChoiceRow(LineRow):
    """A row with a few words to choose from; they can be typed too."""

    combo: Combo

    def _make_editor(self) -> QWidget:
        self.combo = Combo()
        self.line = EntryLine()
        self.combo.setEditable(True)
        self.combo.setLineEdit(self.line)
        self.combo.setInsertPolicy(QComboBox.InsertPolicy.NoInsert)
        self.combo.addItems(list(self.state.choices))
        self.combo.setMinimumContentsLength(6)
        self.combo.setSizeAdjustPolicy(QComboBox.SizeAdjustPolicy.AdjustToMinimumContentsLengthWithIcon)
        self.combo.textActivated.connect(self._taken)
        self._connect_line()
        return self.combo

    def show_state(self, state: RowState) -> None:
        """Show the word, or what counts instead."""
        self.combo.setCurrentIndex(self.combo.findText(state.text))
        super().show_state(state)
        self.line.setAccessibleName(self.combo.accessibleName())


class FlagRow(Row):
    """A row with a tick."""

    tick: QCheckBox

    def _make_editor(self) -> QWidget:
        self.tick = QCheckBox()
        self.tick.clicked.connect(self._clicked)
        return self.tick

    def show_state(self, state: RowState) -> None:
        """Ticked, not ticked, or mixed."""
        super().show_state(state)
        self.tick.setTristate(state.mixed)
        middle = Qt.CheckState.PartiallyChecked
        on, off = Qt.CheckState.Checked, Qt.CheckState.Unchecked
        self.tick.setCheckState(middle if state.mixed else on if state.text == YES else off)
        self.tick.setText(self.tr("mixed") if state.mixed else self.tr("yes") if state.text == YES else self.tr("no"))

    def _clicked(self) -> None:
        self.entered.emit(self, YES if self.tick.checkState() != Qt.CheckState.Unchecked else NO, False)


def row_widget(state: RowState) -> Row:
    """The widget that a row's kind asks for."""
    kind: type[Row] = FlagRow if state.kind == "flag" else ChoiceRow if state.choices else LineRow
    return kind(state)
