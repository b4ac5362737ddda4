#!/usr/bin/env python3
"""The demo plant: its year loads with the stated counts, gives every permit row worked independently in exact
fractions, and behaves like a plant (each such check is common practice, no source)."""
import csv
import io
import os
import re
import subprocess
import sys
import tempfile
from fractions import Fraction

sys.path.insert(0, os.path.join(os.path.dirname(os.path.abspath(__file__)), ".."))
from support import program, ran, source  # noqa: E402

HOME = os.path.join(source(), "fixtures", "marrow-bend")
PERMIT = ("outfall,point,parameter,basis,statistic,from,to,on,figure,unit,bound,limit,verdict,times,samples,required").split(",")


class Run:
    def __init__(self, folder):
        self.book = os.path.join(folder, "demo.book")
        self.folder = folder
        self.checks = 0
        self.failed = 0

    def check(self, good, told):
        self.checks += 1
        if not good:
            self.failed += 1
            print(told)

    def call(self, *words, allowed=(0, 3)):
        result = subprocess.run([program(), "-b", self.book, *words], capture_output=True, text=True, cwd=HOME)
        if result.returncode not in allowed:
            sys.exit(f"FAILED: weirbook {' '.join(words)}: exit {result.returncode}: {result.stderr}")
        return result


def table(path):
    with open(os.path.join(HOME, path), newline="", encoding="utf-8") as f:
        return list(csv.DictReader(f))


def rows(result):
    return list(csv.DictReader(io.StringIO(result.stdout)))


def load(run):
    """Each file by the commands of the plant's README, its counts against expected-load.csv."""
    extra = {
        "outside-laboratory-2025.csv": ["--map", "maps/outside-laboratory.csv"],
        "corrections-2025.csv": ["--revise", "--reason", "laboratory correction"],
        "late-slips-2025.csv": ["--set-aside", os.path.join(run.folder, "slips.csv")],
    }
    for expected in table("expected-load.csv"):
        name = expected["file"]
        result = run.call("load", *extra.get(name, []), "--as", "csv", f"readings/{name}")
        got = rows(result)[0]
        for column in ("rows", "accepted", "present", "revised", "set_aside"):
            run.check(got[column] == expected[column], f"{name}: {column} is {got[column]}, expected {expected[column]}\n{result.stderr}")
        run.check(result.returncode == (3 if int(expected["set_aside"]) else 0), f"{name}: exit status {result.returncode}")


def asides(run):
    with open(os.path.join(run.folder, "slips.csv"), newline="", encoding="utf-8") as f:
        got = {row["line"]: row["reason"] for row in csv.DictReader(f)}
    for expected in table("expected-aside.csv"):
        run.check(got.get(expected["line"]) == expected["reason"],
                  f"slip on line {expected['line']}: {got.get(expected['line'])}, expected {expected['reason']}")


def months(run):
    expected = table("expected.csv")
    for month in sorted({row["month"] for row in expected}):
        wanted = [row for row in expected if row["month"] == month]
        got = rows(run.call("permit", "--month", month, "--as", "csv"))
        run.check(len(got) == len(wanted), f"{month}: {len(got)} rows, expected {len(wanted)}")
        for a, b in zip(got, wanted):
            for column in PERMIT:
                run.check(a[column] == b[column],
                          f"{month} {b['point']} {b['parameter']} {b['statistic']} {b['from']}: {column} is '{a[column]}', expected '{b[column]}'")


def half_even(number, decimals):
    scaled = number * 10**decimals
    whole = scaled.numerator // scaled.denominator
    rest = scaled - whole
    whole += rest > Fraction(1, 2) or (rest == Fraction(1, 2) and whole % 2)
    digits = str(whole).rjust(decimals + 1, "0")
    return f"{digits[:-decimals]}.{digits[-decimals:]}" if decimals else digits


def span_of(line, per_month):
    """What a limit's months come to, from rows worked independently: one row a month, then one for all."""
    low = line[6] in ("min", "above")
    number = {r["figure"]: Fraction(re.sub("[<>]", "", r["figure"])) for rs in per_month.values() for r in rs if r["figure"]}
    figures = [r["figure"] for m in sorted(per_month) for r in per_month[m] if r["figure"]]
    totals = [0, 0]
    for month, found in sorted(per_month.items()):
        beyond = [r for r in found if r["verdict"] == "exceeded"]
        short = sum(r["required"] != "" and int(r["samples"]) < int(r["required"]) for r in found)
        times = sum(int(r["times"] or 1) for r in beyond)
        valued = [r for r in (beyond or found) if r["figure"]]
        worst = (min if low else max)(valued, key=lambda r: number[r["figure"]]) if valued else found[0]
        totals = [totals[0] + times, totals[1] + short]
        yield (*line, month, worst["figure"], worst["verdict"], str(times), str(short), "", "", "")
    mean = ""
    if figures and not any(f[0] in "<>" for f in figures):
        mean = half_even(sum(number[f] for f in figures) / len(figures), max(len(f.partition(".")[2]) for f in figures))
    yield (*line, "", "", "", str(totals[0]), str(totals[1]), max(figures, key=number.get, default=""),
           min(figures, key=number.get, default=""), mean)


def spans(run):
    """A year side by side: the figures are those of the months, gathered here a second time."""
    key = ("outfall", "point", "parameter", "basis", "statistic", "unit", "bound", "limit")
    found = {}
    for row in table("expected.csv"):
        found.setdefault(tuple(row[k] for k in key), {}).setdefault(row["month"], []).append(row)
    months_told = sorted({row["month"] for row in table("expected.csv")})
    got = rows(run.call("permit", "--month", months_told[0], "--to", months_told[-1], "--as", "csv"))
    told = {}
    for row in got:
        told.setdefault(tuple(row[k] for k in key), []).append(tuple(row.values()))
    run.check(set(told) == set(found), f"limits side by side: {set(told) ^ set(found)}")
    for line, per_month in found.items():
        expected = list(span_of(line, per_month))
        run.check(told.get(line) == expected, f"side by side: {told.get(line)}, expected {expected}")


def where(expected):
    """Where the program prints a figure: those of all basins together stand under the plant."""
    whole = ("solids-inventory", "solids-retention-time", "solids-retention-time-wasting-only", "food-to-microorganism")
    return "plant" if expected["name"] in whole else expected["at"]


def process(run):
    """Figures of single days, to a part in a million of the exact fraction."""
    got = {}
    for expected in table("expected-process.csv"):
        if not expected["date"]:
            continue
        day = expected["date"]
        if day not in got:
            got[day] = rows(run.call("process", "--from", day, "--to", day, "--as", "csv"))
        match = [r for r in got[day] if r["name"] == expected["name"] and r["at"] == where(expected)
                 and (r["name"] != "mass-load" or f" x {r['parameter']} x " in expected["rule"])]
        run.check(len(match) == 1, f"{day} {expected['name']} at {expected['at']}: {len(match)} figures")
        if len(match) == 1:
            exact = Fraction(expected["exact"])
            value = Fraction(match[0]["value"] or 0)
            run.check(abs(value - exact) <= abs(exact) / 10**6 and match[0]["unit"] == expected["unit"],
                      f"{day} {expected['name']} at {expected['at']}: {match[0]['value']} {match[0]['unit']}, "
                      f"expected {expected['value']} {expected['unit']} ({expected['rule']}); note {match[0]['note']}")


def behaves(run):
    """Common practice, no source: organic removal near or above 85 %, kill above 99 %, solids close within 10 %. All is taken from what the
    program exports and prints, not from the files."""
    removal = [r for r in rows(run.call("process", "--from", "2025-01-01", "--to", "2025-12-31", "--step", "year", "--as", "csv"))
               if r["name"] == "percent-removal" and r["at"] == "INF>EFF" and r["parameter"] in ("BOD5", "TSS")]
    run.check(len(removal) == 2, f"{len(removal)} whole-plant removals of the year")
    for r in removal:
        run.check(float(r["mean"]) >= 85, f"{r['parameter']} removal {r['mean']} %")
    counts = {}
    for r in rows(run.call("export")):
        if r["parameter"] == "ECOLI" and r["point"] in ("SE", "EFF"):
            number = re.sub(r"[^0-9.]", "", r["value"]) or r["rl"]
            counts.setdefault(r["date"], {}).setdefault(r["point"], float(number))
    both = [c for c in counts.values() if len(c) == 2]
    run.check(len(both) >= 40, f"{len(both)} days with counts before and after chlorination")
    for c in both:
        run.check(c["EFF"] <= 0.01 * c["SE"], f"kill below 99 %: {c}")
    closures(run)


def closures(run):
    """Common practice, no source: over the year solids in minus solids out close within 10 %. Loads, inventory and BOD5 removed are the program's
    own daily figures; sludge streams, which it gives no load, are its readings turned into dry pounds."""
    figures = rows(run.call("process", "--from", "2025-01-01", "--to", "2025-12-31", "--as", "csv"))

    def load(point, parameter):
        values = [float(r["value"]) for r in figures
                  if (r["name"], r["at"], r["parameter"]) == ("mass-load", point, parameter) and r["value"]]
        return sum(values) / len(values)

    held = [float(r["value"]) for r in figures if (r["name"], r["at"]) == ("solids-inventory", "plant") and r["value"]]
    run.check(len(held) == 365, f"{len(held)} days have an inventory")
    read = {}
    for r in rows(run.call("export", "--from", "2025-01-01", "--to", "2025-12-31")):
        if r["point"] in ("PS", "FIL", "DIGF", "DS") and re.fullmatch(r"[0-9.]+", r["value"]):
            read.setdefault((r["point"], r["parameter"]), {})[r["date"]] = float(r["value"])
            run.check(r["parameter"] != "FLOW" or r["unit"] == "gpd", f"{r['point']} FLOW is in {r['unit']}")

    def dry(point, solids, per_gallon):
        flow, part = read[point, "FLOW"], read[point, solids]
        return sum(flow[d] * part[d] * per_gallon for d in flow if d in part) / 365

    primary, filtrate = dry("PS", "TS", 8.34 / 100), dry("FIL", "TSS", 8.34 / 1e6)
    feed, change = dry("DIGF", "TS", 8.34 / 100), (held[-1] - held[0]) / 365
    grown = 0.67 * (load("PE", "BOD5") - load("EFF", "BOD5"))
    came = load("INF", "TSS") + filtrate + 0.05 * load("WAS", "TSS")
    for name, left, entered in (
            ("whole plant", primary + load("WAS", "TSS") + load("EFF", "TSS") + change, came - load("PE", "TSS") + grown),
            ("primaries", load("PE", "TSS") + primary, came),
            ("digester feed", primary + 0.95 * load("WAS", "TSS"), feed)):
        run.check(0.9 <= left / entered <= 1.1, f"solids of the {name}: {left:.0f} lb/d out, {entered:.0f} lb/d in")


def again(run):
    """The same file a second time changes nothing and says so; a round trip through export gives the same readings."""
    with open(run.book, "rb") as f:
        before = f.read()
    result = run.call("load", "readings/laboratory-2025-q1.csv")
    run.check("nothing was changed" in result.stdout, f"loading again says: {result.stdout}")
    with open(run.book, "rb") as f:
        run.check(f.read() == before, "loading the same file again changed the book")
    out = run.call("export").stdout
    copy = os.path.join(run.folder, "copy.book")
    path = os.path.join(run.folder, "export.csv")
    with open(path, "w", encoding="utf-8") as f:
        f.write(out)
    for words in (["new", copy, "plant"], ["-b", copy, "load", path]):
        result = subprocess.run([program(), *words], capture_output=True, text=True, cwd=HOME)
        run.check(result.returncode == 0, f"{words[-1]}: {result.stdout}{result.stderr}")
    result = subprocess.run([program(), "-b", copy, "export"], capture_output=True, text=True, cwd=HOME)
    run.check(result.stdout == out, "an export that was loaded exports otherwise")


def main():
    with tempfile.TemporaryDirectory() as folder:
        run = Run(folder)
        result = subprocess.run([program(), "new", run.book, "plant"], capture_output=True, text=True, cwd=HOME)
        if result.returncode:
            sys.exit(f"FAILED: new: {result.stderr}")
        load(run)
        asides(run)
        months(run)
        spans(run)
        process(run)
        behaves(run)
        again(run)
        result = run.call("check", allowed=(0,))
        run.check("sound" in result.stdout, result.stdout)
    return ran(run.checks, run.failed)


if __name__ == "__main__":
    sys.exit(main())
