"""A tab bar whose chosen tab is bold, with room for that in every tab."""

from PySide6.QtCore import QSize, Qt
from PySide6.QtGui import QFont, QFontMetrics
from PySide6.QtWidgets import QTabBar


class Tabs(QTabBar):
    """Plain tabs, no base line; a tab keeps its width when it is chosen."""

    def __init__(self) -> None:
        super().__init__()
        self.setDrawBase(False)
        self.setExpanding(False)
        self.setElideMode(Qt.TextElideMode.ElideNone)
        self.setFocusPolicy(Qt.FocusPolicy.TabFocus)

    def tabSizeHint(self, index: int) -> QSize:
        """Wide enough for bold words."""
        hint = super().tabSizeHint(index)
        bold = QFont(self.font())
        bold.setBold(True)
        words = self.tabText(index)
        more = QFontMetrics(bold).horizontalAdvance(words) - self.fontMetrics().horizontalAdvance(words)
        return QSize(hint.width() + max(more, 0) + 2, hint.height())
