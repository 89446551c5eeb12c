"""The words beside a symbol, as on a drawing."""

import pytest

from onelinefault.model.part import Part
from onelinefault.model.parts import PART_CLASSES, part_class
from onelinefault.model.summary import neutral_label, rating_lines, size_label
from onelinefault.model.values import read_conductor_size


def made(kind: str, **texts: str) -> Part:
    part = part_class(kind)(id="p1")
    for name, text in texts.items():
        part = part.with_text(name, text)
    return part


@pytest.mark.parametrize(
    ("part", "lines"),
    [
        (made("supply", fault_level_max="900 MVA"), ["900 MVA"]),
        (made("transformer", rated_power="20 MVA", impedance="10 %", vector_group="Dyn11"), ["20 MVA 10 %", "Dyn11"]),
        (made("transformer", rated_power="1.6 MVA"), ["1.6 MVA"]),
        (made("cable", length="0.18 km", size="3x240"), ["0.18 km 3×240"]),
        (made("cable", length="500 ft", size="4/0 AWG", parallel="2"), ["500 ft 2×4/0 AWG"]),
        (made("cable", length="90", size="3c 95 mm²"), ["90 m 3c 95"]),
        (made("cable", parallel="3"), ["3×"]),
        (made("synchronous_generator", rated_power="7.5 MVA", subtransient_reactance="14 %"), ["7.5 MVA", "X″d 14 %"]),
        (made("induction_motor", rated_power="1.2 MW", count="3"), ["3 × 1.2 MW"]),
        (made("induction_motor", rated_power="750 hp", count="1"), ["750 hp"]),
        (made("induction_motor", count="3"), []),
        (
            made("transformer3", rated_power_high="40 MVA", rated_power_medium="25 MVA", rated_power_low="15 MVA"),
            ["40/25/15 MVA"],
        ),
        (made("transformer3", rated_power_high="40 MVA", rated_power_low="15000 kVA"), ["40 MVA/15000 kVA"]),
        (made("autotransformer", rated_power="100 MVA", impedance_high_low="8 %"), ["100 MVA 8 %"]),
        (made("earthing_transformer", zero_sequence_impedance="400 A"), ["400 A"]),
        (made("overhead_line", length="12 km", parallel="2"), ["12 km 2×"]),
        (made("busway", length="30 m", rated_current="2500"), ["30 m", "2500 A"]),
        (made("reactor", reactance="6 %", rated_current="630 A"), ["6 %", "630 A"]),
        (made("breaker", rated_current="1250 A", breaking_current="25"), ["1250 A", "25 kA"]),
        (made("switch", rated_current="630 A", short_time_current="20 kA"), ["630 A", "20 kA"]),
        (made("bus", nominal_voltage="33"), ["33 kV"]),
        (made("load", rated_power="500 kVA"), ["500 kVA"]),
        (made("capacitor", rated_power="300 kvar"), ["300 kvar"]),
        (made("converter_source", rated_power="2 MVA", rated_voltage="0.69 kV"), ["2 MVA"]),
        (made("note", note="words"), []),
    ],
    ids=lambda v: v.kind if isinstance(v, Part) else "",
)
def test_lines_stand_as_typed(part: Part, lines: list[str]) -> None:
    assert rating_lines(part) == lines


@pytest.mark.parametrize("kind", PART_CLASSES)
def test_nothing_typed_gives_no_line(kind: type[Part]) -> None:
    assert rating_lines(kind(id="p1")) == []


@pytest.mark.parametrize(
    ("text", "label"), [("resistor 400 A 10 s", "400 A"), ("reactor 5 ohm", "5 ohm"), ("solid", ""), ("isolated", "")]
)
def test_the_size_at_a_star_point(text: str, label: str) -> None:
    assert neutral_label(made("transformer", neutral_low=text), "neutral_low") == label
    assert neutral_label(made("transformer"), "neutral_low") == ""


def test_sizes() -> None:
    assert size_label(read_conductor_size("2 x 240 mm²")) == "2 × 240"
    assert size_label(read_conductor_size("500 kcmil")) == "500 kcmil"
