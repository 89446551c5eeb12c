"""One small plant, written down by hand.

Intake ──5── Q1 ── W1 ──5── Board ──9── joint ─┬─ LD1
                                               └─ M1 (corner)
"""

import pytest

from onelinefault.model.conductors import Cable
from onelinefault.model.consumers import Bus, Load
from onelinefault.model.plant import End, Plant, Wire
from onelinefault.model.sources import InductionMotor
from onelinefault.model.switching import Breaker


@pytest.fixture
def plant() -> Plant:
    parts = [
        Bus(id="p1", name="Intake", x=0, y=0, length=20),
        Breaker(id="p2", name="Q1", x=5, y=4),
        Cable(id="p3", name="W1", x=5, y=11),
        Bus(id="p4", name="Board", x=0, y=18, length=12),
        Load(id="p5", name="LD1", x=9, y=25),
        Bus(id="p6", x=9, y=20, length=0),
        InductionMotor(id="p7", name="M1", x=14, y=26),
    ]
    wires = [
        Wire("w11", End("p1", "bar", 5), End("p2", "a")),
        Wire("w12", End("p2", "b"), End("p3", "a")),
        Wire("w13", End("p3", "b"), End("p4", "bar", 5)),
        Wire("w14", End("p4", "bar", 9), End("p6", "bar", 0)),
        Wire("w15", End("p6", "bar", 0), End("p5", "line")),
        Wire("w16", End("p6", "bar", 0), End("p7", "line"), ((14, 20),)),
    ]
    return Plant(parts={p.id: p for p in parts}, wires={w.id: w for w in wires}, next_number=20)
