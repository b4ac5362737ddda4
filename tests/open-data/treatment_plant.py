#!/usr/bin/env python3
"""An urban plant in Catalonia, 1990-91 (UCI Machine Learning Repository, "Water Treatment Plant", CC BY 4.0): nine removals a day as the plant
reported them, and monthly removals by two rules."""
import collections
import os
import sys
import tempfile

sys.path.insert(0, os.path.dirname(os.path.abspath(__file__)))
from book import Book, rounds_to, same_to_six, table  # noqa: E402
from support import absent, ran, shared  # noqa: E402

REMOVALS = sorted({("INF", "EFF", p) for p in ("BOD", "COD", "TSS", "SETTLEABLE")} |
                  {("PI", "PE", p) for p in ("BOD", "TSS", "SETTLEABLE")} | {("PE", "EFF", p) for p in ("BOD", "COD")})


def process():
    """The plant's own figures: removals whose stages its roles do not name."""
    lines = ["name,at,parameter,formula,argument,source,unit"]
    for start, end, parameter in REMOVALS:
        for argument, point in (("influent", start), ("effluent", end)):
            lines.append(f"stage-removal,{start}>{end},{parameter},percent-removal,{argument},{point} {parameter},")
    return "\n".join(lines) + "\n"


def limits():
    lines = ["outfall,point,parameter,basis,statistic,bound,limit,unit,rules"]
    for rule in ("averages", "daily"):
        lines += [f"{rule},EFF,{p},removal,monthly-average,report,,%,digits=6;removal={rule};influent=INF" for p in ("BOD", "COD", "TSS")]
    return "\n".join(lines) + "\n"


def daily(book, expected):
    days = sorted(row["date"] for row in expected)
    got = {}
    for row in book.rows("process", "--from", days[0], "--to", days[-1]):
        if row["name"] == "stage-removal":
            got[row["date"], row["at"], row["parameter"]] = row
    for row in expected:
        key = row["date"], f"{row['from_point']}>{row['to_point']}", row["parameter"]
        figure = got[key]["value"]
        if not row["removal_percent"]:
            book.check(figure == "" and got[key]["note"], f"{key}: {figure} ({got[key]['note']}), expected no figure and a reason")
            continue
        book.check(figure and same_to_six(figure, row["removal_percent"]), f"{key}: {figure}, recomputed {row['removal_percent']}")
        if figure and row["agreement"] == "exact":
            book.check(rounds_to(figure, row["reported"]), f"{key}: {figure}, reported {row['reported']}")


def monthly(book, root):
    got = {}
    expected = table(root, "removal-monthly.csv")
    for month in sorted({row["month"] for row in expected}):
        for row in book.rows("permit", "--month", month):
            got[month, row["parameter"], row["outfall"]] = row["figure"]
    for row in expected:
        for rule, column in (("averages", "of_averages"), ("daily", "average_of_paired_days")):
            figure = got.get((row["month"], row["parameter"], rule))
            if figure is not None and row[column]:
                book.check(figure and same_to_six(figure, row[column]), f"{row['month']} {row['parameter']} {rule}: {figure}, recomputed {row[column]}")


def main():
    root = shared("open-data/uci-water-treatment")
    if root is None:
        return absent("the treatment-plant open data")
    mapped = [row["column"] for row in table(root, "map.csv") if not row["skip"]]
    cells = sum(1 for row in table(root, "readings.csv") for column in mapped if row[column].strip())
    expected = table(root, "expected.csv")
    with tempfile.TemporaryDirectory() as folder:
        book = Book(root, folder, {"process.csv": process(), "limits.csv": limits()})
        book.load(os.path.join(root, "readings.csv"), cells, "--map", os.path.join(root, "map.csv"))
        daily(book, expected)
        monthly(book, root)
    told = collections.Counter(row["agreement"] for row in expected)
    return ran(book.checks, book.failed, f"{len(expected)} removals compared: {dict(sorted(told.items()))}")


if __name__ == "__main__":
    sys.exit(main())
