"""Parts survive the clipboard exactly; foreign and damaged contents are no parts."""

from PySide6.QtCore import QMimeData
from pytestqt.qtbot import QtBot

from onelinefault.desktop.clipboard import FRAGMENT_MIME, fragment_from, fragment_mime, fragment_on, put_fragment
from onelinefault.model.editing import copy
from tests.drawing.plants import pump_house


def test_a_fragment_comes_back_equal(qtbot: QtBot) -> None:
    plant, _ = pump_house()
    fragment = copy(plant, plant.parts)
    assert len(fragment.parts) == len(plant.parts) and fragment.wires
    assert fragment_from(fragment_mime(fragment)) == fragment
    put_fragment(fragment)
    assert fragment_on() == fragment


def test_other_programs_see_the_names(qtbot: QtBot) -> None:
    plant, ids = pump_house()
    assert fragment_mime(copy(plant, [ids["t1"], ids["board"]])).text().splitlines() == ["T1", "Board A"]


def test_what_is_not_ours_is_nothing(qtbot: QtBot) -> None:
    words = QMimeData()
    words.setText("T1")
    assert fragment_from(words) is None
    assert fragment_from(None) is None
    for damage in (b"", b"{", b"[]", b'{"parts": [{"kind": "wormhole", "id": "p1"}], "wires": [], "origin": [0, 0]}'):
        broken = QMimeData()
        broken.setData(FRAGMENT_MIME, damage)
        assert fragment_from(broken) is None
