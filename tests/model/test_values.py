"""Ratings of more than one number. Sources: IEC 60076-1 (vector groups), ASTM B258 and NEC chapter 9 (sizes)."""

import itertools
import math

import pytest

from onelinefault.errors import EntryError
from onelinefault.model.values import (
    awg_area_mm2,
    read_conductor_size,
    read_line_geometry,
    read_neutral,
    read_vector_group,
)

# areas as printed in NFPA 70 (NEC) chapter 9 table 8, mm² rounded there
NEC_AREAS = {"14": 2.08, "12": 3.31, "10": 5.261, "8": 8.367, "6": 13.30, "4": 21.15, "2": 33.62, "1": 42.41,
             "1/0": 53.49, "2/0": 67.43, "3/0": 85.01, "4/0": 107.2}  # fmt: skip


@pytest.mark.parametrize(("gauge", "area"), NEC_AREAS.items())
def test_gauges_have_the_areas_of_the_national_electrical_code(gauge: str, area: float) -> None:
    assert awg_area_mm2(gauge) == pytest.approx(area, rel=2e-3)


@pytest.mark.parametrize(("zeros", "gauge"), [("0", "1/0"), ("00", "2/0"), ("000", "3/0"), ("0000", "4/0")])
def test_zeros_count(zeros: str, gauge: str) -> None:
    assert read_conductor_size(f"{zeros} AWG").area_mm2 == awg_area_mm2(gauge)


@pytest.mark.parametrize("text", ["5/0", "37 AWG", "0/0 AWG", "1.5 AWG"])
def test_gauges_that_do_not_exist(text: str) -> None:
    with pytest.raises(EntryError):
        read_conductor_size(text)


@pytest.mark.parametrize(
    ("text", "area", "runs", "cores", "trade"),
    [
        ("240 mm²", 240, 1, 1, "240"),
        ("240", 240, 1, 1, "240"),
        ("2x240 mm2", 240, 2, 1, "240"),
        ("3 × 1,5", 1.5, 3, 1, "1.5"),
        ("3c 95 mm²", 95, 1, 3, "95"),
        ("2x3c 95 mm²", 95, 2, 3, "95"),
        ("500 kcmil", 500 * math.pi / 4 * 0.0254**2 * 1000, 1, 1, "500 kcmil"),
        ("2x4/0 AWG", 107.2, 2, 1, "4/0"),
        ("250 MCM", 126.7, 1, 1, "250 kcmil"),
        ("10 AWG", 5.261, 1, 1, "10"),
    ],
)
def test_conductor_sizes(text: str, area: float, runs: int, cores: int, trade: str) -> None:
    size = read_conductor_size(text)
    assert size.area_mm2 == pytest.approx(area, rel=1e-3)
    assert (size.runs, size.cores, size.trade_size) == (runs, cores, trade)
    assert read_conductor_size(size.text) == size


@pytest.mark.parametrize("text", ["", "0x240", "-5 mm²", "0 mm²", "240 kV", "big", "4/0 mm²", "3x240+120"])
def test_sizes_that_cannot_be_read(text: str) -> None:
    with pytest.raises(EntryError):
        read_conductor_size(text)


@pytest.mark.parametrize(
    ("text", "form", "ohm"),
    [
        ("isolated", "isolated", None),
        ("solid", "solid", 0),
        ("Solidly earthed", "solid", 0),
        ("resistor 400 A 10 s", "resistor", 11 / math.sqrt(3) / 0.4),  # Ohm's law at line-to-neutral voltage
        ("resistor 400 A, 10 s", "resistor", 11 / math.sqrt(3) / 0.4),
        ("resistor 6.35 ohm", "resistor", 6.35),
        ("reactor 5 ohm", "reactor", 5j),
        ("reactor 0.2 kA", "reactor", 1j * 11 / math.sqrt(3) / 0.2),
    ],
)
def test_star_points(text: str, form: str, ohm: complex | None) -> None:
    neutral = read_neutral(text)
    assert neutral.form == form and neutral.earthed == (form != "isolated")
    if ohm is None:
        with pytest.raises(EntryError):
            neutral.z_ohm(11)
    else:
        assert neutral.z_ohm(11) == pytest.approx(ohm)
    assert read_neutral(neutral.text) == neutral


def test_a_star_point_keeps_the_rated_time() -> None:
    duration = read_neutral("resistor 400 A 10 s").duration
    assert duration is not None and duration.to("s") == 10


@pytest.mark.parametrize("text", ["", "resistor", "resistor 0 ohm", "reactor -5 ohm", "resistor 10 s", "copper"])
def test_star_points_that_cannot_be_read(text: str) -> None:
    with pytest.raises(EntryError):
        read_neutral(text)


# IEC 60076-1: Dd, Yy, Dz turn by an even number of hours; Dy, Yd, Yz by an odd number
POSSIBLE = {"Dd": 0, "Yy": 0, "Dz": 0, "Dy": 1, "Yd": 1, "Yz": 1}


@pytest.mark.parametrize(("letters", "hour"), list(itertools.product(POSSIBLE, range(13))))
def test_only_possible_clock_numbers_are_taken(letters: str, hour: int) -> None:
    if hour % 2 == POSSIBLE[letters]:
        assert read_vector_group(f"{letters}{hour}").clocks == (hour % 12,)
    else:
        with pytest.raises(EntryError, match="clock number"):
            read_vector_group(f"{letters}{hour}")


@pytest.mark.parametrize(
    ("text", "connections", "brought_out", "clocks"),
    [
        ("Dyn11", ("D", "Y"), (False, True), (11,)),
        ("YN d 1", ("Y", "D"), (True, False), (1,)),
        ("YNyn0d11", ("Y", "Y", "D"), (True, True, False), (0, 11)),
        ("YNa0d5", ("Y", "A", "D"), (True, True, False), (0, 5)),
        ("Dzn0", ("D", "Z"), (False, True), (0,)),
    ],
)
def test_vector_groups(text: str, connections: tuple[str, ...], brought_out: object, clocks: object) -> None:
    group = read_vector_group(text)
    assert (group.connections, group.brought_out, group.clocks) == (connections, brought_out, clocks)
    assert read_vector_group(group.text) == group


@pytest.mark.parametrize("text", ["", "dyn11", "Dyn", "Dyn13", "YNa1", "Xy1", "D11"])
def test_vector_groups_that_cannot_be_read(text: str) -> None:
    with pytest.raises(EntryError):
        read_vector_group(text)


def test_line_geometry_is_in_metres() -> None:
    geometry = read_line_geometry("a 0 29; b 2.5 29; c 7 29; n 4 25; ft")
    assert geometry.points[2] == ("c", pytest.approx(7 * 0.3048), pytest.approx(29 * 0.3048))
    assert read_line_geometry(geometry.text) == geometry
    assert read_line_geometry("a −1 9; b 0 10; c 1 9").points[0] == ("a", -1, 9)


@pytest.mark.parametrize(
    "text",
    ["a 0 9; b 1 9", "a 0 9; b 1 9; c 1 9", "a 0 9; b 1 9; c 2 -1", "a 0 9; a 1 9; b 2 9; c 3 9", "a 0; b; c", ""],
)
def test_line_geometry_that_cannot_be(text: str) -> None:
    with pytest.raises(EntryError):
        read_line_geometry(text)
