"""The preview: readable at 900 pixels, text as text, small."""

import re
from functools import cache
from xml.etree import ElementTree

import pytest

from export.files.preview import OUTPUT
from export.outputs import CheckFailed, Choices
from tests.designs import ARCH, NET, RUN, SWAGS, in_unit, many, solved

SVG = "{http://www.w3.org/2000/svg}"
DESIGNS = {
    "swags": SWAGS, "run": RUN, "net": NET, "arch": ARCH, "feet": in_unit(SWAGS, "ft"), "many": many(40),
}  # fmt: skip
each_design = pytest.mark.parametrize("name", DESIGNS)


@cache
def written(name: str) -> bytes:
    (file,) = OUTPUT.write(solved(DESIGNS[name]), Choices())
    data = b"".join(file.chunks)
    assert file.name == "preview.svg"
    file.checked()
    return data


def root(name: str) -> ElementTree.Element:
    return ElementTree.fromstring(written(name))


@each_design
def test_it_is_900_pixels_wide_and_no_text_is_under_11_pixels(name: str) -> None:
    svg = root(name)
    assert svg.get("width") == "900"
    assert svg.get("viewBox", "").startswith("0 0 900 ")
    sizes = [float(text.get("font-size", "0")) for text in svg.iter(f"{SVG}text")]
    assert min(sizes) >= 11


@each_design
def test_strokes_are_one_and_two_pixels_and_do_not_scale(name: str) -> None:
    svg = root(name)
    widths = {element.get("stroke-width") for element in svg.iter() if element.get("stroke")}
    assert widths == {"1", "2"}
    assert "vector-effect:non-scaling-stroke" in next(svg.iter(f"{SVG}style")).text  # type: ignore[operator]


@each_design
def test_it_says_what_it_shows_in_title_and_description(name: str) -> None:
    svg, result = root(name), solved(DESIGNS[name])
    assert next(svg.iter(f"{SVG}title")).text == (result.title or "Untitled")
    described = next(svg.iter(f"{SVG}desc")).text or ""
    assert result.pieces[0].mark in described


@each_design
def test_it_weighs_less_than_200_kilobytes(name: str) -> None:
    assert len(written(name)) < 200_000


@each_design
def test_text_is_text_in_a_generic_sans(name: str) -> None:
    style = next(root(name).iter(f"{SVG}style")).text or ""
    assert "font-family:sans-serif" in style
    said = {text.text for text in root(name).iter(f"{SVG}text")}
    for piece in solved(DESIGNS[name]).pieces[:12]:
        assert piece.mark in said


def test_pieces_beyond_the_first_dozen_are_named_in_a_line() -> None:
    said = [text.text or "" for text in root("many").iter(f"{SVG}text")]
    assert "B12" in said
    assert "B13" not in said
    (line,) = [text for text in said if text.startswith("Not drawn:")]
    assert line.startswith("Not drawn: B13, B14, B15")
    assert line.endswith("and 8 more")


def test_at_most_three_elevations_stand_abreast() -> None:
    places = re.findall(rb'<g class="p" transform="translate\(([-\d.]+) ([-\d.]+)\)"', written("many"))
    rows: dict[bytes, int] = {}
    for _, y in places:
        rows[y] = rows.get(y, 0) + 1
    assert max(rows.values()) <= 3


def test_only_what_tells_the_shape_is_dimensioned() -> None:
    said = [text.text or "" for text in root("swags").iter(f"{SVG}text")]
    assert sum(text.endswith(" span") for text in said) == 3
    assert sum(text.endswith(" sag under chord") for text in said) == 3
    assert sum(text.endswith(" lowest point") for text in said) == 3
    assert not any("to lowest" in text or "level difference" in text for text in said)


def test_cautions_and_what_pulls_are_of_stand_under_it() -> None:
    said = " ".join(text.text or "" for text in root("run").iter(f"{SVG}text"))
    assert "pulls are of the dead load only" in said
    for caution in solved(RUN).cautions[:6]:
        assert " ".join(caution.text.split()) in said


def test_markup_in_a_title_is_shown_as_it_is_written() -> None:
    said = [text.text for text in root("swags").iter(f"{SVG}text")]
    assert "Courtyard swags & <lamps>" in said


def test_a_broken_file_is_found_out(tmp_path: pytest.TempPathFactory) -> None:
    from pathlib import Path

    path = Path(str(tmp_path)) / "preview.svg"
    path.write_bytes(written("swags")[:-20])
    with pytest.raises(CheckFailed, match="well-formed"):
        OUTPUT.verify(path, solved(SWAGS), Choices())
    path.write_bytes(written("swags").replace(b">S1<", b">S9<"))
    with pytest.raises(CheckFailed, match="does not name"):
        OUTPUT.verify(path, solved(SWAGS), Choices())
