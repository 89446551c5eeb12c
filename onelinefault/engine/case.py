"""What is asked of the network besides the fault: method, largest or smallest, moment; and which view of it."""

from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Case:
    """One state of the calculation.

    method: "classical", "iec60909" or "ieee-c37". level: "max" or "min" (supply fault level, conductor temperature).
    moment: "subtransient", "transient" or "steady" (which machine reactance). charging: include cable and line
    capacitance. prefault: "nominal" (nominal voltage times the plant's factor at the fault) or "no-load" (from the
    sources through ratios and taps). motors: induction and synchronous motors feed the fault.

    For IEC 60909 only. lv_tolerance_percent: voltage tolerance of low-voltage networks, 6 or 10. minimum_time_delay_s:
    of the breaking current and the d.c. current. duration_s: of the thermal equivalent current. peak_method: "a", "b"
    or "c". leave_out_small_motors: where all motors add no more than 5 % they are left out.

    For IEEE C37 only. network: "first-cycle", "interrupting" or "thirty-cycle".
    """

    method: str = "classical"
    level: str = "max"
    moment: str = "subtransient"
    charging: bool = False
    prefault: str = "nominal"
    motors: bool = True
    lv_tolerance_percent: float = 6.0
    minimum_time_delay_s: float = 0.1
    duration_s: float = 1.0
    peak_method: str = "c"
    leave_out_small_motors: bool = False
    network: str = "first-cycle"


@dataclass(frozen=True, slots=True)
class View:
    """Which of a case's networks: a method may need several, with the same nodes in the same order.

    inside: id of the unit transformer of a power station unit for faults inside that unit, empty for all others.
    motors, drives: whether motors, and motors behind converters, are in it. network: in place of the case's own, if not
    empty. resistance, reactance: factors on all resistances and reactances, for equivalent frequencies and for
    networks of resistances or reactances alone.
    """

    inside: str = ""
    motors: bool = True
    drives: bool = True
    network: str = ""
    resistance: float = 1.0
    reactance: float = 1.0


WHOLE = View()
