"""The annotated sheet as a file: plant, overlay, title block, legend and caution together."""

from pathlib import Path

from onelinefault.drawing.export import DrawnSheet, write_sheets
from onelinefault.drawing.overlay_picture import overlay_picture
from onelinefault.drawing.page import Stamp, page_shapes
from onelinefault.drawing.part_picture import Roles
from onelinefault.drawing.sheet import sheet_picture
from onelinefault.engine.network import Network
from onelinefault.engine.results import FaultResult
from onelinefault.errors import OutputError
from onelinefault.model.plant import Plant, Sheet
from onelinefault.report.overlay_data import METHOD_WORDS, fault_words, overlay_data, roles_of


def stamp_of(plant: Plant, result: FaultResult | None, arrangement: str = "as drawn", *, stale: bool = False) -> Stamp:
    """What the title block says of the figures on the sheet."""
    if result is None:
        return Stamp(arrangement=arrangement)
    words = fault_words(plant, result)
    return Stamp(
        METHOD_WORDS.get(result.case.method, result.case.method), words + (" · STALE" if stale else ""), arrangement
    )


def drawn_sheet(
    plant: Plant, sheet: Sheet, roles: Roles, result: FaultResult | None, *,
    detail: int = 2, arrangement: str = "as drawn", stale: bool = False,
) -> DrawnSheet:  # fmt: skip
    """One finished sheet. result: the fault to show, or None for the plain diagram."""
    picture = sheet_picture(plant, sheet.id, roles)
    page = page_shapes(plant, sheet, stamp_of(plant, result, arrangement, stale=stale))
    width, height = sheet.size_mm
    if result is None:
        return DrawnSheet((*page, *picture.shapes()), width, height)
    overlay = overlay_picture(plant, picture, overlay_data(plant, result, detail, stale=stale))
    return DrawnSheet((*page, *overlay.under, *picture.shapes(), *overlay.above()), width, height)


def write_drawing(
    plant: Plant, network: Network, result: FaultResult | None, path: Path, *,
    sheet_ids: tuple[str, ...] = (), detail: int = 2, arrangement: str = "as drawn",
    paper_mm: tuple[float, float] | None = None,
) -> list[Path]:  # fmt: skip
    """Write the annotated sheets: those named, else the one with the fault first and then the others.

    Returns the files written. Raises OutputError when a sheet does not exist or the file cannot be written.
    """
    roles = roles_of(network)
    ordered = _chosen_sheets(plant, result, sheet_ids)
    sheets = [drawn_sheet(plant, s, roles, result, detail=detail, arrangement=arrangement) for s in ordered]
    return write_sheets(sheets, path, plant.document.name or "One-line diagram", paper_mm)


def _chosen_sheets(plant: Plant, result: FaultResult | None, sheet_ids: tuple[str, ...]) -> list[Sheet]:
    chosen = []
    for sheet_id in sheet_ids:
        sheet = plant.sheet(sheet_id)
        if sheet is None:
            known = ", ".join(s.title for s in plant.sheets)
            raise OutputError(f"the plant has no sheet {sheet_id}; it has {known}")
        chosen.append(sheet)
    if chosen:
        return chosen
    at = plant.parts.get(result.fault.place.part) if result else None
    return sorted(plant.sheets, key=lambda s: at is not None and s.id != at.sheet)
