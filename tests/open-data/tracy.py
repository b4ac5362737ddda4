#!/usr/bin/env python3
"""Tracy, California (California State Water Resources Control Board, electronic self-monitoring reports, a public record): the plant's reported
monthly averages and daily loads. Where report and recomputation disagree, the recomputation is what we must print."""
import collections
import csv
import glob
import os
import sys
import tempfile
from fractions import Fraction

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
# The plant averaged the daily loads it had reported, so those are loaded as readings of their own parameters.
ASKED = {"monthly average of concentration": "{}", "monthly average of daily loads": "{}-REPORTED"}

# Report-only figures are asked for with the digits the comparison needs.
RULES = "digits=9;sign=never"


def parameters(root):
    with open(os.path.join(root, "plant", "parameters.csv"), encoding="utf-8") as f:
        lines = f.read().splitlines()
    lines += [f"{p}-REPORTED,Daily load as reported,lb/d,1,mean," for p in sorted(set(PARAMETER.values()))]
    return "\n".join(lines) + "\n"


def limits():
    lines = ["outfall,point,parameter,basis,statistic,bound,limit,unit,rules"]
    for parameter in sorted(set(PARAMETER.values())):
        lines.append(f"001,EFF,{parameter},concentration,monthly-average,report,,mg/L,{RULES}")
        lines.append(f"001,EFF,{parameter}-REPORTED,concentration,monthly-average,report,,lb/d,{RULES}")
    return "\n".join(lines) + "\n"


def reported_loads(root, folder):
    """The daily loads of the raw files as a long file, and the mean of each month's days by hand."""
    path = os.path.join(folder, "reported-loads.csv")
    days = collections.defaultdict(lambda: collections.defaultdict(list))
    count = 0
    with open(path, "w", newline="", encoding="utf-8") as out:
        out.write("date,time,point,parameter,value,unit\n")
        for name in sorted(glob.glob(os.path.join(root, "Tracy_*.csv"))):
            with open(name, newline="", encoding="latin-1") as f:
                for row in csv.DictReader(f):
                    if row["Calculated Method"] != "Daily Discharge" or row["Location"] != "EFF-001":
                        continue
                    month, day, year = (int(n) for n in row["Sampling Date"].split("/"))
                    # A load without a number is one of a result not detected: it counts as 0 under nondetect=zero.
                    value = row["Result"] if row["Result"] and row["Qual"] != "ND" else "<1"
                    parameter = PARAMETER[row["Parameter"]]
                    out.write(f"{year}-{month:02d}-{day:02d},{row['Sampling Time']},EFF,{parameter}-REPORTED,{value},lb/d\n")
                    days[f"{year}-{month:02d}", parameter][day].append(Fraction(0) if value == "<1" else Fraction(value))
                    count += 1
    means = {key: sum(sum(v) / len(v) for v in of.values()) / len(of) for key, of in days.items()}
    twice = {(*key, True) for key, of in days.items() if any(len(v) > 1 for v in of.values())}
    return path, count, means, twice


def number(row):
    """A result as nondetect=zero counts it: ND is 0, DNQ its estimate."""
    return Fraction(0) if row["value"] == "ND" or row["value"].startswith("<") else Fraction(row["value"].split()[-1])


def by_day(rows):
    """{(date, parameter): the day's mean} of the effluent, in exact fractions, and the days with more rows than one. A result that
    is filed twice (same time and value) is one reading."""
    values = collections.defaultdict(set)
    count = collections.Counter()
    for row in rows:
        if row["point"] == "EFF":
            values[row["date"], row["parameter"]].add((row["time"], number(row)))
            count[row["date"], row["parameter"]] += 1
    return {key: sum(n for _, n in of) / len(of) for key, of in values.items()}, {key for key, n in count.items() if n > 1}


def daily_loads(book, expected, day):
    """Every day's load, from the process table: flow x concentration x 8.34 (40 CFR 122.2: the day's mass). Where expected.csv leaves a day open
    because something was measured twice, the day's means are worked here (122.2: the day's average)."""
    days = sorted(row["date"] for row in expected)
    got = {}
    for row in book.rows("process", "--from", days[0], "--to", days[-1]):
        if row["name"] == "mass-load" and row["at"] == "EFF":
            got[row["date"], row["parameter"]] = row
    for row in expected:
        key = row["date"], PARAMETER[row["parameter"]]
        figure = got.get(key, {"value": "", "note": "no row"})
        told = f"{key} ({figure['note']})"
        parts = day.get((row["date"], "FLOW")), day.get(key)
        if row["agreement"] != "not computable":
            compare(book, row, figure["value"], told)
        elif None in parts:
            book.check(figure["value"] == "" and figure["note"], f"{told}: {figure['value']}, but it is not computable: {row['note']}")
        else:
            load = parts[0] * parts[1] * Fraction("8.34")
            book.check(figure["value"] and same_to_six(figure["value"], f"{float(load):.6f}"), f"{told}: {figure['value']}, by days {float(load)}")


def monthly(book, expected, day, means, twice):
    got = {}
    for month in sorted({row["month"] for row in expected}):
        for row in book.rows("permit", "--month", month):
            got[month, row["parameter"]] = row
    open_months = 0
    for row in expected:
        parameter = PARAMETER[row["parameter"]]
        figure = got[row["month"], ASKED[row["statistic"]].format(parameter)]["figure"]
        told = f"{row['month']} {parameter} {row['statistic']}"
        loads = "loads" in row["statistic"]
        if (row["month"], parameter, loads) not in twice:
            compare(book, row, figure, told)
            continue
        # expected.csv divides by the results; an average is over days (40 CFR 122.2), two results of a day being one value.
        open_months += 1
        own = [v for (date, p), v in day.items() if p == parameter and date.startswith(row["month"])]
        mean = means[row["month"], parameter] if loads else sum(own) / len(own)
        book.check(same_to_six(figure, f"{float(mean):.6f}"), f"{told}: {figure}, by days {float(mean)}")
    book.check(open_months == 4, f"{open_months} months have two results of one day; four are known")


def compare(book, row, figure, told):
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
        book = Book(root, folder, {"limits.csv": limits(), "parameters.csv": parameters(root)})
        rows = table(root, "readings.csv")
        book.load(os.path.join(root, "readings.csv"), len(rows))
        day, repeated = by_day(rows)
        path, count, means, twice = reported_loads(root, folder)
        book.load(path, count)
        twice |= {(date[:7], parameter, False) for date, parameter in repeated}
        daily_loads(book, [row for row in expected if row["statistic"] == "daily load"], day)
        monthly(book, [row for row in expected if row["statistic"] in ASKED], day, means, twice)
    told = collections.Counter(row["agreement"] for row in expected)
    return ran(book.checks, book.failed, f"{len(expected)} reported figures compared: {dict(sorted(told.items()))}")


if __name__ == "__main__":
    sys.exit(main())
