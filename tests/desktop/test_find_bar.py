"""Finding parts by name, on any sheet."""

from collections.abc import Iterator

import pytest
from PySide6.QtCore import Qt
from PySide6.QtTest import QTest
from pytestqt.qtbot import QtBot

from onelinefault.desktop.find_bar import FindBar, hits
from tests.desktop.windows import pump_session
from tests.drawing.plants import pump_house


@pytest.fixture
def bar(qtbot: QtBot) -> Iterator[tuple[FindBar, dict[str, str], list[str]]]:
    session, ids = pump_session()
    bar = FindBar(session)
    qtbot.addWidget(bar)
    bar.start()
    found: list[str] = []
    bar.found.connect(found.append)
    yield bar, ids, found


def test_equal_names_come_first_then_beginnings_then_the_rest() -> None:
    plant, ids = pump_house()
    assert hits(plant, "board a") == [ids["board"]]
    assert hits(plant, "1") == [ids["t1"], ids["g1"], ids["w1"], ids["q1"]]  # in the order they were placed
    assert hits(plant, "g") == [ids["grid"], ids["g1"]]
    assert hits(plant, "T1")[0] == ids["t1"]
    assert hits(plant, "  ") == [] == hits(plant, "xyz")


def test_typing_shows_the_first_hit_and_enter_the_next(bar: tuple[FindBar, dict[str, str], list[str]]) -> None:
    line, ids, found = bar
    QTest.keyClicks(line.line, "g")
    assert found[-1] == ids["grid"]
    assert line.count.text() == "1 of 2"
    QTest.keyClick(line.line, Qt.Key.Key_Return)
    assert (found[-1], line.count.text()) == (ids["g1"], "2 of 2")
    line.next()
    assert found[-1] == ids["grid"]
    line.previous()
    assert found[-1] == ids["g1"]


def test_no_hit_is_told_and_escape_closes(bar: tuple[FindBar, dict[str, str], list[str]]) -> None:
    line, _, found = bar
    QTest.keyClicks(line.line, "zz")
    assert found == []
    assert line.count.text() == "no part of this name"
    QTest.keyClick(line.line, Qt.Key.Key_Escape)
    assert not line.isVisible()
