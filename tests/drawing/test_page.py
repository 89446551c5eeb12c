"""Border, title block, legend and caution."""

import pytest

from onelinefault.drawing.page import Stamp, frame_box, page_box, page_shapes, title_block_box
from onelinefault.drawing.shapes import Text, bounds
from onelinefault.model.caution import CAUTION
from onelinefault.model.plant import PAPER_MM, Plant, Sheet


@pytest.mark.parametrize("paper", PAPER_MM)
@pytest.mark.parametrize("upright", [False, True])
def test_everything_lies_on_the_paper(paper: str, upright: bool) -> None:
    sheet = Sheet("s1", "Main", paper, upright)
    shapes = page_shapes(Plant(sheets=(sheet,)), sheet, Stamp("classical method", "three-phase fault, Intake"))
    box, page = bounds(shapes), page_box(sheet)
    assert page.left <= box.left and box.right <= page.right and page.top <= box.top and box.bottom <= page.bottom


def test_the_whole_caution_stands_on_the_sheet_clear_of_the_title_block() -> None:
    sheet = Sheet("s1")
    texts = [s for s in page_shapes(Plant(), sheet, Stamp()) if isinstance(s, Text)]
    words = " ".join(t.text for t in texts)
    assert CAUTION in words
    block = title_block_box(sheet)
    for text in texts:
        if text.text in CAUTION:
            assert not text.box().overlaps(block)
    assert frame_box(sheet).holds(block.left, block.top)


def test_long_names_shrink_into_their_box() -> None:
    sheet = Sheet("s1", "A sheet with quite a long title about the eleven kilovolt distribution boards")
    texts = [s for s in page_shapes(Plant(sheets=(sheet,)), sheet, Stamp()) if isinstance(s, Text)]
    title = next(t for t in texts if "eleven" in t.text)
    assert title.size_du >= 6.0
