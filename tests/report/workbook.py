#!/usr/bin/env python3
"""Reads a workbook of the sample month with a second reader, openpyxl, and checks what a person relies on: types,
frozen panes, print titles, words beside colours, nothing taken for a formula. The sample's numbers are those of
sample.c."""
import datetime
import sys

import openpyxl

checks = 0
failed = []


def check(good, told):
    global checks
    checks += 1
    if not good:
        failed.append(told)


def column(sheet, title):
    for cell in sheet[1]:
        if cell.value == title:
            return cell.column
    failed.append(f"{sheet.title}: no column {title}")
    return 1


def rows(sheet):
    return range(2, sheet.max_row + 1)


def find(sheet, **wanted):
    columns = {column(sheet, title.replace("_", " ")): value for title, value in wanted.items()}
    for row in rows(sheet):
        if all(sheet.cell(row, c).value == value for c, value in columns.items()):
            return row
    failed.append(f"{sheet.title}: no row {wanted}")
    return 2


def page_settings(book):
    for sheet in book:
        check(sheet.page_setup.fitToWidth in (None, 1), f"{sheet.title}: not one page wide")
        check(sheet.sheet_properties.pageSetUpPr.fitToPage, f"{sheet.title}: not fitted")
        check(sheet.page_setup.paperSize in (1, "1"), f"{sheet.title}: not US Letter")
        check("Page &P of &N" in (sheet.oddFooter.center.text or "") or sheet.oddFooter.center.text == "Page &[Page] of &N",
              f"{sheet.title}: no page numbers: {sheet.oddFooter.center.text!r}")
        check(sheet.oddHeader.left.text == "Quill Ford Wastewater Plant", f"{sheet.title}: {sheet.oddHeader.left.text!r}")
        check("March 2025" in sheet.oddHeader.center.text, f"{sheet.title}: no month at its head")
    for name in ("Limits", "Daily", "Process", "Exceedances", "Remarks", "Set aside", "Corrections", "Rules and notes"):
        sheet = book[name]
        check(sheet.print_title_rows in ("1:1", "$1:$1"), f"{name}: titles are not repeated: {sheet.print_title_rows}")
        check(sheet.freeze_panes in ("A2", "B2"), f"{name}: nothing frozen: {sheet.freeze_panes}")
    check(book["Limits"].page_setup.orientation == "landscape", "Limits: not landscape")
    check(book["Daily"].freeze_panes == "B2", "Daily: the day is not frozen")
    check(book["Daily"].print_title_cols in ("A:A", "$A:$A"), "Daily: the day is not repeated")


def no_formulas(book):
    for sheet in book:
        for line in sheet.iter_rows():
            for cell in line:
                check(cell.data_type != "f", f"{sheet.title}!{cell.coordinate}: a formula: {cell.value}")
                check(cell.data_type != "e", f"{sheet.title}!{cell.coordinate}: an error: {cell.value}")
    aside = book["Set aside"]
    check(aside.cell(find(aside, point="EFF"), column(aside, "value")).value == "=1O.2", "Set aside: = is not kept as text")
    check(aside.cell(find(aside, point="@EFL"), column(aside, "value")).value == "12", "Set aside: a value changed")
    corrections = book["Corrections"]
    check(corrections.cell(2, column(corrections, "reason")).value == "+decimal point lost in copying", "Corrections: +")
    limits = book["Limits"]
    note = limits.cell(find(limits, parameter="BOD5"), column(limits, "note")).value
    check(note == '=HYPERLINK("x") is a note', f"Limits: the note is {note!r}")


def limits(book):
    sheet = book["Limits"]
    row = find(sheet, parameter="CL2", statistic="daily maximum")
    figure = sheet.cell(row, column(sheet, "figure"))
    check(figure.value == 0.031 and figure.number_format == "0.000", f"Limits: {figure.value} {figure.number_format}")
    check(figure.font.b and figure.border.left.style, "Limits: an exceedance is not bold in a border")
    check(sheet.cell(row, column(sheet, "verdict")).value == "EXCEEDED, SHORT", "Limits: no word beside the figure")
    check(sheet.cell(row, column(sheet, "times")).value == 1, "Limits: times")
    check(sheet.cell(row, column(sheet, "samples taken")).value == 30, "Limits: taken")
    check(sheet.cell(row, column(sheet, "samples required")).value == 31, "Limits: required")
    check(sheet.cell(row, column(sheet, "sample type")).value == "grab", "Limits: sample type")
    for title, day in (("from", 1), ("to", 31), ("worst on", 18)):
        cell = sheet.cell(row, column(sheet, title))
        check(cell.is_date and cell.value == datetime.datetime(2025, 3, day), f"Limits: {title} is {cell.value!r}")
        check(cell.number_format == "yyyy-mm-dd", f"Limits: {title} is shown as {cell.number_format}")
    row = find(sheet, parameter="ECOLI", statistic="monthly geomean")
    figure = sheet.cell(row, column(sheet, "figure"))
    check(figure.value == ">70" and figure.alignment.horizontal == "right", f"Limits: {figure.value!r}")
    number = sheet.cell(find(sheet, parameter="PH"), column(sheet, "limit as number"))
    check(number.value == 6 and number.number_format == "0.0", f"Limits: {number.value!r} {number.number_format}")
    check(sheet.cell(2, column(sheet, "outfall")).value == "001", "Limits: an outfall lost its zeros")


def daily(book):
    sheet = book["Daily"]
    check(sheet.max_row == 1 + 31 + 4, f"Daily: {sheet.max_row} rows")
    for n in range(31):
        cell = sheet.cell(2 + n, 1)
        check(cell.value == datetime.datetime(2025, 3, 1) + datetime.timedelta(n), f"Daily: {cell.value!r}")
    flow, chlorine = column(sheet, "EFF FLOW MGD"), column(sheet, "EFF CL2 mg/L")
    beyond = column(sheet, "beyond a limit")
    check(sheet.cell(2, flow).value == 2.135 and sheet.cell(2, flow).number_format == "0.000", "Daily: flow")
    less = sheet.cell(2, chlorine)
    check(less.value == "<0.010" and less.alignment.horizontal == "right", f"Daily: {less.value!r}")
    over = sheet.cell(19, chlorine)
    check(over.value == 0.031 and over.data_type == "n", f"Daily: {over.value!r}")
    check(over.font.b and over.border.left.style == "medium", "Daily: a value beyond its limit is not marked")
    check(sheet.cell(19, beyond).value == "BEYOND: EFF CL2", f"Daily: {sheet.cell(19, beyond).value!r}")
    check(sheet.cell(18, beyond).value is None, "Daily: a mark too many")
    check(sheet.cell(11, chlorine).value == "E", "Daily: a code is not shown")
    check(sheet.cell(2, 1).fill.fgColor.rgb == "FFF0F0F0", "Daily: a Saturday is not marked")
    check(sheet.cell(4, 1).fill.fill_type is None, "Daily: a Monday is marked")
    check([sheet.cell(r, 1).value for r in range(33, 37)] == ["mean", "lowest", "highest", "days"], "Daily: below")
    check(sheet.cell(33, column(sheet, "INF BOD5 mg/L")).value == 195.7, "Daily: the mean of the influent")
    check(sheet.cell(33, column(sheet, "EFF PH pH")).value is None, "Daily: a mean of pH")


def other_sheets(book):
    summary = book["Summary"]
    words = [(summary.cell(r, 1).value, summary.cell(r, 2).value) for r in range(1, summary.max_row + 1)]
    check(words[0][0] == "Quill Ford Wastewater Plant, March 2025", f"Summary: {words[0]}")
    check((None, "3 exceedances, 1 shortfall of samples, 1 target passed") in words, "Summary: no headline")
    found = [word for word, _ in words if word in ("EXCEEDED", "SHORT", "target passed")]
    check(found == ["EXCEEDED"] * 3 + ["SHORT", "target passed"], f"Summary: {found}")
    check(("EXCEEDED", "EFF TSS, weekly average: 51 mg/L; at most 45 mg/L; 2025-03-16 to 2025-03-22") in words,
          "Summary: the weekly average")
    sheet = book["Exceedances"]
    check([sheet.cell(r, 1).value for r in rows(sheet)] == found, "Exceedances: not those of the summary")
    remarks = book["Remarks"]
    row = find(remarks, remark=12)
    told = [remarks.cell(row, column(remarks, c)).value for c in ("when", "about", "kind", "what is said", "by")]
    check(told == ["2025-03-17 to 2025-03-18", "EFF TSS weekly-average", "event: wet-weather", "=two days of rain", "day shift"], f"Remarks: {told}")
    for name in ("Limits", "Exceedances"):
        notes = [book[name].cell(r, column(book[name], "note")).value for r in rows(book[name])]
        check(notes.count("remark 12: =two days of rain") == 1, f"{name}: notes {notes}")
    process = book["Process"]
    check([process.cell(r, 2).value for r in (2, 3, 33, 34, 35, 36)] == [121.0, 124.5, 122.8, 121.0, 124.5, 2], "Process")
    check(process.cell(1, 2).value == "sludge volume index AB1 mL/g", f"Process: {process.cell(1, 2).value}")
    rules = [line[0].value for line in book["Rules and notes"].iter_rows()]
    for sentence in ("weeks begin on Sunday", "The permit governs over this summary.", "BOD5: SM 5210 B",
                     "2025-03-10, EFF CL2: code E, analysis not conducted"):
        check(sentence in rules, f"Rules and notes: no {sentence!r}")


def main():
    book = openpyxl.load_workbook(sys.argv[1])
    names = ["Summary", "Limits", "Daily", "Process", "Exceedances", "Remarks", "Set aside", "Corrections", "Rules and notes"]
    check(book.sheetnames == names, f"sheets: {book.sheetnames}")
    check(book.properties.created == datetime.datetime(2025, 4, 10, 12), f"created {book.properties.created}")
    page_settings(book)
    no_formulas(book)
    limits(book)
    daily(book)
    other_sheets(book)
    for told in failed:
        print(f"FAILED: {told}")
    print(f"{checks} checks of the workbook, {len(failed)} failed")
    return 1 if failed else 0


if __name__ == "__main__":
    sys.exit(main())
