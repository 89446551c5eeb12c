"""Two-winding and earthing transformers against coils on limbs (``coils``) and figures worked by hand."""

import math
from collections.abc import Callable

import numpy as np
import pytest

from onelinefault.engine.case import Case
from onelinefault.engine.sequence_stamps import PartLeftOutError, Setting, Stamps
from onelinefault.engine.sequence_transformers import clock_sign, earthing_transformer_stamps, transformer_stamps
from onelinefault.model.transforming import EarthingTransformer, Transformer
from tests.engine.coils import (
    Coil,
    admittance,
    delta,
    in_sequences,
    lag_deg,
    of_stamps,
    phases,
    star,
    with_earth_at,
    zigzag,
)

SETTING = Setting(100.0, 50.0, Case())
MVA, HIGH_KV, LOW_KV, TAP = 25.0, 110.0, 21.0, 0.05
NODE_KV = (115.0, 20.0)  # on purpose neither rated voltage
WINDINGS: dict[str, Callable[..., list[Coil]]] = {"Y": star, "D": delta, "Z": zigzag}


def part(cls: type, **ratings: str):  # type: ignore[no-untyped-def]
    made = cls(id="p1", name="T1")
    for name, text in ratings.items():
        made = made.with_text(name, text)
    return made


def ohm_at(coils: list[Coil], side: str, shorted: str) -> complex:
    """Short-circuit impedance per phase in ohm, seen from a side with the other one shorted."""
    y = in_sequences(admittance(coils, [*phases(side), *phases(shorted)], {}))
    return complex(1 / y[0, 0, 0])


def ratings_of(coils: list[Coil], tap_side: str) -> dict[str, str]:
    """The nameplate that a test bay would write: impedance measured from the untapped side, X/R and voltages."""
    seen, other, kv = ("X", "H", LOW_KV) if tap_side == "high" else ("H", "X", HIGH_KV)
    z = ohm_at(coils, seen, other) * MVA / kv**2
    return {
        "rated_power": f"{MVA} MVA", "high_voltage": f"{HIGH_KV} kV", "low_voltage": f"{LOW_KV} kV",
        "impedance": f"{abs(z) * 100!r} %", "x_over_r": repr(z.imag / z.real), "tap": f"{TAP * 100} %",
        "tap_side": tap_side,
    }  # fmt: skip


GROUPS = (
    *(f"YNyn{n}" for n in (0, 2, 4, 6, 8, 10)), "YNy0", "Yyn6", "Yy4",
    *(f"YNd{n}" for n in (1, 3, 5, 7, 9, 11)), "Yd5",
    *(f"Dyn{n}" for n in (1, 3, 5, 7, 9, 11)), "Dy11", *(f"Dd{n}" for n in (0, 2, 4, 6, 8, 10)),
    *(f"Yzn{n}" for n in (1, 3, 5, 7, 9, 11)), "YNzn5", "YNz1", "Dzn0", "Dzn6", "Dz2", "ZNyn1", "ZNd0",
)  # fmt: skip


RESISTOR_OHM = {"H": 3.0, "X": 1.5}


def leakages(high: str, low: str, tap_side: str) -> tuple[complex, complex]:
    """Leakage in ohm of the high and low coils: all of it in the untapped winding; with a zigzag in both."""
    in_high, in_low = 3 + 40j, 0.05 + 1.1j
    if "Z" in (high, low):
        return in_high, in_low
    return (0j, in_low) if tap_side == "high" else (in_high, 0j)


@pytest.mark.parametrize("tap_side", ["high", "low"])
@pytest.mark.parametrize("group", GROUPS)
def test_every_group_is_what_its_coils_are(group: str, tap_side: str) -> None:
    (high, low), clock = [c for c in group.upper() if c in "YDZ"], int("".join(c for c in group if c.isdigit()))
    high_kv, low_kv = HIGH_KV * (1 + TAP * (tap_side == "high")), LOW_KV * (1 + TAP * (tap_side == "low"))
    z_high, z_low = leakages(high, low, tap_side)
    earthed = {f"{side} n": RESISTOR_OHM[side] for side, mark in (("H", "N"), ("X", "n")) if mark in group}
    matches = 0
    for roll in range(3):
        for flip in (1, -1):
            coils = [*WINDINGS[high]("H", high_kv, z_high), *WINDINGS[low]("X", low_kv, z_low, roll, flip)]
            wanted = in_sequences(admittance(coils, [*phases("H"), *phases("X")], earthed))
            if math.cos(math.radians(lag_deg(wanted[0]) - 30 * clock)) > 0.99:
                matches += 1
                assert_same(of_stamps(stamps_for(group, coils, tap_side), ("high", "low"), NODE_KV, 100.0), wanted)
    assert matches == 1


def stamps_for(group: str, coils: list[Coil], tap_side: str) -> Stamps:
    """The engine's stamps of the transformer that has these coils, from nameplate values measured on them."""
    ratings = ratings_of(coils, tap_side) | {
        "vector_group": group, "zero_sequence_impedance": "100 %",
        "neutral_high": f"resistor {RESISTOR_OHM['H']} ohm", "neutral_low": f"resistor {RESISTOR_OHM['X']} ohm",
    }  # fmt: skip
    made = part(Transformer, **ratings)
    side = {"z": "X", "Z": "H"}.get(next((c for c in group if c in "zZ"), ""))
    if side and f"{'n' if side == 'X' else 'N'}" in group:
        z0 = complex(1 / in_sequences(admittance(with_earth_at(coils, f"{side} n"), phases(side), {}))[2, 0, 0])
        tapped = (side == "H") == (tap_side == "high")
        kv = (HIGH_KV if side == "H" else LOW_KV) * (1 + TAP * tapped)
        share = abs(z0) * MVA / kv**2 / made.impedance.to("pu")
        made = made.with_text("zero_sequence_impedance", f"{share * 100!r} %")
        made = made.with_text("x0_over_r0", repr(z0.imag / z0.real))
    return transformer_stamps(made, *NODE_KV, SETTING)


def assert_same(found: np.ndarray, wanted: np.ndarray) -> None:
    np.testing.assert_allclose(found, wanted, rtol=0, atol=1e-9 * np.abs(wanted).max())


def unearthed_star_stamps(**ratings: str) -> Stamps:
    made = part(
        Transformer, rated_power="10 MVA", high_voltage="33 kV", low_voltage="11 kV", impedance="8 %", x_over_r="15",
        zero_sequence_impedance="80 %", **ratings,
    )  # fmt: skip
    return transformer_stamps(made, 33.0, 11.0, SETTING)


def test_three_limb_core_gives_a_shunt_at_the_earthed_star() -> None:
    # Z0m on rated power: 60 % of 33²/10 = 65.34 ohm, plus 3 · 2 ohm of the neutral; base 33²/100 = 10.89 ohm
    stamps = unearthed_star_stamps(vector_group="YNy0", magnetising_impedance="60 %", neutral_high="reactor 2 ohm")
    assert stamps.branches[0].y_a[2] == pytest.approx(10.89 / (65.34j + 6j))
    assert stamps.branches[0].y[2] == stamps.branches[0].y_b[2] == 0
    low = unearthed_star_stamps(vector_group="Yyn0", magnetising_impedance="60 %").branches[0]
    assert (low.y_a[2], low.y_b[2]) == (0, pytest.approx(10 / 100 / 0.6j))


@pytest.mark.parametrize("ratings", [{}, {"magnetising_impedance": "60 %", "core": "five-limb"}])
def test_star_star_is_open_without_a_magnetising_path(ratings: dict[str, str]) -> None:
    branch = unearthed_star_stamps(vector_group="Yyn0", **ratings).branches[0]
    assert (branch.y[2], branch.y_a[2], branch.y_b[2]) == (0, 0, 0)


def test_isolated_neutral_is_no_path() -> None:
    stamps = unearthed_star_stamps(vector_group="Dyn11", neutral_low="isolated")
    assert stamps.branches[0].y_b[2] == 0 and stamps.star_points == ()


def test_a_neutral_that_is_not_brought_out_is_not_earthed() -> None:
    stamps = unearthed_star_stamps(vector_group="Dy11", neutral_low="solid")
    assert stamps.branches[0].y_b[2] == 0 and stamps.star_points == ()


def test_leakage_from_load_loss() -> None:
    # IEC 60909-0, 6.3.1: R = P/S = 0.06/10, X = √(Z² − R²)
    made = part(
        Transformer, rated_power="10 MVA", high_voltage="33 kV", low_voltage="11 kV", impedance="8 %",
        load_loss="60 kW", zero_sequence_impedance="100 %",
    )  # fmt: skip
    z = 1 / transformer_stamps(made, 33.0, 11.0, SETTING).branches[0].y[0]
    assert z == pytest.approx(complex(0.06, 10 * math.sqrt(0.08**2 - 0.006**2)))


def test_load_loss_above_the_impedance_is_refused_by_name() -> None:
    made = part(
        Transformer, rated_power="1 MVA", high_voltage="11 kV", low_voltage="0.4 kV", impedance="5 %", load_loss="60 kW"
    )
    with pytest.raises(PartLeftOutError, match=r"transformer T1.*60 kW"):
        transformer_stamps(made, 11.0, 0.4, SETTING)


def test_resistor_given_in_amperes_is_sized_at_line_to_neutral_voltage() -> None:
    # 400 A at 11/√3 kV: 15.877 ohm, three times in the zero sequence
    stamps = unearthed_star_stamps(vector_group="Dyn11", neutral_low="resistor 400 A 10 s")
    z0_ohm = 1 / stamps.branches[0].y_b[2] * 11**2 / 100
    assert z0_ohm.real - 3 * 15.877 == pytest.approx(0.8 * 0.08 * 11**2 / 10 / math.hypot(1, 15), abs=1e-3)


def test_clock_signs() -> None:
    # two of three coils' names exchanged leave the zero sequence; a reversed coil turns it round
    assert [clock_sign(n) for n in (0, 4, 8, 2, 6, 10)] == [1, 1, 1, -1, -1, -1]
    for n in range(1, 12, 2):
        assert clock_sign(n) == -clock_sign((n + 6) % 12) == clock_sign((n + 4) % 12)


@pytest.mark.parametrize(("text", "ohm"), [("20 ohm", 20.0), ("300 A", math.sqrt(3) * 11 / 0.3)])
def test_earthing_transformer(text: str, ohm: float) -> None:
    made = part(
        EarthingTransformer, rated_voltage="11 kV", zero_sequence_impedance=text, x0_over_r0="8",
        neutral="resistor 5 ohm",
    )  # fmt: skip
    stamps = earthing_transformer_stamps(made, 11.0, SETTING)
    z0 = 1 / stamps.shunts[0].y[2] * 11**2 / 100
    assert z0 == pytest.approx(ohm * complex(1, 8) / math.hypot(1, 8) + 15)
    assert stamps.shunts[0].y[:2] == (0, 0) and not stamps.shunts[0].source


def test_rated_neutral_current_flows_with_one_line_at_earth() -> None:
    # definition of the rating: line-to-neutral voltage on Z0 drives a third of the neutral current in each line
    made = part(EarthingTransformer, rated_voltage="11 kV", zero_sequence_impedance="300 A")
    y0 = earthing_transformer_stamps(made, 11.0, SETTING).shunts[0].y[2]
    assert 3 * 11 / math.sqrt(3) * abs(y0) * 100 / 11**2 == pytest.approx(0.3)


def test_earthing_transformer_with_isolated_neutral_does_nothing() -> None:
    made = part(EarthingTransformer, rated_voltage="11 kV", zero_sequence_impedance="20 ohm", neutral="isolated")
    assert earthing_transformer_stamps(made, 11.0, SETTING) == Stamps()
