"""Part → what it puts into the three sequence networks. One line here for each kind that does."""

from collections.abc import Callable, Mapping
from typing import Any

from onelinefault.engine.sequence_conductors import line_stamps, reactor_stamps
from onelinefault.engine.sequence_machines import induction_stamps, synchronous_stamps
from onelinefault.engine.sequence_sources import converter_stamps, supply_stamps
from onelinefault.engine.sequence_stamps import Setting, Stamps
from onelinefault.engine.sequence_three_windings import autotransformer_stamps, transformer3_stamps
from onelinefault.engine.sequence_transformers import earthing_transformer_stamps, transformer_stamps
from onelinefault.model.conductors import Busway, Cable, OverheadLine, Reactor
from onelinefault.model.part import Part
from onelinefault.model.sources import ConverterSource, InductionMotor, Supply, SynchronousGenerator, SynchronousMotor
from onelinefault.model.transforming import Autotransformer, EarthingTransformer, Transformer, Transformer3

Kilovolts = tuple[float, ...]

_MODELS: Mapping[type[Part], Callable[[Any, Kilovolts, Setting], Stamps]] = {
    Supply: lambda part, kv, setting: supply_stamps(part, kv[0], setting),
    SynchronousGenerator: lambda part, kv, setting: synchronous_stamps(part, kv[0], setting),
    SynchronousMotor: lambda part, kv, setting: synchronous_stamps(part, kv[0], setting),
    InductionMotor: lambda part, kv, setting: induction_stamps(part, kv[0], setting),
    ConverterSource: lambda part, kv, setting: converter_stamps(part, kv[0], setting),
    Transformer: lambda part, kv, setting: transformer_stamps(part, kv[0], kv[1], setting),
    Transformer3: lambda part, kv, setting: transformer3_stamps(part, (kv[0], kv[1], kv[2]), setting),
    Autotransformer: lambda part, kv, setting: autotransformer_stamps(part, (kv[0], kv[1], kv[2]), setting),
    EarthingTransformer: lambda part, kv, setting: earthing_transformer_stamps(part, kv[0], setting),
    Cable: lambda part, kv, setting: line_stamps(part, kv[0], kv[1], setting),
    OverheadLine: lambda part, kv, setting: line_stamps(part, kv[0], kv[1], setting),
    Busway: lambda part, kv, setting: line_stamps(part, kv[0], kv[1], setting),
    Reactor: lambda part, kv, setting: reactor_stamps(part, kv[0], kv[1], setting),
}
MOTORS = (InductionMotor, SynchronousMotor)


def in_network(part: Part, setting: Setting) -> bool:
    """Whether the part puts anything into the network: in service, of such a kind, and no motor when none is asked.

    Loads and capacitors are left out (all methods). The method may leave out more.
    """
    if not part.in_service or type(part) not in _MODELS:
        return False
    return (setting.case.motors or not isinstance(part, MOTORS)) and setting.method.takes(part)


def stamps_of(part: Part, node_kv: Kilovolts, setting: Setting) -> Stamps:
    """The stamps of one part; node_kv: nominal voltages of the nodes at its terminals, in their order.

    Raises PartLeftOutError with a finding when a rating is missing or impossible, EntryError when one has a dimension
    that cannot be.
    """
    return _MODELS[type(part)](part, node_kv, setting)
