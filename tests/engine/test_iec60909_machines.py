"""Breaking currents by hand: one machine, separate ones, machines behind a common branch (IEC 60909-0, clause 9)."""

import cmath
import math

import numpy as np
import pytest

from onelinefault.engine.case import Case
from onelinefault.engine.grids import Grids
from onelinefault.engine.iec60909_machines import Machines, breaking
from onelinefault.engine.sight import Places, Sight
from onelinefault.model.fault import Fault, Place
from tests.oracle.sketch import Sketch, TerminalKey

SQRT3 = math.sqrt(3)
OHM = 0.18 * 100 / 20  # X″d of 18 % at 10 kV and 20 MVA
MU = 0.62 + 0.72 * math.exp(-0.32 * 1.1 / 0.18)  # of one times 1.1/0.18 its rated current, at 0.1 s


def generator(s: Sketch, bus: TerminalKey) -> str:
    """20 MVA, 10 kV, power factor 1 and X″d 18 % without resistance: K_G = 1.1."""
    return s.hang(
        "synchronous_generator", bus, rated_power="20 MVA", rated_voltage="10 kV", power_factor="1",
        subtransient_reactance="18 %", resistance="0 ohm",
    )  # fmt: skip


def line(s: Sketch, a: TerminalKey, b: TerminalKey, ohm: complex) -> None:
    s.hang("overhead_line", a, b, length="1 km", r_per_length=f"{ohm.real} ohm/km", x_per_length=f"{ohm.imag} ohm/km")


def sight(s: Sketch, bus: TerminalKey) -> Sight:
    grid = Grids(s.plant, Case("iec60909")).grid()
    return Sight(grid, Places(np.array([grid.network.node_of[bus]]), Fault(Place(*bus))))


def test_one_generator_decays_by_mu() -> None:
    # I″k = 1.1·10/√3/(1.1·j1.8·0.5) → E/X″d: 5.55 times rated, K_G takes c away again
    s = Sketch()
    bus = s.bus(10.0)
    part = generator(s, bus)
    found = breaking(s.plant, sight(s, bus), 0.1)
    ik = 10 / SQRT3 / OHM
    mu = 0.62 + 0.72 * math.exp(-0.32 / 0.18)
    assert found.apart_ka[0] == pytest.approx(mu * ik, rel=1e-12)
    # for a fault at the terminals ΔU″ = c·Un/√3, so the meshed rule is the same
    assert found.meshed_ka[0] == pytest.approx(mu * ik, rel=1e-12)
    (share,) = found.shares
    assert (share.part, share.ik_ka) == (part, pytest.approx(ik)) and share.left == pytest.approx(mu)
    assert share.times_rated == pytest.approx(1 / 0.18, rel=1e-12)


def test_machines_on_ways_of_their_own_add_what_is_left_of_each() -> None:
    # a generator at the bus, another over a line of j0.9 ohm: together 1/0.99 and 1/(0.99 + 0.9) of E
    s = Sketch()
    bus, far = s.bus(10.0), s.bus(10.0)
    generator(s, bus)
    generator(s, far)
    line(s, bus, far, 0.9j)
    E, x = 1.1 * 10 / SQRT3, 1.1 * OHM
    rated = 20 / (SQRT3 * 10)
    near, remote = E / x, E / (x + 0.9)
    left = [0.62 + 0.72 * math.exp(-0.32 * i / rated) for i in (near, remote)]
    assert breaking(s.plant, sight(s, bus), 0.1).apart_ka[0] == pytest.approx(
        near * left[0] + remote * left[1], rel=1e-12
    )


def test_machines_behind_a_common_line_are_weighted_with_the_dip_of_their_voltage() -> None:
    # two generators on one bus, a line of 0.2 + j0.7 ohm to the fault
    s = Sketch()
    bus, fault = s.bus(10.0), s.bus(10.0)
    generator(s, bus)
    generator(s, bus)
    line(s, bus, fault, 0.2 + 0.7j)
    E, x = 1.1 * 10 / SQRT3, 1.1 * OHM
    whole = E / (0.2 + 0.7j + 1j * x / 2)
    each = whole / 2
    mu = 0.62 + 0.72 * math.exp(-0.32 * abs(each) / (20 / (SQRT3 * 10)))
    wanted = whole - 2 * (1j * x * each) / E * (1 - mu) * each
    found = breaking(s.plant, sight(s, fault), 0.1)
    assert found.meshed_ka[0] == pytest.approx(abs(wanted), rel=1e-12)
    assert found.meshed_ka[0] > found.apart_ka[0]


def test_a_machine_behind_a_transformer_counts_at_its_own_terminals() -> None:
    # 10/0.4 kV, ratio 25; the products ΔU″·I″k are the same on both levels
    s = Sketch()
    bus, low = s.bus(10.0), s.bus(0.4)
    s.hang("supply", bus, nominal_voltage="10 kV", fault_level_max="10 kA", x_over_r="1000", x0_over_x1="1")
    s.hang(
        "transformer", bus, low, rated_power="1 MVA", high_voltage="10 kV", low_voltage="0.4 kV", impedance="6 %",
        load_loss="0.000001 %", vector_group="Dyn5",
    )  # fmt: skip
    motor = s.hang(
        "induction_motor", low, count="4", rated_power="100 kW", rated_voltage="0.4 kV", efficiency="100 %",
        power_factor="1", locked_rotor_ratio="6", x_over_r="100", poles="2",
    )  # fmt: skip
    k = 0.95 * 1.05 / (1 + 0.6 * 0.06)
    zm = 0.16 / 0.4 / 6 * (1 + 100j) / math.hypot(1, 100)
    at_motor = 1.1 * 0.4 / SQRT3 / (zm + k * 0.06j * 0.16)
    times = abs(at_motor) / (0.4 / (SQRT3 * 0.4))
    q = 0.57 + 0.12 * math.log(0.1)
    found = breaking(s.plant, sight(s, bus), 0.1)
    (share,) = found.shares
    assert share.part == motor and share.times_rated == pytest.approx(times, rel=1e-6)
    assert share.left == pytest.approx((0.62 + 0.72 * math.exp(-0.32 * times)) * q, rel=1e-6)
    feeder = 1.1 * 10 / SQRT3 / (1.1 / SQRT3 * (1 + 1000j) / math.hypot(1, 1000))
    wanted = feeder + share.left * at_motor / 25
    assert found.apart_ka[0] == pytest.approx(abs(wanted), rel=1e-6)


def test_ratings_of_machines() -> None:
    # S = 630/(0.9·0.7) = 1 MVA each, two running of four; four poles: 0.315 MW for each pair
    s = Sketch(base_power="10 MVA")
    bus = s.bus(6.0)
    s.hang(
        "induction_motor", bus, count="4", running_share="50 %", rated_power="630 kW", rated_voltage="6 kV",
        efficiency="90 %", power_factor="0.7", poles="4",
    )  # fmt: skip
    s.hang(
        "synchronous_motor", bus, rated_power="1.8 MW", rated_voltage="6.6 kV", efficiency="100 %", power_factor="0.9"
    )
    s.hang("supply", bus, nominal_voltage="6 kV", fault_level_max="100 MVA", x0_over_x1="1")
    machines = Machines.of(s.plant, Grids(s.plant, Case("iec60909")).grid().network)
    np.testing.assert_allclose(machines.rated_pu, [2 / 10, 2 / 10 * 6 / 6.6], rtol=1e-12)
    assert machines.per_pair_mw[0] == pytest.approx(0.315) and math.isnan(machines.per_pair_mw[1])
    assert len(machines.parts) == 2


def test_directions_of_currents_count() -> None:
    # the share of a resistive branch turns the current: phasors are added, not magnitudes
    s = Sketch()
    bus, far = s.bus(10.0), s.bus(10.0)
    generator(s, bus)
    generator(s, far)
    line(s, bus, far, 4 + 0j)
    E, x, rated = 1.1 * 10 / SQRT3, 1.1 * OHM, 20 / (SQRT3 * 10)
    parts = [E / (1j * x), E / (4 + 1j * x)]
    mu = [min(1.0, 0.62 + 0.72 * math.exp(-0.32 * abs(i) / rated)) if abs(i) > 2 * rated else 1.0 for i in parts]
    wanted = abs(sum(i * m for i, m in zip(parts, mu, strict=True)))
    assert breaking(s.plant, sight(s, bus), 0.1).apart_ka[0] == pytest.approx(wanted, rel=1e-12)
    assert cmath.phase(parts[1]) != pytest.approx(cmath.phase(parts[0]), abs=0.1)
