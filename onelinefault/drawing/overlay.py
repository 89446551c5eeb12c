"""The fault on the drawing: ribbons, gauges, tags, the pin. Data in, shapes out; no engine, no toolkit."""

from collections.abc import Mapping
from dataclasses import dataclass, field

from onelinefault.model.fault import Place


@dataclass(frozen=True, slots=True)
class Flow:
    """Current along a wire or at a terminal.

    ka: size, referred to the faulted place's voltage, so that what arrives through transformers can be compared.
    forward: from end a to b; at a terminal: into the part.
    """

    ka: float
    forward: bool


@dataclass(frozen=True, slots=True)
class Tag:
    """A small callout with figures.

    key: "fault", the id of a wire, or "PART TERMINAL" (the place chosen by hand is kept under it). main: the large
    figure; lines: the small ones below. filled: drawn in the fault's colour (the tag of the fault itself).
    """

    key: str
    main: str
    lines: tuple[str, ...] = ()
    filled: bool = False


@dataclass(frozen=True)
class OverlayData:
    """What the overlay shows.

    flows: by wire id. ends: by (part, terminal), forward when the current goes from the node into the part.
    voltage_left: percent, by bus id. stale: the plant has changed since; everything is greyed.
    """

    kind: str
    phases: str
    place: Place
    flows: Mapping[str, Flow] = field(default_factory=dict)
    ends: Mapping[tuple[str, str], Flow] = field(default_factory=dict)
    voltage_left: Mapping[str, float] = field(default_factory=dict)
    tags: tuple[Tag, ...] = ()
    largest_ka: float = 0.0
    stale: bool = False
    detail: int = 2
