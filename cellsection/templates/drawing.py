"""The section drawn to one scale as a native XY chart, and the sheet Workings that feeds it.

The coordinates are moved and scaled to a frame of fixed size, so that the axes can stand still: whatever is typed,
the section fills the frame and both directions keep one scale. A part is a series of fixed length; parts the table
does not have repeat the last one. A cut-out is drawn by a second, dashed series; the one that does not apply to a part
stays at the middle of the frame, without length.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Literal, TypeAlias

from openpyxl.chart import ScatterChart
from openpyxl.chart.data_source import AxDataSource, NumDataSource, NumRef, StrRef
from openpyxl.chart.label import DataLabel, DataLabelList
from openpyxl.chart.layout import Layout, ManualLayout
from openpyxl.chart.marker import Marker
from openpyxl.chart.series import SeriesLabel, XYSeries
from openpyxl.chart.shapes import GraphicalProperties
from openpyxl.chart.text import RichText
from openpyxl.drawing.line import LineProperties
from openpyxl.drawing.spreadsheet_drawing import AnchorMarker, OneCellAnchor
from openpyxl.drawing.text import CharacterProperties, Font, Paragraph, ParagraphProperties, RichTextProperties
from openpyxl.drawing.xdr import XDRPositiveSize2D
from openpyxl.utils import get_column_letter

from cellsection.templates.style import FACE, INK, QUIET

if TYPE_CHECKING:
    from openpyxl.worksheet.worksheet import Worksheet

__all__ = ["POINTS", "Side", "Trace", "section_chart"]

Dash: TypeAlias = Literal["solid", "sysDash", "lgDashDot"]
Side: TypeAlias = Literal["l", "r", "t", "b"]
POINTS = 49  # of an outline: corners, and arcs in steps fine enough for the eye
CENTIMETRE = 360000  # in the units of a drawing
WIDTH, HEIGHT = 16.6, 11.6  # cm of the chart
BELOW, ABOVE = -0.64, 0.61  # what the chart shows of the frame; the section itself spans -0.5 to 0.5 at most
ASIDE = (ABOVE - BELOW) / 2 * WIDTH / HEIGHT


@dataclass(frozen=True)
class Trace:
    """One line of the drawing: where its points stand, how it is drawn, which point carries the text of which cell.

    first, last : rows; column : number of the column of x, that of y follows
    """

    sheet: str
    first: int
    last: int
    column: int
    weight: float = 1.25  # points
    colour: str = INK
    dash: Dash = "solid"
    label: str = ""  # the cell with the text
    labelled: int = 0  # the point that carries it, counted from 0
    position: Side = "r"
    upright: bool = False

    def range(self, offset: int) -> str:
        """The cells of x (offset 0) or y (offset 1)."""
        letter = get_column_letter(self.column + offset)
        return f"{self.sheet}!${letter}${self.first}:${letter}${self.last}"


def section_chart(sheet: Worksheet, address: str, traces: list[Trace]) -> None:
    """Put the drawing on a sheet, its top left corner at the address."""
    chart = ScatterChart()
    chart.scatterStyle = "lineMarker"
    chart.style = None
    chart.legend = None
    chart.title = None
    chart.roundedCorners = False
    chart.graphical_properties = GraphicalProperties(noFill=True, ln=LineProperties(noFill=True))
    chart.plot_area.graphicalProperties = GraphicalProperties(noFill=True, ln=LineProperties(noFill=True))
    chart.layout = Layout(ManualLayout(layoutTarget="inner", xMode="edge", yMode="edge", x=0, y=0, w=1, h=1))
    for axis, least, most in ((chart.x_axis, -ASIDE, ASIDE), (chart.y_axis, BELOW, ABOVE)):
        axis.scaling.min, axis.scaling.max = least, most
        axis.delete = True
        axis.majorGridlines = None
        axis.title = None
    chart.series = [_series(index, trace) for index, trace in enumerate(traces)]
    cell = sheet[address]
    corner = AnchorMarker(col=cell.column - 1, row=cell.row - 1)
    size = XDRPositiveSize2D(round(WIDTH * CENTIMETRE), round(HEIGHT * CENTIMETRE))
    chart.anchor = OneCellAnchor(_from=corner, ext=size)  # type: ignore[assignment]
    sheet.add_chart(chart)


def _series(index: int, trace: Trace) -> XYSeries:
    line = LineProperties(w=round(trace.weight * 12700), solidFill=trace.colour, prstDash=trace.dash, cap="flat")
    series = XYSeries(
        idx=index,
        order=index,
        xVal=AxDataSource(numRef=NumRef(f=trace.range(0))),
        yVal=NumDataSource(numRef=NumRef(f=trace.range(1))),
        spPr=GraphicalProperties(ln=line),
        marker=Marker(symbol="none"),
        smooth=False,
    )
    if trace.label:
        series.tx = SeriesLabel(strRef=StrRef(f=trace.label))
        series.dLbls = _label(trace)
    return series


def _label(trace: Trace) -> DataLabelList:
    """A label at one point that shows the series' name, which is the text of a cell."""
    face = CharacterProperties(sz=900, solidFill=QUIET, latin=Font(typeface=FACE))
    turned = RichTextProperties(rot=-5400000 if trace.upright else 0, vert="horz")
    text = RichText(bodyPr=turned, p=[Paragraph(pPr=ParagraphProperties(defRPr=face), endParaRPr=face)])
    shown = DataLabel(idx=trace.labelled, dLblPos=trace.position, txPr=text, **_show(name=True))
    return DataLabelList(dLbl=[shown], **_show(name=False))


def _show(*, name: bool) -> dict[str, bool]:
    return {
        "showSerName": name,
        "showVal": False,
        "showCatName": False,
        "showLegendKey": False,
        "showPercent": False,
        "showBubbleSize": False,
    }
