#!/usr/bin/env python3
"""A German plant, 2016 (OK Lab Leipzig, Datenlizenz Deutschland, non-commercial): monthly means of strengths and flows, monthly mean, lowest and
highest of daily loads, and the dry sludge of each month, beside the same recomputed from the file with exact fractions."""
import csv
import os
import sys
import tempfile
from decimal import Decimal

sys.path.insert(0, os.path.dirname(os.path.abspath(__file__)))
from book import Book, same_to_six, table  # noqa: E402
from support import absent, ran, shared  # noqa: E402

FILE = "GeordneteBetriebsdaten_2016_ODD.csv"
PARAMETERS = ("COD", "BOD", "TP", "TN", "NH3N")
YEAR = ("process", "--from", "2016-01-01", "--to", "2016-12-31", "--step", "month")


def process():
    """What the plant calls its sludge is its own name, so its dry mass is a figure of its own."""
    return ("name,at,parameter,formula,argument,source,unit\n"
            "dry-tons,CAKE,,dry-tons,wet_tons,CAKE SLUDGE,\n"
            "dry-tons,CAKE,,dry-tons,cake,CAKE TS,\n")


def limits():
    lines = ["outfall,point,parameter,basis,statistic,bound,limit,unit,rules"]
    for point in ("INF", "EFF"):
        lines += [f"{point},{point},{p},concentration,monthly-average,report,,mg/L,digits=6" for p in PARAMETERS]
        lines.append(f"{point},{point},FLOW,flow,monthly-average,report,,m3/d,digits=6")
    return "\n".join(lines) + "\n"


def means(book, expected):
    got = {}
    for month in sorted({row["month"] for row in expected}):
        for row in book.rows("permit", "--month", month):
            got[row["point"], row["parameter"], month] = row["figure"]
    for row in expected:
        key = row["point"], row["parameter"], row["month"]
        if row["parameter"] in PARAMETERS + ("FLOW",) and row["mean_nd_zero"]:
            book.check(got.get(key) and same_to_six(got[key], row["mean_nd_zero"]), f"{key}: {got.get(key)}, recomputed {row['mean_nd_zero']}")


def loads(book, expected):
    got = {(r["at"], r["parameter"], r["from"][:7]): r for r in book.rows(*YEAR) if r["name"] == "mass-load"}
    for row in expected:
        if not row["parameter"].endswith(" daily load"):
            continue
        key = row["point"], row["parameter"].removesuffix(" daily load"), row["month"]
        figure = got.get(key)
        book.check(figure is not None, f"{key}: no load")
        if figure is None:
            continue
        book.check(figure["count"] == row["readings"] and figure["unit"] == "kg/d", f"{key}: {figure}, recomputed {row}")
        if row["readings"] == "0":
            continue
        for column, recomputed in (("mean", "mean_nd_zero"), ("min", "lowest"), ("max", "highest")):
            book.check(same_to_six(figure[column], row[recomputed]), f"{key} {column}: {figure[column]}, recomputed {row[recomputed]}")


def sludge(book, root):
    got = {r["from"][:7]: r for r in book.rows(*YEAR) if r["name"] == "dry-tons"}
    for row in table(root, "sludge-monthly.csv"):
        figure = got[row["month"]]
        total = Decimal(figure["mean"]) * int(figure["count"])
        book.check(abs(total - Decimal(row["dry_t"])) <= Decimal("1e-6") and figure["unit"] == "t",
                   f"{row['month']}: {total} {figure['unit']} dry, recomputed {row['dry_t']}")


def main():
    root = shared("open-data/leipzig-2016")
    if root is None:
        return absent("the Leipzig open data")
    mapped = [row["column"] for row in table(root, "map.csv") if not row["skip"]]
    with open(os.path.join(root, FILE), newline="", encoding="utf-8") as f:
        cells = sum(1 for row in csv.DictReader(f, delimiter=";") for column in mapped if row[column].strip())
    expected = table(root, "monthly.csv")
    with tempfile.TemporaryDirectory() as folder:
        book = Book(root, folder, {"process.csv": process(), "limits.csv": limits()})
        book.load(os.path.join(root, FILE), cells, "--map", os.path.join(root, "map.csv"))
        means(book, expected)
        loads(book, expected)
        sludge(book, root)
    return ran(book.checks, book.failed, f"{len(expected)} months of figures compared")


if __name__ == "__main__":
    sys.exit(main())
