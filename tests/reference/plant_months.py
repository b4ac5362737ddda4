"""Invented plant-months, drawn from a seed over all rules, statistics, bases, bounds and odd readings; as files, and through the program."""
import csv
import io
import os
import random
import subprocess
import sys

sys.path.insert(0, os.path.join(os.path.dirname(os.path.abspath(__file__)), ".."))
sys.path.insert(0, os.path.dirname(os.path.abspath(__file__)))
from permit_rules import COLUMNS, first_of, last_of, month_of, written  # noqa: E402
from support import program  # noqa: E402

TABLES = {
    "plant": ("field", "value"),
    "points": ("point", "name", "role", "outfall"),
    "parameters": ("parameter", "name", "unit", "decimals", "day_rule", "average", "mdl", "rl", "rules"),
    "limits": ("outfall", "point", "parameter", "basis", "statistic", "bound", "limit", "unit", "season", "from", "to", "when", "samples", "sample",
               "allowed", "ceiling", "group", "rules"),
    "readings": ("date", "time", "point", "parameter", "value", "unit", "sample", "mdl", "rl"),
}
RULES = {
    "nondetect": ("zero", "half", "full", "median"), "sign": ("any", "all", "never"), "geomean_zero": ("1", "0.5", "2"),
    "week_starts": ("sunday", "monday", "tuesday", "wednesday", "thursday", "friday", "saturday"),
    "week_counts_in": ("end", "start", "most-days", "split", "days-1-7"), "rounding": ("half-even", "half-up"),
    "digits": ("limit", "limit", "figures", "0", "2", "4"), "compare": ("rounded", "raw"), "removal": ("averages", "paired", "loads", "daily"),
    "load_factor": ("8.34", "8.3454", "8.345"), "load_average": ("daily", "product"), "count_by": ("day", "reading"),
    "no_discharge": ("skip", "zero"), "dnq": ("value", "zero", "half"), "long_average": ("months", "days"),
    "percentile": ("nearest-rank", "linear", "weibull"), "load_total": ("days", "sum"), "window": ("days", "results"),
}
MEANS = ("weekly-average", "monthly-average", "monthly-average", "rolling-7-day", "rolling-30-day", "quarterly-average", "semiannual-average",
         "annual-average", "rolling-12-month")
RANKED = ("monthly-median", "percentile-90", "percentile-50", "percentile-75", "rolling-7-day-median")
GEOMEANS = ("monthly-geomean", "weekly-geomean", "rolling-30-day-geomean")
SAMPLED = ("monthly-samples", "quarterly-samples", "annual-samples")
TOTALS = ("monthly-total", "annual-total")
# parameter: unit, decimals, typical values, units readings come in, odd results it may have
PARAMETERS = {
    "BOD5": ("mg/L", "1", (2, 60), ("mg/L", "mg/L", "ug/L"), "<"), "TSS": ("mg/L", "1", (1, 50), ("mg/L",), "<"),
    "NH3N": ("mg/L", "2", (0, 8), ("mg/L", "ug/L"), "<d"),
    "NO3N": ("mg/L", "2", (0, 12), ("mg/L",), "<"), "NO2N": ("mg/L", "2", (0, 1), ("mg/L",), "<"),
    "CU": ("ug/L", "1", (0, 20), ("ug/L", "mg/L"), "<d"), "ECOLI": ("MPN/100mL", "0", (0, 400), ("MPN/100mL", "/mL"), "<>"),
    "PH": ("pH", "1", (6, 9), ("pH",), ""), "DO": ("mg/L", "1", (3, 10), ("mg/L",), ">"), "TURB": ("NTU", "2", (0, 3), ("NTU",), ""),
    "OVER": ("min", "0", (0, 60), ("min", "hr"), ""), "FLOW": ("MGD", "3", (0, 4), ("MGD", "MGD", "m3/d", "kgpd"), ""),
}
NAMES = {"CU": "Copper", "OVER": "Time outside the pH range"}
GEOMETRIC = ("ECOLI",)
DAY_RULES = ("mean", "mean", "mean", "max", "min", "sum", "last", "geometric", "flow-weighted")
SEASONS = ("05-01..10-31", "11-01..04-30", "02-15..02-28", "02-29..03-31", "12-20..03-10", "06-10..06-20", "01-01..02-29")
CODES = ("G", "H", "E", "M", "F", "code 7", "code 9", "A", "V", "code 2", "D", "X")


class Maker:
    def __init__(self, seed):
        self.r = random.Random(seed)
        self.month = {name: [] for name in TABLES}
        self.used = set()

    # ---- the plant ----

    def make(self):
        r = self.r
        self.two = r.random() < 0.4
        self.rules = {name: r.choice(words) for name, words in RULES.items() if r.random() < 0.35}
        self.shared_flow = self.two and r.random() < 0.4
        if self.shared_flow:
            self.rules["flow"] = "EFF"
        self.make_points()
        self.make_months()
        self.make_parameters()
        self.make_readings()
        for _ in range(r.randint(6, 12)):
            self.make_limit()
        self.month["plant"] = [{"field": "name", "value": "Invented Works"}, {"field": "permit", "value": "XX0000001"}]
        self.month["plant"] += [{"field": k, "value": v} for k, v in self.rules.items()]
        return self.month, self.months

    def make_points(self):
        r = self.r
        points = [("EFF", "effluent", "001"), ("INF", "influent", "")]
        if self.two:
            points.append(("EF2", "effluent", "002"))
            if r.random() < 0.3:
                points[1] = "INF", "influent", "001"
                points.append(("INF2", "influent", "002"))
            elif r.random() < 0.2:
                points.append(("INF2", "influent", ""))
                self.rules["influent"] = r.choice(("INF", "INF2"))
        self.points = [p[0] for p in points]
        self.month["points"] = [{"point": p, "name": p, "role": role, "outfall": outfall} for p, role, outfall in points]
        self.influents = [p for p in self.points if p.startswith("INF")]
        self.effluents = [p for p in self.points if p.startswith("EF")]

    def make_months(self):
        """The months asked for, close together, and how far readings reach back. Leap years are frequent."""
        r = self.r
        year = r.choice((1996, 2000, 2004, 2020, 2021, 2023, 2024, 2024))
        last = r.choice((2, 3, 6, 9, 12, 12, r.randint(1, 12)))
        count = r.randint(3, 5)
        self.months = [month_of(first_of(year, last - i)) for i in range(count)]
        self.back = r.choice((2, 4, 13))
        first = min(self.months)
        self.first = first_of(first[0], first[1] - self.back)
        self.last = last_of(*max(self.months)) + 7

    def make_parameters(self):
        r = self.r
        names = r.sample([p for p in PARAMETERS if p != "FLOW"], r.randint(2, 5))
        if "NO3N" in names and r.random() < 0.7:
            names += [p for p in ("NH3N", "NO2N") if p not in names]
        self.parameters = [*names, "FLOW"]
        for name in self.parameters:
            unit, decimals = PARAMETERS[name][:2]
            rule = "geometric" if name in GEOMETRIC and r.random() < 0.6 else "mean" if name == "FLOW" or name in GEOMETRIC else r.choice(DAY_RULES)
            row = {"parameter": name, "name": NAMES.get(name, name), "unit": unit, "decimals": decimals, "day_rule": rule}
            if "<" in PARAMETERS[name][4]:
                row["mdl"], row["rl"] = sorted((self.near(name, 0.05), self.near(name, 0.2)), key=float)
            if r.random() < 0.2 and name != "FLOW":
                row["rules"] = self.some_rules(("nondetect", "sign", "dnq", "rounding", "compare", "no_discharge", "count_by"), 2)
            self.month["parameters"].append(row)

    def near(self, name, share):
        low, high = PARAMETERS[name][2]
        return self.number(low + (high - low) * share * self.r.uniform(0.5, 1.5), 3 if high < 20 else 1)

    def number(self, value, most):
        places = self.r.randint(0, most)
        text = f"{value:.{places}f}"
        return text if text.strip("0.") or self.r.random() < 0.1 else f"{value + 1:.{places}f}"

    def some_rules(self, names, most):
        r = self.r
        found = {name: r.choice(RULES[name]) for name in r.sample(names, r.randint(1, most))}
        return ";".join(f"{k}={v}" for k, v in found.items())

    # ---- readings ----

    def make_readings(self):
        r = self.r
        self.gone = {p: self.gaps() if p in self.effluents else set() for p in self.points}
        for point in self.points:
            for name in self.parameters:
                if name == "FLOW":
                    if (point == "EF2" and self.shared_flow) or (point in self.influents and r.random() < 0.5):
                        continue
                    self.series(point, name, 0.9)
                elif point not in self.influents or name in ("BOD5", "TSS", "NH3N"):
                    self.series(point, name, r.choice((0.04, 0.1, 0.3, 0.6, 1)))
            self.no_discharge(point)

    def gaps(self):
        """Days without discharge."""
        r = self.r
        days = set()
        if r.random() < 0.4:
            for _ in range(r.randint(1, 4)):
                at = r.randint(self.first, self.last)
                days |= set(range(at, at + r.choice((1, 2, 7, 12, 35))))
        return days

    def series(self, point, name, density):
        r = self.r
        unit = r.choice(PARAMETERS[name][3])
        odd = r.choice((0, 0.1, 0.5, 0.97)) if PARAMETERS[name][4] else 0
        codes = r.choice((0, 0, 0.05))
        several = r.choice((0, 0, 0.1, 0.5))
        own = r.random() < 0.5
        for day in range(self.first, self.last + 1):
            if r.random() >= density or (day in self.gone[point] and (name == "FLOW" or r.random() < 0.9)):
                continue
            times = self.times() if r.random() < several else [("", "")]
            for time, sample in times:
                self.reading(point, name, day, time, sample, unit, odd, codes, own)

    def times(self):
        r = self.r
        count = r.randint(2, 3)
        if r.random() < 0.2:
            return [("", "a"), ("", "b")][:count]
        return [(f"{8 + 3 * i:02d}:{r.choice(('00', '30'))}", "") for i in range(count)]

    def reading(self, point, name, day, time, sample, unit, odd, codes, own):
        r = self.r
        row = {"date": written(day), "time": time, "point": point, "parameter": name, "unit": unit, "sample": sample}
        scale = {("mg/L", "ug/L"): 1000, ("ug/L", "mg/L"): 0.001, ("MPN/100mL", "/mL"): 0.01, ("min", "hr"): 1 / 60, ("MGD", "m3/d"): 3785,
                 ("MGD", "kgpd"): 1000}.get((PARAMETERS[name][0], unit), 1)
        low, high = PARAMETERS[name][2]
        value = r.choice((low, high)) if r.random() < 0.05 else r.triangular(low, high, low + (high - low) * 0.3)
        most = 1 if high * scale >= 100 else 2 if high * scale >= 4 else 4
        row["value"] = self.number(value * scale, most)
        if name == "FLOW":
            row["value"] = row["value"] if row["value"].strip("0.") else "1"
        if own and PARAMETERS[name][4].startswith("<") and r.random() < 0.6:
            row["mdl"], row["rl"] = sorted((self.number(high * scale * 0.1, most + 2), self.number(high * scale * 0.3, most + 1)), key=float)
        if r.random() < codes and name != "FLOW":
            row["value"] = r.choice(CODES)
        elif r.random() < odd:
            row["value"] = self.odd(name, row["value"], "rl" in row)
        self.month["readings"].append(row)

    def odd(self, name, value, limits):
        r = self.r
        kinds = PARAMETERS[name][4]
        words = []
        value = value if value.strip("0.") else "1"
        if "<" in kinds:
            words += [f"<{value}", f"<{value}", f"<={value}", "ND", f"E {value}"]
        if ">" in kinds:
            words += [f">{value}", f">={value}"] + (["TNTC"] if "<" in kinds else [])
        if "d" in kinds:
            words += [f"DNQ {value}", "DNQ"]
        return r.choice(words)

    def no_discharge(self, point):
        """Code C, or a flow of 0, on the days without; here and there a C beside a flow, which is a missed sample."""
        r = self.r
        has_flow = any(row["point"] == point and row["parameter"] == "FLOW" for row in self.month["readings"])
        name = "FLOW" if has_flow else next((row["parameter"] for row in self.month["readings"] if row["point"] == point), None)
        for day in sorted(self.gone[point]):
            if self.first <= day <= self.last and name:
                value = "0" if has_flow and r.random() < 0.5 else "C"
                self.month["readings"].append({"date": written(day), "time": "06:00", "point": point, "parameter": name, "value": value,
                                               "unit": PARAMETERS[name][0], "sample": ""})
        if point in self.effluents and has_flow and r.random() < 0.2:
            day = r.randint(self.first, self.last)
            self.month["readings"].append({"date": written(day), "time": "07:00", "point": point, "parameter": self.parameters[0], "value": "C",
                                           "unit": PARAMETERS[self.parameters[0]][0], "sample": ""})

    # ---- limits ----

    def make_limit(self):
        r = self.r
        limit = self.what()
        if limit is None:
            return
        key = limit["point"], limit["parameter"], limit["basis"], limit["statistic"]
        if key in self.used:
            return
        self.used.add(key)
        self.number_and_bound(limit)
        if r.random() < 0.5:
            limit["samples"] = self.frequency(limit)
        if r.random() < 0.6:
            limit["rules"] = self.limit_rules(limit)
            if "count_by=day" in limit["rules"]:
                limit["samples"] = ""
        shape = r.random()
        if shape < 0.1:
            limit["season"] = r.choice(SEASONS)
        elif shape < 0.2:
            self.in_parts(limit)
            return
        elif shape < 0.3:
            limit["when"] = self.condition()
        elif shape < 0.35:
            self.tiers(limit)
            return
        elif shape < 0.42 and self.group(limit):
            return
        elif shape < 0.47 and limit["bound"] == "max" and not limit["statistic"].endswith("-samples"):
            self.month["limits"].append({**limit, "bound": "target", "limit": self.lower(limit["limit"]), "samples": ""})
        self.month["limits"].append(limit)

    def what(self):
        """Point, parameter, basis, statistic, unit."""
        r = self.r
        name = r.choice(self.parameters)
        point = r.choice(self.effluents)
        unit = PARAMETERS[name][0]
        mg = unit in ("mg/L", "ug/L")
        bases = ("concentration",) * 3 + (("load", "load", "removal") if mg else ())
        basis = "flow" if name == "FLOW" else "count" if name == "OVER" else r.choice(bases)
        if basis == "removal" and name not in ("BOD5", "TSS", "NH3N"):
            basis = "load"
        statistics = [*MEANS, "daily", "daily", *SAMPLED, *RANKED, *TOTALS]
        if basis in ("concentration", "count", "flow"):
            statistics += ["instantaneous"]
        if basis in ("concentration", "load"):
            statistics += GEOMEANS * (4 if name in GEOMETRIC else 1)
        if basis == "removal":
            statistics = [*MEANS, "daily"]
        statistic = r.choice(statistics)
        by_day = statistic not in ("instantaneous", *SAMPLED)
        if basis == "concentration" and name == "NO3N" and "NO2N" in self.parameters and by_day and r.random() < 0.5:
            name = "NH3N+NO2N+NO3N" if "NH3N" in self.parameters and r.random() < 0.5 else "NO3N+NO2N"
        both = basis == "load" or (basis == "flow" and statistic != "instantaneous" and not self.shared_flow)
        if both and self.two and r.random() < 0.4:
            point = "EFF+EF2"
        total = statistic in TOTALS
        if basis == "load":
            unit = r.choice(("lb", "kg", "ton") if total else ("lb/d", "lb/d", "kg/d", "ton/d", "g/d"))
        elif basis == "flow":
            unit = r.choice(("MG", "m3", "kgal") if total else ("MGD", "MGD", "m3/d", "gpm"))
        elif basis == "removal":
            unit = "%"
        elif mg and r.random() < 0.2:
            unit = "ug/L" if unit == "mg/L" else "mg/L"
        return {"outfall": "001" if point == "EFF" else "", "point": point, "parameter": name, "basis": basis, "statistic": statistic, "unit": unit}

    def size(self, limit):
        """About what the figure will be."""
        r = self.r
        name = limit["parameter"].split("+")[0]
        low, high = PARAMETERS[name][2]
        value = low + (high - low) * r.choice((0.1, 0.25, 0.35, 0.4, 0.5, 0.8))
        unit, basis = limit["unit"], limit["basis"]
        if basis == "removal":
            return r.choice((30, 60, 85, 90))
        if basis == "concentration" and PARAMETERS[name][0] != unit:
            value *= 1000 if unit == "ug/L" else 0.001
        if basis == "load":
            value *= (0.001 if PARAMETERS[name][0] == "ug/L" else 1) * 10 * {"lb": 1, "kg": 0.45, "ton": 0.0005, "g": 450}[unit.partition("/")[0]]
        if basis == "flow":
            value *= {"MGD": 1, "MG": 1, "m3/d": 3785, "m3": 3785, "gpm": 694, "kgal": 1000}[unit]
        days = {"monthly-total": 30, "annual-total": 365}.get(limit["statistic"], 1)
        return value * (days if basis != "concentration" else r.choice((1, 5, days)))

    def number_and_bound(self, limit):
        r = self.r
        size = self.size(limit)
        bounds = ["max"] * 5 + ["below", "target", "report", "min", "above"]
        if limit["basis"] == "removal":
            bounds = ["min"] * 4 + ["above", "report"]
        elif limit["parameter"] == "DO":
            bounds = ["min"] * 4 + ["above", "max"]
        limit["bound"] = r.choice(bounds)
        sampled = limit["statistic"] in SAMPLED
        if limit["bound"] == "report":
            limit["limit"] = ""
            if sampled:
                limit["bound"] = "max"
        if limit["bound"] != "report":
            limit["limit"] = self.number(size, 0 if size > 500 else 1 if size > 50 else 2 if size > 1 else 4)
            if not limit["limit"].strip("0."):
                limit["limit"] = "1"  # how many significant figures a limit of 0 has is not said
        if sampled:
            limit["allowed"] = r.choice(("", "0", "1", "2", "10%", "25%", "12.5%", "eu-table-3"))
            if r.random() < 0.4 and limit["bound"] in ("max", "below", "target"):
                limit["ceiling"] = self.number(float(limit["limit"]) * r.choice((1.5, 2, 2.5)) + 1, 1)

    def lower(self, text):
        less = self.number(float(text) * 0.8, len(text.partition(".")[2]))
        return less if less.strip("0.") else text

    def frequency(self, limit):
        s = limit["statistic"]
        words = ["1/day", "1/week", "2/week", "3/week", "7/week", "continuous", "1/month", "4/month"]
        if s.startswith(("quarterly", "semiannual", "annual", "rolling-12")):
            words += ["1/quarter", "5/quarter", "1/year", "12/year"]
        return self.r.choice(words)

    def limit_rules(self, limit):
        names = ["nondetect", "sign", "rounding", "digits", "compare", "dnq", "count_by", "no_discharge", "week_starts", "week_counts_in"]
        names += {"load": ["load_average", "load_total", "load_factor"] * 2, "removal": ["removal"] * 4}.get(limit["basis"], [])
        s = limit["statistic"]
        names += ["long_average"] * 3 if s in ("annual-average", "rolling-12-month") else ["percentile"] * 4 if s.startswith("percentile") else []
        names += ["window"] * 3 if s.startswith("rolling-") else ["geomean_zero"] * 2 if s in GEOMEANS else []
        return self.some_rules(sorted(set(names)), min(4, len(set(names))))

    def in_parts(self, limit):
        """An interim and a final limit, or only one of them; the change lies within a month asked for."""
        r = self.r
        year, month = r.choice(self.months)
        day = r.randint(first_of(year, month), last_of(year, month))
        self.month["limits"].append({**limit, "to": written(day)})
        if r.random() < 0.7:
            final = self.lower(limit["limit"]) if limit["limit"] else ""
            self.month["limits"].append({**limit, "from": written(day + 1), "limit": final, "ceiling": ""})

    def condition(self):
        r = self.r
        kind = r.random()
        if kind < 0.5 or len(self.parameters) < 2:
            return f"EFF FLOW monthly-average {r.choice(('>', '<=', '>=', '<'))} {r.choice(('1.5 MGD', '1.8 MGD', '6500 m3/d', '2 MGD'))}"
        name = r.choice([p for p in self.parameters if p != "FLOW"])
        statistic = r.choice(("monthly-average", "monthly-median", "percentile-75", "rolling-12-month", "monthly-geomean", "monthly-total"))
        unit = PARAMETERS[name][0]
        if kind < 0.65 and unit in ("mg/L", "ug/L") and statistic != "monthly-total":
            return f"EFF {name} {statistic} > {self.number(PARAMETERS[name][2][1] * (0.004 if unit == 'ug/L' else 4), 1)} lb/d"
        low, high = PARAMETERS[name][2]
        return f"EFF {name} {statistic} {r.choice(('>', '<='))} {self.number(low + (high - low) * 0.3, 1)} {unit}"

    def tiers(self, limit):
        number = self.r.choice(("1.5", "1.8", "2.0"))
        self.month["limits"].append({**limit, "when": f"EFF FLOW monthly-average <= {number} MGD"})
        self.month["limits"].append({**limit, "when": f"EFF FLOW monthly-average > {number} MGD",
                                     "limit": self.lower(limit["limit"]) if limit["limit"] else "", "ceiling": ""})

    def group(self, limit):
        """The value or the percentage: 91/271/EEC."""
        name, s = limit["parameter"], limit["statistic"]
        if limit["basis"] != "concentration" or name not in ("BOD5", "TSS", "NH3N") or s not in MEANS + ("daily",):
            return False
        word = f"g{len(self.month['limits'])}"
        key = limit["point"], name, "removal", s
        if key in self.used:
            return False
        self.used.add(key)
        self.month["limits"].append({**limit, "group": word})
        percentage = {"basis": "removal", "bound": "min", "limit": self.r.choice(("50", "80", "90.0")), "unit": "%"}
        self.month["limits"].append({**limit, "group": word, **percentage})
        return True


# ---- files, and the program ----

def table_text(month, name):
    out = io.StringIO()
    used = [c for c in TABLES[name] if name != "readings" or c not in ("sample", "mdl", "rl") or any(row.get(c) for row in month[name])]
    writer = csv.DictWriter(out, used, lineterminator="\n", extrasaction="ignore")
    writer.writeheader()
    writer.writerows({c: row.get(c) or "" for c in used} for row in month[name])
    return out.getvalue()


def as_text(month, when, on):
    """A plant-month as CSV, for people."""
    parts = [f"# permit --month {when}{' --on ' + on if on else ''}"]
    for name in TABLES:
        parts.append(f"# {name}.csv\n{table_text(month, name)}")
    return "\n".join(parts)


class Refused(Exception):
    pass


def call(*words):
    result = subprocess.run([program(), *words], capture_output=True, text=True, env=dict(os.environ, LC_ALL="C.UTF-8"))
    if result.returncode not in (0, 3):
        raise Refused(f"{words[0]} {' '.join(words[2:3])}: exit {result.returncode}: {result.stderr.strip()}")
    return result


def make_book(month, folder, files=None):
    """Makes a book of the description and loads the readings. files: texts of readings files, in place of one file of all."""
    book, plant = os.path.join(folder, "months.book"), os.path.join(folder, "plant")
    os.makedirs(plant, exist_ok=True)
    if os.path.exists(book):
        os.unlink(book)
    for name in TABLES:
        if name != "readings":
            with open(os.path.join(plant, f"{name}.csv"), "w", encoding="utf-8") as f:
                f.write(table_text(month, name))
    call("new", book, plant)
    for i, text in enumerate([table_text(month, "readings")] if files is None else files):
        path = os.path.join(folder, f"readings-{i}.csv")
        with open(path, "w", encoding="utf-8") as f:
            f.write(text)
        if len(text.splitlines()) > 1 and call("-b", book, "load", path).returncode != 0:
            raise Refused("load: a row was set aside: " + call("-b", book, "export", "--set-aside").stdout[:300])
    return book


def ask(book, when, on):
    result = call("-b", book, "permit", "--month", when, "--as", "csv", *(["--on", on] if on else []))
    reader = csv.DictReader(io.StringIO(result.stdout))
    rows = list(reader)
    if reader.fieldnames != COLUMNS:
        raise Refused(f"the header is {reader.fieldnames}")
    return rows, result.returncode


def days_asked(seed, months):
    """[(month, on)]: most months are judged long after, some on a day within."""
    r = random.Random(f"{seed} on")
    asked = []
    for year, month in months:
        on = written(r.randint(first_of(year, month), last_of(year, month) + 6)) if r.random() < 0.2 else written(last_of(year, month) + 400)
        asked.append((f"{year}-{month:02d}", on))
    return asked

