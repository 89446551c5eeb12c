"""Random plants for comparing the engine with the oracle: trees with ties and rings over several voltage levels.

Every place knows its nominal voltage, its clock hours and its no-load voltage; ties and parallel transformers join only
places where these agree, so that no loop contradicts itself (the engine refuses the others, see the findings' tests).
"""

from collections.abc import Callable
from dataclasses import dataclass, replace

from hypothesis import strategies as st

from onelinefault.engine.case import Case
from onelinefault.model.fault import PHASE_CHOICES, Fault, FaultKind, Place
from onelinefault.model.plant import Plant
from tests.oracle import growing_transformers
from tests.oracle.growing_transformers import LEVELS_KV, Spot
from tests.oracle.sketch import Sketch, TerminalKey

SIZES = (5, 5, 6, 6, 7, 7, 8, 8, 9, 10, 10, 12, 12, 14, 16, 20, 25, 30, 40, 60)  # nodes; the small ones find most
STEPS = ("line", "line", "transformer", "transformer", "transformer3", "autotransformer", "device", "chain", "tie",
         "parallel", "ring", "open", "machine", "machine", "motor", "supply", "earthing", "passive")  # fmt: skip


class Grower:
    """Grows one plant, drawing every choice."""

    def __init__(self, draw: st.DrawFn, earthed: bool = True) -> None:
        self.draw, self.earthed = draw, earthed
        self.sketch = Sketch(
            frequency=self.pick("50 Hz", "60 Hz"),
            base_power=self.pick("100 MVA", "1 MVA", "17.3 MVA"),
            prefault_voltage=self.pick("1.0 pu", "1.05 pu"),
        )
        self.spots: list[Spot] = []
        self.lengths: list[str] = []
        self.doubles: list[Callable[[], str]] = []
        self.supplies = 0

    def pick(self, *options: str) -> str:
        """One of the options."""
        return self.draw(st.sampled_from(options))

    def share(self, low: float, high: float) -> float:
        """A number of three digits between the limits."""
        return float(f"{low * (high / low) ** (self.draw(st.integers(0, 40)) / 40):.3g}")

    def spot(self) -> Spot:
        """An existing place, late ones as likely as early ones."""
        return self.draw(st.sampled_from(self.spots))

    def grow(self, nodes: int) -> Plant:
        """A plant with about this many nodes."""
        kv = self.draw(st.sampled_from(LEVELS_KV[:3]))
        self.spots.append(Spot(self.sketch.bus(kv), kv))
        self.supply()
        for _ in range(6 * nodes):
            if len(self.spots) >= nodes:
                break
            getattr(self, self.pick(*STEPS))()
        return self.sketch.plant

    def new_bus(self, like: Spot) -> Spot:
        """A bus of its own at the given voltage."""
        spot = replace(like, key=self.sketch.bus(like.kv))
        self.spots.append(spot)
        return spot

    # --- series parts -------------------------------------------------------------------------------------------

    def line(self) -> None:
        """A cable, line, busway or reactor to a new bus, or to a bare end that others connect to."""
        start = self.spot()
        part_id = self.series(start.key)
        end = replace(start, key=(part_id, "b"))
        if self.pick("bus", "bare") == "bus":
            self.sketch.wire(end.key, self.new_bus(start).key)
        else:
            self.spots.append(end)

    def series(self, start: TerminalKey) -> str:
        """A part with a length, or a reactor, wired at its end a. Returns its id."""
        kind = self.pick("cable", "overhead_line", "busway", "reactor")
        part_id = self.sketch.add(kind, **(self.reactor() if kind == "reactor" else self.per_length(kind)))
        if kind != "reactor":
            self.lengths.append(part_id)
        self.sketch.wire((part_id, "a"), start)
        return part_id

    def reactor(self) -> dict[str, str]:
        """Ratings of a reactor, in ohm or in per cent."""
        ratings = {"reactance": f"{self.share(0.01, 2)} ohm", "x_over_r": str(self.share(5, 80))}
        return ratings | self.either(
            {}, {"zero_sequence_reactance": "0.4 ohm"}, {"reactance": "6 %", "rated_current": "400 A"}
        )

    def per_length(self, kind: str) -> dict[str, str]:
        """Ratings of a cable, line or busway."""
        r, x = self.share(0.02, 0.5), self.share(0.05, 0.4)
        ratings = {
            "length": f"{self.share(0.02, 5)} km", "parallel": self.pick("1", "1", "3"),
            "r_per_length": f"{r} ohm/km", "x_per_length": f"{x} ohm/km",
            "r0_per_length": f"{3.1 * r:.4g} ohm/km", "x0_per_length": f"{self.share(1, 4) * x:.4g} ohm/km",
            "material": self.pick("copper", "aluminium"), "r_temperature": self.pick("20 °C", "75 °C"),
        }  # fmt: skip
        if kind != "busway":
            ratings |= {"capacitance": "0.25 uF/km", "zero_sequence_capacitance": self.pick("0.25 uF/km", "0.1 uF/km")}
        if kind == "cable" and ratings["parallel"] == "1":
            ratings |= self.either({}, {"size": "2x240 mm²"})
        return ratings

    def either(self, *choices: dict[str, str]) -> dict[str, str]:
        """One of several ways to say the same."""
        return self.draw(st.sampled_from(choices))

    def tie(self) -> None:
        """A line between two places that agree, making a ring."""
        start = self.spot()
        others = [s for s in self.spots if s.agrees(start) and s is not start]
        if others:
            part_id = self.series(start.key)
            self.sketch.wire((part_id, "b"), self.draw(st.sampled_from(others)).key)

    # --- devices ------------------------------------------------------------------------------------------------

    def device(self) -> None:
        """A closed device to a new bus."""
        start = self.spot()
        kind = self.pick("breaker", "switch", "fuse")
        self.sketch.hang(kind, start.key, self.new_bus(start).key, closed="yes")

    def chain(self) -> None:
        """Breaker, line and switch in a row, without a bus between."""
        start = self.spot()
        first = self.sketch.add("breaker", closed="yes")
        self.sketch.wire(start.key, (first, "b"))
        middle = self.series((first, "a"))
        last = self.sketch.add("switch", closed="yes")
        self.sketch.wire((middle, "b"), (last, "a"))
        self.sketch.wire((last, "b"), self.new_bus(start).key)

    def ring(self) -> None:
        """Two places that agree, joined by two closed devices in parallel: the split is not the branches' affair."""
        start = self.spot()
        others = [s for s in self.spots if s.agrees(start) and s is not start]
        if others:
            other = self.draw(st.sampled_from(others)).key
            for kind in ("breaker", "switch"):
                self.sketch.hang(kind, start.key, other, closed="yes")

    def open(self) -> None:
        """An open device: to any place of the same voltage, or to a bus that stays dead unless something feeds it."""
        start = self.spot()
        others = [s for s in self.spots if s.kv == start.kv and s is not start]
        end = self.draw(st.sampled_from(others)).key if others else self.sketch.bus(start.kv)
        self.sketch.hang("breaker", start.key, end, closed="no")

    # --- transformers -------------------------------------------------------------------------------------------

    def transformer(self) -> None:
        """A two-winding transformer of any vector group, either side first."""
        growing_transformers.two_windings(self)

    def transformer3(self) -> None:
        """A three-winding transformer with one new bus on each further side."""
        growing_transformers.three_windings(self)

    def autotransformer(self) -> None:
        """An autotransformer, entered from its high side."""
        growing_transformers.auto(self)

    def other_kv(self, kv: float) -> float:
        """Another voltage level."""
        return self.draw(st.sampled_from([level for level in LEVELS_KV if level != kv]))

    def near(self, kv: float) -> float:
        """A rated voltage at or near the nominal one."""
        return kv * self.draw(st.sampled_from((1.0, 1.0, 1.05, 0.9545)))

    def neutral(self) -> str:
        """How a star point is earthed."""
        if not self.earthed:
            return "isolated"
        return self.pick("solid", "isolated", "resistor 0.7 ohm", "reactor 0.3 ohm", "resistor 400 A 10 s")

    def parallel(self) -> None:
        """A second transformer beside an equal one."""
        if self.doubles:
            self.draw(st.sampled_from(self.doubles))()

    def earthing(self) -> None:
        """An earthing transformer."""
        spot = self.spot()
        self.sketch.hang(
            "earthing_transformer", spot.key, rated_voltage=f"{spot.kv!r} kV",
            connection=self.pick("zigzag", "star-delta"),
            zero_sequence_impedance=self.pick("4 ohm", "300 A", "0.2 ohm"), x0_over_r0=str(self.share(2, 40)),
            neutral=self.neutral(),
        )  # fmt: skip

    # --- what feeds ---------------------------------------------------------------------------------------------

    def supply(self) -> None:
        """A network feeder, three at most."""
        if self.supplies == 3:
            return
        self.supplies += 1
        spot = self.spot()
        ratings = {
            "nominal_voltage": f"{spot.kv!r} kV", "fault_level_max": self.pick("350 MVA", "14 kA", "0.31 ohm"),
            "fault_level_min": "120 MVA", "x_over_r": str(self.share(3, 30)), "r0_over_x0": self.pick("0.1", "0.35"),
            "star_point": self.pick("earthed", "earthed", "isolated") if self.earthed else "isolated",
            "x0_over_x1": str(self.share(0.8, 4)),
        }  # fmt: skip
        if ratings["fault_level_max"] == "14 kA":
            ratings |= {"earth_fault_level_max": "9 kA", "earth_fault_level_min": "60 MVA"}
        self.sketch.hang("supply", spot.key, **ratings)

    def machine(self) -> None:
        """A synchronous generator or motor."""
        spot = self.spot()
        kind = self.pick("synchronous_generator", "synchronous_motor")
        self.sketch.hang(
            kind, spot.key, in_service=self.pick("yes", "yes", "yes", "no") == "yes",
            rated_power=self.pick("2.5 MVA", "12 MVA", "800 kW"), rated_voltage=f"{self.near(spot.kv)!r} kV",
            subtransient_reactance=f"{self.share(9, 25)} %", transient_reactance=f"{self.share(25, 40)} %",
            synchronous_reactance="180 %", negative_sequence_reactance=f"{self.share(9, 30)} %",
            zero_sequence_reactance=f"{self.share(2, 15)} %", connection=self.pick("star", "star", "delta"),
            neutral=self.neutral(), **self.either(
                {"x_over_r": str(self.share(10, 60))}, {"resistance": "0.7 %"}, {"armature_time_constant": "90 ms"}
            ),
        )  # fmt: skip

    def motor(self) -> None:
        """Induction motors, one or a group."""
        spot = self.spot()
        self.sketch.hang(
            "induction_motor", spot.key, count=self.pick("1", "7"), rated_power=self.pick("250 kW", "40 hp", "1.8 MW"),
            rated_voltage=f"{self.near(spot.kv)!r} kV", efficiency="95 %", power_factor="0.88",
            locked_rotor_ratio=str(self.share(4, 7)), x_over_r=str(self.share(2, 12)),
            running_share=self.pick("100 %", "60 %"), connection=self.pick("delta", "star"), neutral=self.neutral(),
            zero_sequence_reactance="13 %",
        )  # fmt: skip

    def passive(self) -> None:
        """Consumers, which the classical method leaves out."""
        spot = self.spot()
        self.sketch.hang(self.pick("load", "capacitor"), spot.key, rated_power="1")


@dataclass(frozen=True)
class Problem:
    """What both sides are asked."""

    plant: Plant
    case: Case
    faults: tuple[Fault, ...]


@st.composite
def problems(draw: st.DrawFn, largest: int = 60, faults: int = 2, earthed: bool = True) -> Problem:
    """A plant, a case, and faults of any kind anywhere in it; in a large plant one, for time's sake.

    earthed: False makes every star point isolated.
    """
    grower = Grower(draw, earthed)
    nodes = draw(st.sampled_from([n for n in SIZES if n <= largest]))
    plant = grower.grow(nodes)
    case = Case(
        level=draw(st.sampled_from(("max", "min"))),
        moment=draw(st.sampled_from(("subtransient", "subtransient", "transient", "steady"))),
        charging=draw(st.sampled_from((False, False, True))),
        prefault=draw(st.sampled_from(("nominal", "nominal", "no-load"))),
        motors=draw(st.sampled_from((True, True, False))),
    )
    return Problem(plant, case, tuple(_fault(draw, grower) for _ in range(faults if nodes <= 20 else 1)))


def _fault(draw: st.DrawFn, grower: Grower) -> Fault:
    place = Place(*draw(st.sampled_from(grower.spots)).key)
    if grower.lengths and draw(st.integers(0, 4)) == 0:
        place = Place(draw(st.sampled_from(grower.lengths)), "a", fraction=draw(st.sampled_from((0.0, 0.25, 0.9, 1.0))))
    kind = draw(st.sampled_from(list(FaultKind)))
    impedances = st.sampled_from((0j, 0j, 0.05 + 0j, 0.3 + 0.4j))
    return Fault(place, kind, draw(st.sampled_from(PHASE_CHOICES[kind])), draw(impedances), draw(impedances))
