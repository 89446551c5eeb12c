"""Parts on the system's clipboard, so that they can be pasted within a plant and into another window's plant."""

from __future__ import annotations

import json

from PySide6.QtCore import QMimeData
from PySide6.QtGui import QClipboard, QGuiApplication

from onelinefault.errors import OneLineFaultError
from onelinefault.model.editing_clipboard import Fragment
from onelinefault.store.decoding import Remarks, part_from, wire_from
from onelinefault.store.file_format import part_record, wire_record

FRAGMENT_MIME = "application/x-onelinefault-parts"


def put_fragment(fragment: Fragment, clipboard: QClipboard | None = None) -> None:
    """Put parts on the clipboard; other programs see their names."""
    (clipboard or QGuiApplication.clipboard()).setMimeData(fragment_mime(fragment))


def fragment_on(clipboard: QClipboard | None = None) -> Fragment | None:
    """The parts on the clipboard; None when there are none."""
    return fragment_from((clipboard or QGuiApplication.clipboard()).mimeData())


def fragment_mime(fragment: Fragment) -> QMimeData:
    """A fragment as data for the clipboard."""
    record = {
        "parts": [part_record(part) for part in fragment.parts],
        "wires": [wire_record(wire) for wire in fragment.wires],
        "origin": list(fragment.origin),
    }
    data = QMimeData()
    data.setData(FRAGMENT_MIME, json.dumps(record).encode())
    data.setText("\n".join(part.name or part.label for part in fragment.parts))
    return data


def fragment_from(data: QMimeData | None) -> Fragment | None:
    """The fragment in some clipboard data; None when it holds none or it is damaged."""
    if data is None or not data.hasFormat(FRAGMENT_MIME):
        return None
    try:
        record = json.loads(bytes(data.data(FRAGMENT_MIME).data()).decode())
        x, y = record["origin"]
        parts = tuple(part_from(part, "clipboard", Remarks()) for part in record["parts"])
        wires = tuple(wire_from(wire, "clipboard") for wire in record["wires"])
        return Fragment(parts, wires, (int(x), int(y)))
    except (ValueError, KeyError, TypeError, OneLineFaultError):
        return None
