#!/usr/bin/env python3
"""Compares the arithmetic of src/base with Python's fractions, decimal, datetime and csv.

    check_numbers.py --driver DRIVER [--cases 100000] [--seed 1] [--units schema/units.csv]

DRIVER is the program built from numbers.c. Cases are random, with edge cases (ties, carries,
negatives, zeros, limits of length) made far more frequent than chance would. The expected value of
every case is worked here, by exact integers, by the fractions module or by the decimal module's own
ROUND_HALF_EVEN and ROUND_HALF_UP. Prints the number compared; the first disagreement ends the run
with status 1.
"""

import argparse
import csv
import datetime
import decimal
import io
import os
import random
import re
import struct
import subprocess
import sys
from decimal import Decimal
from fractions import Fraction

EPOCH = datetime.date(1970, 1, 1).toordinal()
SHOWN = 60  # decimals numbers.c prints
RULES = {"even": decimal.ROUND_HALF_EVEN, "up": decimal.ROUND_HALF_UP}
decimal.getcontext().prec = 1500
decimal.getcontext().Emax = 10**6
decimal.getcontext().Emin = -(10**6)


# ---- reference arithmetic ----

def as_decimal(x, digits=200):
    """x as a Decimal. When it does not end within `digits` decimals, a last digit 1 stands for all
    that follows: below every tie, above every shorter value."""
    n, rest = divmod(abs(x.numerator) * 10**digits, x.denominator)
    value = Decimal(n * 10 + (1 if rest else 0)).scaleb(-digits - 1)
    return -value if x < 0 else value


def rounded(x, decimals, rule):
    return as_decimal(x).quantize(Decimal(1).scaleb(-decimals), rounding=RULES[rule])


def plain(d):
    """A Decimal written without exponent, and without the sign of a zero."""
    text = format(d, "f")
    return text[1:] if text.startswith("-") and not d else text


def shown(x):
    return plain(rounded(x, SHOWN, "even"))


def write(x):
    return f"{x.numerator}/{x.denominator}" if x.denominator != 1 else str(x.numerator)


def sign(x):
    return (x > 0) - (x < 0)


def whole_root(n, e):
    """The largest k with k**e <= n."""
    low, high = 0, 1 << (n.bit_length() // e + 1)
    while low < high:
        middle = (low + high + 1) // 2
        if middle**e <= n:
            low = middle
        else:
            high = middle - 1
    return low


def root_units(x, e, decimals, rule):
    """The e-th root of x in units of its last decimal, rounded, by halves: j is the number of half
    units that fit."""
    scaled = x * Fraction(10) ** (decimals * e) * 2**e
    j = whole_root(scaled.numerator // scaled.denominator, e)
    k, half = divmod(j, 2)
    if half and (Fraction(j) ** e != scaled or rule == "up" or k % 2 == 1):
        k += 1
    return k


# ---- reading decimals: the grammar again, as a pattern ----

NUMBER = re.compile(r"([+-]?)(\d*)(?:(\.)(\d*))?(?:[eE]([+-]?\d+))?", re.ASCII)


def parsed(text):
    m = NUMBER.fullmatch(text)
    if not m or not (m[2] or m[4]):
        return "no"
    digits = (m[2] + (m[4] or "")).lstrip("0")
    scale = len(m[4] or "") - int(m[5] or 0)
    if scale < 0:
        if digits and len(digits) - scale > 18:
            return "long"
        digits, scale = (digits + "0" * -scale if digits else ""), 0
    if len(digits) > 18 or scale > 18:
        return "long"
    value = Decimal(m[1] + (digits or "0")).scaleb(-scale)
    units = int(m[1] + (digits or "0"))
    return (f"{units} {scale} {max(1, len(digits))} {int(units == 0)} {plain(value)} "
            f"{shown(Fraction(value))}")


# ---- making cases ----

class Maker:
    def __init__(self, seed, units):
        self.r = random.Random(seed)
        self.units = units
        self.kinds = {}
        for name, kind, factor, offset in units:
            self.kinds.setdefault(kind, []).append((name, factor, offset))

    def digits(self, most):
        n = self.r.randint(1, most)
        return "".join(self.r.choice(self.r.choice(("0123456789", "09", "5"))) for _ in range(n))

    def decimal_text(self):
        r = self.r
        text = r.choice(("", "", "", "-", "+"))
        shape = r.randrange(12)
        text += self.digits(19) if shape != 0 else ""
        if shape in (0, 1, 2, 3, 4, 5):
            text += "." + (self.digits(20) if r.randrange(6) else "")
        if shape in (3, 6, 7):
            text += r.choice("eE") + r.choice(("", "-", "+")) + self.digits(2)
        if shape == 8:
            text += r.choice("eE") + r.choice(("", "-", "+")) + self.digits(30)
        if shape == 9:
            at = r.randint(0, len(text))
            text = text[:at] + r.choice(" .,-+eExXn'_:/\x01\u00b5\u0663") + text[at:]
        if shape == 10:
            text = r.choice(("0", "-0", "0.0", "00", "000.000", "-0.000", ".", "-", "", "+", "e5", ".e5",
                             "5.", ".5", "+5", "+.5", "-5.", "1e", "1e+", "0e-18", "0e-19", "0e99", "1e17",
                             "1e18", "1e-18", "1e-19", "999999999999999999", "1000000000000000000",
                             "0.999999999999999999", "0.0000000000000000001", "9223372036854775807",
                             "9223372036854775808", "-9223372036854775808", "18446744073709551616",
                             "18446744073709551617", "1e4294967296", "1e-4294967296",
                             "1e18446744073709551616", "0e18446744073709551616", "nan", "inf", "-inf",
                             "0x10", "1_000", "1,5", " 1", "1 ", "1e5.5", "--1", "+-1", "1..2", "1.2.3"))
        return text

    def good_decimal(self):
        while True:
            text = self.decimal_text()
            if parsed(text) not in ("no", "long"):
                return text

    def fraction(self):
        r = self.r
        shape = r.randrange(8)
        if shape == 0:
            return Fraction(r.randint(-5, 5))
        if shape == 1:
            return Fraction(r.randint(-10**20, 10**20), r.randint(1, 10**20))
        if shape == 2:
            return Fraction(r.randint(-2**63, 2**63), r.choice((1, 2, 2**31, 2**63, 2**64 - 1)))
        if shape == 3:
            return Fraction(r.randint(-10**6, 10**6), r.randint(1, 400))
        return Fraction(r.randint(-10**7, 10**7), 10 ** r.randint(0, 6))

    def near_tie(self, decimals):
        """A tie at that many decimals, or as close to one as it can be."""
        r = self.r
        x = Fraction(2 * r.randint(-10**r.randint(1, 12), 10**r.randint(1, 12)) + 1, 2)
        x /= Fraction(10) ** decimals
        return x + r.choice((0, 0, 0, 1, -1)) * Fraction(1, 10 ** r.randint(12, 40))

    # Each makes one case: the fields of the question and the answer expected.

    def parse(self):
        text = self.decimal_text()
        return ("parse", text), parsed(text)

    def order(self):
        a = self.good_decimal()
        b = self.r.choice((self.good_decimal(), a, a + "0" if "." in a and "e" not in a.lower() else a))
        if parsed(b) in ("no", "long"):
            b = a
        (units_a, scale_a), (units_b, scale_b) = (map(int, parsed(x).split()[:2]) for x in (a, b))
        return ("order", a, b), str(sign(units_a * 10**scale_b - units_b * 10**scale_a))

    def two(self, name, work):
        x, y = self.fraction(), self.fraction()
        if name == "divide" and y == 0:
            y = Fraction(1, 3)
        return (name, write(x), write(y)), shown(work(x, y))

    def add(self):
        return self.two("add", lambda x, y: x + y)

    def subtract(self):
        return self.two("subtract", lambda x, y: x - y)

    def multiply(self):
        return self.two("multiply", lambda x, y: x * y)

    def divide(self):
        return self.two("divide", lambda x, y: x / y)

    def ratio(self):
        edge = (-2**63, 2**63 - 1, -1, 1, 10**18)
        n = self.r.choice(edge + (0, self.r.randint(-10**9, 10**9)))
        d = self.r.choice(edge + (self.r.randint(1, 10**9),))
        return ("ratio", str(n), str(d)), shown(Fraction(n, d))

    def power(self):
        x = Fraction(self.r.randint(-99, 99), self.r.randint(1, 99))
        n = self.r.randint(0, 12)
        return ("power", write(x), str(n)), shown(x**n)

    def compare(self):
        x = self.fraction()
        y = self.r.choice((x, -x, self.fraction(), x + Fraction(1, 10**30)))
        return ("compare", write(x), write(y)), f"{sign(x - y)} {sign(x)}"

    def round(self):
        decimals, rule = self.r.randint(-5, 9), self.r.choice(("even", "up"))
        x = self.near_tie(decimals) if self.r.randrange(2) else self.fraction()
        d = rounded(x, decimals, rule)
        return ("round", write(x), str(decimals), rule), f"{plain(d)} {shown(Fraction(d))}"

    def figures(self):
        r = self.r
        figures, rule = r.randint(1, 8), r.choice(("even", "up"))
        place = r.randint(-8, 8)
        shape = r.randrange(4)
        if shape == 0:  # 99.95 and its like: the carry makes a figure
            x = Fraction(10) ** place * (1 - Fraction(r.choice((1, 4, 5, 6, 10)), 10 ** (figures + 1)))
        elif shape == 1:
            x = Fraction(10) ** place * r.choice((1, 5, 9))
        elif shape == 2:
            x = self.near_tie(place)
        else:
            x = self.fraction()
        x *= r.choice((1, -1)) * Fraction(10) ** r.choice((0, 0, 0, 60, -60))
        if x == 0:
            expected = figures - 1
        else:
            context = decimal.Context(prec=figures, rounding=RULES[rule])
            expected = -context.plus(as_decimal(x)).as_tuple().exponent
        return ("figures", write(x), str(figures), rule), str(expected)

    def all(self):
        x = self.r.choice((self.fraction(), Fraction(self.r.randint(-999, 999), 2 ** self.r.randint(0, 9)),
                           Fraction(self.r.randint(-999, 999), 5 ** self.r.randint(0, 9))))
        most = self.r.randint(0, 12)
        whole = next((d for d in range(most + 1) if (x * 10**d).denominator == 1), None)
        expected = plain(rounded(x, most if whole is None else whole, "even"))
        return ("all", write(x), str(most)), f"{expected} {int(whole is not None)}"

    def root(self):
        r = self.r
        e, decimals, rule = r.randint(1, 31), r.randint(-2, 6), r.choice(("even", "up"))
        shape = r.randrange(4)
        if shape == 0:  # a tie, or next to it
            x = Fraction(2 * r.randint(0, 2000) + 1, 2) / Fraction(10) ** decimals
            x = x**e
            x += r.choice((0, 0, 1, -1)) * x / 10 ** r.randint(30, 60)
        elif shape == 1:
            x = Fraction(r.choice((0, 1, 10**e, 2**e)))
        else:  # a month of counts
            x = Fraction(1)
            for _ in range(e):
                x *= Fraction(r.randint(1, 10 ** r.randint(1, 5)), r.choice((1, 1, 10)))
        k = root_units(x, e, decimals, rule)
        return ("root", write(x), str(e), str(decimals), rule), shown(Fraction(k) / Fraction(10)**decimals)

    def rootorder(self):
        r = self.r
        e = r.randint(1, 31)
        to = Fraction(r.randint(-20, 4000), r.choice((1, 10, 3)))
        x = abs(to) ** e
        x += r.choice((0, 0, 1, -1)) * x / 10 ** r.randint(1, 60)
        if to < 0:
            expected = 1  # no root is below 0
        else:
            expected = sign(x - to**e)
        return ("rootorder", write(x), str(e), write(to)), str(expected)

    def double(self):
        r = self.r
        shape = r.randrange(4)
        x = self.fraction()
        if shape == 1:  # half way between two doubles, or next to it
            x = Fraction(2 * r.randint(2**52, 2**53 - 1) + 1) * Fraction(2) ** r.randint(-900, 900)
            x += r.choice((0, 0, 1, -1)) * x / 2**200
        elif shape == 2:  # among the smallest doubles
            x = Fraction(r.randint(0, 2 ** r.choice((3, 12, 50)))) / 2 ** r.randint(1070, 1090)
            x += r.choice((0, 0, 1, -1)) * x / 2**200
        elif shape == 3:
            x *= Fraction(10) ** r.randint(-300, 300)
        try:
            nearest = float(x) if x else 0.0
        except OverflowError:
            nearest = float("inf") * sign(x)
        bits, = struct.unpack("<Q", struct.pack("<d", nearest))
        return ("double", write(x)), str(bits)

    def fromdouble(self):
        x = self.r.choice((0.1, 1.0, -2.5, 1e-5, self.r.uniform(-1e6, 1e6), self.r.random(), 2.0**80))
        bits, = struct.unpack("<Q", struct.pack("<d", x))
        return ("fromdouble", str(bits)), plain(Decimal(x))

    def convert(self):
        kind = self.r.choice(list(self.kinds))
        a, b = self.r.choice(self.kinds[kind]), self.r.choice(self.kinds[kind])
        x = self.fraction()
        return ("convert", write(x), a[0], b[0]), shown((x * a[1] + a[2] - b[2]) / b[1])

    def day(self):
        r = self.r
        y, m, d = r.randint(1898, 2201), r.randint(0, 13), r.choice((0, 1, 28, 29, 30, 31, 32))
        steps = r.randint(-30, 30)
        fields = ("day", str(y), str(m), str(d), str(steps))
        try:
            day = datetime.date(y, m, d)
        except ValueError:
            return fields, "no"
        if not 1900 <= y <= 2199:
            return fields, "no"
        years, month = divmod(y * 12 + m - 1 + steps, 12)
        nextmonth = datetime.date(y + m // 12, m % 12 + 1, 1)
        return fields, (f"{day.toordinal() - EPOCH} {day.isoweekday() % 7} {day.replace(day=1)} "
                        f"{nextmonth.toordinal() - EPOCH - 1} {datetime.date(years, month + 1, 1)}")

    def isoday(self):
        r = self.r
        text = f"{r.randint(1899, 2200):04}-{r.randint(0, 13):02}-{r.randint(0, 32):02}"
        if r.randrange(3) == 0:
            at = r.randrange(len(text))
            text = text[:at] + r.choice(("", " ", "/", "x", "-", "5", "+", "\u0661")) + text[at + 1:]
        fine = re.fullmatch(r"\d{4}-\d\d-\d\d", text, re.ASCII)
        try:
            day = datetime.datetime.strptime(text, "%Y-%m-%d").date() if fine else None
        except ValueError:
            day = None
        expected = "no" if day is None or not 1900 <= day.year <= 2199 else str(day.toordinal() - EPOCH)
        return ("isoday", text), expected

    def minute(self):
        r = self.r
        text = f"{r.randint(0, 25):0{r.choice((1, 2))}}:{r.choice((0, 0, r.randint(0, 61))):02}"
        if r.randrange(2):
            text += f":{r.choice((0, r.randint(0, 61))):02}"
        if r.randrange(5) == 0:
            at = r.randrange(len(text))
            text = text[:at] + r.choice(("", " ", ":", "x", "-", "1", "am")) + text[at + 1:]
        m = re.fullmatch(r"(\d{1,2}):([0-5]\d)(?::([0-5]\d))?", text, re.ASCII)
        minute = int(m[1]) * 60 + int(m[2]) if m else -1
        if m is None or minute > 1440 or (minute == 1440 and int(m[3] or 0) > 0):
            return ("minute", text), "no"
        return ("minute", text), f"{minute} {minute // 60:02}:{minute % 60:02}"

    def utf8(self):
        r = self.r
        points = (r.randint(0, 0x7f), r.randint(0x80, 0x7ff), r.randint(0x800, 0xd7ff),
                  r.randint(0xe000, 0xffff), r.randint(0x10000, 0x10ffff), 0x10ffff, 0xd7ff, 0xe000)
        data = bytearray("".join(chr(r.choice(points)) for _ in range(r.randint(0, 5))).encode())
        for _ in range(r.randint(0, 2)):
            if data:
                at = r.randrange(len(data))
                data[at:at + 1] = r.choice((b"", bytes([r.randrange(256)]), b"\xed\xa0\x80", b"\xc0\x80",
                                            b"\xf4\x90\x80\x80", b"\xff", b"\xe0\x80\x80"))
        try:
            data.decode("utf-8", "strict")
            fine = 1
        except UnicodeDecodeError:
            fine = 0
        return ("utf8", data.hex()), str(fine)

    def cell_text(self):
        parts = ("=", "+", "-", "@", "\t", "\r", "\n", "'", '"', ",", " ", ";", "1.5", "-1.5", "a", "1e3", "\u00b5")
        return "".join(self.r.choice(parts) for _ in range(self.r.randint(0, 4)))

    def cell(self):
        text, guard = self.cell_text(), self.r.randrange(2)
        bare = text.lstrip("'")
        if guard and bare[:1] and bare[0] in "=+-@\t\r" and parsed(text) == "no":
            text_out = "'" + text
        else:
            text_out = text
        out = io.StringIO()
        # With a second cell, so that an empty one is not quoted; a lone CR or LF asks for quotes too.
        csv.writer(out, lineterminator="\r\n").writerow((text_out, "x"))
        expected = out.getvalue()[: -len(",x\r\n")]
        return ("cell", text.encode().hex(), str(guard)), expected.encode().hex()

    def unguard(self):
        text = self.cell_text()
        bare = text.lstrip("'")
        if not (bare[:1] and bare[0] in "=+-@\t\r"):
            expected = text
        else:
            expected = text[1:] if text[0] == "'" else text
        return ("unguard", text.encode().hex()), expected.encode().hex()


WEIGHTS = {
    "parse": 16, "order": 4, "add": 6, "subtract": 6, "multiply": 6, "divide": 6, "ratio": 2, "power": 2,
    "compare": 3, "round": 14, "figures": 8, "all": 3, "root": 6, "rootorder": 3, "double": 3,
    "fromdouble": 1, "convert": 6, "day": 4, "isoday": 3, "minute": 3, "utf8": 3, "cell": 3, "unguard": 1,
}


# ---- running ----

def read_units(path):
    with open(path, newline="", encoding="utf-8") as f:
        return [(u["unit"], u["kind"], Fraction(u["factor_to_base"]), Fraction(u["offset_to_base"]))
                for u in csv.DictReader(f)]


def ask(driver, questions):
    run = subprocess.run([driver], input="".join(q + "\n" for q in questions).encode(),
                         stdout=subprocess.PIPE, check=False)
    if run.returncode != 0:
        sys.exit(f"numbers: the driver ended with status {run.returncode}")
    return run.stdout.decode().split("\n")[:-1]


def check_days(driver):
    lines = ask(driver, ["everyday"])
    day, last = datetime.date(1900, 1, 1), datetime.date(2199, 12, 31)
    if len(lines) != (last - day).days + 1:
        sys.exit(f"numbers: {len(lines)} days instead of {(last - day).days + 1}")
    for line in lines:
        number = day.toordinal() - EPOCH
        nextmonth = (day.replace(day=1) + datetime.timedelta(days=32)).replace(day=1)
        expected = (f"{number} {day.isoformat()} {day.strftime('%A').lower()} "
                    f"{nextmonth.toordinal() - EPOCH - 1} {number}")
        if line != expected:
            sys.exit(f"numbers: {day}: got '{line}', expected '{expected}'")
        day += datetime.timedelta(days=1)
    return len(lines)


def check_cases(driver, cases, seed, units):
    maker = Maker(seed, units)
    names = maker.r.choices(list(WEIGHTS), list(WEIGHTS.values()), k=cases)
    made = [getattr(maker, name)() for name in names]
    lines = ask(driver, ["\t".join(fields) for fields, _ in made])
    if len(lines) != len(made):
        sys.exit(f"numbers: {len(made)} questions, {len(lines)} answers")
    for (fields, expected), got in zip(made, lines):
        if got != expected:
            sys.exit(f"numbers: {' '.join(fields)}\n  got      {got}\n  expected {expected}\n  seed {seed}")
    return len(made)


def main():
    here = os.path.dirname(os.path.abspath(__file__))
    p = argparse.ArgumentParser(description=__doc__.split("\n", maxsplit=1)[0])
    p.add_argument("--driver", required=True, help="the program built from numbers.c")
    p.add_argument("--cases", type=int, default=1000000 if os.environ.get("WEIRBOOK_ALL") else 100000)
    p.add_argument("--seed", type=int, default=1)
    p.add_argument("--units", default=os.path.join(here, "../../schema/units.csv"))
    o = p.parse_args()
    days = check_days(o.driver)
    cases = check_cases(o.driver, o.cases, o.seed, read_units(o.units))
    print(f"numbers: {cases} cases and {days} days compared, no disagreement (seed {o.seed})")
    print(f"[==========] {cases + days} test(s) run.")


if __name__ == "__main__":
    main()
