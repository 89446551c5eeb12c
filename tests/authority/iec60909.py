"""Published and reference cases of IEC 60909 as plants in natural units, typed as an engineer types a nameplate.

The file of cases keeps for each value its source and the tolerance that its digits allow. Where the file gives R/X the
plant gets X/R, where it gives x_T and losses the plant gets impedance and load loss, where it gives R0/R1 and X0/X1
the transformer gets Z0 in per cent of Z1 and X0/R0.
"""

import math
from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from functools import lru_cache
from typing import Any

from onelinefault.model.plant import Plant
from tests.authority.published import Line, cases_of, lines_of
from tests.oracle.sketch import Sketch, TerminalKey

CASES = cases_of("iec60909_cases.json")
_KEYS = ("quantity", "bus", "element", "pair", "part", "tmin_s", "Tk_s", "args")
NO_LOSS = "1000000"  # largest X/R of a reactor; the source gives it no resistance


def lines(solver: str) -> Iterator[Line]:
    """All expected values of the cases of one solver."""
    return lines_of(CASES, solver, _KEYS)


@dataclass(frozen=True)
class Built:
    """A case's plant with the ids of its things by the names of the source."""

    plant: Plant
    buses: Mapping[str, TerminalKey]
    ids: Mapping[str, str]


@lru_cache(maxsize=16)
def built(case_id: str) -> Built:
    """The plant of a case."""
    case = next(c for c in CASES if c["id"] == case_id)
    return _Builder(case["network"]).build()


def unit_plant(network: Mapping[str, Any]) -> Built:
    """Feeder, unit transformer and generator of a case of a power station unit."""
    unit = {**network["unit"], "id": "S", "hv_bus": "Q"}
    feeder = {"id": "Q", "bus": "Q", "Ikss_max_kA": network["IkssQ_kA"], "R_X": network["RQ_XQ"]}
    buses = [{"id": "Q", "Un_kV": network["UnQ_kV"]}]
    return _Builder(
        {"frequency_Hz": 50, "buses": buses, "network_feeders": [feeder], "power_station_units": [unit]}
    ).build()


class _Builder:
    def __init__(self, network: Mapping[str, Any]) -> None:
        self.network = network
        self.sketch = Sketch(frequency=f"{network['frequency_Hz']} Hz")
        self.kv = {bus["id"]: float(bus["Un_kV"]) for bus in network["buses"]}
        self.buses = {name: self.sketch.bus(kv, name) for name, kv in self.kv.items()}
        self.ids: dict[str, str] = {}

    def build(self) -> Built:
        """All elements, group by group."""
        makers = {
            "network_feeders": self.feeder, "transformers_2w": self.transformer, "transformers_3w": self.transformer3,
            "power_station_units": self.unit, "generators": self.generator, "asynchronous_motors": self.motor,
            "lines": self.line, "reactors": self.reactor,
        }  # fmt: skip
        for group, make in makers.items():
            for data in self.network.get(group, ()):
                self.ids.setdefault(data["id"], make(data))
        return Built(self.sketch.plant, self.buses, self.ids)

    def feeder(self, data: Mapping[str, Any]) -> str:
        more = {}
        if "Ikss_min_kA" in data:
            more["fault_level_min"] = f"{data['Ikss_min_kA']!r} kA"
        return self.sketch.hang(
            "supply", self.buses[data["bus"]], name=data["id"], nominal_voltage=f"{self.kv[data['bus']]!r} kV",
            fault_level_max=f"{data['Ikss_max_kA']!r} kA", x_over_r=repr(1 / data["R_X"]),
            x0_over_x1=repr(data.get("X0_X1", 1.0)), r0_over_x0=repr(data.get("R0_X0", 0.1)), **more,
        )  # fmt: skip

    def transformer(self, data: Mapping[str, Any]) -> str:
        group = f"{data['hv_winding']}{data['lv_winding']}{data['clock']}"
        return self.sketch.hang(
            "transformer", self.buses[data["hv_bus"]], self.buses[data["lv_bus"]], name=data["id"],
            **self.two_windings(data), vector_group=group, **self.zero(data),
            neutral_high=_neutral(data["hv_winding"] == "YN", data.get("ZN_HV_ohm")),
            neutral_low=_neutral(data["lv_winding"] == "yn", data.get("ZN_LV_ohm")),
        )  # fmt: skip

    def two_windings(self, data: Mapping[str, Any]) -> dict[str, str]:
        loss = f"{data['uRr_pct']!r} %" if "uRr_pct" in data else f"{data['PkrT_kW']!r} kW"
        return {
            "rated_power": f"{data['SrT_MVA']!r} MVA",
            "high_voltage": f"{data['UrT_HV_kV']!r} kV",
            "low_voltage": f"{data['UrT_LV_kV']!r} kV",
            "impedance": f"{data['ukr_pct']!r} %",
            "load_loss": loss,
        }

    @staticmethod
    def zero(data: Mapping[str, Any]) -> dict[str, str]:
        """Z0 in per cent of Z1 and X0/R0 from X0/X1 and R0/R1."""
        if "X0_X1" not in data:
            return {}
        z = data["ukr_pct"]
        r = data["uRr_pct"] if "uRr_pct" in data else data["PkrT_kW"] / data["SrT_MVA"] / 10
        r0, x0 = r * data["R0_R1"], math.sqrt(z**2 - r**2) * data["X0_X1"]
        return {"zero_sequence_impedance": f"{100 * math.hypot(r0, x0) / z!r} %", "x0_over_r0": repr(x0 / r0)}

    def transformer3(self, data: Mapping[str, Any]) -> str:
        """One low-voltage side stays open in the test network; it gets a bus of its own there."""
        low = self.buses[data["lv_bus"]] if data["lv_bus"] else self.sketch.bus(float(data["UrT_LV_kV"]))
        ratings = {}
        for pair, name in (("HVMV", "high_medium"), ("HVLV", "high_low"), ("MVLV", "medium_low")):
            ratings[f"impedance_{name}"] = f"{data[f'ukr_{pair}_pct']!r} %"
            ratings[f"load_loss_{name}"] = f"{data[f'uRr_{pair}_pct']!r} %"
            ratings[f"base_{name}"] = f"{data[f'SrT_{pair}_MVA']!r} MVA"
        sides = zip(("high", "medium", "low"), ("HV", "MV", "LV"), strict=True)
        ratings |= {f"{side}_voltage": f"{data[f'UrT_{short}_kV']!r} kV" for side, short in sides}
        return self.sketch.hang(
            "transformer3", self.buses[data["hv_bus"]], self.buses[data["mv_bus"]], low, name=data["id"],
            rated_power_high=f"{data['SrT_HVMV_MVA']!r} MVA", vector_group="YNyn0d5", **ratings,
        )  # fmt: skip

    def unit(self, data: Mapping[str, Any]) -> str:
        """Generator and transformer, with a bus between them. Returns the transformer's id."""
        name = data["id"]
        self.kv[name] = float(data["UrG_kV"])
        self.buses[name] = self.sketch.bus(self.kv[name], f"{name} terminals")
        self.ids[f"{name} generator"] = self.generator({**data, "id": f"{name} generator", "bus": name})
        return self.sketch.hang(
            "transformer", self.buses[data["hv_bus"]], self.buses[name], name=f"{name} transformer",
            **self.two_windings(data), vector_group="YNd5", unit_generator=f"{name} generator",
            on_load_tap_changer="yes" if data["on_load_tap_changer"] else "no",
            tap_range=f"{data.get('pT_pct', 0)!r} %", zero_sequence_impedance="100 %",
        )  # fmt: skip

    def generator(self, data: Mapping[str, Any]) -> str:
        return self.sketch.hang(
            "synchronous_generator", self.buses[data["bus"]], name=data["id"], rated_power=f"{data['SrG_MVA']!r} MVA",
            rated_voltage=f"{data['UrG_kV']!r} kV", power_factor=repr(data["cos_phi"]),
            subtransient_reactance=f"{data['xdss_pu']!r} pu", resistance=f"{data['RG_ohm']!r} ohm",
            voltage_range=f"{data.get('pG_pct', 0)!r} %",
        )  # fmt: skip

    def motor(self, data: Mapping[str, Any]) -> str:
        return self.sketch.hang(
            "induction_motor", self.buses[data["bus"]], name=data["id"], rated_power=f"{data['PrM_MW']!r} MW",
            rated_voltage=f"{data['UrM_kV']!r} kV", power_factor=repr(data["cos_phi"]),
            efficiency=f"{data['eta']!r} pu", locked_rotor_ratio=repr(data["ILR_IrM"]),
            poles=str(2 * data["pole_pairs"]), count=str(data["count"]),
        )  # fmt: skip

    def line(self, data: Mapping[str, Any]) -> str:
        zero = {}
        if "R0_ohm_km" in data:
            zero = {
                "r0_per_length": f"{data['R0_ohm_km']!r} ohm/km",
                "x0_per_length": f"{data['X0_ohm_km']!r} ohm/km",
            }
        return self.sketch.hang(
            "cable", self.buses[data["from"]], self.buses[data["to"]], name=data["id"],
            length=f"{data['length_km']!r} km", r_per_length=f"{data['R1_ohm_km']!r} ohm/km",
            x_per_length=f"{data['X1_ohm_km']!r} ohm/km", parallel=str(data.get("parallel", 1)),
            hot_temperature=f"{data.get('theta_e_C', 90)!r} °C", **zero,
        )  # fmt: skip

    def reactor(self, data: Mapping[str, Any]) -> str:
        return self.sketch.hang(
            "reactor", self.buses[data["from"]], self.buses[data["to"]], name=data["id"],
            reactance=f"{data['ukR_pct']!r} %", rated_current=f"{data['IrR_kA']!r} kA",
            rated_voltage=f"{data['UrR_kV']!r} kV", x_over_r=NO_LOSS,
        )  # fmt: skip


def _neutral(earthed: bool, ohm: list[float] | None) -> str:
    if not earthed:
        return "isolated"
    r, x = ohm or (0, 0)
    if r:
        return f"resistor {r!r} ohm"
    return f"reactor {x!r} ohm" if x else "solid"
