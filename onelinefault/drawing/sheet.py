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
        self._obstacles, self._wire_regions = Obstacles(), Obstacles()
        self._wires_of: dict[str, set[str]] = {}
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
        parts = self._parts_to_renew(before, recolour)
        touched, regions = self._renew_parts(parts)
        wires = self._wires_to_renew(before, parts, regions, everything=recolour or before.sheets is not plant.sheets)
        return frozenset(touched | self._renew_wires(wires))

    def _parts_to_renew(self, before: Plant, recolour: bool) -> set[str]:
        after = self._plant
        if before.parts is after.parts and not recolour:
            return set()
        keys = before.parts.keys() | after.parts.keys()
        return {k for k in keys if recolour or before.parts.get(k) is not after.parts.get(k)}

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
        """Wires that have changed, end on a changed part, or run near where an obstacle came or went."""
        found: set[str] = set()
        if before.wires is not self._plant.wires:
            found = {
                key
                for key in before.wires.keys() | self._plant.wires.keys()
                if everything or before.wires.get(key) is not self._plant.wires.get(key)
            }
            self._index(before, found)
        elif everything:
            found = set(self._plant.wires)
        for part in parts:
            found |= self._wires_of.get(part, set())
        for region in regions:
            found |= self._wire_regions.keys_near(region)
        return found

    def _index(self, before: Plant, changed: set[str]) -> None:
        """Which wires end on which part."""
        for key in changed:
            for plant, add in ((before, False), (self._plant, True)):
                wire = plant.wires.get(key)
                for end in wire.ends if wire is not None else ():
                    keys = self._wires_of.setdefault(end.part, set())
                    keys.add(key) if add else keys.discard(key)

    def _renew_wires(self, keys: set[str]) -> set[str]:
        touched = set()
        for key in keys:
            wire = self._plant.wires.get(key)
            old = self._wires.get(key)
            if wire is None or (wire.a.part not in self._parts and wire.b.part not in self._parts):
                self._wires.pop(key, None)
                self._wire_regions.put(key, None)
                new = None
            else:
                new = self._wires[key] = wire_picture(self._plant, wire, self._sheet, self._obstacles, self._roles)
                self._wire_regions.put(key, wire_region(self._plant, wire))
            if new != old:
                touched.add(key)
        return touched
