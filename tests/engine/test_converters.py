from dataclasses import replace

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from onelinefault.engine.converters import ConverterGroup
from onelinefault.model.fault import Fault, FaultKind, Place
from tests.engine.networks import INF, Sketch, random_sketch

BASE_KA = 100 / np.sqrt(3) / 10


def group(limit=0.5, angle=90.0) -> ConverterGroup:
    return ConverterGroup(np.array([0]), np.array([limit]), np.exp(-1j * np.deg2rad([angle])))


def law(voltage, before=1.0, **data) -> complex:
    return complex(group(**data).currents(np.array([[voltage]], complex), np.array([[before]], complex))[0, 0])


@pytest.mark.parametrize(
    "voltage,current", [(1.0, 0), (1.1, 0), (0.95, 0.25), (0.9, 0.5), (0.7, 0.5), (0.2, 0.5), (0.0, 0.5)]
)
def test_the_law_in_magnitude(voltage: float, current: float) -> None:
    """Full current from a dip of 10 % on, in proportion before, nothing without a dip; of the voltage before."""
    assert abs(law(voltage)) == pytest.approx(current, abs=1e-15)
    assert abs(law(1.05 * voltage, 1.05)) == pytest.approx(current, abs=1e-15)


def test_the_law_in_angle() -> None:
    """Lagging the voltage that is left; the voltage before the fault where none is left; between them in between."""
    turned = np.exp(-0.5j)
    assert np.angle(law(0.8 * turned), deg=True) == pytest.approx(-90 - np.rad2deg(0.5))
    assert np.angle(law(0.8, angle=20), deg=True) == pytest.approx(-20)
    assert np.angle(law(0j), deg=True) == pytest.approx(-90)
    assert np.angle(law(0.25 * turned), deg=True) == pytest.approx(-90 - np.rad2deg(0.25))


def test_a_place_without_voltage_feeds_nothing() -> None:
    assert law(0, 0) == 0


def plant(limit=0.5, angle=90.0, path=0.2j) -> Sketch:
    s = Sketch()
    a, b = s.node(), s.node()
    s.source(a, (0.1j, 0.1j, 0.1j))
    s.branch(a, b, (path, path, path))
    s.converter(b, limit, angle)
    return s


def test_beside_a_bolted_fault_the_limit_adds_to_the_rest() -> None:
    """All reactive: 1/(0.1 + 0.2) of the supply and 0.5 of the converter, both lagging by 90°."""
    result = plant().study().fault(Fault(Place("B1")))
    assert result.sequence_ka[0] / BASE_KA == pytest.approx(-1j * (1 / 0.3 + 0.5), rel=1e-12)
    assert result.terminal_ka["C0", "line"][0] / BASE_KA == pytest.approx(0.5j, rel=1e-12)
    shares = {source.part: source.share for source in result.sources}
    assert shares["C0"] == pytest.approx(0.5 / (1 / 0.3 + 0.5), rel=1e-12)


def test_a_fault_that_hardly_dips_the_voltage_takes_part_of_the_limit() -> None:
    """Fault through x at the supply, all reactive, so one real equation: J = 10·limit·(1 − V), V of the divider."""
    limit, x = 0.2, 1.9
    result = plant(limit, path=0.05j).study().fault(Fault(Place("B0"), zf_ohm=x * 1j))
    # supply 0.1, fault x in parallel: Thevenin x/(x+0.1) behind 0.1x/(x+0.1) + 0.05 seen by the converter
    E, X = x / (x + 0.1), 0.1 * x / (x + 0.1) + 0.05
    J = 10 * limit * (1 - E) / (1 + 10 * limit * X)
    assert 0 < J < limit
    assert abs(result.terminal_ka["C0", "line"][0]) / BASE_KA == pytest.approx(J, rel=1e-8)


def test_positive_sequence_only() -> None:
    """Line to earth: the converter's three phase currents are a balanced set, the negative and zero networks open."""
    result = plant(angle=60.0).study().fault(Fault(Place("B1"), FaultKind.LINE_TO_EARTH))
    a, b, c = result.terminal_ka["C0", "line"]
    assert b == pytest.approx(a * np.exp(-2j * np.pi / 3), rel=1e-12)
    assert c == pytest.approx(a * np.exp(2j * np.pi / 3), rel=1e-12)
    assert result.z_ohm[0] == pytest.approx(0.3j, rel=1e-12)  # impedances are the plant's without converters


@settings(max_examples=40, deadline=None)
@given(st.integers(0, 2**32 - 1), st.sampled_from(list(FaultKind)), st.integers(1, 4))
def test_the_settled_currents_obey_the_law_at_the_voltages_they_cause(seed: int, kind: FaultKind, count: int) -> None:
    rng = np.random.default_rng(seed)
    sketch = random_sketch(rng)
    n = len(sketch.kv)
    for _ in range(count):
        sketch.converter(int(rng.integers(n)), float(rng.uniform(0.01, 0.3)), float(rng.choice([90.0, 60.0, 0.0])))
    study = sketch.study()
    result = study.fault(Fault(Place(f"B{rng.integers(n)}"), kind))
    assert "converter-unsettled" not in [finding.code for finding in result.findings]
    network, turn = study.network, np.exp(2j * np.pi / 3)
    positive = np.array([1, turn, turn**2]) / 3
    for converter in network.converters:
        kv = network.nominal_kv[converter.node] / np.sqrt(3)
        V = positive @ result.voltages_kv[converter.node] / kv
        before = positive @ result.prefault_voltages_kv[converter.node] / kv
        fed = -(positive @ result.terminal_ka[converter.part, "line"]) / network.base_ka[converter.node]
        asked = law(V, before, limit=converter.limit_pu, angle=converter.angle_deg)
        assert fed == pytest.approx(asked, abs=1e-7 * converter.limit_pu)


def test_converters_alone_feed_their_limits_into_a_three_phase_fault() -> None:
    """No voltage source anywhere: the currents add up, the impedance of the network to earth is infinite."""
    s = Sketch()
    a, b = s.node(10), s.node(0.4, 150)
    s.branch(a, b, (0.01 + 0.06j, 0.01 + 0.06j, INF))
    s.converter(a, 0.5)
    s.converter(b, 0.3)
    result = s.study().fault(Fault(Place("B0")))
    assert abs(result.sequence_ka[0]) / BASE_KA == pytest.approx(0.8, rel=2e-3)
    assert result.z_ohm == (None, None, None) and np.isnan(result.x_over_r)
    assert result.peak_ka == pytest.approx(np.sqrt(2) * result.ik_ka)
    assert abs(result.terminal_ka["W0", "a"][0]) == pytest.approx(0.3 * BASE_KA, rel=1e-4)
    for kind in (FaultKind.LINE_TO_LINE, FaultKind.LINE_TO_EARTH):
        assert s.study().fault(Fault(Place("B0"), kind)).ik_ka < 1e-5  # nothing closes the other sequences


def test_a_converter_that_finds_no_rest_is_named() -> None:
    """Behind a long line on which its own limit makes more than half the voltage, it chases its own angle."""
    study = plant(limit=2.0, angle=0.0, path=0.45j).study()
    result = study.fault(Fault(Place("B0")))
    finding = next(f for f in result.findings if f.code == "converter-unsettled")
    assert finding.parts == ("C0",) and "converter source C0" in finding.message


@pytest.mark.parametrize("node", ["B0", "B1"])
@pytest.mark.parametrize("kind", list(FaultKind))
def test_constant_converters_feed_their_limit_in_phase_with_the_fault_current(node: str, kind: FaultKind) -> None:
    """IEC 60909-0, 6.9: I = (E + Σ|Zij|·J)/|Zi|, magnitudes, here with impedances of different angles."""
    s, alone = (plant(path=0.1 + 0.2j) for _ in range(2))
    s.converters = [replace(c, constant=True) for c in s.converters]
    alone.converters = []
    more, less = (sketch.study().fault(Fault(Place(node), kind)) for sketch in (s, alone))
    assert abs(more.terminal_ka["C0", "line"]).max() / BASE_KA == pytest.approx(0.5, rel=1e-12)
    # the transfer impedance is that of the supply for both places, as there is but one path
    ratio = (0.1 if node == "B0" else abs(0.1 + 0.3j)) * 0.5
    assert abs(more.sequence_ka[0]) / abs(less.sequence_ka[0]) == pytest.approx(1 + ratio, rel=1e-12)
    assert np.angle(more.sequence_ka[0]) == pytest.approx(np.angle(less.sequence_ka[0]), abs=1e-12)
