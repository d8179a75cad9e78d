"""Results as a workbook (xlsx): short list, checks, inputs and notes, ready to sort and print.

Numbers are numbers; texts from the job can never become formulas. Equal results give equal
bytes: no dates are written.
"""

from __future__ import annotations

import datetime
import io
import re
import zipfile
from collections.abc import Iterable

from openpyxl import Workbook
from openpyxl.cell import Cell as SheetCell
from openpyxl.styles import Alignment, Border, Font, PatternFill, Side
from openpyxl.utils import get_column_letter
from openpyxl.workbook.properties import CalcProperties
from openpyxl.worksheet.properties import PageSetupProperties
from openpyxl.worksheet.worksheet import Worksheet
from openpyxl.writer.excel import ExcelWriter

from engine import State
from optimizer.documents.inputs_table import inputs_table
from optimizer.documents.options_tables import options_tables
from optimizer.documents.short_list_table import Result, short_list_table
from optimizer.documents.tables import Cell, Column, Table, looks_like_formula
from optimizer.documents.wording import visible
from optimizer.documents.workbook_tables import checks_table, notes_table, remedies_table
from optimizer.options import OptionsResult

_NO_DATE = datetime.datetime(1980, 1, 1)  # the earliest that the file format can hold
# Read back as characters by spreadsheets unless their first sign is itself written so.
_ESCAPE_LIKE = re.compile(r"_(?=x[0-9A-Fa-f]{4}_)")
_LONGEST_TEXT = 32_767  # characters that a cell can hold
_HEAD = Font(bold=True)
_HEAD_FILL = PatternFill("solid", start_color="E4E7EB")
_HEAD_LINE = Border(bottom=Side(style="medium", color="4A5560"))
_FAILED = Font(bold=True, color="B00020")
_WRAPPED = Alignment(vertical="top", wrap_text=True)
_AT_TOP = Alignment(vertical="top")
_FAILS = State.FAILS.value.upper()


def workbook_bytes(result: Result | OptionsResult) -> bytes:
    """Write a result as a workbook.

    Parameters
    ----------
    result : RankResult, CheckResult or OptionsResult
        Result of a job.

    Returns
    -------
    bytes
        Content of an xlsx file; equal results give equal bytes.
    """
    if isinstance(result, OptionsResult):
        return bytes_of_tables(options_tables(result), result.job.title)
    tables = [
        short_list_table(result),
        checks_table(result),
        inputs_table(result),
        notes_table(result),
    ]
    remedies = remedies_table(result)
    if remedies is not None:
        tables.append(remedies)
    return bytes_of_tables(tables, result.job.title)


def bytes_of_tables(tables: Iterable[Table], title: str = "") -> bytes:
    """Write tables as the sheets of a workbook.

    Parameters
    ----------
    tables : iterable of Table
        One a sheet, in order.
    title : str
        Title of the document.

    Returns
    -------
    bytes
        Content of an xlsx file; equal tables give equal bytes.
    """
    book = Workbook()
    book.remove(book.active)
    for table in tables:
        add_sheet(book, table)
    properties = book.properties
    properties.creator = properties.lastModifiedBy = "Cagewright"
    properties.title = visible(title)
    properties.created = properties.modified = _NO_DATE
    book.calculation = CalcProperties(fullCalcOnLoad=False)
    return _packed(book)


def add_sheet(book: Workbook, table: Table) -> Worksheet:
    """Add a table to a workbook as a sheet that can be filtered and printed.

    Parameters
    ----------
    book : Workbook
        Workbook to add to.
    table : Table
        Headings and rows.

    Returns
    -------
    Worksheet
        The sheet.
    """
    sheet = book.create_sheet(table.name)
    for number, column in enumerate(table.columns, 1):
        head = sheet.cell(1, number)
        _put_text(head, column.heading)
        head.font, head.fill, head.border, head.alignment = _HEAD, _HEAD_FILL, _HEAD_LINE, _WRAPPED
        sheet.column_dimensions[get_column_letter(number)].width = column.width
    for line, row in enumerate(table.rows, 2):
        for number, (column, value) in enumerate(zip(table.columns, row, strict=True), 1):
            if value is not None:
                _put(sheet.cell(line, number), value, column)
    last = f"{get_column_letter(len(table.columns))}{len(table.rows) + 1}"
    sheet.freeze_panes = "A2"
    sheet.auto_filter.ref = f"A1:{last}"
    _set_up_print(sheet)
    return sheet


def _put(cell: SheetCell, value: Cell, column: Column) -> None:
    if isinstance(value, str):
        _put_text(cell, value)
        if value == _FAILS:
            cell.font = _FAILED
    else:
        cell.value = value
        cell.number_format = column.number_format
    cell.alignment = _WRAPPED if column.wrap else _AT_TOP


def _put_text(cell: SheetCell, text: str) -> None:
    shown = visible(text)[:_LONGEST_TEXT]
    cell.value = _ESCAPE_LIKE.sub("_x005F_", shown)
    # The kind is set after the value: a text that begins with = is no formula here, and one
    # such as #N/A no error.
    cell.data_type = "s"
    cell.quotePrefix = looks_like_formula(shown)


def _set_up_print(sheet: Worksheet) -> None:
    sheet.page_setup.orientation = sheet.ORIENTATION_LANDSCAPE
    sheet.page_setup.paperSize = sheet.PAPERSIZE_A4
    sheet.page_setup.fitToWidth, sheet.page_setup.fitToHeight = 1, 0
    sheet.sheet_properties.pageSetUpPr = PageSetupProperties(fitToPage=True)
    sheet.page_margins.left = sheet.page_margins.right = 0.4
    sheet.print_title_rows = "1:1"
    # File name and sheet, page of pages. No text of the job: & would be read as a code there.
    sheet.oddFooter.left.text = "&F: &A"
    sheet.oddFooter.right.text = "&P / &N"


def _packed(book: Workbook) -> bytes:
    """Write the file, with the same date on every part of it."""
    dated, undated = io.BytesIO(), io.BytesIO()
    with zipfile.ZipFile(dated, "w") as archive:
        # Not through `save`, which would set the date of today.
        ExcelWriter(book, archive).write_data()
    with (
        zipfile.ZipFile(dated) as source,
        zipfile.ZipFile(undated, "w", zipfile.ZIP_DEFLATED) as target,
    ):
        for name in source.namelist():
            part = zipfile.ZipInfo(name, date_time=_NO_DATE.timetuple()[:6])
            part.compress_type = zipfile.ZIP_DEFLATED
            part.create_system = 0  # the same on every platform
            target.writestr(part, source.read(name))
    return undated.getvalue()
