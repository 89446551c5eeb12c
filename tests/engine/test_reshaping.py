"""Networks at another frequency and of one kind alone, against the impedances themselves."""

import numpy as np
import pytest

from onelinefault.engine.build import build_network
from onelinefault.engine.case import Case
from onelinefault.engine.network import Network
from onelinefault.engine.reshaping import LEFT, reshaped
from tests.oracle.sketch import Sketch

ARRAYS = ("y_series", "y_from", "y_to", "y_shunt")


def network() -> Network:
    s = Sketch()
    high, low = s.bus(10.0), s.bus(0.4)
    s.hang("supply", high, nominal_voltage="10 kV", fault_level_max="200 MVA", x_over_r="5", x0_over_x1="2")
    s.hang(
        "transformer", high, low, rated_power="1 MVA", high_voltage="10 kV", low_voltage="0.4 kV", impedance="6 %",
        x_over_r="8", neutral_low="resistor 0.1 ohm", zero_sequence_impedance="90 %",
    )  # fmt: skip
    return build_network(s.plant, Case())


@pytest.mark.parametrize(("resistance", "reactance"), [(1.0, 0.4), (1.0, 0.27), (2.0, 1.0), (0.5, 3.0)])
def test_resistances_and_reactances_are_scaled_apart(resistance: float, reactance: float) -> None:
    before = network()
    after = reshaped(before, resistance, reactance)
    there = 0
    for name in ARRAYS:
        y, changed = getattr(before, name), getattr(after, name)
        assert ((y == 0) == (changed == 0)).all()
        z, new = 1 / y[y != 0], 1 / changed[y != 0]
        np.testing.assert_allclose(new.real, resistance * z.real, rtol=1e-12)
        np.testing.assert_allclose(new.imag, reactance * z.imag, rtol=1e-12)
        there += z.size
    assert there == 3 + 3  # a supply in three sequences; a transformer in two, and its shunt
    assert (after.ratio == before.ratio).all() and after.nodes == before.nodes


def test_one_kind_alone() -> None:
    before = network()
    only_r, only_x = reshaped(before, 1.0, 0.0), reshaped(before, 0.0, 1.0)
    z = 1 / before.y_shunt
    np.testing.assert_allclose(1 / only_r.y_shunt, z.real, rtol=1e-12)
    np.testing.assert_allclose(1 / only_x.y_shunt, 1j * z.imag, rtol=1e-12)


def test_nothing_is_left_of_a_pure_reactance_without_its_reactance_but_a_trace() -> None:
    s = Sketch()
    bus = s.bus(10.0)
    s.hang(
        "synchronous_generator", bus, rated_power="10 MVA", rated_voltage="10 kV", resistance="0 ohm",
        subtransient_reactance="20 %",
    )  # fmt: skip
    before = build_network(s.plant, Case())
    z = 1 / reshaped(before, 1.0, 0.0).y_shunt[0, 0]
    assert z == pytest.approx(LEFT * abs(1 / before.y_shunt[0, 0]), rel=1e-9)


def test_factors_of_one_change_nothing() -> None:
    before = network()
    assert reshaped(before, 1.0, 1.0) is before
