"""Ratings that are more than one number: neutral earthing, vector group, conductor size, line geometry.

Each value keeps the text it was read from and equals another only when the texts agree.
"""

import math
import re
from dataclasses import dataclass

from onelinefault.errors import EntryError
from onelinefault.model.quantity import (
    EARTHING_IMPEDANCE,
    LENGTH,
    TIME,
    Quantity,
    read_number,
    read_quantity,
    read_unit,
)

ODD_PAIRS = {frozenset("DY"), frozenset("YZ")}  # a delta or zigzag against a star turns by an odd number of clock hours


@dataclass(frozen=True, slots=True)
class Neutral:
    """How a star point is earthed: "isolated", "solid", "resistor 400 A 10 s", "reactor 5 ohm"."""

    form: str
    size: Quantity | None
    duration: Quantity | None
    text: str

    @property
    def earthed(self) -> bool:
        """True unless the star point is isolated."""
        return self.form != "isolated"

    def z_ohm(self, line_kv: float) -> complex:
        """Impedance from star point to earth in ohm; a size in A is at line-to-neutral voltage (common practice).

        Raises EntryError when the star point is isolated: it has no impedance.
        """
        if self.form == "isolated":
            raise EntryError("an isolated star point has no impedance to earth")
        if self.size is None:
            return 0j
        ohm = line_kv / math.sqrt(3) / self.size.to("kA") if self.size.dimension == "current" else self.size.to("ohm")
        return complex(ohm, 0) if self.form == "resistor" else complex(0, ohm)


def read_neutral(text: str) -> Neutral:
    """Read a star point's earthing. Raises EntryError with the accepted forms."""
    words = " ".join(text.split())
    form, _, rest = words.partition(" ")
    form = {"solidly": "solid", "earthed": "solid", "unearthed": "isolated", "open": "isolated"}.get(
        form.lower(), form.lower()
    )
    if form in ("isolated", "solid"):
        return Neutral(form, None, None, form)
    if form not in ("resistor", "reactor") or not rest:
        raise EntryError(f"{words or 'nothing'}: write isolated, solid, resistor 400 A 10 s, or reactor 5 ohm")
    match = re.fullmatch(r"(.+?)(?:[ ,]+([\d.,]+ *(?:s|sec|min|h)))?", rest)
    assert match is not None
    size = read_quantity(match.group(1), EARTHING_IMPEDANCE)
    if size.value <= 0:
        raise EntryError(f"{words}: the {form} must be larger than zero; write solid for a direct connection")
    duration = read_quantity(match.group(2), TIME) if match.group(2) else None
    return Neutral(form, size, duration, f"{form} {rest}")


@dataclass(frozen=True, slots=True)
class VectorGroup:
    """Winding connections and clock numbers: "Dyn11", "YNyn0d11", "YNa0d5" (IEC 60076-1).

    connections: capital letters without N, the high side first, e.g. ("D", "Y"); "A" marks an autotransformer's side.
    brought_out: whether each winding's neutral is accessible. clocks: hours that each further winding lags the first.
    """

    connections: tuple[str, ...]
    brought_out: tuple[bool, ...]
    clocks: tuple[int, ...]
    text: str


_GROUP = re.compile(r"(D|YN|Y|ZN|Z)((?:(?:d|yn|y|zn|z|a)\d{1,2})+)")


def read_vector_group(text: str) -> VectorGroup:
    """Read a vector group. Raises EntryError for spellings and clock numbers that no transformer can have."""
    text = text.replace(" ", "").replace(",", "").replace("-", "")
    match = _GROUP.fullmatch(text)
    if match is None:
        raise EntryError(f"{text or 'nothing'}: write the vector group as on the nameplate, for example Dyn11 or YNd1")
    first = match.group(1)
    connections, brought_out, clocks = [first[0]], [first.endswith("N")], []
    for letters, hour in re.findall(r"(d|yn|y|zn|z|a)(\d{1,2})", match.group(2)):
        connections.append(letters[0].upper())
        brought_out.append(letters.endswith("n") or letters == "a")
        clocks.append(_clock(text, first[0], letters, int(hour)))
    return VectorGroup(tuple(connections), tuple(brought_out), tuple(clocks), text)


def _clock(text: str, first: str, letters: str, hour: int) -> int:
    if hour > 12:
        raise EntryError(f"{text}: a clock number lies between 0 and 11")
    if letters == "a" and hour != 0:
        raise EntryError(f"{text}: an autotransformer's common winding has clock number 0")
    odd = frozenset((first, letters[0].upper())) in ODD_PAIRS
    if letters != "a" and (hour % 2 == 1) != odd:
        raise EntryError(f"{text}: {first}{letters} has {'an odd' if odd else 'an even'} clock number, never {hour}")
    return hour % 12


@dataclass(frozen=True, slots=True)
class ConductorSize:
    """Cross-section of one conductor, and cables in parallel: "240 mm²", "2x240 mm²", "3c 95 mm²", "4/0 AWG".

    cores is 1 or the number typed before "c"; it does not change the impedance of a phase.
    """

    area_mm2: float
    runs: int
    cores: int
    trade_size: str
    text: str


def awg_area_mm2(gauge: str) -> float:
    """Area in mm² of an American wire gauge "14" ... "4/0" or "0000" (ASTM B258: d = 0.127 mm · 92^((36−n)/39)).

    Raises EntryError for a gauge that does not exist.
    """
    if re.fullmatch(r"0{1,4}", gauge):
        gauge = f"{len(gauge)}/0"
    n = 1 - int(gauge[0]) if re.fullmatch(r"[1-4]/0", gauge) else int(gauge) if gauge.isdecimal() else 99
    if not -3 <= n <= 36:
        raise EntryError(f"{gauge} AWG is not a wire gauge")
    diameter_mm: float = 0.127 * 92.0 ** ((36 - n) / 39)
    return math.pi / 4 * diameter_mm**2


def read_conductor_size(text: str) -> ConductorSize:
    """Read a conductor size. "2x" before it counts cables in parallel; "3c" counts cores of one cable.

    Raises EntryError with examples.
    """
    text = " ".join(text.split())
    match = re.fullmatch(r"(?:(\d+) ?[x×*] ?)?(?:(\d)c ?[x×]? ?)?([\d./,]+) ?(.*)", text, re.I)
    if match is None or match.group(1) == "0":
        raise EntryError(f"{text or 'nothing'}: write a size like 240 mm², 2x240 mm², 3c 95 mm², 4/0 AWG or 500 kcmil")
    runs, cores, number, unit = int(match.group(1) or 1), int(match.group(2) or 1), match.group(3), match.group(4)
    if unit.upper() == "AWG" or ("/" in number and not unit):
        return ConductorSize(awg_area_mm2(number), runs, cores, number, text)
    size = Quantity(read_number(number), read_unit(unit) or "" if unit else "mm²", text)
    if size.dimension != "area" or size.value <= 0:
        raise EntryError(f"{text}: write a size like 240 mm², 2x240 mm², 3c 95 mm², 4/0 AWG or 500 kcmil")
    trade = f"{size.value:g}" if size.unit == "mm²" else f"{size.value:g} {size.unit}"
    return ConductorSize(size.to("mm²"), runs, cores, trade, text if unit else f"{text} mm²")


@dataclass(frozen=True, slots=True)
class LineGeometry:
    """Where the conductors of an overhead line hang: "a 0 29; b 2.5 29; c 7 29; n 4 25; ft".

    points: (name, x_m, y_m) with a, b, c once each and any number of n (earth wires or neutrals), y above earth.
    """

    points: tuple[tuple[str, float, float], ...]
    text: str


def read_line_geometry(text: str) -> LineGeometry:
    """Read conductor positions. Raises EntryError when a phase is missing, doubled, below earth or on another one."""
    pieces = [p.strip() for p in text.split(";") if p.strip()]
    unit = pieces.pop() if pieces and read_unit(pieces[-1]) in LENGTH.units() else "m"
    metres = Quantity(1.0, read_unit(unit) or "m", unit).to("m")
    points = []
    for piece in pieces:
        words = piece.split()
        if len(words) != 3 or words[0] not in ("a", "b", "c", "n"):
            raise EntryError(
                f"{piece}: write each conductor as its phase, x and height: a 0 29; b 2.5 29; c 7 29; n 4 25; ft"
            )
        points.append((words[0], read_number(words[1]) * metres, read_number(words[2]) * metres))
    if sorted(p[0] for p in points if p[0] != "n") != ["a", "b", "c"]:
        raise EntryError("a line has one conductor each for a, b and c")
    if any(y <= 0 for _, _, y in points) or len({(x, y) for _, x, y in points}) < len(points):
        raise EntryError("every conductor hangs above earth, at a place of its own")
    return LineGeometry(tuple(points), text.strip())
