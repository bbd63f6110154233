"""Rows in the applications' own spelling are read without the parser, and to the same cells as through it."""

from __future__ import annotations

from dataclasses import astuple
from pathlib import Path

import pytest
from hypothesis import HealthCheck, example, given, settings
from hypothesis import strategies as st

from cellsection.errors import WorkbookError
from cellsection.workbook.book import Formula, Limits
from cellsection.workbook.plainrows import PlainRows
from cellsection.workbook.reader import read_book
from tests.workbook.small import MAIN, parts_of, zipped

VALUES = ("<v>1.5</v>", "<v>-3e5</v>", "<v>NaN</v>", "<v>1_0</v>", "<v></v>", "<v/>", "<v>a&amp;b_x0041_</v>",
          "<v>0</v>", "<v>999999999999</v>", "<v>#N/A</v>", "<is><t> in </t></is>", "<is><t></t></is>",
          "<is><r><t>run</t></r></is>",
          "<v>2024-03-01</v>", "<v>&#65;</v>", "", "<!-- a --><v>2</v>", "<v><![CDATA[7]]></v>")  # fmt: skip
FORMULAS = ("", "<f>A1*2</f>", '<f t="shared" si="0" ref="A1:B9">A1&lt;B1</f>', '<f t="shared" si="0"/>', "<f/>",
            '<f t="array" ref="{r}">ROW()</f>', '<f ca="1"></f>')  # fmt: skip
ATTRIBUTES = ("", ' s="3"', ' t="n"', ' t="str"', ' t="s"', ' s="1" t="b"', ' t="e" vm="1"', ' t="inlineStr"', ' t="d"')
CELLS = st.tuples(
    st.integers(1, 30), st.sampled_from(ATTRIBUTES), st.sampled_from(FORMULAS), st.sampled_from(VALUES), st.booleans()
)
ROWS = st.lists(st.tuples(st.integers(1, 60), st.sampled_from(("", ' hidden="1"')), st.lists(CELLS)), max_size=8)


def written(rows: list[tuple[int, str, list[tuple[int, str, str, str, bool]]]], ordered: bool) -> str:
    """Rows of cells as XML; in order and without repetition where `ordered`."""
    pieces = []
    for row, hidden, cells in sorted({r[0]: r for r in rows}.values()) if ordered else rows:
        pieces.append(f'<row r="{row}"{hidden}>')
        for column, attributes, f, v, addressed in sorted({c[0]: c for c in cells}.values()) if ordered else cells:
            r = f"{'A' if column > 26 else ''}{chr(64 + (column - 1) % 26 + 1)}{row}"
            place = f' r="{r}"' if addressed or ordered else ""
            pieces.append(f"<c{place}{attributes}>{f.format(r=r)}{v}</c>")
        pieces.append("</row>")
    return "".join(pieces)


def outcome(folder: Path, rows: str, before: str) -> object:
    """What is read of a sheet, or why it is refused."""
    parts = dict(parts_of({"S": {}}, {}))
    parts["xl/worksheets/sheet1.xml"] = f'<worksheet xmlns="{MAIN}">{before}<sheetData>{rows}</sheetData></worksheet>'
    try:
        sheet = read_book(zipped(folder / "book.xlsx", parts), Limits()).sheets[0]
    except WorkbookError as refusal:
        return str(refusal).partition("(")[0]
    formulas: dict[tuple[int, int], Formula] = sheet.formulas
    told = {p: (astuple(f), [q for q, g in formulas.items() if g is f]) for p, f in formulas.items()}
    messages = {p: (v, type(v), getattr(v, "message", "")) for p, v in sheet.values.items()}
    return messages, told, sheet.bottom, sheet.right, sheet.hidden_rows


@settings(max_examples=150, deadline=None, suppress_health_check=[HealthCheck.function_scoped_fixture])
@given(rows=ROWS, ordered=st.booleans())
@example(rows=[(1, "", [(1, "", "", "<v>1</v>", True)]), (2, "", [(1, "", "", "<v></v>", True)])], ordered=True)
@example(rows=[(k, "", [(1, "", "", "<v>a&amp;b</v>", True)]) for k in (1, 2)], ordered=True)
def test_both_ways_give_the_same_cells(
    rows: list[tuple[int, str, list[tuple[int, str, str, str, bool]]]], ordered: bool, tmp_path: Path
) -> None:
    xml = written(rows, ordered)
    plain, parsed = outcome(tmp_path, xml, ""), outcome(tmp_path, xml, "<!-- all through the parser -->")
    assert plain == parsed


@pytest.mark.parametrize(
    "rows",
    [
        '<row r="1"><c r="A1"><v>1</v></c></row>\n'
        '<row r="2" spans="1:2"><c r="A2" s="1"/><c r="B2" t="str"><v>x</v></c></row>',
        '<row r="1"><c r="A1"><f>B1&amp;"a"</f><v /></c><c r="B1" s="4" /></row>',
        '<row r="3"/><row r="4"><c r="XFD4"><f t="shared" si="0"/><v>1</v></c></row>',
    ],
)
def test_what_applications_write_is_read_without_the_parser(
    rows: str, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    unread = []
    read = PlainRows.read
    monkeypatch.setattr(PlainRows, "read", lambda self, data: unread.append(read(self, data)) or unread[-1])
    outcome(tmp_path, rows, "")
    assert unread
    assert not any(unread)


def test_a_row_is_taken_whole_or_not_at_all(tmp_path: Path) -> None:
    rows = '<row r="1"><c r="A1"><v>1</v></c><!-- here --><c><v>2</v></c></row><row r="2"><c r="A2"><v>3</v></c></row>'
    values = outcome(tmp_path, rows, "")
    assert isinstance(values, tuple)
    assert {place: value[0] for place, value in values[0].items()} == {(1, 1): 1.0, (1, 2): 2.0, (2, 1): 3.0}
