"""Three-winding transformers and autotransformers against coils on limbs by ampere-turns (``coils``)."""

import math
from collections.abc import Sequence
from itertools import product

import numpy as np
import pytest

from onelinefault.engine.case import Case
from onelinefault.engine.network import ComplexArray
from onelinefault.engine.sequence_stamps import PartLeftOutError, Setting
from onelinefault.engine.sequence_three_windings import autotransformer_stamps, star_legs, transformer3_stamps
from onelinefault.model.part import Part
from onelinefault.model.transforming import Autotransformer, Transformer3
from tests.engine.coils import (
    Coil,
    admittance,
    delta,
    in_sequences,
    lag_deg,
    of_stamps,
    phases,
    reduced,
    star,
    with_earth_at,
)

SETTING = Setting(100.0, 50.0, Case())
WINDINGS = {"Y": star, "D": delta}
PAIRS = ((0, 1), (0, 2), (1, 2))
TURN = 1 + 7j  # one X/R for all leakage, as the nameplate has it
TAP = 0.08


def made(part_class: type[Part], ratings: dict[str, str]) -> Part:
    part: Part = part_class(id="p1", name="T1")
    for name, text in ratings.items():
        part = part.with_text(name, text)
    return part


def pair_ohm(coils: Sequence[Coil], sides: Sequence[str]) -> list[complex]:
    """Impedance in ohm at the first of each pair of sides, the second shorted and the third open (test bay)."""
    found = []
    for k, m in PAIRS:
        (third,) = {0, 1, 2} - {k, m}
        order = [sides[k], sides[m], sides[third]]
        y = in_sequences(admittance(coils, [p for side in order for p in phases(side)], {}))[0]
        found.append(complex(1 / reduced(y, 2)[0, 0]))
    return found


def pair_ratings(
    z_ohm: Sequence[complex], kv: Sequence[float], names: Sequence[str], bases_mva: Sequence[float]
) -> dict[str, str]:
    """Nameplate pair impedances on their bases, all at rated voltage."""
    ratings = {"x_over_r": repr(z_ohm[0].imag / z_ohm[0].real)}
    for z, (k, m), base in zip(z_ohm, PAIRS, bases_mva, strict=True):
        ratings[f"impedance_{names[k]}_{names[m]}"] = f"{abs(z) * base / kv[k] ** 2 * 100!r} %"
        ratings[f"base_{names[k]}_{names[m]}"] = f"{base!r} MVA"
    return ratings


def assert_same(found: ComplexArray, wanted: ComplexArray) -> None:
    np.testing.assert_allclose(found, wanted, rtol=0, atol=1e-9 * np.abs(wanted).max())


SIDES = ("high", "medium", "low")
KV = (132.0, 34.5, 11.5)
NODE_KV = (138.0, 33.0, 11.0)
RESISTOR_OHM = (3.0, 1.0, 0.2)


@pytest.mark.parametrize(
    "group",
    ["YNyn0d11", "YNyn6d1", "YNyn8yn2", "YNyn0yn0", "Yyn10d5", "YNy0d7", "Dyn11yn5", "Dyn1yn3", "YNd1d11", "Dd0d0"],
)  # fmt: skip
def test_three_windings_are_what_their_coils_are(group: str) -> None:
    part = made(Transformer3, {"vector_group": group})
    assert isinstance(part, Transformer3) and part.vector_group is not None
    connections, out = part.vector_group.connections, part.vector_group.brought_out
    clocks = (0, *part.vector_group.clocks)
    # leakage per turn² of the windings 0.02, −0.001 and 0.03 of one measure: the medium leg is negative
    legs = [TURN * share * kv**2 / 1000 for share, kv in zip((0.02, -0.001, 0.03), KV, strict=True)]
    at_rating = wired(connections, (0, 0, 0), (1, 1, 1), KV, legs)
    bases = (60.0, 20.0, 15.0)
    ratings = pair_ratings(pair_ohm(at_rating, "HMX"), KV, SIDES, bases) | {"vector_group": group}
    ratings |= {f"{side}_voltage": f"{kv} kV" for side, kv in zip(SIDES, KV, strict=True)}
    ratings |= {f"neutral_{side}": f"resistor {ohm} ohm" for side, ohm in zip(SIDES, RESISTOR_OHM, strict=True)}
    part = made(Transformer3, ratings | {"rated_power_high": "60 MVA", "tap": f"{TAP * 100} %"})
    found = of_stamps(transformer3_stamps(part, NODE_KV, SETTING), SIDES, NODE_KV, 100.0)  # type: ignore[arg-type]
    tapped = (KV[0] * (1 + TAP), *KV[1:])
    legs[0] *= (1 + TAP) ** 2  # leakage lies behind the tap: it is seen through it
    earthed = {f"{s} n": ohm for s, ohm, n in zip("HMX", RESISTOR_OHM, out, strict=True) if n}
    matches = 0
    for rolls, flips in product(product((0,), range(3), range(3)), product((1,), (1, -1), (1, -1))):
        coils = wired(connections, rolls, flips, tapped, legs)
        wanted = in_sequences(admittance(coils, [p for s in "HMX" for p in phases(s)], earthed))
        if clocks_of(wanted[0]) == clocks:
            matches += 1
            assert_same(found, wanted)
    assert matches == 1


def wired(
    connections: Sequence[str], rolls: Sequence[int], flips: Sequence[int], kv: Sequence[float], legs: Sequence[complex]
) -> list[Coil]:
    """Coils of three windings; a delta coil has three times the ohm of a star coil of the same line voltage."""
    return [
        coil
        for side, c, roll, flip, u, z in zip("HMX", connections, rolls, flips, kv, legs, strict=True)
        for coil in WINDINGS[c](side, u, z * (3 if c == "D" else 1), roll, flip)
    ]


def clocks_of(y_positive: ComplexArray) -> tuple[int, ...]:
    """Clock numbers of three sides at no load against the first."""
    found = [0]
    for k, third in ((1, 2), (2, 1)):
        order = [0, k, third]
        found.append(round(lag_deg(reduced(y_positive[np.ix_(order, order)], 2)) / 30) % 12)
    return tuple(found)


AUTO = ("high", "low", "tertiary")
AUTO_KV = (230.0, 110.0, 11.0)
AUTO_NODE_KV = (220.0, 115.0, 10.5)


def auto_coils(tap: float, legs_ohm: Sequence[complex], tertiary: str, roll: int = 0, flip: int = 1) -> list[Coil]:
    """Series coils between H and X, common ones from X to the neutral, a tertiary; leakage in that order."""
    high, low, third = AUTO_KV
    coils: list[Coil] = []
    for k in range(3):
        coils.append((k, (high * (1 + tap) - low) / math.sqrt(3), legs_ohm[0], f"H{k}", f"X{k}"))
        coils.append((k, low / math.sqrt(3), legs_ohm[1], f"X{k}", "N"))
    return coils + WINDINGS[tertiary]("T", third, legs_ohm[2] * (3 if tertiary == "D" else 1), roll, flip)


@pytest.mark.parametrize("neutral", ["solid", "resistor 5 ohm", "reactor 20 ohm", "isolated"])
@pytest.mark.parametrize("group", ["YNa0d11", "YNa0d5", "YNa0y0"])
def test_autotransformer_is_what_its_coils_are(group: str, neutral: str) -> None:
    tertiary, clock = group[4].upper(), int(group[5:])
    legs = [TURN * share * (u / 100) ** 2 for share, u in zip((3.0, 1.0, 6.0), (120.0, 110.0, 11.0), strict=True)]
    at_rating = auto_coils(0, legs, tertiary)
    ratings = pair_ratings(pair_ohm(at_rating, "HXT"), AUTO_KV, AUTO, (200.0, 60.0, 50.0))
    ratings |= {f"{side}_voltage": f"{kv} kV" for side, kv in zip(AUTO, AUTO_KV, strict=True)}
    part = made(Autotransformer, ratings | {"rated_power": "200 MVA", "vector_group": group, "neutral": neutral})
    stamps = autotransformer_stamps(part, AUTO_NODE_KV, SETTING)  # type: ignore[arg-type]
    found = of_stamps(stamps, AUTO, AUTO_NODE_KV, 100.0)
    assert len(stamps.star_points) == (0 if neutral == "isolated" else 2)
    ohm = {"resistor 5 ohm": 5.0, "reactor 20 ohm": 20j}
    earthed = {"N": ohm[neutral]} if neutral in ohm else {}
    matches = 0
    for roll, flip in product(range(3), (1, -1)):
        coils = auto_coils(0, legs, tertiary, roll, flip)
        coils = with_earth_at(coils, "N") if neutral == "solid" else coils
        wanted = in_sequences(admittance(coils, [p for s in "HXT" for p in phases(s)], earthed))
        if clocks_of(wanted[0]) == (0, 0, clock):
            matches += 1
            assert_same(found, wanted)
    assert matches == 1


@pytest.mark.parametrize("neutral", ["solid", "resistor 5 ohm", "isolated"])
def test_tapped_autotransformer_is_what_its_coils_are(neutral: str) -> None:
    # the measured star's legs stand in the lines of coils without leakage; the high one lies behind the tap
    share = (0.02 * TURN / 100, -0.001 * TURN / 100, 0.03 * TURN / 100)
    z_ohm = [(share[k] + share[m]) * AUTO_KV[k] ** 2 for k, m in PAIRS]
    ratings = pair_ratings(z_ohm, AUTO_KV, AUTO, (100.0, 100.0, 100.0)) | {"tap": f"{TAP * 100} %"}
    ratings |= {f"{side}_voltage": f"{kv} kV" for side, kv in zip(AUTO, AUTO_KV, strict=True)}
    part = made(Autotransformer, ratings | {"rated_power": "100 MVA", "vector_group": "YNa0d11", "neutral": neutral})
    found = of_stamps(autotransformer_stamps(part, AUTO_NODE_KV, SETTING), AUTO, AUTO_NODE_KV, 100.0)  # type: ignore[arg-type]
    coils = auto_coils(TAP, (0j, 0j, share[2] * AUTO_KV[2] ** 2), "D")
    for k in range(3):  # an impedance in a line is a coil without turns
        coils.append((k, 0.0, share[0] * (AUTO_KV[0] * (1 + TAP)) ** 2, f"high{k}", f"H{k}"))
        coils.append((k, 0.0, share[1] * AUTO_KV[1] ** 2, f"low{k}", f"X{k}"))
    if neutral == "solid":
        coils = with_earth_at(coils, "N")
    kept = [*phases("high"), *phases("low"), *phases("T")]
    wanted = in_sequences(admittance(coils, kept, {"N": 5.0} if "resistor" in neutral else {}))
    assert_same(found[2], wanted[2])
    np.testing.assert_allclose(np.abs(found[0]), np.abs(wanted[0]), rtol=0, atol=1e-9 * np.abs(wanted).max())


def test_star_legs_by_hand() -> None:
    # pairs 0.10, 0.18, 0.06: legs 0.11, −0.01, 0.07, and their sums give the pairs back
    assert star_legs((0.10, 0.18, 0.06)) == pytest.approx((0.11, -0.01, 0.07))


def test_pair_base_is_the_smaller_rating_when_not_given() -> None:
    ratings = {
        "high_voltage": "132 kV", "medium_voltage": "33 kV", "low_voltage": "11 kV", "rated_power_high": "60 MVA",
        "rated_power_low": "20 MVA", "impedance_high_medium": "10 %", "impedance_high_low": "12 %",
        "impedance_medium_low": "6 %", "x_over_r": "500",
    }  # fmt: skip
    branches = transformer3_stamps(made(Transformer3, ratings), (132, 33, 11), SETTING).branches  # type: ignore[arg-type]
    z_high, z_medium, z_low = (1 / b.y[0] for b in branches)
    assert abs(z_high + z_medium) == pytest.approx(0.10 * 100 / 60)
    assert abs(z_high + z_low) == pytest.approx(0.12 * 100 / 20)
    assert abs(z_medium + z_low) == pytest.approx(0.06 * 100 / 20)


def test_a_leg_that_vanishes_is_no_mistake() -> None:
    # pairs of 10, 16 and 6 % on one base: nothing is left for the medium leg
    ratings = {f"{side}_voltage": "33 kV" for side in SIDES} | {"rated_power_high": "100 MVA"}
    ratings |= {"impedance_high_medium": "10 %", "impedance_high_low": "16 %", "impedance_medium_low": "6 %"}
    branches = transformer3_stamps(made(Transformer3, ratings), (33, 33, 33), SETTING).branches  # type: ignore[arg-type]
    z_high, z_medium, z_low = (1 / b.y[0] for b in branches)
    assert abs(z_medium) < 1e-7
    assert (abs(z_high), abs(z_low)) == pytest.approx((0.10, 0.06), rel=1e-6)


def test_group_of_two_windings_is_refused_by_name() -> None:
    part = made(Transformer3, {"vector_group": "YNd11"})
    with pytest.raises(PartLeftOutError, match=r"three-winding transformer T1.*YNd11 names 2 windings"):
        transformer3_stamps(part, (132, 33, 11), SETTING)  # type: ignore[arg-type]


def test_each_pair_has_the_resistance_of_its_own_load_loss() -> None:
    # 40 MVA: 120 kW high-medium; 0.4 % of 10 MVA high-low; medium-low by X/R
    ratings = {
        "high_voltage": "110 kV", "medium_voltage": "20 kV", "low_voltage": "10 kV", "rated_power_high": "40 MVA",
        "impedance_high_medium": "12 %", "impedance_high_low": "5 %", "impedance_medium_low": "4 %",
        "base_high_low": "10 MVA", "base_medium_low": "10 MVA", "load_loss_high_medium": "120 kW",
        "load_loss_high_low": "0.4 %", "x_over_r": "25",
    }  # fmt: skip
    stamps = transformer3_stamps(made(Transformer3, ratings), (110.0, 20.0, 10.0), SETTING)
    z_high, z_medium, z_low = (1 / branch.y[0] for branch in stamps.branches)
    r, x = 0.003 * 100 / 40, math.sqrt(0.12**2 - 0.003**2) * 100 / 40
    assert z_high + z_medium == pytest.approx(complex(r, x), rel=1e-12)
    r, x = 0.004 * 100 / 10, math.sqrt(0.05**2 - 0.004**2) * 100 / 10
    assert z_high + z_low == pytest.approx(complex(r, x), rel=1e-12)
    assert z_medium + z_low == pytest.approx(0.4 * complex(1, 25) / math.hypot(1, 25), rel=1e-12)


def test_a_pair_s_load_loss_above_its_impedance_is_refused() -> None:
    ratings = {
        "high_voltage": "110 kV", "medium_voltage": "20 kV", "low_voltage": "10 kV", "rated_power_high": "40 MVA",
        "impedance_high_medium": "12 %", "impedance_high_low": "5 %", "impedance_medium_low": "4 %",
        "load_loss_medium_low": "5 %",
    }  # fmt: skip
    with pytest.raises(PartLeftOutError, match="load loss") as caught:
        transformer3_stamps(made(Transformer3, ratings), (110.0, 20.0, 10.0), SETTING)
    assert caught.value.finding.field == "load_loss_medium_low"
