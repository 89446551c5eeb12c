"""What the shelf offers: every kind of part by trade group, with a short name and the words it is looked for by.

The words stand here in English; translators find them under the context "Catalogue".
"""

from collections.abc import Mapping
from dataclasses import dataclass, field
from typing import Any, Final

from PySide6.QtCore import QCoreApplication

_CONTEXT: Final = "Catalogue"


@dataclass(frozen=True, slots=True)
class Offer:
    """One thing on the shelf. presets: ratings and drawn properties it comes with; words: for the search."""

    group: str
    kind: str
    name: str
    words: str = ""
    presets: Mapping[str, Any] = field(default_factory=dict)

    @property
    def shown(self) -> str:
        """The name in the language of the window."""
        return QCoreApplication.translate(_CONTEXT, self.name)

    def score(self, typed: str) -> int:
        """How well typed letters fit: 0 not at all, larger is better; the start of a name counts most."""
        wanted = typed.strip().casefold()
        names = [self.shown.casefold(), self.kind.replace("_", " ")]
        words = [word for text in (*names, self.words) for word in text.split()]
        if any(name.startswith(wanted) for name in names):
            return 3
        if any(word.startswith(wanted) for word in words):
            return 2
        return 1 if any(wanted in text for text in (*names, self.words)) else 0


_SOURCES = "Sources"
_TRANSFORMING = "Transforming"
_CONDUCTORS = "Conductors"
_SWITCHING = "Switching"
_CONSUMERS = "Consumers"
_NOTES = "Notes"
GROUPS: Final = (_SOURCES, _TRANSFORMING, _CONDUCTORS, _SWITCHING, _CONSUMERS, _NOTES)

OFFERS: Final[tuple[Offer, ...]] = (
    Offer(_SOURCES, "supply", "Supply", "utility network feeder grid infeed"),
    Offer(_SOURCES, "synchronous_generator", "Generator", "alternator genset"),
    Offer(_SOURCES, "converter_source", "Converter", "inverter pv solar battery wind"),
    Offer(_SOURCES, "bus", "Bus", "busbar board switchboard panel mcc node"),
    Offer(_TRANSFORMING, "transformer", "Transf. 2w", "transformer two winding"),
    Offer(_TRANSFORMING, "transformer3", "Transf. 3w", "transformer three winding"),
    Offer(_TRANSFORMING, "autotransformer", "Auto-transf.", "autotransformer tertiary"),
    Offer(
        _TRANSFORMING, "earthing_transformer", "Earthing",
        "earthing grounding transformer zigzag neutral",
    ),
    Offer(_CONDUCTORS, "cable", "Cable", "cable feeder"),
    Offer(_CONDUCTORS, "overhead_line", "Overhead line", "line conductor"),
    Offer(_CONDUCTORS, "busway", "Busway", "bus duct trunking"),
    Offer(_CONDUCTORS, "reactor", "Reactor", "reactor choke limiting"),
    Offer(_SWITCHING, "breaker", "Breaker", "circuit breaker cb tie coupler"),
    Offer(_SWITCHING, "switch", "Switch", "disconnector isolator contactor tie"),
    Offer(_SWITCHING, "fuse", "Fuse", "fuse link"),
    Offer(_CONSUMERS, "induction_motor", "Motor", "induction asynchronous motor pump"),
    Offer(
        _CONSUMERS, "induction_motor", "Motor group",
        "induction asynchronous motors group lumped", {"count": "4"},
    ),
    Offer(
        _CONSUMERS, "synchronous_motor", "Sync. motor", "synchronous motor condenser"
    ),
    Offer(_CONSUMERS, "load", "Load", "load consumer feeder spare"),
    Offer(_CONSUMERS, "capacitor", "Capacitor", "capacitor bank power factor"),
    Offer(_NOTES, "note", "Note", "text remark comment words"),
)  # fmt: skip


def group_name(group: str) -> str:
    """A group's name in the language of the window."""
    return QCoreApplication.translate(_CONTEXT, group)


def found(typed: str) -> list[Offer]:
    """The offers that typed letters fit, the best first; all of them for nothing typed."""
    if not typed.strip():
        return list(OFFERS)
    scored = [(offer.score(typed), offer) for offer in OFFERS]
    return [offer for score, offer in sorted(scored, key=lambda pair: -pair[0]) if score]
