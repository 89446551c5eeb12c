"""Every vector group by itself between two live networks: the engine against the oracle, faults on all sides.

Random plants seldom meet a rare group together with a tap and a neutral impedance; here each meets them all.
"""

import itertools

import pytest

from onelinefault.engine.case import Case
from onelinefault.engine.study import Study
from onelinefault.model.fault import Fault, FaultKind, Place
from onelinefault.model.plant import Plant
from tests.oracle.compare import TOLERANCE, disagreements
from tests.oracle.phase_domain import Oracle
from tests.oracle.sketch import Sketch, TerminalKey

UNBALANCED = (
    Fault(Place(""), FaultKind.LINE_TO_EARTH, "b", zg_ohm=0.2 + 0j),
    Fault(Place(""), FaultKind.LINE_TO_LINE, "ca", zf_ohm=0.1 + 0j),
    Fault(Place(""), FaultKind.TWO_LINES_TO_EARTH, "ab", zg_ohm=0.1j),
)


def is_odd(one: str, other: str) -> bool:
    """Whether two connections differ by an odd clock number (IEC 60076-1)."""
    return {one[0].upper(), other[0].upper()} in ({"D", "Y"}, {"Y", "Z"})


def two_windings() -> list[str]:
    """All vector groups of two windings."""
    pairs = itertools.product(("D", "Y", "YN", "Z", "ZN"), ("d", "y", "yn", "z", "zn"))
    return [f"{one}{other}{clock}" for one, other in pairs for clock in range(is_odd(one, other), 12, 2)]


def three_windings() -> list[str]:
    """All connections of three windings, and two zigzags, with clock numbers that go round."""
    groups = []
    for number, (one, other, third) in enumerate(
        [
            *itertools.product(("D", "Y", "YN"), ("d", "y", "yn"), ("d", "y", "yn")),
            ("YN", "zn", "d"),
            ("YN", "yn", "zn"),
        ]
    ):
        clocks = [(2 * (turns * number + turns) + is_odd(one, w)) % 12 for turns, w in ((1, other), (2, third))]
        groups.append(f"{one}{other}{clocks[0]}{third}{clocks[1]}")
    return groups


def feed(sketch: Sketch, bus: TerminalKey, kv: float, earthed: bool) -> None:
    """A generator at a bus."""
    sketch.hang(
        "synchronous_generator", bus, rated_power="12 MVA", rated_voltage=f"{kv!r} kV", subtransient_reactance="14 %",
        negative_sequence_reactance="19 %", zero_sequence_reactance="6 %", x_over_r="25",
        neutral="reactor 0.15 ohm" if earthed else "isolated",
    )  # fmt: skip


def network(kind: str, kvs: tuple[float, ...], earthed: tuple[bool, ...], **ratings: str) -> tuple[Plant, list[Place]]:
    """A transformer with a generator behind each of its sides."""
    sketch = Sketch(prefault_voltage="1.02 pu")
    buses = [sketch.bus(kv) for kv in kvs]
    for bus, kv, is_earthed in zip(buses, kvs, earthed, strict=True):
        feed(sketch, bus, kv, is_earthed)
    sketch.hang(kind, *buses, **ratings)
    return sketch.plant, [Place(*bus) for bus in buses]


def found(plant: Plant, places: list[Place], tolerance: float = TOLERANCE) -> list[str]:
    """All disagreements for unbalanced faults at all places."""
    study, oracle = Study(plant, Case()), Oracle(plant, Case())
    return [
        f"{place.part} {each.kind}: {line}"
        for place, each in itertools.product(places, UNBALANCED)
        for fault in [Fault(place, each.kind, each.phases, each.zf_ohm, each.zg_ohm)]
        for line in disagreements(study.fault(fault), oracle.fault(fault), tolerance)
    ]


# tap side, neutrals, which side's generator is earthed
EARTHED_TWICE = ("high", "reactor 2 ohm", "resistor 0.5 ohm", (True, True))
FED_UNEARTHED = ("low", "reactor 2 ohm", "resistor 0.5 ohm", (False, True))
ONE_STAR_OPEN = ("low", "solid", "isolated", (True, False))


@pytest.mark.parametrize("group", two_windings())
def test_two_windings(group: str) -> None:
    for tap_side, neutral_high, neutral_low, earthed in (
        EARTHED_TWICE,
        ONE_STAR_OPEN if group[-1] in "048157" else FED_UNEARTHED,
    ):
        plant, places = network(
            "transformer", (11.0, 6.6), earthed, rated_power="8 MVA", high_voltage="11.5 kV", low_voltage="6.6 kV",
            impedance="9 %", x_over_r="12", vector_group=group, tap="-5 %", tap_side=tap_side,
            neutral_high=neutral_high, neutral_low=neutral_low, zero_sequence_impedance="90 %", x0_over_r0="9",
            core="three-limb", magnetising_impedance="55 %",
        )  # fmt: skip
        assert found(plant, places) == []


@pytest.mark.parametrize("neutral", ["reactor 0.9 ohm", "isolated"])
@pytest.mark.parametrize("group", three_windings())
def test_three_windings(group: str, neutral: str) -> None:
    plant, places = network(
        "transformer3", (33.0, 11.0, 6.6), (True, False, True), high_voltage="34 kV", medium_voltage="11 kV",
        low_voltage="6.6 kV", rated_power_high="20", rated_power_medium="20", rated_power_low="8",
        impedance_high_medium="10 %", impedance_high_low="17 %", impedance_medium_low="5 %", base_high_medium="20",
        base_high_low="20", base_medium_low="20", vector_group=group, tap="2.5 %", neutral_high="resistor 3 ohm",
        neutral_medium=neutral, neutral_low="solid", zero_sequence_impedance="88 %",
    )  # fmt: skip
    assert found(plant, places) == []


def test_a_leg_of_three_windings_may_vanish() -> None:
    # 10 + 6 − 16 = 0: the engine takes a ten-millionth of the largest leg for it, seen in the seventh digit
    plant, places = network(
        "transformer3", (33.0, 11.0, 6.6), (True, True, True), high_voltage="33 kV", medium_voltage="11 kV",
        low_voltage="6.6 kV", rated_power_high="20", rated_power_medium="20", rated_power_low="8",
        impedance_high_medium="10 %", impedance_high_low="16 %", impedance_medium_low="6 %", base_high_medium="20",
        base_high_low="20", base_medium_low="20", vector_group="YNyn0d11", neutral_high="solid", neutral_medium="solid",
    )  # fmt: skip
    assert found(plant, places, tolerance=1e-6) == []


@pytest.mark.parametrize("neutral", ["solid", "isolated", "reactor 1.7 ohm", "resistor 400 A 10 s"])
@pytest.mark.parametrize("clock", [1, 3, 5, 7, 9, 11])
def test_autotransformers(clock: int, neutral: str) -> None:
    plant, places = network(
        "autotransformer", (33.0, 11.0, 6.6), (True, True, False), high_voltage="33 kV", low_voltage="11.4 kV",
        tertiary_voltage="6.6 kV", rated_power="30", impedance_high_low="9 %", impedance_high_tertiary="28 %",
        impedance_low_tertiary="17 %", vector_group=f"YNa0d{clock}", tap="-2.5 %", neutral=neutral,
        zero_sequence_impedance="92 %",
    )  # fmt: skip
    assert found(plant, places) == []


@pytest.mark.parametrize("neutral", ["solid", "isolated", "resistor 60 A 10 s"])
@pytest.mark.parametrize("connection", ["zigzag", "star-delta"])
@pytest.mark.parametrize("size", ["3 ohm", "900 A"])
def test_earthing_transformers(connection: str, neutral: str, size: str) -> None:
    sketch = Sketch()
    bus = sketch.bus(11.0)
    feed(sketch, bus, 11.0, earthed=False)
    sketch.hang(
        "earthing_transformer", bus, rated_voltage="11 kV", connection=connection, zero_sequence_impedance=size,
        x0_over_r0="12", neutral=neutral,
    )  # fmt: skip
    assert found(sketch.plant, [Place(*bus)]) == []
