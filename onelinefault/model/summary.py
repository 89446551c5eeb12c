"""The one to three short lines that stand beside a part's symbol: what a person looks for first, as it was typed."""

from collections.abc import Callable, Mapping

from onelinefault.model.conductors import Busway, Cable, OverheadLine, Reactor
from onelinefault.model.consumers import Bus, Capacitor, Load
from onelinefault.model.part import Part
from onelinefault.model.sources import ConverterSource, InductionMotor, Supply, SynchronousGenerator, SynchronousMotor
from onelinefault.model.switching import Breaker, Fuse, Switch
from onelinefault.model.transforming import Autotransformer, EarthingTransformer, Transformer, Transformer3
from onelinefault.model.values import ConductorSize, Neutral


def rating_lines(part: Part) -> list[str]:
    """Short lines with the typed ratings, at most three; nothing typed gives no line.

    Texts stand as typed ("20 MVA 10 %", "Dyn11", "0.18 km 3×240", "3 × 1.2 MW"); defaults are not shown.
    """
    lines = _LINES.get(type(part), _no_lines)(part)
    return [line for line in lines if line]


def neutral_label(part: Part, field: str) -> str:
    """The size of the earthing device at a star point, "400 A" or "5 ohm"; empty when there is none or none typed."""
    value = part.given(field)
    return value.size.text if isinstance(value, Neutral) and value.size is not None else ""


def size_label(size: ConductorSize) -> str:
    """A conductor size for the sheet: "3×240", "4/0 AWG"; square millimetres go without saying."""
    text = size.text.replace("*", "×").replace("x", "×").replace("X", "×")
    return text.removesuffix("mm²").removesuffix("mm2").rstrip()


def _no_lines(_part: Part) -> list[str]:
    return []


def _joined(part: Part, *names: str) -> str:
    return " ".join(text for text in map(part.text, names) if text)


def _bus(part: Part) -> list[str]:
    return [part.text("nominal_voltage")]


def _supply(part: Part) -> list[str]:
    return [part.text("fault_level_max")]


def _synchronous(part: Part) -> list[str]:
    reactance = part.text("subtransient_reactance")
    return [part.text("rated_power"), f"X″d {reactance}" if reactance else ""]


def _motor(part: Part) -> list[str]:
    count, power = part.given("count"), part.text("rated_power")
    group = f"{count} × " if isinstance(count, int) and count > 1 and power else ""
    return [group + power]


def _power(part: Part) -> list[str]:
    return [part.text("rated_power")]


def _transformer(part: Part) -> list[str]:
    return [_joined(part, "rated_power", "impedance"), part.text("vector_group")]


def _transformer3(part: Part) -> list[str]:
    powers = [t for n in ("high", "medium", "low") if (t := part.text(f"rated_power_{n}"))]
    units = {text.rpartition(" ")[2] for text in powers}
    if len(powers) > 1 and len(units) == 1:
        powers = [text.rpartition(" ")[0] for text in powers[:-1]] + powers[-1:]
    return ["/".join(powers), part.text("vector_group")]


def _autotransformer(part: Part) -> list[str]:
    return [_joined(part, "rated_power", "impedance_high_low"), part.text("vector_group")]


def _earthing_transformer(part: Part) -> list[str]:
    return [part.text("connection"), part.text("zero_sequence_impedance")]


def _cable(part: Part) -> list[str]:
    size, parallel = part.given("size"), part.given("parallel")
    label = size_label(size) if isinstance(size, ConductorSize) else ""
    many = isinstance(parallel, int) and parallel > 1
    if many and (not isinstance(size, ConductorSize) or size.runs == 1):
        label = f"{parallel}×{label}" if label else f"{parallel}×"
    return [" ".join(filter(None, (part.text("length"), label)))]


def _line(part: Part) -> list[str]:
    parallel = part.given("parallel")
    return [" ".join(filter(None, (part.text("length"), f"{parallel}×" if parallel and parallel != 1 else "")))]


def _busway(part: Part) -> list[str]:
    return [*_line(part), part.text("rated_current")]


def _reactor(part: Part) -> list[str]:
    return [part.text("reactance"), part.text("rated_current")]


def _device(part: Part) -> list[str]:
    breaking = part.text("breaking_current") if hasattr(part, "breaking_current") else part.text("short_time_current")
    return [part.text("rated_current"), breaking]


_LINES: Mapping[type[Part], Callable[[Part], list[str]]] = {
    Bus: _bus,
    Supply: _supply,
    SynchronousGenerator: _synchronous,
    SynchronousMotor: _synchronous,
    InductionMotor: _motor,
    ConverterSource: _power,
    Transformer: _transformer,
    Transformer3: _transformer3,
    Autotransformer: _autotransformer,
    EarthingTransformer: _earthing_transformer,
    Cable: _cable,
    OverheadLine: _line,
    Busway: _busway,
    Reactor: _reactor,
    Breaker: _device,
    Switch: _device,
    Fuse: _device,
    Load: _power,
    Capacitor: _power,
}
