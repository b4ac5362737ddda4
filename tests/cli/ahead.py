#!/usr/bin/env python3
"""Room and due from outside. Room of monthly means beside the same algebra in Python's fractions, and then proved: the remaining samples are
loaded at exactly `room` and the month is met, one step further and it is exceeded. Due beside permit over the demo year: every stretch that
both have is counted alike, and each shortfall is a missed sample."""
import csv
import datetime
import io
import os
import random
import shutil
import subprocess
import sys
import tempfile
from fractions import Fraction

sys.path.insert(0, os.path.join(os.path.dirname(os.path.abspath(__file__)), ".."))
from support import program, ran, source  # noqa: E402

HOME = os.path.join(source(), "fixtures", "marrow-bend")
TRIALS = 12


class Checks:
    def __init__(self):
        self.count = 0
        self.failed = 0

    def that(self, good, told):
        self.count += 1
        if not good:
            self.failed += 1
            print(told)


def call(folder, *words, allowed=(0, 3)):
    result = subprocess.run([program(), *words], capture_output=True, text=True, cwd=folder, timeout=120)
    if result.returncode not in allowed:
        sys.exit(f"FAILED: weirbook {' '.join(words)}: exit {result.returncode}: {result.stderr}")
    return result


def rows(folder, *words):
    return list(csv.DictReader(io.StringIO(call(folder, *words, "--as", "csv").stdout)))


# ---- room ----------------------------------------------------------------------------------------------------

def write(folder, name, header, lines):
    with open(os.path.join(folder, name), "w", encoding="utf-8") as f:
        f.write("\n".join([header, *lines]) + "\n")


def half_even(x, decimals):
    scaled = x * 10 ** decimals
    low = scaled.numerator // scaled.denominator
    rest = scaled - low
    up = rest > Fraction(1, 2) or (rest == Fraction(1, 2) and low % 2 == 1)
    return Fraction(low + up, 10 ** decimals)


def highest(total, taken, remaining, limit, decimals):
    """The largest number with one decimal that `remaining` samples may have; None: not even 0."""
    def met(k):
        return half_even((total + remaining * Fraction(k, 10)) / (taken + remaining), decimals) <= limit
    if not met(0):
        return None
    low, high = 0, 10 ** 7
    while high - low > 1:
        middle = (low + high) // 2
        low, high = (middle, high) if met(middle) else (low, middle)
    return Fraction(low, 10)


def write_readings(folder, name, values):
    write(folder, name, "date,point,parameter,value,unit", [f"2025-03-{d:02d},EFF,BOD5,{float(v):.1f},mg/L" for d, v in values])


def room_trial(checks, chance, folder):
    limit = chance.choice(["30", "30.0", "12", "7.5"])
    decimals = len(limit.partition(".")[2])
    on = chance.randint(3, 29)
    top = chance.choice([150, 300, 700])
    values = [(d, Fraction(chance.randint(0, top), 10)) for d in range(1, on) if chance.random() < 0.5] + [(on, Fraction(chance.randint(0, top), 10))]
    os.mkdir(os.path.join(folder, "plant"))
    write(folder, "plant/plant.csv", "field,value", ["name,Small Works", "permit,XX0000001", "units,us", "rounding,half-even"])
    write(folder, "plant/points.csv", "point,name,role,outfall", ["EFF,Final effluent,effluent,001"])
    write(folder, "plant/limits.csv", "outfall,point,parameter,basis,statistic,bound,limit,unit,samples",
          [f"001,EFF,BOD5,concentration,monthly-average,max,{limit},mg/L,1/day"])
    write_readings(folder, "so-far.csv", values)
    call(folder, "new", "base.book", "plant")
    call(folder, "-b", "base.book", "load", "so-far.csv")
    got = rows(folder, "-b", "base.book", "room", "--on", f"2025-03-{on:02d}")[0]
    total = sum(v for _, v in values)
    wanted = highest(total, len(values), 31 - on, Fraction(limit), decimals)
    told = f"limit {limit} on {on}, {[(d, float(v)) for d, v in values]}"
    checks.that((got["taken"], got["remaining"]) == (str(len(values)), str(31 - on)), f"{told}: {got}")
    checks.that(got["room"] == ("" if wanted is None else f"{float(wanted):.1f}"), f"{told}: room {got['room']}, expected {wanted}")
    checks.that((wanted is None) == ("NO ROOM" in got["note"]), f"{told}: {got['note']}")
    for step, verdict in ((0, "met"), (1, "exceeded")):
        number = Fraction(0) if wanted is None else wanted + Fraction(step, 10)
        book = f"proof-{step}.book"
        shutil.copyfile(os.path.join(folder, "base.book"), os.path.join(folder, book))
        write_readings(folder, f"rest-{step}.csv", [(d, number) for d in range(on + 1, 32)])
        call(folder, "-b", book, "load", f"rest-{step}.csv")
        judged = rows(folder, "-b", book, "permit", "--month", "2025-03", "--on", "2025-04-01")[0]
        checks.that(judged["verdict"] == ("exceeded" if wanted is None else verdict), f"{told}: at {float(number)}: {judged['verdict']}")


# ---- due ------------------------------------------------------------------------------------------------------

def demo_book(folder):
    book = os.path.join(folder, "demo.book")
    call(HOME, "new", book, "plant")
    readings = sorted(n for n in os.listdir(os.path.join(HOME, "readings")) if not n.startswith(("corrections", "late", "outside", "laboratory-2025-q2-again")))
    call(HOME, "-b", book, "load", *[f"readings/{n}" for n in readings])
    call(HOME, "-b", book, "load", "--map", "maps/outside-laboratory.csv", "readings/outside-laboratory-2025.csv")
    return book


def due_beside_permit(checks, folder):
    book = demo_book(folder)
    counted, short, missed = {}, set(), set()
    for month in range(1, 13):
        for row in rows(HOME, "-b", book, "permit", "--month", f"2025-{month:02d}", "--on", "2026-02-01"):
            if row["basis"] in ("concentration", "flow") and row["required"]:
                key = (row["from"], row["to"], row["point"], row["parameter"], row["required"])
                counted[key] = row["samples"]
                if int(row["samples"]) < int(row["required"]):
                    short.add(key)
    compared = set()
    for day in range(0, 357, 7):
        on = (datetime.date(2025, 1, 8) + datetime.timedelta(day)).isoformat()
        found = rows(HOME, "-b", book, "due", "--on", on)
        for row in found:
            key = (row["from"], row["to"], row["point"], row["parameter"], row["required"])
            if row["to"] >= on or key not in counted:
                continue
            compared.add(key)
            state = "missed" if key in short else "taken"
            checks.that((row["taken"], row["state"]) == (counted[key], state), f"due on {on}: {row}; permit counts {counted[key]}")
            if row["state"] == "missed":
                missed.add(key)
    checks.that(len(compared) > 200, f"only {len(compared)} stretches were compared")
    checks.that(missed == short and short, f"missed {sorted(missed)}; short {sorted(short)}")


def main():
    checks = Checks()
    chance = random.Random(20250401)
    for _ in range(TRIALS):
        with tempfile.TemporaryDirectory() as folder:
            room_trial(checks, chance, folder)
    with tempfile.TemporaryDirectory() as folder:
        due_beside_permit(checks, folder)
    return ran(checks.count, checks.failed)


if __name__ == "__main__":
    sys.exit(main())
