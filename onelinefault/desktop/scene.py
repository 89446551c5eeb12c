"""The scene is a projection: it shows what the plant holds on one sheet, and the answer that belongs to it."""

from collections.abc import Mapping

from PySide6.QtCore import QRectF
from PySide6.QtWidgets import QGraphicsScene

from onelinefault.desktop.items import (
    OVERVIEW_BELOW_SCALE,
    Z_GUIDES,
    Z_OVER,
    Z_PAGE,
    Z_PIN,
    Z_RIBBONS,
    PartItem,
    ShapesItem,
    TagItem,
    WireItem,
)
from onelinefault.desktop.overview import OverviewItem
from onelinefault.drawing.overlay import OverlayData
from onelinefault.drawing.overlay_picture import overlay_picture
from onelinefault.drawing.page import Stamp, page_box, page_shapes
from onelinefault.drawing.part_picture import Roles
from onelinefault.drawing.shapes import Box, Shapes
from onelinefault.drawing.sheet import SheetDrawing, SheetPicture
from onelinefault.model.plant import Plant

_DESK_MARGIN_DU = 400.0
_MANY = 100


class SheetScene(QGraphicsScene):
    """Items of one sheet. The window tells it what to show; it never asks the plant's owner for anything."""

    def __init__(self, plant: Plant) -> None:
        super().__init__()
        self._roles: Roles = {}
        self._drawing = SheetDrawing(plant, plant.sheets[0].id, self._roles)
        self._stamp = Stamp()
        self._overlay: OverlayData | None = None
        self._selection: frozenset[str] = frozenset()
        self.part_items: dict[str, PartItem] = {}
        self.wire_items: dict[str, WireItem] = {}
        self.tag_items: dict[str, TagItem] = {}
        self._page, self._ribbons = ShapesItem(Z_PAGE), ShapesItem(Z_RIBBONS)
        self._over, self._pin, self._guides = ShapesItem(Z_OVER), ShapesItem(Z_PIN), ShapesItem(Z_GUIDES)
        self._far = OverviewItem()
        for item in (self._page, self._ribbons, self._far, self._over, self._pin, self._guides):
            self.addItem(item)
        self.turn_to(plant, plant.sheets[0].id)

    @property
    def picture(self) -> SheetPicture:
        """The picture that is shown."""
        return self._drawing.picture

    @property
    def plant(self) -> Plant:
        """The plant that is shown: the session's, or a preview while something is dragged."""
        return self._drawing.plant

    def turn_to(self, plant: Plant, sheet_id: str) -> None:
        """Show another sheet."""
        for item in (*self.part_items.values(), *self.wire_items.values()):
            self.removeItem(item)
        self.part_items, self.wire_items = {}, {}
        self._drawing = SheetDrawing(plant, sheet_id, self._roles)
        self._renew(frozenset((*self.picture.parts, *self.picture.wires)))
        self._show_page()
        self._show_overlay()

    def show_plant(self, plant: Plant) -> None:
        """Show another value of the plant on the same sheet; only what changed is drawn anew."""
        before = self.plant
        changed = self._drawing.show(plant)
        self._renew(changed)
        if before.document is not plant.document or before.sheets is not plant.sheets:
            self._show_page()
        if self._overlay is not None and (changed or before.tags is not plant.tags):
            self._show_overlay()

    def show_roles(self, roles: Roles) -> None:
        """Colour everything by voltage level."""
        if roles != self._roles:
            self._roles = roles
            self._renew(self._drawing.show(self.plant, roles))

    def show_overlay(self, overlay: OverlayData | None, stamp: Stamp) -> None:
        """Show a fault's figures, or none."""
        self._overlay = overlay
        if stamp != self._stamp:
            self._stamp = stamp
            self._show_page()
        self._show_overlay()

    def show_selection(self, selection: frozenset[str]) -> None:
        """Mark what is selected."""
        changed = selection ^ self._selection
        many = len(changed) > _MANY
        for key in changed:
            item = self.part_items.get(key) or self.wire_items.get(key)
            if item is not None:
                item.choose(key in selection, repaint=not many)
        if many:  # thousands of small dirty places cost more to unite than one whole picture
            self.update()
        self._selection = selection
        self._refresh_overview()

    def show_scale(self, scale: float) -> None:
        """Tell how large things are shown (pixels per du): from far away one item paints the whole sheet."""
        far = scale < OVERVIEW_BELOW_SCALE
        if far != self._far.isVisible():
            for item in (*self.part_items.values(), *self.wire_items.values()):
                item.setVisible(not far)  # each for itself: the scene's index finds only items without a parent quickly
            self._far.setVisible(far)
            self._refresh_overview()

    def _refresh_overview(self) -> None:
        if self._far.isVisible():
            self._far.show_picture(self.picture, self._selection, self.page_rect())

    def show_guides(self, shapes: Shapes) -> None:
        """Show what a gesture wants to show: rubber band, guide lines, ghosts. Empty: nothing."""
        self._guides.show_shapes(shapes)

    def pin_rect(self) -> QRectF:
        """Where the fault pin's head can be grabbed, in du; empty without a pin."""
        return self._pin.boundingRect().adjusted(4, 4, -4, -14) if self._pin.shapes else QRectF()

    def page_rect(self) -> QRectF:
        """The paper, in du."""
        box = page_box(self.picture.sheet)
        return QRectF(box.left, box.top, box.width, box.height)

    def _renew(self, keys: frozenset[str]) -> None:
        picture = self.picture
        for key in keys:
            if key in picture.parts:
                self._renew_part(key)
            elif key in picture.wires:
                self._renew_wire(key)
            else:
                item = self.part_items.pop(key, None) or self.wire_items.pop(key, None)
                if item is not None:
                    self.removeItem(item)
        self._refresh_overview()

    def _renew_part(self, key: str) -> None:
        item = self.part_items.get(key)
        if item is not None:
            item.show_picture(self.picture.parts[key])
            return
        item = self.part_items[key] = PartItem(self.picture.parts[key])
        item.choose(key in self._selection)
        item.setVisible(not self._far.isVisible())
        self.addItem(item)

    def _renew_wire(self, key: str) -> None:
        item = self.wire_items.get(key)
        if item is not None:
            item.show_picture(self.picture.wires[key])
            return
        item = self.wire_items[key] = WireItem(self.picture.wires[key])
        item.choose(key in self._selection)
        item.setVisible(not self._far.isVisible())
        self.addItem(item)

    def _show_page(self) -> None:
        self._page.show_shapes(page_shapes(self.plant, self.picture.sheet, self._stamp))
        margin = _DESK_MARGIN_DU
        self.setSceneRect(self.page_rect().adjusted(-margin, -margin, margin, margin))

    def _show_overlay(self) -> None:
        if self._overlay is None or self._overlay.place.part not in self.plant.parts:
            self._ribbons.show_shapes(())
            self._over.show_shapes(())
            self._pin.show_shapes(())
            self._renew_tags({}, {}, {})
            return
        picture = overlay_picture(self.plant, self.picture, self._overlay)
        self._ribbons.show_shapes(picture.under)
        self._over.show_shapes(picture.over)
        self._pin.show_shapes(picture.pin)
        self._renew_tags(picture.tags, picture.anchors, picture.boxes)

    def _renew_tags(
        self, tags: Mapping[str, Shapes], anchors: Mapping[str, tuple[float, float]], boxes: Mapping[str, Box]
    ) -> None:
        for key in self.tag_items.keys() - tags.keys():
            self.removeItem(self.tag_items.pop(key))
        for key, shapes in tags.items():
            if key not in self.tag_items:
                self.tag_items[key] = TagItem(key)
                self.addItem(self.tag_items[key])
            item = self.tag_items[key]
            item.anchor, item.box = anchors[key], boxes[key]
            item.show_shapes(shapes)
