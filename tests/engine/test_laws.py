"""Laws that every fault calculation obeys, on random plants and on the textbook's smallest ones."""

import cmath
import math
import random
from dataclasses import replace
from typing import Any

import networkx as nx
import numpy as np
import pytest
from hypothesis import HealthCheck, assume, given, settings
from hypothesis import strategies as st

from onelinefault.engine.case import Case
from onelinefault.engine.results import FaultResult
from onelinefault.engine.study import Study
from onelinefault.model.fault import Fault, FaultKind, Place
from onelinefault.model.part import Part
from onelinefault.model.plant import Plant, Wire
from onelinefault.model.sources import SynchronousGenerator, SynchronousMotor
from tests.oracle.plants import Problem, problems
from tests.oracle.sketch import Sketch, TerminalKey

A120 = cmath.exp(2j * math.pi / 3)
QUICK = settings(
    max_examples=12,
    deadline=None,
    suppress_health_check=[HealthCheck.too_slow, HealthCheck.data_too_large, HealthCheck.filter_too_much],
)
NOMINAL = Case()


def faulted(problem: Problem, kind: FaultKind, phases: str = "", **impedances: complex) -> FaultResult:
    """A fault of another kind at the problem's first place, prefault voltage nominal, no charging."""
    place = replace(problem.faults[0].place, fraction=None)
    case = replace(problem.case, charging=False, prefault="nominal")
    return Study(problem.plant, case).fault(Fault(place, kind, phases, **impedances))


def level_ka(result: FaultResult) -> float:
    """Three-phase fault current of the place, as a measure."""
    z1 = result.z_ohm[0]
    assert z1 is not None
    return result.prefault_kv / math.sqrt(3) / abs(z1)


# --- Kirchhoff ------------------------------------------------------------------------------------------------------


@given(problems(largest=20))
@QUICK
def test_currents_balance_at_every_terminal_on_the_sheet(problem: Problem) -> None:
    study = Study(problem.plant, problem.case)
    for fault in problem.faults:
        result = study.fault(fault)
        left: dict[TerminalKey, Any] = {key: np.zeros(3, complex) for key in result.network.node_of}
        for key, into_part in result.terminal_ka.items():
            left[key] = left[key] + into_part
        for wire in problem.plant.wires.values():
            left[wire.a.part, wire.a.terminal] = left[wire.a.part, wire.a.terminal] + result.wire_ka[wire.id]
            left[wire.b.part, wire.b.terminal] = left[wire.b.part, wire.b.terminal] - result.wire_ka[wire.id]
        if (place := fault.place).fraction is None or place.fraction in (0.0, 1.0):
            terminal = {None: place.terminal, 0.0: "a", 1.0: "b"}[place.fraction]
            left[place.part, terminal] = left[place.part, terminal] + result.phases_ka
        worst = max(abs(rest).max() for rest in left.values())
        assert worst <= 1e-9 * max(level_ka(result), *(abs(c).max() for c in result.terminal_ka.values()))


@given(problems(largest=20))
@QUICK
def test_devices_pass_their_current_on_and_rings_split_without_a_loop_current(problem: Problem) -> None:
    study = Study(problem.plant, problem.case)
    result = study.fault(problem.faults[0])
    scale = max(level_ka(result), *(abs(c).max() for c in result.terminal_ka.values()))
    graph: nx.MultiGraph[TerminalKey] = nx.MultiGraph()
    flow = {}
    for wire in problem.plant.wires.values():
        graph.add_edge((wire.a.part, wire.a.terminal), (wire.b.part, wire.b.terminal), key=wire.id)
        flow[wire.id] = ((wire.a.part, wire.a.terminal), result.wire_ka[wire.id])
    for part in problem.plant.parts.values():
        if part.kind in ("breaker", "switch", "fuse"):
            through = result.terminal_ka[part.id, "a"]
            assert abs(through + result.terminal_ka[part.id, "b"]).max() <= 1e-9 * scale
            if part.value("closed"):
                graph.add_edge((part.id, "a"), (part.id, "b"), key=part.id)
                flow[part.id] = ((part.id, "a"), through)
            else:
                assert abs(through).max() == 0
    simple: nx.Graph[TerminalKey] = nx.Graph(graph.edges())
    for ring in nx.minimum_cycle_basis(simple):
        ordered = nx.find_cycle(graph.subgraph(ring))
        around = [flow[key][1] * (1 if flow[key][0] == start else -1) for start, _, key in ordered]
        # least sum of squares: nothing is gained by adding a current all round
        assert abs(np.sum(around, axis=0)).max() <= 1e-8 * scale


# --- what must not matter -------------------------------------------------------------------------------------------


def quantities(result: FaultResult) -> dict[str, Any]:
    """Everything in kA and kV, keyed by what it belongs to rather than by node numbers."""
    node_of = result.network.node_of
    found: dict[str, Any] = {"fault": result.phases_ka, "at the fault": result.fault_kv}
    found |= {f"current {key}": value for key, value in result.terminal_ka.items()}
    found |= {f"wire {key}": value for key, value in result.wire_ka.items()}
    found |= {f"neutral {key}": np.array([value]) for key, value in result.neutral_ka.items()}
    found |= {f"voltage {key}": result.voltages_kv[node] for key, node in node_of.items() if result.network.live[node]}
    return found


def on_base(plant: Plant, mva: float) -> Plant:
    """The same plant with another base power."""
    other = Sketch(base_power=f"{mva!r} MVA").document.base_power
    return replace(plant, document=replace(plant.document, base_power=other))


@given(problems(largest=16, faults=1), st.sampled_from([2.0**-20, 0.5, 16.0, 2.0**30]))
@QUICK
def test_the_base_power_does_not_matter_at_all(problem: Problem, factor: float) -> None:
    # a power of two multiplies without rounding, so nothing may differ in any digit
    changed = on_base(problem.plant, problem.plant.document.base_mva * factor)
    one = quantities(Study(problem.plant, problem.case).fault(problem.faults[0]))
    two = quantities(Study(changed, problem.case).fault(problem.faults[0]))
    assert all(np.array_equal(two[key], value) for key, value in one.items())


@pytest.mark.parametrize("mva", [0.0413, 1.0, 17.3, 3270.0])
@pytest.mark.parametrize("group", ["Dyn11", "YNyn0", "YNd5", "Yzn1"])
def test_other_bases_give_the_same_to_twelve_digits(mva: float, group: str) -> None:
    plant, high, low, _ = behind(group, neutral_low="resistor 40 A 10 s", tap="5 %")
    for kind in FaultKind:
        for bus in (high, low):
            one = quantities(Study(plant, NOMINAL).fault(Fault(Place(*bus), kind)))
            two = quantities(Study(on_base(plant, mva), NOMINAL).fault(Fault(Place(*bus), kind)))
            for key, value in one.items():
                largest = max(abs(one["fault"]).max(), 0.1) if key.split()[0] != "voltage" else 10.0
                assert abs(two[key] - value).max() <= 1e-12 * largest, key


@given(problems(largest=16, faults=1), st.integers(0, 1000))
@QUICK
def test_the_order_of_parts_and_wires_does_not_matter(problem: Problem, seed: int) -> None:
    parts, wires = list(problem.plant.parts.items()), list(problem.plant.wires.items())
    random.Random(seed).shuffle(parts)
    random.Random(seed + 1).shuffle(wires)
    shuffled = replace(problem.plant, parts=dict(parts), wires=dict(wires))
    one = quantities(Study(problem.plant, problem.case).fault(problem.faults[0]))
    two = quantities(Study(shuffled, problem.case).fault(problem.faults[0]))
    assert one.keys() == two.keys()
    assert all(np.array_equal(two[key], value) for key, value in one.items())


@given(problems(largest=20, faults=1))
@QUICK
def test_the_ends_of_a_wire_are_alike(problem: Problem) -> None:
    turned = {key: Wire(key, wire.b, wire.a) for key, wire in problem.plant.wires.items()}
    one = Study(problem.plant, problem.case).fault(problem.faults[0])
    two = Study(replace(problem.plant, wires=turned), problem.case).fault(problem.faults[0])
    scale = max(level_ka(one), *(abs(c).max() for c in one.terminal_ka.values()))
    for key, value in one.wire_ka.items():
        assert abs(two.wire_ka[key] + value).max() <= 1e-9 * scale


# --- kinds of fault -------------------------------------------------------------------------------------------------


@given(problems(largest=16, faults=1))
@QUICK
def test_line_to_line_is_root_three_halves_where_both_sequences_are_alike(problem: Problem) -> None:
    stopped: dict[str, Part] = {
        key: replace(part, in_service=False) if isinstance(part, SynchronousGenerator | SynchronousMotor) else part
        for key, part in problem.plant.parts.items()
    }
    passive = replace(problem, plant=replace(problem.plant, parts=stopped))
    three = faulted(passive, FaultKind.THREE_PHASE)
    assume(three.ik_ka > 0)
    two = faulted(passive, FaultKind.LINE_TO_LINE)
    assert two.ik_ka == pytest.approx(math.sqrt(3) / 2 * three.ik_ka, rel=1e-10)


@given(problems(largest=16, faults=1))
@QUICK
def test_two_lines_to_earth_follows_from_the_other_three(problem: Problem) -> None:
    three, two, one = (
        faulted(problem, kind) for kind in (FaultKind.THREE_PHASE, FaultKind.LINE_TO_LINE, FaultKind.LINE_TO_EARTH)
    )
    assume(abs(one.phases_ka[0]) > 1e-3 * abs(three.phases_ka[0]))
    volts = three.prefault_kv / math.sqrt(3)
    z1 = volts / three.phases_ka[0]
    z2 = -1j * math.sqrt(3) * volts / two.phases_ka[1] - z1
    z0 = 3 * volts / one.phases_ka[0] - z1 - z2
    i1 = volts / (z1 + z2 * z0 / (z2 + z0))
    i2, i0 = -i1 * z0 / (z2 + z0), -i1 * z2 / (z2 + z0)
    found = faulted(problem, FaultKind.TWO_LINES_TO_EARTH).phases_ka
    expected = np.array([0, A120**2 * i1 + A120 * i2 + i0, A120 * i1 + A120**2 * i2 + i0])
    assert abs(found - expected).max() <= 1e-9 * abs(expected).max()


@given(
    problems(largest=16, faults=1), st.sampled_from([("a", "b", 1), ("a", "c", 2), ("bc", "ca", 1), ("bc", "ab", 2)])
)
@QUICK
def test_other_phases_are_the_same_fault_rolled(problem: Problem, turn: tuple[str, str, int]) -> None:
    first, other, steps = turn
    kind = FaultKind.LINE_TO_EARTH if len(first) == 1 else FaultKind.TWO_LINES_TO_EARTH
    one = faulted(problem, kind, first, zf_ohm=0.1 + 0j)
    two = quantities(faulted(problem, kind, other, zf_ohm=0.1 + 0j))
    for key, value in quantities(one).items():
        rolled = np.roll(value, steps if len(value) == 3 else 0) * A120 ** (-steps)
        largest = max(level_ka(one), one.prefault_kv, float(abs(value).max()))
        assert abs(two[key] - rolled).max() <= 1e-9 * largest, key


@given(problems(largest=16, faults=1, earthed=False))
@QUICK
def test_an_unearthed_plant_has_no_earth_fault_current(problem: Problem) -> None:
    result = faulted(problem, FaultKind.LINE_TO_EARTH)
    assert abs(result.phases_ka).max() == 0
    assert all(abs(ampere).max() <= 1e-12 * level_ka(result) for ampere in result.terminal_ka.values())
    assert abs(result.fault_kv) == pytest.approx(np.array([0, 1, 1]) * result.prefault_kv, abs=1e-9)
    both = faulted(problem, FaultKind.TWO_LINES_TO_EARTH)
    assert both.phases_ka == pytest.approx(faulted(problem, FaultKind.LINE_TO_LINE).phases_ka, rel=1e-10)


@given(problems(largest=16, faults=1))
@QUICK
def test_shares_of_the_sources_make_the_whole(problem: Problem) -> None:
    result = faulted(problem, problem.faults[0].kind)
    assume(abs(result.sequence_ka[0]) > 1e-6 * level_ka(result))
    assert sum(source.at_fault_ka for source in result.sources) == pytest.approx(result.sequence_ka[0], rel=1e-8)
    assert sum(source.share for source in result.sources) == pytest.approx(1.0, rel=1e-8)


@given(problems(largest=20, faults=2))
@QUICK
def test_a_fault_here_is_felt_there_as_a_fault_there_is_felt_here(problem: Problem) -> None:
    # reciprocity (any network text): the voltage that a current here changes there is the same the other way round
    study = Study(problem.plant, replace(problem.case, charging=False, prefault="nominal"))
    here, there = (replace(fault.place, fraction=None) for fault in problem.faults)
    one, two = (study.fault(Fault(place, FaultKind.THREE_PHASE)) for place in (here, there))
    assume(one.network.island[one.node] == two.network.island[two.node])
    change_there = (one.voltages_kv - one.prefault_voltages_kv)[two.node, 0] / one.phases_ka[0]
    change_here = (two.voltages_kv - two.prefault_voltages_kv)[one.node, 0] / two.phases_ka[0]
    assert abs(change_there) == pytest.approx(abs(change_here), rel=1e-8)


@given(problems(largest=16, faults=1))
@QUICK
def test_the_table_of_buses_says_what_the_single_faults_say(problem: Problem) -> None:
    study = Study(problem.plant, problem.case)
    rows = study.all_buses()
    assert rows
    for row in rows:
        if row.ik_ka == 0 and row.z1_ohm is None:
            assert not study.network.live[study.network.node_of[row.part, "bar"]]
            continue
        result = study.fault(Fault(Place(row.part), FaultKind(row.kind)))
        measure = level_ka(result)
        assert row.phases_ka == pytest.approx(abs(result.phases_ka), rel=1e-8, abs=1e-9 * measure)
        for size, angle_deg, phase in zip(row.phases_ka, row.phases_deg, result.phases_ka, strict=True):
            assert abs(cmath.rect(size, math.radians(angle_deg)) - phase) <= 1e-8 * measure
        assert row.residual_ka == pytest.approx(abs(result.residual_ka), rel=1e-8, abs=1e-9 * measure)
        assert row.fault_level_mva == pytest.approx(math.sqrt(3) * row.nominal_kv * row.ik_ka, rel=1e-12)
        for pair, z in zip((row.z1_ohm, row.z2_ohm, row.z0_ohm), result.z_ohm, strict=True):
            assert (pair is None) == (z is None)
            assert pair is None or z is None or abs(complex(*pair) - z) <= 1e-8 * abs(z)


# --- textbook laws, smallest plants ---------------------------------------------------------------------------------


def behind(group: str, **ratings: str) -> tuple[Plant, TerminalKey, TerminalKey, str]:
    """Supply at 33 kV, transformer to 11 kV."""
    sketch = Sketch()
    high, low = sketch.bus(33.0), sketch.bus(11.0)
    supply = {"nominal_voltage": "33", "fault_level_max": "600 MVA", "x_over_r": "9", "x0_over_x1": "1.7"}
    sketch.hang("supply", high, **supply, star_point=ratings.pop("star_point", "earthed"))
    values = {"neutral_high": "solid", "neutral_low": "solid", "core": "five-limb"} | ratings
    part = sketch.hang(
        "transformer", high, low, rated_power="20", high_voltage="33", low_voltage="11", impedance="10", x_over_r="20",
        zero_sequence_impedance="90", vector_group=group, **values,
    )  # fmt: skip
    return sketch.plant, high, low, part


def lines_of(group: str, kind: FaultKind, phases: str) -> tuple[list[float], float]:
    """Currents of the high side's lines in parts of the faulted low side's current and ratio; the latter."""
    plant, _, low, part = behind(group)
    result = Study(plant, NOMINAL).fault(Fault(Place(*low), kind, phases))
    measure = result.ik_ka / 3 / math.sqrt(3)
    return sorted(float(abs(i)) / measure for i in result.terminal_ka[part, "high"]), measure


@pytest.mark.parametrize("clock", [1, 3, 5, 7, 9, 11])
@pytest.mark.parametrize(("kind", "phases", "shares"), [
    (FaultKind.LINE_TO_EARTH, "c", [0, 1, 1]), (FaultKind.LINE_TO_LINE, "ab", [1, 1, 2]),
])  # fmt: skip
def test_delta_lines_of_star_faults(clock: int, kind: FaultKind, phases: str, shares: list[float]) -> None:
    assert lines_of(f"Dyn{clock}", kind, phases)[0] == pytest.approx(shares, abs=1e-10)


@pytest.mark.parametrize("clock", [0, 2, 4, 6, 8, 10])
def test_clocks_2_6_10_reverse_the_zero_sequence(clock: int) -> None:
    plant, _, low, part = behind(f"YNyn{clock}")
    result = Study(plant, NOMINAL).fault(Fault(Place(*low), FaultKind.LINE_TO_EARTH))
    sign = -1 if clock in (2, 6, 10) else 1
    assert result.terminal_ka[part, "high"].sum() == pytest.approx(sign * result.residual_ka / 3, rel=1e-10)


def test_stars_earthed_on_both_sides_of_an_unearthed_network_give_nothing() -> None:
    plant, high, low, _ = behind("YNyn0", star_point="isolated")
    for bus in (high, low):
        assert Study(plant, NOMINAL).fault(Fault(Place(*bus), FaultKind.LINE_TO_EARTH)).ik_ka == 0


def test_a_closed_delta_feeds_an_earth_fault_while_its_lines_carry_nothing() -> None:
    sketch = Sketch()
    high, medium, low = sketch.bus(33.0), sketch.bus(11.0), sketch.bus(6.6)
    sketch.hang("supply", high, nominal_voltage="33", fault_level_max="500 MVA", star_point="isolated", x0_over_x1="1")
    part = sketch.hang(
        "transformer3", high, medium, low, high_voltage="33", medium_voltage="11", low_voltage="6.6",
        rated_power_high="20", rated_power_medium="20", rated_power_low="7", impedance_high_medium="10",
        impedance_high_low="17", impedance_medium_low="6", base_high_medium="20", base_high_low="20",
        base_medium_low="20", vector_group="YNyn0d11", neutral_high="solid", neutral_medium="solid",
    )  # fmt: skip
    result = Study(sketch.plant, NOMINAL).fault(Fault(Place(*high), FaultKind.LINE_TO_EARTH))
    assert result.neutral_ka[part, "high"] == pytest.approx(-result.residual_ka, rel=1e-10)
    assert result.ik_ka > 0.5
    assert abs(result.terminal_ka[part, "low"]).max() < 1e-12
    # Z0 is the high and the low leg in series, on 20 MVA: (10 + 17 − 6)/2 + (17 + 6 − 10)/2 per cent
    z0 = result.z_ohm[2]
    assert z0 is not None
    assert abs(z0) == pytest.approx(0.17 * 33**2 / 20, rel=1e-10)


def test_a_cable_cut_in_two_is_the_same_cable() -> None:
    whole, halves = Sketch(), Sketch()
    per_km = {
        "r_per_length": "0.2 ohm/km", "x_per_length": "0.1 ohm/km", "r0_per_length": "0.7 ohm/km",
        "x0_per_length": "0.3 ohm/km", "capacitance": "0.4 uF/km", "zero_sequence_capacitance": "0.3 uF/km",
    }  # fmt: skip
    far = []
    for sketch in (whole, halves):
        start, end = sketch.bus(11.0), sketch.bus(11.0)
        for bus, level in ((start, "300 MVA"), (end, "90 MVA")):
            sketch.hang("supply", bus, nominal_voltage="11", fault_level_max=level, x_over_r="6", x0_over_x1="2")
        far.append((start, end))
    cable = whole.hang("cable", *far[0], length="4 km", **per_km)
    joint = halves.bus(11.0)
    halves.hang("cable", far[1][0], joint, length="1.2 km", **per_km)
    halves.hang("cable", joint, far[1][1], length="2.8 km", **per_km)
    case = Case(charging=True)
    for kind in FaultKind:
        along = Study(whole.plant, case).fault(Fault(Place(cable, "a", fraction=0.3), kind))
        at_joint = Study(halves.plant, case).fault(Fault(Place(*joint), kind))
        assert along.phases_ka == pytest.approx(at_joint.phases_ka, rel=1e-10)
        near = at_joint.network.node_of[far[1][0]]
        assert along.voltages_kv[along.network.node_of[far[0][0]]] == pytest.approx(
            at_joint.voltages_kv[near], rel=1e-9
        )
