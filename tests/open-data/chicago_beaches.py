#!/usr/bin/env python3
"""Counts at three beaches of Chicago, 2015 (Chicago Park District, in the City of Chicago's public repository): geometric means by month, week
and 30 days. The source reports none; expected.csv has them from an independent script, every digit printed right."""
import os
import sys
import tempfile

sys.path.insert(0, os.path.dirname(os.path.abspath(__file__)))
from book import Book, table  # noqa: E402
from support import absent, ran, shared  # noqa: E402

MONTHS = ("2015-05", "2015-06", "2015-07", "2015-08")
DIGITS = "digits=6"  # as many decimals as expected.csv prints
POINTS = ("CALUMET", "RAINBOW", "SOUTH")


def limits(window_days):
    """A row for each statistic; a 30-day one in force on each sampling day alone, so that every window is seen and not only the worst."""
    lines = ["outfall,point,parameter,basis,statistic,bound,limit,unit,from,to,rules"]
    for point in POINTS:
        for statistic in ("monthly-geomean", "weekly-geomean"):
            lines.append(f",{point},ENTERO,concentration,{statistic},report,,/100mL,,,{DIGITS}")
        lines.append(f",{point},ENTERO,concentration,daily,target,1000,/100mL,,,")
        lines.append(f",{point},ENTERO,concentration,monthly-average,report,,/100mL,,,{DIGITS}")
        lines += [f",{point},ENTERO,concentration,rolling-30-day-geomean,report,,/100mL,{day},{day},{DIGITS}" for day in window_days]
    return "\n".join(lines) + "\n"


def printed(book):
    """{(point, statistic, last day): row} of all months; a week of two months stands in that of its last day."""
    got = {}
    for month in (*MONTHS, "2015-09"):
        for row in book.rows("permit", "--month", month):
            last = row["on"] if row["statistic"].startswith("rolling") else row["to"]
            if row["statistic"] == "daily":
                last = month
            got[row["point"], row["statistic"], last] = row
    return got


def main():
    root = shared("open-data/chicago-beaches-2015")
    if root is None:
        return absent("the Chicago beaches open data")
    expected = table(root, "expected.csv")
    above = table(root, "above-1000.csv")
    windows = sorted({row["to"] for row in expected if row["statistic"] not in ("monthly-geomean", "weekly-geomean")})
    with tempfile.TemporaryDirectory() as folder:
        book = Book(root, folder, {"limits.csv": limits(windows)})
        counts = table(root, "counts.csv")
        book.load(os.path.join(root, "counts.csv"), sum(1 for row in counts for k, v in row.items() if k != "Date" and v), "--map",
                  os.path.join(root, "map.csv"))
        got = printed(book)
        for row in expected:
            rolling = row["statistic"] not in ("monthly-geomean", "weekly-geomean")
            key = row["point"], "rolling-30-day-geomean" if rolling else row["statistic"], row["to"]
            told = f"{key}"
            book.check(key in got, f"{told}: no row")
            if key not in got:
                continue
            book.check(got[key]["figure"] == row["geometric_mean"], f"{told}: {got[key]['figure']}, expected {row['geometric_mean']}")
            if not rolling:
                book.check(got[key]["samples"] == row["samples"], f"{told}: {got[key]['samples']} samples, expected {row['samples']}")
                book.check(got[key]["from"] == row["from"], f"{told}: from {got[key]['from']}, expected {row['from']}")
            if row["statistic"] == "monthly-geomean":
                mean = got[row["point"], "monthly-average", row["to"]]["figure"]
                book.check(mean == row["arithmetic_mean"], f"{told}: arithmetic {mean}, expected {row['arithmetic_mean']}")
        for point in POINTS:
            for month in MONTHS:
                passes = sum(1 for row in above if row["point"] == point and row["date"].startswith(month))
                row = got[point, "daily", month]
                book.check(row["times"] == str(passes), f"{point} {month}: {row['times']} counts above 1000, expected {passes}")
                book.check(row["verdict"] == ("target-passed" if passes else "target-met"), f"{point} {month}: {row['verdict']}")
    return ran(book.checks, book.failed, f"{len(expected)} geometric means compared")


if __name__ == "__main__":
    sys.exit(main())
