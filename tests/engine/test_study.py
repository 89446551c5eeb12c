import numpy as np
import pytest

from onelinefault.engine.case import Case
from onelinefault.engine.study import Study, device_duty_ka
from onelinefault.errors import NoSuchPlaceError, StudyError
from onelinefault.model.conductors import Cable
from onelinefault.model.consumers import Bus
from onelinefault.model.fault import Fault, FaultKind, Place
from onelinefault.model.fields import Basis
from onelinefault.model.plant import End, Plant, Wire
from onelinefault.model.sources import InductionMotor, Supply
from onelinefault.model.switching import Breaker
from tests.engine.networks import INF, Sketch

BASE_KA = 100 / np.sqrt(3) / 10


def two_sources_on_a_board() -> Sketch:
    """10 per unit behind breaker Q0, 4 per unit straight on the bar."""
    s = Sketch()
    a = s.node()
    s.source(a, (0.1j, 0.1j, 0.1j))
    s.source(a, (0.25j, 0.25j, INF))
    s.joints.pop(0)  # the first source reaches the bar through the breaker
    s.breaker(a, ("S0", "out"), ("B0", "bar"))
    return s


def test_a_breaker_sees_the_larger_side_and_not_the_bus_total() -> None:
    """10 flows through it for a fault on the bar, 4 for one on its source's side; 14 is the total of the bus."""
    study = two_sources_on_a_board().study()
    assert study.fault(Fault(Place("B0"))).ik_ka == pytest.approx(14 * BASE_KA, rel=1e-12)
    assert device_duty_ka(study, "Q0") == pytest.approx(10 * BASE_KA, rel=1e-12)
    beyond = study.fault(Fault(Place("Q0", "a")))
    assert abs(beyond.terminal_ka["Q0", "a"]) == pytest.approx(4 * BASE_KA, rel=1e-12)
    assert abs(beyond.phases_ka) == pytest.approx(14 * BASE_KA, rel=1e-12)


def test_the_duty_of_other_kinds_is_that_of_its_largest_phase() -> None:
    """Line to earth: only the first source is earthed. Z1 = 1/14, Z0 = 0.1; 3 I0 through the breaker is the zero
    sequence plus 10/14 of the positive and negative."""
    duty = device_duty_ka(two_sources_on_a_board().study(), "Q0", FaultKind.LINE_TO_EARTH)
    assert duty == pytest.approx((1 + 20 / 14) / (2 / 14 + 0.1) * BASE_KA, rel=1e-12)


def test_an_open_breaker_carries_nothing() -> None:
    s = two_sources_on_a_board()
    s.joints = [joint for joint in s.joints if joint.id != "Q0"]
    study = s.study()
    assert device_duty_ka(study, "Q0") == 0
    with pytest.raises(NoSuchPlaceError):
        device_duty_ka(study, "Q7")


def test_a_dead_place_gives_zeros_and_says_why() -> None:
    s = Sketch()
    a, b, c = s.node(), s.node(6), s.node(6)
    s.source(a, (0.1j, 0.1j, 0.1j))
    s.branch(b, c, (0.1j, 0.1j, 0.1j))
    for place in (Place(f"B{b}"), Place("W0", "a", fraction=0.5)):
        result = s.study().fault(Fault(place, FaultKind.LINE_TO_EARTH))
        assert [finding.code for finding in result.findings] == ["dead"]
        assert result.ik_ka == 0 and result.z_ohm == (None, None, None) and result.prefault_kv == 0
        assert np.all(result.voltages_kv[[b, c]] == 0) and np.all(result.prefault_voltages_kv[[b, c]] == 0)
        assert abs(result.voltages_kv[a]) == pytest.approx(10 / np.sqrt(3), rel=1e-14)
        assert all(np.all(current == 0) for current in result.terminal_ka.values())


def test_terminals_out_of_service_are_listed_without_current() -> None:
    s = two_sources_on_a_board()
    s.parts["spare"] = InductionMotor(id="spare", in_service=False)
    assert np.all(s.study().fault(Fault(Place("B0"))).terminal_ka["spare", "line"] == 0)


def test_an_impossible_fault_is_refused() -> None:
    with pytest.raises(StudyError, match="cannot join phases 'ab'"):
        two_sources_on_a_board().study().fault(Fault(Place("B0"), FaultKind.LINE_TO_EARTH, "ab"))


def test_impedances_of_the_fault_are_in_ohm_at_its_own_voltage() -> None:
    """1 per unit at 10 kV on 100 MVA is 1 ohm."""
    result = two_sources_on_a_board().study().fault(Fault(Place("B0"), zf_ohm=2j))
    assert result.ik_ka == pytest.approx(BASE_KA / (1 / 14 + 2), rel=1e-12)
    assert abs(result.fault_kv) == pytest.approx(10 / np.sqrt(3) * 2 / (2 + 1 / 14), rel=1e-12)


def drawn_plant() -> Plant:
    """Supply, breaker, cable of 0.5 km and a board, drawn with wires."""
    parts = {
        "p1": Supply(id="p1", name="Grid")
        .with_text("nominal_voltage", "10 kV")
        .with_text("fault_level_max", "100 MVA")
        .with_text("fault_level_min", "50 MVA"),
        "p2": Breaker(id="p2", name="Q1"),
        "p3": Cable(id="p3", name="W1")
        .with_text("length", "0.5 km")
        .with_text("r_per_length", "0.2 ohm/km")
        .with_text("x_per_length", "0.1 ohm/km")
        .with_text("r0_per_length", "0.8 ohm/km")
        .with_text("x0_per_length", "0.4 ohm/km"),
        "p4": Bus(id="p4", name="Board"),
    }
    joins = [(("p1", "out"), ("p2", "a")), (("p2", "b"), ("p3", "a")), (("p3", "b"), ("p4", "bar"))]
    wires = {f"w{k}": Wire(f"w{k}", End(*a), End(*b)) for k, (a, b) in enumerate(joins)}
    return Plant(parts=parts, wires=wires, next_number=20)


def test_a_drawn_plant_by_hand() -> None:
    """1 ohm behind X/R 10, and 0.1 + j0.05 ohm of cable."""
    study = Study(drawn_plant(), Case())
    assert study.network.findings == study.findings
    result = study.fault(Fault(study.place_nodes("board")))
    z = np.exp(1j * np.arctan(10)) + 0.1 + 0.05j
    assert result.phases_ka[0] == pytest.approx(10 / np.sqrt(3) / z, rel=1e-12)
    for key in ("w0", "w1", "w2"):
        assert np.allclose(result.wire_ka[key], result.phases_ka, rtol=1e-12)
    assert np.allclose(result.terminal_ka["p2", "b"], -result.phases_ka, rtol=1e-12)
    assert device_duty_ka(study, "p2") == pytest.approx(10 / np.sqrt(3), rel=1e-12)


def test_the_smallest_supply_level_halves_it() -> None:
    most, least = (
        Study(drawn_plant(), Case(level=level)).fault(Fault(Place("p1", "out"))).ik_ka for level in ("max", "min")
    )
    assert least == pytest.approx(most / 2, rel=1e-12)


def test_assumptions_are_said_with_the_result_and_in_the_rows() -> None:
    plant = drawn_plant()
    cable = plant.parts["p3"].with_text("x_per_length", "0.1 ohm/km", Basis.GUESSED)
    study = Study(Plant(plant.document, {**plant.parts, "p3": cable}, plant.wires, next_number=20), Case())
    assert study.all_buses([FaultKind.THREE_PHASE])[0].assumed == ("Grid", "W1")  # X/R of the grid is the default
    finding = study.fault(Fault(Place("p4"))).findings[-1]
    assert finding.code == "assumed" and "Grid, W1" in finding.message


def test_nothing_is_made_before_it_is_asked_for_and_everything_once() -> None:
    study = Study(drawn_plant(), Case())
    assert not {"network", "equations", "prefault"} & set(vars(study))
    study.fault(Fault(Place("p4")))
    network, factor = study.network, study.equations.factor
    study.all_buses()
    assert study.network is network and study.equations.factor is factor
