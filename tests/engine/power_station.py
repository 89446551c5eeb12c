"""A small power station as a plant: a unit with auxiliaries at 6 kV and 0.4 kV, and the network it feeds.

Q 110 kV ── unit transformer T ── terminals 10.5 kV ── generator G
                                     └── AT 10.5/6.3 kV ── 6 kV board ── motors M6
                                                             └── ST 6.3/0.42 kV ── 0.4 kV board ── motors ML
"""

from dataclasses import dataclass

from onelinefault.engine.case import Case
from onelinefault.engine.iec60909_figures import IecFigures
from onelinefault.engine.results import FaultResult
from onelinefault.engine.study import Study
from onelinefault.model.fault import Fault, FaultKind, Place
from onelinefault.model.plant import Plant
from tests.oracle.sketch import Sketch, TerminalKey

UNIT = {"unit_generator": "G", "on_load_tap_changer": "yes"}


@dataclass(frozen=True)
class Station:
    """The plant and the ids of its things."""

    plant: Plant
    at: dict[str, TerminalKey]
    ids: dict[str, str]

    def study(self, **case: str | float | bool) -> Study:
        """A study by IEC 60909."""
        return Study(self.plant, Case(method="iec60909", **case))  # type: ignore[arg-type]

    def fault(self, at: str, kind: FaultKind = FaultKind.THREE_PHASE, **case: str | float | bool) -> FaultResult:
        """A fault at one of the buses."""
        return self.study(**case).fault(Fault(Place(*self.at[at]), kind))

    def figures(self, at: str, kind: FaultKind = FaultKind.THREE_PHASE, **case: str | float | bool) -> IecFigures:
        """The figures of that fault."""
        figures = self.fault(at, kind, **case).figures
        assert isinstance(figures, IecFigures)
        return figures

    def factor(self, part: str, result: FaultResult) -> tuple[str, float]:
        """The method's only factor on a part."""
        found = [(c.name, c.value) for c in result.network.corrections if c.part == self.ids[part]]
        assert len(found) == 1
        return found[0]


def station(unit: dict[str, str] | None = None, **generator: str) -> Station:
    """The station; unit: how its transformer is marked; generator: other ratings of the generator."""
    s = Sketch(frequency="50 Hz")
    at = {"Q": s.bus(110.0, "Q"), "G": s.bus(10.5, "Terminals"), "6": s.bus(6.0, "Board 6"), "04": s.bus(0.4, "Board")}
    ids = {
        "Q": s.hang(
            "supply", at["Q"], name="Q", nominal_voltage="110 kV", fault_level_max="20 kA", fault_level_min="12 kA",
            x_over_r="10", x0_over_x1="1",
        ),
        "G": s.hang(
            "synchronous_generator", at["G"], name="G", **{
                "rated_power": "60 MVA", "rated_voltage": "10.5 kV", "power_factor": "0.8",
                "subtransient_reactance": "15 %", "resistance": "0.5 %", **generator,
            },
        ),
        "T": s.hang(
            "transformer", at["Q"], at["G"], name="T", rated_power="60 MVA", high_voltage="115 kV",
            low_voltage="10.5 kV", load_loss="0.5 %", vector_group="YNd5", neutral_high="solid", tap="-5 %",
            zero_sequence_impedance="100 %", **{"impedance": "12 %", **(UNIT if unit is None else unit)},
        ),
        "AT": s.hang(
            "transformer", at["G"], at["6"], name="AT", rated_power="8 MVA", high_voltage="10.5 kV",
            low_voltage="6.3 kV", impedance="8 %", load_loss="0.6 %", vector_group="Dyn11", neutral_low="isolated",
        ),
        "M6": s.hang(
            "induction_motor", at["6"], name="M6", count="2", rated_power="1.5 MW", rated_voltage="6 kV",
            efficiency="96 %", power_factor="0.88", locked_rotor_ratio="5.5", poles="4",
        ),
        "ST": s.hang(
            "transformer", at["6"], at["04"], name="ST", rated_power="1 MVA", high_voltage="6.3 kV",
            low_voltage="0.42 kV", impedance="6 %", load_loss="11 kW", vector_group="Dyn11", neutral_low="solid",
            zero_sequence_impedance="95.172321782 %", x0_over_r0="5.0939905447",
        ),
        "ML": s.hang(
            "induction_motor", at["04"], name="ML", count="5", rated_power="45 kW", rated_voltage="400 V",
            efficiency="93 %", power_factor="0.86", locked_rotor_ratio="6", poles="4",
        ),
    }  # fmt: skip
    return Station(s.plant, at, ids)
