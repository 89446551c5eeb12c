"""The shipped tables of typical data (resources/tables/*.json) as one value."""

import json
from collections.abc import Iterator, Mapping
from functools import lru_cache
from pathlib import Path
from typing import Any

from onelinefault.errors import TablesError
from onelinefault.model.typical import ConduitRow, ImpedanceRow, Machine, ReactanceRow, Tables, TableSource
from onelinefault.model.values import read_conductor_size

_FILES = ("conductors", "conduit_cables", "cables_practice", "transformers", "machines", "devices")
_METALS = {"cu": "copper", "al": "aluminium"}
_CONDUITS = ("pvc", "steel")


@lru_cache(maxsize=1)
def load_tables() -> Tables:
    """The tables that the program is shipped with, read once. Raises TablesError when they are missing or damaged."""
    return read_tables(tables_folder())


def tables_folder() -> Path:
    """The folder of the tables: inside the installed package, or beside it in a source tree.

    Raises TablesError when there is none.
    """
    package = Path(__file__).parent.parent
    for root in (package, package.parent):
        folder = root / "resources" / "tables"
        if folder.is_dir():
            return folder
    raise TablesError(f"the program's typical data are missing ({package / 'resources'}); install the program again")


def read_tables(folder: Path) -> Tables:
    """The tables in a folder. Raises TablesError that names the file which is missing or damaged."""
    found: dict[str, Mapping[str, Any]] = {}
    for name in _FILES:
        path = folder / f"{name}.json"
        try:
            found[name] = json.loads(path.read_text(encoding="utf-8"))
        except (OSError, ValueError) as error:
            raise TablesError(f"{path} cannot be read ({error}); install the program again") from None
    try:
        return _tables(found)
    except (KeyError, TypeError, ValueError, AttributeError) as error:
        raise TablesError(f"the typical data in {folder} are damaged ({error!r}); install the program again") from None


def _tables(found: Mapping[str, Mapping[str, Any]]) -> Tables:
    conductors, cables = found["conductors"]["iec60228_class2"], found["cables_practice"]
    transformers, machines, devices = found["transformers"], found["machines"], found["devices"]
    losses = transformers["eu_548_2014_load_loss"]["rows"]
    return Tables(
        conductors={metal: {float(k): float(v) for k, v in conductors[metal].items()} for metal in _METALS.values()},
        conduits={k: _conduit(k, row) for k, row in found["conduit_cables"]["nec_chapter9_table9"]["rows"].items()},
        cable_reactances=tuple(ReactanceRow(**row) for row in cables["cable_reactance"]["rows"]),
        transformer_z_iec=_impedances(transformers["iec60076_5_min_impedance"]),
        transformer_z_ansi=_impedances(transformers["ansi_transformer_z"]),
        load_loss_w=tuple(sorted((float(kva), float(watt)) for kva, watt in losses.items())),
        zero_sequence_shares=tuple(
            (str(row["connection"]), str(row["core"]), float(row["share"]))
            for row in transformers["zero_sequence_share"]["rows"]
        ),
        machines=tuple(_machines(machines)),
        code_letters={k: (v[0], v[1]) for k, v in machines["nema_code_letters"]["rows"].items()},
        breaking_ka=tuple(map(float, devices["breaker_series"]["breaking_ka"])),
        making_factors={float(r["frequency_hz"]): float(r["factor"]) for r in devices["making_factor"]["rows"]},
        line_areas_mm2=tuple(map(float, cables["line_spacing"]["areas_mm2"])),
        practice=_practice(found),
        sources=dict(_sources(found)),
    )


def _conduit(trade_size: str, row: Mapping[str, float | None]) -> ConduitRow:
    text = trade_size if "kcmil" in trade_size else f"{trade_size} AWG"
    r = {f"{metal}_{conduit}": row[f"r_{metal}_{conduit}"] for metal in _METALS for conduit in _CONDUITS}
    x_pvc, x_steel = row["x_pvc_al"], row["x_steel"]
    if x_pvc is None or x_steel is None:
        raise ValueError(f"no reactance of {trade_size}")
    return ConduitRow(read_conductor_size(text).area_mm2, x_pvc, x_steel, r)


def _impedances(table: Mapping[str, Any]) -> tuple[ImpedanceRow, ...]:
    return tuple(ImpedanceRow(**row) for row in table["rows"])


def _machines(machines: Mapping[str, Any]) -> Iterator[Machine]:
    for table in ("ieee141_reactances", "textbook_reactances"):
        for row in machines[table]["rows"]:
            data = {key: value for key, value in row.items() if key != "machine"}
            yield Machine(label=str(row["machine"]), table=table, **data)


def _practice(found: Mapping[str, Mapping[str, Any]]) -> dict[str, float]:
    """Single coefficients of all tables, under names that say what they are."""
    cables, transformers, machines = found["cables_practice"], found["transformers"], found["machines"]
    resistivity, conduits = found["conductors"]["resistivity"], found["conduit_cables"]["nec_chapter9_table9"]
    line, ansi = cables["overhead_line"], transformers["ansi_transformer_z"]
    losses, ratio, motors = transformers["eu_548_2014_load_loss"], transformers["x_over_r"], machines["motor_r_over_x"]
    picked = {
        "resistivity_copper": resistivity["copper"],
        "resistivity_aluminium": resistivity["aluminium"],
        "zero_resistance_copper": found["conductors"]["temperature"]["copper"],
        "zero_resistance_aluminium": found["conductors"]["temperature"]["aluminium"],
        "conduit_temperature_c": conduits["temperature_c"],
        "conduit_frequency_hz": conduits["frequency_hz"],
        "cable_frequency_hz": cables["cable_reactance"]["frequency_hz"],
        "cable_r0": cables["zero_sequence"]["cable"]["r0"],
        "cable_x0": cables["zero_sequence"]["cable"]["x0"],
        "busway_r0": cables["zero_sequence"]["busway"]["r0"],
        "busway_x0": cables["zero_sequence"]["busway"]["x0"],
        "line_x0": line["x0"],
        "line_earth_return": line["earth_return_ohm_per_km"],
        "line_frequency_hz": line["frequency_hz"],
        "line_spacing_m": cables["line_spacing"]["spacing_m"],
        "ansi_high_voltage_to_kv": ansi["high_voltage_to_kv"],
        "ansi_low_voltage_from_kv": ansi["low_voltage_from_kv"],
        "ansi_primary_kva_from": ansi["primary_substation_kva_from"],
        "ansi_primary_z": ansi["primary_substation_z"],
        "loss_high_voltage_to_kv": losses["high_voltage_to_kv"],
        "loss_low_voltage_to_kv": losses["low_voltage_to_kv"],
        "x_over_r_at_10_mva": ratio["at_10_mva"],
        "x_over_r_exponent": ratio["exponent"],
        "x_over_r_least": ratio["least"],
        "x_over_r_most": ratio["most"],
        "motor_low_voltage_to_kv": motors["low_voltage_to_kv"],
        "motor_large_from_mw": motors["large_from_mw_per_pole_pair"],
        "motor_r_over_x_low": motors["low"],
        "motor_r_over_x_small": motors["small"],
        "motor_r_over_x_large": motors["large"],
        "motor_zero_sequence": machines["motor_zero_sequence"]["share_of_locked_rotor"],
    }
    return {key: float(value) for key, value in picked.items()}


def _sources(found: Mapping[str, Mapping[str, Any]]) -> Iterator[tuple[str, TableSource]]:
    for file in found.values():
        for name, table in file.items():
            if isinstance(table, dict) and "source" in table:
                source = TableSource(table["source"], table["status"], table["from_memory"], table.get("note", ""))
                yield name, source
