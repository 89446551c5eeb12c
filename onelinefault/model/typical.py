"""Typical data as values, and how it is looked up. The store reads the tables from the program's resources.

Every value that comes from here says what it is typical for and where it comes from; it is an assumption until somebody
enters the maker's value. Nothing here is for sources: a supply's fault level is never assumed.
"""

import math
from collections.abc import Mapping
from dataclasses import dataclass

from onelinefault.model.values import ConductorSize, VectorGroup

CONDUITS = {"in steel conduit": "steel", "in plastic conduit": "pvc"}
_LARGE_CONDUCTOR_MM2 = 300  # from here on the skin effect adds more than a few per cent at power frequency


@dataclass(frozen=True, slots=True)
class TableSource:
    """Where a table comes from and how far it can be trusted.

    status: "confirmed", "mixed", "memory" or "common practice", as explained in the table's file.
    """

    source: str
    status: str
    from_memory: bool
    note: str = ""


@dataclass(frozen=True, slots=True)
class Typical:
    """A typical value as a text to be typed, what it is typical for, and its source."""

    text: str
    reason: str
    source: str


@dataclass(frozen=True, slots=True)
class Resistance:
    """Resistance of one conductor: text, temperature in °C at which it holds, what it is of, source."""

    text: str
    temperature_c: float
    reason: str
    source: str


@dataclass(frozen=True, slots=True)
class ConduitRow:
    """Three single cables in a conduit, ohm per 1000 ft. r: at 75 °C, by metal and conduit ("cu_pvc").

    A resistance is None where such a cable is not made.
    """

    area_mm2: float
    x_pvc: float
    x_steel: float
    r: Mapping[str, float | None]


@dataclass(frozen=True, slots=True)
class ReactanceRow:
    """Usual reactance of a cable by the way it is laid, up to a rated voltage (None: any), ohm/km at 50 Hz."""

    construction: str
    kv_to: float | None
    x: float


@dataclass(frozen=True, slots=True)
class ImpedanceRow:
    """Usual short-circuit impedance of a transformer up to a size in kVA (None: any), in %."""

    kva_to: float | None
    z: float


@dataclass(frozen=True, slots=True)
class Machine:
    """Usual reactances of a synchronous machine, per unit of its rating; None where the table has none."""

    label: str
    table: str
    subtransient: float
    transient: float | None = None
    synchronous: float | None = None
    negative: float | None = None
    zero: float | None = None


@dataclass(frozen=True, eq=False)
class Tables:
    """All tables. sources: by the table's name; practice: single coefficients by name. Compared by identity."""

    conductors: Mapping[str, Mapping[float, float]]  # material → mm² → ohm/km at 20 °C
    conduits: Mapping[str, ConduitRow]  # trade size → row
    cable_reactances: tuple[ReactanceRow, ...]
    transformer_z_iec: tuple[ImpedanceRow, ...]
    transformer_z_ansi: tuple[ImpedanceRow, ...]
    load_loss_w: tuple[tuple[float, float], ...]  # (kVA, W)
    zero_sequence_shares: tuple[tuple[str, str, float], ...]  # (connection, core, %)
    machines: tuple[Machine, ...]
    code_letters: Mapping[str, tuple[float, float | None]]  # locked-rotor kVA per hp
    breaking_ka: tuple[float, ...]
    making_factors: Mapping[float, float]  # Hz → factor
    line_areas_mm2: tuple[float, ...]
    practice: Mapping[str, float]
    sources: Mapping[str, TableSource]


def is_american(size: ConductorSize) -> bool:
    """Whether a size is a gauge or in circular mils: gauge "10" and 10 mm² are told apart by their areas."""
    if "/" in size.trade_size or "cmil" in size.trade_size:
        return True
    return not math.isclose(size.area_mm2, float(size.trade_size), rel_tol=1e-9)


def size_words(size: ConductorSize) -> str:
    """One conductor's size in words: "240 mm²", "4/0 AWG", "500 kcmil"."""
    if "cmil" in size.trade_size:
        return size.trade_size
    return f"{size.trade_size} AWG" if is_american(size) else f"{size.trade_size} mm²"


def conductor_resistance(tables: Tables, size: ConductorSize, material: str, construction: str) -> Resistance:
    """Resistance of one conductor from the table for its kind of size; by resistivity for sizes that none lists."""
    metal = f"{material} {size_words(size)}"
    row = tables.conduits.get(size.trade_size) if is_american(size) else None
    if row is not None:
        column = f"{'cu' if material == 'copper' else 'al'}_{CONDUITS.get(construction, 'pvc')}"
        ohm = row.r[column]
        if ohm is not None:
            return Resistance(
                f"{ohm:g} Ω/kft", tables.practice["conduit_temperature_c"], metal, "NEC chapter 9 table 9"
            )
    listed = None if is_american(size) else tables.conductors[material].get(size.area_mm2)
    skin = ", without skin effect" if size.area_mm2 >= _LARGE_CONDUCTOR_MM2 else ""
    if listed is not None:
        return Resistance(f"{listed:g} Ω/km", 20.0, metal + skin, "IEC 60228 class 2")
    ohm_per_km = tables.practice[f"resistivity_{material}"] / size.area_mm2
    return Resistance(f"{ohm_per_km:.4g} Ω/km", 20.0, metal + skin, "resistivity after IEC 60909-0, 6.4")


def cable_reactance(
    tables: Tables, size: ConductorSize | None, construction: str, rated_kv: float | None, frequency_hz: float
) -> Typical:
    """Reactance of one cable at a frequency: in conduit by the nearest American size, else by construction.

    A rated voltage that is not known counts as low voltage.
    """
    if construction in CONDUITS and size is not None:
        row = _nearest_conduit_row(tables, size)
        x = row.x_steel if construction == "in steel conduit" else row.x_pvc
        scaled = x * frequency_hz / tables.practice["conduit_frequency_hz"]
        return Typical(f"{scaled:.4g} Ω/kft", f"three single cables {construction}", "NEC chapter 9 table 9")
    plain = "single-core trefoil" if construction in CONDUITS else construction
    rows = [row for row in tables.cable_reactances if row.construction == plain]
    kv = 0.0 if rated_kv is None else rated_kv
    row_by_voltage = next(row for row in rows if row.kv_to is None or kv <= row.kv_to)
    scaled = row_by_voltage.x * frequency_hz / tables.practice["cable_frequency_hz"]
    level = f" up to {row_by_voltage.kv_to:g} kV" if row_by_voltage.kv_to is not None else ""
    unsure = "; its rated voltage is not given" if rated_kv is None and row_by_voltage.kv_to is not None else ""
    return Typical(f"{scaled:.4g} Ω/km", f"{plain} cable{level}{unsure}", "common practice")


def transformer_impedance(
    tables: Tables, mva: float, high_kv: float | None, low_kv: float | None, frequency_hz: float
) -> Typical:
    """Short-circuit impedance by size: at 60 Hz the American figures as far as they go, else IEC 60076-5."""
    kva, practice = mva * 1000, tables.practice
    american = frequency_hz >= 55 and kva <= (tables.transformer_z_ansi[-1].kva_to or 0)
    if american and (high_kv is None or high_kv <= practice["ansi_high_voltage_to_kv"]):
        z = _impedance(tables.transformer_z_ansi, kva)
        primary = low_kv is not None and low_kv >= practice["ansi_low_voltage_from_kv"]
        if primary and kva >= practice["ansi_primary_kva_from"]:
            z = practice["ansi_primary_z"]
        return Typical(f"{z:g} %", f"{kva:.4g} kVA at 60 Hz", "IEEE C57.12 usual nameplates")
    z = _impedance(tables.transformer_z_iec, kva)
    return Typical(f"{z:g} %", f"{kva:.4g} kVA, smallest recognised", "IEC 60076-5 table 1")


def transformer_x_over_r(
    tables: Tables, mva: float, z_pu: float, high_kv: float | None, low_kv: float | None
) -> Typical:
    """X/R by size: from the largest load loss allowed for distribution units, else by a formula for power units."""
    kva, practice = mva * 1000, tables.practice
    small = (high_kv or math.inf) <= practice["loss_high_voltage_to_kv"]
    if small and (low_kv or math.inf) <= practice["loss_low_voltage_to_kv"] and kva <= tables.load_loss_w[-1][0]:
        r_pu = _load_loss_w(tables, kva) / (kva * 1000)
        if r_pu < z_pu:
            ratio = math.sqrt(z_pu**2 - r_pu**2) / r_pu
            return Typical(f"{ratio:.3g}", f"{kva:.4g} kVA distribution unit", "load loss after EU 548/2014 tier 1")
    ratio = practice["x_over_r_at_10_mva"] * (mva / 10) ** practice["x_over_r_exponent"]
    ratio = min(max(ratio, practice["x_over_r_least"]), practice["x_over_r_most"])
    return Typical(f"{ratio:.3g}", f"{mva:.4g} MVA", "common practice, 16·(S/10 MVA)^0.3")


def zero_sequence_share(tables: Tables, group: VectorGroup, core: str) -> Typical:
    """Z0 in % of Z1 of a two-winding transformer by its connection and core."""
    by_windings = {("D", "Y"): "Dyn", ("Y", "D"): "YNd"}
    connection = (
        "zigzag" if "Z" in group.connections else by_windings.get((group.connections[0], group.connections[1]), "any")
    )
    share = next(  # the last row is for any connection and core
        share
        for row_connection, row_core, share in tables.zero_sequence_shares
        if row_connection in (connection, "any") and row_core in (core, "any")
    )
    return Typical(f"{share:g} %", f"{group.text}, {core} core", "common practice")


def motor_x_over_r(tables: Tables, rated_kv: float, mw_per_pole_pair: float) -> Typical:
    """X/R of an induction motor by voltage and active power per pole pair (IEC 60909-0, 6.10)."""
    practice = tables.practice
    if rated_kv <= practice["motor_low_voltage_to_kv"]:
        name, words = "low", "low-voltage motors with their cables"
    elif mw_per_pole_pair >= practice["motor_large_from_mw"]:
        name, words = "large", "medium-voltage motors from 1 MW per pole pair"
    else:
        name, words = "small", "medium-voltage motors below 1 MW per pole pair"
    return Typical(f"{1 / practice[f'motor_r_over_x_{name}']:.4g}", words, "IEC 60909-0, 6.10")


def line_reactance_ohm_per_km(tables: Tables, area_mm2: float, frequency_hz: float) -> float:
    """X = ω·μ0/2π·(1/4 + ln(d/r)) of a line with the usual spacing, in ohm/km (IEC 60909-0, 6.4)."""
    radius_m = math.sqrt(area_mm2 / math.pi) / 1000
    return 2 * math.pi * frequency_hz * 2e-4 * (0.25 + math.log(tables.practice["line_spacing_m"] / radius_m))


def _nearest_conduit_row(tables: Tables, size: ConductorSize) -> ConduitRow:
    exact = tables.conduits.get(size.trade_size) if is_american(size) else None
    if exact is not None:
        return exact
    return min(tables.conduits.values(), key=lambda row: abs(math.log(row.area_mm2 / size.area_mm2)))


def _impedance(rows: tuple[ImpedanceRow, ...], kva: float) -> float:
    return next(row.z for row in rows if row.kva_to is None or kva <= row.kva_to)


def _load_loss_w(tables: Tables, kva: float) -> float:
    """Load loss between the sizes of the table in proportion; below its smallest in proportion to the size."""
    below = (0.0, 0.0)
    for row in tables.load_loss_w:
        if kva <= row[0]:
            return below[1] + (row[1] - below[1]) * (kva - below[0]) / (row[0] - below[0])
        below = row
    return below[1]
