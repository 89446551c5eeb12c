"""A finding that needs the network: motors far above the rating of the transformers that feed them."""

from collections.abc import Iterator

from onelinefault.engine.sequence_machines import induction_mva, running_count, synchronous_mva
from onelinefault.engine.sequence_stamps import PartLeftOutError
from onelinefault.engine.topology import Topology
from onelinefault.engine.voltages import WINDINGS, volts
from onelinefault.errors import EntryError
from onelinefault.model.figures import figure
from onelinefault.model.findings import Finding, Severity
from onelinefault.model.part import Part
from onelinefault.model.quantity import Quantity
from onelinefault.model.sources import ConverterSource, InductionMotor, Supply, SynchronousGenerator, SynchronousMotor

FAR_ABOVE = 1.5
_FEEDERS = (Supply, SynchronousGenerator, ConverterSource)
_RATED_POWER = {"medium": "rated_power_medium", "low": "rated_power_low", "tertiary": "rated_power_tertiary"}


def check_motors(topology: Topology, zone: tuple[int, ...]) -> list[Finding]:
    """Compare running motors with the transformers whose lower windings feed the same zone.

    zone: for each node the number of its group of nodes that conductors join. Zones with a source of their own are
    passed over.
    """
    motors: dict[int, list[float]] = {}
    feeding: dict[int, list[tuple[Part, float]]] = {}
    fed: set[int] = set()
    for part in topology.parts.values():
        if not part.in_service:
            continue
        if isinstance(part, _FEEDERS):
            fed.add(zone[topology.nodes_of(part)[0]])
        elif isinstance(part, InductionMotor | SynchronousMotor):
            motors.setdefault(zone[topology.nodes_of(part)[0]], []).append(_motor_mva(part))
        for terminal, mva in _lower_windings(part):
            feeding.setdefault(zone[topology.node(part.id, terminal)], []).append((part, mva))
    findings = []
    for number, transformers in feeding.items():
        motors_mva = sum(motors.get(number, ()))
        if number not in fed and motors_mva > FAR_ABOVE * sum(mva for _, mva in transformers):
            findings.append(_finding(motors_mva, transformers))
    return findings


def _motor_mva(part: InductionMotor | SynchronousMotor) -> float:
    """Apparent power of the running motors; 0 when a rating is missing, which another finding says."""
    try:
        if isinstance(part, InductionMotor):
            return induction_mva(part) * running_count(part)
        return synchronous_mva(part)
    except (PartLeftOutError, EntryError, ArithmeticError):
        return 0.0


def _lower_windings(part: Part) -> Iterator[tuple[str, float]]:
    """Terminals of a transformer's windings below its highest voltage, with their rated powers."""
    windings = [(terminal, volts(part, name)) for terminal, name in WINDINGS.get(type(part), ())]
    highest = max((kv for _, kv in windings if kv is not None), default=0.0)
    for terminal, kv in windings:
        mva = _winding_mva(part, terminal)
        if kv is not None and kv < highest and mva is not None:
            yield terminal, mva


def _winding_mva(part: Part, terminal: str) -> float | None:
    for name in (_RATED_POWER.get(terminal, ""), "rated_power", "rated_power_high"):
        power = getattr(part, name, None) if name else None
        if isinstance(power, Quantity):
            return power.to("MVA")
    return None


def _finding(motors_mva: float, feeding: list[tuple[Part, float]]) -> Finding:
    names = " and ".join(part.name or part.title for part, _ in feeding)
    total = sum(mva for _, mva in feeding)
    message = f"Motors of {figure(motors_mva)} MVA run behind {names}, rated {figure(total)} MVA together."
    remedy = "Check the motors' ratings, their number and the share running, and the transformer's rated power."
    return Finding(Severity.WARNING, "motors-above-transformer", message, remedy, tuple(p.id for p, _ in feeding))
