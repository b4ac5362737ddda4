"""Exact numbers for second opinions: decimals as written, fractions, roots; rounded once."""
import math
from fractions import Fraction

NEARLY = 40  # decimals of a root that enters a sum (R48)


def number_written(text):
    return Fraction(text if not text.startswith(".") else "0" + text)


def whole_root(n, e):
    """The largest k with k**e <= n."""
    if e == 1 or n < 2:
        return n
    k = 1 << -(-n.bit_length() // e)
    while True:
        less = ((e - 1) * k + n // k ** (e - 1)) // e
        if less >= k:
            return k
        k = less


class Root:
    """The of-th root of a product, not below 0."""

    def __init__(self, product, of=1):
        self.product, self.of = Fraction(product), of

    def times(self, other):
        of = math.lcm(self.of, other.of)
        return Root(self.product ** (of // self.of) * other.product ** (of // other.of), of)

    def root(self, of):
        return Root(self.product, self.of * of)

    def nearly(self):
        return Fraction(rounded(self, NEARLY, "half-even"), 10**NEARLY)


def compare(a, b):
    if not isinstance(a, Root) and not isinstance(b, Root):
        return (a > b) - (a < b)
    if isinstance(a, Fraction) and a < 0:
        return -1
    if isinstance(b, Fraction) and b < 0:
        return 1
    a, b = (x if isinstance(x, Root) else Root(x) for x in (a, b))
    x, y = (a.product, b.product) if a.of == b.of else (a.product**b.of, b.product**a.of)
    return (x > y) - (x < y)


def mean(numbers):
    if len(numbers) == 1:
        return numbers[0]
    return sum(n.nearly() if isinstance(n, Root) else n for n in numbers) / len(numbers)


def rounded(number, places, rule):
    """In units of the last place; places may be below 0."""
    scale = Fraction(10) ** places
    if isinstance(number, Root):
        x = number.product * (2 * scale) ** number.of  # how many halves fit under the root, and whether they are all of it
        halves = whole_root(x.numerator // x.denominator, number.of)
        exact = Fraction(halves) ** number.of == x
        units, half = divmod(halves, 2)
        return units + (1 if half and (not exact or rule == "half-up" or units % 2) else 0)
    x = abs(number) * scale
    units, rest = divmod(x.numerator, x.denominator)
    twice = 2 * rest - x.denominator
    if twice > 0 or (twice == 0 and (rule == "half-up" or units % 2)):
        units += 1
    return -units if number < 0 else units


def shown(number, places, significant, rule):
    """As text, with so many decimals or significant digits."""
    zero = Fraction(0)
    size = number if isinstance(number, Root) else abs(number)
    if significant and compare(size, zero) > 0:
        e = 0
        while compare(size, Fraction(10) ** e) < 0:
            e -= 1
        while compare(size, Fraction(10) ** (e + 1)) >= 0:
            e += 1
        places = significant - 1 - e
        if abs(rounded(number, places, rule)) >= 10**significant:
            places -= 1
    units = rounded(number, places, rule)
    digits = str(abs(units)) + "0" * max(0, -places)
    if places > 0:
        digits = digits.rjust(places + 1, "0")
        digits = digits[:-places] + "." + digits[-places:]
    return ("-" if units < 0 else "") + digits
