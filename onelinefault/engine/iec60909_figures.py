"""IEC 60909-0: the figures of one fault and how they read in a table. ``iec60909_derive`` works them out."""

from collections.abc import Mapping
from dataclasses import dataclass

from onelinefault.engine.derived import Figure


@dataclass(frozen=True, slots=True)
class Peak:
    """The peak current by one method: R/X that goes into κ, κ with its factor 1.15 if any, ip in kA."""

    r_over_x: float
    kappa: float
    ip_ka: float


@dataclass(frozen=True, slots=True)
class MachineShare:
    """What one machine feeds into a three-phase fault: I″k at its terminals, kA; over its rated current; Ib/I″k."""

    part: str
    ik_ka: float
    times_rated: float
    left: float


@dataclass(frozen=True, slots=True)
class Partial:
    """A partial current at a power station unit's terminals, from one side: I″k, κ of that side alone, ip, Ib in kA."""

    part: str
    ik_ka: float
    kappa: float
    ip_ka: float
    ib_ka: float


@dataclass(frozen=True, slots=True)
class IecFigures:
    """All figures of one fault, kA and s.

    c: voltage factor at the fault. lines_ka: I″k of each line; earth_ka: I″kE, the current to earth. ik_ka: the largest
    line current; of_converters_ka: the part of it that converter sources add. peaks: by method, "a", "b", "c" and
    "b-plain" (without the factor 1.15). ib_meshed_ka, ib_apart_ka: breaking current by either rule, three-phase faults;
    apart: whether all sources come on ways of their own, which decides. ik_steady_ka: Ik. motor_share: what all motors
    add to the three-phase I″k without them, over that. machines, partials: of a single three-phase fault.
    """

    c: float
    lines_ka: tuple[float, float, float]
    earth_ka: float
    ik_ka: float
    of_converters_ka: float
    peaks: Mapping[str, Peak]
    peak_method: str
    minimum_time_delay_s: float
    r_over_x_dc: float
    idc_ka: float
    ib_meshed_ka: float
    ib_apart_ka: float
    apart: bool
    ib_reason: str
    ik_steady_ka: float
    duration_s: float
    m: float
    n: float
    ith_ka: float
    motor_share: float
    motors_negligible: bool
    machines: tuple[MachineShare, ...] = ()
    partials: tuple[Partial, ...] = ()

    @property
    def kappa(self) -> float:
        """κ of the method asked for."""
        return self.peaks[self.peak_method].kappa

    @property
    def peak_ka(self) -> float:
        """The peak current ip by the method asked for."""
        return self.peaks[self.peak_method].ip_ka

    @property
    def ib_ka(self) -> float:
        """The symmetrical breaking current Ib by the rule that fits the network."""
        return self.ib_apart_ka if self.apart else self.ib_meshed_ka

    def rows(self) -> tuple[Figure, ...]:
        """All figures in the order of the standard."""
        at = f"at {self.minimum_time_delay_s:g} s"
        return (
            Figure("c", "Voltage factor", self.c),
            Figure("I″k", "Initial current, largest line", self.ik_ka, "kA"),
            Figure("I″kE", "Initial current to earth", self.earth_ka, "kA"),
            Figure("κ", "Peak factor", self.kappa, "", f"method ({self.peak_method})"),
            Figure("ip", "Peak current", self.peak_ka, "kA", f"method ({self.peak_method})"),
            *(self._peak(method) for method in ("a", "b", "c") if method != self.peak_method),
            Figure("idc", "D.C. current", self.idc_ka, "kA", at),
            Figure("Ib", "Breaking current", self.ib_ka, "kA", f"{at}; {self.ib_reason}"),
            Figure("Ik", "Steady-state current", self.ik_steady_ka, "kA"),
            Figure("m", "Heat of the d.c. part", self.m),
            Figure("n", "Heat of the a.c. part", self.n, "", "a.c. part taken as lasting"),
            Figure("Ith", "Thermal equivalent current", self.ith_ka, "kA", f"for {self.duration_s:g} s"),
        )

    def _peak(self, method: str) -> Figure:
        return Figure(f"ip({method})", "Peak current", self.peaks[method].ip_ka, "kA", f"method ({method})")
