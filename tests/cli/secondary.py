#!/usr/bin/env python3
"""40 CFR 133.102 (secondary treatment: 30/45 mg/L, 25/40 CBOD5, 85 %, pH 6.0 to 9.0) as the ready description, at, just under and just over each
limit. fixtures/secondary/README.md works the expected figures by hand."""
import csv
import io
import os
import subprocess
import sys
import tempfile

sys.path.insert(0, os.path.join(os.path.dirname(os.path.abspath(__file__)), ".."))
from support import program, ran, source  # noqa: E402

HOME = os.path.join(source(), "fixtures", "secondary")


def call(*words):
    result = subprocess.run([program(), *words], capture_output=True, text=True)
    if result.returncode not in (0, 3):
        sys.exit(f"FAILED: weirbook {' '.join(words)}: exit {result.returncode}: {result.stderr}")
    return result


def main():
    count = failed = 0
    with open(os.path.join(HOME, "expected.csv"), newline="", encoding="utf-8") as f:
        expected = list(csv.DictReader(f))
    with tempfile.TemporaryDirectory() as folder:
        book = os.path.join(folder, "secondary.book")
        call("new", book, os.path.join(HOME, "plant"))
        readings = os.path.join(HOME, "readings")
        for name in sorted(os.listdir(readings)):
            call("-b", book, "load", os.path.join(readings, name))
        for month in sorted({row["month"] for row in expected}):
            wanted = [row for row in expected if row["month"] == month]
            result = call("-b", book, "permit", "--month", month, "--as", "csv")
            got = list(csv.DictReader(io.StringIO(result.stdout)))
            count += 2
            failed += len(got) != len(wanted)
            failed += result.returncode != (3 if any(row["verdict"] == "exceeded" for row in wanted) else 0)
            for a, b in zip(got, wanted):
                count += 1
                wrong = {k: (a[k], b[k]) for k in a if k != "note" and a[k] != b[k]}
                if wrong:
                    failed += 1
                    print(f"40 CFR 133.102: {month} {b['parameter']} {b['statistic']} {b['from']}: (got, expected) {wrong}")
    return ran(count, failed)


if __name__ == "__main__":
    sys.exit(main())
