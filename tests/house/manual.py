#!/usr/bin/env python3
"""The manual beside the program: every command has a page with its options, examples, columns and exit status as the program has them, and every
word that people may write in a file (rules, statistics, roles, units, reasons, ...) stands where its page lists it, and nothing else does."""
import csv
import glob
import io
import os
import re
import shutil
import subprocess
import sys
import tempfile

sys.path.insert(0, os.path.join(os.path.dirname(os.path.abspath(__file__)), ".."))
from support import program, ran, source  # noqa: E402

MACROS = {"Ar", "Cm", "Dq", "Em", "Ev", "Fl", "It", "Li", "Nm", "Ns", "Op", "Pa", "Pq", "Ql", "Ta", "Xr"}


class Checks:
    def __init__(self):
        self.count = 0
        self.broken = []

    def that(self, good, told):
        self.count += 1
        if not good:
            self.broken.append(told)

    def same(self, where, program_has, page_has):
        """One check for each word of either side."""
        for word in sorted(set(program_has) | set(page_has)):
            self.that(word in page_has, f"{where}: '{word}' is not in the page")
            self.that(word in program_has, f"{where}: the page has '{word}', the program does not")
        self.that(program_has, f"{where}: the program has none")


def read(*path):
    with open(os.path.join(source(), *path), encoding="utf-8") as f:
        return f.read()


def call(*words, folder=None):
    environment = dict(os.environ, LC_ALL="C.UTF-8", TZ="UTC")
    environment.pop("WEIRBOOK", None)
    return subprocess.run([program(), *words], cwd=folder, env=environment, capture_output=True, text=True, timeout=120)


# ---- pages as text ----------------------------------------------------------------------------------------

def unescape(text):
    for code, sign in (("\\-", "-"), ("\\&", ""), ("\\(dq", '"'), ("\\(aq", "'"), ("\\e", "\\")):
        text = text.replace(code, sign)
    return text


def page(name):
    """Its lines; none of a page that is not there, which is told elsewhere."""
    return unescape(read("man", name)).splitlines() if os.path.exists(os.path.join(source(), "man", name)) else []


def section(lines, title):
    """The lines below a heading, up to the next of its level or above."""
    found, level = [], None
    for line in lines:
        heading = re.match(r"\.S([hs]) (.*)", line)
        if heading and level and (heading.group(1) == "h" or level == "s"):
            return found
        if heading and heading.group(2) == title:
            level = heading.group(1)
        elif level:
            found.append(line)
    return found


def words(lines):
    """The words of some lines, macros and the signs behind words left out."""
    found = set()
    for line in lines:
        parts = line.lstrip(".").split()
        if line.startswith("."):
            parts = [p for p in parts if p not in MACROS]
        found |= {p.strip(",;:.()") or p for p in parts}
    return found


def text_of(lines):
    return " ".join(" ".join(p for p in line.split() if p not in MACROS) for line in lines if not line.startswith(".Bl"))


def entries(lines, macro):
    """{tag: lines} of the outermost list's entries that begin with the macro; `.It Cm a , b` is two tags with one text."""
    found, depth, tags = {}, 0, []
    for line in lines:
        depth += line.startswith(".Bl") - line.startswith(".El")
        match = re.match(r"\.It " + macro + r" (.*)", line)
        if match and depth == 1:
            tags = [t for t in match.group(1).split(" , ")]
            found.update((t, []) for t in tags)
        elif line.startswith(".It") and depth == 1:
            tags = []
        for t in tags:
            if not (match and depth == 1):
                found[t].append(line)
    return found


def nested(lines):
    """The tags of a list within an entry."""
    return {m.group(1) for line in lines if (m := re.match(r"\.It (?:Cm|Ar) (\S+)$", line))}


def examples_of(lines):
    found, literal = [], False
    for line in lines:
        if line.startswith(".Bd -literal"):
            literal = True
        elif line.startswith(".Ed"):
            literal = False
        elif literal:
            found.append(line)
    return found


# ---- sources as words ---------------------------------------------------------------------------------------

def quoted(text):
    return re.findall(r'"((?:[^"\\]|\\.)*)"', text)


def array(path, name):
    """The strings of a const table."""
    match = re.search(name + r"(?:\[[^\]]*\])* = \{(.*?)\n?\};", read(*path.split("/")), re.S)
    return quoted(match.group(1)) if match else []


# ---- commands -------------------------------------------------------------------------------------------------

def commands():
    listed = re.search(r"^Commands:.*\n((?:  \S.*\n)+)", call("help").stdout, re.M)
    return re.findall(r"^  (\S+)", listed.group(1), re.M)


def help_parts(command):
    text = call("help", command).stdout
    options = {}
    for left, same_line, next_line in re.findall(r"^  (-\S(?:.*?\S)?)(?:  +(\S.*)|\n {20,}(\S.*))$", text.split("\nOptions\n")[1], re.M):
        options[left] = same_line or next_line
    shown = text.split("\nExamples\n")[1].split("\nForm\n")[0]
    return options, re.findall(r"^  (\S.*)$", shown, re.M), text


def page_options(lines):
    found = {}
    for tag, below in entries(lines, "Fl").items():
        found[tag] = below
    merged = {}
    for line in lines:
        match = re.match(r"\.It Fl (.*)", line)
        if not match:
            continue
        shown = re.sub(r" (?:Ar|Cm) ", " ", match.group(1)).replace(" | ", "|")
        shown = re.sub(r" , Fl ", ", -", "-" + shown)
        merged[shown] = found[match.group(1).split(" , ")[0]]
    return merged


def check_options(checks, command, lines):
    name = f"weirbook-{command}.1"
    options, examples, text = help_parts(command)
    in_page = page_options(section(lines, "DESCRIPTION"))
    checks.same(f"{name}: options", options, in_page)
    for left, told in options.items():
        below = text_of(in_page.get(left, []))
        checks.that(("(needed)" in told) == ("Needed." in below), f"{name}: {left}: whether it is needed differs")
        checks.that("default" not in told or "default" in below, f"{name}: {left}: its default is not told")
    shown = examples_of(section(lines, "EXAMPLES"))
    checks.that(len(examples) >= 2 and len(shown) >= 2, f"{name}: has fewer than two examples")
    for line in examples:
        checks.that(line in shown, f"{name}: lacks the example '{line}'")
    statuses = {line[4:] for line in section(lines, "EXIT STATUS") if line.startswith(".It ")}
    checks.that(("Exit status 3" in text) == ("3" in statuses), f"{name}: exit status 3 differs")
    checks.that({"0", "2"} <= statuses <= {"0", "1", "2", "3"}, f"{name}: exit status 0 or 2 is missing")


def check_command_lines(checks, lines, name, known):
    """Command lines that a page shows name commands and options there are."""
    for line in examples_of(lines) + [x[4:] for x in lines if x.startswith(".Dl weirbook ")]:
        if not line.startswith("weirbook "):
            continue
        rest = re.sub(r"^weirbook (-b \S+ )?", "", line).split()
        checks.that(rest[0] in known, f"{name}: shows '{rest[0]}', which is no command")
        if rest[0] == "completion":
            continue
        for word in rest[1:]:
            if re.match(r"--\w", word):
                checks.that(any(re.match(re.escape(word) + r"( |$)", o) for o in known[rest[0]]), f"{name}: shows {rest[0]} {word}")


def check_commands(checks):
    found = commands()
    pages = {os.path.basename(p) for p in glob.glob(os.path.join(source(), "man", "weirbook-*.1"))}
    checks.same("man/", {f"weirbook-{c}.1" for c in found if c != "help"}, pages)
    known = {c: help_parts(c)[0] for c in found}
    main = page("weirbook.1")
    checks.same("weirbook.1: COMMANDS", set(found), set(entries(section(main, "COMMANDS"), "Cm")))
    for command in found:
        if command != "help" and f"weirbook-{command}.1" in pages:
            check_options(checks, command, page(f"weirbook-{command}.1"))
    for name in sorted(pages) + ["weirbook.1", "weirbook-files.5", "weirbook-rules.7"]:
        lines = page(name)
        check_command_lines(checks, lines, name, known)
        for other, part in re.findall(r"^\.Xr (weirbook\S*) (\d)", "\n".join(lines), re.M):
            checks.that(os.path.exists(os.path.join(source(), "man", f"{other}.{part}")), f"{name}: names {other}({part}), which is not there")
        checks.that(section(lines, "SEE ALSO"), f"{name}: has no SEE ALSO")
    return found


def check_main(checks):
    lines = page("weirbook.1")
    session = read("src", "command", "session.c")
    checks.same("weirbook.1: OPTIONS", set(re.findall(r'strcmp\(word, "(-[^"]+)"\)', session)),
                {"-" + o.split()[0] for line in section(lines, "OPTIONS") if line.startswith(".It Fl ") for o in line[7:].split(" , Fl ")})
    checks.same("weirbook.1: ENVIRONMENT", set(re.findall(r'getenv\("(\w+)"\)', session)), set(entries(section(lines, "ENVIRONMENT"), "Ev")))
    statuses = set(re.findall(r"(\d) ", call("help").stdout.split("Exit status: ")[1]))
    checks.same("weirbook.1: EXIT STATUS", statuses, {x[4:] for x in section(lines, "EXIT STATUS") if x.startswith(".It ")})


# ---- columns of CSV ------------------------------------------------------------------------------------------------

def listed_columns(name):
    """The tags of the lists under COLUMNS, list by list."""
    lists = []
    for line in section(page(name), "COLUMNS"):
        if line.startswith(".Bl"):
            lists.append([])
        elif line.startswith(".It Cm "):
            lists[-1] += line[7:].split(" , ")
        elif line.startswith(".Ss"):
            break
    return lists


def make_book(folder):
    with open(os.path.join(folder, "march.csv"), "w", encoding="utf-8") as f:
        f.write("date,time,point,parameter,value,unit\n2025-03-04,,EFF,BOD5,20.0,mg/L\n2025-03-04,,EFF,FLOW,1.2,MGD\n"
                "2025-03-05,,EFF,BOD5,about 3,mg/L\n2025-03-04,,AER,MLSS,2500,mg/L\n2025-03-04,,INF,FLOW,1.3,MGD\n"
                "2025-03-04,,EFF,TSS,10,mg/L\n2025-03-04,,WAS,FLOW,0.02,MGD\n2025-03-04,,WAS,TSS,8000,mg/L\n"
                "2025-03-04,,RAS,TSS,8000,mg/L\n2025-03-04,,PE,BOD5,140,mg/L\n")
    with open(os.path.join(folder, "bench.csv"), "w", encoding="utf-8") as f:
        f.write("sheet,date,time,point,run,argument,value,unit\nround,2025-03-04,,EFF,,PH,7.1,\n")
    for words_ in (("plant", "--example", "plant"), ("new", "small.book", "plant")):
        result = call(*words_, folder=folder)
        if result.returncode != 0:
            raise AssertionError(f"weirbook {' '.join(words_)}: {result.stderr.strip()}")


def check_columns(checks):
    day = ("--from", "2025-03-04", "--to", "2025-03-04")
    asked = (("load", 0, ("march.csv", "--as", "csv")), ("bench", 0, ("--from", "bench.csv", "--as", "csv")),
             ("day", 0, ("2025-03-04", "--as", "csv")),
             ("process", 0, day + ("--as", "csv")), ("process", 1, day + ("--step", "month", "--as", "csv")),
             ("waste", 0, ("--srt", "10", "--on", "2025-03-04", "--as", "csv")),
             ("permit", 0, ("--month", "2025-03", "--as", "csv")), ("room", 0, ("--on", "2025-03-04", "--as", "csv")),
             ("due", 0, ("--on", "2025-03-04", "--as", "csv")), ("doubts", 0, ("--month", "2025-03", "--as", "csv")),
             ("plant", 0, ("--as", "csv")), ("check", 0, ("--as", "csv")), ("export", 0, ()),
             ("history", 0, ("--as", "csv")), ("history", 1, ("--batches", "--as", "csv")), ("remark", 0, ("--list", "--as", "csv")),
             ("formula", 0, ("--as", "csv")), ("formula", 1, ("mass-load", "--as", "csv")),
             ("formula", 2, ("mass-load", "flow=1", "concentration=2", "--as", "csv")))
    with tempfile.TemporaryDirectory() as folder:
        make_book(folder)
        for command, which, rest in asked:
            result = call(command, *rest, folder=folder)
            lists = listed_columns(f"weirbook-{command}.1")
            in_page = lists[which] if which < len(lists) else []
            header = next(csv.reader(io.StringIO(result.stdout)), [])
            checks.that(result.returncode in (0, 3), f"weirbook {command} {' '.join(rest)}: {result.stderr.strip()}")
            checks.that(header == in_page, f"weirbook-{command}.1: COLUMNS has {in_page}, the program prints {header}")
        ahead = next(csv.reader(io.StringIO(call("waste", "--srt", "10", "--on", "2025-03-04", "--days", "2", "--as", "csv", folder=folder).stdout)), [])
        lists = listed_columns("weirbook-waste.1")
        checks.that(ahead == lists[0] + lists[1], f"weirbook-waste.1: COLUMNS has {lists}, --days prints {ahead}")
        aside = next(csv.reader(io.StringIO(call("export", "--set-aside", folder=folder).stdout)), [])
        lists = listed_columns("weirbook-export.1")
        checks.that(aside == lists[0] + lists[1], f"weirbook-export.1: COLUMNS has {lists}, --set-aside prints {aside}")
        for title, rest in (("Under other rules", ("--rules",)), ("Months", ("--to", "2025-04")), ("Counts", ("--count",)), ("Standing", ("--standing",)),
                            ("Notices", ("--notices", "drafts"))):
            result = call("permit", "--month", "2025-03", *rest, "--as", "csv", folder=folder)
            header = next(csv.reader(io.StringIO(result.stdout)), [])
            told = [c for x in section(page("weirbook-permit.1"), title) if x.startswith(".It Cm ") for c in x[7:].split(" , ")]
            checks.that(header == told, f"weirbook-permit.1: {title} has {told}, the program prints {header}")
    kinds = [entries(section(page("weirbook-doubts.1"), title), "Li") for title in ("Cannot be right", "Deserves a question")]
    checks.same("weirbook-doubts.1: kinds", set(array("src/process/doubt.c", "doubt_words")), {tag for tags in kinds for tag in tags})
    verdicts = array("src/permit/verdict.c", "verdict_words")
    tags = entries(section(page("weirbook-permit.1"), "Verdicts"), "Li")
    checks.same("weirbook-permit.1: Verdicts", set(verdicts), set(tags))
    checks.same("weirbook-due.1: States", set(array("src/permit/due.c", "due_words")), set(entries(section(page("weirbook-due.1"), "States"), "Li")))


# ---- words of files --------------------------------------------------------------------------------------------------

def check_description(checks):
    lines = page("weirbook-files.5")
    layouts = re.findall(r'\{"(\w+\.csv)",\s*(?:true|false),\s*\d+,\s*\d+,\s*\{(.*?)\}\}', read("src", "plant", "words.c"), re.S)
    checks.that(len(layouts) == 8, "src/plant/words.c: eight layouts were not found")
    for name, columns in layouts:
        part = section(lines, name)
        tags = set(entries(part, "Cm"))
        if name == "plant.csv":
            checks.same("weirbook-files.5: plant.csv", set(array("src/plant/read.c", "field_names")), tags)
        else:
            checks.same(f"weirbook-files.5: {name}", set(quoted(columns)), tags)
    limits = entries(section(lines, "limits.csv"), "Cm")
    for tag, table in (("basis", "basis_words"), ("statistic", "statistic_words"), ("bound", "bound_words")):
        checks.same(f"weirbook-files.5: limits.csv {tag}", set(array("src/plant/words.c", table)), nested(limits.get(tag, [])))
    for name, tag, table in (("points.csv", "role", "role_words"), ("basins.csv", "kind", "basin_kind_words"),
                             ("parameters.csv", "day_rule", "day_rule_words"), ("parameters.csv", "average", "average_words"),
                             ("limits.csv", "sample", "sample_type_words"), ("meters.csv", "kind", "meter_kind_words")):
        expected = array("src/plant/words.c", table)
        checks.that(expected, f"src/plant/words.c: no table {table}")
        stand = words(entries(section(lines, name), "Cm").get(tag, []))
        for word in expected:
            checks.that(word in stand, f"weirbook-files.5: {name} {tag}: '{word}' is not in the page")


def check_readings(checks):
    lines = page("weirbook-files.5")
    checks.same("weirbook-files.5: Long", set(array("src/frame/words.c", "long_columns")), set(entries(section(lines, "Long"), "Cm")))
    aside = array("src/intake/layout.c", "aside_columns")
    checks.that(aside and set(aside) <= words(section(lines, "Long")), "weirbook-files.5: Long: the columns of rows set aside are not all named")
    checks.same("weirbook-files.5: RAW VALUES FILES", set(array("src/frame/words.c", "raw_columns")),
                set(entries(section(lines, "RAW VALUES FILES"), "Cm")))
    columns = array("src/intake/map.c", r"columns")
    checks.same("weirbook-files.5: Column map", set(columns), set(entries(section(lines, "Column map"), "Cm")))
    dialect = entries(section(lines, "Dialect file"), "Cm")
    fields = array("src/intake/dialect.c", "field_names")
    checks.same("weirbook-files.5: Dialect file", set(fields), set(dialect))
    choices = re.findall(r"\[FIELD_(\w+)\] = \{\d, \{(.*?)\}\}", read("src", "intake", "dialect.c"))
    checks.that(len(choices) == 6, "src/intake/dialect.c: six fields with words were not found")
    for field, listed in choices:
        for word in quoted(listed):
            checks.that(word in words(dialect.get(field.lower(), [])), f"weirbook-files.5: {field.lower()}: '{word}' is not in the page")
    reasons = re.findall(r'X\(\w+,\s*"([^"]+)",\s*(?:\\\s*)?"([^"]+)"\)', read("src", "frame", "frame.h"))
    told = entries(section(lines, "Rows set aside"), "Li")
    checks.same("weirbook-files.5: Rows set aside", {r for r, _ in reasons}, set(told))
    for reason, todo in reasons:
        checks.that(todo.lower() in text_of(told.get(reason, [])).lower(), f"weirbook-files.5: {reason}: what to do is not '{todo}'")
    codes = {c: m for c, m in re.findall(r"\{'(.)', CODE_\w+, \"([^\"]+)\"\}", read("src", "frame", "words.c"))}
    in_page = {m.group(1): m.group(2) for x in section(lines, "No-data codes") if (m := re.match(r"\.It Li (\S) Ta (.*?) Ta ", x))}
    checks.same("weirbook-files.5: No-data codes", set(codes.items()), set(in_page.items()))


def check_tables(checks):
    lines = page("weirbook-files.5")
    kinds = {}
    for row in csv.DictReader(io.StringIO(read("schema", "units.csv"))):
        kinds.setdefault(row["kind"], set()).add(row["unit"])
    in_page, kind = {}, None
    for line in section(lines, "UNITS"):
        if line.startswith(".It "):
            kind = in_page.setdefault(line[4:], set())
        elif kind is not None and not line.startswith("."):
            kind |= {u for u in line.rstrip(",").split(", ") if u}
    checks.same("weirbook-files.5: UNITS", set(kinds), set(in_page))
    for name in kinds:
        checks.same(f"weirbook-files.5: units of {name}", kinds[name], in_page.get(name, set()))
    built_in = {(r["parameter"], r["unit"], r["decimals"], r["day_rule"], r["code"] or "-", r["name"])
                for r in csv.DictReader(io.StringIO(read("schema", "parameters.csv")))}
    rows = {tuple(x[4:].split(" Ta ")) for x in section(lines, "BUILT-IN PARAMETERS") if x.startswith(".It ") and ".It Em" not in x}
    checks.same("weirbook-files.5: BUILT-IN PARAMETERS", built_in, rows)
    views = re.findall(r"^CREATE VIEW (\w+)", "".join(read(os.path.relpath(p, source())) for p in glob.glob(os.path.join(source(), "schema", "*.sql"))),
                       re.M)
    checks.same("weirbook-files.5: BOOKS", set(views), set(entries(section(lines, "BOOKS"), "Cm")))


def check_rules(checks):
    lines = page("weirbook-rules.7")
    rules = read("src", "plant", "rules.c")
    infos = re.findall(r'\[RULE_\w+\] = \{"(\w+)", RULE_IS_(\w+), (\w+), "([^"]*)"', rules)
    tags = entries(section(lines, "RULES"), "Cm")
    checks.same("weirbook-rules.7: RULES", {i[0] for i in infos}, set(tags))
    for name, kind, table, fallback in infos:
        below = tags.get(name, [])
        if kind in ("WORD", "DIGITS"):
            values = array("src/plant/rules.c", table)
            order = [w for w in re.findall(r"[\w-]+", text_of(below)) if w in values]
            for value in values:
                checks.that(value in words(below), f"weirbook-rules.7: {name}: '{value}' is not in the page")
            checks.that(order and order[0] == fallback, f"weirbook-rules.7: {name}: the default {fallback} does not stand first")
            checks.that(not nested(below) or nested(below) - {"N"} == set(values), f"weirbook-rules.7: {name}: has {nested(below)}")
        elif kind == "NUMBER":
            checks.that(fallback in words(below), f"weirbook-rules.7: {name}: its default {fallback} is not told")
    numbered = {m.group(1) for title in ("READINGS OF THE RULES", "GAPS") for x in section(lines, title) if (m := re.match(r"\.It ([RG]\d+)$", x))}
    for folder in ("src", "tests"):
        for path in sorted(glob.glob(os.path.join(source(), folder, "**", "*.[ch]"), recursive=True)):
            with open(path, encoding="utf-8") as f:
                for number in set(re.findall(r"\b[RG][1-9]\d?\b", "\n".join(re.findall(r"/\*.*?\*/", f.read(), re.S)))):
                    checks.that(number in numbered, f"{os.path.relpath(path, source())}: cites {number}, which weirbook-rules.7 does not have")
    checks.same("weirbook-rules.7: numbers", {f"R{i}" for i in range(1, 53)} | {f"G{i}" for i in range(1, 24)}, numbered)


# ---- formulas, and the form of pages ------------------------------------------------------------------------------------

def check_formulas(checks):
    listing = call("formula")
    checks.that(listing.returncode == 0, f"weirbook formula: ends with status {listing.returncode}")
    listed = set(re.findall(r"[\w-]+", listing.stdout))
    names = [row["formula"] for row in csv.DictReader(io.StringIO(call("formula", "--as", "csv").stdout))]
    parts = [read(os.path.relpath(p, source())) for p in sorted(glob.glob(os.path.join(source(), "src", "process", "catalogue_*.c")))]
    checks.same("weirbook formula --as csv beside src/process", set(names), set(re.findall(r'\.name = "([^"]+)",\s*\.subject', "".join(parts))))
    for name in names:
        shown = call("formula", name)
        checks.that(shown.returncode == 0 and shown.stdout.startswith(f"{name}\n") and "\nSource: " in shown.stdout,
                    f"weirbook formula {name}: does not show it with its source")
        checks.that(listing.returncode != 0 or name in listed, f"weirbook formula: does not list {name}")


def check_form(checks):
    pages = sorted(glob.glob(os.path.join(source(), "man", "*.[157]")))
    checks.that(len(pages) >= 14, f"man/ has {len(pages)} pages")
    for path in pages:
        with open(path, encoding="utf-8") as f:
            lines = f.read().splitlines()
        name, part = os.path.basename(path).rsplit(".", 1)
        checks.that(f".Dt {name.upper()} {part}" in lines, f"man/{name}.{part}: its title is another")
        checks.that(".Sh CAVEATS" in lines or name == "weirbook-completion", f"man/{name}.{part}: has no cautions")
        checks.that(all(len(line) <= 100 for line in lines), f"man/{name}.{part}: a line is longer than 100 columns")
        literal = examples_of(lines)
        checks.that(not any(re.search(r"(?<!\\)-", x) for x in literal), f"man/{name}.{part}: write dashes of literal blocks as \\-")
    if not shutil.which("mandoc"):
        if os.environ.get("WEIRBOOK_CI"):
            checks.that(False, "mandoc: not found, and required here")
        else:
            print("SKIPPED: mandoc -Tlint of the manual pages: mandoc is not installed")
        return
    for path in pages:
        result = subprocess.run(["mandoc", "-Tlint", "-W", "warning", path], capture_output=True, text=True)
        checks.that(result.returncode == 0 and not result.stdout, f"mandoc -Tlint: {result.stdout.strip() or result.stderr.strip()}")


def main():
    checks = Checks()
    for check in (check_commands, check_main, check_columns, check_description, check_readings, check_tables, check_rules, check_formulas, check_form):
        check(checks)
    for told in checks.broken:
        print(told)
    return ran(checks.count, len(checks.broken))


if __name__ == "__main__":
    sys.exit(main())
