"""The command line: open a plant, print its bus table, draw its sheets, list what its data lack.

Exit codes: 0 done; 1 ``check`` found errors in the data; 2 wrong use, or a file or study that cannot be done; 4 the
table could be made but nothing could be drawn, because Qt misses system libraries.
"""

import argparse
import codecs
import contextlib
import math
import os
import sys
from collections.abc import Callable, Sequence
from pathlib import Path
from typing import TYPE_CHECKING, Any, Final

from onelinefault import __version__
from onelinefault.errors import EntryError, OneLineFaultError, OutputError
from onelinefault.model.fault import FaultKind
from onelinefault.model.plant import PAPER_MM
from onelinefault.model.quantity import IMPEDANCE, PER_UNIT, read_quantity
from onelinefault.store.plant_file import SUFFIX, read_plant

if TYPE_CHECKING:
    from onelinefault.report.outputs import Outputs

DONE: Final = 0
ERRORS_FOUND: Final = 1
REFUSED: Final = 2
NOT_DRAWN: Final = 4
_COMMANDS: Final = ("open", "faults", "draw", "check")
_ABOUT: Final = """\
Draw a plant's one-line diagram, fault a bus with a click, see the currents and voltages on the drawing.

  onelinefault FILE          open the plant in the window; where there is no display: print its bus table and
                             write the annotated sheets as PDF beside the file
  onelinefault faults FILE   print the short-circuit currents of all buses
  onelinefault draw FILE     write the annotated sheets as PDF, SVG or PNG
  onelinefault check FILE    list what the data lack
"""
_CODES: Final = """\
exit codes: 0 done; 1 check found errors in the data; 2 wrong use, or a file or study that cannot be done;
4 nothing could be drawn because Qt misses system libraries (they are named)
"""
_JSON: Final = """\
--format json prints one object: "caution", "plant", "method", "level", "moment", "frequency_hz", "prefault_pu",
"arrangement", "findings", and "rows", one for each bus and kind of fault, with "bus", "nominal_kv", "kind", "ik_ka"
(largest phase), "phases_ka", "phases_deg", "residual_ka" (3I0), "x_over_r", "fault_level_mva", "peak_ka", "z1_ohm",
"z2_ohm", "z0_ohm" (each [r, x]; null where open) and "assumed" (parts whose data are typical or guessed).
"""


def main(argv: Sequence[str] | None = None) -> int:
    """Run one command; returns the exit code. Errors meant for the user are one line on the error output."""
    words = list(sys.argv[1:] if argv is None else argv)
    _make_printable()
    if words and words[0] not in (*_COMMANDS, "-h", "--help", "--version"):
        words.insert(0, "open")
    arguments = _parser().parse_args(words or ["open"])
    run: Callable[[argparse.Namespace], int] = arguments.run
    try:
        code = run(arguments)
        sys.stdout.flush()
    except OneLineFaultError as error:
        return _refuse(str(error))
    except BrokenPipeError:  # the reader has seen enough
        os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())
        return DONE
    except KeyboardInterrupt:
        return _refuse("stopped")
    return code


def _refuse(message: str) -> int:
    print(f"onelinefault: {' '.join(message.split())}", file=sys.stderr)
    return REFUSED


def _make_printable() -> None:
    """Letters that the terminal does not have are written in plain ones; line ends stay as they are."""
    codecs.register_error("onelinefault.plain", _plainer)
    for stream in (sys.stdout, sys.stderr):
        with contextlib.suppress(AttributeError, ValueError):
            stream.reconfigure(errors="onelinefault.plain", newline="")  # type: ignore[union-attr]


def _plainer(error: UnicodeError) -> tuple[str, int]:
    plain = {"″": '"', "Ω": "ohm", "→": "->", "−": "-", "–": "-", "∞": "inf", "∠": "<"}
    assert isinstance(error, UnicodeEncodeError)
    return "".join(plain.get(letter, "?") for letter in error.object[error.start : error.end]), error.end


def _parser() -> argparse.ArgumentParser:
    raw = argparse.RawDescriptionHelpFormatter
    parser = argparse.ArgumentParser("onelinefault", description=_ABOUT, epilog=_CODES, formatter_class=raw)
    parser.add_argument("--version", action="version", version=f"onelinefault {__version__}")
    commands = parser.add_subparsers(metavar="COMMAND", required=True)

    opened = commands.add_parser("open", help="open a plant in the window (the word open may be left out)")
    opened.add_argument("file", nargs="?", help=f"a plant file (NAME{SUFFIX}); none: an empty sheet")
    opened.add_argument("-o", "--output", metavar="OUT", help="where the PDF goes when there is no display")
    _add_state(opened)
    opened.set_defaults(run=_open)

    faults = commands.add_parser("faults", help="print the bus table", epilog=_JSON, formatter_class=raw)
    faults.add_argument("file", help="a plant file")
    faults.add_argument("--at", metavar="NAME", action="append", default=[], help="only here: a bus, or T1.low; repeat")
    faults.add_argument("--kind", action="append", choices=list(FaultKind), help="only this kind of fault; repeat")
    _add_state(faults)
    _add_impedances(faults)
    _add_format(faults)
    faults.set_defaults(run=_faults)

    draw = commands.add_parser("draw", help="write the annotated sheets as PDF, SVG or PNG")
    draw.add_argument("file", help="a plant file")
    draw.add_argument("--fault", metavar="NAME", help="where: a bus, T1.low, or a cable with --along; none: no figures")
    draw.add_argument("--kind", choices=list(FaultKind), default=str(FaultKind.THREE_PHASE), help="kind of fault")
    draw.add_argument("--phases", default="", help="which: a, b, c, ab, bc, ca; else the usual ones")
    draw.add_argument("--along", metavar="FRACTION", help="how far along the cable, line or busway: 0.4 or 40 %%")
    draw.add_argument("--sheet", metavar="TITLE", action="append", default=[], help="only this sheet; repeat")
    draw.add_argument("--detail", type=int, choices=(1, 2, 3), default=2, help="depth of the figures (2)")
    draw.add_argument("--paper", choices=list(PAPER_MM), help="fit every sheet to this paper")
    draw.add_argument("-o", "--output", metavar="OUT", required=True, help="a file ending in .pdf, .svg or .png")
    _add_state(draw)
    _add_impedances(draw)
    draw.set_defaults(run=_draw)

    check = commands.add_parser("check", help="list what the data lack; exit code 1 when there are errors")
    check.add_argument("file", help="a plant file")
    _add_state(check)
    _add_format(check)
    check.set_defaults(run=_check)
    for command in (opened, draw, check):
        command.epilog = _CODES
    return parser


def _add_state(parser: argparse.ArgumentParser) -> None:
    parser.add_argument(
        "--method", choices=("classical", "iec60909"), default="classical", help="method of calculation (classical)"
    )
    parser.add_argument("--level", choices=("max", "min"), default="max", help="largest or smallest supply (max)")
    parser.add_argument("--arrangement", metavar="NAME", help="a running arrangement; else as drawn")


def _add_impedances(parser: argparse.ArgumentParser) -> None:
    parser.add_argument("--zf", metavar="OHM", default="0", help="impedance of the fault: 0.5, 0.1+0.2j, 50 mohm")
    parser.add_argument("--zg", metavar="OHM", default="0", help="common impedance to earth")


def _add_format(parser: argparse.ArgumentParser) -> None:
    parser.add_argument("--format", choices=("table", "json", "csv"), default="table", help="for people or programs")
    parser.add_argument("-o", "--output", metavar="OUT", help="write to this file (UTF-8) instead of printing")


def _open(arguments: argparse.Namespace) -> int:
    """The main command: a window where there can be one, else the table and the PDF."""
    from onelinefault.report.screen import qt_trouble, window_trouble  # noqa: PLC0415 - only where it is needed

    path = Path(arguments.file) if arguments.file else None
    trouble = window_trouble(os.environ)
    if not trouble:
        if path is not None and not path.is_file():
            read_plant(path)  # says what is wrong with it
        try:
            from onelinefault.desktop.app import run  # noqa: PLC0415
        except ImportError as error:
            trouble = qt_trouble(error)
        else:
            return run(arguments.file)
    if path is None:
        return _refuse(f"{trouble}; name a plant file to print its bus table, or see onelinefault --help")
    return _print_and_draw(path, arguments, trouble)


def _print_and_draw(path: Path, arguments: argparse.Namespace, trouble: str) -> int:
    from onelinefault.report.tables import bus_text  # noqa: PLC0415

    outputs = _outputs(path, arguments)
    table = outputs.table()
    sys.stdout.write(bus_text(table) + "\n")
    sys.stdout.flush()
    result = outputs.largest(table)
    beside = path.with_name(path.name.removesuffix(SUFFIX).removesuffix(".json") + ".pdf")
    wanted = Path(arguments.output) if arguments.output else beside
    try:
        written = _drawn(outputs, result, wanted)
    except OutputError as error:
        if arguments.output:
            raise
        _refuse(str(error))
        written = _drawn(outputs, result, Path(wanted.name))
    if written is None:
        return NOT_DRAWN
    print(f"{trouble[:1].upper()}{trouble[1:]}. The annotated sheets are in {', '.join(map(str, written))}.")
    return DONE


def _faults(arguments: argparse.Namespace) -> int:
    from onelinefault.report import tables  # noqa: PLC0415
    from onelinefault.studies import Asked  # noqa: PLC0415

    kinds = tuple(FaultKind(kind) for kind in arguments.kind or FaultKind)
    asked = Asked(kinds, tuple(arguments.at), _ohm(arguments.zf), _ohm(arguments.zg))
    table = _outputs(arguments.file, arguments).table(asked)
    write = {"table": tables.bus_text, "json": tables.bus_json, "csv": tables.bus_csv}[arguments.format]
    _give(write(table), arguments.output)
    return DONE


def _check(arguments: argparse.Namespace) -> int:
    from onelinefault.model.findings import Severity  # noqa: PLC0415
    from onelinefault.report import tables  # noqa: PLC0415

    outputs = _outputs(arguments.file, arguments)
    write = {"table": tables.findings_text, "json": tables.findings_json, "csv": tables.findings_csv}[arguments.format]
    _give(write(outputs.plant, outputs.findings), arguments.output)
    return ERRORS_FOUND if any(finding.severity is Severity.ERROR for finding in outputs.findings) else DONE


def _draw(arguments: argparse.Namespace) -> int:
    from onelinefault.model.fault import Fault  # noqa: PLC0415
    from onelinefault.studies import place_at  # noqa: PLC0415

    outputs = _outputs(arguments.file, arguments)
    result = None
    if arguments.fault:
        along = None if arguments.along is None else _fraction(arguments.along)
        place = place_at(outputs.plant, arguments.fault, along)
        zf, zg = _ohm(arguments.zf), _ohm(arguments.zg)
        result = outputs.study.fault(Fault(place, FaultKind(arguments.kind), arguments.phases, zf, zg))
    paper = PAPER_MM[arguments.paper] if arguments.paper else None
    written = _drawn(outputs, result, Path(arguments.output), arguments.sheet, arguments.detail, paper)
    if written is None:
        return NOT_DRAWN
    print(f"Written: {', '.join(map(str, written))}")
    return DONE


def _outputs(file: str | Path, arguments: argparse.Namespace) -> "Outputs":
    """The opened plant with the state that the command line asks for."""
    opened = read_plant(file)
    from onelinefault.engine.case import Case  # noqa: PLC0415 - numpy and scipy come after the file has been found good
    from onelinefault.report.outputs import Outputs  # noqa: PLC0415

    case = Case(method=arguments.method, level=arguments.level)
    return Outputs(opened.plant, case, arguments.arrangement, opened.findings)


def _drawn(outputs: "Outputs", *what: Any) -> list[Path] | None:
    """Draw as ``Outputs.draw``; None, with the packages named on the error output, where Qt cannot be loaded."""
    from onelinefault.report.screen import draw_without_screen, qt_trouble  # noqa: PLC0415

    draw_without_screen()
    try:
        return outputs.draw(*what)
    except ImportError as error:
        _refuse(qt_trouble(error))
        return None


def _ohm(text: str) -> complex:
    """An impedance: "0.5", "0.1+0.2j" or "50 mohm". Raises EntryError when it is none."""
    try:
        value = complex(text.replace(" ", ""))
    except ValueError:
        value = complex(read_quantity(text, IMPEDANCE).to("ohm"))
    if not (math.isfinite(value.real) and math.isfinite(value.imag)):
        raise EntryError(f"{text}: an impedance of a fault is a number of ohms")
    return value


def _fraction(text: str) -> float:
    """A fraction from 0 to 1: "0.4" or "40 %". Raises EntryError when it is none."""
    value = read_quantity(text, PER_UNIT).to("pu")
    if not 0 <= value <= 1:
        raise EntryError(f"{text}: how far along must lie between 0 and 1 (0 % and 100 %)")
    return value


def _give(text: str, output: str | None) -> None:
    """Print, or write to a file in UTF-8. Raises OutputError when the file cannot be written."""
    if output is None:
        sys.stdout.write(text)
        return
    try:
        Path(output).write_text(text, encoding="utf-8", newline="")
    except (OSError, ValueError) as error:
        reason = getattr(error, "strerror", None) or str(error)
        raise OutputError(f"{output} cannot be written: {reason}; choose another folder or file name") from None


if __name__ == "__main__":
    sys.exit(main())
