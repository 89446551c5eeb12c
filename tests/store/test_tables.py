"""The shipped tables: readable, honest about their sources, and equal to the published figures."""

import json
import shutil
from pathlib import Path

import pytest

from onelinefault.errors import TablesError
from onelinefault.store.tables import load_tables, read_tables, tables_folder

FILES = sorted(path.name for path in tables_folder().glob("*.json"))
STATUSES = {"confirmed", "memory", "mixed", "common practice"}


def test_they_are_read_once() -> None:
    assert load_tables() is load_tables()


@pytest.mark.parametrize("name", FILES)
def test_every_table_says_where_it_comes_from(name: str) -> None:
    file = json.loads((tables_folder() / name).read_text(encoding="utf-8"))
    assert file["title"] and set(file["status_words"]) == STATUSES
    for key, table in file.items():
        if key not in ("title", "status_words"):
            assert table["source"] and table["status"] in STATUSES and isinstance(table["from_memory"], bool), key
            assert (table["status"] == "confirmed") <= (not table["from_memory"]), key
            assert (table["status"] == "confirmed") <= bool(table.get("confirmed_by")), key
            source = load_tables().sources[key]
            assert (source.source, source.status) == (table["source"], table["status"])


def test_published_figures() -> None:
    tables = load_tables()
    # IEC 60228 table 2, class 2, plain copper and aluminium
    assert [tables.conductors["copper"][a] for a in (16, 50, 95, 185, 300)] == [1.15, 0.387, 0.193, 0.0991, 0.0601]
    assert [tables.conductors["aluminium"][a] for a in (16, 50, 95, 185, 300)] == [1.91, 0.641, 0.32, 0.164, 0.1]
    # NEC chapter 9 table 9
    assert tables.conduits["2"].r["cu_steel"] == 0.2 and tables.conduits["2"].x_steel == 0.057
    assert tables.conduits["1/0"].r["al_pvc"] == 0.2 and tables.conduits["14"].r["al_pvc"] is None
    assert tables.conduits["500 kcmil"].area_mm2 == pytest.approx(253.4, abs=0.05)
    # NEMA MG 1-10.37
    assert tables.code_letters["G"] == (5.6, 6.29) and tables.code_letters["V"] == (22.4, None)
    # IEEE 141-1993 table 4A-1
    salient = next(m for m in tables.machines if m.label.startswith("salient pole generator with dampers, 12"))
    assert (salient.subtransient, salient.transient) == (0.16, 0.33)


def test_rows_are_in_order() -> None:
    tables = load_tables()
    for rows in (tables.transformer_z_iec, tables.transformer_z_ansi):
        sizes = [row.kva_to for row in rows if row.kva_to is not None]
        assert sizes == sorted(sizes) and all(row.kva_to is not None for row in rows[:-1])
    assert list(tables.load_loss_w) == sorted(tables.load_loss_w)
    assert [w for _, w in tables.load_loss_w] == sorted(w for _, w in tables.load_loss_w)
    constructions = {row.construction for row in tables.cable_reactances}
    for construction in constructions:  # a row for every voltage, the open one last
        limits = [row.kv_to for row in tables.cable_reactances if row.construction == construction]
        assert limits[-1] is None and None not in limits[:-1]


@pytest.mark.parametrize("name", FILES)
@pytest.mark.parametrize("damage", ["gone", "cut short", "not a table", "rows missing"])
def test_damage_is_named(tmp_path: Path, name: str, damage: str) -> None:
    folder = tmp_path / "tables"
    shutil.copytree(tables_folder(), folder)
    file = folder / name
    text = file.read_text(encoding="utf-8")
    if damage == "gone":
        file.unlink()
    else:
        emptied = {key: {"source": "", "status": "", "from_memory": True} for key in json.loads(text)}
        file.write_text({"cut short": text[:200], "not a table": "[1, 2]"}.get(damage) or json.dumps(emptied))
    with pytest.raises(TablesError, match="install the program again"):
        read_tables(folder)
