"""What the engine says against what the oracle says, every quantity, complex, with angles."""

from collections.abc import Iterator, Mapping

import numpy as np

from onelinefault.engine.results import FaultResult
from tests.oracle.circuit import ComplexArray
from tests.oracle.phase_domain import Answer

TOLERANCE = 1e-8  # of the largest of its kind; plants of five voltage levels agree to about 1e-9
TerminalKey = tuple[str, str]
Gap = tuple[float, str]


def disagreements(result: FaultResult, answer: Answer, tolerance: float = TOLERANCE) -> list[str]:
    """One line for each quantity that differs by more than the tolerance."""
    gaps = [*current_gaps(result, answer), *_voltage_gaps(result, answer)]
    return [sentence for gap, sentence in gaps if not gap <= tolerance]


def current_gaps(result: FaultResult, answer: Answer) -> Iterator[Gap]:
    """Every current: how far apart the two are, against the largest, and the sentence that says so."""
    kv = {key: float(abs(volts).max()) for key, volts in answer.before_kv.items()}
    at_fault = _scale_ka(result, answer, kv)
    yield from _gap("fault current", result.phases_ka, answer.fault_ka, at_fault)
    yield from _gap("residual current", result.residual_ka, answer.fault_ka.sum(), at_fault)
    power = at_fault * result.prefault_kv / np.sqrt(3)
    for key, ampere in answer.terminal_ka.items():
        yield from _gap(f"current at {key}", result.terminal_ka[key], ampere, power / kv[key])
    for (part, side), into_earth in answer.earth_ka.items():
        terminal = next(k for k in answer.terminal_ka if k[0] == part and side in (k[1], "common"))
        ours = result.neutral_ka[part, side]
        yield from _gap(f"neutral current {part, side}", ours, into_earth, power / kv[terminal])
    for key in result.terminal_ka.keys() & answer.before_kv.keys() - answer.terminal_ka.keys():
        if key[0] in result.network.branch_parts or key[0] in result.network.shunt_parts:
            yield np.inf, f"the engine has a current at {key}, the oracle has not"


def _scale_ka(result: FaultResult, answer: Answer, kv: Mapping[TerminalKey, float]) -> float:
    """Largest current anywhere, brought to the fault's voltage.

    At least a hundredth of a three-phase fault's and a thousandth of the strongest source's: where nothing flows,
    rounding is measured by these.
    """
    network, volts = result.network, float(result.prefault_kv / np.sqrt(3))
    shares = [float(abs(ampere).max()) * kv[key] / volts for key, ampere in answer.terminal_ka.items()]
    z1 = result.z_ohm[0]
    assert z1 is not None
    sources = [float(abs(network.y_shunt[source.shunt, 0])) for source in network.sources]
    strongest = max(sources) * network.base_mva / 3 / volts
    return max(float(abs(answer.fault_ka).max()), *shares, 1e-2 * volts / abs(z1), 1e-3 * strongest)


def _voltage_gaps(result: FaultResult, answer: Answer) -> Iterator[Gap]:
    yield from _gap("voltage at the fault", result.fault_kv, answer.fault_kv, result.prefault_kv)
    for key, volts in answer.voltage_kv.items():
        node = result.network.node_of[key]
        scale = float(abs(answer.before_kv[key]).max())
        yield from _gap(f"voltage before at {key}", result.prefault_voltages_kv[node], answer.before_kv[key], scale)
        yield from _gap(f"voltage at {key}", result.voltages_kv[node], volts, scale)


def _gap(what: str, ours: ComplexArray | complex, theirs: ComplexArray | complex, scale: float) -> Iterator[Gap]:
    gap = float(np.max(abs(np.asarray(ours) - np.asarray(theirs)))) / scale
    sentence = "" if gap <= TOLERANCE else f"{what}: engine {_polar(ours)}, oracle {_polar(theirs)} (gap {gap:.1e})"
    yield gap, sentence


def _polar(values: ComplexArray | complex) -> str:
    return " ".join(f"{abs(v):.6g}∠{np.degrees(np.angle(v)):.3f}°" for v in np.atleast_1d(values))
