#!/usr/bin/env python3
"""A second opinion on statistics, from Python's statistics module and from equations solved here: percentiles by two of the three methods,
slopes, means, and the most probable number as the root of its likelihood equation (FDA BAM appendix 2)."""
import csv
import io
import math
import os
import random
import statistics
import subprocess
import sys
import tempfile

sys.path.insert(0, os.path.join(os.path.dirname(os.path.abspath(__file__)), ".."))
from support import program, ran  # noqa: E402

SEED = 20250314
DECILES = range(10, 100, 10)
# Hyndman and Fan (1996) number them 7 and 6; Python names them so.
METHODS = {"linear": "inclusive", "weibull": "exclusive"}


class Opinion:
    def __init__(self):
        self.checks = 0
        self.failed = 0

    def near(self, got, wanted, told, tolerance=1e-9):
        self.checks += 1
        if not abs(float(got) - wanted) <= tolerance * max(1.0, abs(wanted)):
            self.failed += 1
            print(f"{told}: {got}, second opinion {wanted}")


def formula(*words):
    result = subprocess.run([program(), "formula", *words, "--as", "csv"], capture_output=True, text=True)
    if result.returncode:
        sys.exit(f"FAILED: formula {' '.join(words)}: {result.stderr}")
    return next(csv.DictReader(io.StringIO(result.stdout)))["value"]


def joined(values):
    return ",".join(str(v) for v in values)


def slopes_and_means(r, opinion):
    for _ in range(40):
        n = r.randint(3, 12)
        times = sorted(r.sample(range(1, 60), n))
        readings = sorted((round(r.uniform(1, 9), 2) for _ in range(n)), reverse=True)
        slope = statistics.linear_regression(times, readings).slope
        opinion.near(formula("oxygen-uptake-rate-by-slope", f"times={joined(times)}", f"readings={joined(readings)}"), -60 * slope,
                     f"slope of {readings} on {times}")
        counts = [r.randint(1, 2420) for _ in range(n)]
        opinion.near(formula("geometric-mean", f"values={joined(counts)}"), statistics.geometric_mean(counts), f"geometric mean of {counts}")
        opinion.near(formula("arithmetic-mean", f"values={joined(readings)}"), statistics.fmean(readings), f"mean of {readings}")


def likeliest(volumes, tubes, positives):
    """The root by bisection: the likelihood equation's left side falls as the density grows."""
    low, high = 1e-9, 1e9
    for _ in range(400):
        middle = math.sqrt(low * high)
        left = sum(p * v / -math.expm1(-v * middle) for v, p in zip(volumes, positives))
        low, high = (middle, high) if left > sum(n * v for n, v in zip(tubes, volumes)) else (low, middle)
    return 100 * low


def most_probable(r, opinion):
    done = 0
    while done < 40:
        tubes = [r.choice((3, 5, 10))] * 3
        positives = [r.randint(0, n) for n in tubes]
        if sum(positives) in (0, sum(tubes)):
            continue
        volumes = r.choice(([10, 1, 0.1], [1, 0.1, 0.01], [100, 10, 1]))
        got = formula("most-probable-number", f"volumes={joined(volumes)}", f"tubes={joined(tubes)}", f"positives={joined(positives)}")
        opinion.near(got, likeliest(volumes, tubes, positives), f"{positives} of {tubes} at {volumes} mL", 1e-6)
        done += 1


def percentiles(r, opinion):
    """Months of 9 to 31 values, each judged by percentile-N limits under both methods."""
    with tempfile.TemporaryDirectory() as folder:
        for name, text in (("plant.csv", "field,value\nname,Second Opinion\npermit,XX0000000\nreceiving_water,Invented Creek\n"),
                           ("points.csv", "point,name,role,outfall\nEFF,Effluent,effluent,001\n")):
            with open(os.path.join(folder, name), "w", encoding="utf-8") as f:
                f.write(text)
        with open(os.path.join(folder, "limits.csv"), "w", encoding="utf-8") as f:
            f.write("outfall,point,parameter,basis,statistic,bound,limit,unit,rules\n")
            for method in METHODS:
                f.writelines(f"001,EFF,TSS,concentration,percentile-{n},report,,mg/L,percentile={method};digits=9\n" for n in DECILES)
        book = os.path.join(folder, "second.book")
        values = {}
        readings = os.path.join(folder, "readings.txt")
        with open(readings, "w", encoding="utf-8") as f:
            f.write("date,point,parameter,value,unit\n")
            for month in range(1, 9):
                values[month] = [round(r.uniform(1, 60), 1) for _ in range(r.randint(9, 28))]
                f.writelines(f"2025-{month:02d}-{day:02d},EFF,TSS,{v},mg/L\n" for day, v in enumerate(values[month], 1))
        for words in (["new", book, folder], ["-b", book, "load", readings]):
            subprocess.run([program(), *words], check=True, capture_output=True)
        for month, of in values.items():
            result = subprocess.run([program(), "-b", book, "permit", "--month", f"2025-{month:02d}", "--as", "csv"], capture_output=True, text=True)
            rows = list(csv.DictReader(io.StringIO(result.stdout)))
            for start, (method, python) in enumerate(METHODS.items()):
                wanted = statistics.quantiles(of, n=10, method=python)
                for i, n in enumerate(DECILES):
                    row = rows[start * len(DECILES) + i]
                    opinion.near(row["figure"], wanted[i], f"percentile-{n}, {method}, of {of}", 1e-8)


def main():
    r = random.Random(SEED)
    opinion = Opinion()
    slopes_and_means(r, opinion)
    most_probable(r, opinion)
    percentiles(r, opinion)
    return ran(opinion.checks, opinion.failed, f"seed {SEED}")


if __name__ == "__main__":
    sys.exit(main())
