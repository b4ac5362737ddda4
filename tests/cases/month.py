#!/usr/bin/env python3
"""Worked plant-months: each case is made, loaded and judged by the program, and every cell it prints is compared.

The full set is read from beside the checkout; the published ones also stand in tests/permit. A case that the
file CORE does not name needs statistics beyond the core; all are run.
"""
import csv
import io
import os
import subprocess
import sys
import tempfile

sys.path.insert(0, os.path.join(os.path.dirname(os.path.abspath(__file__)), ".."))
from support import absent, program, ran, shared  # noqa: E402

HEADER = ("outfall,point,parameter,basis,statistic,from,to,on,figure,unit,bound,limit,verdict,times,samples,"
          "required,note").split(",")
KEY = ("outfall", "point", "parameter", "basis", "statistic", "from", "to", "bound", "limit")
DESCRIPTION = ("plant.csv", "points.csv", "parameters.csv", "limits.csv", "basins.csv", "meters.csv", "process.csv")


def call(*words):
    return subprocess.run([program(), *words], capture_output=True, text=True)


def must(result, allowed=(0,)):
    if result.returncode not in allowed:
        raise AssertionError(f"{' '.join(result.args[1:])}: exit {result.returncode}: {result.stderr.strip()}")
    return result.stdout


def rows_of(text):
    reader = csv.DictReader(io.StringIO(text))
    if reader.fieldnames != HEADER:
        raise AssertionError(f"header is {reader.fieldnames}")
    rows = {}
    for row in reader:
        key = tuple(row[k] for k in KEY)
        if key in rows:
            raise AssertionError(f"printed twice: {key}")
        rows[key] = row
    return rows


def judge(case, folder):
    book = os.path.join(folder, "case.book")
    plant = os.path.join(folder, "plant")
    os.mkdir(plant)
    for name in DESCRIPTION:
        source = os.path.join(case, name)
        if os.path.exists(source):
            with open(source, "rb") as f, open(os.path.join(plant, name), "wb") as g:
                g.write(f.read())
    must(call("new", book, plant))
    must(call("-b", book, "load", os.path.join(case, "readings.csv")))
    revise = os.path.join(case, "revise.csv")
    if os.path.exists(revise):
        must(call("-b", book, "load", "--revise", "--reason", "laboratory correction", revise))
    with open(os.path.join(case, "month.txt")) as f:
        month = f.read().strip()
    extra = []
    if os.path.exists(os.path.join(case, "args.txt")):
        with open(os.path.join(case, "args.txt")) as f:
            extra = f.read().split()
    return call("-b", book, "permit", "--month", month, *extra, "--as", "csv")


def compare(case, folder):
    """Returns how many cells were compared."""
    result = judge(case, folder)
    with open(os.path.join(case, "expected.csv"), newline="") as f:
        expected = rows_of(f.read())
    exceeded = any(row["verdict"] == "exceeded" for row in expected.values())
    got = rows_of(must(result, (3,) if exceeded else (0, 3)))
    if set(got) != set(expected):
        raise AssertionError(f"missing rows {sorted(set(expected) - set(got))}, extra rows {sorted(set(got) - set(expected))}")
    cells = 0
    wrong = []
    for key, row in expected.items():
        for column in HEADER:
            if column == "note" or row[column] == "*":
                continue
            cells += 1
            if got[key][column] != row[column]:
                wrong.append(f"{key}: {column} is '{got[key][column]}', expected '{row[column]}'")
    if wrong:
        raise AssertionError("\n    ".join(wrong))
    return cells


def main():
    root = shared("domain/cases/month")
    if root is None:
        return absent("the worked plant-months")
    names = sorted(n for n in os.listdir(root) if os.path.isdir(os.path.join(root, n)))
    wanted = [a for a in sys.argv[1:] if not a.startswith("-")]
    failed = 0
    cells = 0
    for name in names:
        if wanted and name not in wanted:
            continue
        with tempfile.TemporaryDirectory() as folder:
            try:
                cells += compare(os.path.join(root, name), folder)
            except AssertionError as error:
                failed += 1
                print(f"{name}: {error}")
    return ran(len(wanted) or len(names), failed, f"{cells} cells compared")


if __name__ == "__main__":
    sys.exit(main())
