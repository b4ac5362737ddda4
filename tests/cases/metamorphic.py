#!/usr/bin/env python3
"""What must not change a verdict: rows shuffled, files split and loaded in any order, readings in another unit of exact factor, years shifted by 28
(the same weekdays and leap years), points and outfalls renamed. The worked plant-months, where they stand beside the checkout, and invented ones
(tests/reference/plant_months.py) are judged by the program before and after; every column is compared as text."""
import collections
import concurrent.futures
import copy
import csv
import os
import random
import re
import sys
import tempfile
from decimal import Decimal

HERE = os.path.dirname(os.path.abspath(__file__))
sys.path.insert(0, os.path.join(HERE, ".."))
sys.path.insert(0, os.path.join(HERE, "..", "reference"))
from plant_months import Maker, Refused, TABLES, ask, as_text, days_asked, make_book, table_text  # noqa: E402
from second_permit import long_rows, rows_of  # noqa: E402
from support import ran, shared, source  # noqa: E402

YEARS = 28
FIRST_SEED = 100000  # away from the plant-months of tests/reference/second_permit.py
RENAMED = {"EFF": "OUT-1", "EF2": "OUT-2", "INF": "RAW", "INF2": "RAW-2"}
EXACT = {"mg/L": ("ug/L", 1000), "MGD": ("kgpd", 1000), "m3/d": ("L/d", 1000), "ug/L": ("ng/L", 1000), "kgpd": ("gpd", 1000), "min": ("s", 60)}


# ---- changes: (month, when, on) to files of readings, and how to read the rows back ----

class Change:
    def __init__(self, month, when, on, files=None, back=None):
        self.month, self.when, self.on, self.files = month, when, on, files
        self.back = back or (lambda row: row)


def last_goes_by_loading(month):
    """R52: where several readings of a day have no time, the last is the last loaded."""
    rule = {row["parameter"]: row.get("day_rule") for row in month["parameters"]}
    count = collections.Counter((r["date"], r["point"], r["parameter"]) for r in month["readings"] if not r.get("time"))
    return any(n > 1 and rule.get(key[2]) == "last" for key, n in count.items())


def shuffled(month, when, on, r):
    month = dict(month, readings=r.sample(month["readings"], len(month["readings"])))
    return Change(month, when, on)


def split(month, when, on, r):
    """In three files, each shuffled, loaded in any order."""
    parts = [[], [], []]
    for row in month["readings"]:
        r.choice(parts).append(row)
    return Change(month, when, on, [table_text(dict(month, readings=r.sample(part, len(part))), "readings") for part in r.sample(parts, 3)])


def times(text, by):
    return format(Decimal(text) * by, "f")


def in_other_units(month, when, on, r):
    """Every reading whose unit has one of exact factor; a sign, DNQ and E stay."""
    readings = []
    for row in month["readings"]:
        unit = EXACT.get(row.get("unit") or "")
        numbers = re.fullmatch(r"([<>]=?|DNQ |E )?\s*(\d*\.?\d+)", row["value"].strip())
        if unit is None:
            readings.append(row)
            continue
        row = dict(row, unit=unit[0])
        if numbers:
            row["value"] = (numbers[1] or "") + times(numbers[2], unit[1])
        for column in ("mdl", "rl"):
            if row.get(column):
                row[column] = times(row[column], unit[1])
        readings.append(row)
    return Change(dict(month, readings=readings), when, on)


def later(text):
    return re.sub(r"\b(\d{4})-(?=\d\d)", lambda m: f"{int(m[1]) + YEARS}-", text) if text else text


def earlier(text):
    return re.sub(r"\b(\d{4})-(?=\d\d)", lambda m: f"{int(m[1]) - YEARS}-", text) if text else text


def years_shifted(month, when, on, r):
    """Backwards: a reading may not lie in the future."""
    month = copy.deepcopy(month)
    for row in month["readings"]:
        row["date"] = earlier(row["date"])
    for row in month["limits"]:
        row["from"], row["to"] = earlier(row.get("from") or ""), earlier(row.get("to") or "")
    for row in month["plant"]:
        if row["field"] == "since":
            row["value"] = earlier(row["value"])
    return Change(month, earlier(when), earlier(on), back=lambda row: {c: later(v) if c in ("from", "to", "on") else v for c, v in row.items()})


def points_renamed(month, when, on, r):
    def renamed(text):
        return re.sub(r"[A-Za-z][A-Za-z0-9]*", lambda m: RENAMED.get(m[0], m[0]), text)
    month = copy.deepcopy(month)
    for name in ("points", "readings", "limits"):
        for row in month[name]:
            row["point"] = renamed(row["point"])
    for row in month["limits"]:
        words = (row.get("when") or "").split(" ", 1)
        row["when"] = " ".join([renamed(words[0]), *words[1:]])
        row["rules"] = re.sub(r"(flow|influent)=(\w+)", lambda m: f"{m[1]}={renamed(m[2])}", row.get("rules") or "")
    for row in month["plant"]:
        if row["field"] in ("flow", "influent"):
            row["value"] = renamed(row["value"])
    names = {v: k for k, v in RENAMED.items()}

    def back(row):
        note = row["note"]
        for new, old in names.items():
            note = re.sub(rf"(?<![\w-]){new}(?![\w-])", old, note)
        return dict(row, point="+".join(names.get(p, p) for p in row["point"].split("+")), note=note)
    return Change(month, when, on, back=back)


CHANGES = (shuffled, split, in_other_units, years_shifted, points_renamed)


# ---- months ----

def invented(seed):
    month, months = Maker(seed).make()
    return month, days_asked(seed, months)


def worked(root, name, built_in):
    """A worked plant-month as tables; without its revisions, which are a matter of order."""
    case = os.path.join(root, name)
    month = {t: rows_of(os.path.join(case, f"{t}.csv")) for t in TABLES if t != "readings"}
    parameters = {k: dict(v) for k, v in built_in.items()}
    for row in month["parameters"]:
        parameters.setdefault(row["parameter"], {}).update({k: v for k, v in row.items() if v})
    month["parameters"] = [{**parameters[row["parameter"]], **{k: v for k, v in row.items() if v}} for row in month["parameters"]]
    month["readings"] = long_rows(rows_of(os.path.join(case, "readings.csv")), parameters)
    with open(os.path.join(case, "month.txt"), encoding="utf-8") as f:
        when = f.read().strip()
    on = None
    if os.path.exists(os.path.join(case, "args.txt")):
        with open(os.path.join(case, "args.txt"), encoding="utf-8") as f:
            on = f.read().split()[1]
    return month, [(when, on or f"{int(when[:4]) + 1}-12-31")]


class Checker:
    """One month, or the months of one book, under some of the changes."""

    def __init__(self, told, month, asked, changes):
        self.count = self.failed = self.rows = 0
        self.words = []
        r = random.Random(told)
        with tempfile.TemporaryDirectory() as folder:
            try:
                book = make_book(month, folder)
                before = [ask(book, when, on) for when, on in asked]
                for change in changes:
                    if change in (shuffled, split) and last_goes_by_loading(month):
                        continue
                    self.same(told, month, asked, before, change, r, folder)
            except Refused as error:
                self.tell(f"{told}: {error}")

    def same(self, told, month, asked, before, change, r, folder):
        changed = [change(month, when, on, r) for when, on in asked]
        book = make_book(changed[0].month, folder, changed[0].files)
        for one, (when, on), (rows, status) in zip(changed, asked, before):
            self.count += 1
            self.rows += len(rows)
            after, other = ask(book, one.when, one.on)
            after = [one.back(row) for row in after]
            if after == rows and other == status:
                continue
            wrong = [f"{' '.join(a[c] for c in ('point', 'parameter', 'statistic'))}: {c} was '{a[c]}', is '{b[c]}'"
                     for a, b in zip(rows, after) for c in a if a[c] != b[c]]
            self.tell(f"{told} {when}: {change.__name__} changed {len(wrong)} cells of {len(rows)} and {len(after)} rows, exit {status} and {other}: "
                      + "; ".join(wrong[:3]))
            if self.failed == 1:
                self.words.append(as_text(month, when, on)[:3000])

    def tell(self, text):
        self.failed += 1
        self.words.append(text)


def check(job):
    told, kind, what, changes = job
    return Checker(told, *(worked(*what) if kind == "worked" else invented(what)), changes)


def main():
    """Without WEIRBOOK_ALL every worked month has one of the changes, in turn, and a few invented ones all."""
    wide = bool(os.environ.get("WEIRBOOK_ALL"))
    jobs = []
    root = shared("domain/cases/month")
    if root is None:
        print("SKIPPED: the worked plant-months: not found beside the checkout; the invented ones are run")
        if os.environ.get("WEIRBOOK_CI"):
            return 1
    else:
        with open(os.path.join(source(), "schema", "parameters.csv"), newline="", encoding="utf-8") as f:
            built_in = {row["parameter"]: row for row in csv.DictReader(f)}
        names = sorted(n for n in os.listdir(root) if os.path.isdir(os.path.join(root, n)))
        for i, name in enumerate(names):
            jobs.append((name, "worked", (root, name, built_in), CHANGES if wide else CHANGES[i % len(CHANGES):][:1]))
    jobs += [(f"seed {seed}", "invented", seed, CHANGES) for seed in range(FIRST_SEED, FIRST_SEED + (120 if wide else 2))]
    with concurrent.futures.ProcessPoolExecutor(max_workers=min(2, os.cpu_count() or 1)) as pool:
        done = list(pool.map(check, jobs))
    for words in [line for one in done for line in one.words][:10]:
        print(words)
    return ran(sum(one.count for one in done), sum(one.failed for one in done), f"{sum(one.rows for one in done)} rows judged before and after")


if __name__ == "__main__":
    sys.exit(main())
