"""The benchmark's group-by in pandas: works.py csv FILE | book FILE | same OURS THEIRS. From the same readings, a month and figure at a
time, count, mean, min and max of the days' mass loads, removals, settled volume index, solids held and
food-to-microorganism ratio, as CSV on standard output, in binary floating point.

Not done here, and done by `weirbook process` in the time it is compared with: exact fractions, less-thans and codes, basins
out of service, totalizers, notes, every reading proved against its mark, and half of the lines (retention times,
overflow rates, nitrogen, un-ionized ammonia and the rest). `same` says whether the two agree on every figure of THEIRS
to one part in 10^9."""
import sqlite3
import sys

import pandas

IN_FORCE = """SELECT r.day, p.name AS point, q.name AS parameter, r.coefficient, r.scale FROM reading r
JOIN series s ON s.id = r.series JOIN point_code p ON p.id = s.point JOIN parameter_code q ON q.id = s.parameter"""
FLOW_OF = {"INF": "INF", "PE": "INF", "SE": "EFF", "EFF": "EFF", "RAS": "RAS", "WAS": "WAS"}
WEIGHED = ("BOD5", "TSS", "COD", "TKN", "NH3N", "NO2N", "NO3N", "TP", "ALK")
REMOVED = ("BOD5", "TSS", "COD", "TKN", "NH3N", "TP")
BASINS = {f"A{i}": f"AER{i}" for i in range(1, 5)}
VOLUME = 0.4


def readings(kind, path):
    if kind == "csv":
        long = pandas.read_csv(path, usecols=["date", "point", "parameter", "value"], parse_dates=["date"])
    else:
        long = pandas.read_sql_query(IN_FORCE, sqlite3.connect(path))
        long["date"] = pandas.to_datetime(long["day"], unit="D")
        long["value"] = long["coefficient"] / 10.0 ** long["scale"]
    return long.groupby(["date", "point", "parameter"], sort=False)["value"].mean().unstack(["point", "parameter"]).sort_index()


def figures(days):
    """One column a figure, one row a day."""
    made = {}
    for point, meter in FLOW_OF.items():
        for parameter in WEIGHED:
            if (point, parameter) in days:
                made["mass-load", point, parameter] = days[meter, "FLOW"] * days[point, parameter] * 8.34
    for before, after in (("INF", "PE"), ("PE", "SE"), ("INF", "EFF")):
        for parameter in REMOVED:
            x, y = days[before, parameter], days[after, parameter]
            made["percent-removal", f"{before}>{after}", parameter] = (x - y) / x * 100
    held = volatile = 0
    for basin, point in BASINS.items():
        made["sludge-volume-index", point, ""] = days[point, "SV30"] * 1000 / days[point, "MLSS"]
        made["solids-inventory", basin, ""] = VOLUME * days[point, "MLSS"] * 8.34
        held = held + made["solids-inventory", basin, ""]
        volatile = volatile + VOLUME * days[point, "MLVSS"]
    made["solids-inventory", "plant", ""] = held
    made["food-to-microorganism", "plant", "BOD5"] = days["INF", "FLOW"] * days["PE", "BOD5"] / volatile
    return pandas.DataFrame(made)


def same(ours, theirs):
    month = ours["from"].str[:7]
    ours = ours.fillna({"parameter": ""}).assign(month=month).set_index(["month", "name", "at", "parameter"])
    theirs = theirs.fillna({"parameter": ""}).set_index(["month", "name", "at", "parameter"])
    both = theirs.join(ours, how="left", rsuffix="_ours")
    apart = sum(((both[k] - both[f"{k}_ours"]).abs() > 1e-9 * both[k].abs() + 1e-12) | both[f"{k}_ours"].isna()
                for k in ("count", "mean", "min", "max")).sum()
    print(f"pandas and process agree on {4 * len(both) - apart} of {4 * len(both)} figures; process has {len(ours)} rows, pandas {len(theirs)}")
    return apart == 0 and len(both) > 0


def main():
    if sys.argv[1] == "same":
        sys.exit(0 if same(pandas.read_csv(sys.argv[2]), pandas.read_csv(sys.argv[3])) else 1)
    table = figures(readings(sys.argv[1], sys.argv[2]))
    months = table.groupby(table.index.to_period("M")).agg(["count", "mean", "min", "max"])
    months.stack([0, 1, 2]).rename_axis(["month", "name", "at", "parameter"]).to_csv(sys.stdout)


main()
