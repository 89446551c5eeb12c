"""Textbook cases, printed in per unit, as plants in natural units.

The file of cases keeps for each value its source and the tolerance that its printed digits allow. A machine's x in per
unit on its rating is typed in per cent, its neutral reactance as a reactor in ohm; a transformer's reactance in per
cent with hardly any loss; a line's reactance in ohm/km over one km.
"""

import math
from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from functools import lru_cache
from typing import Any

from onelinefault.model.fault import Fault, FaultKind, Place
from onelinefault.model.plant import Plant
from tests.authority.published import Line, cases_of, lines_of
from tests.oracle.sketch import Sketch, TerminalKey

CASES = cases_of("textbook_cases.json")
_KEYS = ("bus", "fault", "quantity", "at", "machine", "behind", "phase", "shift_deg", "cycles", "i", "j", "part")
KINDS = {
    "3ph": FaultKind.THREE_PHASE,
    "slg": FaultKind.LINE_TO_EARTH,
    "ll": FaultKind.LINE_TO_LINE,
    "dlg": FaultKind.TWO_LINES_TO_EARTH,
}
NO_LOSS = "0.000001 %"  # the books neglect resistance; a load loss must be above zero

# clock number of delta-star transformers, from what the source says of the shift: LV lags HV by clock · 30°
CLOCKS = {"TB-GLOVER-138": 1, "TB-DYN11-DIST": 11, "TB-SAADAT-3BUS": 11, "TB-STEVENSON-MOTORS": 11}


def lines(solver: str) -> Iterator[Line]:
    """All expected values of the cases of one solver."""
    return lines_of(CASES, solver, _KEYS)


@dataclass(frozen=True)
class Built:
    """A case's plant with the ids of its things."""

    plant: Plant
    buses: Mapping[str, TerminalKey]
    machines: Mapping[str, str]
    breakers: Mapping[str, str]
    transformers: Mapping[str, str]
    base_mva: float
    kv: Mapping[str, float]

    def base_ka(self, bus: str) -> float:
        """Base current at a bus."""
        return self.base_mva / math.sqrt(3) / self.kv[bus]

    def base_ohm(self, bus: str) -> float:
        """Base impedance at a bus."""
        return self.kv[bus] ** 2 / self.base_mva

    def fault(self, wanted: Mapping[str, Any]) -> Fault:
        """The fault of an expected value. In a two-line fault the book's Zf lies between the lines and earth."""
        bus, kind = str(wanted["bus"]), KINDS[wanted["fault"]]
        z = complex(*wanted.get("Zf_pu", (0, 0))) * self.base_ohm(bus)
        if kind is FaultKind.TWO_LINES_TO_EARTH:
            return Fault(Place(*self.buses[bus]), kind, zg_ohm=z)
        return Fault(Place(*self.buses[bus]), kind, zf_ohm=z)


@lru_cache(maxsize=32)
def built(case_id: str) -> Built:
    """The plant of a case."""
    case = next(c for c in CASES if c["id"] == case_id)
    return _Builder(case).build()


class _Builder:
    def __init__(self, case: Mapping[str, Any]) -> None:
        self.case, self.network = case, case["network"]
        self.base_mva = float(self.network["base_MVA"])
        self.sketch = Sketch(
            base_power=f"{self.base_mva!r} MVA",
            prefault_voltage=f"{self.network['prefault_pu']!r} pu",
            frequency="60 Hz",
        )
        self.kv = {bus["id"]: float(bus["base_kV"]) for bus in self.network["buses"]}
        self.buses = {name: self.sketch.bus(kv, name) for name, kv in self.kv.items()}
        self.breakers: dict[str, str] = {}

    def build(self) -> Built:
        machines = {m["id"]: self.machine(m) for m in self.network["machines"]}
        transformers = {t["id"]: self.transformer(t) for t in self.network.get("transformers", ())}
        for line in self.network.get("lines", ()):
            self.line(line)
        return Built(self.sketch.plant, self.buses, machines, self.breakers, transformers, self.base_mva, self.kv)

    def machine(self, data: Mapping[str, Any]) -> str:
        """One machine, or several equal ones, each behind a breaker of its own. Returns the last one's id."""
        mva, kv = data.get("S_MVA", self.base_mva), data.get("U_kV", self.kv[data["bus"]])
        neutral = data.get("neutral", "solid")
        if data.get("xn"):
            neutral = f"reactor {data['xn'] * kv**2 / mva!r} ohm"
        kind = "synchronous_motor" if data["id"].startswith("M") else "synchronous_generator"
        part_id = ""
        for _ in range(data.get("count", 1)):
            part_id = self.sketch.add(
                kind, name=data["id"], rated_power=f"{mva!r} MVA", rated_voltage=f"{kv!r} kV", resistance="0 ohm",
                subtransient_reactance=f"{data['x1']!r} pu", negative_sequence_reactance=f"{data['x2']!r} pu",
                zero_sequence_reactance=f"{data['x0']!r} pu", neutral=neutral,
            )  # fmt: skip
            self.breakers[data["id"]] = self.sketch.hang("breaker", (part_id, "line"), self.buses[data["bus"]])
        return part_id

    def transformer(self, data: Mapping[str, Any]) -> str:
        """A transformer; "dYN" means a delta on its from side and an earthed star on its to side."""
        start, end = data["from"], data["to"]
        kv = {start: float(data.get("U_from_kV", self.kv[start]))}
        kv[end] = kv[start] * self.kv[end] / self.kv[start]
        high, low = (start, end) if kv[start] > kv[end] else (end, start)
        winding = {start: "YN", end: "YN"} if data["connection"] == "YNyn" else {start: "D", end: "YN"}
        clock = 0 if data["connection"] == "YNyn" else CLOCKS[self.case["id"]]
        neutral = {side: "solid" if winding[side] == "YN" else "isolated" for side in (start, end)}
        return self.sketch.hang(
            "transformer", self.buses[high], self.buses[low], rated_power=f"{data.get('S_MVA', self.base_mva)!r} MVA",
            high_voltage=f"{kv[high]!r} kV", low_voltage=f"{kv[low]!r} kV", impedance=f"{data['x']!r} pu",
            load_loss=NO_LOSS, vector_group=f"{winding[high]}{winding[low].lower()}{clock}",
            neutral_high=neutral[high], neutral_low=neutral[low], zero_sequence_impedance="100 %",
        )  # fmt: skip

    def line(self, data: Mapping[str, Any]) -> None:
        """A line without resistance, one km long."""
        ohm = self.kv[data["from"]] ** 2 / self.base_mva
        x1, x0 = (data.get(f"{x}_ohm", data.get(x, 0) * ohm) for x in ("x1", "x0"))
        self.sketch.hang(
            "overhead_line", self.buses[data["from"]], self.buses[data["to"]], length="1 km", r_per_length="0 ohm/km",
            x_per_length=f"{x1!r} ohm/km", r0_per_length="0 ohm/km", x0_per_length=f"{x0!r} ohm/km",
        )  # fmt: skip
