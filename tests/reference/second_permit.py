#!/usr/bin/env python3
"""The program's permit table beside the second implementation (permit_rules.py), on invented plant-months drawn from a seed.

    second_permit.py [--months N] [--seed N] [--keep-going]
    second_permit.py --cases      the second implementation beside the worked plant-months instead

Every column of the table is compared as text. A disagreement is made as small as it can be and printed as CSV files. Without --months,
2000 plant-months where WEIRBOOK_ALL is set, else a sample of them.
"""
import argparse
import collections
import concurrent.futures
import copy
import csv
import os
import re
import sys
import tempfile

sys.path.insert(0, os.path.dirname(os.path.abspath(__file__)))
from permit_rules import COLUMNS, Cannot, judged  # noqa: E402
from plant_months import Maker, Refused, as_text, ask, days_asked, make_book  # noqa: E402
from support import absent, ran, shared, source  # noqa: E402

SAMPLE, ALL = 150, 2000
KEY = ("outfall", "point", "parameter", "basis", "statistic", "from", "to", "bound", "limit")


def status(rows, on):
    """R25, and a shortfall once its period is over."""
    short = any(row["required"] and int(row["samples"]) < int(row["required"]) and row["to"] <= on for row in rows)
    return 3 if short or any(row["verdict"] == "exceeded" for row in rows) else 0


def differences(mine, theirs):
    """[(key of the row, column, mine, theirs)], in order; rows must stand in the same order."""
    if [tuple(r[k] for k in KEY) for r in mine] != [tuple(r[k] for k in KEY) for r in theirs]:
        ours, others = ([tuple(r[k] for k in KEY) for r in rows] for rows in (mine, theirs))
        odd = [k for k in ours if k not in others] + [k for k in others if k not in ours]
        return [(odd[0] if odd else ours[0], "rows", len(ours), len(others))]
    found = []
    for a, b in zip(mine, theirs):
        for column in COLUMNS:
            same = a[column] == b[column] if column != "note" else a["note"] in b["note"]
            if not same:
                found.append((tuple(a[k] for k in KEY), column, a[column], b[column]))
    return found


def compared(month, asked, folder):
    """[(month, on, differences, rows)] of one book."""
    book = make_book(month, folder)
    found = []
    for when, on in asked:
        mine = judged(month, when, on)
        theirs, exit_status = ask(book, when, on)
        wrong = differences(mine, theirs)
        if not wrong and exit_status != status(mine, on):
            wrong = [((), "exit", status(mine, on), exit_status)]
        found.append((when, on, wrong, mine))
    return found


# ---- making a disagreement small ----

class Smaller:
    def __init__(self, month, when, on, column):
        self.month, self.when, self.on, self.column = month, when, on, column
        self.tries = 0

    def still(self, month):
        self.tries += 1
        if self.tries > 400:
            return False
        with tempfile.TemporaryDirectory() as folder:
            try:
                wrong = compared(month, [(self.when, self.on)], folder)[0][2]
            except (Refused, Cannot, IndexError, KeyError, TypeError, ValueError):
                return False
        return any(w[1] == self.column for w in wrong)

    def without(self, name, start, count):
        month = dict(self.month)
        month[name] = self.month[name][:start] + self.month[name][start + count:]
        return month

    def drop(self, name):
        """Drops rows of a table, by halves, then quarters, ... while the disagreement stays."""
        size = max(1, len(self.month[name]) // 2)
        while True:
            start = 0
            while start < len(self.month[name]):
                month = self.without(name, start, size)
                if self.still(month):
                    self.month = month
                else:
                    start += size
            if size == 1:
                return
            size //= 2

    def blank(self, name, columns):
        for i in range(len(self.month[name])):
            for column in columns:
                if not self.month[name][i].get(column):
                    continue
                month = copy.deepcopy(self.month)
                month[name][i][column] = ""
                if self.still(month):
                    self.month = month

    def run(self):
        self.drop("limits")
        self.drop("readings")
        self.drop("plant")
        self.blank("limits", ("rules", "samples", "season", "from", "to", "when", "group", "ceiling", "allowed"))
        for i, limit in enumerate(self.month["limits"]):
            for pair in (limit.get("rules") or "").split(";"):
                month = copy.deepcopy(self.month)
                month["limits"][i]["rules"] = ";".join(p for p in month["limits"][i]["rules"].split(";") if p != pair) if pair else limit.get("rules")
                if pair and self.still(month):
                    self.month = month
        self.drop("parameters")
        self.blank("parameters", ("rules", "mdl", "rl"))
        self.blank("readings", ("mdl", "rl", "time", "sample"))
        self.drop("points")
        return self.month


def told(month, when, on, wrong):
    small = Smaller(month, when, on, wrong[0][1]).run()
    with tempfile.TemporaryDirectory() as folder:
        again = compared(small, [(when, on)], folder)[0][2]
    lines = [f"{' '.join(key)}: {column} is '{b}', the second implementation has '{a}'" for key, column, a, b in again]
    return "\n".join([*lines, as_text(small, when, on)])


# ---- runs ----

def one_book(seed):
    """(plant-months, rows, kinds of rows seen, what disagreed) of a seed."""
    month, months = Maker(seed).make()
    asked = days_asked(seed, months)
    seen = collections.Counter()
    with tempfile.TemporaryDirectory() as folder:
        try:
            found = compared(month, asked, folder)
        except Refused as error:
            return len(asked), 0, seen, [(seed, f"seed {seed}: {error}\n{as_text(month, *asked[0])[:1500]}", "refused")]
    wrong = []
    rows = 0
    for when, on, differ, mine in found:
        rows += len(mine)
        seen.update(("verdict", r["verdict"]) for r in mine)
        seen.update(("statistic", r["statistic"]) for r in mine)
        seen.update(("basis", r["basis"]) for r in mine)
        seen.update(("sign", r["figure"][:1]) for r in mine if r["figure"][:1] in "<>" and r["figure"])
        if differ:
            wrong.append((seed, (month, when, on, differ), differ[0][1]))
    return len(asked), rows, seen, wrong


def random_months(wanted, seed, keep_going):
    months = rows = failed = 0
    seen = collections.Counter()
    with concurrent.futures.ProcessPoolExecutor(max_workers=min(2, os.cpu_count() or 1)) as pool:
        at = seed
        while months < wanted:
            batch = list(pool.map(one_book, range(at, at + max(1, min(24, (wanted - months) // 4 + 1)))))
            at += len(batch)
            for count, lines, kinds, wrong in batch:
                months += count
                rows += lines
                seen += kinds
                for number, what, _ in wrong:
                    failed += 1
                    if failed <= keep_going:
                        print(f"seed {number}:")
                        print(what if isinstance(what, str) else told(*what), flush=True)
            if failed and keep_going == 1:
                break
    for kind in ("verdict", "statistic", "basis", "sign"):
        print(f"{kind}: " + ", ".join(f"{word} {n}" for (k, word), n in sorted(seen.items()) if k == kind))
    return ran(months, failed, f"{rows} rows of {months} plant-months compared")


# ---- the worked plant-months, read as the program reads them ----

def rows_of(path):
    if not os.path.exists(path):
        return []
    with open(path, newline="", encoding="utf-8") as f:
        return list(csv.DictReader(f))


def long_rows(rows, parameters):
    if "value" in rows[0]:
        return [row for row in rows if row["value"].strip()]
    found = []
    for row in rows:
        date, *cells = row.items()
        for heading, value in cells:
            if value.strip():
                point, parameter, unit = re.fullmatch(r"(\S+) (\S+)(?: \[(.*)\])?", heading).groups()
                found.append({"date": date[1], "point": point, "parameter": parameter, "unit": unit or parameters[parameter]["unit"], "value": value})
    return found


def revised(readings, rows):
    for row in rows:
        for old in readings:
            if all((old.get(k) or "") == (row.get(k) or "") for k in ("date", "time", "point", "parameter", "sample")):
                old.update(row)
    return readings


def worked_months():
    root = shared("domain/cases/month")
    if root is None:
        return absent("the worked plant-months")
    built_in = {row["parameter"]: row for row in rows_of(os.path.join(source(), "schema", "parameters.csv"))}
    names = sorted(n for n in os.listdir(root) if os.path.isdir(os.path.join(root, n)))
    failed = 0
    for name in names:
        case = os.path.join(root, name)
        parameters = {k: dict(v) for k, v in built_in.items()}
        for row in rows_of(os.path.join(case, "parameters.csv")):
            parameters.setdefault(row["parameter"], {"decimals": "2", "day_rule": "mean"}).update({k: v for k, v in row.items() if v})
        month = {t: rows_of(os.path.join(case, f"{t}.csv")) for t in ("plant", "points", "limits")}
        month["parameters"] = list(parameters.values())
        month["readings"] = revised(long_rows(rows_of(os.path.join(case, "readings.csv")), parameters), rows_of(os.path.join(case, "revise.csv")))
        on = None
        if os.path.exists(os.path.join(case, "args.txt")):
            with open(os.path.join(case, "args.txt"), encoding="utf-8") as f:
                on = f.read().split()[1]
        with open(os.path.join(case, "month.txt"), encoding="utf-8") as f:
            mine = {tuple(row[k] for k in KEY): row for row in judged(month, f.read().strip(), on)}
        expected = {tuple(row[k] for k in KEY): row for row in rows_of(os.path.join(case, "expected.csv"))}
        wrong = [f"{key}: {c} is '{mine[key][c]}', expected '{row[c]}'" for key, row in expected.items() if key in mine
                 for c in COLUMNS if c != "note" and row[c] not in ("*", mine[key][c])]
        wrong += [f"missing or extra: {key}" for key in set(mine) ^ set(expected)]
        if wrong:
            failed += 1
            print(f"{name}: " + "\n    ".join(wrong))
    return ran(len(names), failed)


def main():
    parser = argparse.ArgumentParser()
    parser.add_argument("--months", type=int, default=ALL if os.environ.get("WEIRBOOK_ALL") else SAMPLE)
    parser.add_argument("--seed", type=int, default=1)
    parser.add_argument("--keep-going", type=int, default=1, help="how many disagreements to print before ending")
    parser.add_argument("--cases", action="store_true")
    options = parser.parse_args()
    if options.cases:
        return worked_months()
    return random_months(options.months, options.seed, options.keep_going)


if __name__ == "__main__":
    sys.exit(main())
