#!/usr/bin/env python3
"""Tracy, California (California State Water Resources Control Board, electronic self-monitoring reports, a public record): the plant's reported
monthly averages and daily loads. Where report and recomputation disagree, the recomputation is what we must print."""
import collections
import os
import sys
import tempfile

sys.path.insert(0, os.path.dirname(os.path.abspath(__file__)))
from book import Book, rounds_to, same_to_six, table  # noqa: E402
from support import absent, ran, shared  # noqa: E402

PARAMETER = {
    "Ammonia, Total (as N)": "NH3N",
    "Nitrate, Total (as N)": "NO3N",
    "Nitrite, Total (as N)": "NO2N",
    "Nitrite Plus Nitrate (as N)": "NOXN",
    "Phosphorus, Total (as P)": "TP",
}
BASIS = {"monthly average of concentration": "concentration", "monthly average of daily loads": "load"}

# Report-only figures are asked for with the digits the comparison needs.
RULES = "digits=6;sign=never"


def limits():
    lines = ["outfall,point,parameter,basis,statistic,bound,limit,unit,rules"]
    for parameter in sorted(set(PARAMETER.values())):
        lines.append(f"001,EFF,{parameter},concentration,monthly-average,report,,mg/L,{RULES}")
        lines.append(f"001,EFF,{parameter},load,monthly-average,report,,lb/d,{RULES}")
    return "\n".join(lines) + "\n"


def daily_loads(book, expected):
    """Every day's load, from the process table: flow x concentration x 8.34 (40 CFR 122.2: the day's mass)."""
    days = sorted(row["date"] for row in expected)
    got = {}
    for row in book.rows("process", "--from", days[0], "--to", days[-1]):
        if row["name"] == "mass-load" and row["at"] == "EFF":
            got[row["date"], row["parameter"]] = row
    for row in expected:
        key = row["date"], PARAMETER[row["parameter"]]
        figure = got.get(key, {"value": "", "note": "no row"})
        compare(book, row, figure["value"], f"{key} ({figure['note']})")


def monthly(book, expected):
    got = {}
    for month in sorted({row["month"] for row in expected}):
        for row in book.rows("permit", "--month", month):
            got[month, row["parameter"], row["basis"]] = row
    for row in expected:
        key = row["month"], PARAMETER[row["parameter"]], BASIS[row["statistic"]]
        compare(book, row, got[key]["figure"], str(key))


def compare(book, row, figure, told):
    if row["agreement"] == "not computable":
        book.check(figure == "" or "ND" in row["note"], f"{told}: {figure}, but it is not computable: {row['note']}")
        return
    if not figure:
        book.check(False, f"{told}: no figure, expected {row['recomputed']}")
        return
    book.check(same_to_six(figure, row["recomputed"]), f"{told}: {figure}, recomputed {row['recomputed']} ({row['note']})")
    if row["agreement"] == "exact":
        book.check(rounds_to(figure, row["reported_value"]), f"{told}: {figure}, reported {row['reported_value']}")
    elif row["reported_value"]:
        book.check(not rounds_to(figure, row["reported_value"]), f"{told}: {figure} agrees with {row['reported_value']}, and must not")


def main():
    root = shared("open-data/tracy-esmr")
    if root is None:
        return absent("the Tracy open data")
    expected = table(root, "expected.csv")
    with tempfile.TemporaryDirectory() as folder:
        book = Book(root, folder, {"limits.csv": limits()})
        book.load(os.path.join(root, "readings.csv"), len(table(root, "readings.csv")))
        daily_loads(book, [row for row in expected if row["statistic"] == "daily load"])
        monthly(book, [row for row in expected if row["statistic"] in BASIS])
    told = collections.Counter(row["agreement"] for row in expected)
    return ran(book.checks, book.failed, f"{len(expected)} reported figures compared: {dict(sorted(told.items()))}")


if __name__ == "__main__":
    sys.exit(main())
