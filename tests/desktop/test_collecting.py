"""Garbage is collected in the window's thread, never in the solver's."""

import gc
import threading
from collections.abc import Iterator
from pathlib import Path
from typing import ClassVar

import pytest
from PySide6.QtCore import QObject
from pytestqt.qtbot import QtBot

from onelinefault.desktop.collecting import Collector
from onelinefault.model.editing import rename
from tests.desktop.windows import open_window, wait_solved


class Cycle:
    """Goes only by garbage collection, and tells in which thread."""

    gone_in: ClassVar[list[int]] = []

    def __init__(self) -> None:
        self.itself = self

    def __del__(self) -> None:
        Cycle.gone_in.append(threading.get_ident())


@pytest.fixture
def collector(qapp: object) -> Iterator[Collector]:
    owner = QObject()
    collector = Collector(owner)
    yield collector
    collector.stop()


def litter(count: int) -> list[list[int]]:
    return [[] for _ in range(count)]


def test_other_threads_do_not_collect_and_the_timer_does(collector: Collector) -> None:
    Cycle.gone_in = []
    Cycle()
    thread = threading.Thread(target=litter, args=(100_000,))  # far more than Python's own threshold
    thread.start()
    thread.join()
    assert Cycle.gone_in == []
    kept = litter(30_000)
    collector.look()
    assert Cycle.gone_in == [threading.get_ident()]
    assert len(kept) == 30_000


def test_little_garbage_is_left_alone(collector: Collector) -> None:
    gc.collect()
    collector.look()
    assert collector.looks == 0


def test_python_collects_again_afterwards(collector: Collector) -> None:
    assert not gc.isenabled()
    collector.stop()
    assert gc.isenabled()


def test_a_window_keeps_the_solver_from_collecting(qtbot: QtBot, tmp_path: Path) -> None:
    Cycle.gone_in = []
    with open_window(qtbot, tmp_path) as window:
        assert not gc.isenabled()
        Cycle()
        for i in range(5):
            part = next(iter(window.session.plant.parts))
            window.session.apply(rename(window.session.plant, part, f"Infeed {i}"))
            wait_solved(qtbot, window.solver)
        assert set(Cycle.gone_in) <= {threading.get_ident()}
        window.session.saved_plant = window.session.plant
        window.close()
        assert gc.isenabled()
