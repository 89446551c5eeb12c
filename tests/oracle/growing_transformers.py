"""Random transformers for ``plants``: all vector groups, taps on either side, every way to earth a star point."""

from collections.abc import Callable
from dataclasses import dataclass
from typing import Protocol

from hypothesis import strategies as st

from tests.oracle.sketch import Sketch, TerminalKey

LEVELS_KV = (33.0, 11.0, 6.6, 0.69, 0.4)
THREE_WINDINGS = ("YNyn0d11", "YNyn0d1", "YNd11d5", "Dyn11yn5", "YNyn6yn0", "Yyn0d5", "Dd0yn1", "YNyn4d7", "YNy0d11")


@dataclass(frozen=True)
class Spot:
    """Somewhere to connect to. clock: hours its voltage lags the first bus's; no_load: voltage over nominal."""

    key: TerminalKey
    kv: float
    clock: int = 0
    no_load: float = 1.0

    def agrees(self, other: "Spot") -> bool:
        """Whether the two may be joined."""
        alike = self.kv == other.kv and self.clock == other.clock
        return alike and abs(self.no_load / other.no_load - 1) < 1e-12


class Grower(Protocol):
    """What a growing plant offers here."""

    draw: st.DrawFn
    sketch: Sketch
    doubles: list[Callable[[], str]]

    def pick(self, *options: str) -> str: ...
    def share(self, low: float, high: float) -> float: ...
    def spot(self) -> Spot: ...
    def new_bus(self, like: Spot) -> Spot: ...
    def series(self, start: TerminalKey) -> str: ...
    def other_kv(self, kv: float) -> float: ...
    def near(self, kv: float) -> float: ...
    def neutral(self) -> str: ...
    def either(self, *choices: dict[str, str]) -> dict[str, str]: ...


def two_windings(grower: Grower) -> None:
    """A two-winding transformer of any vector group, either side first."""
    start = grower.spot()
    far_kv = grower.other_kv(start.kv)
    down = start.kv > far_kv
    group, clock = _group(grower)
    high_kv, low_kv = (start.kv, far_kv) if down else (far_kv, start.kv)
    rated = {"high": grower.near(high_kv), "low": grower.near(low_kv)}
    tap, side = grower.draw(st.sampled_from((0.0, 0.0, 2.5, -5.0))), grower.pick("high", "low")
    ratings = {
        "rated_power": f"{grower.share(0.5, 40)} MVA", "high_voltage": f"{rated['high']!r} kV",
        "low_voltage": f"{rated['low']!r} kV", "impedance": f"{grower.share(4, 14)} %",
        "vector_group": group, "tap": f"{tap} %", "tap_side": side,
        "neutral_high": grower.neutral(), "neutral_low": grower.neutral(),
        "zero_sequence_impedance": f"{grower.share(70, 140)} %",
    }  # fmt: skip
    ratings |= grower.either({"x_over_r": str(grower.share(2, 40))}, {"load_loss": "1.3 %"})
    ratings |= grower.either({"x0_over_r0": str(grower.share(2, 40))}, {}, {"magnetising_impedance": "60 %"})
    rated[side] *= 1 + tap / 100
    step = (rated["low"] / rated["high"]) / (low_kv / high_kv)
    hours, ratio = (clock, step) if down else (-clock, 1 / step)
    if grower.pick("bus", "line", "device") != "bus":
        _lead_out(grower, start, far_kv, hours, ratio, ratings, down)
        return
    end = grower.new_bus(Spot(start.key, far_kv, (start.clock + hours) % 12, start.no_load * ratio))
    ends = (start.key, end.key) if down else (end.key, start.key)
    grower.sketch.hang("transformer", *ends, **ratings)
    grower.doubles.append(lambda: grower.sketch.hang("transformer", *ends, **ratings))


def _lead_out(
    grower: Grower, start: Spot, far_kv: float, hours: int, ratio: float, ratings: dict[str, str], down: bool
) -> None:
    """A transformer whose far side leads over a line or a device to its bus."""
    near_end, far_end = ("high", "low") if down else ("low", "high")
    part_id = grower.sketch.add("transformer", **ratings)
    grower.sketch.wire((part_id, near_end), start.key)
    end = Spot((part_id, far_end), far_kv, (start.clock + hours) % 12, start.no_load * ratio)
    middle = grower.series(end.key)
    grower.sketch.wire((middle, "b"), grower.new_bus(end).key)


def _group(grower: Grower) -> tuple[str, int]:
    """A vector group that exists, and its clock number."""
    first = grower.pick("D", "Y", "YN", "YN", "ZN")
    second = grower.pick(*({"Z": ("d", "y", "yn")}.get(first[0], ("d", "y", "yn", "yn", "zn", "z"))))
    odd = {first[0], second[0].upper()} in ({"D", "Y"}, {"Y", "Z"})
    clock = 2 * grower.draw(st.integers(0, 5)) + odd
    return f"{first}{second}{clock}", clock


def three_windings(grower: Grower) -> None:
    """A three-winding transformer with one new bus on each further side; sometimes a leg is negative."""
    start = grower.spot()
    group = grower.pick(*THREE_WINDINGS)
    hours = [int(h) for h in _clocks(group)]
    medium_kv = grower.other_kv(start.kv)
    low_kv = grower.other_kv(start.kv)
    tap = grower.draw(st.sampled_from((0.0, 3.75)))
    mva = grower.share(5, 40)
    high_low = grower.pick("17.5 %", "23 %")
    ratings = {
        "high_voltage": f"{start.kv!r} kV", "medium_voltage": f"{medium_kv!r} kV", "low_voltage": f"{low_kv!r} kV",
        "rated_power_high": f"{mva} MVA", "rated_power_medium": f"{mva} MVA", "rated_power_low": f"{mva / 4!r} MVA",
        "impedance_high_medium": "12 %", "impedance_high_low": high_low, "impedance_medium_low": "6.5 %",
        "x_over_r": str(grower.share(5, 40)), "vector_group": group,
        "tap": f"{tap} %", "neutral_high": grower.neutral(), "neutral_medium": grower.neutral(),
        "neutral_low": grower.neutral(), "zero_sequence_impedance": grower.pick("100 %", "85 %"),
    }  # fmt: skip
    ratings |= grower.either(
        {},
        {"base_high_medium": f"{mva} MVA", "base_high_low": f"{mva} MVA", "base_medium_low": f"{mva} MVA"},
        {"base_high_low": f"{0.9 * mva} MVA", "base_medium_low": f"{mva} MVA"},
    )
    no_load = start.no_load / (1 + tap / 100)
    ends = [
        grower.new_bus(Spot(start.key, kv, (start.clock + hour) % 12, no_load)).key
        for kv, hour in zip((medium_kv, low_kv), hours, strict=True)
    ]
    grower.sketch.hang("transformer3", start.key, *ends, **ratings)
    grower.doubles.append(lambda: grower.sketch.hang("transformer3", start.key, *ends, **ratings))


def auto(grower: Grower) -> None:
    """An autotransformer, entered from its high side."""
    start = grower.spot()
    lower = [level for level in LEVELS_KV if level < start.kv]
    if not lower:
        return
    low_kv, third_kv = grower.draw(st.sampled_from(lower)), grower.other_kv(start.kv)
    clock = 2 * grower.draw(st.integers(0, 5)) + 1
    tap, mva = grower.draw(st.sampled_from((0.0, -2.5))), grower.share(5, 60)
    ratings = {
        "high_voltage": f"{start.kv!r} kV", "low_voltage": f"{low_kv!r} kV", "tertiary_voltage": f"{third_kv!r} kV",
        "rated_power": f"{mva} MVA", "impedance_high_low": f"{grower.share(6, 12)} %",
        "impedance_high_tertiary": "28 %", "impedance_low_tertiary": grower.pick("18.3 %", "24.3 %"),
        "x_over_r": str(grower.share(10, 50)), "vector_group": f"YNa0d{clock}", "tap": f"{tap} %",
        "neutral": grower.neutral(), "zero_sequence_impedance": grower.pick("100 %", "90 %"),
    }  # fmt: skip
    no_load = start.no_load / (1 + tap / 100)
    low = grower.new_bus(Spot(start.key, low_kv, start.clock, no_load)).key
    third = grower.new_bus(Spot(start.key, third_kv, (start.clock + clock) % 12, no_load)).key
    grower.sketch.hang("autotransformer", start.key, low, third, **ratings)


def _clocks(group: str) -> list[str]:
    digits = "".join(c if c.isdigit() else " " for c in group)
    return digits.split()
