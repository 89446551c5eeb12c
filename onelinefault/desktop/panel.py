"""A panel of the window: a dock with a title line of our own, that can be moved, closed and restored."""

from __future__ import annotations

from PySide6.QtCore import Qt
from PySide6.QtWidgets import QDockWidget, QFrame, QHBoxLayout, QLabel, QToolButton, QVBoxLayout, QWidget


class PanelTitle(QWidget):
    """Heading, muted words beside it, room for more, and a button that closes the panel."""

    def __init__(self, heading: str, dock: QDockWidget) -> None:
        super().__init__(dock)
        self._heading = QLabel(heading)
        self._heading.setProperty("part", "heading")
        self._aside = QLabel()
        self._aside.setProperty("part", "muted")
        self._aside.setMinimumWidth(10)
        close = QToolButton()
        close.setText("×")
        close.setProperty("part", "quiet")
        close.setToolTip(self.tr("Close this panel; the View menu brings it back"))
        close.setAccessibleName(self.tr("Close {0}").format(dock.windowTitle()))
        close.clicked.connect(dock.close)
        self._row = QHBoxLayout(self)
        self._row.setContentsMargins(14, 7, 6, 3)
        self._row.setSpacing(8)
        self._row.addWidget(self._heading)
        self._row.addWidget(self._aside, 1, Qt.AlignmentFlag.AlignBottom)
        self._row.addWidget(close)

    def show_words(self, heading: str, aside: str = "") -> None:
        """Change heading and muted words."""
        self._heading.setText(heading)
        self._aside.setText(aside)
        self._aside.setToolTip(aside)

    @property
    def words(self) -> tuple[str, str]:
        """Heading and muted words."""
        return self._heading.text(), self._aside.text()


class Panel(QDockWidget):
    """A dock that holds one widget. ``title``: its title line."""

    def __init__(self, key: str, heading: str, content: QWidget, title: QWidget | None = None) -> None:
        super().__init__(heading)
        self.setObjectName(key)
        self.setAccessibleName(heading)
        self.title = PanelTitle(heading, self)
        self.setTitleBarWidget(title or self.title)
        self.setWidget(content)


def rule() -> QFrame:
    """A thin line across."""
    line = QFrame()
    line.setProperty("part", "rule")
    return line


def column(*widgets: QWidget, margins: tuple[int, int, int, int] = (0, 0, 0, 0), spacing: int = 0) -> QVBoxLayout:
    """Widgets under one another."""
    layout = QVBoxLayout()
    layout.setContentsMargins(*margins)
    layout.setSpacing(spacing)
    for widget in widgets:
        layout.addWidget(widget)
    return layout
