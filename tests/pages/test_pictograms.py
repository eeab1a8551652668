"""The hazard pictograms: one drawing for each code in use, fit for a strict content policy."""

from __future__ import annotations

from pathlib import Path
from xml.etree import ElementTree

import pytest

import reactions
from reactions.chemistry.substances import substances

FOLDER = Path(reactions.__file__).parent / "static" / "reactions" / "pictograms"
CODES = [f"GHS0{number}" for number in range(1, 10)]


def test_every_pictogram_of_the_substance_table_has_its_drawing() -> None:
    used = {code for row in substances().values() for code in row.pictograms}
    assert used <= {path.stem for path in FOLDER.glob("*.svg")} == set(CODES)


@pytest.mark.parametrize("code", CODES)
def test_the_drawing_has_a_title_and_neither_style_nor_script(code: str) -> None:
    root = ElementTree.parse(FOLDER / f"{code}.svg").getroot()  # our own file
    title = root.find("{http://www.w3.org/2000/svg}title")
    assert title is not None
    assert (title.text or "").startswith(code)
    for element in root.iter():
        assert element.tag.rpartition("}")[2] not in ("style", "script")
        assert not {"style", "onload", "onclick"} & set(element.attrib)
