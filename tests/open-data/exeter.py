#!/usr/bin/env python3
"""Exeter, New Hampshire (US EPA, ECHO, NPDES Monitoring Data Download; US government data): sixteen years of monthly discharge figures against the
limits in force. The source carries no verdict; expected.csv has an independent script's, of the raw figure and of the figure rounded to the limit's
decimals half even and half up, and says where there is no figure to judge. Each figure is loaded as the one reading of its month, once for each
of the three ways of comparing."""
import csv
import itertools
import os
import sys
import tempfile

sys.path.insert(0, os.path.dirname(os.path.abspath(__file__)))
from book import Book, table  # noqa: E402
from support import absent, ran, shared  # noqa: E402

WAYS = {"R": ("compare=raw", "verdict_raw"), "E": ("compare=rounded;rounding=half-even", "verdict_rounded_half_even"),
        "U": ("compare=rounded;rounding=half-up", "verdict_rounded_half_up")}
VERDICT = {"meets": "met", "exceeds": "exceeded"}
UNITS = {"MPN/100mL": "/100mL", "#/100mL": "/100mL", "CFU/100mL": "/100mL"}
# Of figures that are only monitored and were not reported: there is no number to convert.
UNITS |= {"deg C": "degC", "SU": "pH", "ppt": "g/L", "hr/mo": "hr", "k/100mL": "/100mL", "#": "count"}
# The reported figure is a rolling one already; as the reading of one month it is that month's average.
AS_LOADED = {"rolling-12-month": "monthly-average"}
READING = ("date", "point", "parameter", "value", "unit")


def last_day(month):
    year, of = (int(n) for n in month.split("-"))
    return f"{month}-{[31, 29 if year % 4 == 0 and (year % 100 or year % 400 == 0) else 28, 31, 30, 31, 30, 31, 31, 30, 31, 30, 31][of - 1]}"


def own_point(row):
    return "-".join(("X", row["outfall"], row["location"], row["limit_set"], row["value_type"], row["code"]))


def own_parameter(row):
    return "-".join(("X", row["code"], UNITS.get(row["unit"], row["unit"]).replace("/", "").replace("%", "PCT")))


def reading(row):
    """The figure as a value; None where none can be loaded."""
    value = row["value"]
    if value.startswith("NODI:"):
        code = value.split(":")[1].strip()
        return f"code {code}" if code.isdigit() else code
    return None if row["note"] in ("blank figure", "unreadable figure") else value


def own_limits(rows):
    """A limit for each stretch of months with the same number."""
    limits = []
    for (point, parameter), group in itertools.groupby(sorted(rows, key=lambda r: (own_point(r), own_parameter(r), r["month"])),
                                                       key=lambda r: (own_point(r), own_parameter(r))):
        for number, stretch in itertools.groupby(group, key=lambda r: r["limit"]):
            stretch = list(stretch)
            first, last = stretch[0], stretch[-1]
            limits.append({"outfall": "", "point": point, "parameter": parameter, "basis": "concentration",
                           "statistic": AS_LOADED.get(first["statistic"], first["statistic"]), "bound": first["bound"], "limit": number,
                           "unit": UNITS.get(first["unit"], first["unit"]), "from": f"{first['month']}-01", "to": last_day(last["month"])})
    return limits


def cell(value):
    return f"\"{value}\"" if "," in value else value


def text(columns, rows):
    return "\n".join([",".join(columns)] + [",".join(cell(row.get(c) or "") for c in columns) for row in rows]) + "\n"


def thrice(rows, rules=False):
    """The rows for each way of comparing, at points of their own."""
    found = []
    for way, (words, _) in WAYS.items():
        found += [{**row, "point": f"{row['point']}.{way}", **({"rules": words} if rules else {})} for row in rows]
    return found


def description(root, others):
    limits = [row for row in table(root, "plant", "limits.csv") if row["bound"] != "report"]
    limits = [{**row, "note": ""} for row in limits] + own_limits(others)
    points = [{"point": p, "name": p, "role": "other"} for p in sorted({row["point"] for row in limits})]
    parameters = [{k: row[k] for k in ("parameter", "name", "unit", "decimals", "day_rule")} for row in table(root, "plant", "parameters.csv")]
    own = {own_parameter(row): UNITS.get(row["unit"], row["unit"]) for row in others}
    parameters += [{"parameter": p, "name": p, "unit": unit, "decimals": "2", "day_rule": "mean"} for p, unit in sorted(own.items())]
    return {"limits.csv": text(("outfall", "point", "parameter", "basis", "statistic", "bound", "limit", "unit", "season", "from", "to", "rules"),
                               thrice(limits, True)),
            "points.csv": text(("point", "name", "role", "outfall"), thrice(points)),
            "parameters.csv": text(("parameter", "name", "unit", "decimals", "day_rule"), parameters)}


def readings(root, others, path):
    limited = {(row["point"], row["parameter"]) for row in table(root, "plant", "limits.csv") if row["bound"] != "report"}
    rows = [row for row in table(root, "readings.csv") if (row["point"], row["parameter"]) in limited]
    rows += [{"date": f"{row['month']}-15", "point": own_point(row), "parameter": own_parameter(row), "value": reading(row),
              "unit": UNITS.get(row["unit"], row["unit"])} for row in others if reading(row) is not None]
    rows = thrice(rows)
    with open(path, "w", newline="", encoding="utf-8") as f:
        writer = csv.DictWriter(f, READING, extrasaction="ignore")
        writer.writeheader()
        writer.writerows(rows)
    return len(rows)


def compare(book, row, got):
    own = not row["helper_point"]
    for way, (_, column) in WAYS.items():
        point = own_point(row) if own else row["helper_point"]
        statistic = AS_LOADED.get(row["statistic"], row["statistic"]) if own else row["statistic"]
        key = f"{point}.{way}", own_parameter(row) if own else row["parameter"], statistic
        found = [r for r in got if (r["point"], r["parameter"], r["statistic"]) == key and r["limit"] == row["limit"]]
        told = f"{row['month']} {' '.join(key)} limit {row['limit']}, figure '{row['value']}'"
        if row[column] != "no figure":
            # A week is judged with its own row; the others have no reading and no verdict.
            verdicts = {r["verdict"] for r in found} - {"no-data"}
            book.check(verdicts == {VERDICT[row[column]]}, f"{told}: {sorted(verdicts)}, expected {row[column]}")
        else:
            verdicts = {r["verdict"] for r in found}
            wanted = {"no-discharge"} if row["note"] == "no-data code C" else {"no-data"}
            if row["statistic"] == "weekly-average":
                wanted |= {"no-data"}
            book.check(bool(found) and verdicts <= wanted and not any(r["figure"] for r in found),
                       f"{told}: {sorted(verdicts)}, and it has no figure ({row['note']})")


def main():
    root = shared("open-data/exeter-dmr")
    if root is None:
        return absent("the Exeter open data")
    expected = [row for row in table(root, "expected.csv") if row["verdict_raw"] != "report only"]
    for row in expected:
        if row["limit"] == "Mon":  # monitored without a limit, and no figure either
            row["limit"], row["bound"] = "", "report"
            row["helper_point"] = ""
    others = [row for row in expected if not row["helper_point"]]
    with tempfile.TemporaryDirectory() as folder:
        book = Book(root, folder, description(root, others))
        path = os.path.join(folder, "figures.csv")
        book.load(path, readings(root, others, path))
        for month in sorted({row["month"] for row in expected}):
            got = book.rows("permit", "--month", month)
            for row in expected:
                if row["month"] == month:
                    compare(book, row, got)
    told = {word: sum(1 for row in expected if row["verdict_raw"] == word) for word in ("meets", "exceeds", "no figure")}
    return ran(book.checks, book.failed, f"{len(expected)} figures compared three ways: {told}")


if __name__ == "__main__":
    sys.exit(main())
