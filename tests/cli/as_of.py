#!/usr/bin/env python3
"""The book as it stood: permit, day, process, export and report with --as-of, and check --head. past.c makes the book: loaded on 1 April 2025, 24 mg/L
of 11 March amended to 14 in the last second of 5 April, a remark in the first second of 6 April, the sample of 25 March declared invalid on
8 April, and a remark by a clock that was six days slow. Means worked by hand: (20+24+10+30)/4 = 21, (20+14+10+30)/4 = 18.5, to an even digit 18,
(20+14+10)/3 = 14.67, rounded 15."""
import csv
import io
import os
import subprocess
import sys
import tempfile

sys.path.insert(0, os.path.join(os.path.dirname(os.path.abspath(__file__)), ".."))
from support import program, ran  # noqa: E402

PLANT = {
    "plant.csv": "field,value\nname,Small Works\npermit,XX0000001\nreceiving_water,Invented Creek\nunits,us\nsince,2025-01-01\n",
    "points.csv": "point,name,role,outfall\nINF,Raw influent,influent,\nEFF,Final effluent,effluent,001\n",
    "limits.csv": "outfall,point,parameter,basis,statistic,bound,limit,unit\n001,EFF,BOD5,concentration,monthly-average,max,30,mg/L\n",
}
READINGS = ("date,point,parameter,value,unit\n2025-03-04,EFF,BOD5,20,mg/L\n2025-03-11,EFF,BOD5,24,mg/L\n"
            "2025-03-18,EFF,BOD5,10,mg/L\n2025-03-25,EFF,BOD5,30,mg/L\n")
# as of, mean, samples, value of 11 March, value of 25 March, remarks beside the mean
CASES = [
    ("2025-04-01", "21", "4", "24", "30", 0),
    ("2025-04-04", "21", "4", "24", "30", 0),
    ("2025-04-05", "18", "4", "14", "30", 0),
    ("2025-04-06", "18", "4", "14", "30", 1),
    ("2025-04-07", "18", "4", "14", "30", 1),
    ("2025-04-08", "15", "3", "14", None, 2),  # the slow clock's remark was written after: it is not later than the 8th
    ("2026-01-01", "15", "3", "14", None, 2),
    (None, "15", "3", "14", None, 2),
]


class Checks:
    def __init__(self):
        self.count, self.failed = 0, 0

    def that(self, good, told):
        self.count += 1
        if not good:
            self.failed += 1
            print(told)


def call(folder, *words):
    environment = dict(os.environ, LC_ALL="C.UTF-8", TZ="UTC")
    environment.pop("WEIRBOOK", None)
    return subprocess.run([program(), *words], cwd=folder, env=environment, capture_output=True, text=True, timeout=60)


def rows(checks, result):
    checks.that(result.returncode == 0, f"{result.args[1:]}: status {result.returncode}: {result.stderr}")
    return list(csv.DictReader(io.StringIO(result.stdout)))


def look(checks, folder, case):
    day, mean, samples, value_11, value_25, remarks = case
    then = ("--as-of", day) if day else ()
    row = rows(checks, call(folder, "permit", "--month", "2025-03", "--on", "2025-04-30", "--as", "csv", *then))[0]
    checks.that((row["figure"], row["samples"]) == (mean, samples), f"permit {then}: {row}")
    checks.that(row["note"].count("remark ") == remarks, f"permit {then}: {row['note']}")
    values = {r["date"]: r["value"] for r in rows(checks, call(folder, "export", *then))}
    checks.that((values.get("2025-03-11"), values.get("2025-03-25")) == (value_11, value_25), f"export {then}: {values}")
    found = rows(checks, call(folder, "day", "2025-03-11", "--as", "csv", *then))
    checks.that([r["value"] for r in found if r["kind"] == "reading"] == [value_11], f"day {then}: {found}")
    checks.that(len([r for r in found if r["kind"] == "remark"]) == remarks, f"day {then}: {found}")
    text = call(folder, "permit", "--month", "2025-03", *then).stdout
    checks.that(text.startswith(f"As the book stood at the end of {day} (UTC)." if day else "Small Works"), f"permit {then}: {text[:80]}")
    checks.that(max(map(len, text.splitlines())) <= 100, f"permit {then}: wider than 100 columns")


def heads(checks, folder):
    """A report of then prints the head of then, which is an ancestor of today's; a report of today is the same without --as-of."""
    batches = rows(checks, call(folder, "history", "--batches", "--as", "csv"))
    for day, batch in (("2025-04-01", 2), ("2025-04-05", 3), ("2025-04-06", 4), ("2025-04-08", 6)):
        out = os.path.join(folder, day)
        result = call(folder, "report", "--month", "2025-03", "--out", out, "--printed", "2025-04-30", "--as-of", day)
        checks.that(result.returncode == 0, f"report --as-of {day}: {result.stderr}")
        with open(os.path.join(out, "permit-2025-03.txt"), encoding="utf-8") as f:
            text = f.read()
        head = batches[batch - 1]["head"]
        checks.that(head in text and f"As the book stood at the end of {day} (UTC)" in text, f"report --as-of {day}: {text[-300:]}")
        result = call(folder, "check", "--head", head, "--as", "csv")
        found = [r for r in rows(checks, result) if r["what"] == "head"]
        checks.that(len(found) == 1 and found[0]["state"] == "sound" and found[0]["batch"] == str(batch), f"check --head: {found}")
    result = call(folder, "check", "--head", head.upper())
    checks.that(result.returncode == 0, f"check --head in capitals: {result.stderr}")
    wrong = head[:-1] + ("0" if head[-1] != "0" else "1")
    result = call(folder, "check", "--head", wrong, "--as", "csv")
    found = [r for r in csv.DictReader(io.StringIO(result.stdout)) if r["what"] == "head"]
    checks.that(result.returncode == 3 and len(found) == 1 and found[0]["state"] == "DAMAGED", f"check --head of none: {result.stdout}")
    for word in (head[:16], head + "0", "x" * 64, ""):
        result = call(folder, "check", "--head", word)
        checks.that(result.returncode == 2 and "64 hex digits" in result.stderr, f"check --head '{word}': {result.stderr}")


def main():
    driver = sys.argv[sys.argv.index("--driver") + 1]
    checks = Checks()
    with tempfile.TemporaryDirectory() as folder:
        os.mkdir(os.path.join(folder, "plant"))
        for name, text in list(PLANT.items()):
            with open(os.path.join(folder, "plant", name), "w", encoding="utf-8") as f:
                f.write(text)
        with open(os.path.join(folder, "march.csv"), "w", encoding="utf-8") as f:
            f.write(READINGS)
        made = subprocess.run([driver, "small.book", "plant", "march.csv"], cwd=folder, capture_output=True, text=True, timeout=60)
        checks.that(made.returncode == 0, f"past: {made.stderr}")
        if made.returncode == 0:
            for case in CASES:
                look(checks, folder, case)
            heads(checks, folder)
            result = call(folder, "permit", "--month", "2025-03", "--as-of", "2025-03-30")
            checks.that(result.returncode == 1 and "the book is younger than 2025-03-30" in result.stderr, f"before the book: {result.stderr}")
            slow = call(folder, "permit", "--month", "2025-03", "--as-of", "2025-04-03").stderr
            checks.that("the clock once ran backwards" in slow and slow.count("\n") == 1, f"a slow clock: {slow}")
    return ran(checks.count, checks.failed)


if __name__ == "__main__":
    sys.exit(main())
