"""The picture of a whole sheet: every part, every wire, from the plant alone; and its renewal after an edit."""

from collections.abc import Mapping
from dataclasses import dataclass

from onelinefault.drawing.part_picture import PartPicture, Roles, part_picture
from onelinefault.drawing.routing_lattice import Box as GridBox
from onelinefault.drawing.shapes import Shapes
from onelinefault.drawing.wire_picture import Obstacles, WirePicture, obstacle, wire_picture, wire_region
from onelinefault.model.plant import Plant, Sheet


@dataclass(frozen=True)
class SheetPicture:
    """All pictures of a sheet by id; wires lie under parts, words above all."""

    sheet: Sheet
    parts: Mapping[str, PartPicture]
    wires: Mapping[str, WirePicture]

    def shapes(self) -> Shapes:
        """One display list: wires, symbols, words."""
        listed: list[Shapes] = [w.shapes for w in self.wires.values()]
        listed += [p.shapes for p in self.parts.values()]
        listed += [p.words for p in self.parts.values()]
        return tuple(shape for shapes in listed for shape in shapes)


def sheet_picture(plant: Plant, sheet_id: str, roles: Roles) -> SheetPicture:
    """The picture of a sheet. roles: colour role of each terminal's voltage level.

    Raises KeyError when the plant has no such sheet.
    """
    return SheetDrawing(plant, sheet_id, roles).picture


class SheetDrawing:
    """The picture of a sheet that follows the plant: ``show`` draws anew only what an edit has touched."""

    def __init__(self, plant: Plant, sheet_id: str, roles: Roles) -> None:
        sheet = plant.sheet(sheet_id)
        if sheet is None:
            raise KeyError(sheet_id)
        self._sheet = sheet
        self._roles = roles
        self._plant = Plant(sheets=plant.sheets)
        self._obstacles = Obstacles()
        self._parts: dict[str, PartPicture] = {}
        self._wires: dict[str, WirePicture] = {}
        self.show(plant)

    @property
    def picture(self) -> SheetPicture:
        """The picture as it stands; a view of this drawing, not a copy."""
        return SheetPicture(self._sheet, self._parts, self._wires)

    @property
    def plant(self) -> Plant:
        """The plant that is shown."""
        return self._plant

    def show(self, plant: Plant, roles: Roles | None = None) -> frozenset[str]:
        """Show another value of the plant; the ids of all parts and wires whose picture changed or went."""
        recolour = roles is not None and roles != self._roles
        if roles is not None:
            self._roles = roles
        before, self._plant = self._plant, plant
        self._sheet = plant.sheet(self._sheet.id) or self._sheet
        keys = before.parts.keys() | plant.parts.keys()
        parts = {k for k in keys if recolour or before.parts.get(k) is not plant.parts.get(k)}
        touched, regions = self._renew_parts(parts)
        wires = self._wires_to_renew(before, parts, regions, everything=recolour or before.sheets is not plant.sheets)
        return frozenset(touched | self._renew_wires(wires))

    def _renew_parts(self, keys: set[str]) -> tuple[set[str], list[GridBox]]:
        """Draw these parts anew; which pictures changed, and where obstacles came or went."""
        touched, regions = set(), []
        for key in keys:
            part = self._plant.parts.get(key)
            old = self._parts.get(key)
            if part is None or part.sheet != self._sheet.id:
                self._parts.pop(key, None)
                new = None
            else:
                new = self._parts[key] = part_picture(part, self._roles)
            box = obstacle(new) if new is not None and part is not None and part.terminals else None
            old_box = self._obstacles.get(key)
            if box != old_box:
                regions += [b for b in (box, old_box) if b is not None]
                self._obstacles.put(key, box)
            if new != old:
                touched.add(key)
        return touched, regions

    def _wires_to_renew(self, before: Plant, parts: set[str], regions: list[GridBox], *, everything: bool) -> set[str]:
        plant = self._plant
        keys = before.wires.keys() | plant.wires.keys()
        if everything:
            return set(keys)
        found = set()
        for key in keys:
            wire = plant.wires.get(key)
            if wire is None or before.wires.get(key) is not wire or wire.a.part in parts or wire.b.part in parts:
                found.add(key)
            elif key in self._wires and regions:
                left, top, right, bottom = wire_region(plant, wire)
                if any(b[0] < right and left < b[2] and b[1] < bottom and top < b[3] for b in regions):
                    found.add(key)
        return found

    def _renew_wires(self, keys: set[str]) -> set[str]:
        touched = set()
        for key in keys:
            wire = self._plant.wires.get(key)
            old = self._wires.get(key)
            if wire is None or (wire.a.part not in self._parts and wire.b.part not in self._parts):
                self._wires.pop(key, None)
                new = None
            else:
                new = self._wires[key] = wire_picture(self._plant, wire, self._sheet, self._obstacles, self._roles)
            if new != old:
                touched.add(key)
        return touched
