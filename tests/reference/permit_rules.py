"""The permit a second time: exact fractions, written from the rules (weirbook-rules(7): R1 to R52, G1 to G23) and not from the program. Plain
and slow, one function for each idea. It reads a plant-month as rows of text, as they stand in the CSV files, and gives rows of the permit table.

Where the rules are silent it reads them as the program does, so that a change of that is seen:
- E n is not a plain result to the rule dnq; a less-than is below its reporting limit when its number is.
- A less-than that rounds to 0 and was worked, not written, is printed in full, to 18 decimals at most.
- Of equal ranks a less-than stands behind a value. Under nondetect=median medians and percentiles of concentrations rank as the mean does.
- A removal that prints a sign and has only less-thans is worked from the largest of them. Daily removals are worked from concentrations, whatever
  the rule removal says, and no influent or one of 0 makes no sample of a daily one.
- A window of the last N results runs from the first of them to the last: a removal's influents, and a product's flows, are those of these days.
- Rolling rows cut by dates show and count those days. A total load so far is the mean times the days so far.
- A row whose condition has no figure is open or no-discharge before it is no-data, and never exceeded.
- Twelve months hold four quarters and a year, wherever they begin. A row of less than seven days holds no week; one cut by dates takes the weeks
  that count in its months and end in it. Codes 9 and A take a day out when every part of a sum has nothing else.
- A sum counts the readings of the part that has fewest."""
import datetime
import functools
import re
from fractions import Fraction

from numbers_as_written import Root, compare, mean, number_written, rounded, shown

COLUMNS = ("outfall,point,parameter,basis,statistic,from,to,on,figure,unit,bound,limit,verdict,times,samples,"
           "required,note").split(",")
DEFAULTS = {
    "nondetect": "zero", "sign": "any", "geomean_zero": "1", "week_starts": "sunday", "week_counts_in": "end",
    "rounding": "half-even", "digits": "limit", "compare": "rounded", "removal": "averages", "load_factor": "8.34",
    "load_average": "daily", "count_by": "day", "no_discharge": "skip", "dnq": "value", "long_average": "default",
    "percentile": "nearest-rank", "load_total": "days", "flow": "", "influent": "", "window": "days",
}
WEEKDAYS = "monday tuesday wednesday thursday friday saturday sunday".split()
NO_SAMPLE_OWED = {"9", "A"}  # EPA's codes: conditional monitoring not required, general-permit exemption
# Directive 91/271/EEC, annex I, table 3, from memory: the most samples of each step; the first allows 1, the next 2, ...
EU_TABLE_3 = (7, 16, 28, 40, 53, 67, 81, 95, 110, 125, 140, 155, 171, 187, 203, 219, 235, 251, 268, 284, 300, 317, 334, 350, 365)
# Exact factors to the first of each kind: the definitions of pound, gallon and foot.
UNITS = {
    "mg/L": ("concentration", Fraction(1)), "ug/L": ("concentration", Fraction(1, 1000)), "g/L": ("concentration", Fraction(1000)),
    "MGD": ("flow", Fraction("3785411.784")), "gpd": ("flow", Fraction("3.785411784")), "gpm": ("flow", Fraction("5450.99296896")),
    "kgpd": ("flow", Fraction("3785.411784")), "m3/d": ("flow", Fraction(1000)), "ML/d": ("flow", Fraction(10**6)), "L/d": ("flow", Fraction(1)),
    "L/s": ("flow", Fraction(86400)), "cfs": ("flow", Fraction("2446575.5455488")),
    "lb/d": ("mass-rate", Fraction("0.45359237")), "ton/d": ("mass-rate", Fraction("907.18474")), "kg/d": ("mass-rate", Fraction(1)),
    "g/d": ("mass-rate", Fraction(1, 1000)), "t/d": ("mass-rate", Fraction(1000)),
    "MPN/100mL": ("bacteria", Fraction(1)), "cfu/100mL": ("bacteria", Fraction(1)), "/100mL": ("bacteria", Fraction(1)),
    "/mL": ("bacteria", Fraction(100)),
    "%": ("percent", Fraction(1)), "pH": ("ph", Fraction(1)), "NTU": ("turbidity", Fraction(1)), "count": ("count", Fraction(1)),
    "min": ("time", Fraction(60)), "hr": ("time", Fraction(3600)), "degC": ("temperature", Fraction(1)),
}
PER_DAY = {"MG": "MGD", "gal": "gpd", "kgal": "kgpd", "m3": "m3/d", "ML": "ML/d", "L": "L/d", "lb": "lb/d", "ton": "ton/d", "kg": "kg/d", "g": "g/d",
           "t": "t/d"}
MEANS = ("weekly-average", "monthly-average", "rolling-7-day", "rolling-30-day", "quarterly-average", "semiannual-average", "annual-average",
         "rolling-12-month")
SPANS = {"quarterly": 3, "semiannual": 6, "annual": 12}


class Cannot(Exception):
    """A limit that cannot be judged."""


# ---- days ----

def day_of(text):
    return datetime.date.fromisoformat(text).toordinal()


def written(day):
    return datetime.date.fromordinal(day).isoformat()


def month_of(day):
    d = datetime.date.fromordinal(day)
    return d.year, d.month


def first_of(year, month):
    year, month = year + (month - 1) // 12, (month - 1) % 12 + 1
    return datetime.date(year, month, 1).toordinal()


def last_of(year, month):
    return first_of(year, month + 1) - 1


def season_holds(season, day):
    """First and last day included; may wrap the year's end; one that ends on 02-28 includes 02-29 (R36)."""
    if not season:
        return True
    start, end = season.split("..")
    end = "02-29" if end == "02-28" else end
    at = written(day)[5:]
    return start <= at <= end if start <= end else at >= start or at <= end


def weeks(rules, year, month):
    """The weeks that count in a month, as (first, last) day."""
    first, last = first_of(year, month), last_of(year, month)
    how = rules["week_counts_in"]
    if how == "days-1-7":
        return [(first + 7 * i, first + 7 * i + 6) for i in range(4)]
    start = WEEKDAYS.index(rules["week_starts"])
    at = first - (datetime.date.fromordinal(first).weekday() - start) % 7
    found = []
    while at <= last:
        end = at + 6
        inside = min(end, last) - max(at, first) + 1
        if how == "split":
            found.append((max(at, first), min(end, last)))
        elif (how == "end" and first <= end <= last) or (how == "start" and first <= at <= last) or (how == "most-days" and inside >= 4):
            found.append((at, end))
        at += 7
    return found


# ---- values ----

class Value:
    """A daily value, or one reading: the number it counts as, and what signs stand in it. `least` is the number of a less-than."""

    def __init__(self, number, less=(False, False), more=(False, False), least=None, text="", rank=2, sample=True, readings=1):
        self.number, self.less, self.more, self.least, self.text = number, less, more, least, text
        self.rank, self.sample, self.readings = rank, sample, readings  # rank: 0 not detected, 1 not quantified, 2 a value


def factor(unit, to):
    if UNITS[unit][0] != UNITS[to][0]:
        raise Cannot(f"{unit} is no {to}")
    return UNITS[unit][1] / UNITS[to][1]


class Reading:
    """A row of a readings file, as far as figures need it."""

    def __init__(self, row, order, parameter):
        self.point, self.parameter, self.order = row["point"], row["parameter"], order
        self.day, self.time = day_of(row["date"]), row.get("time") or ""
        self.unit = row.get("unit") or parameter["unit"]
        self.sign, self.code, self.kind, self.number, self.text = "", "", "", None, ""
        own = {k: row.get(k) or "" for k in ("mdl", "rl")}
        self.rl = Fraction(own["rl"]) if own["rl"] else None  # R29: of the reading itself
        kept = {k: Fraction(parameter[k]) * factor(parameter["unit"], self.unit) if parameter.get(k) else None for k in ("mdl", "rl")}
        limits = {k: Fraction(own[k]) if own[k] else kept[k] for k in own}
        if not own["mdl"] and own["rl"]:
            limits = {"mdl": None, "rl": limits["rl"]}
        self.read(row["value"].strip(), own, limits)

    def read(self, value, own, limits):
        words = value.split()
        number = re.fullmatch(r"([<>]?)(=?)\s*([0-9.]+)", value)
        if number:
            self.sign, self.text = number[1], number[3]
            self.kind = "less" if self.sign == "<" else "value"
        elif value == "ND":
            which = "mdl" if limits["mdl"] is not None else "rl"
            self.sign, self.kind, self.number, self.text = "<", "less", limits[which], own[which]
        elif value == "TNTC":
            self.sign, self.kind, self.number = ">", "value", limits["rl"]
        elif words[0] == "DNQ":
            self.kind = "dnq" if len(words) > 1 else "bare"
            self.text, self.number = words[-1], None if len(words) > 1 else limits["rl"]
        elif words[0] == "E" and len(words) > 1:
            self.kind, self.text = "estimate", words[1]
        else:
            self.code = words[-1]
        if not self.code and self.number is None:
            self.number = number_written(self.text)

    def counts_as(self, rules):
        """The number a reading enters arithmetic with (section 3, R28, R29, G17)."""
        n, how, dnq = self.number, rules["nondetect"], rules["dnq"]
        if self.kind == "less":
            if how == "zero" or (dnq == "zero" and how != "median" and self.rl is not None and n < self.rl):
                return Fraction(0)
            return n / 2 if how == "half" else n
        if how == "median" or self.sign == ">":
            return n
        below = {"value": n, "zero": Fraction(0), "half": n / 2}[dnq]
        if self.kind == "bare":
            return min({"zero": Fraction(0), "half": n / 2, "full": n}[how], below)
        return below if self.kind == "dnq" or (self.kind == "value" and self.rl is not None and n < self.rl) else n

    def value(self, rules, scale):
        less, more = self.kind == "less", self.sign == ">"
        return Value(self.counts_as(rules) * scale, (less, less), (more, more), self.number * scale if less else None,
                     self.text if scale == 1 else "", 0 if less else 1 if self.kind in ("dnq", "bare") else 2)


def geometric(numbers, rules):
    """Their geometric mean, as a root. R16: a 0 becomes geomean_zero."""
    zero = Fraction(rules["geomean_zero"])
    product, of = Root(Fraction(1)), len(numbers)
    for n in numbers:
        n = n if isinstance(n, Root) else Root(n)
        product = product.times(Root(zero) if n.product == 0 else n)
    return product.root(of)


def joined(values):
    """The signs of a day of several readings (R30)."""
    less = any(v.less[0] for v in values), all(v.less[1] for v in values)
    more = any(v.more[0] for v in values), all(v.more[1] for v in values)
    return less, more


def largest(values):
    """The less-than with the largest number."""
    best = None
    for v in values:
        if v.less[1] and (best is None or compare(v.least, best.least) > 0):
            best = v
    return best


def day_value(readings, rule, rules, scale, weights):
    """What the readings of a day become (R30, R48, R52)."""
    readings = sorted(readings, key=lambda r: (r.time, r.order))
    values = [r.value(rules, scale) for r in readings]
    if len(values) == 1:
        return values[0]
    less, more = joined(values)
    top = largest(values) if less[1] else None
    least, text = (top.least, top.text) if top else (None, "")
    if rule == "last":
        taken = values[-1]
    elif rule in ("max", "min"):
        edge = (max if rule == "max" else min)(v.number for v in values)
        same = [v for v in values if v.number == edge]
        taken = largest(same) or same[0]  # R32
    else:
        taken = None
    if taken:
        return Value(taken.number, taken.less, taken.more, taken.least, taken.text, taken.rank, True, len(values))
    numbers = [v.number for v in values]
    if rule == "sum":
        number = sum(numbers)
        least, text = (sum(v.least for v in values), "") if less[1] else (None, "")
    elif rule == "geometric":
        number = geometric(numbers, rules)
    elif rule == "flow-weighted" and all(r.time in weights for r in readings):
        loads = [weights[r.time] * n for r, n in zip(readings, numbers)]
        number = sum(loads) / sum(weights[r.time] for r in readings)
    else:
        number = sum(numbers) / len(numbers)
    rank = 0 if less[1] else 1 if any(v.rank == 1 for v in values) and not any(v.rank == 2 for v in values) else 2
    return Value(number, less, more, least, text, rank, True, len(values))


class Figure:
    """A worked figure: the exact number that is compared, the sign, and the number after it where that is another one."""

    def __init__(self, number, sign="", least=None, text="", on=None):
        self.number, self.sign, self.least, self.text, self.on = number, sign, least, text, on


def signed(number, values, rules, bound):
    """R13, R15: the sign of a mean of values."""
    if rules["sign"] == "never" or not values:
        return Figure(number)
    at = 0 if rules["sign"] == "any" else 1
    together = any if at == 0 else all
    less, more = together(v.less[at] for v in values), together(v.more[at] for v in values)
    if less and more:
        less = bound in ("min", "above")
        more = not less
    if more:
        return Figure(number, ">")
    if not less:
        return Figure(number)
    top = largest(values) if all(v.less[1] for v in values) else None
    if top and (rules["nondetect"] != "full" or compare(number, top.least) == 0):
        return Figure(number, "<", top.least, top.text)
    return Figure(number, "<")


def ranked_sign(number, read, values, rules, bound):
    """R27: the sign of the value or values a median or percentile is read from; R13 first."""
    if rules["sign"] == "never":
        return Figure(number)
    if all(v.less[1] for v in values):
        return signed(number, values, rules, bound)
    less, more = any(v.less[0] for v in read), any(v.more[0] for v in read)
    if less and more:
        less = bound in ("min", "above")
        more = not less
    if more:
        return Figure(number, ">")
    if not less:
        return Figure(number)
    if all(v.less[1] for v in read):
        top = largest(read)
        return Figure(number, "<", top.least, top.text)
    return Figure(number, "<")


def ranked(values, procedure):
    """By number, a less-than behind an equal value and the larger less-than last; under the procedure of nondetect=median less-thans first, then
    what was not quantified."""
    def order(a, b):
        if procedure and a.rank != b.rank:
            return a.rank - b.rank
        both = a.less[1] and b.less[1]
        return compare(a.number, b.number) or (compare(a.least, b.least) if both else a.less[1] - b.less[1])
    return sorted(values, key=functools.cmp_to_key(order))


def median(values, rules, bound, procedure):
    """R24; under the procedure the lower of the middle two when either is a less-than or not quantified."""
    ranks = ranked(values, procedure)
    n = len(ranks)
    read = [ranks[n // 2]] if n % 2 else ranks[n // 2 - 1:n // 2 + 1]
    if procedure and any(v.rank < 2 for v in read):
        read = read[:1]
    return ranked_sign(mean([v.number for v in read]), read, values, rules, bound)


def percentile(values, p, rules, bound, procedure):
    """G7."""
    ranks = ranked(values, procedure)
    n = len(ranks)
    if rules["percentile"] == "nearest-rank":
        at = Fraction(-(-p * n // 100))
    elif rules["percentile"] == "linear":
        at = 1 + Fraction(p, 100) * (n - 1)
    else:
        at = min(max(Fraction(p, 100) * (n + 1), Fraction(1)), Fraction(n))
    low, part = int(at), at - int(at)
    read = [ranks[low - 1]] + ([ranks[low]] if part else [])
    if part:
        a, b = (x.number.nearly() if isinstance(x.number, Root) else x.number for x in read)
        number = a + part * (b - a)
    else:
        number = read[0].number
    return ranked_sign(number, read, values, rules, bound)


# ---- a plant and its readings, up to the day it is judged on ----

class Plant:
    def __init__(self, month, on=None):
        """month: tables plant, points, parameters, limits, readings; rows of text."""
        self.rules = dict(DEFAULTS)
        for row in month["plant"]:
            if row["field"] in DEFAULTS:
                self.rules[row["field"]] = row["value"]
        self.points = {row["point"]: row for row in month["points"]}
        self.parameters = {row["parameter"]: row for row in month["parameters"]}
        self.on = on
        self.readings = {}
        self.entries = {}
        self.kept = {}
        for order, row in enumerate(month["readings"]):
            r = Reading(row, order, self.parameters[row["parameter"]])
            if on is not None and r.day > on:
                continue
            self.readings.setdefault((r.point, r.parameter), {}).setdefault(r.day, []).append(r)
            self.entries.setdefault(r.point, set()).add(r.day)

    def rules_of(self, parameter, text):
        rules = dict(self.rules)
        for part in (self.parameters[parameter].get("rules") or "", text or ""):
            for pair in filter(None, part.split(";")):
                name, value = pair.split("=")
                rules[name] = value
        return rules

    def numbers(self, point, parameter, day):
        return [r for r in self.readings.get((point, parameter), {}).get(day, []) if not r.code]

    def own_flow(self, point):
        """R40, before the rule: its FLOW, else its only parameter with a flow unit."""
        having = [p for (at, p) in self.readings if at == point and UNITS[self.parameters[p]["unit"]][0] == "flow"]
        if "FLOW" in having:
            return "FLOW"
        return having[0] if len(having) == 1 else None

    def flow_of(self, point, rules):
        own = self.own_flow(point)
        if own:
            return point, own
        if rules["flow"]:
            served = self.own_flow(rules["flow"])
            if served:
                return rules["flow"], served
        return None

    def day_values(self, point, parameter, unit, rules):
        """Every day's value, days without discharge included; cached."""
        key = point, parameter, unit, rules["nondetect"], rules["dnq"], rules["geomean_zero"], rules["flow"]
        if key not in self.kept:
            rule = self.parameters[parameter].get("day_rule") or "mean"
            values = {}
            for day in self.readings.get((point, parameter), {}):
                found = self.numbers(point, parameter, day)
                if found:
                    scale = factor(found[0].unit, unit)
                    if any(r.unit != found[0].unit for r in found):
                        raise Cannot("units differ within a day")
                    values[day] = day_value(found, rule, rules, scale, self.weights(point, day, rules) if rule == "flow-weighted" else {})
            self.kept[key] = values
        return self.kept[key]

    def weights(self, point, day, rules):
        flow = self.flow_of(point, rules)
        if not flow:
            return {}
        return {r.time: r.number * UNITS[r.unit][1] for r in self.numbers(*flow, day)}

    def marked(self, point):
        """The days without discharge (R23, G10, R39)."""
        key = "marked", point
        if key not in self.kept:
            days = {day for (at, p), of in self.readings.items() if at == point for day, found in of.items() if any(r.code == "C" for r in found)}
            own = self.own_flow(point)
            flows = self.day_values(point, own, self.parameters[own]["unit"], self.rules) if own else {}
            days |= {day for day, v in flows.items() if v.number == 0}
            self.kept[key] = {day for day in days if day not in flows or flows[day].number == 0}
        return self.kept[key]

    # ---- days of one basis ----

    def results(self, point, parameters, unit, rules):
        """Concentrations and counts: a sum of parameters on days that have all parts; none on days without discharge."""
        parts = [self.day_values(point, p, unit, rules) for p in parameters]
        gone = self.marked(point)
        days = set(parts[0]).intersection(*parts[1:]) - gone
        return {day: added([part[day] for part in parts]) for day in days}

    def flows(self, point, parameter, unit, rules):
        gone = self.marked(point)
        values = {day: v for day, v in self.day_values(point, parameter, unit, rules).items() if day not in gone}
        if rules["no_discharge"] == "zero":
            values.update({day: Value(Fraction(0), sample=False) for day in gone})
        return values

    def load_parts(self, point, parameters, unit, rules):
        """Flow and concentration days of one point, and the factor of their product (R42)."""
        flow = self.flow_of(point, rules)
        if not flow:
            return {}, {}, Fraction(1)
        pounds = unit in ("lb/d", "ton/d", "lb/h")
        scale = Fraction(rules["load_factor"]) * factor("lb/d", unit) if pounds else Fraction(1, 1000) * factor("kg/d", unit)
        return self.flows(*flow, "MGD" if pounds else "m3/d", rules), self.results(point, parameters, "mg/L", rules), scale

    def point_loads(self, point, parameters, unit, rules):
        flows, results, scale = self.load_parts(point, parameters, unit, rules)
        loads = {}
        for day in set(flows) & set(results):
            f, c = flows[day].number, results[day]
            number = c.number.nearly() if isinstance(c.number, Root) else c.number
            loads[day] = Value(f * number * scale, c.less, c.more, c.least * f * scale if c.less[1] else None, "", c.rank, True, 1)
        return loads

    def summed_points(self, points, of, rules):
        """R43: on days that have all parts; a no-discharge day of one adds 0. All without discharge: absent, or 0."""
        parts = [(of(p), self.marked(p)) for p in points]
        days = set()
        for values, gone in parts:
            days |= set(values) | gone
        found = {}
        for day in days:
            have = [values[day] for values, gone in parts if day not in gone and day in values]
            if any(day not in gone and day not in values for values, gone in parts):
                continue
            if have:
                found[day] = added(have)
            elif rules["no_discharge"] == "zero":
                found[day] = Value(Fraction(0), sample=False)
        return found


def added(values):
    if len(values) == 1:
        return values[0]
    numbers = [v.number.nearly() if isinstance(v.number, Root) else v.number for v in values]
    less, more = joined(values)
    least = sum(v.least for v in values) if less[1] else None
    ranks = [v.rank for v in values]
    rank = 0 if less[1] else 1 if 1 in ranks and 2 not in ranks else 2
    return Value(sum(numbers), less, more, least, "", rank, True, min(v.readings for v in values))


# ---- one limit in one period ----

class Row:
    """A limit and its month: works the rows."""

    def __init__(self, plant, limit, year, month):
        self.plant, self.limit, self.year, self.month = plant, limit, year, month
        self.points, self.parameters = limit["point"].split("+"), limit["parameter"].split("+")
        self.rules = plant.rules_of(self.parameters[0], limit.get("rules"))
        self.basis, self.statistic, self.bound = limit["basis"], limit["statistic"], limit["bound"]
        self.unit = PER_DAY.get(limit["unit"], limit["unit"])
        self.own_sign = any(p.startswith("sign=") for p in (limit.get("rules") or "").split(";"))
        self.days = {}

    # -- values of the basis --

    def daily(self):
        """{day: value} of the basis."""
        if "daily" not in self.days:
            self.days["daily"] = self.work_daily()
        return self.days["daily"]

    def work_daily(self):
        plant, points, parameters, rules = self.plant, self.points, self.parameters, self.rules
        if self.basis == "load":
            return plant.summed_points(points, lambda p: plant.point_loads(p, parameters, self.unit, rules), rules)
        if self.basis == "flow":
            return plant.summed_points(points, lambda p: {d: v for d, v in plant.flows(p, parameters[0], self.unit, rules).items()
                                                          if d not in plant.marked(p)}, rules)
        if self.basis == "removal":
            into, out = self.concentrations()
            return {d: self.removed(out[d].number, into[d].number, [out[d]]) for d in set(into) & set(out) if positive(into[d].number)}
        return plant.results(points[0], parameters, self.unit, rules)

    def removal_days(self):
        """Influent and effluent by day (of `loads` their loads)."""
        if "removal" not in self.days:
            plant, rules = self.plant, self.rules
            point = influent(plant, self.points[0], rules)
            if rules["removal"] == "loads":
                served = dict(rules)
                if not plant.own_flow(point):
                    served["flow"] = (plant.flow_of(self.points[0], rules) or ("",))[0]
                into = plant.point_loads(point, self.parameters, "lb/d", served)
                out = plant.summed_points(self.points, lambda p: plant.point_loads(p, self.parameters, "lb/d", rules), rules)
            else:
                into, out = self.concentrations()
            self.days["removal"] = into, out
        return self.days["removal"]

    def concentrations(self):
        """Influent and effluent by day."""
        if "concentrations" not in self.days:
            self.days["concentrations"] = tuple(self.plant.results(p, self.parameters, "mg/L", self.rules)
                                                for p in (influent(self.plant, self.points[0], self.rules), self.points[0]))
        return self.days["concentrations"]

    def removed(self, out, into, effluents):
        out, into = (n.nearly() if isinstance(n, Root) else n for n in (out, into))
        more = tuple(together(v.less[at] for v in effluents) for at, together in ((0, any), (1, all)))
        return Value(100 * (1 - out / into), (False, False), more)

    # -- figures over days --

    def average(self, days):
        """The mean of the basis over some days, or None."""
        rules = self.rules
        if self.basis == "removal":
            return self.average_removal(days)
        if self.basis == "load" and rules["load_average"] == "product":
            return self.product(days)
        values = [v for d, v in self.daily().items() if d in days]
        if not values:
            return None
        if self.procedure() and any(v.rank < 2 or v.less[0] for v in values):
            return median(values, rules, self.bound, True)
        return signed(mean([v.number for v in values]), values, rules, self.bound)

    def procedure(self):
        """Whether the ranks of nondetect=median hold: loads and removals have nothing to rank (R28)."""
        return self.rules["nondetect"] == "median" and self.basis not in ("load", "removal")

    def product(self, days):
        """R19: all daily flows, all daily concentrations."""
        total, seen, least = Fraction(0), [], Fraction(0)
        for point in self.points:
            flows, results, scale = self.plant.load_parts(point, self.parameters, self.unit, self.rules)
            f = [v.number for d, v in flows.items() if d in days]
            c = [v for d, v in results.items() if d in days]
            if not f or not c:
                return None
            scale *= mean(f)
            total += mean([v.number for v in c]) * scale
            top = largest(c)
            least += top.least * scale if top else 0
            seen.append((c, all(v.less[1] for v in c)))
        figure = signed(total, [v for c, _ in seen for v in c], self.rules, self.bound)
        if figure.least is not None:
            figure.least, figure.text = least, ""
        return figure

    def average_removal(self, days):
        how = self.rules["removal"]
        into, out = ({d: v for d, v in of.items() if d in days} for of in self.removal_days())
        if how == "daily":
            values = [v for d, v in self.daily().items() if d in days]
            return self.removal_figure(mean([v.number for v in values]), values) if values else None
        if how == "paired":
            both = set(into) & set(out)
            into, out = ({d: of[d] for d in both} for of in (into, out))
        if not into or not out:
            return None
        total = mean([v.number for v in into.values()])
        if not positive(total):
            return None
        value = self.removed(mean([v.number for v in out.values()]), total, list(out.values()))
        figure = self.removal_figure(value.number, [value])
        if figure.sign == ">" and all(v.less[1] for v in out.values()) and self.rules["nondetect"] != "full":
            figure.least = 100 * (1 - largest(list(out.values())).least / (total.nearly() if isinstance(total, Root) else total))
        return figure

    def removal_figure(self, number, values):
        """R41: no sign unless the row's own rules set one."""
        return signed(number, values, self.rules, self.bound) if self.own_sign else Figure(number)

    def total(self, days, length):
        values = [v for d, v in self.daily().items() if d in days]
        rules = self.rules
        if self.basis == "load" and rules["load_average"] == "product":
            figure = self.product(days)
            scale = length
        else:
            if not values:
                return None
            scale = len(values) if self.basis != "load" or rules["load_total"] == "sum" else length
            figure = signed(mean([v.number for v in values]), values, rules, self.bound)
        if figure:
            figure.number = mean([figure.number, figure.number]) * scale
            if figure.least is not None:
                if self.basis == "load":
                    figure.least *= scale
                else:
                    figure.least = sum(v.least for v in values)
                figure.text = ""
        return figure

    def long(self, months):
        """R22: the mean of monthly figures, months without data left out; R44: the sign of all their days together."""
        figures = [self.average(set(range(first_of(*m), last_of(*m) + 1))) for m in months]
        figures = [f.number for f in figures if f]
        if not figures:
            return None
        days, number = set(range(first_of(*months[0]), last_of(*months[-1]) + 1)), mean(figures)
        if self.procedure():
            return signed(number, [v for d, v in self.daily().items() if d in days], self.rules, self.bound)
        whole = self.average(days)
        return Figure(number, whole.sign if whole else "", whole.least if whole else None, whole.text if whole else "")

    def figure_over(self, first, last):
        """The figure of a period that has one, whatever the statistic (not the worst of many)."""
        days, s, rules = set(range(first, last + 1)), self.statistic, self.rules
        if s.endswith("-geomean"):
            return self.geomean(days)
        if s.endswith("-total"):
            end = last if self.plant.on is None else min(last, self.plant.on)
            return self.total(days, end - first + 1)
        values = [v for d, v in self.daily().items() if d in days] if "median" in s or "percentile" in s else []
        if "median" in s:
            return self.unsigned(median(values, rules, self.bound, self.procedure())) if values else None
        if s.startswith("percentile-"):
            return self.unsigned(percentile(values, int(s.split("-")[1]), rules, self.bound, self.procedure())) if values else None
        by_months = {"months": True, "days": False}.get(rules["long_average"], s == "rolling-12-month")
        if s == "rolling-12-month" or s == "annual-average":
            if by_months:
                year, month = month_of(first)
                return self.long([month_of(first_of(year, month + i)) for i in range(12)])
        return self.average(days)

    def unsigned(self, figure):
        if self.basis == "removal" and not self.own_sign:
            figure.sign, figure.least, figure.text = "", None, ""
        return figure

    def geomean(self, days):
        values = [v for d, v in self.daily().items() if d in days]
        if not values:
            return None
        figure = signed(geometric([v.number for v in values], self.rules), values, self.rules, self.bound)
        return self.unsigned(figure)

    # -- periods --

    def in_force(self, day):
        start, end = self.limit.get("from") or "", self.limit.get("to") or ""
        at = written(day)
        return (not start or at >= start) and (not end or at <= end) and season_holds(self.limit.get("season"), day)

    def periods(self):
        """(from, to, days in force) of the rows of the month."""
        first, last = first_of(self.year, self.month), last_of(self.year, self.month)
        s = self.statistic
        if s.startswith("weekly-"):
            return [(a, b, []) for a, b in weeks(self.rules, self.year, self.month) if self.in_force(b)]
        months = next((n for word, n in SPANS.items() if s.startswith(word)), 12 if s == "rolling-12-month" else 0)
        if months:
            ends = s == "rolling-12-month" or self.month % months == 0
            return [(first_of(self.year, self.month - months + 1), last, [])] if ends and self.in_force(last) else []
        force = [d for d in range(first, last + 1) if self.in_force(d)]
        if not force:
            return []
        return [(force[0], force[-1], force)]

    def rows(self):
        if self.unjudged_figure_is_false():
            return []
        return [self.row(*p) for p in self.periods()]

    def unjudged_figure_is_false(self):
        """R2, R37: the condition, True when it is false; self.missing when it has no figure."""
        self.missing = False
        when = self.limit.get("when")
        if not when:
            return False
        point, parameter, statistic, sign, number, unit = when.split()
        kind = UNITS[PER_DAY.get(unit, unit)][0]
        own = UNITS[self.plant.parameters[parameter]["unit"]][0]
        others = {"mass-rate": "load", "percent": "removal"}
        basis = "flow" if kind == "flow" else "concentration" if kind == own else others.get(kind, "concentration")
        limit = {"point": point, "parameter": parameter, "basis": basis, "statistic": statistic, "bound": "report", "limit": "", "unit": unit}
        other = Row(self.plant, limit, self.year, self.month)
        last = last_of(self.year, self.month)
        first = first_of(self.year, self.month - 11 if statistic == "rolling-12-month" else self.month)
        figure = other.figure_over(first, last)
        if figure is None:
            self.missing = True
            return False
        order = compare(figure.number, Fraction(number))
        return not {">": order > 0, ">=": order >= 0, "<": order < 0, "<=": order <= 0}[sign]

    # -- judging --

    def beyond(self, number, limit=None):
        text = limit or self.limit["limit"]
        if not text:
            return False
        if self.rules["compare"] == "rounded":
            places = len(text.partition(".")[2])
            number = Fraction(rounded(number, places, self.rules["rounding"]), 10**places)
        order = compare(number, Fraction(text))
        return {"max": order > 0, "target": order > 0, "min": order < 0, "below": order >= 0, "above": order <= 0}[self.bound]

    def worst(self, of):
        """R7, R32: of (on, figure, numbers that tie); the less-than with the larger number, then the first."""
        low = self.bound in ("min", "above")
        best = None
        for on, figure, least in of:
            if best is not None:
                order = compare(figure.number, best[1].number)
                better = order < 0 if low else order > 0
                tied = order == 0 and least is not None and (best[2] is None or compare(least, best[2]) > 0)
                if not better and not tied:
                    continue
            best = on, figure, least
        if best is None:
            return None
        best[1].on = best[0]
        return best[1]

    def single(self, value):
        figure = signed(value.number, [value], self.rules, self.bound)
        return self.unsigned(figure)

    def candidates(self, first, last, force):
        """(day, figure, number of the less-than) of every value a row judges one by one."""
        s = self.statistic
        rolling = re.fullmatch(r"rolling-(7|30)-day(-median|-geomean)?", s)
        if rolling:
            return self.windows(int(rolling[1]), rolling[2] or "", force)
        by_reading = s == "instantaneous" or (s.endswith("-samples") and self.rules["count_by"] == "reading")
        if by_reading and self.basis not in ("load", "removal") and len(self.points) == 1 and len(self.parameters) == 1:
            found = []
            values = self.daily()
            for day in range(first, last + 1):
                if day not in values:
                    continue
                if not values[day].sample:
                    found.append((day, self.single(values[day]), None))
                    continue
                for r in self.plant.numbers(self.points[0], self.parameters[0], day):
                    v = r.value(self.rules, factor(r.unit, self.unit))
                    found.append((day, self.single(v), v.least if v.less[1] else None))
            return found
        return [(d, self.single(v), v.least if v.less[1] else None) for d, v in sorted(self.daily().items()) if first <= d <= last]

    def windows(self, length, kind, force):
        found = []
        for day in force:
            if self.plant.on is not None and day > self.plant.on:
                continue
            days = set(range(day - length + 1, day + 1))
            if self.rules["window"] == "results":
                have = sorted(d for d in self.having() if d <= day)[-length:]
                if not have or have[-1] != day:
                    continue
                days = set(range(have[0], day + 1))
            figure = self.over_window(days, kind)
            if figure:
                rules, self.rules = self.rules, {**self.rules, "sign": "any"}  # R32: a less-than is one, printed or not
                less = self.over_window(days, kind)
                self.rules = rules
                found.append((day, figure, less.least if less.sign == "<" else None))
        return found

    def having(self):
        """The days that have a value of the basis; of a removal an effluent, or both."""
        if self.basis == "removal" and self.rules["removal"] != "daily":
            into, out = self.concentrations()
            return set(into) & set(out) if self.rules["removal"] == "paired" else out
        return self.daily()

    def over_window(self, days, kind):
        if kind == "-geomean":
            return self.geomean(days)
        if kind == "-median":
            values = [v for d, v in self.daily().items() if d in days]
            return self.unsigned(median(values, self.rules, self.bound, self.procedure())) if values else None
        return self.average(days)

    def samples(self, first, last):
        """R8, R34."""
        days = self.daily()
        if self.basis == "removal" and self.statistic in MEANS:
            into, out = self.concentrations()
            if self.rules["removal"] in ("averages", "loads"):
                days = out
            elif self.rules["removal"] == "paired":
                days = {d: out[d] for d in set(into) & set(out)}
        taken = [v for d, v in days.items() if first <= d <= last and v.sample]
        if self.rules["count_by"] == "reading" and self.basis in ("concentration", "flow", "count"):
            return sum(v.readings for v in taken)
        return len(taken)

    def without_discharge(self, first, last):
        """R39: every day of those that has an entry at the point is marked; there is one."""
        seen = False
        for point in self.points:
            for day in self.plant.entries.get(point, ()):
                if first <= day <= last:
                    seen = True
                    if day not in self.plant.marked(point):
                        return False
        return seen

    def required(self, first, last):
        """R9, R35."""
        text = self.limit.get("samples") or ""
        if not text:
            return ""
        count, per = (1, "day") if text == "continuous" else text.split("/")
        count = int(count)
        if per == "day":
            return str(count * sum(1 for d in range(first, last + 1) if not self.nothing_owed(d)))
        if per == "week":
            parts = [(first, last)] if self.statistic.startswith("weekly-") else self.weeks_in(first, last)
            if last - first + 1 < 7 and not self.statistic.startswith("weekly-"):
                return ""
        else:
            parts = held(first, last, {"month": 1, "quarter": 3, "year": 12}[per])
            if not parts:
                return ""
        return str(count * sum(1 for a, b in parts if not self.without_discharge(a, b)))

    def nothing_owed(self, day):
        if all(day in self.plant.marked(p) for p in self.points):
            return True
        found = [self.plant.readings.get((p, q), {}).get(day, []) for p in self.points for q in self.parameters]
        return all(part and all(r.code in NO_SAMPLE_OWED for r in part) for part in found)

    def weeks_in(self, first, last):
        """The weeks counted in the row's months; of a row cut by dates those that end in it."""
        found, at = [], month_of(first)
        while first_of(*at) <= last:
            found += weeks(self.rules, *at)
            at = month_of(first_of(at[0], at[1] + 1))
        whole = first == first_of(*month_of(first)) and last == last_of(*month_of(last))
        return found if whole else [w for w in found if first <= w[1] <= last]

    def figure_text(self, figure):
        """R10, R11, R31."""
        limit, digits, rules = self.limit["limit"], self.rules["digits"], self.rules
        places = len(limit.partition(".")[2]) if limit else int(self.plant.parameters[self.parameters[0]]["decimals"])
        significant = 0
        if digits == "figures" and limit:
            significant = len(limit.replace(".", "").lstrip("0"))
        elif digits not in ("limit", "figures"):
            places = int(digits)
        number = figure.least if figure.least is not None and figure.sign else figure.number
        text = shown(number, places, significant, rules["rounding"])
        if figure.least is not None and figure.sign == "<" and not text.strip("0."):
            text = figure.text or number_text(number, rules["rounding"])
        return figure.sign + text

    def row(self, first, last, force):
        s, limit = self.statistic, self.limit
        one_by_one = s in ("daily", "instantaneous") or s.endswith("-samples") or re.match(r"rolling-(7|30)-", s)
        found = self.candidates(first, last, force) if one_by_one else []
        figure = self.worst(found) if one_by_one else self.figure_over(first, last)
        times = sum(1 for _, f, _ in found if self.beyond(f.number))
        nothing = self.without_discharge(first, last)
        row = {c: limit.get(c) or "" for c in COLUMNS}
        row["from"], row["to"], row["note"] = written(first), written(last), ""
        row["on"] = written(figure.on) if figure and figure.on else ""
        row["figure"] = self.figure_text(figure) if figure else ""
        row["times"] = str(times) if one_by_one and self.bound != "report" else ""
        row["samples"] = str(self.samples(first, last))
        row["required"] = self.required(first, last)
        row["verdict"] = self.verdict(last, figure, found, times, nothing)
        if self.missing:
            row["note"] = limit["when"]
        return row

    def too_many(self, found, times):
        """Samples rows: (beyond what is allowed, for certain before the end)."""
        allowed, ceiling = self.limit.get("allowed") or "0", self.limit.get("ceiling") or ""
        if ceiling and any(self.beyond(f.number, ceiling) for _, f, _ in found):
            return True, True
        n = len(found)
        if allowed.endswith("%"):
            return 100 * times > Fraction(allowed[:-1]) * n, False
        if allowed == "eu-table-3":
            return times > (0 if n < 4 else 1 + sum(1 for most in EU_TABLE_3 if n > most)), False
        return times > int(allowed), times > int(allowed)

    def verdict(self, last, figure, found, times, nothing):
        """R38."""
        s = self.statistic
        target = self.bound == "target"
        yes, no = ("target-passed", "target-met") if target else ("exceeded", "met")
        if s.endswith("-samples"):
            bad, certain = self.too_many(found, times)
        elif s in ("daily", "instantaneous") or re.match(r"rolling-(7|30)-", s):
            bad = certain = times > 0
        else:
            bad, certain = figure is not None and self.bound != "report" and self.beyond(figure.number), False
        if certain and self.bound != "report" and not self.missing:
            return yes
        if self.plant.on is not None and self.plant.on < last:
            return "open"
        if nothing:
            return "no-discharge"
        if figure is None or self.missing:
            return "no-data"
        return "report" if self.bound == "report" else yes if bad else no


def positive(n):
    return compare(n, Fraction(0)) > 0


def number_text(number, rule):
    """A number in full, or to 18 decimals where it does not end."""
    if isinstance(number, Root):
        number = number.nearly()
    for places in range(19):
        if (number * 10**places).denominator == 1:
            break
    return shown(number, places, 0, rule)


def held(first, last, months):
    """The months, quarters or years that a row holds, counted from its first day; none where it begins or ends within a month."""
    if not written(first).endswith("-01") or last != last_of(*month_of(last)):
        return []
    found, (year, month) = [], month_of(first)
    while first_of(year, month + months) - 1 <= last:
        found.append((first_of(year, month), first_of(year, month + months) - 1))
        year, month = month_of(first_of(year, month + months))
    return found


def influent(plant, point, rules):
    """R41."""
    having = [p for p, row in plant.points.items() if row["role"] == "influent"]
    if len(having) == 1:
        return having[0]
    outfall = plant.points[point].get("outfall") or ""
    same = [p for p in having if outfall and plant.points[p].get("outfall") == outfall]
    if len(same) == 1:
        return same[0]
    if rules["influent"]:
        return rules["influent"]
    raise Cannot("no influent")


def judged(month, text, on=None):
    """The permit table of a month, such as 2025-03."""
    plant = Plant(month, day_of(on) if on else None)
    year, of = (int(n) for n in text.split("-"))
    rows = []
    for limit in month["limits"]:
        for row in Row(plant, limit, year, of).rows():
            rows.append((limit, row))
    for limit, row in rows:  # R47
        if not limit.get("group") or row["verdict"] != "exceeded":
            continue
        for other, met in rows:
            together = other.get("group") == limit["group"] and (met["from"], met["to"]) == (row["from"], row["to"])
            if other is not limit and together and met["verdict"] == "met" and not met["note"]:
                row["verdict"] = "met"
                row["note"] = " ".join(other[c] for c in ("point", "parameter", "basis", "statistic"))
                break
    return [row for _, row in rows]
