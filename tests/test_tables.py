"""Tables as CSV files and as a workbook: units in the heads, numbers as numbers, nothing that runs as a formula."""

from __future__ import annotations

import csv
import dataclasses
import io
import math
import zipfile
from collections.abc import Sequence
from pathlib import Path

import numpy as np
import openpyxl
import pytest
from hypothesis import given
from hypothesis import strategies as st

from export import listing
from export.files import cuts, nodes, setting_out, supports, tables
from export.grid import fields, harmless
from export.outputs import CheckFailed, Choices, Output, outputs
from geom import units
from geom.result import Column, PatternCut, Result, StockPattern, StockPlan, Table, Unit
from geom.setting.options import Site
from tests.hand_made import cut, piece, result, table

CHOICES = Choices()
# Exact by the international yard and pound agreement of 1959: 1 in = 25.4 mm, 1 ft = 12 in.
METRES = {"mm": 0.001, "cm": 0.01, "m": 1.0, "in": 0.0254, "ft": 0.3048}


def content(output: Output, made: Result) -> bytes:
    (file,) = output.write(made, CHOICES)
    data = b"".join(file.chunks)
    file.checked()
    return data


def rows(output: Output, made: Result) -> list[dict[str, str]]:
    return list(csv.DictReader(io.StringIO(content(output, made).decode("utf-8"), newline="")))


def on_disk(output: Output, made: Result, folder: Path) -> Path:
    (file,) = output.write(made, CHOICES)
    path = folder / f"court-{file.name}"
    path.write_bytes(b"".join(file.chunks))
    return path


def workbook(made: Result) -> openpyxl.Workbook:
    return openpyxl.load_workbook(io.BytesIO(content(tables.OUTPUT, made)))


def with_tables(*found: Table, unit: str = "mm") -> Result:
    return result(unit, pieces=(piece("A1", tables=found),))


def test_the_heads_of_the_cut_list_are_the_figures_keys_in_the_drawings_unit() -> None:
    heads = content(cuts.OUTPUT, result("mm")).split(b"\r\n")[0].decode().split(",")
    keys = ["mark", "piece", "stock", "cut_length_mm", "pin_to_pin_mm", "links", "copies", "mass_kg"]
    assert heads == keys


@pytest.mark.parametrize("unit", ["mm", "cm", "m", "in"])
def test_lengths_are_in_the_drawings_unit(unit: str) -> None:
    made = rows(cuts.OUTPUT, result(unit))
    assert float(made[0][f"cut_length_{unit}"]) * METRES[unit] == pytest.approx(1.884, abs=1e-6)


def test_a_drawing_in_feet_has_feet_inches_and_fractions() -> None:
    """13 ft 9 1/2 in is 4.2037 m exactly."""
    made = rows(cuts.OUTPUT, result("ft", cuts=(cut("S1", 4.2037),)))
    assert made[0]["cut_length_ft_in"] == "13'-9 1/2\""


def test_the_drawings_unit_is_taken_where_it_is_not_the_designs() -> None:
    made = result("mm")
    drawing = made.setting.drawing.model_copy(update={"unit": "m"})
    made = dataclasses.replace(made, setting=dataclasses.replace(made.setting, drawing=drawing))
    assert rows(cuts.OUTPUT, made)[0]["cut_length_m"] == "1.884"


@pytest.mark.parametrize(
    ("unit", "heads", "area"),
    [
        ("mm", ("area_m2", "volume_m3"), 2.0),
        ("m", ("area_m2", "volume_m3"), 2.0),
        ("in", ("area_in2", "volume_in3"), 2.0 / 0.0254**2),
        ("ft", ("area_ft2", "volume_ft3"), 2.0 / 0.3048**2),
    ],
)
def test_areas_and_volumes_are_in_squares_and_cubes_that_can_be_read(
    unit: str, heads: tuple[str, str], area: float
) -> None:
    made = Table(
        "blocks",
        (
            Column("area", Unit("m2"), "area", np.array([2.0])),
            Column("volume", Unit("m3"), "volume", np.array([0.5])),
        ),
    )
    found = fields(made, unit)
    assert tuple(field.head for field in found) == heads
    assert found[0].values[0] == pytest.approx(area, rel=1e-6)


def test_angles_kept_in_radians_leave_in_degrees() -> None:
    made = Table("blocks", (Column("slope", Unit("deg", 180 / math.pi), "slope", np.array([math.pi / 6])),))
    (found,) = fields(made, "mm")
    assert (found.head, found.values) == ("slope_deg", [30])


def test_the_heads_of_the_pulls_name_axis_and_unit() -> None:
    heads = content(supports.OUTPUT, result("in")).split(b"\r\n")[0].decode().split(",")
    assert heads[:6] == ["mark", "case", "standing", "at_x_in", "at_y_in", "at_z_in"]
    assert heads[6:11] == ["pull_x_N", "pull_y_N", "pull_z_N", "magnitude_N", "moment_Nm"]


def test_lines_end_and_cells_are_quoted_as_rfc_4180_says() -> None:
    """RFC 4180, section 2: lines end in CRLF; a cell with a comma or a quote is quoted, its quotes doubled."""
    data = content(cuts.OUTPUT, result(cuts=(cut("S1", stock='7x7, "soft"'),)))
    assert data.endswith(b"\r\n")
    assert data.count(b"\n") == data.count(b"\r\n") == 2
    assert b',"7x7, ""soft""",' in data


def test_letters_of_any_alphabet_are_written_in_utf_8() -> None:
    data = content(cuts.OUTPUT, result(cuts=(cut("S1", stock="Ø6 čelik 鎖"),)))
    assert "Ø6 čelik 鎖".encode() in data


FORMULAS = [
    "=1+1", "+1+1", "-1+1", "@SUM(A1)", "\t=1", "\r=1", "\n=1", "=cmd|'/C calc'!A0", "-2+3+cmd", "＝1+1", "+", "-",
]  # fmt: skip


@pytest.mark.parametrize("text", FORMULAS)
def test_text_that_begins_like_a_formula_is_written_as_text(text: str) -> None:
    """The characters named in CWE-1236 and their full-width forms."""
    assert harmless(text) == f"'{text}"
    (made,) = rows(cuts.OUTPUT, result(cuts=(cut("S1", stock=text),)))
    assert made["stock"] == f"'{text}"


@pytest.mark.parametrize("text", ["-1", "+3.5", "-.5", "-1e-3", "S1", "7x7-4", "a=b", "", " =1", "'=1"])
def test_numbers_and_other_text_stay_as_they_are(text: str) -> None:
    assert harmless(text) == text


@given(st.text(max_size=8))
def test_no_text_at_all_leaves_as_a_formula(text: str) -> None:
    safe = harmless(text)
    assert safe.removeprefix("'") == text.removeprefix("'")
    assert not safe.startswith(("=", "@", "\t", "\r")) or _is_signed_number(safe)
    assert not safe.startswith(("+", "-")) or _is_signed_number(safe)


def _is_signed_number(text: str) -> bool:
    try:
        return math.isfinite(float(text)) or "e" in text.lower()
    except ValueError:
        return False


def test_negative_feet_and_inches_are_no_formula_and_read_back() -> None:
    made = with_tables(table("nodes", x=[-0.9779]), unit="ft")  # -3 ft 2 1/2 in exactly
    (row,) = rows(nodes.OUTPUT, made)
    assert row["x_ft_in"] == "-3'-2 1/2\""
    assert units.length(row["x_ft_in"]) == pytest.approx(-0.9779, abs=1e-9)


def test_a_figure_without_meaning_is_an_empty_cell() -> None:
    (first, _) = rows(supports.OUTPUT, result())
    assert first["moment_Nm"] == ""
    made = rows(cuts.OUTPUT, result(cuts=(dataclasses.replace(cut("B1"), links=None, cut_length=math.nan),)))
    assert (made[0]["links"], made[0]["cut_length_mm"]) == ("", "")


def test_supports_have_a_row_for_each_case_with_what_it_includes() -> None:
    found = rows(supports.OUTPUT, result())
    assert [(row["mark"], row["case"], row["standing"]) for row in found] == [
        ("P1", "as hung", "dead load only"),
        ("P1", "hottest", "dead load only"),
    ]
    assert [row["pull_x_N"] for row in found] == ["12.5", "12"]
    assert {row["cautions"] for row in found} == {"not for lifting"}


def test_coordinates_come_with_the_site_coordinates_that_they_count_from() -> None:
    made = with_tables(table("nodes", x=[1.0, 2.0]))
    site = Site.model_validate({"origin": [437250, 112400, 12.5]})
    moved = dataclasses.replace(made, setting=dataclasses.replace(made.setting, site=site))
    for output in (nodes.OUTPUT, supports.OUTPUT):
        assert "origin_x_mm" not in rows(output, made)[0]
        origins = [(r["origin_x_mm"], r["origin_y_mm"], r["origin_z_mm"]) for r in rows(output, moved)]
        assert origins == [("437250000", "112400000", "12500")] * 2
    assert "count from x 437250 m, y 112400 m, z 12.5 m" in str(workbook(moved)["design"]["B3"].value)


@pytest.mark.parametrize(
    ("output", "name"), [(setting_out.OUTPUT, "setting out"), (nodes.OUTPUT, "nodes"), (supports.OUTPUT, "")]
)
def test_a_table_that_no_piece_has_makes_no_file(output: Output, name: str) -> None:
    other = with_tables(table("other", x=[1.0]))
    assert list(output.write(dataclasses.replace(other, supports=()), CHOICES)) == []
    if name:
        assert len(list(output.write(with_tables(table(name, x=[1.0])), CHOICES))) == 1


def test_tables_of_several_pieces_stand_under_one_another_with_the_marks_of_their_pieces() -> None:
    first = piece("A1", tables=(table("setting out", x=[0.0, 0.1], intrados=[1.0, 1.1]),))
    second = piece("A2", tables=(table("setting out", x=[0.0], width=[2.0]),))
    found = rows(setting_out.OUTPUT, result(pieces=(first, second)))
    assert [tuple(row.values()) for row in found] == [
        ("A1", "0", "1000", ""),
        ("A1", "100", "1100", ""),
        ("A2", "0", "", "2000"),
    ]
    assert list(found[0]) == ["piece", "x_mm", "intrados_mm", "width_mm"]


def test_tables_of_parts_are_found_too() -> None:
    bay = piece("R1.1", tables=(table("nodes", x=[1.0]),))
    found = rows(nodes.OUTPUT, result(pieces=(piece("R1", parts=(bay,)),)))
    assert [row["piece"] for row in found] == ["R1.1"]


@pytest.mark.parametrize("unit", ["mm", "cm", "m", "in", "ft"])
@pytest.mark.parametrize("name", ["cuts", "supports", "setting-out", "nodes", "tables"])
def test_a_written_table_reads_back_as_the_result(tmp_path: Path, unit: str, name: str) -> None:
    lengths = [1 / 3, -1e-3, 12345.678901, 0.0, math.nan]
    texts = ("=1", "b", "", None, "-1")
    made = with_tables(table("setting out", x=lengths, word=texts), table("nodes", x=lengths, mark=texts), unit=unit)
    output = outputs()[name]
    checked = output.verify(on_disk(output, made, tmp_path), made, CHOICES)
    assert isinstance(checked["cells_compared"], int)
    assert checked["cells_compared"] >= 10


@pytest.mark.parametrize(
    ("old", "new", "said"),
    [
        (b"1884", b"1885", "cut_length_mm was read back as '1885'"),
        (b"DIN 763-8", b"DIN 763-9", "stock was read back"),
        (b"mark,", b"marks,", "the heads are"),
        (b"S2,S2,", b"", "rows were read back|of 8 cells"),
        (b",35,4,2.0724\r\nS2", b",,4,2.0724\r\nS2", "links was read back as ''"),
    ],
)
def test_a_cut_list_that_was_changed_does_not_pass(tmp_path: Path, old: bytes, new: bytes, said: str) -> None:
    path = on_disk(cuts.OUTPUT, result(), tmp_path)
    assert old in path.read_bytes()
    path.write_bytes(path.read_bytes().replace(old, new, 1))
    with pytest.raises(CheckFailed, match=said):
        cuts.OUTPUT.verify(path, result(), CHOICES)


def test_a_sixteenth_of_an_inch_is_the_most_that_feet_and_inches_may_be_off(tmp_path: Path) -> None:
    path = on_disk(cuts.OUTPUT, result("ft"), tmp_path)
    longer = dataclasses.replace(result("ft"), cuts=(cut("S1", 1.884 + 0.0017), cut("S2", 2.0)))
    with pytest.raises(CheckFailed, match="cut_length_ft_in"):
        cuts.OUTPUT.verify(path, longer, CHOICES)


def test_what_was_counted_while_writing_adds_up() -> None:
    (file,) = cuts.OUTPUT.write(result(), CHOICES)
    list(file.chunks)
    checked = file.checked()
    assert checked["rows"] == 2
    sums = checked["sums"]
    assert isinstance(sums, dict)
    assert sums["cut_length_mm"] == pytest.approx(1884 + 2000, abs=1e-9)
    assert sums["copies"] == 8


def test_a_long_table_is_written_in_chunks() -> None:
    made = with_tables(table("nodes", x=np.arange(20_000, dtype=np.float64).tolist()))
    (file,) = nodes.OUTPUT.write(made, CHOICES)
    sizes = [len(chunk) for chunk in file.chunks]
    assert len(sizes) > 3
    assert file.checked()["rows"] == 20_000


def test_the_workbook_has_every_table_as_a_sheet_with_numbers_as_numbers() -> None:
    first = piece("A1", tables=(table("blocks", width=[0.1, 0.2]),))
    book = workbook(result(pieces=(first, piece("A2"))))
    assert book.sheetnames == ["design", "cuts", "stock plan", "supports", "blocks", "cautions"]
    head, *values = book["blocks"].iter_rows(values_only=True)
    assert head == ("piece", "width, mm")
    assert values == [("A1", 100), ("A1", 200)]


def test_a_workbook_in_feet_has_decimal_feet_beside_feet_and_inches() -> None:
    book = workbook(with_tables(table("blocks", width=[4.2037]), unit="ft"))
    head, values = book["blocks"].iter_rows(values_only=True)
    assert head == ("piece", "width, ft", "width, ft in")
    assert values[1] == pytest.approx(13 + 9.5 / 12, abs=1e-6)
    assert values[2] == "13'-9 1/2\""


@pytest.mark.parametrize("text", [*FORMULAS[:4], "http://example.org/", "'x", "mailto:a@example.org"])
def test_no_cell_of_the_workbook_is_a_formula_or_a_link(text: str) -> None:
    data = content(tables.OUTPUT, result(cuts=(cut("S1", stock=text),)))
    with zipfile.ZipFile(io.BytesIO(data)) as archive:
        parts = [archive.read(name) for name in archive.namelist() if name.startswith("xl/worksheets/")]
    assert not any(b"<f>" in part or b"<f " in part or b"hyperlink" in part for part in parts)
    cell = openpyxl.load_workbook(io.BytesIO(data))["cuts"].cell(2, 3)
    assert (cell.value, cell.data_type) == (text, "s")


def test_sheets_have_names_that_are_allowed_and_different() -> None:
    names = ["a[b]:c*d?e/f\\g", "A B  C D E F G", "x" * 40, "x" * 50, "''", "Cuts"]
    book = workbook(with_tables(*(table(name, x=[1.0]) for name in names)))
    found = book.sheetnames
    assert len({name.casefold() for name in found}) == len(found) == len(names) + 5
    assert all(0 < len(name) <= 31 and not set(name) & set("[]:*?/\\") for name in found)


def test_the_workbook_has_the_same_bytes_every_time(monkeypatch: pytest.MonkeyPatch) -> None:
    import time

    first = content(tables.OUTPUT, result())
    now = time.time()
    monkeypatch.setattr(time, "time", lambda: now + 1e6)
    monkeypatch.setattr(time, "localtime", lambda *_args: time.gmtime(now + 1e6))
    assert content(tables.OUTPUT, result()) == first
    assert b"2026" not in _core(first)


def _core(data: bytes) -> bytes:
    with zipfile.ZipFile(io.BytesIO(data)) as archive:
        return archive.read("docProps/core.xml")


def test_a_workbook_that_was_changed_does_not_pass(tmp_path: Path) -> None:
    path = on_disk(tables.OUTPUT, result(), tmp_path)
    other = dataclasses.replace(result(), cuts=(cut("S1", 1.885), cut("S2", 2.0)))
    with pytest.raises(CheckFailed, match=r"sheet cuts: D2 was read back as 1884\.0, not 1885"):
        tables.OUTPUT.verify(path, other, CHOICES)


def test_a_sheet_of_many_columns_names_its_cells_as_the_format_does() -> None:
    wide = Table("wide", tuple(Column(f"c{n}", Unit(""), f"c{n}", np.array([float(n)])) for n in range(800)))
    book = workbook(with_tables(wide))
    row = next(book["wide"].iter_rows(min_row=2, values_only=True))
    assert row == ("A1", *range(800))
    assert book["wide"].dimensions == "A1:ADU2"  # 801 columns: ADU = 1 * 676 + 4 * 26 + 21


@pytest.mark.parametrize("text", ["a\x00b", "\x1b[2J", "\ufffe", "<&>\"'", " a ", "a\nb", "a\rb", "\ud7ff\U0001f517"])
def test_text_that_xml_cannot_hold_leaves_a_file_that_reads_back(tmp_path: Path, text: str) -> None:
    made = result(cuts=(cut("S1", stock=text),))
    tables.OUTPUT.verify(on_disk(tables.OUTPUT, made, tmp_path), made, CHOICES)
    found = workbook(made)["cuts"].cell(2, 3).value
    assert isinstance(found, str)
    assert len(found) == len(text)


def test_text_longer_than_a_cell_can_hold_is_cut_and_says_so(tmp_path: Path) -> None:
    """32,767 characters is a cell's limit; the library leaves a longer text out without a word."""
    made = result(cuts=(cut("S1", stock="x" * 40_000),))
    tables.OUTPUT.verify(on_disk(tables.OUTPUT, made, tmp_path), made, CHOICES)
    text = workbook(made)["cuts"].cell(2, 3).value
    assert isinstance(text, str)
    assert len(text) == 32_767
    assert text.endswith("...")


def test_the_stock_plan_has_a_row_for_each_mark_on_each_way_of_cutting() -> None:
    plan = StockPlan(
        "rope", 3, 3,
        (
            StockPattern(30.0, 2, (PatternCut("S1", 4), PatternCut("S2", 1)), 0.5),
            StockPattern(30.0, 1, (PatternCut("S2", 7),), 2.0),
        ),
    )  # fmt: skip
    chain = StockPlan("chain", None, None, (), links=281, links_lost=7)
    book = workbook(result(stock_plan=(plan, chain)))
    head, *rows = book["stock plan"].iter_rows(values_only=True)
    column = {name: [row[i] for row in rows] for i, name in enumerate(head)}
    assert column["stock"] == ["rope", "rope", "rope", "chain"]
    assert column["reels cut so"] == [2, 2, 1, None]
    assert column["mark"] == ["S1", "S2", "S2", None]
    assert column["of it on each"] == [4, 1, 7, None]
    assert column["links lost to cuts"] == [None, None, None, 7]


@pytest.mark.parametrize("parts", [[3, 2], [1, 1, 1], [5]])
def test_joined_tables_keep_every_row_in_order(parts: Sequence[int]) -> None:
    pieces = [piece(f"A{i}", tables=(table("t", x=[float(j) for j in range(n)]),)) for i, n in enumerate(parts)]
    (joined,) = listing.own(result(pieces=tuple(pieces)))
    assert listing.length(joined) == sum(parts)
    assert np.asarray(joined.columns[1].values).tolist() == [float(j) for n in parts for j in range(n)]
