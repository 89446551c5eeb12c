"""The README's Python example runs as printed, in at most 15 lines, and gives what a hand calculation gives."""

import re
import subprocess
import sys
from math import sqrt
from pathlib import Path

ROOT = Path(__file__).parents[1]


def test_the_example_runs_and_agrees_with_a_hand_calculation(tmp_path: Path) -> None:
    text = (ROOT / "README.md").read_text(encoding="utf-8")
    block = re.search(r"```python\n(.*?)```", text, re.DOTALL)
    assert block is not None
    lines = [line for line in block.group(1).splitlines() if line.strip()]
    assert len(lines) <= 15
    run = subprocess.run(
        [sys.executable, "-c", f"import sys; sys.path.insert(0, {str(ROOT)!r})\n{block.group(1)}"],
        cwd=tmp_path, capture_output=True, text=True, encoding="utf-8", check=True,
    )  # fmt: skip
    assert (tmp_path / "pump-house.plant.json").is_file()
    intake = next(row for row in run.stdout.splitlines() if row.startswith("Intake") and "three-phase" in row)
    # the supply's own fault level: S / (√3 U)
    assert f"{900 / (sqrt(3) * 33):.2f} kA" in intake


def test_the_pictures_exist() -> None:
    text = (ROOT / "README.md").read_text(encoding="utf-8")
    for name in re.findall(r"!\[[^]]*\]\(([^)]+)\)", text):
        assert (ROOT / name).is_file()
