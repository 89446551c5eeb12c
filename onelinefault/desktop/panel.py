"""A panel of the window: a dock with a title line of our own, that can be moved, closed and restored."""

from __future__ import annotations

from PySide6.QtCore import Qt
from PySide6.QtWidgets import QDockWidget, QHBoxLayout, QToolButton, QWidget

from onelinefault.desktop.elided import ElidedLabel


class PanelTitle(QWidget):
    """Heading, muted words beside it, room for more, and a button that closes the panel."""

    def __init__(self, heading: str, dock: QDockWidget) -> None:
        super().__init__(dock)
        self._heading = ElidedLabel(heading)
        self._heading.setProperty("part", "heading")
        self._aside = ElidedLabel()
        self._aside.setProperty("part", "muted")
        close = QToolButton()
        close.setText("×")
        close.setProperty("part", "quiet")
        close.setToolTip(self.tr("Close this panel; the View menu brings it back"))
        close.setFocusPolicy(Qt.FocusPolicy.TabFocus)
        close.setAccessibleName(self.tr("Close {0}").format(dock.windowTitle()))
        close.clicked.connect(dock.close)
        self._row = QHBoxLayout(self)
        self._row.setContentsMargins(14, 7, 6, 3)
        self._row.setSpacing(8)
        self._row.addWidget(self._heading)
        self._row.addWidget(self._aside, 1)
        self._row.addWidget(close)

    def show_words(self, heading: str, aside: str = "") -> None:
        """Change heading and muted words."""
        self._heading.setText(heading)
        self._aside.setText(aside)

    @property
    def words(self) -> tuple[str, str]:
        """Heading and muted words."""
        return self._heading.text(), self._aside.text()


class Panel(QDockWidget):
    """A dock that holds one widget. title: a title line of its own kind."""

    def __init__(self, key: str, heading: str, content: QWidget, title: QWidget | None = None) -> None:
        super().__init__(heading)
        self.setObjectName(key)
        self.setAccessibleName(heading)
        self.setTitleBarWidget(title if title is not None else PanelTitle(heading, self))
        self.setWidget(content)

    def show_words(self, heading: str, aside: str = "") -> None:
        """Change heading and muted words of the title line, where it has them."""
        line = self.titleBarWidget()
        if isinstance(line, PanelTitle):
            line.show_words(heading, aside)
