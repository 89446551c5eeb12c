"""Frames of the canvas with many parts, offscreen: pan, zoom, drag, select, open.

Run: python tests/bench/bench_canvas.py [parts ...]. Prints medians in ms; absolute values move with the machine.
"""

import os
import sys
from collections.abc import Callable
from pathlib import Path
from statistics import median
from time import perf_counter

os.environ.setdefault("QT_QPA_PLATFORM", "offscreen")
sys.path.insert(0, str(Path(__file__).parents[2]))

from PySide6.QtWidgets import QApplication

from onelinefault.desktop.scene import SheetScene
from onelinefault.desktop.view import SheetView
from onelinefault.drawing.painter import load_fonts
from onelinefault.model.editing import move
from onelinefault.model.edits import apply
from onelinefault.model.part import Part
from onelinefault.model.parts import part_class
from onelinefault.model.plant import Document, End, Plant, Sheet, Wire

FEEDER = ("breaker", "cable", "transformer", "bus", "induction_motor")


def many_parts(count: int) -> Plant:
    """Feeders below long buses: bus, then columns of breaker, cable, transformer, bus and motor."""
    parts: dict[str, Part] = {}
    wires: dict[str, Wire] = {}
    number = 0

    def put(kind: str, x: int, y: int, **more: object) -> str:
        nonlocal number
        number += 1
        key = f"p{number}"
        parts[key] = part_class(kind)(id=key, name=f"{kind[:2].upper()}{number}", x=x, y=y, **more)
        return key

    def join(a: End, b: End) -> None:
        nonlocal number
        number += 1
        wires[f"w{number}"] = Wire(f"w{number}", a, b)

    row = 0
    while len(parts) < count:
        bus = put("bus", 10, 10 + row * 60, length=300)
        for column in range(30):
            x, y = 14 + column * 10, 10 + row * 60
            q, w = put("breaker", x, y + 5), put("cable", x, y + 12)
            t, b = put("transformer", x, y + 22), put("bus", x - 3, y + 30, length=6)
            m = put("induction_motor", x, y + 38)
            join(End(bus, "bar", x - 10), End(q, "a"))
            join(End(q, "b"), End(w, "a"))
            join(End(w, "b"), End(t, "high"))
            join(End(t, "low"), End(b, "bar", 3))
            join(End(b, "bar", 3), End(m, "line"))
            if len(parts) >= count:
                break
        row += 1
    return Plant(Document(), parts, wires, (Sheet("s1", paper="A0"),), next_number=number + 1)


def timed(action: Callable[[], object], repeat: int = 15) -> float:
    """Median time of an action in ms."""
    times = []
    for _ in range(repeat):
        start = perf_counter()
        action()
        times.append((perf_counter() - start) * 1e3)
    return median(times)


def measure(count: int) -> None:
    plant = many_parts(count)
    start = perf_counter()
    scene = SheetScene(plant)
    view = SheetView(scene)
    view.scaled.connect(scene.show_scale)
    view.resize(1500, 900)
    view.show()
    QApplication.processEvents()
    view.grab()
    opened = (perf_counter() - start) * 1e3

    def frame() -> None:
        view.viewport().repaint()

    view.fit()
    fit = timed(frame)
    view.zoom(1 / view.scale_factor)
    view.centerOn(900, 600)
    full = timed(frame)
    bar = view.horizontalScrollBar()

    def pan() -> None:
        bar.setValue(bar.value() + 12)
        QApplication.processEvents()

    panned = timed(pan)
    view.fit()

    def zoom() -> None:
        view.zoom(1.15)
        view.viewport().repaint()

    zoomed = timed(zoom)
    view.zoom(1 / view.scale_factor)
    view.centerOn(900, 600)
    step = [0]

    def drag(ids: list[str]) -> None:
        step[0] += 1
        scene.show_plant(apply(plant, move(plant, ids, step[0] % 5, 1)))
        QApplication.processEvents()

    one = timed(lambda: drag(["p4"]))
    hundred = timed(lambda: drag([f"p{i}" for i in range(2, 102) if f"p{i}" in plant.parts]))
    everything = frozenset(plant.parts)

    def select() -> None:
        scene.show_selection(frozenset() if scene.part_items["p2"].chosen else everything)
        QApplication.processEvents()

    chosen = timed(select)
    print(
        f"{count:6} parts: open {opened:7.0f}  fit {fit:6.1f}  1:1 {full:6.1f}  pan {panned:5.1f}  zoom {zoomed:6.1f}  "
        f"drag one {one:5.1f}  drag 100 {hundred:6.1f}  select all {chosen:6.1f}  (ms)"
    )


if __name__ == "__main__":
    app = QApplication([])
    load_fonts()
    for size in [int(a) for a in sys.argv[1:]] or [200, 1000, 5000]:
        measure(size)
