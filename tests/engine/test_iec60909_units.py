"""Power station units: which parts make one, what lies inside, what is said about a mark that cannot be."""

from dataclasses import replace

import pytest

from onelinefault.engine.study import Study
from onelinefault.model.fault import Fault, FaultKind, Place
from onelinefault.model.quantity import Quantity
from tests.engine.power_station import UNIT, Station, station
from tests.oracle.sketch import Sketch


def inside(name: str, study: Study, at: Station) -> bool:
    """Whether faults at a bus are calculated inside the unit."""
    return study.fault(Fault(Place(*at.at[name]))).network.method.view.inside != ""


def test_what_hangs_on_the_generator_alone_lies_inside() -> None:
    s = station()
    assert [inside(name, s.study(), s) for name in ("Q", "G", "6", "04")] == [False, True, True, True]


def test_places_that_the_network_feeds_as_well_lie_outside() -> None:
    # a second way from the network to the 6 kV board: only the generator's own level stays inside
    s = station()
    sketch = Sketch()
    sketch.parts, sketch.wires, sketch.document = dict(s.plant.parts), dict(s.plant.wires), s.plant.document
    sketch.hang(
        "transformer", s.at["Q"], s.at["6"], rated_power="10 MVA", high_voltage="110 kV", low_voltage="6.3 kV",
        impedance="10 %", x_over_r="20", vector_group="YNd5",
    )  # fmt: skip
    both = Station(sketch.plant, s.at, s.ids)
    assert [inside(name, both.study(), both) for name in ("Q", "G", "6", "04")] == [False, True, False, False]


def test_without_tap_changer_the_generator_s_range_and_the_off_load_tap_count() -> None:
    # K_SO = UnQ/(UrG·(1 + pG))·(UrTLV/UrTHV)·(1 + pT)·c/(1 + x″d·sin φ); inside: over 1 + pG (6.7.2, 7.2)
    s = station({**UNIT, "on_load_tap_changer": "no", "tap_range": "-4 %"}, voltage_range="5 %")
    outside = 110 / (10.5 * 1.05) * 10.5 / 115 * 0.96 * 1.1 / (1 + 0.15 * 0.6)
    assert s.factor("T", s.fault("Q")) == ("K_SO", pytest.approx(outside, rel=1e-12)) == s.factor("G", s.fault("Q"))
    assert s.factor("G", s.fault("G")) == ("K_G,SO", pytest.approx(1.1 / 1.09 / 1.05, rel=1e-12))
    assert s.factor("T", s.fault("G")) == ("K_T,SO", pytest.approx(1.1852650 / 1.05, rel=1e-6))


def test_with_tap_changer_they_do_not() -> None:
    plain, more = station(), station({**UNIT, "tap_range": "-4 %"}, voltage_range="5 %")
    for bus in ("Q", "G", "6"):
        assert plain.fault(bus).ik_ka == more.fault(bus).ik_ka


def test_a_fault_at_the_terminals_is_driven_by_the_generator_s_rated_voltage() -> None:
    # UrG = 10.8 kV on a level of 10.5 kV (7.2)
    s = station(rated_voltage="10.8 kV")
    result = s.fault("G")
    assert result.prefault_kv == pytest.approx(1.1 * 10.8, rel=1e-12)
    assert s.fault("6").prefault_kv == pytest.approx(1.1 * 6, rel=1e-12)


def test_partial_currents_are_of_three_phase_faults_at_the_terminals() -> None:
    s = station()
    assert len(s.figures("G").partials) == 2
    assert s.figures("G", FaultKind.LINE_TO_LINE).partials == s.figures("6").partials == s.figures("Q").partials == ()


@pytest.mark.parametrize(
    ("unit", "out_of_service", "words"),
    [
        ({"unit_generator": "G9"}, (), "there is no generator called 'G9'"),
        ({"unit_generator": "G"}, ("G",), "generator G is out of service"),
        ({"unit_generator": "G"}, ("line",), "generator G is not connected to its low side"),
    ],
)
def test_a_mark_that_cannot_be_is_said_and_passed_over(
    unit: dict[str, str], out_of_service: tuple[str, ...], words: str
) -> None:
    s = station(unit)
    plant = s.plant
    if out_of_service == ("G",):
        generator = replace(plant.parts[s.ids["G"]], in_service=False)
        plant = replace(plant, parts={**plant.parts, generator.id: generator})
    elif out_of_service:
        wires = {key: wire for key, wire in plant.wires.items() if s.ids["G"] not in (wire.a.part, wire.b.part)}
        plant = replace(plant, wires=wires)
    changed = Station(plant, s.at, s.ids)
    findings = [f for f in changed.study().findings if f.code == "no-unit"]
    assert len(findings) == 1 and words in findings[0].message and findings[0].field == "unit_generator"
    assert changed.factor("T", changed.fault("Q"))[0] == "K_T"


def test_a_generator_makes_one_unit_only() -> None:
    s = station()
    sketch = Sketch()
    sketch.parts, sketch.wires, sketch.document = dict(s.plant.parts), dict(s.plant.wires), s.plant.document
    second = sketch.hang(
        "transformer", s.at["Q"], s.at["G"], name="T9", rated_power="60 MVA", high_voltage="115 kV",
        low_voltage="10.5 kV", impedance="12 %", load_loss="0.5 %", vector_group="YNd5", unit_generator="g",
    )  # fmt: skip
    findings = [f for f in Station(sketch.plant, s.at, s.ids).study().findings if f.code == "no-unit"]
    assert [f.parts for f in findings] == [(second,)] and "another transformer" in findings[0].message


def test_a_unit_whose_data_are_missing_is_left_out_by_its_part() -> None:
    s = station(subtransient_reactance="")
    assert s.factor("G", s.fault("Q"))[0] == "K_S"  # a typical X″d
    broken = station({**UNIT, "impedance": "0.4 %"})
    codes = [f.code for f in broken.study().findings]
    assert "load-loss" in codes and "no-unit" not in codes


def test_a_reactance_beyond_all_factors_is_said() -> None:
    # xT·sin φ ≥ 1 leaves no K_T,S; the field refuses it, a script may not
    s = station()
    transformer = replace(s.plant.parts[s.ids["T"]], impedance=Quantity(170.0, "%", "170 %"))
    wrong = Station(replace(s.plant, parts={**s.plant.parts, transformer.id: transformer}), s.at, s.ids)
    findings = [f for f in wrong.study().findings if f.code == "no-unit"]
    assert len(findings) == 1 and "too large" in findings[0].message
