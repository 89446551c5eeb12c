"""Sequence models of two-winding transformers and earthing transformers.

The branch runs from the tapped side to the untapped one, with the ideal ratio at the tapped side: so the leakage ohms
stay on the untapped side, and a tap changes the ratio alone. In per unit of the nodes' nominal voltages V the ratio is

    t = [U_from·(1 + tap) / V_from] / [U_to / V_to]

and an impedance z that stands on the tapped side itself, as its neutral's, appears behind the ratio as z/t².
"""

import cmath
import math
from dataclasses import dataclass

from onelinefault.engine.sequence_stamps import (
    OPEN,
    BranchStamp,
    Setting,
    ShuntStamp,
    Stamps,
    StarPoint,
    admittance,
    earthing_ohm,
    group_of,
    in_unit,
    left_out,
    optional,
    with_x_over_r,
    word,
    zero_sequence_assumed,
)
from onelinefault.model.findings import Finding
from onelinefault.model.part import Part
from onelinefault.model.quantity import Quantity
from onelinefault.model.transforming import EarthingTransformer, Transformer

DEGREES_PER_HOUR = 30.0


@dataclass(frozen=True, slots=True)
class Winding:
    """One side of a transformer: connection "Y", "D" or "Z", rated kV with its tap, node's nominal kV, earthing in ohm.

    earthing_ohm: None unless a star point is brought out and earthed.
    """

    side: str
    connection: str
    turns_kv: float
    node_kv: float
    earthing_ohm: complex | None

    @property
    def earthed(self) -> bool:
        """Whether a star point of this side is earthed."""
        return self.earthing_ohm is not None


@dataclass(frozen=True, slots=True)
class _Zero:
    """Zero-sequence admittances of the branch: through it and from each end to earth; and its findings."""

    series: complex = OPEN
    shunt_from: complex = OPEN
    shunt_to: complex = OPEN
    findings: tuple[Finding, ...] = ()


def clock_sign(clock: int) -> int:
    """Sign of the zero-sequence ratio of two stars, relative to clock 0 (or 11 behind a delta).

    Clocks 4 and 8 only exchange the phases' names, which the zero sequence does not notice; 2, 6 and 10 reverse the
    winding as well. Odd clocks compare two stars that lie opposite the same delta: their difference counts.
    """
    return 1 if clock % 4 in (0, 3) else -1


def transformer_stamps(part: Transformer, high_kv: float, low_kv: float, setting: Setting) -> Stamps:
    """Series impedance with an off-nominal ratio; the zero sequence by the connection.

    high_kv, low_kv: nominal voltages of its nodes.
    """
    group = group_of(part, 2)
    start, end = _windings(part, high_kv, low_kv, setting.method.taps)
    base_ohm = setting.base_ohm(end.node_kv)
    own_base = end.turns_kv**2 / in_unit(part, "rated_power", "MVA") / base_ohm
    leakage_pu = leakage(part)
    correction = setting.method.transformer(part, leakage_pu.imag, high_kv, low_kv)
    z1 = correction.value * leakage_pu * own_base
    y1 = admittance(part, z1)
    t = (start.turns_kv / start.node_kv) / (end.turns_kv / end.node_kv)
    zero = _zero_sequence(part, start, end, z1, own_base, t, setting)
    lag = DEGREES_PER_HOUR * group.clocks[0]
    even = start.connection == end.connection
    branch = BranchStamp(
        start.side,
        end.side,
        y=(y1, y1, zero.series),
        ratio=(t, t, t * (clock_sign(group.clocks[0]) if even else 1)),
        y_a=(OPEN, OPEN, zero.shunt_from),
        y_b=(OPEN, OPEN, zero.shunt_to),
        lead_deg=-lag if start.side == "high" else lag,
    )
    stars = [StarPoint(w.side, e) for w, e in ((start, "from"), (end, "to")) if w.earthed]
    return Stamps((branch,), star_points=tuple(stars), findings=zero.findings, corrections=(correction,))


def _windings(part: Transformer, high_kv: float, low_kv: float, taps: bool) -> tuple[Winding, Winding]:
    """The tapped winding and the other one; taps: whether the tap counts."""
    group, tapped = group_of(part, 2), word(part, "tap_side")
    turns = 1 + (in_unit(part, "tap", "pu") if taps else 0.0)
    sides = []
    for k, (side, node_kv) in enumerate((("high", high_kv), ("low", low_kv))):
        rated_kv = in_unit(part, f"{side}_voltage", "kV")
        earthing = earthing_ohm(part, f"neutral_{side}", rated_kv, group.brought_out[k])
        turns_kv = rated_kv * (turns if side == tapped else 1.0)
        sides.append(Winding(side, group.connections[k], turns_kv, node_kv, earthing))
    return (sides[1], sides[0]) if tapped == "low" else (sides[0], sides[1])


def leakage(part: Transformer) -> complex:
    """Short-circuit impedance in per unit of the transformer's own rating; R from X/R, else from the load loss.

    Raises PartLeftOutError when a rating is missing or the load loss is above the impedance.
    """
    size = in_unit(part, "impedance", "pu")
    loss = part.given("load_loss")
    if part.given("x_over_r") is not None or not isinstance(loss, Quantity):
        return with_x_over_r(size, in_unit(part, "x_over_r", ""))
    return with_load_loss(part, "load_loss", size, loss, in_unit(part, "rated_power", "MVA"))


def with_load_loss(part: Part, name: str, size: float, loss: Quantity, mva: float) -> complex:
    """Impedance of a magnitude per unit of a rated power in MVA, with R from the load loss in the field of a name.

    Raises PartLeftOutError when the load loss is above the impedance.
    """
    r = loss.to("pu") if loss.dimension == "ratio" else loss.to("MW") / mva
    if r > size:
        raise left_out(
            part,
            "load-loss",
            f"its load loss of {loss.text} alone would be more than its impedance of {size * 100:.4g} %",
            "Correct the load loss or the impedance, or enter X/R instead.",
            name,
        )
    return complex(r, math.sqrt(size**2 - r**2))


def _zero_sequence(
    part: Transformer, start: Winding, end: Winding, z1: complex, own_base: float, t: float, setting: Setting
) -> _Zero:
    """The table of zero-sequence connections, from either side.

    An earthed zigzag is a shunt of its own; an earthed star is one against a delta, a path through against an earthed
    star, and against a star that is not earthed only the magnetising path of a three-limb core.
    """
    if not (start.earthed or end.earthed):
        return _Zero()
    z0, findings = _leakage_zero(part, z1)
    earth_from = 3 * (start.earthing_ohm or 0) / setting.base_ohm(start.node_kv)
    earth_to = 3 * (end.earthing_ohm or 0) / setting.base_ohm(end.node_kv)
    if start.earthed and end.earthed and start.connection == end.connection == "Y":
        return _Zero(series=admittance(part, z0 + earth_to + earth_from / t**2), findings=findings)
    z_from = _shunt_behind(part, start, end, z0, own_base)
    z_to = _shunt_behind(part, end, start, z0, own_base)
    return _Zero(
        shunt_from=OPEN if z_from is None else admittance(part, z_from * t**2 + earth_from),
        shunt_to=OPEN if z_to is None else admittance(part, z_to + earth_to),
        findings=findings if z0 in (z_from, z_to) else (),
    )


def _shunt_behind(part: Transformer, own: Winding, other: Winding, z0: complex, own_base: float) -> complex | None:
    """Impedance between a side's terminals and its star point in the zero sequence (referred as Z1), None: open."""
    if not own.earthed:
        return None
    if own.connection == "Z" or other.connection == "D":
        return z0
    magnetising = optional(part, "magnetising_impedance", "pu")
    if other.earthed or magnetising is None or word(part, "core") != "three-limb":
        return None
    return 1j * magnetising * own_base


def _leakage_zero(part: Transformer, z1: complex) -> tuple[complex, tuple[Finding, ...]]:
    """Zero-sequence leakage: a share of |Z1|, with X0/R0 or else the angle of Z1."""
    share = optional(part, "zero_sequence_impedance", "pu")
    findings = () if share is not None else (zero_sequence_assumed(part, "zero_sequence_impedance", "Z0 = Z1"),)
    size = abs(z1) * (1.0 if share is None else share)
    x0_over_r0 = optional(part, "x0_over_r0", "")
    z0 = cmath.rect(size, cmath.phase(z1)) if x0_over_r0 is None else with_x_over_r(size, x0_over_r0)
    return z0, findings


def earthing_transformer_stamps(part: EarthingTransformer, kv: float, setting: Setting) -> Stamps:
    """A shunt Z0 + 3 Zn in the zero sequence alone; a rating in A means Z0 = √3·U/I (U/√3 over a third of I)."""
    own_kv = in_unit(part, "rated_voltage", "kV")
    earthing = earthing_ohm(part, "neutral", own_kv)
    if earthing is None:
        return Stamps()
    rating = part.value("zero_sequence_impedance")
    if isinstance(rating, Quantity) and rating.dimension == "current":
        size = math.sqrt(3) * own_kv / in_unit(part, "zero_sequence_impedance", "kA")
    else:
        size = in_unit(part, "zero_sequence_impedance", "ohm")
    z0 = with_x_over_r(size, in_unit(part, "x0_over_r0", "")) + 3 * earthing
    shunt = ShuntStamp("line", (OPEN, OPEN, admittance(part, z0 / setting.base_ohm(kv))))
    return Stamps(shunts=(shunt,), star_points=(StarPoint("line", "shunt"),))
