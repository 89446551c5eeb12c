"""What is to be said about one fault's result, as findings."""

from collections.abc import Sequence

from onelinefault.model.findings import Finding, Severity


def dead(label: str, parts: tuple[str, ...]) -> Finding:
    """No source feeds the faulted place."""
    return Finding(
        Severity.WARNING,
        "dead",
        f"No source feeds {label}, so no fault current flows there.",
        "Close a switch towards a source or put one in service.",
        parts,
    )


def unearthed(label: str, parts: tuple[str, ...]) -> Finding:
    """An earth fault in a network without any path to earth."""
    return Finding(
        Severity.HINT,
        "unearthed",
        f"The network at {label} has no path to earth: one line to earth carries no current, and the healthy lines rise"
        " to the line-to-line voltage. Cable charging is left out unless asked for.",
        "Earth a star point if this is not meant.",
        parts,
    )


def unsettled(titles: Sequence[str], parts: tuple[str, ...]) -> Finding:
    """Converters whose current did not come to rest; titles: as in messages."""
    return Finding(
        Severity.WARNING,
        "converter-unsettled",
        f"The current of {', '.join(titles)} did not come to rest in 50 rounds; the last value is shown.",
        "Check the rated power and the angle during the fault: behind a weak network a converter may have no rest.",
        parts,
    )


def assumed(names: Sequence[str]) -> Finding:
    """The result rests on data that nobody has read off a nameplate; names: of the parts."""
    return Finding(
        Severity.HINT,
        "assumed",
        f"The result rests on typical or guessed data of {', '.join(names)}.",
        "Type the nameplate values, or mark them as read from the nameplate.",
    )
