"""The line that says what the basis marks mean."""

from PySide6.QtCore import QSize
from PySide6.QtGui import QPainter
from PySide6.QtWidgets import QWidget

from onelinefault.desktop.inspector_rows import mark_painter
from onelinefault.drawing.symbols_marks import basis_dot


class BasisLegend(QWidget):
    """basis: dot nameplate, ring letter, triangle typical, square guessed."""

    def __init__(self) -> None:
        super().__init__()
        names = (self.tr("nameplate"), self.tr("letter, test"), self.tr("typical"), self.tr("guessed"))
        self._words = tuple(zip(("nameplate", "letter", "typical", "guessed"), names, strict=True))
        self.setAccessibleName(self.tr("Basis: how each value is known"))
        self.setToolTip(self.tr("Click the mark beside a value, or press Ctrl+B in its field, to say how it is known"))
        self.setFixedHeight(self.fontMetrics().height() + 11)

    def sizeHint(self) -> QSize:
        """One line."""
        return QSize(300, self.fontMetrics().height() + 11)

    def paintEvent(self, event: object) -> None:
        """Marks and words, closer together where there is little room."""
        painter = QPainter(self)
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        palette = self.palette()
        font = self.font()
        font.setPointSizeF(font.pointSizeF() * 0.87)
        painter.setFont(font)
        metrics = painter.fontMetrics()
        rest = self.width() - 28 - sum(15 + metrics.horizontalAdvance(name) for _, name in self._words)
        gap = min(max(rest / len(self._words), 3.0), 14.0)
        x, middle = 16.0, self.height() / 2
        marks = mark_painter(palette.window().color())
        for mark, name in self._words:
            painter.save()
            painter.translate(x + 5, middle)
            marks.paint(painter, basis_dot(mark))
            painter.restore()
            painter.setPen(palette.placeholderText().color())
            painter.drawText(int(x + 14), int(middle + metrics.capHeight() / 2), name)
            x += 15 + metrics.horizontalAdvance(name) + gap
