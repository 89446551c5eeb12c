"""Parts are taken from the shelf by click, key, search or drag."""

import pytest
from PySide6.QtCore import QPoint, Qt
from PySide6.QtGui import QImage
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from onelinefault.desktop.catalogue import OFFERS
from onelinefault.desktop.shelf import PartTile, Shelf, offer_shapes
from onelinefault.drawing.painter import load_fonts

LEFT, NONE = Qt.MouseButton.LeftButton, Qt.KeyboardModifier.NoModifier


@pytest.fixture
def shelf(qtbot: QtBot) -> Shelf:
    load_fonts()
    shelf = Shelf()
    qtbot.addWidget(shelf)
    shelf.resize(168, 700)
    shelf.show()
    qtbot.waitExposed(shelf)
    return shelf


def tile(shelf: Shelf, name: str) -> PartTile:
    return next(t for t in shelf.tiles if t.text() == name)


def taken(shelf: Shelf) -> list[str]:
    names: list[str] = []
    shelf.wanted.connect(lambda offer: names.append(offer.name))
    return names


def test_a_click_and_the_keyboard_take_a_part(shelf: Shelf) -> None:
    names = taken(shelf)
    QTest.mouseClick(tile(shelf, "Bus"), LEFT)
    tile(shelf, "Supply").setFocus()
    QTest.keyClick(tile(shelf, "Supply"), Qt.Key.Key_Return)
    QTest.keyClick(tile(shelf, "Supply"), Qt.Key.Key_Space)
    assert names == ["Bus", "Supply", "Supply"]


def test_moving_far_with_the_button_down_is_a_drag_and_no_click(shelf: Shelf, monkeypatch: pytest.MonkeyPatch) -> None:
    dragged: list[str] = []
    monkeypatch.setattr(PartTile, "start_drag", lambda self: dragged.append(self.offer.name))
    names, cable = taken(shelf), tile(shelf, "Cable")
    start = QPoint(20, 20)
    QTest.mousePress(cable, LEFT, NONE, start)
    QTest.mouseMove(cable, start + QPoint(1, 1))
    assert dragged == []
    QTest.mouseMove(cable, start + QPoint(QApplication.startDragDistance() + 3, 5))
    QTest.mouseRelease(cable, LEFT, NONE, start + QPoint(30, 5))
    assert (dragged, names) == (["Cable"], [])


def test_the_search_line_thins_the_shelf_out_and_enter_takes_the_first(shelf: Shelf) -> None:
    names = taken(shelf)
    QTest.keyClicks(shelf.search, "transf")
    shown = [t.text() for t in shelf.tiles if t.isVisible()]
    assert "Transf. 2w" in shown and "Cable" not in shown
    QTest.keyClick(shelf.search, Qt.Key.Key_Return)
    assert names == ["Transf. 2w"]
    shelf.search.setText("nonsense")
    assert not any(t.isVisible() for t in shelf.tiles)
    shelf.search.clear()
    assert all(t.isVisible() for t in shelf.tiles)


def test_every_tile_is_named_told_and_painted_in_its_own_way(shelf: Shelf) -> None:
    pictures = set()
    for one in shelf.tiles:
        assert one.accessibleName() and one.toolTip()
        assert one.focusPolicy() & Qt.FocusPolicy.TabFocus
        image = one.grab().toImage().convertToFormat(QImage.Format.Format_RGB32)
        pictures.add(bytes(image.constBits()))
    assert len(pictures) == len(OFFERS)


def test_the_motor_group_shows_its_number() -> None:
    group = next(offer for offer in OFFERS if offer.presets)
    single = next(offer for offer in OFFERS if offer.kind == group.kind and not offer.presets)
    assert offer_shapes(group) != offer_shapes(single)
