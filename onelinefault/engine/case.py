"""What is asked of the network besides the fault: method, largest or smallest, moment."""

from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Case:
    """One state of the calculation.

    method: "classical". level: "max" or "min" (supply fault level, conductor temperature). moment: "subtransient",
    "transient" or "steady" (which machine reactance). charging: include cable and line capacitance. prefault: "nominal"
    (nominal voltage times the plant's factor at the fault) or "no-load" (from the sources through ratios and taps).
    motors: induction and synchronous motors feed the fault.
    """

    method: str = "classical"
    level: str = "max"
    moment: str = "subtransient"
    charging: bool = False
    prefault: str = "nominal"
    motors: bool = True
