"""What the overlay is told: every ribbon of a radial plant runs to the fault, tags carry the result's own figures."""

import pytest

from onelinefault.engine.case import Case
from onelinefault.engine.results import FaultResult
from onelinefault.engine.study import Study
from onelinefault.model.editing import set_text
from onelinefault.model.edits import apply
from onelinefault.model.fault import Fault, FaultKind, Place
from onelinefault.model.figures import current_text
from onelinefault.model.plant import Plant
from onelinefault.report.overlay_data import fault_words, overlay_data, roles_of
from tests.drawing.plants import pump_house

PLANT, IDS = pump_house()
CLOCKS = ("Dyn1", "Dyn5", "Dyn11", "YNyn0", "YNyn6", "YNd1", "YNd11", "Dzn0", "Yzn11")


def solved(plant: Plant, part: str, kind: FaultKind) -> FaultResult:
    return Study(plant, Case()).fault(Fault(Place(IDS[part]), kind))


def with_group(group: str, neutral: str = "solid") -> Plant:
    plant = apply(PLANT, set_text(PLANT, [IDS["t1"]], "vector_group", group))
    return apply(plant, set_text(plant, [IDS["t1"]], "neutral_low", neutral if "n" in group else "isolated"))


@pytest.mark.parametrize("group", CLOCKS)
@pytest.mark.parametrize("neutral", ["solid", "resistor 400 A", "reactor 10 ohm"])
@pytest.mark.parametrize("kind", FaultKind)
@pytest.mark.parametrize("part", ["board", "intake"])
def test_every_ribbon_of_a_radial_plant_runs_to_the_fault(group: str, neutral: str, kind: FaultKind, part: str) -> None:
    plant = with_group(group, neutral)
    data = overlay_data(plant, solved(plant, part, kind), 2)
    away = {  # for each wire on the board: its end that is away from it
        wire.id: next(e.part for e in wire.ends if e.part != IDS["board"]) for wire in plant.wires_of(IDS["board"])
    }
    for key, flow in data.flows.items():
        if key not in away:
            continue
        wire = plant.wires[key]
        starts_away = wire.a.part == away[key]
        if part == "intake" and away[key] == IDS["q1"]:  # seen from a fault at the intake, the way out of the board
            starts_away = not starts_away
        assert flow.forward is starts_away, f"{group} {kind} {wire}"


@pytest.mark.parametrize("kind", FaultKind)
def test_tags_carry_the_figures_of_the_result(kind: FaultKind) -> None:
    result = solved(PLANT, "board", kind)
    tags = {tag.key: tag for tag in overlay_data(PLANT, result, 2).tags}
    assert tags["fault"].main == current_text(result.ik_ka)
    largest = max(abs(result.terminal_ka[IDS["g1"], "line"]))
    if f"{IDS['g1']} line" in tags:
        assert tags[f"{IDS['g1']} line"].main == current_text(float(largest))


def test_three_depths_of_detail() -> None:
    result = solved(PLANT, "board", FaultKind.LINE_TO_EARTH)
    one, two, three = (overlay_data(PLANT, result, depth).tags for depth in (1, 2, 3))
    assert [t.key for t in one] == ["fault"] and one[0].lines == ()
    assert len(two) > 1 and any("peak" in line for line in two[0].lines)
    assert any(line.startswith("3I0") for line in three[0].lines)


def test_angles_in_tags_lag_by_less_than_a_quarter_turn_on_the_faulted_side() -> None:
    result = solved(PLANT, "board", FaultKind.THREE_PHASE)
    tag = next(t for t in overlay_data(PLANT, result, 2).tags if t.key == f"{IDS['t1']} low")
    angle = float(tag.lines[0].split("°")[0].removeprefix("∠ ").replace("−", "-"))
    assert -90 <= angle <= 0


def test_voltages_left_are_given_for_named_live_buses() -> None:
    data = overlay_data(PLANT, solved(PLANT, "board", FaultKind.THREE_PHASE), 2)
    assert data.voltage_left.keys() == {IDS["board"], IDS["intake"]}
    assert data.voltage_left[IDS["board"]] == pytest.approx(0, abs=1e-9)
    assert 0 < data.voltage_left[IDS["intake"]] < 100


def test_words_and_roles() -> None:
    result = solved(PLANT, "board", FaultKind.LINE_TO_EARTH)
    assert fault_words(PLANT, result) == "line-to-earth fault a, Board A, largest"
    roles = roles_of(result.network)
    assert roles[IDS["grid"], "out"] == "level-mv" and roles[IDS["board"], "bar"] == "level-mv"
