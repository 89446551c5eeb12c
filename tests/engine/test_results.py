import numpy as np
import pytest

from onelinefault.model.fault import Fault, FaultKind, Place
from tests.engine.networks import INF, Sketch


def result(kind: FaultKind):
    s = Sketch(base_mva=50)
    a, b = s.node(20), s.node(10, 30)
    s.source(a, (0.1j, 0.1j, 0.2j))
    s.branch(a, b, (0.1j, 0.1j, INF))
    return s.study().fault(Fault(Place("B1"), kind))


def test_per_unit_and_ohm_are_the_same_impedance() -> None:
    """At 10 kV and 50 MVA one per unit is 2 ohm."""
    found = result(FaultKind.THREE_PHASE)
    assert found.z_ohm == (pytest.approx(0.4j), pytest.approx(0.4j), None)
    assert found.z_pu == (pytest.approx(0.2j), pytest.approx(0.2j), None)


def test_largest_phase_and_smallest_voltage_left() -> None:
    """Line to line halves V1 at the fault: phase a keeps 1, b and c 0.5. Half way V1 is 0.75 and V2 0.25, and through
    the 30° of the transformer they are opposite in one phase: 0.5 is left there.
    """
    found = result(FaultKind.LINE_TO_LINE)
    assert found.ik_ka == pytest.approx(np.sqrt(3) / 2 * 10 / np.sqrt(3) / 0.4, rel=1e-12)
    assert found.voltage_left == pytest.approx([0.5, 0.5], rel=1e-12)
