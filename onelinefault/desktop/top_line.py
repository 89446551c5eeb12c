"""The top line: plant, undo, method, kind of fault, level, arrangement, detail, print. One line, no ribbon of icons."""

from __future__ import annotations

from typing import TYPE_CHECKING, Final

from PySide6.QtCore import QPointF, QSize, Qt, Signal
from PySide6.QtGui import QKeyEvent, QMouseEvent, QPainter, QPen, QResizeEvent
from PySide6.QtWidgets import QComboBox, QHBoxLayout, QLabel, QLayout, QSizePolicy, QToolButton, QWidget

from onelinefault.desktop.combo import Combo
from onelinefault.desktop.elided import ElidedLabel
from onelinefault.desktop.segments import Segments
from onelinefault.model.fault import PHASE_CHOICES, FaultKind

if TYPE_CHECKING:
    from PySide6.QtGui import QAction

    from onelinefault.desktop.session import Session

HEIGHT: Final = 44
_AS_DRAWN: Final = ""


class DetailDots(QWidget):
    """Three dots, as many filled as the overlay has depth. chosen: 1, 2 or 3."""

    chosen = Signal(int)

    def __init__(self) -> None:
        super().__init__()
        self.level = 2
        self.setFocusPolicy(Qt.FocusPolicy.TabFocus)
        self.setFixedSize(54, 25)
        self.setToolTip(
            self.tr("Detail on the sheet: ribbons and gauges; plus main figures; plus phases and sequences")
        )
        self.setStatusTip(self.toolTip())
        self.show_level(2)

    def show_level(self, level: int) -> None:
        """Fill so many dots."""
        self.level = level
        self.setAccessibleName(self.tr("Detail {0} of 3").format(level))
        self.update()

    def mousePressEvent(self, event: QMouseEvent) -> None:
        """A click on a dot chooses it."""
        self.chosen.emit(min(max(int(event.position().x()) * 3 // self.width() + 1, 1), 3))

    def keyPressEvent(self, event: QKeyEvent) -> None:
        """Arrow keys go up and down; space goes round."""
        key = Qt.Key(event.key())
        if key in (Qt.Key.Key_Left, Qt.Key.Key_Down) and self.level > 1:
            self.chosen.emit(self.level - 1)
        elif key in (Qt.Key.Key_Right, Qt.Key.Key_Up) and self.level < 3:
            self.chosen.emit(self.level + 1)
        elif key in (Qt.Key.Key_Space, Qt.Key.Key_Return):
            self.chosen.emit(self.level % 3 + 1)
        else:
            super().keyPressEvent(event)

    def paintEvent(self, event: object) -> None:
        """Filled and open dots; a frame shows the focus."""
        painter = QPainter(self)
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        palette = self.palette()
        if self.hasFocus():
            painter.setPen(QPen(palette.highlight().color(), 2))
            painter.drawRoundedRect(self.rect().adjusted(1, 1, -1, -1), 6, 6)
        painter.setPen(QPen(palette.windowText().color(), 1.6))
        for dot in range(3):
            painter.setBrush(palette.windowText() if dot < self.level else palette.window())
            painter.drawEllipse(QPointF(11 + 16 * dot, self.height() / 2), 5, 5)


class TopLine(QWidget):
    """Shows the session's choices and changes them."""

    def __init__(self, session: Session, undo: QAction, redo: QAction, printing: QAction) -> None:
        super().__init__()
        self._session = session
        self.name, self.edited = ElidedLabel(), _muted(self.tr("· edited"))
        self.method = Segments(self.tr("Method"), self._methods())
        self.kind = Segments(self.tr("Kind of fault"), self._kinds())
        self.phases = Segments(self.tr("Phases"), [])
        self.level = Segments(self.tr("Level"), self._levels())
        self.arrangement = Combo()
        self.detail = DetailDots()
        words = (self.tr("Method"), self.tr("Fault"), self.tr("Arrangement"), self.tr("Detail"))
        self._labels = [_muted(word) for word in words]
        self._buttons = [_button(action) for action in (undo, redo, printing)]
        self._compact = -1
        self._set_up()
        self._lay_out()
        self._connect()
        self.show_file()
        self.show_choices()

    def _methods(self) -> list[tuple[str, str, str]]:
        return [
            ("classical", self.tr("classical"), self.tr("Complex impedances in three sequences, no factors")),
            ("iec60909", self.tr("IEC 60909"), self.tr("IEC 60909-0:2016: voltage factor c, impedance factors K")),
        ]

    def _kinds(self) -> list[tuple[str, str, str]]:
        return [
            (FaultKind.THREE_PHASE, self.tr("3 phase"), self.tr("Three-phase fault (key 1)")),
            (FaultKind.LINE_TO_LINE, self.tr("2 phase"), self.tr("Two phases, clear of earth (key 2)")),
            (FaultKind.TWO_LINES_TO_EARTH, self.tr("2 ph–earth"), self.tr("Two phases to earth (key 3)")),
            (FaultKind.LINE_TO_EARTH, self.tr("1 ph–earth"), self.tr("One phase to earth (key 4)")),
        ]

    def _levels(self) -> list[tuple[str, str, str]]:
        return [
            ("max", self.tr("max"), self.tr("Largest fault current: strongest supply, cold conductors")),
            ("min", self.tr("min"), self.tr("Smallest fault current: weakest supply, hot conductors")),
        ]

    def _set_up(self) -> None:
        self.arrangement.setAccessibleName(self.tr("Running arrangement"))
        self.arrangement.setToolTip(self.tr("Which switches are closed and which parts run"))
        self.arrangement.setSizeAdjustPolicy(QComboBox.SizeAdjustPolicy.AdjustToMinimumContentsLengthWithIcon)
        self.arrangement.setFocusPolicy(Qt.FocusPolicy.StrongFocus)
        self.name.setProperty("part", "heading")
        self.setSizePolicy(QSizePolicy.Policy.Expanding, QSizePolicy.Policy.Fixed)
        self.setAccessibleName(self.tr("Top line"))

    def _lay_out(self) -> None:
        undo, redo, printing = self._buttons
        method, fault, arrangement, detail = self._labels
        self._row = QHBoxLayout(self)
        self._row.setSizeConstraint(QLayout.SizeConstraint.SetNoConstraint)  # a narrow line drops its labels
        self._row.setContentsMargins(14, 0, 14, 0)
        groups: list[list[QWidget]] = [
            [self.name, self.edited], [undo, redo], [method, self.method], [fault, self.kind, self.phases],
            [self.level], [arrangement, self.arrangement], [detail, self.detail],
        ]  # fmt: skip
        self._inner = []
        for group in groups:
            box = QHBoxLayout()
            box.setSpacing(6)
            for widget in group:
                box.addWidget(widget)
            self._inner.append(box)
            self._row.addLayout(box)
        self._row.addStretch(1)
        self._row.addWidget(printing)

    def _connect(self) -> None:
        session = self._session
        session.plant_changed.connect(self.show_file)
        session.file_changed.connect(self.show_file)
        session.choices_changed.connect(self.show_choices)
        self.method.chosen.connect(self._choose_method)
        self.kind.chosen.connect(self._choose_kind)
        self.phases.chosen.connect(self._choose_phases)
        self.level.chosen.connect(self._choose_level)
        self.arrangement.activated.connect(self._choose_arrangement)
        self.detail.chosen.connect(self._choose_detail)

    # what the session says

    def show_file(self, *_: object) -> None:
        """Name of the plant, whether it is edited, and its arrangements."""
        plant = self._session.plant
        self.name.setText(plant.document.name or self.tr("New plant"))
        self.edited.setVisible(self._session.edited)
        known = [(_AS_DRAWN, self.tr("as drawn")), *((a.id, a.name) for a in plant.arrangements)]
        shown = [(self.arrangement.itemData(i), self.arrangement.itemText(i)) for i in range(self.arrangement.count())]
        if known != shown:
            self.arrangement.clear()
            for key, name in known:
                self.arrangement.addItem(name, key)
        self._show_arrangement()
        self._fit()

    def show_choices(self) -> None:
        """Kind, phases, level, arrangement and detail as the session has them."""
        choices = self._session.choices
        self.kind.show_choice(choices.kind)
        self.method.show_choice(choices.method)
        self.level.show_choice(choices.level)
        self.detail.show_level(choices.detail)
        offered = PHASE_CHOICES[choices.kind]
        if list(self.phases.buttons) != list(offered):
            tip = self.tr("The phases that the fault joins")
            self.phases.set_choices([(phases, phases, tip) for phases in offered])
            self.phases.set_tight(True)
        self.phases.setVisible(len(offered) > 1)
        self.phases.show_choice(choices.phases or offered[0])
        self._show_arrangement()
        self._fit()

    def _show_arrangement(self) -> None:
        index = self.arrangement.findData(self._session.choices.arrangement or _AS_DRAWN)
        self.arrangement.setCurrentIndex(max(index, 0))

    # what the person says

    def _choose_kind(self, key: str) -> None:
        self._session.choose(kind=FaultKind(key), phases="")

    def _choose_phases(self, key: str) -> None:
        self._session.choose(phases=key)

    def _choose_method(self, method: str) -> None:
        self._session.choose(method=method)

    def _choose_level(self, key: str) -> None:
        self._session.choose(level=key)

    def _choose_arrangement(self, index: int) -> None:
        self._session.choose(arrangement=self.arrangement.itemData(index) or None)

    def _choose_detail(self, level: int) -> None:
        self._session.choose(detail=level)

    # room

    def minimumSizeHint(self) -> QSize:
        """The window may be narrower than the line would like: it then drops its labels and stands closer."""
        return QSize(400, max(HEIGHT, self._row.sizeHint().height() + 10))

    def sizeHint(self) -> QSize:
        """As wide as there is room, as high as its text."""
        return QSize(1000, self.minimumSizeHint().height())

    def resizeEvent(self, event: QResizeEvent) -> None:
        """Use the loosest of the three settings that fits."""
        super().resizeEvent(event)
        self._fit()

    def _fit(self) -> None:
        for compact in range(3):
            self._set_compact(compact)
            if self._row.sizeHint().width() <= self.width():
                break

    def _set_compact(self, compact: int) -> None:
        if compact == self._compact:
            return
        self._compact = compact
        for label in self._labels:
            label.setVisible(compact == 0)
        tight = compact == 2
        self.name.set_room((180, 170, 110)[compact])
        self._row.setSpacing((20, 16, 9)[compact])
        short = {FaultKind.TWO_LINES_TO_EARTH: self.tr("2 ph–E"), FaultKind.LINE_TO_EARTH: self.tr("1 ph–E")}
        full = {key: words for key, words, _ in self._kinds()}
        self.kind.set_tight(tight, {**full, **short} if tight else full)  # type: ignore[dict-item]
        self.level.set_tight(tight)
        self.method.set_tight(tight)
        self.arrangement.setMinimumContentsLength((16, 13, 9)[compact])
        for box in self._inner:
            box.setSpacing(3 if tight else 6)
            box.invalidate()
        for button in self._buttons:
            button.setProperty("tight", tight)
            button.style().unpolish(button)
            button.style().polish(button)
        self._row.invalidate()


def _muted(words: str) -> QLabel:
    label = QLabel(words)
    label.setProperty("part", "caption")
    return label


def _button(action: QAction) -> QToolButton:
    button = QToolButton()
    button.setDefaultAction(action)
    button.setProperty("part", "plain")
    button.setToolButtonStyle(Qt.ToolButtonStyle.ToolButtonTextOnly)
    button.setFocusPolicy(Qt.FocusPolicy.TabFocus)
    button.setAccessibleName(action.iconText())
    return button
