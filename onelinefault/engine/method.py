"""What a calculation method decides about the network; the classical one here decides nothing.

The sequence models ask these hooks; a standard is a subclass that answers some of them differently. All else, nodes,
factorisation, boundary conditions, branch currents, is shared. A new method is one subclass, one line in ``methods``
and, where it derives figures of its own, one line in ``study``.
"""

from collections.abc import Sequence
from dataclasses import dataclass

from onelinefault.engine.case import WHOLE, View
from onelinefault.model.conductors import Busway, Cable, OverheadLine
from onelinefault.model.fault import FaultKind
from onelinefault.model.findings import Finding
from onelinefault.model.part import Part
from onelinefault.model.sources import InductionMotor, Supply, SynchronousGenerator, SynchronousMotor
from onelinefault.model.transforming import Autotransformer, Transformer, Transformer3


@dataclass(frozen=True, slots=True)
class Correction:
    """A factor that a method puts on an impedance, and its name there ("K_T"); no name: nothing to tell."""

    name: str = ""
    value: float = 1.0


UNCORRECTED = Correction()


@dataclass(frozen=True, slots=True)
class Machine:
    """How a rotating machine stands in the network.

    correction: on R and X alike, in all sequences, but never on 3 Zn. moment: which reactance of a synchronous machine,
    "subtransient", "transient" or "steady"; empty: as the case says. locked_rotor_ratio, x_over_r: in place of an
    induction motor's own.
    """

    correction: Correction = UNCORRECTED
    moment: str = ""
    locked_rotor_ratio: float | None = None
    x_over_r: float | None = None


AS_RATED = Machine()
BEHIND_CONVERTER = Machine(locked_rotor_ratio=3.0, x_over_r=10.0)
"""A motor whose converter can feed back (IEC 60909-0, 6.11; taken for all methods)."""


def is_drive(part: Part) -> bool:
    """Whether the part is a motor behind a converter, of either kind."""
    return isinstance(part, InductionMotor) and part.value("drive") != "direct"


@dataclass(frozen=True)
class Method:
    """The classical method: everything as rated. view: which of the case's networks this is.

    taps: transformers stand at their tap, else at their rated ratio. charging: capacitances are in where the case asks
    for them. constant_converters: converter sources feed their limit whatever the voltage, in phase with the fault
    current.
    """

    view: View = WHOLE
    taps: bool = True
    charging: bool = True
    constant_converters: bool = False
    findings: tuple[Finding, ...] = ()

    def takes(self, part: Part) -> bool:
        """Whether a part that is in service is in the network: a motor whose converter cannot feed back is not."""
        return not (is_drive(part) and part.value("drive") == "converter")

    def assumes(self, part: Part) -> bool:
        """Whether the method takes a typical value for the part that the classical method has no need of."""
        return False

    def supply(self, part: Supply, own_kv: float) -> Correction:
        """Factor on a supply's voltage in Z = c·U/(√3·I); own_kv: at which its fault level is given."""
        return UNCORRECTED

    def transformer(self, part: Transformer, x_pu: float, high_kv: float, low_kv: float) -> Correction:
        """Factor on a transformer's impedance. x_pu: its reactance on its own rating; kV: nominal, of its nodes."""
        return UNCORRECTED

    def pair(self, part: Transformer3 | Autotransformer, sides: tuple[str, str], x_pu: float, kv: float) -> Correction:
        """Factor on a pair impedance of three windings. x_pu: on the pair's own base; kv: the lower nominal voltage."""
        return UNCORRECTED

    def synchronous(self, part: SynchronousGenerator | SynchronousMotor, x_pu: float, kv: float) -> Machine:
        """A synchronous machine. x_pu: X″d on its own rating; kv: nominal voltage of its node."""
        return AS_RATED

    def induction(self, part: InductionMotor) -> Machine:
        """An induction motor."""
        return BEHIND_CONVERTER if is_drive(part) else AS_RATED

    def warmth(self, part: Cable | OverheadLine | Busway) -> float | None:
        """R in use over R given of a conductor; None: by its material (IEC 60949)."""
        return None

    def driving(self, nominal_kv: Sequence[float]) -> list[float] | None:
        """Voltage that drives a fault at each node over its nominal voltage; None: the plant's own factor."""
        return None

    def view_of(self, node: int, kind: FaultKind) -> View:
        """The view that a fault of this kind at a node is calculated in."""
        return self.view


CLASSICAL = Method()
