"""The view of a sheet: zoom at the pointer, pan, fit; the mouse goes to the gesture in hand."""

from PySide6.QtCore import QPoint, QPointF, QRect, QRectF, Qt, Signal
from PySide6.QtGui import QBrush, QColor, QKeyEvent, QMouseEvent, QPainter, QPen, QPixmap, QWheelEvent
from PySide6.QtWidgets import QGraphicsView, QWidget

from onelinefault.desktop.scene import SheetScene
from onelinefault.drawing.palette import SHEET
from onelinefault.drawing.shapes import MODULE_DU

_LEAST_SCALE, _LARGEST_SCALE = 0.05, 12.0
_STEP = 1.15
_GRID_FROM_SCALE = 0.55


class SheetView(QGraphicsView):
    """Shows a scene. Mouse and keys are handed on as signals in scene units; panning and zooming are its own.

    pressed, moved, released, doubled: (point in du, event). scaled: the zoom has changed.
    """

    pressed = Signal(QPointF, object)
    moved = Signal(QPointF, object)
    released = Signal(QPointF, object)
    doubled = Signal(QPointF, object)
    menu_wanted = Signal(QPointF, QPoint)
    scaled = Signal(float)

    def __init__(self, scene: SheetScene, parent: QWidget | None = None) -> None:
        super().__init__(scene, parent)
        self._paper_scene = scene
        self.setAccessibleName("Sheet")
        self.setRenderHint(QPainter.RenderHint.Antialiasing)
        self.setRenderHint(QPainter.RenderHint.TextAntialiasing)
        self.setTransformationAnchor(QGraphicsView.ViewportAnchor.NoAnchor)
        self.setResizeAnchor(QGraphicsView.ViewportAnchor.AnchorViewCenter)
        self.setViewportUpdateMode(QGraphicsView.ViewportUpdateMode.SmartViewportUpdate)
        for policy in (self.setHorizontalScrollBarPolicy, self.setVerticalScrollBarPolicy):
            policy(
                Qt.ScrollBarPolicy.ScrollBarAlwaysOff
            )  # the wheel, the space bar and the middle button move the sheet
        self.setFrameShape(QGraphicsView.Shape.NoFrame)
        self.setMouseTracking(True)
        self.viewport().setMouseTracking(True)
        self.setContextMenuPolicy(Qt.ContextMenuPolicy.NoContextMenu)
        self.setFocusPolicy(Qt.FocusPolicy.StrongFocus)
        self._pan_from: QPoint | None = None
        self._space = False
        self._fitted = True
        self.last_point = QPointF(0, 0)
        self._dots = _dot_brush()

    @property
    def scale_factor(self) -> float:
        """Screen pixels per du."""
        return self.transform().m11()

    def zoom(self, factor: float, at: QPoint | None = None) -> None:
        """Zoom by a factor, keeping what is under a point of the view (its middle if None) where it is."""
        point = at if at is not None else self.viewport().rect().center()
        target = min(max(self.scale_factor * factor, _LEAST_SCALE), _LARGEST_SCALE)
        before = self.mapToScene(point)
        factor = target / self.scale_factor
        self.scale(factor, factor)
        shift = self.mapToScene(point) - before
        self.translate(shift.x(), shift.y())
        self._fitted = False
        self.scaled.emit(self.scale_factor)

    def fit(self, rect: QRectF | None = None) -> None:
        """Show the whole sheet, or a rectangle of it."""
        self._fitted = rect is None
        target = rect if rect is not None else self._paper_scene.page_rect().adjusted(-14, -14, 14, 14)
        if target.isEmpty():
            return
        self.fitInView(target, Qt.AspectRatioMode.KeepAspectRatio)
        if self.scale_factor > 2.0 and rect is not None:
            self.zoom(2.0 / self.scale_factor)
        self.scaled.emit(self.scale_factor)

    def keep_fitted(self) -> None:
        """Fit again if the whole sheet was shown before."""
        if self._fitted:
            self.fit()

    def drawBackground(self, painter: QPainter, rect: QRectF | QRect) -> None:
        """Desk, paper with a soft edge, and the dot grid where it can be seen."""
        area = QRectF(rect)
        page = self._paper_scene.page_rect()
        desk = self.palette().window().color()
        painter.fillRect(area, desk.darker(105))
        painter.fillRect(page.translated(3, 4) & area, desk.darker(114))
        painter.fillRect(page & area, QColor(SHEET["paper"]))
        if self.scale_factor >= _GRID_FROM_SCALE:
            painter.setBrushOrigin(QPointF(0, 0))
            painter.fillRect(page & area, self._dots)
        painter.setPen(QPen(QColor("#CFC9BC"), 0))
        painter.setBrush(Qt.BrushStyle.NoBrush)
        painter.drawRect(page)

    def wheelEvent(self, event: QWheelEvent) -> None:
        """Zoom at the pointer; with Shift or Alt scroll sideways, as platforms do."""
        delta = event.angleDelta().y()
        if event.modifiers() & (Qt.KeyboardModifier.ShiftModifier | Qt.KeyboardModifier.AltModifier):
            self._scroll(QPoint(event.angleDelta().x() or delta, 0))
        elif delta:
            self.zoom(_STEP ** (delta / 120), event.position().toPoint())
        event.accept()

    def mousePressEvent(self, event: QMouseEvent) -> None:
        """Middle button, or left with the space bar: pan. Else it is the gesture's."""
        if event.button() == Qt.MouseButton.MiddleButton or (
            self._space and event.button() == Qt.MouseButton.LeftButton
        ):
            self._pan_from = event.position().toPoint()
            self.viewport().setCursor(Qt.CursorShape.ClosedHandCursor)
            return
        point = self._at(event)
        if event.button() == Qt.MouseButton.RightButton:
            self.menu_wanted.emit(point, event.globalPosition().toPoint())
        else:
            self.pressed.emit(point, event)

    def mouseMoveEvent(self, event: QMouseEvent) -> None:
        """Pan, or hand on."""
        if self._pan_from is not None:
            here = event.position().toPoint()
            self._scroll(here - self._pan_from)
            self._pan_from = here
            return
        self.moved.emit(self._at(event), event)

    def mouseReleaseEvent(self, event: QMouseEvent) -> None:
        """End panning, or hand on."""
        if self._pan_from is not None:
            self._pan_from = None
            self.viewport().unsetCursor()
            return
        self.released.emit(self._at(event), event)

    def mouseDoubleClickEvent(self, event: QMouseEvent) -> None:
        """Hand on."""
        self.doubled.emit(self._at(event), event)

    def keyPressEvent(self, event: QKeyEvent) -> None:
        """The space bar makes the left button pan."""
        if event.key() == Qt.Key.Key_Space and not event.isAutoRepeat():
            self._space = True
            self.viewport().setCursor(Qt.CursorShape.OpenHandCursor)
            return
        event.ignore()

    def keyReleaseEvent(self, event: QKeyEvent) -> None:
        """The space bar is let go."""
        if event.key() == Qt.Key.Key_Space and not event.isAutoRepeat():
            self._space = False
            self.viewport().unsetCursor()
            return
        event.ignore()

    def resizeEvent(self, event: object) -> None:
        """A fitted sheet stays fitted."""
        super().resizeEvent(event)  # type: ignore[arg-type]
        self.keep_fitted()

    def _scroll(self, by: QPoint) -> None:
        self._fitted = False
        horizontal, vertical = self.horizontalScrollBar(), self.verticalScrollBar()
        horizontal.setValue(horizontal.value() - by.x())
        vertical.setValue(vertical.value() - by.y())

    def _at(self, event: QMouseEvent) -> QPointF:
        self.last_point = self.mapToScene(event.position().toPoint())
        return self.last_point


def _dot_brush() -> QBrush:
    """One module with a faint dot at its corner."""
    tile = QPixmap(int(MODULE_DU), int(MODULE_DU))
    tile.fill(Qt.GlobalColor.transparent)
    painter = QPainter(tile)
    painter.setPen(QColor(SHEET["faint"]))
    painter.drawPoint(0, 0)
    painter.end()
    return QBrush(tile)
