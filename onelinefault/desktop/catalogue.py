"""What the shelf offers: every kind of part by trade group, with a short name and the words it is looked for by."""

from collections.abc import Mapping
from dataclasses import dataclass, field
from typing import Any, Final

from PySide6.QtCore import QT_TRANSLATE_NOOP, QCoreApplication

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


_SOURCES = QT_TRANSLATE_NOOP("Catalogue", "Sources")
_TRANSFORMING = QT_TRANSLATE_NOOP("Catalogue", "Transforming")
_CONDUCTORS = QT_TRANSLATE_NOOP("Catalogue", "Conductors")
_SWITCHING = QT_TRANSLATE_NOOP("Catalogue", "Switching")
_CONSUMERS = QT_TRANSLATE_NOOP("Catalogue", "Consumers")
_NOTES = QT_TRANSLATE_NOOP("Catalogue", "Notes")
GROUPS: Final = (_SOURCES, _TRANSFORMING, _CONDUCTORS, _SWITCHING, _CONSUMERS, _NOTES)

OFFERS: Final[tuple[Offer, ...]] = (
    Offer(_SOURCES, "supply", QT_TRANSLATE_NOOP("Catalogue", "Supply"), "utility network feeder grid infeed"),
    Offer(_SOURCES, "synchronous_generator", QT_TRANSLATE_NOOP("Catalogue", "Generator"), "alternator genset"),
    Offer(_SOURCES, "converter_source", QT_TRANSLATE_NOOP("Catalogue", "Converter"), "inverter pv solar battery wind"),
    Offer(_SOURCES, "bus", QT_TRANSLATE_NOOP("Catalogue", "Bus"), "busbar board switchboard panel mcc node"),
    Offer(_TRANSFORMING, "transformer", QT_TRANSLATE_NOOP("Catalogue", "Transf. 2w"), "transformer two winding"),
    Offer(_TRANSFORMING, "transformer3", QT_TRANSLATE_NOOP("Catalogue", "Transf. 3w"), "transformer three winding"),
    Offer(_TRANSFORMING, "autotransformer", QT_TRANSLATE_NOOP("Catalogue", "Auto-transf."), "autotransformer tertiary"),
    Offer(
        _TRANSFORMING, "earthing_transformer", QT_TRANSLATE_NOOP("Catalogue", "Earthing"),
        "earthing grounding transformer zigzag neutral",
    ),
    Offer(_CONDUCTORS, "cable", QT_TRANSLATE_NOOP("Catalogue", "Cable"), "cable feeder"),
    Offer(_CONDUCTORS, "overhead_line", QT_TRANSLATE_NOOP("Catalogue", "Overhead line"), "line conductor"),
    Offer(_CONDUCTORS, "busway", QT_TRANSLATE_NOOP("Catalogue", "Busway"), "bus duct trunking"),
    Offer(_CONDUCTORS, "reactor", QT_TRANSLATE_NOOP("Catalogue", "Reactor"), "reactor choke limiting"),
    Offer(_SWITCHING, "breaker", QT_TRANSLATE_NOOP("Catalogue", "Breaker"), "circuit breaker cb tie coupler"),
    Offer(_SWITCHING, "switch", QT_TRANSLATE_NOOP("Catalogue", "Switch"), "disconnector isolator contactor tie"),
    Offer(_SWITCHING, "fuse", QT_TRANSLATE_NOOP("Catalogue", "Fuse"), "fuse link"),
    Offer(_CONSUMERS, "induction_motor", QT_TRANSLATE_NOOP("Catalogue", "Motor"), "induction asynchronous motor pump"),
    Offer(
        _CONSUMERS, "induction_motor", QT_TRANSLATE_NOOP("Catalogue", "Motor group"),
        "induction asynchronous motors group lumped", {"count": "4"},
    ),
    Offer(
        _CONSUMERS, "synchronous_motor", QT_TRANSLATE_NOOP("Catalogue", "Sync. motor"), "synchronous motor condenser"
    ),
    Offer(_CONSUMERS, "load", QT_TRANSLATE_NOOP("Catalogue", "Load"), "load consumer feeder spare"),
    Offer(_CONSUMERS, "capacitor", QT_TRANSLATE_NOOP("Catalogue", "Capacitor"), "capacitor bank power factor"),
    Offer(_NOTES, "note", QT_TRANSLATE_NOOP("Catalogue", "Note"), "text remark comment words"),
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
