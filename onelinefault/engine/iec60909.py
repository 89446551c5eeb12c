"""IEC 60909-0:2016 as a policy: voltage factors, correction factors, what is in the network for which fault.

The rated ratio of transformers counts, not their taps; no charging; no voltage before the fault but c·Un at its place.
Where several machines and levels meet, up to three voltage factors are in one calculation: the feeder's own in Z_Q, the
low-voltage side's c_max in K_T, and the faulted place's in the driving voltage. Formulas: ``iec60909_factors``.
"""

import math
from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field, replace

from onelinefault.engine import iec60909_factors as factors
from onelinefault.engine.case import Case, View
from onelinefault.engine.iec60909_units import Unit, by_part, sine_of_rated_angle, units_of
from onelinefault.engine.method import Correction, Machine, Method, is_drive
from onelinefault.engine.sequence_stamps import in_unit, optional
from onelinefault.engine.topology import Topology
from onelinefault.engine.voltages import NominalVoltages
from onelinefault.errors import StudyError
from onelinefault.model.conductors import Busway, Cable, OverheadLine
from onelinefault.model.fault import FaultKind
from onelinefault.model.part import Part
from onelinefault.model.sources import (
    ConverterSource,
    InductionMotor,
    Supply,
    SynchronousGenerator,
    SynchronousMotor,
)
from onelinefault.model.transforming import Autotransformer, Transformer, Transformer3

MOTORS = (InductionMotor, SynchronousMotor)
SUBTRANSIENT = "subtransient"
PEAK_METHODS = ("a", "b", "c")


@dataclass(frozen=True)
class Iec60909(Method):
    """The method in one case and view. units: by the ids of their generators and transformers."""

    case: Case = field(default_factory=Case)
    units: Mapping[str, Unit] = field(default_factory=dict)
    has_motors: bool = False
    has_drives: bool = False

    @classmethod
    def of(cls, case: Case, view: View, topology: Topology, voltages: NominalVoltages) -> "Iec60909":
        """For a plant's parts in their places. Raises StudyError for a case that cannot be."""
        check_case(case)
        units, findings = units_of(topology, voltages, case.lv_tolerance_percent)
        running = [part for part in topology.parts.values() if part.in_service and case.motors and case.level == "max"]
        return cls(
            view=view,
            taps=False,
            charging=False,
            constant_converters=True,
            findings=findings,
            case=case,
            units=by_part(units),
            has_motors=any(isinstance(part, MOTORS) for part in running),
            has_drives=any(is_drive(part) for part in running),
        )

    def c(self, kv: float, level: str = "") -> float:
        """Voltage factor at a nominal voltage in kV; level: "max" or "min", the case's own when empty."""
        return factors.voltage_factor(kv, level or self.case.level, self.case.lv_tolerance_percent)

    def takes(self, part: Part) -> bool:
        """Motors and converter sources feed the largest currents only (7.1); a view may leave motors or drives out."""
        if isinstance(part, ConverterSource):
            return self.case.level == "max"
        if not isinstance(part, MOTORS):
            return True
        wanted = self.view.motors and (self.view.drives or not is_drive(part))
        return wanted and self.case.level == "max" and super().takes(part)

    def assumes(self, part: Part) -> bool:
        """A power factor that is not given goes into K_G and K_S, a number of poles (four are taken) into q."""
        if isinstance(part, SynchronousGenerator | SynchronousMotor):
            return part.power_factor is None
        return isinstance(part, InductionMotor) and part.poles is None and part.rated_speed is None

    def supply(self, part: Supply, own_kv: float) -> Correction:
        """C in Z_Q = c·UnQ/(√3·I″kQ), of the feeder's own voltage (6.2).

        Where no smallest level is given, the network is taken to stay as it is: the Z_Q of the largest level, with its
        c_max, so that the smallest current follows from c_min alone (our choice, on the safe side).
        """
        return Correction("c", self.c(own_kv, "max" if part.fault_level_min is None else ""))

    def transformer(self, part: Transformer, x_pu: float, high_kv: float, low_kv: float) -> Correction:
        """K_T (6.3.3); of a unit transformer K_S or K_SO (6.7), for faults inside the unit K_T,S (7.2)."""
        unit = self.units.get(part.id)
        if unit is None:
            return Correction("K_T", factors.transformer_factor(self.c(min(high_kv, low_kv), "max"), x_pu))
        return self._of_unit(unit, part)

    def pair(self, part: Transformer3 | Autotransformer, sides: tuple[str, str], x_pu: float, kv: float) -> Correction:
        """K_T of a pair (6.3.3), which comes before the star is made."""
        return Correction(f"K_T {sides[0]}-{sides[1]}", factors.transformer_factor(self.c(kv, "max"), x_pu))

    def synchronous(self, part: SynchronousGenerator | SynchronousMotor, x_pu: float, kv: float) -> Machine:
        """K_G (6.6); of a unit's generator K_S or K_SO (6.7), for faults inside the unit K_G,S (7.2)."""
        unit = self.units.get(part.id)
        if unit is not None:
            return Machine(self._of_unit(unit, part), SUBTRANSIENT)
        above = in_unit(part, "voltage_range", "pu") if isinstance(part, SynchronousGenerator) else 0.0
        rated_kv = in_unit(part, "rated_voltage", "kV")
        k = factors.generator_factor(self.c(kv, "max"), x_pu, sine_of_rated_angle(part), kv, rated_kv, above)
        return Machine(Correction("K_G", k), SUBTRANSIENT)

    def _of_unit(self, unit: Unit, part: Part) -> Correction:
        return unit.factor_inside(part) if self.view.inside == unit.transformer.id else unit.factor()

    def induction(self, part: InductionMotor) -> Machine:
        """As rated (6.10), or as a drive (6.11)."""
        return replace(super().induction(part), moment=SUBTRANSIENT)

    def warmth(self, part: Cable | OverheadLine | Busway) -> float:
        """R at 20 °C for the largest, at the end of the short circuit for the smallest current (7.1), over R given."""
        given_c = optional(part, "r_temperature", "°C")
        given = 1.0 if given_c is None else factors.hot_resistance_ohm(1.0, given_c)
        hot_c = in_unit(part, "hot_temperature", "°C") if self.case.level == "min" else 20.0
        return factors.hot_resistance_ohm(1.0, hot_c) / given

    def driving(self, nominal_kv: Sequence[float]) -> list[float]:
        """C at each node; between a unit's generator and transformer c·UrG/Un, for a fault there (7.2)."""
        driving = [self.c(kv) for kv in nominal_kv]
        unit = self.units.get(self.view.inside)
        for node in unit.terminals if unit else ():
            driving[node] *= unit.generator_kv / nominal_kv[node]  # type: ignore[union-attr]
        return driving

    def view_of(self, node: int, kind: FaultKind) -> View:
        """Inside which unit the node lies; drives feed three-phase faults only (6.11)."""
        inside = next((unit.transformer.id for unit in self.units.values() if node in unit.inside), "")
        drives = self.view.drives and (kind is FaultKind.THREE_PHASE or not self.has_drives)
        return replace(self.view, inside=inside, drives=drives)

    def without_motors(self) -> View:
        """This view without motors; itself where there are none."""
        return replace(self.view, motors=False) if self.has_motors else self.view

    def without_drives(self) -> View:
        """This view without motors behind converters; itself where there are none."""
        return replace(self.view, drives=False) if self.has_drives else self.view


def check_case(case: Case) -> None:
    """Raises StudyError for a level, tolerance, time or peak method that the method does not know."""
    if case.level not in tuple(factors.Level):
        raise StudyError(f"There is no level {case.level!r}; ask for the largest (max) or the smallest (min) current.")
    if case.peak_method not in PEAK_METHODS:
        raise StudyError(f"There is no peak method {case.peak_method!r}; choose {', '.join(PEAK_METHODS)}.")
    for name, seconds in (("minimum time delay", case.minimum_time_delay_s), ("duration", case.duration_s)):
        if not 0 <= seconds < math.inf:
            raise StudyError(f"The {name} of {seconds:g} s cannot be; enter a time of zero or more.")
    factors.voltage_factor(factors.LOW_VOLTAGE_KV, case.level, case.lv_tolerance_percent)
