"""The oracle by itself obeys the laws that need no program: closed forms, 1:1:0, 1:2:1, clock numbers, Kirchhoff."""

import cmath
import math

import numpy as np
import pytest
from hypothesis import HealthCheck, given, settings

from onelinefault.engine.case import Case
from onelinefault.model.fault import Fault, FaultKind, Place
from onelinefault.model.plant import Plant
from tests.oracle.circuit import Circuit, Pin
from tests.oracle.ohms import A120
from tests.oracle.phase_domain import Oracle
from tests.oracle.plants import Problem, problems
from tests.oracle.sketch import Sketch, TerminalKey
from tests.oracle.wiring import Wiring

CASE = Case()
GROUPS = [
    f"{high}{low}{clock}"
    for high in ("D", "YN", "ZN")
    for low in ("d", "yn", "zn")
    for clock in range(12)
    if (clock % 2 == 1) == ({high[0], low[0].upper()} in ({"D", "Y"}, {"Y", "Z"})) and {high[0], low[0]} != {"Z", "z"}
]


def behind_transformer(group: str, **ratings: str) -> tuple[Plant, TerminalKey, TerminalKey, str]:
    """Supply, 10 kV bus, transformer, 0.4 kV bus."""
    sketch = Sketch()
    high, low = sketch.bus(10.0), sketch.bus(0.4)
    sketch.hang(
        "supply", high, nominal_voltage="10", fault_level_max="300 MVA", x_over_r="8", x0_over_x1="2", r0_over_x0="0.1"
    )
    values = {"neutral_high": "solid", "neutral_low": "solid"} | ratings
    part = sketch.hang(
        "transformer", high, low, rated_power="1", high_voltage="10", low_voltage="0.4", impedance="6", x_over_r="7",
        zero_sequence_impedance="95", vector_group=group, **values,
    )  # fmt: skip
    return sketch.plant, high, low, part


def test_closed_forms_at_a_supply() -> None:
    sketch = Sketch()
    bus = sketch.bus(10.0)
    ratings = {"nominal_voltage": "10 kV", "fault_level_max": "2 ohm", "x_over_r": "3", "x0_over_x1": "2.5"}
    sketch.hang("supply", bus, **ratings, r0_over_x0="0.2")
    z1 = 2 / math.hypot(1, 3) * (1 + 3j)
    z0 = 2.5 * z1.imag * (0.2 + 1j)
    volts, zf, zg = 10 / math.sqrt(3), 0.3 + 0.1j, 0.5 + 0j

    def current(kind: FaultKind) -> complex:
        answer = Oracle(sketch.plant, CASE).fault(Fault(Place(*bus), kind, zf_ohm=zf, zg_ohm=zg))
        return complex(answer.fault_ka["abc".index("b" if kind is not FaultKind.LINE_TO_EARTH else "a")])

    # Anderson, Analysis of Faulted Power Systems, chapter 2: the four closed forms
    assert current(FaultKind.THREE_PHASE) == pytest.approx(volts / (z1 + zf) * A120**2, rel=1e-12)
    assert current(FaultKind.LINE_TO_EARTH) == pytest.approx(3 * volts / (2 * z1 + z0 + 3 * zf + 3 * zg), rel=1e-12)
    assert current(FaultKind.LINE_TO_LINE) == pytest.approx(-1j * math.sqrt(3) * volts / (2 * z1 + zf), rel=1e-12)
    behind = z0 + zf + 3 * zg
    i1 = volts / (z1 + zf + (z1 + zf) * behind / (z1 + zf + behind))
    i2 = -i1 * behind / (z1 + zf + behind)
    i0 = -i1 - i2
    assert current(FaultKind.TWO_LINES_TO_EARTH) == pytest.approx(A120**2 * i1 + A120 * i2 + i0, rel=1e-12)


@pytest.mark.parametrize("clock", [1, 3, 5, 7, 9, 11])
def test_delta_lines_carry_1_1_0_and_1_2_1(clock: int) -> None:
    plant, _, low, part = behind_transformer(f"Dyn{clock}")
    earth = Oracle(plant, CASE).fault(Fault(Place(*low), FaultKind.LINE_TO_EARTH, "b"))
    lines = np.sort(abs(earth.terminal_ka[part, "high"]))
    assert lines == pytest.approx(np.array([0, 1, 1]) * abs(earth.fault_ka[1]) * 0.04 / math.sqrt(3), abs=1e-12)
    two = Oracle(plant, CASE).fault(Fault(Place(*low), FaultKind.LINE_TO_LINE, "ca"))
    lines = np.sort(abs(two.terminal_ka[part, "high"]))
    assert lines == pytest.approx(np.array([1, 1, 2]) * abs(two.fault_ka[0]) * 0.04 / math.sqrt(3), abs=1e-12)


@pytest.mark.parametrize("group", GROUPS)
def test_clock_numbers_are_those_of_the_nameplate(group: str) -> None:
    plant, high, low, _ = behind_transformer(group)
    before = Oracle(plant, CASE).fault(Fault(Place(*high))).before_kv
    # IEC 60076-1: the low side lags by the clock number times 30 degrees
    clock = int("".join(c for c in group if c.isdigit()))
    lag = cmath.exp(-1j * math.radians(30 * clock))
    assert before[low] == pytest.approx(before[high] * 0.04 * lag, abs=1e-12)


@pytest.mark.parametrize(("clock", "sign"), [(0, 1), (2, -1), (4, 1), (6, -1), (8, 1), (10, -1)])
def test_half_of_the_star_star_clocks_reverse_the_zero_sequence(clock: int, sign: int) -> None:
    plant, high, low, part = behind_transformer(f"YNyn{clock}")
    answer = Oracle(plant, CASE).fault(Fault(Place(*low), FaultKind.LINE_TO_EARTH))
    residual_high = answer.terminal_ka[part, "high"].sum()
    assert residual_high == pytest.approx(-sign * 0.04 * answer.terminal_ka[part, "low"].sum(), rel=1e-9)
    assert abs(answer.voltage_kv[high].sum()) > 0.1


def test_star_star_delta_feeds_an_earth_fault_from_its_closed_delta() -> None:
    sketch = Sketch()
    high, medium, low = sketch.bus(33.0), sketch.bus(11.0), sketch.bus(6.6)
    sketch.hang("supply", high, nominal_voltage="33", fault_level_max="500 MVA", star_point="isolated", x0_over_x1="1")
    part = sketch.hang(
        "transformer3", high, medium, low, high_voltage="33", medium_voltage="11", low_voltage="6.6",
        rated_power_high="20", rated_power_medium="20", rated_power_low="7", impedance_high_medium="10",
        impedance_high_low="17", impedance_medium_low="6", base_high_medium="20", base_high_low="20",
        base_medium_low="20", vector_group="YNyn0d11", neutral_high="solid", neutral_medium="isolated",
    )  # fmt: skip
    answer = Oracle(sketch.plant, CASE).fault(Fault(Place(*high), FaultKind.LINE_TO_EARTH))
    assert abs(answer.fault_ka[0]) > 0.5
    assert answer.earth_ka[part, "high"] == pytest.approx(-answer.fault_ka[0], rel=1e-9)
    assert np.allclose(answer.terminal_ka[part, "low"], 0, atol=1e-10)


def test_unearthed_network_gives_no_current_and_full_displacement() -> None:
    plant, _, low, _ = behind_transformer("Dyn11", neutral_low="isolated")
    answer = Oracle(plant, CASE).fault(Fault(Place(*low), FaultKind.LINE_TO_EARTH))
    assert abs(answer.fault_ka).max() < 1e-12
    assert abs(answer.voltage_kv[low]) == pytest.approx(np.array([0, 0.4, 0.4]), abs=1e-12)


def test_unfaulted_unearthed_side_has_no_zero_sequence_voltage() -> None:
    plant, high, low, _ = behind_transformer("YNd5")
    answer = Oracle(plant, CASE).fault(Fault(Place(*high), FaultKind.LINE_TO_EARTH))
    assert abs(answer.voltage_kv[low].sum()) < 1e-12


def test_a_current_forced_against_kirchhoff_is_noticed() -> None:
    circuit = Circuit()
    lone = circuit.pin()
    circuit.coil(lone, Pin(None), 1 + 0j, 5.0)
    circuit.coil(lone, Pin(None), 0j, 5.0)
    circuit.coil(lone, Pin(None), 0j, 6.0)
    with pytest.raises(AssertionError, match="contradicts"):
        circuit.solve()


@given(problems(largest=30, faults=1))
@settings(max_examples=15, deadline=None, suppress_health_check=[HealthCheck.too_slow, HealthCheck.data_too_large])
def test_kirchhoff_holds_at_every_node_of_random_plants(problem: Problem) -> None:
    fault = problem.faults[0]
    answer = Oracle(problem.plant, problem.case).fault(fault)
    wiring = Wiring(problem.plant)
    sums: dict[TerminalKey, list[np.ndarray]] = {}
    for key, ampere in answer.terminal_ka.items():
        sums.setdefault(wiring.node(key), []).append(ampere)
    if fault.place.fraction in (None, 0.0, 1.0):
        terminal = "b" if fault.place.fraction == 1.0 else fault.place.terminal
        sums.setdefault(wiring.node((fault.place.part, terminal)), []).append(answer.fault_ka)
    for amperes in sums.values():
        assert abs(np.sum(amperes, axis=0)).max() <= 1e-9 * max(abs(np.array(amperes)).max(), 1e-3)
