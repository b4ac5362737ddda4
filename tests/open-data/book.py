"""A book of one of the open data sets, and the figures the program prints of it."""
import csv
import io
import os
import shutil
import subprocess
import sys
from decimal import ROUND_HALF_EVEN, ROUND_HALF_UP, Decimal

sys.path.insert(0, os.path.join(os.path.dirname(os.path.abspath(__file__)), ".."))
from support import program  # noqa: E402

COUNTS = ("accepted", "present", "revised", "set_aside")


class Book:
    def __init__(self, root, folder, extra=None):
        """extra: description files of our own to stand beside those of the set."""
        self.path = os.path.join(folder, "set.book")
        plant = os.path.join(folder, "plant")
        shutil.copytree(os.path.join(root, "plant"), plant)
        os.chmod(plant, 0o755)
        for name, text in (extra or {}).items():
            with open(os.path.join(plant, name), "w", encoding="utf-8") as f:
                f.write(text)
        self.checks = 0
        self.failed = 0
        self.call("new", self.path, plant)

    def check(self, good, told):
        self.checks += 1
        if not good:
            self.failed += 1
            if self.failed <= 30:
                print(told)

    def call(self, *words, allowed=(0, 3)):
        result = subprocess.run([program(), *words], capture_output=True, text=True)
        if result.returncode not in allowed:
            sys.exit(f"FAILED: weirbook {' '.join(words)}: exit {result.returncode}: {result.stderr}")
        return result.stdout

    def rows(self, *words):
        return list(csv.DictReader(io.StringIO(self.call("-b", self.path, *words, "--as", "csv"))))

    def load(self, path, rows, *options):
        """Loads, and checks that the four counts add up to the rows the file is known to have."""
        got = self.rows("load", *options, path)[0]
        self.check(int(got["rows"]) == rows, f"{path}: {got['rows']} rows read, it has {rows}")
        self.check(sum(int(got[c]) for c in COUNTS) == rows, f"{path}: the four counts do not add up: {got}")
        return got


def table(*path):
    with open(os.path.join(*path), newline="", encoding="utf-8") as f:
        return list(csv.DictReader(f))


def decimals(text):
    return max(0, -Decimal(text).as_tuple().exponent)


def rounds_to(value, written):
    """Whether a value, rounded half even or half up to the decimals written, gives what is written."""
    place = Decimal(1).scaleb(-decimals(written))
    return any(Decimal(value).quantize(place, rule) == Decimal(written) for rule in (ROUND_HALF_EVEN, ROUND_HALF_UP))


def same_to_six(value, recomputed):
    """recomputed is printed to six decimals, half up, from exact fractions; value has ten significant figures."""
    return abs(Decimal(value) - Decimal(recomputed)) <= Decimal("0.0000006") + abs(Decimal(recomputed)) * Decimal("1e-9")
